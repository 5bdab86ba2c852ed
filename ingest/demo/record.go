package demo

import (
	"math"

	"sashlog/internal/physics/air"
)

// accumulator gathers the five minutes of a step.
type accumulator struct {
	rooms [maxZones]struct {
		air, radiant, co2, ratio, share, open, plant float32
		codes                                        [5]uint8
		reasons                                      [numReasons]uint8
		caller                                       int8
	}
	units [maxUnits]struct {
		codes       [5]uint8
		supply, kwh float32
	}
}

const maxZones, maxUnits = 16, 5

func (a *accumulator) unit(u *unit) {
	x := &a.units[u.index]
	x.codes[u.code]++
	x.supply += float32(u.supplyC)
	x.kwh += float32(u.powerKW)
}

func (a *accumulator) room(k int, r *room, u *unit, why Reason) {
	x := &a.rooms[k]
	x.air += float32(r.meanAirC)
	x.radiant += float32(r.radiantC())
	x.co2 += float32(r.meanCO2)
	x.ratio += float32(r.meanRatio)
	x.share += float32(r.share)
	x.open += float32(r.openLs + r.throughLs)
	x.plant += float32(r.supplyLs * r.outdoorShare)
	x.codes[u.code]++
	x.reasons[why]++
	if why == ReasonCalledBy {
		x.caller = int8(u.caller)
	}
}

// strongest returns the code that lasted longest, of equals the strongest.
func strongest(minutes *[5]uint8) uint8 {
	best := 0
	for c := range minutes {
		if minutes[c] >= minutes[best] && minutes[c] > 0 {
			best = c
		}
	}
	return uint8(best)
}

// record writes a step's means into the truth.
func (s *simulation) record(i int, acc *accumulator, occupied bool, out *outdoorNow) {
	for k := range s.rooms {
		x, z := &acc.rooms[k], &s.truth.Zones[k]
		airC := x.air / 5
		z.AirC[i] = airC
		z.OperativeC[i] = (airC + x.radiant/5) / 2
		vapour := air.VapourPressureFromRatioPa(float64(x.ratio/5), s.weather.pressurePa)
		z.RHPct[i] = float32(math.Min(100, 100*vapour/air.MagnusSatPressurePa(float64(airC))))
		z.CO2PPM[i] = x.co2 / 5
		z.OpenShare[i] = x.share / 5
		z.OpenLs[i], z.PlantLs[i] = x.open/5, x.plant/5
		z.People[i] = float32(s.rooms[k].people)
		z.Plant[i] = strongest(&x.codes)
		z.Occupied[i] = bit(occupied)
		best := Reason(0)
		for r, n := range x.reasons {
			if n > x.reasons[best] {
				best = Reason(r)
			}
		}
		z.Reason[i], z.CalledBy[i] = best, -1
		if best == ReasonCalledBy {
			z.CalledBy[i] = x.caller
		}
	}
	for k := range s.units {
		x, p := &acc.units[k], &s.truth.Plants[k]
		p.State[i], p.SupplyC[i], p.PowerKW[i] = strongest(&x.codes), x.supply/5, x.kwh/5
	}
}
