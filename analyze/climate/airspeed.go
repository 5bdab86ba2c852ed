package climate

import (
	"math"

	"gonum.org/v1/gonum/interp"

	"sashlog/analyze/comfort"
	"sashlog/analyze/cores"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// SpeedsMS are the steps of air movement; 0.3 m/s is the base of the
// increments of ASHRAE 55 Table 5-13.
var SpeedsMS = [4]float64{0.3, 0.6, 0.9, 1.2}

// Conditions the cooling effect is worked out for; our assumption.
const (
	effectRHPct = 50
	effectClo   = 0.5
	effectLowC  = 16.0
	effectHighC = 36.0
)

// AirSpeed is what each step of air movement would add to still air, without
// the fans that are there.
type AirSpeed struct {
	Zones    []SpeedSteps // as Site.Zones; hours of the zone
	Building SpeedSteps   // of the average occupant
}

// SpeedSteps are the hours of one zone. Index k of the arrays is SpeedsMS[k];
// figures are totals at that speed, so that a step adds the difference to the
// one before it.
type SpeedSteps struct {
	// Openings: a zone without has no suited hours.
	Openings bool
	// InstalledMS is the fan the people have, NaN without one.
	InstalledMS float64
	// SuitedH in still air, and hours added by the increments and by the cooling
	// effect.
	SuitedH                       float64
	AddedIncrementH, AddedEffectH [4]float64
	// WarmH are occupied hours indoors above the upper limit in still air, and
	// those that would be within it; WarmFreeH are those of free-running steps,
	// to which alone the increments apply. NaN without indoor temperature.
	WarmH, WarmFreeH                  float64
	RelievedIncrementH, RelievedSETH  [4]float64
	TemperatureUnknownH, TemperatureH float64
}

// raisedLimits gives, per speed, the still-air limit as a function of it: the
// temperature that feels with moving air as the limit does without. Cooling
// effect on a half-kelvin grid, straight lines between.
func raisedLimits(met float64) [4]interp.PiecewiseLinear {
	var out [4]interp.PiecewiseLinear
	n := int((effectHighC-effectLowC)*2) + 1
	cores.Each(len(SpeedsMS), func(k int) {
		feels, is := []float64{}, []float64{}
		for i := range n {
			t := effectLowC + float64(i)/2
			ce, ok := comfort.CoolingEffectK(comfort.Conditions{AirC: t, RadiantC: t, AirSpeedMS: SpeedsMS[k], RHPct: effectRHPct, Met: met, Clo: effectClo}, comfort.SETOptions{Form: comfort.SETFormB})
			if !ok || len(feels) > 0 && t-ce <= feels[len(feels)-1] {
				continue // too hot for any effect
			}
			feels, is = append(feels, t-ce), append(is, t)
		}
		if len(feels) < 2 || out[k].Fit(feels, is) != nil {
			panic("climate: the cooling effect of moving air has no inverse")
		}
	})
	return out
}

// raisedByEffectC is the temperature that feels at an air speed of SpeedsMS as
// limitC does in still air; limits of 16 °C or less and of 36 °C or more are
// beyond the table and left as they are.
func raisedByEffectC(at *interp.PiecewiseLinear, limitC float64) float64 {
	if !(limitC > effectLowC && limitC < effectHighC-4) {
		return limitC
	}
	return at.Predict(limitC)
}

func airSpeed(in *Input) *AirSpeed {
	a := &AirSpeed{Zones: make([]SpeedSteps, len(in.Site.Zones))}
	bare := *in.Site
	bare.Zones = append([]site.Zone(nil), in.Site.Zones...)
	for z := range bare.Zones {
		bare.Zones[z].FanSpeedMS = math.NaN()
	}
	still := exceedance.NewLimiter(&bare, in.Criteria, in.Grid, in.Outdoor)
	effects := raisedLimits(in.Criteria.MetabolicMet)
	a.weather(in, still, &effects)
	cores.Each(len(a.Zones), func(z int) { a.Zones[z].rooms(in, still, &effects, z) })
	a.sum(in)
	return a
}

// weather counts the suited hours with each limit.
func (a *AirSpeed) weather(in *Input, still *exceedance.Limiter, effects *[4]interp.PiecewiseLinear) {
	// One job per kind of limit and zone's limits; zones of a kind share them.
	kinds := map[*float32][]int{}
	var order []*float32
	for z := range a.Zones {
		a.Zones[z].InstalledMS = in.Site.Zones[z].FanSpeedMS
		if in.Running.Zones[z].NoOpening {
			continue
		}
		a.Zones[z].Openings = true
		k := &still.Upper(z)[0]
		if kinds[k] == nil {
			order = append(order, k)
		}
		kinds[k] = append(kinds[k], z)
	}
	const ways = 1 + 3 + 4 // still air; increments above their base; effects
	cores.Each(len(order)*ways, func(job int) {
		zones := kinds[order[job/ways]]
		upper := still.Upper(zones[0])
		raise := func(l float64) float64 { return l }
		switch way := job % ways; {
		case way >= 4:
			raise = func(l float64) float64 { return raisedByEffectC(&effects[way-4], l) }
		case way > 0:
			raise = func(l float64) float64 { return comfort.WithAirMovementC(l, SpeedsMS[way]) }
		}
		suits := in.headline().Suit(raised(upper, raise))
		for _, z := range zones {
			h, _ := in.countSuits(z, suits)
			s := &a.Zones[z]
			switch way := job % ways; {
			case way >= 4:
				s.AddedEffectH[way-4] = h
			case way > 0:
				s.AddedIncrementH[way] = h
			default:
				s.SuitedH = h
			}
		}
	})
	for z := range a.Zones {
		s := &a.Zones[z]
		if !s.Openings {
			continue
		}
		s.AddedIncrementH[0] = s.SuitedH
		for k := range SpeedsMS {
			s.AddedIncrementH[k] -= s.SuitedH
			s.AddedEffectH[k] -= s.SuitedH
		}
	}
}

// raised applies a rule to limits that stay the same for a day.
func raised(limits []float32, rule func(float64) float64) []float32 {
	out := make([]float32, len(limits))
	for i, l := range limits {
		if i > 0 && l == limits[i-1] {
			out[i] = out[i-1]
			continue
		}
		out[i] = float32(rule(float64(l)))
	}
	return out
}

// rooms counts the occupied hours that are too warm in still air, and those
// that moving air would bring within the limit.
func (s *SpeedSteps) rooms(in *Input, still *exceedance.Limiter, effects *[4]interp.PiecewiseLinear, z int) {
	temp := in.Indoor[z].OperativeC
	if temp == nil {
		s.WarmH, s.WarmFreeH = math.NaN(), math.NaN()
		for k := range SpeedsMS {
			s.RelievedIncrementH[k], s.RelievedSETH[k] = math.NaN(), math.NaN()
		}
		return
	}
	limits := in.Exceedance.Zones[z].Limits
	free, high := limits.Free, limits.HighC
	if !math.IsNaN(in.Site.Zones[z].FanSpeedMS) {
		high = still.Zone(z, free).HighC
	}
	h := in.Grid.StepH()
	last, reach := float32(math.NaN()), [4]float64{}
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if in.Running.Zones[z].Occupied[i] != running.Occupied {
			continue
		}
		if temp[i] != temp[i] || high[i] != high[i] {
			s.TemperatureUnknownH += h
			continue
		}
		s.TemperatureH += h
		t := round3(float64(temp[i]))
		if t <= round3(float64(high[i])) {
			continue
		}
		s.WarmH += h
		if free[i] {
			s.WarmFreeH += h
		}
		if high[i] != last {
			last = high[i]
			for k := range SpeedsMS {
				reach[k] = round3(raisedByEffectC(&effects[k], float64(last)))
			}
		}
		for k, v := range SpeedsMS {
			if free[i] && t <= round3(comfort.WithAirMovementC(float64(high[i]), v)) {
				s.RelievedIncrementH[k] += h
			}
			if t <= reach[k] {
				s.RelievedSETH[k] += h
			}
		}
	}
}

// sum makes the average occupant's hours; zones without a temperature keep
// theirs out of the indoor figures, which then are NaN only when none has one.
func (a *AirSpeed) sum(in *Input) {
	b := &a.Building
	b.Openings, b.InstalledMS = true, math.NaN()
	known := 0.0
	for z := range a.Zones {
		s, w := &a.Zones[z], in.Running.Weights[z]
		if w == 0 {
			continue
		}
		b.SuitedH += w * s.SuitedH
		for k := range SpeedsMS {
			b.AddedIncrementH[k] += w * s.AddedIncrementH[k]
			b.AddedEffectH[k] += w * s.AddedEffectH[k]
		}
		if math.IsNaN(s.WarmH) {
			continue
		}
		known += w
		b.WarmH += w * s.WarmH
		b.WarmFreeH += w * s.WarmFreeH
		b.TemperatureH += w * s.TemperatureH
		b.TemperatureUnknownH += w * s.TemperatureUnknownH
		for k := range SpeedsMS {
			b.RelievedIncrementH[k] += w * s.RelievedIncrementH[k]
			b.RelievedSETH[k] += w * s.RelievedSETH[k]
		}
	}
	for _, v := range []*float64{&b.WarmH, &b.WarmFreeH, &b.TemperatureH, &b.TemperatureUnknownH} {
		*v /= known
	}
	for k := range SpeedsMS {
		b.RelievedIncrementH[k] /= known
		b.RelievedSETH[k] /= known
	}
}
