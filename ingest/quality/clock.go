package quality

import (
	"cmp"
	"fmt"
	"math"
	"path"
	"slices"
	"strings"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/clock/lag"
	"sashlog/ingest/reading"
)

// removeMin is the clock error from which readings are taken out until it is
// corrected; our assumption: less moves few of the hours an audit counts.
const removeMin = 30

// stampMin is the constant shift that hourly means with the wrong stamp can
// show: half an hour.
const stampMin = 45

// clocks judges the clock of every log (package lag) and says how sure that
// is. The log with the strongest evidence against it is judged first and then
// no longer held against the others, so that one wrong clock does not cast
// doubt on right ones.
func clocks(r *run) {
	c := &clockRun{run: r, per: max(1, int((binS+r.grid.StepS-1)/r.grid.StepS))}
	c.bins = r.grid.N / c.per
	c.frame = lag.Frame{BinMin: float64(c.per) * float64(r.grid.StepS) / 60, MostH: lagMostH}
	for _, d := range r.days {
		c.frame.Days = append(c.frame.Days, lag.Span{From: min(d.from/c.per, c.bins), To: min(d.to/c.per, c.bins)})
	}
	c.gather()
	found := make([]*lag.Finding, len(c.logs))
	out := map[string]bool{}
	find := func(which func(k int) bool) {
		c.sunUp() // before it is shared
		c.addUp(out)
		sideBySide(len(c.logs), func(k int) {
			if which(k) {
				found[k] = c.find(c.logs[k], out)
			}
		})
	}
	find(func(int) bool { return true })
	for {
		worst := -1
		for k, f := range found {
			if f.Kind > lag.Right && !out[c.logs[k].name] && (worst < 0 || cmp.Compare(trust(f), trust(found[worst])) > 0) {
				worst = k
			}
		}
		if worst < 0 {
			break
		}
		out[c.logs[worst].name] = true
		find(func(k int) bool { return found[k].Kind > lag.Right && !out[c.logs[k].name] })
	}
	for k, l := range c.logs {
		if found[k].Kind <= lag.Right {
			if f := c.habit(l, c.seasonal(l)); f != nil {
				v := c.verdict(l)
				c.suspectHabit(l, f, &v)
				c.ledger.Clocks = append(c.ledger.Clocks, v)
				continue
			}
		}
		c.report(l, found[k])
	}
}

// find weighs what speaks of a log's clock.
func (c *clockRun) find(l *logSeries, out map[string]bool) *lag.Finding {
	fr := c.frame
	fr.Seasonal = c.seasonal(l)
	fr.Likely = func(shiftMin float64) bool {
		f := lag.Finding{Kind: lag.Seasonal, ShiftMin: shiftMin, To: len(c.days)}
		w := c.correction(l, &f)
		return w == "clock: local" || w == "clock: standard"
	}
	ws := c.witnesses(l, out)
	f := lag.Find(&fr, ws)
	for _, w := range ws {
		w.Release()
	}
	return f
}

// trust orders findings: the sun outranks all, then evidence.
func trust(f *lag.Finding) float64 {
	if slices.ContainsFunc(f.Agree, func(w *lag.Witness) bool { return len(w.Logs) == 0 && w.Class == lag.Sky }) {
		return 1e6 + f.Gain
	}
	return f.Gain
}

// logOf is the log a source of points.csv means, nil when unknown.
func (r *run) logOf(source string) *site.Log {
	for i := range r.site.Logs {
		l := &r.site.Logs[i]
		if l.Name == source || l.Path == source || path.Base(l.Path) == source {
			return l
		}
	}
	for i := range r.site.Logs {
		l := &r.site.Logs[i]
		if ok, err := path.Match(source, l.Name); ok && err == nil {
			return l
		}
		if ok, err := path.Match(path.Base(l.Path), source); ok && err == nil {
			return l
		}
	}
	return nil
}

// daylightSaving reports whether the stated clock follows daylight saving, and
// its zone.
func (r *run) daylightSaving(l *site.Log) (follows bool, loc *time.Location) {
	loc = r.grid.Loc
	if l == nil {
		return true, loc
	}
	switch l.Clock.Kind {
	case site.ClockUTC, site.ClockStandard, site.ClockOffset:
		return false, loc
	case site.ClockZone:
		return true, l.Clock.Zone
	}
	return true, loc
}

// seasonal is the shift per day of a clock that ignored daylight saving, or
// followed it against what the site file says; nil where the record has none.
func (c *clockRun) seasonal(l *logSeries) []float64 {
	follows, loc := c.daylightSaving(c.logOf(l.name))
	out := make([]float64, len(c.days))
	any := false
	for d := range out {
		t := c.grid.Time((c.days[d].from + c.days[d].to) / 2).In(loc)
		if saving := c.savingMin(t); saving != 0 {
			any = true
			out[d] = saving
			if follows {
				out[d] = -saving
			}
		}
	}
	if !any {
		return nil
	}
	return out
}

// savingMin is the daylight saving in force at an instant, minutes.
func (c *clockRun) savingMin(t time.Time) float64 {
	_, off := t.Zone()
	return float64(off-standardS(t)) / 60
}

// standardS is the offset of standard time in the year of an instant, seconds:
// the least of the year's.
func standardS(t time.Time) int {
	_, a := time.Date(t.Year(), 1, 1, 12, 0, 0, 0, t.Location()).Zone()
	_, b := time.Date(t.Year(), 7, 1, 12, 0, 0, 0, t.Location()).Zone()
	return min(a, b)
}

func (c *clockRun) verdict(l *logSeries) reading.ClockVerdict {
	v := reading.ClockVerdict{Log: l.name, Points: l.points, Declared: "local time", ShiftMin: math.NaN(), EndShiftMin: math.NaN()}
	if log := c.logOf(l.name); log != nil {
		v.Declared = log.Clock.Words()
	}
	return v
}

// report writes down what was found of a log, and takes out what is surely
// wrong.
func (c *clockRun) report(l *logSeries, f *lag.Finding) {
	v := c.verdict(l)
	switch f.Kind {
	case lag.Unknown:
		v.Verdict, v.Evidence = reading.ClockUntold, "nothing else that is logged moves with what this log says, so a wrong clock would not show"
	case lag.Right:
		v.Verdict, v.HeldAgainst, v.Fit = reading.ClockFits, held(f.Usable), f.Fit
		v.Evidence = fmt.Sprintf("fits without a shift (best within %.0f min): %s, correlation %.2f", math.Ceil(math.Abs(f.ShiftMin)/5+0.01)*5, held(f.Usable), f.Fit)
		if slices.ContainsFunc(f.Usable, func(w *lag.Witness) bool { return w.Class == lag.Coarse }) {
			v.Evidence += "; an error below three hours would not show"
		}
	default:
		c.accuse(l, f, &v)
	}
	c.ledger.Clocks = append(c.ledger.Clocks, v)
}

// held says what a log was held against.
func held(ws []*lag.Witness) string {
	var logs []string
	for _, w := range ws {
		for _, n := range w.Logs {
			if !slices.Contains(logs, n) {
				logs = append(logs, n)
			}
		}
	}
	s := names(ws)
	if len(logs) > 0 {
		s += " of " + count(len(logs), "other log", "other logs")
	}
	return s
}

// accuse words a finding and decides what becomes of the readings.
func (c *clockRun) accuse(l *logSeries, f *lag.Finding, v *reading.ClockVerdict) {
	g := c.grid
	v.FromUTC, v.ToUTC = c.at(c.days[f.From].from), c.at(c.days[f.To-1].to)
	v.HeldAgainst, v.Fit, v.FitWithout, v.Days, v.Better = held(f.Agree), f.Fit, f.FitWithout, f.Days, f.Better
	v.ShiftMin, v.EndShiftMin = f.ShiftMin, f.EndShiftMin
	var logs, points = map[string]bool{}, 0
	absolute := false
	for _, w := range f.Agree {
		points = max(points, w.Points)
		for _, n := range w.Logs {
			logs[n] = true
		}
		absolute = absolute || len(w.Logs) == 0 && w.Class == lag.Sky
	}
	what := fmt.Sprintf("runs %s %s", hours(f.ShiftMin), aheadOf(f.ShiftMin))
	why := ""
	span := span(v.FromUTC, v.ToUTC, g.Loc)
	sure := (len(f.Agree) >= 2 || f.Best() <= lag.Machine) && (len(logs) >= 2 || absolute)
	switch f.Kind {
	case lag.ForATime:
		v.Verdict = reading.ClockForATime
		why = "the rest of the time it fits without"
		if !f.RestFits {
			why = "it does so throughout, which working hours may explain"
			sure = sure && f.Best() <= lag.Machine
		}
	case lag.Constant:
		v.Verdict = reading.ClockOtherZone
		if f.Best() > lag.Machine {
			why, sure = "it does so throughout, which working hours may explain", false
		} else if math.Abs(f.ShiftMin) < stampMin {
			why, sure = "means stamped with the wrong end of their interval (stamp in points.csv) may explain it", false
		}
	case lag.Seasonal:
		within, without := math.NaN(), math.NaN()
		seasonal := c.seasonal(l)
		for d, m := range f.PathMin() {
			if seasonal[d] != 0 {
				within = m
			} else {
				without = m
			}
		}
		v.ShiftMin, v.EndShiftMin = within, within
		follows, _ := c.daylightSaving(c.logOf(l.name))
		switch {
		case f.ShiftMin != 0:
			v.Verdict, v.ShiftMin = reading.ClockOtherZone, without
			what = fmt.Sprintf("runs %s %s", hours(within), aheadOf(within))
			if math.IsNaN(without) {
				v.ShiftMin = within
			} else {
				what = fmt.Sprintf("runs %s (outside daylight saving %+.0f min) %s", hours(within), without, aheadOf(within))
			}
		case follows:
			v.Verdict, why = reading.ClockIgnoredSaving, "it ignored daylight saving"
		default:
			v.Verdict, why = reading.ClockFollowedSaving, "it followed daylight saving"
		}
		if f.ShiftMin == 0 {
			what = fmt.Sprintf("runs, while daylight saving is in force, %s %s", hours(within), aheadOf(within))
		}
		sure = sure || f.T >= 8 && len(f.Agree) >= 1 && len(logs) >= 2
	case lag.Drift:
		v.Verdict = reading.ClockDrifted
		what = fmt.Sprintf("drifts by %.0f min, to %s %s", math.Abs(f.EndShiftMin), minutes(f.EndShiftMin), aheadOf(f.EndShiftMin))
		why = fmt.Sprintf("about %.1f min a month", math.Abs(f.EndShiftMin)/float64(f.To-f.From)*30.4)
	}
	against := "the sun"
	if !absolute {
		against = count(points, "point", "points") + " of other logs"
	}
	if f.Coarse() {
		against = "what the time of day suggests, give or take two hours,"
	} else if len(logs) == 1 {
		why = strings.TrimPrefix(why+"; which of the two logs is wrong they cannot tell", "; ")
	}
	v.Evidence = fmt.Sprintf("the log %q %s %s %s: the pattern of %s fits with a correlation of %.2f at that lag and %.2f without, and better on %d of %d days",
		l.name, what, against, span, names(f.Agree), f.Fit, f.FitWithout, f.Better, f.Days)
	if why != "" {
		v.Evidence += "; " + why
	}
	v.SiteFile = c.correction(l, f)
	v.DoNext = fmt.Sprintf("compare the logger's clock with a watch; if it was wrong, write in the site file for this log: %s", v.SiteFile)
	if f.Kind != lag.Drift && f.Kind != lag.ForATime {
		v.DoNext += " (with overrule_offset: true where the times carry an offset of their own)"
	}
	v.Sure = sure
	check := reading.Check{Kind: reading.CheckClock, Points: l.points, Zone: c.commonZone(l.points), Effect: reading.EffectWarned,
		FromUTC: v.FromUTC, ToUTC: v.ToUTC, Evidence: v.Evidence, DoNext: v.DoNext}
	if sure {
		for d, m := range f.PathMin() {
			if math.Abs(m) < removeMin-1 || d < f.From || d >= f.To {
				continue
			}
			for _, p := range l.points {
				check.Readings += c.built.Tally.Void(p, c.days[d].from, c.days[d].to, reading.ClockDoubt)
			}
		}
		if check.Readings > 0 {
			check.Effect = reading.EffectRemoved
		}
	}
	c.add(check)
}

func (c *clockRun) commonZone(points []int) int {
	zone := -1
	for k, p := range points {
		if z := zoneOf(c.site, p); k == 0 {
			zone = z
		} else if z != zone {
			return -1
		}
	}
	return zone
}

func hours(m float64) string {
	if m = math.Abs(m); m < 60 {
		return fmt.Sprintf("%.0f min", m)
	}
	return fmt.Sprintf("%.1f h", m/60)
}

func minutes(m float64) string { return fmt.Sprintf("%.0f min", math.Abs(m)) }

func aheadOf(m float64) string {
	if m < 0 {
		return "behind"
	}
	return "ahead of"
}
