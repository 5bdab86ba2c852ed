package afterhours

import (
	"fmt"
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what is looked at.
type Input struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	Outdoor  *outdoor.Outdoor
	Indoor   []indoor.Zone
	Running  *running.Result
	Record   *hours.Record
	Summary  *hours.Summary
}

// warmUpH is how long before occupied time heating counts as warm-up. Common
// practice: cold mornings need two to three hours.
const warmUpH = 3.0

// openAllNight is the share of a night's known time that counts as open or on
// from evening to morning. Our assumption.
const openAllNight = 0.8

// Look counts what ran or stood open outside occupied time.
func Look(in Input) *Result {
	cal := calendar.Of(in.Grid)
	nights := nightsOf(&in, cal)
	r := &Result{}
	for z := range in.Site.Zones {
		r.Zones = append(r.Zones, lookZone(&in, z, nights))
	}
	r.Building = weigh(r.Zones, in.Summary)
	for u := range in.Site.Plant {
		r.Units = append(r.Units, lookUnit(&in, u, cal, nights))
	}
	r.Notes = notes(&in, r)
	return r
}

func lookZone(in *Input, z int, nights []night) Zone {
	run := &in.Running.Zones[z]
	var out Zone
	soon := soonOccupied(in, []int{z})
	h := in.Grid.StepH()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		switch run.Occupied[i] {
		case running.Occupied:
			continue
		case running.OccupancyUnknown:
			out.OccupancyUnknownH += h
			continue
		}
		out.VacantH += h
		switch plant := run.Plant[i]; plant {
		case uint8(site.PlantOff):
		case running.PlantUnknown:
			out.PlantUnknownH += h
		default:
			out.PlantOnH += h
			if plant == uint8(site.PlantHeat) || plant == uint8(site.PlantCool) {
				out.PlantConditioningH += h
			}
			if plant == uint8(site.PlantHeat) && soon[i] {
				out.WarmUpH += h
			}
		}
		open, known := windows(run, i, in.Criteria.OpenThreshold)
		switch {
		case run.NoOpening:
		case !known:
			out.WindowsUnknownH += h
		case open:
			out.WindowsOpenH += h
		}
	}
	out.PurgeH, out.PurgeAvailableH = sumS(in.Record, hours.CPurge, z), sumS(in.Record, hours.CPurgeAvailable, z)
	out.PurgeUnknownH = sumS(in.Record, hours.CPurgeUnknown, z)
	for _, n := range nights {
		out.count(in, run, n)
	}
	return out
}

// windows says whether an opening stood open at a step; a known open one is
// enough, also where others are unknown.
func windows(run *running.Zone, i int, threshold float64) (open, known bool) {
	switch run.State[i] {
	case running.Open, running.Both:
		return true, true
	case running.Mech, running.Shut:
		return false, true
	}
	share := float64(run.OpenShare[i])
	return share > threshold, !math.IsNaN(share)
}

// count judges one night. A night counts when the zone is vacant throughout.
func (zone *Zone) count(in *Input, run *running.Zone, n night) {
	plantOn, plantKnown, open, windowsKnown := 0, 0, 0, 0
	for i := n.from; i < n.to; i++ {
		if run.Occupied[i] != running.Vacant {
			return
		}
		if run.Plant[i] != running.PlantUnknown {
			plantKnown++
			if run.Plant[i] != uint8(site.PlantOff) {
				plantOn++
			}
		}
		if is, known := windows(run, i, in.Criteria.OpenThreshold); known && !run.NoOpening {
			windowsKnown++
			if is {
				open++
			}
		}
	}
	zone.Nights++
	if 2*plantKnown >= n.to-n.from {
		zone.NightsPlantKnown++
		if float64(plantOn)*in.Grid.StepH() >= in.Criteria.PlantOvernightMinH {
			zone.NightsPlantOn++
		}
	}
	if 2*windowsKnown >= n.to-n.from {
		zone.NightsWindowsKnown++
		if float64(open) >= openAllNight*float64(windowsKnown) {
			zone.NightsWindowsOpen++
		}
	}
}

// soonOccupied marks the vacant steps within warmUpH before occupied time of
// any of the zones.
func soonOccupied(in *Input, zones []int) []bool {
	out := make([]bool, in.Grid.N)
	ahead := int(warmUpH/in.Grid.StepH() + 0.5)
	next := in.Grid.N + ahead + 1
	for i := in.Grid.N - 1; i >= 0; i-- {
		for _, z := range zones {
			if in.Running.Zones[z].Occupied[i] == running.Occupied {
				next = i
			}
		}
		out[i] = next > i && next-i <= ahead
	}
	return out
}

func sumS(r *hours.Record, c hours.Col, z int) float64 {
	if r == nil || r.Seconds[c] == nil {
		return math.NaN()
	}
	var s int64
	for h := range r.Hours {
		s += int64(r.Seconds[c][r.Row(z, h)])
	}
	return float64(s) / 3600
}

// weigh averages the zones like the building's figures; nights are rounded to
// the nearest whole number.
func weigh(zones []Zone, s *hours.Summary) Zone {
	var b Zone
	var plantOn, windowsOpen, nights, plantKnown, windowsKnown float64
	for z := range zones {
		if s == nil || z >= len(s.Weights) || s.Weights[z] == 0 {
			continue
		}
		w, x := s.Weights[z], &zones[z]
		for _, f := range []struct{ to, of *float64 }{
			{&b.PlantOnH, &x.PlantOnH}, {&b.PlantUnknownH, &x.PlantUnknownH}, {&b.PlantConditioningH, &x.PlantConditioningH},
			{&b.WindowsOpenH, &x.WindowsOpenH}, {&b.WindowsUnknownH, &x.WindowsUnknownH}, {&b.PurgeH, &x.PurgeH},
			{&b.PurgeAvailableH, &x.PurgeAvailableH}, {&b.PurgeUnknownH, &x.PurgeUnknownH}, {&b.WarmUpH, &x.WarmUpH}, {&b.VacantH, &x.VacantH}, {&b.OccupancyUnknownH, &x.OccupancyUnknownH},
		} {
			*f.to += w * *f.of
		}
		plantOn += w * float64(x.NightsPlantOn)
		windowsOpen += w * float64(x.NightsWindowsOpen)
		nights += w * float64(x.Nights)
		plantKnown += w * float64(x.NightsPlantKnown)
		windowsKnown += w * float64(x.NightsWindowsKnown)
	}
	round := func(v float64) int { return int(math.Round(v)) }
	b.NightsPlantOn, b.NightsWindowsOpen, b.Nights = round(plantOn), round(windowsOpen), round(nights)
	b.NightsPlantKnown, b.NightsWindowsKnown = round(plantKnown), round(windowsKnown)
	return b
}

func notes(in *Input, r *Result) []string {
	c := &in.Criteria
	out := []string{
		fmt.Sprintf("a night lasts from %s to %s local time; plant counts as left on when it ran for at least %g h of it, windows as left open when they were open for at least %.0f %% of its known time",
			clockHour(c.PurgeFromH), clockHour(c.PurgeToH), c.PlantOvernightMinH, openAllNight*100),
		fmt.Sprintf("night purge is available while the zone is vacant at night, at least %g °C indoors, outdoors at least %g K cooler and not below %g °C; it is used when windows are open or plant moves unconditioned air",
			c.PurgeIndoorMinC, c.PurgeDifferenceK, c.PurgeOutdoorMinC),
		fmt.Sprintf("heating within %g h before occupied time is counted as warm-up (common practice: cold mornings need two to three hours)", warmUpH),
	}
	b := r.Building
	if b.VacantH > 0 && b.PlantUnknownH > 0.05*b.VacantH {
		out = append(out, fmt.Sprintf("what the plant did is unknown for %.0f %% of the time outside occupied time", 100*b.PlantUnknownH/b.VacantH))
	}
	if b.VacantH > 0 && b.WindowsUnknownH > 0.05*b.VacantH {
		out = append(out, fmt.Sprintf("whether windows were open is unknown for %.0f %% of the time outside occupied time", 100*b.WindowsUnknownH/b.VacantH))
	}
	if b.OccupancyUnknownH > 0 {
		out = append(out, fmt.Sprintf("time of unknown occupancy is left out: %.0f h", b.OccupancyUnknownH))
	}
	out = append(out, "windows open at night can be a purge, or a matter of security and rain: which it is, only the site can say")
	return out
}

func clockHour(h float64) string {
	m := int(math.Round(h * 60))
	return fmt.Sprintf("%02d:%02d", m/60, m%60)
}
