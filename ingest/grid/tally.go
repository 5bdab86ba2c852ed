package grid

import (
	"math"

	"sashlog/ingest/reading"
)

// Tally knows how many accepted readings lie in each step, so that checks can
// void steps and the ledger stays exact.
type Tally struct {
	grid   *Grid
	ledger *reading.Ledger
	// Readings[point][step]; nil for a point without readings. A reading lies
	// in the step that holds its instant (end-stamped ones: the beginning of
	// their interval).
	Readings [][]uint16
	touched  []bool
}

// Void takes the steps [from, to) of a point out: nothing is covered there any
// more, and the readings in them move from accepted to the reason. It returns
// their number. Steps beyond the grid are ignored.
func (t *Tally) Void(point, from, to int, r reading.Reason) int64 {
	c, counts := &t.grid.Columns[point], t.Readings[point]
	if c.Mean == nil {
		return 0
	}
	var moved int64
	for i := max(from, 0); i < min(to, t.grid.N); i++ {
		moved += int64(counts[i])
		counts[i], c.Mean[i], c.CoveredS[i] = 0, nan32(), 0
	}
	t.ledger.Points[point].Counts[reading.Accepted] -= moved
	t.ledger.Points[point].Counts[r] += moved
	t.touch(point)
	return moved
}

// VoidWhere voids the steps for which bad is true.
func (t *Tally) VoidWhere(point int, r reading.Reason, bad func(step int) bool) int64 {
	var moved int64
	for i := 0; i < t.grid.N; i++ {
		if bad(i) {
			moved += t.Void(point, i, i+1, r)
		}
	}
	return moved
}

func (t *Tally) touch(point int) {
	if t.touched == nil {
		t.touched = make([]bool, len(t.Readings))
	}
	t.touched[point] = true
}

// Settle brings the ledger's coverage, and for points that lost readings their
// first, last, least, greatest and mean, up to date; those are then taken from
// the steps that are left. A point without any left has no column any more.
func (t *Tally) Settle() {
	g := t.grid
	span := int64(g.PeriodTo-g.PeriodFrom) * g.StepS
	for p := range g.Columns {
		c, l := &g.Columns[p], &t.ledger.Points[p]
		l.Coverage = 0
		if c.Mean != nil && t.touched != nil && t.touched[p] {
			t.refresh(p)
		}
		if l.Counts[reading.Accepted] == 0 {
			*c, t.Readings[p] = Column{}, nil
			l.FirstUTC, l.LastUTC = 0, 0
			l.Min, l.Max, l.Mean = math.NaN(), math.NaN(), math.NaN()
		}
		if c.Mean == nil || span <= 0 {
			continue
		}
		var covered int64
		for _, s := range c.CoveredS[g.PeriodFrom:g.PeriodTo] {
			covered += int64(s)
		}
		l.Coverage = float64(covered) / float64(span)
	}
}

func (t *Tally) refresh(p int) {
	g, c, l := t.grid, &t.grid.Columns[p], &t.ledger.Points[p]
	first, last := -1, -1
	low, high := math.Inf(1), math.Inf(-1)
	var sum, weight float64
	for i, n := range t.Readings[p] {
		if n > 0 {
			if first < 0 {
				first = i
			}
			last = i
		}
		if c.CoveredS[i] > 0 {
			v, w := float64(c.Mean[i]), float64(c.CoveredS[i])
			low, high = min(low, v), max(high, v)
			sum, weight = sum+v*w, weight+w
		}
	}
	if first >= 0 && g.Index(l.FirstUTC) != first {
		l.FirstUTC = g.StartUTC + int64(first)*g.StepS
	}
	if last >= 0 && g.Index(l.LastUTC) != last {
		l.LastUTC = g.StartUTC + int64(last)*g.StepS
	}
	if weight > 0 {
		l.Min, l.Max, l.Mean = low, high, sum/weight
	}
}
