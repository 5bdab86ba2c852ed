package afterhours

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// lookUnit counts a plant unit's hours while every zone it serves is vacant.
func lookUnit(in *Input, u int, cal *calendar.Calendar, nights []night) Unit {
	p := &in.Site.Plant[u]
	out := Unit{ID: p.ID}
	var zones []int
	for _, id := range p.Serves {
		if z := in.Site.ZoneIndex(id); z >= 0 {
			zones = append(zones, z)
		}
	}
	state := in.Running.UnitState(in.Site, u)
	vacant := make([]bool, in.Grid.N)
	worked := make([]bool, len(cal.Days))
	for i := range vacant {
		vacant[i] = len(zones) > 0
		for _, z := range zones {
			occ := in.Running.Zones[z].Occupied[i]
			vacant[i] = vacant[i] && occ == running.Vacant
			if occ == running.Occupied {
				worked[cal.DayOf[i]] = true
			}
		}
	}
	if len(zones) == 0 {
		return out
	}
	soon := soonOccupied(in, zones)
	h := in.Grid.StepH()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if !vacant[i] {
			continue
		}
		out.VacantH += h
		switch s := state[i]; s {
		case uint8(site.PlantOff):
		case running.PlantUnknown:
			out.UnknownH += h
		default:
			out.OnH += h
			if worked[cal.DayOf[i]] {
				out.WorkdayOnH += h
			} else {
				out.WeekendOrHolidayOnH += h
			}
			if s == uint8(site.PlantHeat) || s == uint8(site.PlantCool) {
				out.ConditioningH += h
			}
			if s == uint8(site.PlantHeat) && soon[i] {
				out.WarmUpH += h
			}
		}
	}
	out.EnergyKWh = out.OnH * p.RatedPowerKW
	for _, n := range nights {
		out.count(in, state, vacant, n)
	}
	return out
}

func (out *Unit) count(in *Input, state []uint8, vacant []bool, n night) {
	on, known := 0, 0
	for i := n.from; i < n.to; i++ {
		if !vacant[i] {
			return
		}
		if state[i] != running.PlantUnknown {
			known++
			if state[i] != uint8(site.PlantOff) {
				on++
			}
		}
	}
	if 2*known < n.to-n.from {
		return
	}
	out.NightsKnown++
	if h := float64(on) * in.Grid.StepH(); h >= in.Criteria.PlantOvernightMinH {
		out.NightsOn++
		out.OvernightH += h
	}
}
