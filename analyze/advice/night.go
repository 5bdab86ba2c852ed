package advice

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// overnightPlant finds plant units left on while nobody is there. Hours are
// those of the units; warm-up is left out.
func (a *adviser) overnightPlant() []found {
	if a.AfterHours == nil {
		return nil
	}
	var s size
	var units []string
	var zones []int
	nights, known, kWh, top, workdays := 0, 0, 0.0, 0.0, 0.0
	for _, u := range a.AfterHours.Units {
		h := u.OnH - u.WarmUpH
		if h < leastH || h < 0.02*u.VacantH {
			continue
		}
		s.h += h
		s.low += h
		s.high += h + u.UnknownH
		units = append(units, u.ID)
		kWh += u.EnergyKWh * h / u.OnH
		workdays += u.WorkdayOnH - u.WarmUpH
		if h > top {
			top, nights, known = h, u.NightsOn, u.NightsKnown
		}
		for _, id := range a.Site.Plant[a.Site.PlantIndex(u.ID)].Serves {
			if z := a.Site.ZoneIndex(id); z >= 0 && !contains(zones, z) {
				zones = append(zones, z)
			}
		}
	}
	if len(units) == 0 {
		return nil
	}
	s.zones = zones
	energy := ""
	if !math.IsNaN(kWh) {
		energy = fmt.Sprintf(", at most %s kWh at rated power", whole(kWh))
	}
	when := ""
	if workdays >= 0.8*s.h {
		when = ", nearly all of it before and after occupied time of working days"
	}
	perDay, events := a.nightDays(zones), 0
	for _, h := range perDay {
		if h > 0 {
			events++
		}
	}
	name := "Plant unit " + units[0] + " runs"
	if len(units) > 1 {
		name = "Plant units " + list(units, 4) + " run"
	}
	f := found{group: night, Finding: Finding{
		ID: "plant-after-hours",
		What: fmt.Sprintf("%s when nobody is there, warm-up aside: %s %s%s%s; the worst was left on in %s of %d known",
			name, between(s.h, s.low, s.high, unitOf(s.zones)), a.period(), when, energy, count(nights, "night", "nights"), known),
		Confidence: confidence(s, events, 20),
		RivalExplanations: []string{
			"people were there outside the occupied times of the site file",
			"a server or archive room needs it",
			"it was night purge or frost protection",
		},
		CheckOnSite: "Read the start and stop times, the extension timers and the weekend programme of " + list(units, 4),
		DoNext:      "Set start and stop to occupied time (warm-up by need), and give late workers a timer that ends by itself",
		Who:         controlsFirm,
		UndoIf:      "rooms that need conditioning at night leave their limits",
		Caution:     plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.PersonH = 0 // nobody is there
	f.Evidence = Evidence{Points: a.points(zones, site.PlantStatus, site.SupplyAirflow), Figure: FigureAfterHours, TypicalDay: a.typical(perDay), ContraryDay: a.quietDay(zones)}
	return []found{f}
}

// nightDays counts, per day, hours of plant in vacant zones.
func (a *adviser) nightDays(zones []int) []float64 {
	out := make([]float64, len(a.cal.Days))
	for _, z := range zones {
		run := &a.Running.Zones[z]
		for i := a.Grid.PeriodFrom; i < a.Grid.PeriodTo; i++ {
			if run.Occupied[i] == running.Vacant && run.Plant[i] != running.PlantUnknown && run.Plant[i] != uint8(site.PlantOff) && run.Plant[i] != uint8(site.PlantHeat) {
				out[a.cal.DayOf[i]] += a.Grid.StepH()
			}
		}
	}
	return out
}

// quietDay is the latest working day on which none of the zones had plant
// outside occupied time, all of it known.
func (a *adviser) quietDay(zones []int) string {
	for d := len(a.cal.Days) - 1; d >= 0; d-- {
		day := a.cal.Days[d]
		if day.FromStep < a.Grid.PeriodFrom || day.ToStep > a.Grid.PeriodTo {
			continue
		}
		worked, quiet := false, true
		for _, z := range zones {
			run := &a.Running.Zones[z]
			for i := day.FromStep; i < day.ToStep && quiet; i++ {
				worked = worked || run.Occupied[i] == running.Occupied
				quiet = run.Occupied[i] != running.Vacant || run.Plant[i] == uint8(site.PlantOff)
			}
		}
		if worked && quiet {
			return day.Date.String()
		}
	}
	return ""
}

// unusedPurge finds zones that stay warm at night beside cool air outdoors and
// are too warm by day.
func (a *adviser) unusedPurge() []found {
	if a.AfterHours == nil {
		return nil
	}
	unused := func(z int) float64 {
		x := &a.AfterHours.Zones[z]
		if a.Running.Zones[z].NoOpening || !(x.PurgeAvailableH > 0) || !a.tooWarmByDay(z) {
			return 0
		}
		return x.PurgeAvailableH - x.PurgeH
	}
	s := a.sizeOf(unused, unused, unused)
	if len(s.zones) == 0 {
		return nil
	}
	used, available := 0.0, 0.0
	for _, z := range s.zones {
		used += a.AfterHours.Zones[z].PurgeH
		available += a.AfterHours.Zones[z].PurgeAvailableH
	}
	f := found{group: purge, Finding: Finding{
		ID: "night-purge",
		What: fmt.Sprintf("Cool nights are hardly used %s, which are too warm by day: %s of night purge were available and not used %s (%s used)",
			a.inZones(s.zones), between(s.h, s.low, s.high, unitOf(s.zones)), a.period(), percent(used/available)),
		Confidence: confidence(s, 5, 6),
		RivalExplanations: []string{
			"windows may not stand open at night for security, rain or insects",
			"the rooms hold too little heat for a purge to matter by day",
		},
		CheckOnSite: "See which windows can stand open safely at night, and how much bare concrete or masonry the rooms have",
		DoNext:      "Try a week of night purge in one zone and compare its mornings with a like zone",
		Who:         manager,
		UndoIf:      "rooms are below 20 °C in the morning, or damp comes in",
		Caution:     "Windows open at night: security, rain, insects and alarms first. " + windowCaution,
	}}
	if used/available > 0.5 {
		return nil
	}
	s.fill(a, &f.Finding)
	f.PersonH = 0
	f.Evidence = Evidence{Points: a.points(s.zones, site.AirTemp, site.OperativeTemp, site.OutdoorTemp, site.Window, site.WindowOpening), Figure: FigureAfterHours}
	return []found{f}
}

// tooWarmByDay reports whether a zone is among those of the finding on warm
// zones.
func (a *adviser) tooWarmByDay(z int) bool {
	c := a.headline(z)
	return c != nil && c.AppliesH > 0 && c.OverH >= warmShare*c.AppliesH
}

func contains(list []int, v int) bool {
	for _, x := range list {
		if x == v {
			return true
		}
	}
	return false
}
