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
	coarse, fine := m.sample(rows, q, screenRows), m.sample(rows, q, closeRows)
	var tries []*tryout
	for r := range reasons {
		if skip(r) {
			continue
		}
		t := &tryout{sign: reasons[r].sign(), reason: r}
		if t.screen(coarse); t.rough.reason >= 0 {
			tries = append(tries, t)
		}
	}
	sort.SliceStable(tries, func(a, b int) bool { return tries[a].roughGain > tries[b].roughGain })
	best, bestGain := edge{reason: -1}, 0.0
	for _, t := range tries[:min(len(tries), closely)] {
		if e, g := t.closer(fine); g > bestGain {
			best, bestGain = e, g
		}
	}
	return best, bestGain
}

const (
	// closely is how many reasons are looked at more closely.
	closely = 3
	// screenRows is how many rows of either kind, changed and not, a reason is
	// first looked at with, closeRows how many then; the fit takes all.
	screenRows = 300
	closeRows  = 4000
)

// sample is some of the rows, with what of a tryout does not depend on the
// reason tried.
type sample struct {
	rows *moments
	free float64 // c of the model
	list []int
	// Per row of the list: P(open) of the model, the log-likelihood with it, the
	// rows it stands for, and whether something else held it anyway.
	q, was, stands []float64
	held           []bool
	f              []float64 // scratch
	// lost[rest][row] is how often what nothing explains spares a row, once its
	// share is kept times rests[rest].
	rests []float64
	lost  [][]float64
}

// sample takes at most most rows that changed and most that did not, evenly.
func (m *model) sample(rows *moments, q []float64, most int) *sample {
	s := &sample{rows: rows, free: m.free}
	events := rows.events()
	every := [2]int{max(1, (rows.n()-events+most-1)/most), max(1, (events+most-1)/most)}
	var seen, taken [2]int
	var kind []int
	for i, c := range rows.closed {
		k := 0
		if c != rows.opening {
			k = 1
		}
		if seen[k]%every[k] == 0 {
			s.list = append(s.list, i)
			kind = append(kind, k)
			taken[k]++
		}
		seen[k]++
	}
	for at, i := range s.list {
		k := kind[at]
		s.q = append(s.q, q[i])
		s.was = append(s.was, gain(rows.closed[i], q[i]))
		s.stands = append(s.stands, rows.weight[i]*float64(seen[k])/float64(taken[k]))
		s.held = append(s.held, rows.closed[i] && q[i] < 1e-4)
	}
	s.f = make([]float64, len(s.list))
	s.rests = []float64{0.7, 0.3}
	if rows.opening {
		s.rests = s.rests[:1]
		return s
	}
	for _, rest := range s.rests {
		c := (1 - (1-m.free)*rest) / m.free
		lost := make([]float64, len(s.list))
		for at, i := range s.list {
			lost[at] = power(c, rows.steps[i])
		}
		s.lost = append(s.lost, lost)
	}
	return s
}

// tryout tries limits of one reason beside a model.
type tryout struct {
	sign   float64
	reason int

	rough     edge // found with few rows
	roughGain float64
	rest      int // of the sample's rests
}

// odds works out how a limit spares the rows.
func (t *tryout) odds(s *sample, levelC, blurK float64) {
	for at, i := range s.list {
		s.f[at] = s.rows.freeOf(t.reason, t.sign, i, levelC, blurK)
	}
}

// gain is what the limit of the odds brings. The share of unexplained changes is
// kept times a rest for closings; for openings c is what makes the expected
// number of openings that seen.
func (t *tryout) gain(s *sample, rest int) float64 {
	var spare []float64
	ratio := 1.0
	if s.rows.opening {
		seen, expected := 0.0, 0.0
		for at, i := range s.list {
			if !s.rows.closed[i] {
				seen += s.stands[at]
			}
			expected += s.stands[at] * s.q[at] * s.f[at]
		}
		c := math.Max(1e-6, math.Min(0.97, s.free*seen/math.Max(least, expected)))
		ratio = c / s.free
	} else {
		spare = s.lost[rest]
	}
	sum := 0.0
	for at, i := range s.list {
		f := s.f[at]
		if s.held[at] && f > 0.5 { // something else held it anyway
			continue
		}
		by := f
		if spare != nil {
			by *= spare[at]
		} else {
			by *= power(ratio, s.rows.steps[i])
		}
		if by == 1 {
			continue
		}
		sum += s.stands[at] * (gain(s.rows.closed[i], math.Min(1, s.q[at]*by)) - s.was[at])
	}
	return sum
}

// screen finds roughly the limit that brings most, with few of the rows.
func (t *tryout) screen(s *sample) {
	t.rough = edge{reason: -1}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, x := range s.rows.x[t.reason] {
		if v := float64(x); !math.IsNaN(v) {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
	}
	if !(hi > lo) || hi-lo > 200 {
		return
	}
	step := math.Max(0.5, (hi-lo)/30)
	for l := lo; l <= hi; l += step {
		t.odds(s, l, 0.25)
		for x := range s.rests {
			if g := t.gain(s, x); g > t.roughGain {
				t.rough, t.roughGain, t.rest = edge{t.reason, l, 0.25}, g, x
			}
		}
	}
}

// closer looks around the rough limit with more rows.
func (t *tryout) closer(s *sample) (edge, float64) {
	around, most := t.rough.levelC, 0.0
	found := edge{reason: -1}
	try := func(levelC, blurK float64) {
		t.odds(s, levelC, blurK)
		if g := t.gain(s, t.rest); g > most {
			found, most = edge{t.reason, levelC, blurK}, g
		}
	}
	for _, d := range []float64{-0.4, -0.2, 0, 0.2, 0.4} {
		for _, blur := range []float64{0.12, 0.35} {
			try(around+d, blur)
		}
	}
	try(around, 0.8)
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
