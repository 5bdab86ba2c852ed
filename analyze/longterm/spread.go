package longterm

import (
	"cmp"
	"math"
	"slices"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// peopleOf weights the zones by their people, or equally where any number is
// missing.
func peopleOf(s *site.Site) (weights []float64, by string) {
	weights = make([]float64, len(s.Zones))
	for z := range weights {
		if !(s.Zones[z].People > 0) {
			for k := range weights {
				weights[k] = 1
			}
			return weights, "zones count equally, since the number of people is not given for all"
		}
		weights[z] = s.Zones[z].People
	}
	return weights, "zones count by their people"
}

func spreadOf(in *Input) Spread {
	weights, by := peopleOf(in.Site)
	out := Spread{WeightedBy: by, PersonWarmShare: math.NaN(), PersonCoolShare: math.NaN()}
	h := in.Grid.StepH()
	zones := make([]HiddenZone, len(weights))
	side := make([]int8, len(weights)) // of each zone in a step: 1 warm, -1 cool
	var all, unknown, warm, cool float64
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		var known, outside, meanT, meanLow, meanHigh float64
		for z, w := range weights {
			side[z] = 0
			if in.Running.Zones[z].Occupied[i] != running.Occupied {
				continue
			}
			all += w
			lim := &in.Exceedance.Zones[z].Limits
			t, low, high := math.NaN(), float64(lim.LowC[i]), float64(lim.HighC[i])
			if in.Indoor[z].OperativeC != nil {
				t = float64(in.Indoor[z].OperativeC[i])
			}
			if math.IsNaN(t) || math.IsNaN(high) {
				unknown += w
				continue
			}
			known += w
			meanT += w * t
			meanHigh += w * high
			meanLow += w * low // NaN where no lower limit exists: then none of the mean
			switch {
			case milli(t) > milli(high):
				side[z] = 1
				warm += w
				outside += w
			case milli(t) < milli(low):
				side[z] = -1
				cool += w
				outside += w
			}
		}
		if known == 0 {
			continue
		}
		out.KnownH += h
		if milli(meanT/known) > milli(meanHigh/known) || milli(meanT/known) < milli(meanLow/known) {
			continue
		}
		out.AverageInsideH += h
		if outside < hiddenShare*known-1e-9 {
			continue
		}
		out.HiddenH += h
		for z := range zones {
			switch side[z] {
			case 1:
				zones[z].WarmH += h
			case -1:
				zones[z].CoolH += h
			}
		}
	}
	out.PersonOutsideShare = exceedance.Range{Value: math.NaN(), Low: math.NaN(), High: math.NaN()}
	if all > 0 {
		out.PersonOutsideShare = exceedance.Range{Value: (warm + cool) / (all - unknown), Low: (warm + cool) / all, High: (warm + cool + unknown) / all}
		out.PersonWarmShare, out.PersonCoolShare = warm/(all-unknown), cool/(all-unknown)
	}
	for z, o := range zones {
		if o.WarmH+o.CoolH > 0 {
			o.Zone, o.PersonH = z, (o.WarmH+o.CoolH)*in.Site.Zones[z].People
			out.Hidden = append(out.Hidden, o)
		}
	}
	slices.SortStableFunc(out.Hidden, func(a, b HiddenZone) int {
		return cmp.Compare((b.WarmH+b.CoolH)*weights[b.Zone], (a.WarmH+a.CoolH)*weights[a.Zone])
	})
	return out
}
