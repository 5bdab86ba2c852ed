package changeover

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

func summarise(minutes []float64, cut int) Spells {
	v := sortedCopy(minutes)
	s := Spells{N: len(v), CutShort: cut, MedianMin: quantile(v, 0.5), ShortMin: quantile(v, 0.1), LongMin: quantile(v, 0.9)}
	for _, m := range v {
		if m < 30 {
			s.UnderHalfHour++
		}
		if m < 15 {
			s.UnderQuarterH++
		}
	}
	return s
}

// rhythm fills spells, switches and the patterns of week and year.
func (s *subject) rhythm(out *Subject, cal *calendar.Calendar, stepS int64) {
	out.Open = summarise(s.spells(1, stepS))
	out.Closed = summarise(s.spells(0, stepS))
	var open, known [7]float64
	var openM, knownM [12]float64
	switches := 0
	for _, day := range cal.Days {
		used, seen, n := 0, 0, 0
		for i := max(1, day.FromStep); i < day.ToStep; i++ {
			if !s.use[i] {
				continue
			}
			used++
			if s.state[i] < 0 {
				continue
			}
			seen++
			w, m := day.Weekday, day.Date.Month-1
			known[w]++
			knownM[m]++
			if s.state[i] == 1 {
				open[w]++
				openM[m]++
			}
			if s.use[i-1] && s.state[i-1] >= 0 && s.state[i-1] != s.state[i] {
				n++
			}
		}
		if used > 0 && 2*seen >= used {
			out.Days++
			switches += n
			out.SwitchesMost = math.Max(out.SwitchesMost, float64(n))
		}
	}
	out.SwitchesPerDay = math.NaN()
	if out.Days > 0 {
		out.SwitchesPerDay = float64(switches) / float64(out.Days)
	}
	for w := range open {
		out.OpenShareWeekday[w] = open[w] / known[w] // NaN of none
	}
	for m := range openM {
		out.OpenShareMonth[m] = openM[m] / knownM[m]
	}
}

func delayOf(minutes []float64) Delay {
	v := sortedCopy(minutes)
	d := Delay{N: len(v), MedianMin: quantile(v, 0.5), Slow90th: quantile(v, 0.9)}
	for _, m := range v {
		if math.IsInf(m, 1) {
			d.Never++
		}
	}
	return d
}

// delays fills how fast a zone follows the weather, and its unit's stops.
func (in *Input) delays(z int, s *subject, out *Subject) {
	suit := in.Potential.Zones[z].Suit
	step := float64(in.Grid.StepS) / 60
	// follows counts from step i on until the zone is in a state, while going says
	// that the occasion lasts; negative when knowledge ends first.
	follows := func(i int, state int8, going func(k int) bool) float64 {
		for k := i; k < in.Grid.PeriodTo; k++ {
			switch {
			case !s.use[k] || !going(k):
				return math.Inf(1)
			case s.state[k] < 0:
				return -1
			case s.state[k] == state:
				return float64(k-i) * step
			}
		}
		return -1
	}
	var open, closed, released []float64
	keep := func(list *[]float64, v float64) {
		if v >= 0 {
			*list = append(*list, v)
		}
	}
	plant := in.Running.Zones[z].Plant
	off := uint8(site.PlantOff)
	for i := in.Grid.PeriodFrom + 1; i < in.Grid.PeriodTo; i++ {
		if !s.use[i] || !s.use[i-1] {
			continue
		}
		suits := func(k int) bool { return suit != nil && suit[k] == potential.Suited }
		fails := func(k int) bool {
			return suit != nil && suit[k] != potential.Suited && suit[k] != potential.SuitUnknown
		}
		switch {
		case suits(i) && fails(i-1) && s.state[i-1] == 0:
			keep(&open, follows(i, 1, suits))
		case fails(i) && suits(i-1) && s.state[i-1] == 1:
			keep(&closed, follows(i, 0, fails))
		}
		if plant[i] == off && plant[i-1] != off && plant[i-1] != running.PlantUnknown && s.state[i-1] == 0 {
			keep(&released, follows(i, 1, func(k int) bool { return plant[k] == off }))
		}
	}
	out.ToOpen, out.ToClose, out.Released = delayOf(open), delayOf(closed), delayOf(released)
}
