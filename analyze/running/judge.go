package running

import (
	"fmt"
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/cores"
	"sashlog/analyze/indoor"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Judge settles occupied time and running state of every zone and step.
func Judge(s *site.Site, c criteria.Settings, g *grid.Grid, cal *calendar.Calendar, in []indoor.Zone) *Result {
	units := unitStates(s, g, c)
	r := &Result{Zones: make([]Zone, len(s.Zones)), Units: units}
	cores.Each(len(r.Zones), func(z int) { r.Zones[z] = judgeZone(s, c, g, cal, z, &in[z], units) })
	r.Schedule = scheduleWords(s)
	r.Weights, r.WeightedBy = weigh(s, r.Zones)
	return r
}

func judgeZone(s *site.Site, c criteria.Settings, g *grid.Grid, cal *calendar.Calendar, z int, in *indoor.Zone, units [][]uint8) Zone {
	def := &s.Zones[z]
	win := windowEvidenceOf(s, c, g, z)
	plant := plantEvidenceOf(s, c, g, z, units)
	out := Zone{
		State: make([]State, g.N), Occupied: occupiedOf(s, g, cal, z, in), Plant: plant.state, OpenShare: win.share,
		HasContacts: win.has, ServedByPlant: plant.served, HasPlantEvidence: plant.has, NoOpening: def.Openings.None(),
		PeopleCanOpen: !def.Openings.None() && def.Windows != site.AutomaticWindows,
	}
	for i := range out.State {
		shut := win.allShut[i] || out.NoOpening
		out.State[i] = state(win.open[i], shut, plant.state[i], def.Scheme)
	}
	h := g.StepH()
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		if out.Occupied[i] != Occupied || plant.state[i] != uint8(site.PlantOff) {
			continue
		}
		if win.open[i] {
			out.OpenHoursAny += h
		}
		if share := float64(win.share[i]); !math.IsNaN(share) {
			if share >= 0.25 {
				out.OpenHours25 += h
			}
			if share >= 0.5 {
				out.OpenHours50 += h
			}
		}
	}
	out.compareModeSignal(s, c, g, z)
	return out
}

// state combines window and plant. Ventilation beside an open window is part
// of open mode where both are meant to run together.
func state(open, shut bool, plant uint8, scheme site.Scheme) State {
	switch {
	case plant == PlantUnknown || (!open && !shut):
		return Unknown
	case open && plant == uint8(site.PlantOff):
		return Open
	case open && plant == uint8(site.PlantVent) && scheme == site.Concurrent:
		return Open
	case open:
		return Both
	case plant == uint8(site.PlantOff):
		return Shut
	}
	return Mech
}

// compareModeSignal counts occupied hours in which a logged mode signal (zone
// first, then its plant units) says otherwise than the evidence.
func (r *Zone) compareModeSignal(s *site.Site, c criteria.Settings, g *grid.Grid, z int) {
	signals := columnsOf(s, g, site.OwnerZone, z, site.ModeSignal)
	if len(signals) == 0 {
		for u := range s.Plant {
			for _, id := range s.Plant[u].Serves {
				if id == s.Zones[z].ID {
					signals = append(signals, columnsOf(s, g, site.OwnerPlant, u, site.ModeSignal)...)
				}
			}
		}
	}
	if len(signals) == 0 {
		signals = columnsOf(s, g, site.OwnerSite, 0, site.ModeSignal)
	}
	if len(signals) == 0 {
		return
	}
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		says, known := above(g, c, signals, i, 0.5)
		if !known || r.Occupied[i] != Occupied || r.State[i] == Unknown || r.State[i] == Shut {
			continue
		}
		r.ModeH += g.StepH()
		if says != (r.State[i] == Open) {
			r.ModeDisagreeH += g.StepH()
		}
	}
}

// weigh gives the weights of the building's figures: people where every zone
// with an opening has a usual number, else floor area, else equally. Zones
// without openings weigh nothing, nor do those whose occupancy is never known:
// a zone of which nothing can be said is no zone without hours.
func weigh(s *site.Site, zones []Zone) (weights []float64, by string) {
	ways := []struct {
		by string
		of func(z *site.Zone) float64
	}{
		{"people", func(z *site.Zone) float64 { return z.People }},
		{"floor area", func(z *site.Zone) float64 { return z.AreaM2 }},
		{"equally", func(*site.Zone) float64 { return 1 }},
	}
	for _, way := range ways {
		w, sum, usable := make([]float64, len(s.Zones)), 0.0, true
		for z := range s.Zones {
			if s.Zones[z].Openings.None() || neverKnown(&zones[z]) {
				continue
			}
			w[z] = way.of(&s.Zones[z])
			usable = usable && !math.IsNaN(w[z])
			sum += w[z]
		}
		if !usable || (sum <= 0 && way.by != "equally") {
			continue
		}
		if sum > 0 {
			for z := range w {
				w[z] /= sum
			}
		}
		return w, way.by
	}
	return make([]float64, len(s.Zones)), "equally"
}

// neverKnown reports whether nothing was ever known of who was there.
func neverKnown(z *Zone) bool {
	unknown := false
	for _, o := range z.Occupied {
		if o == Occupied {
			return false
		}
		unknown = unknown || o == OccupancyUnknown
	}
	return unknown
}

func scheduleWords(s *site.Site) string {
	schedule, sensed := 0, 0
	for z := range s.Zones {
		src := s.Occupancy.Source
		if s.Zones[z].OccupancySource != "" {
			src = s.Zones[z].OccupancySource
		}
		if src == site.ByPresence {
			sensed++
		} else {
			schedule++
		}
	}
	switch {
	case sensed == 0:
		return fmt.Sprintf("occupied times of the site file, less %d holidays", len(s.Occupancy.Holidays))
	case schedule == 0:
		return "as measured by counters and presence sensors"
	}
	return fmt.Sprintf("occupied times of the site file in %d zones, counters and presence sensors in %d", schedule, sensed)
}
