package influx

import (
	"fmt"
	"math"
)

// windows are the steps of a span: number k covers
// [fromNS + k*stepNS, fromNS + (k+1)*stepNS).
type windows struct {
	fromNS, stepNS int64
	n              int
}

func (w windows) index(ns int64) int { return int(floorDiv(ns-w.fromNS, w.stepNS)) }

// survey is what the server says about the readings of one point in a span,
// short of the readings themselves. Instants are unix nanoseconds.
type survey struct {
	count      int64
	firstNS    int64
	firstValue float64
	// odd are the readings that do not follow the one before after the usual
	// interval, or that are impossible; the first is not among them.
	odd []odd
	// jumps are those that differ from the one before by more than a spike.
	jumps []int64
	// many is true when a list was cut off.
	many bool
}

type odd struct {
	ns, sinceNS int64 // since the reading before
	value       float64
}

// run is a row of readings at the usual interval, both ends included.
type run struct{ from, to int64 }

// runs turns a survey into runs; an error means that its parts do not fit
// together.
func (s *survey) runs(intervalNS int64) ([]run, error) {
	if s.count == 0 {
		return nil, nil
	}
	var out []run
	from, left := s.firstNS, s.count
	for _, o := range s.odd {
		if o.sinceNS == intervalNS {
			continue // impossible, but in time
		}
		to := o.ns - o.sinceNS
		if to < from || (to-from)%intervalNS != 0 {
			return nil, fmt.Errorf("readings at %d and %d ns do not fit the interval", from, to)
		}
		out = append(out, run{from, to})
		left -= (to-from)/intervalNS + 1
		from = o.ns
	}
	if left < 1 {
		return nil, fmt.Errorf("the readings are %d fewer than their times say", 1-left)
	}
	return append(out, run{from, from + (left-1)*intervalNS}), nil
}

// inRange counts the readings of runs with instants in [from, to).
func inRange(runs []run, intervalNS, from, to int64) (n int64) {
	for _, r := range runs {
		lo, hi := int64(0), (r.to-r.from)/intervalNS // of the run's own readings
		if from > r.from {
			lo = (from - r.from + intervalNS - 1) / intervalNS
		}
		if last := to - 1; last < r.to {
			hi = floorDiv(last-r.from, intervalNS)
		}
		n += max(0, hi-lo+1)
	}
	return n
}

// judge says of each window whether it holds any reading and whether the mean
// of its readings may stand for them. means are NaN where the server gave
// none.
//
// A window is in order when one run fills every slot of it, nothing in it is
// impossible or jumps, its mean is near those beside it, and no long standstill
// begins or ends there. A mean stands for its window only when those on both
// sides are in order too: the last reading may be held into the next window,
// and whether a reading is a spike depends on the readings beside it.
func judge(w windows, s *survey, runs []run, intervalNS int64, low, high, spike float64, standstill int, means []float64) (filled, exact []bool) {
	filled, fine := make([]bool, w.n), make([]bool, w.n)
	mark := func(k int, v bool, in []bool) {
		if k >= 0 && k < w.n {
			in[k] = v
		}
	}
	for _, r := range runs {
		first, last := max(w.index(r.from), 0), min(w.index(r.to), w.n-1)
		for k := first; k <= last; k++ {
			filled[k] = true
		}
		if (r.from-w.fromNS)%intervalNS != 0 {
			continue
		}
		for k := first; k <= last; k++ {
			from := w.fromNS + int64(k)*w.stepNS
			fine[k] = r.from <= from && from+w.stepNS-intervalNS <= r.to
		}
	}
	bad := func(k int) { mark(k, false, fine) }
	for _, r := range runs {
		if k := w.index(r.from); r.from > w.fromNS+int64(k)*w.stepNS {
			bad(k) // more readings than there are slots
		}
	}
	possible := func(v float64) bool { return v >= low && v <= high }
	if s.count > 0 && !possible(s.firstValue) {
		bad(w.index(s.firstNS))
	}
	for _, o := range s.odd {
		if !possible(o.value) {
			bad(w.index(o.ns))
		}
	}
	for _, ns := range s.jumps {
		bad(w.index(ns))
	}
	began := 0 // of the standstill so far
	for k := 1; k <= w.n; k++ {
		if k < w.n && same(means[k], means[k-1]) {
			continue
		}
		if standstill > 0 && k-began >= standstill {
			bad(began - 1)
			bad(began)
			bad(k - 1)
			bad(k)
		}
		began = k
		if k < w.n && spike > 0 && math.Abs(means[k]-means[k-1]) > spike {
			bad(k)
			bad(k - 1)
		}
	}
	exact = make([]bool, w.n)
	for k := range exact {
		exact[k] = fine[k] && (k == 0 || fine[k-1]) && (k == w.n-1 || fine[k+1])
	}
	return filled, exact
}

// same holds two means to be the same value, as far as readings are rounded.
func same(a, b float64) bool { return math.Abs(a-b) < 1e-6 }

// rest lists the ranges of windows within [lo, hi) that hold readings whose
// mean does not do; each begins and ends with such a window.
func rest(filled, exact []bool, lo, hi int) (out [][2]int) {
	for k := lo; k < hi; k++ {
		if !filled[k] || exact[k] {
			continue
		}
		from, to := k, k+1
		for ; k < hi && !exact[k]; k++ {
			if filled[k] {
				to = k + 1
			}
		}
		out = append(out, [2]int{from, to})
	}
	return out
}

// compose puts means where they do and the readings fetched for the rest into
// one series over the windows [lo, hi), with instants in seconds.
func compose(w windows, lo, hi int, exact []bool, means []float64, pieces []number) ([]number, error) {
	var out []number
	next := 0
	for k := lo; k < hi; k++ {
		for ; next < len(pieces) && w.index(pieces[next].t*second) <= k; next++ {
			out = append(out, pieces[next])
		}
		if exact[k] {
			out = append(out, number{(w.fromNS + int64(k)*w.stepNS) / second, means[k]})
		}
	}
	if next != len(pieces) {
		return nil, partial(int64(next), int64(len(pieces)))
	}
	return out, nil
}
