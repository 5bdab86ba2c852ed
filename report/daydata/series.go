package daydata

import (
	"math"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
)

// source reads a quantity of a zone at a step of the grid: a mean quantity, or
// the code of a state. nil means never logged.
type source func(step int) float64

// quantity is a series and where it comes from. A code is that of the state the
// longest part of a coarser step was spent in; other values are means.
type quantity struct {
	Series
	code bool
	of   func(p *packer, z int) source
}

// zoneSeries are the series of a zone's block.
var zoneSeries = []quantity{
	{Series{"temp_c", 0.1}, false, func(p *packer, z int) source { return plain(p.in.Results.Indoor[z].OperativeC) }},
	{Series{"comfort_low_c", 0.1}, false, func(p *packer, z int) source {
		if z >= len(p.in.Results.Exceedance.Zones) {
			return nil
		}
		return plain(p.in.Results.Exceedance.Zones[z].Limits.LowC)
	}},
	{Series{"comfort_high_c", 0.1}, false, func(p *packer, z int) source {
		if z >= len(p.in.Results.Exceedance.Zones) {
			return nil
		}
		return plain(p.in.Results.Exceedance.Zones[z].Limits.HighC)
	}},
	{Series{"suited_high_c", 0.1}, false, func(p *packer, z int) source {
		if z >= len(p.in.Results.Exceedance.Zones) || p.in.Results.Running.Zones[z].NoOpening {
			return nil
		}
		upper := plain(p.in.Results.Exceedance.Zones[z].Limits.UpperOfDayC)
		if upper == nil {
			return nil
		}
		return func(i int) float64 { return upper(i) - p.in.Criteria.RiseK }
	}},
	{Series{"rh_pct", 1}, false, func(p *packer, z int) source { return plain(p.in.Results.Indoor[z].RHPct) }},
	{Series{"co2_ppm", 10}, false, func(p *packer, z int) source { return plain(p.in.Results.Indoor[z].CO2PPM) }},
	{Series{"co2_limit_ppm", 10}, false, func(p *packer, z int) source { return p.hourly(z, hours.VCO2LimitPPM) }},
	{Series{"open_share", 0.05}, false, func(p *packer, z int) source {
		if !p.in.Results.Running.Zones[z].HasContacts {
			return nil
		}
		return plain(p.in.Results.Running.Zones[z].OpenShare)
	}},
	{Series{"people", 0.1}, false, func(p *packer, z int) source { return plain(p.in.Results.Indoor[z].People) }},
	{Series{"occupied", 1}, true, func(p *packer, z int) source {
		o := p.in.Results.Running.Zones[z].Occupied
		return func(i int) float64 {
			if o[i] == running.OccupancyUnknown {
				return unknown()
			}
			return float64(o[i])
		}
	}},
	{Series{"running", 1}, true, func(p *packer, z int) source {
		st := p.in.Results.Running.Zones[z].State
		return func(i int) float64 { return float64(st[i]) }
	}},
	{Series{"plant", 1}, true, func(p *packer, z int) source {
		r := &p.in.Results.Running.Zones[z]
		if !r.HasPlantEvidence {
			return nil
		}
		return func(i int) float64 {
			if r.Plant[i] == running.PlantUnknown {
				return unknown()
			}
			return float64(r.Plant[i])
		}
	}},
	{Series{"weather", 1}, true, func(p *packer, z int) source {
		if z >= len(p.in.Results.Potential.Zones) || p.in.Results.Potential.Zones[z].Suit == nil {
			return nil
		}
		suit := p.in.Results.Potential.Zones[z].Suit
		return func(i int) float64 { return float64(suit[i]) }
	}},
	{Series{"outcome", 1}, true, func(p *packer, z int) source {
		return func(i int) float64 { return float64(p.in.Outcome(z, i)) }
	}},
}

// outdoorSeries are the series of a month's weather.
var outdoorSeries = []quantity{
	{Series{"outdoor_temp_c", 0.1}, false, func(p *packer, _ int) source { return plain(p.in.Results.Outdoor.TempC) }},
	{Series{"outdoor_rh_pct", 1}, false, func(p *packer, _ int) source { return plain(p.in.Results.Outdoor.RHPct) }},
	{Series{"wind_m_s", 0.1}, false, func(p *packer, _ int) source { return plain(p.in.Results.Outdoor.WindMS) }},
	{Series{"rain_mm_h", 0.1}, false, func(p *packer, _ int) source { return plain(p.in.Results.Outdoor.RainMMH) }},
}

func plain(v []float32) source {
	if v == nil {
		return nil
	}
	return func(i int) float64 { return float64(v[i]) }
}

// hourly reads a column of the hourly record by step of the grid.
func (p *packer) hourly(z int, v hours.Val) source {
	rec := p.in.Results.Hours
	h := 0
	return func(i int) float64 {
		for h+1 < len(rec.Hours) && rec.Hours[h].ToStep <= i {
			h++
		}
		for h > 0 && rec.Hours[h].FromStep > i {
			h--
		}
		if len(rec.Hours) == 0 {
			return unknown()
		}
		return float64(rec.Values[v][rec.Row(z, h)])
	}
}

// columns packs the quantities of a zone from one step to another.
func (p *packer) columns(list []quantity, z, from, to int) []column {
	out := make([]column, len(list))
	for k, q := range list {
		if of := q.of(p, z); of != nil && q.code {
			out[k] = p.codes(of, from, to)
		} else if of != nil {
			out[k] = p.means(of, q.Scale, from, to)
		}
	}
	return out
}

// grids gives the steps of the grid that make step i of the data.
func (p *packer) grids(i int) (from, to int) {
	from = p.in.Grid.PeriodFrom + i*p.every
	return from, min(from+p.every, p.in.Grid.PeriodTo)
}

// means packs the mean of the known values of each step.
func (p *packer) means(of source, scale float64, from, to int) column {
	out := make(column, 0, to-from)
	for i := from; i < to; i++ {
		a, b := p.grids(i)
		sum, n := 0.0, 0
		for k := a; k < b; k++ {
			if v := of(k); !math.IsNaN(v) {
				sum += v
				n++
			}
		}
		out = append(out, packed(sum/float64(n), scale))
	}
	return out
}

// codes packs the code that lasted longest in each step, the first of several.
func (p *packer) codes(of source, from, to int) column {
	out := make(column, 0, to-from)
	for i := from; i < to; i++ {
		a, b := p.grids(i)
		if b-a == 1 {
			out = append(out, packed(of(a), 1))
			continue
		}
		best, most := unknown(), 0
		for k := a; k < b; k++ {
			v, n := of(k), 0
			for j := k; j < b; j++ {
				if w := of(j); w == v || math.IsNaN(w) && math.IsNaN(v) {
					n++
				}
			}
			if n > most {
				best, most = v, n
			}
			if 2*n >= b-a {
				break
			}
		}
		out = append(out, packed(best, 1))
	}
	return out
}

// packed is a value in units of the scale; a value no quantity of a building
// has is unknown.
func packed(v, scale float64) int32 {
	u := math.RoundToEven(v / scale)
	if !(math.Abs(u) < 1e8) {
		return missing
	}
	return int32(u)
}

func names(list []quantity) []Series {
	out := make([]Series, len(list))
	for i := range list {
		out[i] = list[i].Series
	}
	return out
}
