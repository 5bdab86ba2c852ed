package influx

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"sashlog/ingest/reading"
)

func (w *writer) pass(sources []reading.Source, to reading.Sink) error {
	for _, src := range sources {
		if err := src.Read(w.ctx, to); err != nil {
			if w.ctx.Err() != nil {
				return w.ctx.Err()
			}
			if !strings.Contains(err.Error(), src.Name()) {
				err = fmt.Errorf("%s: %w", src.Name(), err)
			}
			return &ReadError{err}
		}
		if w.err != nil {
			return at(nameOf(w.conn.in), w.err)
		}
	}
	return nil
}

// ReadError is a file that could not be read.
type ReadError struct{ Err error }

func (e *ReadError) Error() string { return "cannot read " + e.Err.Error() }
func (e *ReadError) Unwrap() error { return e.Err }

// scout counts readings and finds the points that are out of order.
type scout struct{ *writer }

func (k scout) Reading(i int, t int64, v float64) {
	p := &k.points[i]
	if !fit(t, v) {
		p.Unfit++
		return
	}
	p.n++
	k.total++
	p.out = p.out || p.begun && t < p.lastT
	p.lastT, p.begun = max(t, p.lastT), true
}

func (k scout) Reject(i int, _ reading.Reason, _ reading.Where, _ string) {
	if i >= 0 {
		k.points[i].Rejects++
	}
}

func (k scout) Issue(reading.Issue) {}

func fit(t int64, v float64) bool {
	return t >= spanLeast && t < spanMost && !math.IsNaN(v) && !math.IsInf(v, 0)
}

// ordered writes the points whose readings come in order of time; equal
// instants come one after the other.
type ordered writer

func (k *ordered) Reading(i int, t int64, v float64) {
	p := &k.points[i]
	if p.out || !fit(t, v) {
		return
	}
	(*writer)(k).take(p, t, v)
}

func (k *ordered) Reject(int, reading.Reason, reading.Where, string) {}
func (k *ordered) Issue(reading.Issue)                               {}

// heldMost is about how many readings out of order are sorted at once.
const heldMost = 8 << 20

// disordered groups the points out of order, so that a group fits into memory.
func (w *writer) disordered() (groups []map[int][]number) {
	var n int64
	for i := range w.points {
		p := &w.points[i]
		w.settle(p)
		if !p.out {
			continue
		}
		if len(groups) == 0 || n+p.n > heldMost {
			groups = append(groups, map[int][]number{})
			n = 0
		}
		groups[len(groups)-1][i] = make([]number, 0, p.n)
		n += p.n
	}
	return groups
}

// sorter holds the readings of some points.
type sorter struct {
	w    *writer
	held map[int][]number
}

func (h *sorter) Reading(i int, t int64, v float64) {
	if rs, ok := h.held[i]; ok && fit(t, v) {
		h.held[i] = append(rs, number{t, v})
	}
}

func (h *sorter) Reject(int, reading.Reason, reading.Where, string) {}
func (h *sorter) Issue(reading.Issue)                               {}

func (h *sorter) write() {
	for i := range h.w.points {
		rs, ok := h.held[i]
		if !ok {
			continue
		}
		slices.SortFunc(rs, func(a, b number) int {
			switch {
			case a.t < b.t:
				return -1
			case a.t > b.t:
				return 1
			}
			return 0
		})
		for _, r := range rs {
			h.w.take(&h.w.points[i], r.t, r.x)
		}
		h.w.settle(&h.w.points[i])
	}
}

// take joins readings of one instant and writes the one before.
func (w *writer) take(p *state, t int64, v float64) {
	if w.done++; w.progress != nil && w.done%(1<<17) == 0 {
		w.progress(w.done, w.total)
	}
	if p.waiting && t == p.pending.t {
		p.said++
		// As the grid compares them.
		p.conflict = p.conflict || math.Round(v*1e4) != math.Round(p.pending.x*1e4)
		return
	}
	w.settle(p)
	p.pending, p.waiting, p.said, p.conflict = number{t, v}, true, 1, false
}

// settle writes the instant that waits.
func (w *writer) settle(p *state) {
	if !p.waiting {
		return
	}
	p.waiting = false
	if p.conflict {
		p.Conflicts += p.said
		return
	}
	p.Duplicates += p.said - 1
	p.Written++
	p.months[monthOf(p.pending.t)]++
	w.line(p.prefix, p.pending)
}
