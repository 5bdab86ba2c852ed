package grid

import "math"

// Average returns the mean of several columns per step, over those that cover
// at least minShare of the step; NaN where none does. It returns nil when no
// column holds a reading. The order of points does not matter beyond float32
// rounding, since they are summed in the order given.
func (g *Grid) Average(points []int, minShare float64) []float32 {
	need := uint16(math.Ceil(minShare * float64(g.StepS)))
	if need == 0 {
		need = 1
	}
	var cols []*Column
	for _, p := range points {
		if g.Columns[p].Mean != nil {
			cols = append(cols, &g.Columns[p])
		}
	}
	if len(cols) == 0 {
		return nil
	}
	out := make([]float32, g.N)
	for i := range out {
		var sum float64
		n := 0
		for _, c := range cols {
			if c.CoveredS[i] >= need {
				sum += float64(c.Mean[i])
				n++
			}
		}
		if n == 0 {
			out[i] = float32(math.NaN())
			continue
		}
		out[i] = float32(sum / float64(n))
	}
	return out
}

// AverageOrColumn is Average without a copy where one column alone is the
// answer as it stands; the result must not be written to.
func (g *Grid) AverageOrColumn(points []int, minShare float64) []float32 {
	var only *Column
	for _, p := range points {
		if c := &g.Columns[p]; c.Mean != nil {
			if only != nil {
				return g.Average(points, minShare)
			}
			only = c
		}
	}
	if only != nil && only.whole(uint16(math.Ceil(minShare*float64(g.StepS)))) {
		return only.Mean
	}
	return g.Average(points, minShare)
}

// whole reports whether every step with a value is covered for long enough.
func (c *Column) whole(needS uint16) bool {
	for i, s := range c.CoveredS {
		if s < needS && c.Mean[i] == c.Mean[i] {
			return false
		}
	}
	return true
}
