package changeover

import (
	"math"
	"math/rand/v2"
	"sort"
)

// surface is the log-likelihood of every day for other values of one limit,
// the rest of the model as fitted: [day*cols+col]. Intervals and dates of
// change come from it, by drawing days or by cutting between them.
type surface struct {
	days   []int32 // indexes into the calendar
	levelC []float64
	blurs  int // columns per level
	ll     []float64
	// informs[d]: the day has something to say about the level.
	informs []bool
}

func (s *surface) cols() int { return len(s.levelC) * s.blurs }

// levelsAround are the levels looked at: fine near the fitted one.
func levelsAround(levelC float64, fineK, coarseK float64) []float64 {
	var out []float64
	for k := -fineSteps; k <= fineSteps; k++ {
		out = append(out, levelC+float64(k)*fineK)
	}
	for d := fineSteps*fineK + coarseK; d <= 3.001; d += coarseK {
		out = append(out, levelC-d, levelC+d)
	}
	sort.Float64s(out)
	return out
}

const fineSteps = 16

// columnBlurs are the blurs looked at: as sharp as can be (a limit that changed
// looks blurred only over both parts), as fitted, and more.
func columnBlurs(blurK float64) []float64 { return []float64{1.1 * sharpestK, blurK, 1.7 * blurK} }

// surfaceOf works the surface of edge j out.
func (m *model) surfaceOf(rows *moments, reasons []reason, j int) *surface {
	e := m.edges[j]
	s := &surface{levelC: levelsAround(e.levelC, math.Max(0.04, e.blurK/6), 0.4), blurs: len(columnBlurs(e.blurK))}
	sign := reasons[e.reason].sign()
	q := m.openOdds(rows, reasons)
	cols := s.cols()
	var day []float64
	lowest, highest := s.levelC[0], s.levelC[len(s.levelC)-1]
	reach := 8 * 1.7 * e.blurK
	blurs := columnBlurs(e.blurK)
	near := math.Max(1, 3*e.blurK)
	for i := range q {
		if n := len(s.days); n == 0 || s.days[n-1] != rows.day[i] {
			s.days = append(s.days, rows.day[i])
			s.informs = append(s.informs, false)
			s.ll = append(s.ll, make([]float64, cols)...)
			day = s.ll[len(s.ll)-cols:]
		}
		x := float64(rows.x[e.reason][i])
		if math.IsNaN(x) {
			continue
		}
		// Far inside every level the limit does nothing: the row is a constant.
		if (sign > 0 && x < lowest-reach) || (sign < 0 && x > highest+reach) {
			continue
		}
		if rows.from != nil && rows.from[e.reason][i] == rows.x[e.reason][i] {
			continue
		}
		if math.Abs(x-e.levelC) < near {
			s.informs[len(s.informs)-1] = true
		}
		without := q[i] / math.Max(least, rows.freeOf(e.reason, sign, i, e.levelC, e.blurK))
		w, closed := rows.weight[i], rows.closed[i]
		if closed && without < 0.01 { // something else held it anyway
			continue
		}
		c := 0
		for _, l := range s.levelC {
			for _, blurK := range blurs {
				day[c] += w * gain(closed, math.Min(1, without)*rows.freeOf(e.reason, sign, i, l, blurK))
				c++
			}
		}
	}
	return s
}

// peak is the column with the greatest sum.
func peak(sum []float64) int {
	best := 0
	for c, v := range sum {
		if v > sum[best] {
			best = c
		}
	}
	return best
}

// levelOf turns the sums of columns into a level: the best one, refined by a
// parabola through its neighbours.
func (s *surface) levelOf(sum []float64) float64 {
	c := peak(sum)
	k, b := c/s.blurs, c%s.blurs
	if k == 0 || k == len(s.levelC)-1 {
		return s.levelC[k]
	}
	x0, x1, x2 := s.levelC[k-1], s.levelC[k], s.levelC[k+1]
	y0, y1, y2 := sum[(k-1)*s.blurs+b], sum[c], sum[(k+1)*s.blurs+b]
	num := (x1-x0)*(x1-x0)*(y1-y2) - (x1-x2)*(x1-x2)*(y1-y0)
	den := (x1-x0)*(y1-y2) - (x1-x2)*(y1-y0)
	if den == 0 || math.IsNaN(num/den) {
		return x1
	}
	return math.Max(x0, math.Min(x2, x1-0.5*num/den))
}

func (s *surface) sum(from, to int) []float64 {
	cols := s.cols()
	out := make([]float64, cols)
	for d := from; d < to; d++ {
		for c, v := range s.ll[d*cols : (d+1)*cols] {
			out[c] += v
		}
	}
	return out
}

const (
	resamples = 150
	// blockDays are drawn together, so that a run of like days stays one.
	blockDays = 3
)

// interval is the 95 % interval of the level by moving blocks of days (Künsch
// 1989), never narrower than the resolution of a sensor.
func (s *surface) interval(from, to int, rng *rand.Rand) (low, high float64) {
	var list []int
	for d := from; d < to; d++ {
		if s.informs[d] {
			list = append(list, d)
		}
	}
	if len(list) < 2 {
		return math.NaN(), math.NaN()
	}
	cols := s.cols()
	levels := make([]float64, 0, resamples)
	block := min(blockDays, len(list))
	sum := make([]float64, cols)
	count := make([]float64, len(list))
	for range resamples {
		clear(sum)
		clear(count)
		for n := 0; n < len(list); n += block {
			at := rng.IntN(len(list) - block + 1)
			for k := 0; k < block && n+k < len(list); k++ {
				count[at+k]++
			}
		}
		for k, d := range list {
			if count[k] == 0 {
				continue
			}
			for c, v := range s.ll[d*cols : (d+1)*cols] {
				sum[c] += count[k] * v
			}
		}
		levels = append(levels, s.levelOf(sum))
	}
	sort.Float64s(levels)
	return quantile(levels, 0.025) - sharpestK, quantile(levels, 0.975) + sharpestK
}
