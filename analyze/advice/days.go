package advice

import (
	"sort"

	"sashlog/analyze/hours"
	"sashlog/analyze/lost"
)

// dayTable is each zone's hours per calendar day.
type dayTable struct {
	achieved, missed [][]float64 // [zone][day]
}

func (a *adviser) dayTable() *dayTable {
	t := &dayTable{}
	for z := range a.Site.Zones {
		t.achieved = append(t.achieved, a.perDay(z, func(i int) bool { return a.Record.Class[z][i].Achieved() }))
		t.missed = append(t.missed, a.perDay(z, func(i int) bool { return a.Record.Class[z][i].Missed() }))
	}
	return t
}

// perDay counts a zone's steps of the period for which is is true, in hours
// per calendar day.
func (a *adviser) perDay(z int, is func(step int) bool) []float64 {
	out := make([]float64, len(a.cal.Days))
	for i := a.Grid.PeriodFrom; i < a.Grid.PeriodTo; i++ {
		if a.Record.Class[z][i] != hours.NotOccupied && is(i) {
			out[a.cal.DayOf[i]] += a.Grid.StepH()
		}
	}
	return out
}

// causeDays sums the episodes of a cause per day for which keep is true.
func (a *adviser) causeDays(c lost.Cause, keep func(ep *lost.Episode) bool) (perDay []float64, episodes int) {
	perDay = make([]float64, len(a.cal.Days))
	for k := range a.Lost.Episodes {
		ep := &a.Lost.Episodes[k]
		if ep.Cause == c && keep(ep) {
			perDay[a.cal.DayOf[ep.FromStep]] += ep.Hours
			episodes++
		}
	}
	return perDay, episodes
}

func everyEpisode(*lost.Episode) bool { return true }

// typical is the day whose hours are the median of the days that have any; the
// earliest of equals.
func (a *adviser) typical(perDay []float64) string {
	var days []int
	for d, h := range perDay {
		if h > 0 {
			days = append(days, d)
		}
	}
	if len(days) == 0 {
		return ""
	}
	sort.SliceStable(days, func(i, j int) bool { return perDay[days[i]] < perDay[days[j]] })
	return a.cal.Days[days[len(days)/2]].Date.String()
}

// contrary is the day on which the zones ran open longest with next to nothing
// missed: at least an hour, and ten times what was missed. It shows that the
// building can. It is never the typical day itself.
func (a *adviser) contrary(zones []int, typical string) string {
	best, day := 0.0, -1
	for d := range a.cal.Days {
		var open, missed float64
		for _, z := range zones {
			open += a.days.achieved[z][d]
			missed += a.days.missed[z][d]
		}
		if open >= 1 && open >= 10*missed && open > best && a.cal.Days[d].Date.String() != typical {
			best, day = open, d
		}
	}
	if day < 0 {
		return ""
	}
	return a.cal.Days[day].Date.String()
}

// both chooses the two days of a finding on missed hours.
func (a *adviser) both(e *Evidence, perDay []float64, zones []int) {
	e.TypicalDay = a.typical(perDay)
	e.ContraryDay = a.contrary(zones, e.TypicalDay)
}

// sumDays adds days of several zones.
func sumDays(days ...[]float64) []float64 {
	var out []float64
	for _, d := range days {
		if out == nil {
			out = make([]float64, len(d))
		}
		for i, h := range d {
			out[i] += h
		}
	}
	return out
}
