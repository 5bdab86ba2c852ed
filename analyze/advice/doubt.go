package advice

import (
	"fmt"
	"math"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// unknownShare is the share of occupied hours that must be unjudged before it
// is worth a finding. Our assumption.
const unknownShare = 0.05

// unknownHours finds evidence worth fixing: hours that cannot be judged.
func (a *adviser) unknownHours() []found {
	unjudged := func(z int) float64 { return a.Summary.Zones[z].H[hours.CUnjudged] }
	s := a.sizeOf(unjudged, unjudged, unjudged)
	occupied, windows, plant, weather, earlier := 0.0, 0.0, 0.0, 0.0, 0.0
	var days [][]float64
	for z := range a.Site.Zones {
		occupied += a.Summary.Zones[z].H[hours.COccupied]
		w, p, o, e := a.whyUnknown(z)
		windows, plant, weather, earlier = windows+w, plant+p, weather+o, earlier+e
	}
	if occupied == 0 || s.h < unknownShare*occupied {
		return nil
	}
	for _, z := range s.zones {
		days = append(days, a.perDay(z, func(i int) bool {
			c := a.Record.Class[z][i]
			return c == hours.Unjudged || c == hours.UnjudgedSuited
		}))
	}
	what, check, do := "a mix of missing readings", "Look through the table of readings for points that fall silent", "Repair the points with the longest gaps first"
	quantities := []site.Quantity{site.Window, site.WindowOpening, site.PlantStatus, site.OutdoorTemp}
	switch {
	case earlier > 0 && earlier >= weather && earlier >= windows && earlier >= plant:
		what = "missing outdoor temperatures of the days before, which the comfort limits follow"
		check = "See from which day on the outdoor temperature is logged: limits need the week before, and again a week after a gap of days"
		do = "Add the outdoor temperature of at least the week before the period, best of 30 days, from the same log or the hourly file of the nearest weather station; fill gaps of days in the same way"
		quantities = []site.Quantity{site.OutdoorTemp}
	case weather+earlier > 0 && weather+earlier >= windows && weather+earlier >= plant:
		what, check = "missing weather", "See whether the outdoor sensors log, and whether the weather file covers the whole period"
		do = "Fill the gap with the hourly file of the nearest weather station"
		quantities = []site.Quantity{site.OutdoorTemp, site.OutdoorHumidity, site.Rain, site.WindSpeed}
	case windows >= plant:
		what, check = "missing window contacts", "See which openings have no contact, or one that fell silent"
		do = "Put battery contacts with their own memory on the openings without one, the largest first; two weeks in spring and two in autumn answer most"
		quantities = []site.Quantity{site.Window, site.WindowOpening}
	case plant > 0:
		what, check = "missing plant status", "See which units' run status is not logged, or fell silent"
		do = "Trend the run status of each unit on change of value; the controller has it already"
		quantities = []site.Quantity{site.PlantStatus, site.ZoneAirflow}
	}
	f := found{group: evidence, Finding: Finding{
		ID: "unknown-hours",
		What: fmt.Sprintf("%s of occupied hours cannot be judged, most for %s: %s %s %s",
			percent(s.h/occupied), what, between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence:        "high",
		RivalExplanations: []string{"the points are logged elsewhere, under names that are not in the points table"},
		CheckOnSite:       check,
		DoNext:            do,
		Who:               manager,
		UndoIf:            "nothing to undo",
		Caution:           "Until then every figure stands between the bounds given with it",
	}}
	if s.h > 0.5*occupied {
		f.group = gain // nothing else can be trusted before
	}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, quantities...), Figure: FigureAnswerable, TypicalDay: a.typical(sumDays(days...)), ContraryDay: ""}
	return []found{f}
}

// whyUnknown splits a zone's unjudged hours by what is missing first: weather,
// or only that of the days before, then windows, then plant.
func (a *adviser) whyUnknown(z int) (windows, plant, weather, earlier float64) {
	run := &a.Running.Zones[z]
	h := a.Grid.StepH()
	for i := a.Grid.PeriodFrom; i < a.Grid.PeriodTo; i++ {
		switch c := a.Record.Class[z][i]; {
		case c != hours.Unjudged && c != hours.UnjudgedSuited:
		case run.State[i] != running.Unknown && a.onlyEarlier(i):
			earlier += h
		case run.State[i] != running.Unknown:
			weather += h
		case run.Plant[i] == running.PlantUnknown:
			plant += h
		default:
			windows += h
		}
	}
	return windows, plant, weather, earlier
}

// onlyEarlier reports whether the outdoor temperature of a step is known, but
// not the running mean of the days before.
func (a *adviser) onlyEarlier(step int) bool {
	o := a.Outdoor
	if step >= len(o.TempC) || step >= len(o.DayOf) || math.IsNaN(float64(o.TempC[step])) {
		return false
	}
	return math.IsNaN(o.Days[o.DayOf[step]].RunningMeanENC)
}
