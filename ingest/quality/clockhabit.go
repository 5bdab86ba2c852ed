package quality

import (
	"fmt"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/clock/lag"
	"sashlog/ingest/reading"
)

// People, and plant that runs to a timer, keep to the clock on the wall. A log
// whose daily pattern moves by the daylight saving on the days the clocks
// change did not follow them, even where every other log made the same
// mistake. Both sides of the change are held against each other within
// habitDays of it, so that the seasons play little part. It is a hint and takes
// nothing out: working hours may change with the season too.
const (
	habitDays  = 56
	habitLeast = 10 // used days on each side
	habitFit   = 0.30
	habitT     = 5.0
)

// habit looks for daylight saving in a log's own pattern; nil when nothing is
// found.
func (c *clockRun) habit(l *logSeries, seasonal []float64) *lag.Finding {
	if seasonal == nil {
		return nil
	}
	near := c.nearChange(seasonal)
	var ws []*lag.Witness
	for k, n := range natures {
		if l.nature[k] == nil || !slices.ContainsFunc(n.of, func(q site.Quantity) bool {
			return q == site.People || q == site.CO2 || q == site.PlantStatus
		}) {
			continue
		}
		if truth := c.pattern(l.nature[k], seasonal, near); truth != nil {
			ws = append(ws, &lag.Witness{Name: n.words, Class: lag.People, Pairs: []lag.Pair{{Mine: l.nature[k], Truth: truth}}})
		}
	}
	if len(ws) == 0 {
		return nil
	}
	fr := c.frame
	fr.Seasonal = seasonal
	f := lag.FindSeasonal(&fr, ws)
	if f == nil || f.Fit < habitFit || f.T < habitT {
		return nil
	}
	return f
}

// nearChange tells the days within habitDays of a change of clocks.
func (c *clockRun) nearChange(seasonal []float64) []bool {
	near := make([]bool, len(seasonal))
	for d := 1; d < len(seasonal); d++ {
		if seasonal[d] != seasonal[d-1] {
			for k := max(0, d-habitDays); k < min(len(near), d+habitDays); k++ {
				near[k] = true
			}
		}
	}
	return near
}

// pattern is the mean day of the used days in standard time, by the clock on
// the wall, laid over the used days in daylight saving; nil when either side
// has too few.
func (c *clockRun) pattern(mine, seasonal []float64, near []bool) []float64 {
	slots := 24 * 60 / int(c.frame.BinMin)
	sum, n := make([]float64, slots), make([]float64, slots)
	slot := func(bin int) int { return min(int(c.minute[bin*c.per])/int(c.frame.BinMin), slots-1) }
	used := func(d int) bool {
		day := &c.days[d]
		if !near[d] || day.holiday || c.frame.Days[d].From >= c.frame.Days[d].To {
			return false
		}
		from := c.frame.Days[d].From
		for b := from; b < c.frame.Days[d].To; b++ {
			if mine[b] != 0 {
				return day.weekday >= 1 && day.weekday <= 5
			}
		}
		return false
	}
	standard, saving := 0, 0
	out := make([]float64, len(mine))
	for d := range seasonal {
		if seasonal[d] != 0 || !used(d) {
			continue
		}
		standard++
		for b := c.frame.Days[d].From; b < c.frame.Days[d].To; b++ {
			if mine[b] != 0 {
				sum[slot(b)] += mine[b]
				n[slot(b)]++
			}
		}
	}
	for d := range seasonal {
		if seasonal[d] == 0 || !used(d) {
			continue
		}
		saving++
		for b := c.frame.Days[d].From; b < c.frame.Days[d].To; b++ {
			if k := slot(b); n[k] > 0 {
				out[b] = sum[k] / n[k]
			}
		}
	}
	if standard < habitLeast || saving < habitLeast {
		return nil
	}
	return out
}

// suspectHabit words what a log's own pattern says.
func (c *clockRun) suspectHabit(l *logSeries, f *lag.Finding, v *reading.ClockVerdict) {
	follows, _ := c.daylightSaving(c.logOf(l.name))
	v.Verdict = reading.ClockIgnoredSaving
	verb := "ignored"
	if !follows {
		v.Verdict, verb = reading.ClockFollowedSaving, "followed"
	}
	for _, m := range f.PathMin() {
		if m != 0 {
			v.ShiftMin, v.EndShiftMin = m, m
		}
	}
	v.FromUTC, v.ToUTC = c.at(c.days[0].from), c.at(c.days[len(c.days)-1].to)
	v.HeldAgainst, v.Fit, v.FitWithout, v.Days, v.Better = "its own pattern before and after the clocks change", f.Fit, f.FitWithout, f.Days, f.Better
	v.SiteFile = c.correction(l, f)
	v.Evidence = fmt.Sprintf("the daily pattern of %s in the log %q moves by %s when the clocks change: it fits that of the other side with a correlation of %.2f when moved and %.2f when not, and better on %d of %d days; it seems to have %s daylight saving, unless working hours change with the season",
		names(f.Agree), l.name, hours(v.ShiftMin), f.Fit, f.FitWithout, f.Better, f.Days, verb)
	v.DoNext = "compare the logger's clock with a watch; if it was wrong, write in the site file for this log: " + v.SiteFile
	w := warn(reading.CheckClock, c.commonZone(l.points), l.points, v.Evidence, v.DoNext)
	c.add(w)
}
