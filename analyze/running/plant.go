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

	var serving [][]uint8
	silent := false // a serving unit without any evidence
	e := plantEvidence{state: filled(g.N, uint8(site.PlantOff))}
	for u := range s.Plant {
		for _, id := range s.Plant[u].Serves {
			if id != s.Zones[z].ID {
				continue
			}
			e.served = true
			if units[u] == nil {
				silent = true
			} else {
				serving = append(serving, units[u])
			}
		}
	}
	ownEvidence := len(flow)+len(damper)+len(heat)+len(cool)+len(local) > 0
	e.served = e.served || ownEvidence
	e.has = ownEvidence || len(serving) > 0
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
		best, unknown := uint8(site.PlantOff), false
		add := func(v uint8) {
			if v == PlantUnknown {
				unknown = true
			} else if v > best {
				best = v
			}
		}
		// The units' air, if it arrives here.
		air, airUnknown := uint8(site.PlantOff), silent
		for _, u := range serving {
			if u[i] == PlantUnknown {
				airUnknown = true
			} else if u[i] > air {
				air = u[i]
			}
		}
		arrives, known := above(g, c, flow, i, flowOn)
		if !known {
			arrives, known = above(g, c, damper, i, c.DamperOpenPct)
		}
		switch {
		case known && !arrives: // nothing arrives, whatever the unit does
		case known && arrives && air == uint8(site.PlantOff):
			add(uint8(site.PlantOn))
		case airUnknown && air == uint8(site.PlantOff):
			if len(serving) > 0 || silent {
				// A zone's own valves and units may still be its only plant.
				unknown = unknown || !(silent && len(serving) == 0 && ownEvidence)
			}
		default:
			add(air)
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
		if best == uint8(site.PlantOff) && unknown {
			best = PlantUnknown
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
