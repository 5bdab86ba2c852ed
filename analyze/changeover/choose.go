package changeover

import (
	"math"
	"sort"
)

const (
	// eventsMin changes must have been seen before anything is fitted.
	eventsMin = 12
	// edgeGain is the least rise of twice the log-likelihood a limit must bring,
	// far above the 99.9 % point of chi-squared with two degrees of freedom
	// (13.8), since moments of one day are not independent.
	edgeGain = 25.0
	edgesMax = 6
)

// choose builds a model by adding, one after the other, the reason that raises
// the likelihood most, until none does by enough.
func choose(rows *moments, reasons []reason) *model {
	open, all := 0.0, 0.0
	for i, closed := range rows.closed {
		all += rows.weight[i] * rows.steps[i]
		if !closed {
			open += rows.weight[i] * rows.steps[i]
		}
	}
	m := &model{free: (open + 0.5) / (all + 1)}
	m.refine(rows, reasons, 12)
	taken, failed := map[int]bool{}, 0
	for len(m.edges) < edgesMax && failed < 3 {
		best, bestGain := m.candidate(rows, reasons, func(r int) bool { return taken[r] })
		if best.reason < 0 || 2*bestGain < edgeGain/2 {
			break
		}
		taken[best.reason] = true
		next := &model{free: m.free, edges: append(append([]edge(nil), m.edges...), best)}
		next.startFree(rows, reasons)
		next.refine(rows, reasons, 12)
		if 2*(next.ll-m.ll) < edgeGain {
			failed++ // it does not help; another may
			continue
		}
		m = next
	}
	if len(m.edges) > 0 {
		m.exchange(rows, reasons, taken)
	}
	m.refine(rows, reasons, 40)
	return m
}

// candidate is the reason that would explain most beside the model, with what
// it would bring.
func (m *model) candidate(rows *moments, reasons []reason, skip func(r int) bool) (edge, float64) {
	q := m.openOdds(rows, reasons)
	coarse, events := rows.some(screenRows), rows.events()
	var tries []*tryout
	for r := range reasons {
		if skip(r) {
			continue
		}
		t := &tryout{rows: rows, sign: reasons[r].sign(), reason: r, q: q, free: m.free, events: events}
		if t.screen(coarse); t.rough.reason >= 0 {
			tries = append(tries, t)
		}
	}
	sort.SliceStable(tries, func(a, b int) bool { return tries[a].roughGain > tries[b].roughGain })
	best, bestGain := edge{reason: -1}, 0.0
	for _, t := range tries[:min(len(tries), closely)] {
		if e, g := t.closer(); g > bestGain {
			best, bestGain = e, g
		}
	}
	return best, bestGain
}

// closely is how many reasons are looked at with all rows.
const closely = 3

// screenRows is how many rows a reason is first looked at with.
const screenRows = 300

// some lists at most most rows: all that changed, and every so many others.
func (m *moments) some(most int) []int {
	every := max(1, (m.n()+most-1)/most)
	out := make([]int, 0, most)
	for i, c := range m.closed {
		if c != m.opening || i%every == 0 {
			out = append(out, i)
		}
	}
	return out
}

// tryout tries limits of one reason beside a model with P(open) q, c free to
// rise.
type tryout struct {
	rows   *moments
	sign   float64
	reason int
	q      []float64
	free   float64
	events int
	f      []float64 // scratch

	rough           edge // found with some of the rows
	roughGain, rest float64
}

// gain is what a limit brings, over the listed rows (all for nil), of which
// those that did not change stand for others. The share of unexplained changes
// is kept times rest for closings; for openings c is what makes the expected
// number of openings that seen.
func (t *tryout) gain(levelC, blurK, rest float64, list []int) float64 {
	n := len(list)
	at := func(k int) int { return list[k] }
	if list == nil {
		n = len(t.q)
		at = func(k int) int { return k }
	}
	if cap(t.f) < n {
		t.f = make([]float64, n)
	}
	f := t.f[:n]
	events, seen, expected, stay := 0, 0.0, 0.0, 0.0
	for k := range f {
		i := at(k)
		f[k] = t.rows.freeOf(t.reason, t.sign, i, levelC, blurK)
		if t.rows.closed[i] != t.rows.opening {
			events++
			seen += t.rows.weight[i]
			expected += t.rows.weight[i] * t.q[i] * f[k]
		} else {
			stay += t.rows.weight[i] * t.q[i] * f[k]
		}
	}
	other := 1.0 // rows that each row without a change stands for
	if list != nil && n > events {
		other = float64(len(t.q)-t.events) / float64(n-events)
	}
	c := 1 - (1-t.free)*rest
	if t.rows.opening {
		c = math.Max(1e-6, math.Min(0.97, t.free*seen/math.Max(least, expected+other*stay)))
	}
	sum := 0.0
	for k := range f {
		i := at(k)
		was := t.q[i]
		closed := t.rows.closed[i]
		if closed && was < 1e-4 && f[k] > 0.5 { // something else held it anyway
			continue
		}
		now := math.Min(1, was*f[k]*power(c/t.free, t.rows.steps[i]))
		if now == was {
			continue
		}
		g := t.rows.weight[i] * (gain(closed, now) - gain(closed, was))
		if closed == t.rows.opening {
			g *= other
		}
		sum += g
	}
	return sum
}

// screen finds roughly the limit that brings most, with some of the rows.
func (t *tryout) screen(coarse []int) {
	t.rough = edge{reason: -1}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, x := range t.rows.x[t.reason] {
		if v := float64(x); !math.IsNaN(v) {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
	}
	if !(hi > lo) || hi-lo > 200 {
		return
	}
	rests := []float64{0.7, 0.3}
	if t.rows.opening {
		rests = rests[:1]
	}
	step := math.Max(0.5, (hi-lo)/30)
	for l := lo; l <= hi; l += step {
		for _, x := range rests {
			if g := t.gain(l, 0.25, x, coarse); g > t.roughGain {
				t.rough, t.roughGain, t.rest = edge{t.reason, l, 0.25}, g, x
			}
		}
	}
}

// closer looks around the rough limit with all rows.
func (t *tryout) closer() (edge, float64) {
	around, rest := t.rough.levelC, t.rest
	most := 0.0
	found := edge{reason: -1}
	for _, d := range []float64{-0.4, -0.2, 0, 0.2, 0.4} {
		for _, blur := range []float64{0.12, 0.35} {
			if g := t.gain(around+d, blur, rest, nil); g > most {
				found, most = edge{t.reason, around + d, blur}, g
			}
		}
	}
	if g := t.gain(around, 0.8, rest, nil); g > most {
		found, most = edge{t.reason, around, 0.8}, g
	}
	return found, most
}

// startFree sets c of an opening model so that it expects as many openings as
// were seen, a better start than that of the model without the new limit.
func (m *model) startFree(rows *moments, reasons []reason) {
	if !rows.opening {
		return
	}
	seen, expected := 0.0, 0.0
	for i, q := range m.openOdds(rows, reasons) {
		expected += rows.weight[i] * q
		if !rows.closed[i] {
			seen += rows.weight[i]
		}
	}
	if expected > 0 {
		m.free = math.Max(1e-6, math.Min(0.97, m.free*seen/expected))
	}
}

// exchange asks whether another reason does better in place of one taken
// before: rooms warm up together, and the one that stood in for another when it
// was alone may not be the one that is followed.
func (m *model) exchange(rows *moments, reasons []reason, taken map[int]bool) {
	if len(reasons) <= 4 { // a single room: nothing stands in for it
		return
	}
	in := map[int]bool{}
	for _, e := range m.edges {
		in[e.reason] = true
	}
	for j := range m.edges {
		rest := &model{free: m.free}
		for k, e := range m.edges {
			if k != j {
				rest.edges = append(rest.edges, e)
			}
		}
		other, _ := rest.candidate(rows, reasons, func(r int) bool { return in[r] })
		if other.reason < 0 {
			continue
		}
		rest.edges = append(rest.edges, other)
		rest.startFree(rows, reasons)
		rest.refine(rows, reasons, 12)
		if rest.ll > m.ll+1 {
			taken[other.reason], in[other.reason] = true, true
			delete(taken, m.edges[j].reason)
			delete(in, m.edges[j].reason)
			*m = *rest
		}
	}
}

// quantile is Hyndman & Fan type 7 of sorted values, NaN of none.
func quantile(sorted []float64, p float64) float64 {
	if len(sorted) == 0 {
		return math.NaN()
	}
	h := float64(len(sorted)-1) * p
	low := int(h)
	if low+1 >= len(sorted) {
		return sorted[len(sorted)-1]
	}
	a, b := sorted[low], sorted[low+1]
	if math.IsInf(b, 1) {
		if h == float64(low) {
			return a
		}
		return b
	}
	return a + (h-float64(low))*(b-a)
}

func sortedCopy(v []float64) []float64 {
	out := append([]float64(nil), v...)
	sort.Float64s(out)
	return out
}
