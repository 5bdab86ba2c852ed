package indoor

import (
	"fmt"
	"math"
	"slices"

	"sashlog/analyze/comfort"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Combine brings each zone's sensors together, one Zone per Site.Zones.
func Combine(s *site.Site, c criteria.Settings, g *grid.Grid) []Zone {
	zones := make([]Zone, len(s.Zones))
	for z := range zones {
		of := func(q site.Quantity) []float32 { return prefer(s, g, z, q, c.StepCoverageMin) }
		in := &zones[z]
		in.AirTempC = of(site.AirTemp)
		in.ThermostatC = of(site.ThermostatTemp)
		in.RHPct = of(site.Humidity)
		in.CO2PPM = of(site.CO2)
		in.People = of(site.People)
		in.Presence = of(site.Presence)
		in.AirSpeedMS = of(site.AirSpeed)
		in.FanOn = of(site.CeilingFan)
		in.operative(of(site.OperativeTemp), of(site.GlobeTemp), c.AirSpeedMS)
	}
	return zones
}

// prefer averages a zone's sensors of one quantity, step by step from the best
// placement that has a value: in the room, then unknown, by a window, and the
// return duct last.
func prefer(s *site.Site, g *grid.Grid, z int, q site.Quantity, minShare float64) []float32 {
	order := []site.Placement{site.PlacementRoom, site.PlacementUnknown, site.PlacementWindow, site.PlacementReturn}
	var out []float32
	own := false // out is no column of the grid
	for _, place := range order {
		var idx []int
		for i := range s.Points {
			p := &s.Points[i]
			if p.Owner == site.OwnerZone && p.Index == z && p.Quantity == q && p.Placement == place {
				idx = append(idx, i)
			}
		}
		avg := g.AverageOrColumn(idx, minShare)
		if out == nil {
			out = avg
			continue
		}
		if avg != nil && !own {
			out, own = slices.Clone(out), true
		}
		for i := range avg {
			if math.IsNaN(float64(out[i])) {
				out[i] = avg[i]
			}
		}
	}
	return out
}

// operative settles what comfort is judged on: a logged operative temperature,
// else a globe's with the air beside it, else a globe's alone, which in the
// slow air of rooms reads close to it (ISO 7726), else air temperature, else
// the thermostat.
func (z *Zone) operative(logged, globe []float32, stillMS float64) {
	if globe != nil && z.AirTempC != nil {
		z.radiant(globe, stillMS)
	}
	switch {
	case logged != nil:
		z.OperativeC, z.TempNote = logged, "operative temperature as logged"
	case z.RadiantC != nil:
		z.OperativeC, z.TempNote = slices.Clone(globe), fmt.Sprintf("operative temperature from globe and air temperature (a black globe of %.0f mm; %s); "+
			"the globe alone where the air's is missing", comfort.GlobeDiameterM*1000, z.speedNote(stillMS))
		for i, r := range z.RadiantC {
			if t := comfort.OperativeISO(float64(z.AirTempC[i]), float64(r), z.speedAt(i, stillMS)); !math.IsNaN(t) {
				z.OperativeC[i] = float32(t)
			}
		}
	case globe != nil:
		z.OperativeC, z.TempNote = globe, "globe temperature stands for operative temperature (slow air)"
	case z.AirTempC != nil:
		z.OperativeC, z.TempNote = z.AirTempC, "air temperature stands for operative temperature, as if surfaces were as warm"
	case z.ThermostatC != nil:
		z.OperativeC, z.TempNote = z.ThermostatC, "the thermostat's reading stands for operative temperature, as if air and surfaces were as warm"
	}
}

// radiant works out the mean radiant temperature where globe and air are known.
func (z *Zone) radiant(globe []float32, stillMS float64) {
	z.RadiantC = make([]float32, len(globe))
	for i, g := range globe {
		z.RadiantC[i] = float32(comfort.RadiantFromGlobeC(float64(g), float64(z.AirTempC[i]), z.speedAt(i, stillMS), comfort.GlobeDiameterM))
	}
}

func (z *Zone) speedAt(i int, stillMS float64) float64 {
	if z.AirSpeedMS != nil && !math.IsNaN(float64(z.AirSpeedMS[i])) {
		return float64(z.AirSpeedMS[i])
	}
	return stillMS
}

func (z *Zone) speedNote(stillMS float64) string {
	if z.AirSpeedMS != nil {
		return fmt.Sprintf("air speed as logged, else %g m/s", stillMS)
	}
	return fmt.Sprintf("air at %g m/s", stillMS)
}
