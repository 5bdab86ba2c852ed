package freshair

import (
	"math"
	"sort"
)

// CategoryLimitsPPM are the limits above outdoors of categories I, II and III
// of EN 16798-1:2019 for offices at 20 L/h of CO2 per person; a level at the
// limit is still within it.
var CategoryLimitsPPM = [3]float64{550, 800, 1350}

// heldShare is the share of known time a category must hold to be named.
// EN 15251 allowed 3 % or 5 % of occupied time outside; 5 % is used here.
const heldShare = 0.95

// curvePPM are the levels of the duration curves: every 25 ppm from 400.
func curvePPM() []float64 {
	var ppm []float64
	for v := 400.0; v <= 3000; v += 25 {
		ppm = append(ppm, v)
	}
	return ppm
}

// collector gathers the steps of one running state.
type collector struct {
	ppm, above []float64 // known steps: level and level above outdoors
	unknown    int
}

func (c *collector) add(ppm, outdoorPPM float64) {
	if math.IsNaN(ppm) || math.IsNaN(outdoorPPM) {
		c.unknown++
		return
	}
	c.ppm = append(c.ppm, ppm)
	c.above = append(c.above, ppm-outdoorPPM)
}

// levels summarises the steps; it leaves ppm sorted.
func (c *collector) levels(stepH, ownLimitPPM float64) Levels {
	l := Levels{KnownH: float64(len(c.ppm)) * stepH, UnknownH: float64(c.unknown) * stepH}
	l.MeanPPM, l.P95PPM, l.AboveOutdoorMeanPPM = math.NaN(), math.NaN(), math.NaN()
	if len(c.ppm) == 0 {
		return l
	}
	sort.Float64s(c.ppm)
	l.MeanPPM, l.AboveOutdoorMeanPPM = mean(c.ppm), mean(c.above)
	l.P95PPM = quantile(c.ppm, 0.95)
	limits := [4]float64{CategoryLimitsPPM[0], CategoryLimitsPPM[1], CategoryLimitsPPM[2], ownLimitPPM}
	var steps [4]int
	for _, v := range c.above {
		for k, limit := range limits {
			if round3(v) > round3(limit) {
				steps[k]++
			}
		}
	}
	for k := range steps {
		l.AboveCatH[k] = float64(steps[k]) * stepH
	}
	l.Category = "IV"
	for k := len(CategoryLimitsPPM) - 1; k >= 0; k-- {
		// Counted in steps, so that a tie is decided the same everywhere.
		if within := len(c.above) - steps[k]; float64(within) >= heldShare*float64(len(c.above))-1e-9 {
			l.Category = [3]string{"I", "II", "III"}[k]
		}
	}
	return l
}

// rebreathed is the time mean of the share of air breathed before; not the
// share at the mean level, since levels below outdoors count as none.
func (c *collector) rebreathed() float64 {
	sum := 0.0
	for _, v := range c.above {
		sum += RebreathedFraction(v, 0)
	}
	return sum / float64(len(c.above))
}

// durations gives the share of known time above each level; ppm is sorted.
func (c *collector) durations(levels []float64) []float64 {
	out := make([]float64, len(levels))
	for k, level := range levels {
		if len(c.ppm) == 0 {
			out[k] = math.NaN()
			continue
		}
		first := sort.Search(len(c.ppm), func(i int) bool { return round3(c.ppm[i]) > round3(level) })
		out[k] = float64(len(c.ppm)-first) / float64(len(c.ppm))
	}
	return out
}

// quantile is Hyndman & Fan (1996, The American Statistician 50:361) type 7 of
// sorted, equally weighted values: h = (n-1)p, linear between neighbours.
func quantile(sorted []float64, p float64) float64 {
	if len(sorted) == 0 {
		return math.NaN()
	}
	h := float64(len(sorted)-1) * p
	low := int(h)
	if low+1 >= len(sorted) {
		return sorted[len(sorted)-1]
	}
	return sorted[low] + (h-float64(low))*(sorted[low+1]-sorted[low])
}

func median(values []float64) float64 {
	v := append([]float64(nil), values...)
	sort.Float64s(v)
	return quantile(v, 0.5)
}

func mean(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += x
	}
	return sum / float64(len(v))
}

func round3(v float64) float64 { return math.Round(v*1000) / 1000 }
