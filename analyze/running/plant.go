package running

import (
	"math"

	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// plantEvidence is the strongest evidence of mechanical plant in one zone.
type plantEvidence struct {
	state []uint8 // site.PlantState code or PlantUnknown
	// served: by a plant unit or by something of the zone's own.
	served, has bool
}

// unitStates reads each plant unit's own state once: its status, else whether
// it moves air.
func unitStates(s *site.Site, g *grid.Grid, c criteria.Settings) [][]uint8 {
	units := make([][]uint8, len(s.Plant))
	for u := range units {
		status := columnsOf(s, g, site.OwnerPlant, u, site.PlantStatus)
		flow := columnsOf(s, g, site.OwnerPlant, u, site.SupplyAirflow)
		if len(status) == 0 && len(flow) == 0 {
			continue // no evidence at all
		}
		st := filled(g.N, PlantUnknown)
		strongest(st, g, c, status)
		for i := range st {
			if st[i] != PlantUnknown {
				continue
			}
			if on, known := above(g, c, flow, i, 1); known {
				st[i] = uint8(site.PlantOff)
				if on {
					st[i] = uint8(site.PlantOn)
				}
			}
		}
		units[u] = st
	}
	return units
}

// plantEvidenceOf combines what is known of the plant in zone z. Air flow or a
// damper of the zone's own decides whether a unit's air arrives; coil valves
// and a local unit's status count beside it; of several the strongest counts.
func plantEvidenceOf(s *site.Site, c criteria.Settings, g *grid.Grid, z int, units [][]uint8) plantEvidence {
	zoneCols := func(q site.Quantity) []*grid.Column { return columnsOf(s, g, site.OwnerZone, z, q) }
	flow, damper := zoneCols(site.ZoneAirflow), zoneCols(site.ZoneDamper)
	heat, cool, local := zoneCols(site.HeatingValve), zoneCols(site.CoolingValve), zoneCols(site.PlantStatus)

	var serving, airless [][]uint8 // units that bring air, and those that do not
	silent := false                // a serving unit without any evidence
	e := plantEvidence{state: filled(g.N, uint8(site.PlantOff))}
	for u := range s.Plant {
		for _, id := range s.Plant[u].Serves {
			if id != s.Zones[z].ID {
				continue
			}
			e.served = true
			switch {
			case units[u] == nil:
				silent = true
			case s.Plant[u].Air == site.AirNone:
				airless = append(airless, units[u])
			default:
				serving = append(serving, units[u])
			}
		}
	}
	ownEvidence := len(flow)+len(damper)+len(heat)+len(cool)+len(local) > 0
	e.served = e.served || ownEvidence
	e.has = ownEvidence || len(serving)+len(airless) > 0
	if !e.served {
		return e // known: no plant, so never mechanical
	}
	flowOn := c.FlowOnM3hPerM2
	if a := s.Zones[z].AreaM2; !math.IsNaN(a) {
		flowOn *= a
	} else {
		flowOn *= 10 // a small room; only a floor against sensor noise
	}
	localState := filled(g.N, PlantUnknown)
	strongest(localState, g, c, local)
	for i := range e.state {
		best, unknown, untyped := uint8(site.PlantOff), false, false
		add := func(v uint8) {
			switch {
			case v == PlantUnknown:
				unknown = true
			case v > best:
				best = v
			}
			untyped = untyped || v == uint8(site.PlantOn)
		}
		for _, u := range airless {
			add(u[i]) // a damper or air flow says nothing of these
		}
		// The units' air, if it arrives here.
		arrives, known := above(g, c, flow, i, flowOn)
		if !known {
			arrives, known = above(g, c, damper, i, c.DamperOpenPct)
		}
		switch {
		case known && !arrives: // nothing arrives, whatever the units do
		default:
			before := best
			for _, u := range serving {
				add(u[i])
			}
			switch {
			case known && best == before && !untyped:
				add(uint8(site.PlantOn)) // air arrives from somewhere
			case silent && !known:
				// Valves and local units say nothing of air that is merely moved.
				unknown = true
			}
		}
		if on, ok := above(g, c, cool, i, c.ValveOpenPct); ok && on {
			add(uint8(site.PlantCool))
		} else if !ok && len(cool) > 0 {
			unknown = true
		}
		if on, ok := above(g, c, heat, i, c.ValveOpenPct); ok && on {
			add(uint8(site.PlantHeat))
		} else if !ok && len(heat) > 0 {
			unknown = true
		}
		if len(local) > 0 {
			add(localState[i])
		}
		switch {
		case best == uint8(site.PlantOff) && unknown:
			best = PlantUnknown
		case best == uint8(site.PlantVent) && untyped:
			best = uint8(site.PlantOn) // what runs beside it may be conditioning
		}
		e.state[i] = best
	}
	return e
}

// columnsOf lists the columns with readings of one owner's quantity.
func columnsOf(s *site.Site, g *grid.Grid, owner site.OwnerKind, index int, q site.Quantity) []*grid.Column {
	var out []*grid.Column
	for i := range s.Points {
		p := &s.Points[i]
		if p.Owner == owner && p.Index == index && p.Quantity == q && g.Columns[i].Mean != nil {
			out = append(out, &g.Columns[i])
		}
	}
	return out
}

// strongest writes the strongest known status of several columns.
func strongest(into []uint8, g *grid.Grid, c criteria.Settings, cols []*grid.Column) {
	need := needS(g, c)
	for _, col := range cols {
		for i := range into {
			if col.CoveredS[i] < need {
				continue
			}
			v := uint8(col.Mean[i])
			if into[i] == PlantUnknown || v > into[i] {
				into[i] = v
			}
		}
	}
}

// above reports whether any of the columns is above the limit at step i, and
// whether that is known.
func above(g *grid.Grid, c criteria.Settings, cols []*grid.Column, i int, limit float64) (on, known bool) {
	need := needS(g, c)
	for _, col := range cols {
		if col.CoveredS[i] < need {
			continue
		}
		known = true
		if round3(float64(col.Mean[i])) > round3(limit) {
			return true, true
		}
	}
	return false, known
}

// needS is the least covered time of a step that counts, at least a second.
func needS(g *grid.Grid, c criteria.Settings) uint16 {
	return uint16(math.Max(1, math.Ceil(c.StepCoverageMin*float64(g.StepS))))
}

func filled(n int, v uint8) []uint8 {
	out := make([]uint8, n)
	for i := range out {
		out[i] = v
	}
	return out
}
