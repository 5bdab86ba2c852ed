package predicted

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"

	"sashlog/analyze/comfort"
	"sashlog/analyze/cores"
	"sashlog/analyze/running"
	"sashlog/internal/physics/air"
)

// Sense works out the predictions of every zone.
func Sense(in Input) *Result {
	r := &Result{Zones: make([]Zone, len(in.Site.Zones)), SETEdition: edition}
	o := options
	if e := in.Site.ElevationM; !math.IsNaN(e) {
		o.PressurePa = air.PressureAtPa(e)
	}
	table := comfort.NewTable(in.Criteria.MetabolicMet, o)
	six := make([]float64, len(in.Outdoor.Days))
	for d := range six {
		six[d] = in.Outdoor.Days[d].SixAMC
	}
	clo := clothing(in.Criteria, six)
	cores.Each(len(r.Zones), func(z int) {
		room := &Room{in: &in.Indoor[z], dayOf: in.Outdoor.DayOf, clo: clo, met: in.Criteria.MetabolicMet,
			stillMS: in.Criteria.AirSpeedMS, fanMS: in.Site.Zones[z].FanSpeedMS, table: table}
		r.Zones[z] = senseZone(&in, z, room)
	})
	return r
}

func senseZone(in *Input, z int, room *Room) Zone {
	n, h := in.Grid.N, in.Grid.StepH()
	out := Zone{Room: room, Vote: make([]float32, n), Elevated: make([]float32, n), Outside: make([]bool, n)}
	nan := float32(math.NaN())
	for i := range out.Vote {
		out.Vote[i], out.Elevated[i] = nan, nan
	}
	s := &out.Summary
	s.OutsideOf = map[string]float64{}
	var set []float64
	var votes, elevated, effects float64
	occupied := in.Running.Zones[z].Occupied
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if occupied[i] != running.Occupied {
			continue
		}
		c, known := room.at(i)
		s.Draught.add(room, i, &c, known, h)
		if !known {
			s.UnknownH += h
			continue
		}
		addIf(&s.AssumedHumidityH, c.assumedRH, h)
		addIf(&s.AssumedSpeedH, c.assumedSpeed, h)
		addIf(&s.AssumedRadiantH, c.assumedRadiant, h)
		set = append(set, room.table.SET(c.Conditions))
		vote := comfort.PMV(c.Conditions)
		if !comfort.PMVInRange(c.Conditions, vote) {
			s.OutsideH += h
			with, _, _ := room.elevated(&c)
			out.Vote[i], out.Elevated[i], out.Outside[i] = float32(vote), float32(with), true
			for _, what := range comfort.PMVOutOfRange(c.Conditions, vote) {
				s.OutsideOf[what] += h
			}
			continue
		}
		s.KnownH += h
		with, effectK, limited := room.elevated(&c)
		out.Vote[i], out.Elevated[i] = float32(vote), float32(with)
		votes += vote * h
		elevated += with * h
		if c.roomSpeedMS > room.stillMS {
			s.MovingH += h
			addIf(&s.LimitedH, limited, h)
			addIf(&s.NoEffectH, math.IsNaN(effectK), h)
			if !math.IsNaN(effectK) {
				effects += effectK * h
			}
		}
	}
	s.MeanVote, s.MeanElevated, s.MeanCoolingK = votes/s.KnownH, elevated/s.KnownH, effects/s.MovingH // NaN without hours
	s.Draught.MeanPct /= s.Draught.JudgedH
	s.SETMeanC, s.SET5C, s.SET95C = math.NaN(), math.NaN(), math.NaN()
	if len(set) > 0 {
		slices.Sort(set)
		s.SETMeanC = stat.Mean(set, nil)
		s.SET5C, s.SET95C = stat.Quantile(0.05, stat.Empirical, set, nil), stat.Quantile(0.95, stat.Empirical, set, nil)
	}
	return out
}

func addIf(to *float64, yes bool, h float64) {
	if yes {
		*to += h
	}
}

// turbulencePct stands for turbulence, which is not logged. ISO 7730 (from
// memory).
const turbulencePct = 40

// add counts the draught of an occupied step.
func (d *Draught) add(room *Room, i int, c *condition, known bool, h float64) {
	if room.in.AirSpeedMS == nil {
		return
	}
	speed := valueAt(room.in.AirSpeedMS, i)
	switch {
	case !known || math.IsNaN(speed):
		d.UnknownH += h
		return
	case !comfort.DraughtInRange(c.AirC, speed, turbulencePct):
		d.OutsideH += h
		return
	}
	rate := comfort.DraughtRate(c.AirC, speed, turbulencePct)
	d.JudgedH += h
	d.MeanPct += rate * h
	for k, limit := range DraughtLimitsPct {
		addIf(&d.AboveH[k], rate > limit, h)
	}
}
