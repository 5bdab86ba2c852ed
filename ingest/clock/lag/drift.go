package lag

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
)

// A drift is looked for on blocks of a week, as a straight line from some week
// on, to the end of the record or until the clock was set right.
const (
	blockDays = 7
	fineMin   = 5.0
	fineMost  = 360.0 // minutes either way
	monthDays = 30.4375
	blocks    = 8 // least length of a drift
	// naturalMost is the lag a room may have to others by nature, minutes.
	naturalMost = 20.0
)

var slopes = []float64{1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10, 12, 15, 20, 25, 30} // min per month

// weeks sums rows of days into blocks, read every fineMin.
func weeks(rows [][]float64, most int, binMin float64) [][]float64 {
	n := len(rows) / blockDays
	out := make([][]float64, n)
	cells := int(2*fineMost/fineMin) + 1
	sum := make([]float64, 2*most+1)
	for b := range out {
		clear(sum)
		for _, row := range rows[b*blockDays : (b+1)*blockDays] {
			for i, v := range row {
				sum[i] += v
			}
		}
		out[b] = make([]float64, cells)
		for k := range out[b] {
			out[b][k] = at(sum, (float64(k)*fineMin-fineMost)/binMin+float64(most))
		}
	}
	return out
}

func cell(m float64) int { return int(math.Round((m + fineMost) / fineMin)) }

// line is a shift of a minutes that grows by slope per block in [from, to).
type line struct {
	a, slope float64
	from, to int
}

func (l line) at(b float64) float64 {
	if b < float64(l.from) || b >= float64(l.to) {
		return l.a
	}
	return l.a + l.slope*(b-float64(l.from)+0.5)
}

func (l line) score(fine [][]float64) float64 {
	s := 0.0
	for b, row := range fine {
		if k := cell(l.at(float64(b))); k >= 0 && k < len(row) {
			s += row[k]
		}
	}
	return s
}

func (s *search) drift() *Finding {
	f := &Finding{Kind: Drift}
	fine := weeks(s.total, s.most, s.BinMin)
	if len(fine) < blocks {
		return f
	}
	flat := math.Inf(-1) // the best constant
	for m := -fineMost; m <= fineMost; m += fineMin {
		flat = max(flat, line{a: m}.score(fine))
	}
	best, top := line{}, math.Inf(-1)
	for from := 0; from+blocks <= len(fine); from += 4 {
		ends := []int{len(fine)}
		for to := from + blocks; to+4 <= len(fine); to += 8 {
			ends = append(ends, to)
		}
		for _, to := range ends {
			for _, slope := range slopes {
				per := slope * blockDays / monthDays
				if per*float64(to-from) < driftLeast {
					continue
				}
				for _, sign := range []float64{-1, 1} {
					for a := -naturalMost; a <= naturalMost; a += fineMin {
						l := line{a, sign * per, from, to}
						if v := l.score(fine); v > top {
							best, top = l, v
						}
					}
				}
			}
		}
	}
	if math.IsInf(top, -1) {
		return f
	}
	best, top = refine(best, top, fine)
	if top-flat < sureDays {
		return f
	}
	f.Gain = top - line{a: s.base * s.BinMin}.score(fine) - extra
	grows := best.slope * float64(best.to-best.from)
	f.From, f.To = best.from*blockDays, best.to*blockDays
	if best.to == len(fine) {
		f.To = len(s.Days)
	}
	f.ShiftMin = 0
	f.EndShiftMin = math.Round(grows)
	f.path = make([]float64, len(s.Days))
	for d := range f.path {
		b := float64(d)/blockDays - 0.5
		if b+0.5 >= float64(best.from) && (b+0.5 < float64(best.to) || best.to == len(fine)) {
			f.path[d] = best.a + best.slope*(b-float64(best.from)+0.5)
		} else {
			f.path[d] = best.a
		}
	}
	if math.Abs(f.EndShiftMin) < driftLeast {
		f.Gain = 0
	}
	return f
}

// refine walks to the best line near one.
func refine(l line, top float64, fine [][]float64) (line, float64) {
	for _, step := range []float64{0.5, 0.25, 0.1} {
		for moved := true; moved; {
			moved = false
			for _, n := range []line{
				{l.a + 5*step, l.slope, l.from, l.to}, {l.a - 5*step, l.slope, l.from, l.to},
				{l.a, l.slope * (1 + step/5), l.from, l.to}, {l.a, l.slope * (1 - step/5), l.from, l.to},
				{l.a, l.slope, l.from + 1, l.to}, {l.a, l.slope, l.from - 1, l.to},
				// The same line, begun a week sooner.
				{l.a - l.slope, l.slope, l.from - 1, l.to}, {l.a - 2*l.slope, l.slope, l.from - 2, l.to},
				{l.a, l.slope, l.from, l.to + 1}, {l.a, l.slope, l.from, l.to - 1},
			} {
				if n.from < 0 || n.to > len(fine) || n.to-n.from < blocks || math.Abs(n.a) > naturalMost {
					continue
				}
				if v := n.score(fine); v > top+1e-9 {
					l, top, moved = n, v, true
				}
			}
		}
	}
	return l, top
}

// judgeDrift asks one witness whether it drifts along, each allowed a lag that
// is natural to it.
func (s *search) judgeDrift(f *Finding, w *Witness) {
	rows := make([][]float64, len(w.plane.at))
	for d, row := range w.plane.at {
		rows[d] = make([]float64, len(row))
		for i, v := range row {
			rows[d][i] = v * w.plane.scale
		}
	}
	fine := weeks(rows, s.most, s.BinMin)
	mid := func(b int) float64 { return f.path[b*blockDays+blockDays/2] }
	own := func(path func(b int) float64) (top, a float64) {
		top = math.Inf(-1)
		for m := -45.0; m <= 45; m += fineMin {
			v := 0.0
			for b, row := range fine {
				if k := cell(m + path(b)); k >= 0 && k < len(row) {
					v += row[k]
				}
			}
			if v > top {
				top, a = v, m
			}
		}
		return top, a
	}
	with, a := own(mid)
	without, c := own(func(int) float64 { return 0 })
	var gains []float64
	for b, row := range fine {
		k, l := cell(a+mid(b)), cell(c)
		if k >= 0 && k < len(row) && slices.Max(row) > 0 {
			gains = append(gains, row[k]-row[l])
		}
	}
	mean, sd := stat.MeanStdDev(gains, nil)
	t := mean / sd * math.Sqrt(float64(len(gains)))
	r, _ := w.plane.fit(0, len(s.Days), func(d int) float64 { return (f.path[d] + a) / s.BinMin })
	r0, _ := w.plane.fit(0, len(s.Days), func(int) float64 { return c / s.BinMin })
	switch {
	case with > without && t >= 2 && r >= fitLeast:
		f.Agree = append(f.Agree, w)
		if r > f.Fit {
			f.Fit, f.FitWithout = r, r0
		}
	case without-with > 0.5:
		f.Against = append(f.Against, w)
	}
}
