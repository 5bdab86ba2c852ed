package lag

import (
	"math"
)

// span tries every lag for the days that fit it best.
func (s *search) span() *Finding {
	f := &Finding{Kind: ForATime}
	diff := make([]float64, len(s.Days))
	best := 0
	for i := range s.sum {
		lag := i - s.most
		if math.Abs(float64(lag)*s.BinMin) < leastMin {
			continue
		}
		for d := range diff {
			diff[d] = s.total[d][i] - s.along(d, s.base*s.BinMin)
		}
		if from, to, sum := bestSpan(diff); sum-extra > f.Gain {
			f.From, f.To, f.Gain, best = from, to, sum-extra, i
		}
	}
	if f.To-f.From == 0 {
		return f
	}
	inside, outside := make([]float64, len(s.sum)), make([]float64, len(s.sum))
	for d, row := range s.total {
		to := outside
		if d >= f.From && d < f.To {
			to = inside
		}
		for i, v := range row {
			to[i] += v
		}
	}
	x, _ := peak(inside, float64(best), 1)
	natural, v := peak(outside, float64(s.most), 1)
	if v <= 0 {
		natural = float64(s.most)
	}
	for d := range diff {
		diff[d] = s.total[d][best] - s.along(d, s.base*s.BinMin)
	}
	f.From, f.To = widen(diff, f.From, f.To)
	f.ShiftMin = whole((x - natural) * s.BinMin)
	f.EndShiftMin = f.ShiftMin
	if math.Abs(f.ShiftMin) < leastMin {
		f.Gain = 0
		return f
	}
	f.path = s.flat(f.From, f.To, x*s.BinMin-float64(s.most)*s.BinMin)
	return f
}

// bestSpan is the span of days with the greatest sum (Kadane's method).
func bestSpan(v []float64) (from, to int, sum float64) {
	start, run := 0, 0.0
	for i, x := range v {
		if run <= 0 {
			start, run = i, 0
		}
		run += x
		if run > sum {
			from, to, sum = start, i+1, run
		}
	}
	return from, to, sum
}

// widen takes in neighbouring days that say nothing either way, such as
// weekends, two at most on each side.
func widen(v []float64, from, to int) (int, int) {
	const most = 2
	typical := 0.0
	for _, x := range v[from:to] {
		typical += x
	}
	typical /= float64(to - from)
	quiet := func(d int) bool { return math.Abs(v[d]) < typical/3 }
	for n := 0; n < most && from > 0 && quiet(from-1); n++ {
		from--
	}
	for n := 0; n < most && to < len(v) && quiet(to); n++ {
		to++
	}
	return from, to
}
