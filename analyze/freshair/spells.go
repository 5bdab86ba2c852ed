package freshair

import (
	"math"

	"sashlog/analyze/running"
)

// Rules of a usable day of balance and of a usable build-up; our assumptions.
const (
	spellLeastH = 6.0
	stateLeastH = 1.0
	dayR2Min    = 0.80
	// Days fitted at most, spread over the period.
	countedDaysMost   = 120
	scheduledDaysMost = 30
	dayLogSEMax       = 0.30
	riseLeastH        = 0.5
	risePointsMin     = 6
	riseR2Min         = 0.95
	riseLogSEMax      = 0.30
	risePeopleSteady  = 0.15 // of the mean number, by which it may vary
)

// balances fits the CO2 of whole days with the people there, one rate for each
// running state of the day. why is not empty where nothing could be tried.
func balances(in *Input, z int, counted bool) (byState [running.NumStates][]measured, why string) {
	zone := &in.Site.Zones[z]
	volume := zone.AreaM2 * zone.HeightM
	switch {
	case !(volume > 0):
		return byState, "floor area or height are not given"
	case !counted && !(zone.People > 0):
		return byState, "people are neither counted nor given"
	}
	people := func(i int) float64 {
		if counted {
			return float64(in.Indoor[z].People[i])
		}
		switch in.Running.Zones[z].Occupied[i] {
		case running.Occupied:
			return zone.People
		case running.Vacant:
			return 0
		}
		return math.NaN()
	}
	// Usual people are the most there can be: the rate is then an upper value.
	more := math.Log(1 + in.Criteria.CO2PerPersonDoubtPct/100)
	fewer, most := more, countedDaysMost
	if !counted {
		fewer, most = math.Hypot(more, math.Log(1-in.Criteria.PeopleDoubtPct/100)), scheduledDaysMost
	}
	state := in.Running.Zones[z].State
	var spells []span
	for _, day := range in.days() {
		for i := day.from; i < day.to; {
			j, anybody := i, false
			for j < day.to && state[j] != running.Unknown {
				n := people(j)
				if math.IsNaN(n) {
					break
				}
				anybody = anybody || n > 0
				j++
			}
			if anybody && float64(j-i)*in.Grid.StepH() >= spellLeastH {
				spells = append(spells, span{i, j})
			}
			i = j + 1
		}
	}
	// Spread evenly, so that every season counts.
	for k := range min(len(spells), most) {
		fitSpell(in, z, spells[k*len(spells)/min(len(spells), most)], people, volume, fewer, more, &byState)
	}
	return byState, ""
}

// days are the local days of the period.
func (in *Input) days() []span {
	g := in.Grid
	var out []span
	if in.Calendar != nil {
		for _, d := range in.Calendar.Days {
			if from, to := max(d.FromStep, g.PeriodFrom), min(d.ToStep, g.PeriodTo); to > from {
				out = append(out, span{from, to})
			}
		}
		return out
	}
	day := max(1, int(24/g.StepH()))
	for from := g.PeriodFrom; from < g.PeriodTo; from += day {
		out = append(out, span{from, min(from+day, g.PeriodTo)})
	}
	return out
}

func fitSpell(in *Input, z int, at span, people func(int) float64, volumeM3, fewer, more float64, byState *[running.NumStates][]measured) {
	run, co2 := &in.Running.Zones[z], in.Indoor[z].CO2PPM
	s := Spell{StepH: in.Grid.StepH(), VolumeM3: volumeM3}
	regime := [running.NumStates]int{-1, -1, -1, -1, -1}
	var states []running.State
	var hours []float64
	peak := 0.0
	for i := at.from; i < at.to; i++ {
		state := run.State[i]
		if regime[state] < 0 {
			regime[state] = len(states)
			states, hours = append(states, state), append(hours, 0)
		}
		r := regime[state]
		n, outdoorPPM, c := people(i), in.Outdoor.OutdoorCO2(i), float64(co2[i])
		if !math.IsNaN(c) {
			hours[r] += s.StepH
			peak = math.Max(peak, c-outdoorPPM)
		}
		s.PPM, s.OutdoorPPM = append(s.PPM, c), append(s.OutdoorPPM, outdoorPPM)
		s.GenerationLs, s.Regime = append(s.GenerationLs, n*in.Criteria.CO2PerPersonLs), append(s.Regime, r)
	}
	s.Regimes = len(states)
	if peak < in.Criteria.DecayStartAbovePPM {
		return
	}
	f, err := s.Fit()
	if err != nil || f.R2 < dayR2Min {
		return
	}
	off := in.offsetDoubtPPM(z)
	for r, state := range states {
		a := f.AirChangePerH[r]
		if hours[r] < stateLeastH || !(f.LogSE[r] <= dayLogSEMax) || a <= rateLeastPerH*1.01 || a >= rateMostPerH*0.99 {
			continue
		}
		shift := f.PerOutdoorPPM[r] * off
		byState[state] = append(byState[state], measured{a, f.LogSE[r], math.Hypot(f.PerLogGeneration[r]*fewer, shift), math.Hypot(f.PerLogGeneration[r]*more, shift), at})
	}
}

// buildUps fits the rises of CO2 while constant people are counted. why is not
// empty where nothing could be tried.
func buildUps(in *Input, z int) (byState [running.NumStates][]measured, why string) {
	room, run, g := &in.Indoor[z], &in.Running.Zones[z], in.Grid
	if zone := &in.Site.Zones[z]; !(zone.AreaM2*zone.HeightM > 0) {
		return byState, "floor area or height are not given"
	}
	if room.People == nil {
		return byState, "people are not counted: those who come one by one look like slow air"
	}
	for i := g.PeriodFrom; i < g.PeriodTo; {
		n := float64(room.People[i])
		if !(n > 0.5) || run.State[i] == running.Unknown {
			i++
			continue
		}
		j := i
		for j < g.PeriodTo && math.Abs(float64(room.People[j])-n) <= risePeopleSteady*n && steady(run, i, j) {
			j++
		}
		if float64(j-i)*g.StepH() >= riseLeastH {
			if m, ok := rise(in, z, span{i, j}); ok {
				byState[run.State[i]] = append(byState[run.State[i]], m)
			}
		}
		i = max(j, i+1)
	}
	return byState, ""
}

// rise fits the rate to one rise with the CO2 the counted people give off. A
// fit that leaves their CO2 open as well is only clear where air changes fast,
// so the rises it can use would make every room look well aired.
func rise(in *Input, z int, at span) (measured, bool) {
	zone := &in.Site.Zones[z]
	s := Spell{StepH: in.Grid.StepH(), VolumeM3: zone.AreaM2 * zone.HeightM, Regimes: 1}
	first, last, known := math.NaN(), math.NaN(), 0
	for i := at.from; i < at.to; i++ {
		c := float64(in.Indoor[z].CO2PPM[i])
		if !math.IsNaN(c) {
			if known == 0 {
				first = c
			}
			last, known = c, known+1
		}
		s.PPM, s.OutdoorPPM, s.Regime = append(s.PPM, c), append(s.OutdoorPPM, in.Outdoor.OutdoorCO2(i)), append(s.Regime, 0)
		s.GenerationLs = append(s.GenerationLs, float64(in.Indoor[z].People[i])*in.Criteria.CO2PerPersonLs)
	}
	if known < risePointsMin || !(last-first >= in.Criteria.DecayStartAbovePPM) {
		return measured{}, false
	}
	f, err := s.Fit()
	if err != nil || f.R2 < riseR2Min || !(f.LogSE[0] <= riseLogSEMax) || f.AirChangePerH[0] <= rateLeastPerH*1.01 || f.AirChangePerH[0] >= rateMostPerH*0.99 {
		return measured{}, false
	}
	people := f.PerLogGeneration[0] * math.Log(1+in.Criteria.CO2PerPersonDoubtPct/100)
	shift := math.Hypot(people, f.PerOutdoorPPM[0]*in.offsetDoubtPPM(z))
	return measured{f.AirChangePerH[0], f.LogSE[0], shift, shift, at}, true
}
