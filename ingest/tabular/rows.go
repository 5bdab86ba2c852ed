package tabular

import (
	"math"

	"sashlog/ingest/clock"
	"sashlog/ingest/reading"
)

// rows gathers the rows of a wide log into blocks for a sink that takes them.
// It is itself the sink of one row: what is rejected goes on at once, readings
// wait until the block is full or something must keep its place behind them.
type rows struct {
	to    reading.Sink
	next  reading.Blocker
	block *reading.Block
	row   int   // the row begun last
	place []int // by point: its place in the block
}

// newRows returns nil where the sink takes no blocks, or a point has two
// columns, whose readings must keep the order of the row.
func newRows(to reading.Sink, targets []target) *rows {
	next, ok := to.(reading.Blocker)
	if !ok || len(targets) == 0 {
		return nil
	}
	most := 0
	for i := range targets {
		most = max(most, targets[i].point)
	}
	r := &rows{to: to, next: next, place: make([]int, most+1)}
	points := make([]int, len(targets))
	for i := range targets {
		p := targets[i].point
		if r.place[p] != 0 {
			return nil
		}
		points[i], r.place[p] = p, i+1
	}
	for p := range r.place {
		r.place[p] = (r.place[p] - 1) * reading.BlockRows
	}
	r.block = reading.NewBlock(points)
	return r
}

// begin begins a row.
func (r *rows) begin(unixS int64) {
	if len(r.block.UnixS) == reading.BlockRows {
		r.flush()
	}
	r.row = len(r.block.UnixS)
	r.block.UnixS = append(r.block.UnixS, unixS)
}

// flush hands over the rows gathered so far.
func (r *rows) flush() {
	if r != nil && len(r.block.UnixS) > 0 {
		r.block = r.next.Block(r.block)
	}
}

func (r *rows) nothing(point int) { r.block.Values[r.place[point]+r.row] = reading.Nothing }

// Reading implements reading.Sink for the row begun last.
func (r *rows) Reading(point int, _ int64, v float64) { r.block.Values[r.place[point]+r.row] = v }

// Gap implements reading.Gapper for the row begun last.
func (r *rows) Gap(point int, _ int64) { r.block.Values[r.place[point]+r.row] = math.NaN() }

// Reject implements reading.Sink for the row begun last.
func (r *rows) Reject(point int, why reading.Reason, at reading.Where, text string) {
	r.nothing(point)
	r.to.Reject(point, why, at, text)
}

// Issue implements reading.Sink.
func (r *rows) Issue(i reading.Issue) { r.to.Issue(i) }

// placeRow settles the time of a row of a wide log: the sink of its cells and
// their instant.
func (m *Mapper) placeRow(st clock.Stamp) (reading.Sink, int64) {
	to, u := m.place(st, m.order)
	if m.rows == nil {
		return to, u
	}
	if to != m.to {
		m.rows.flush() // held rows come behind those before them
		return to, u
	}
	m.rows.begin(u)
	return m.rows, u
}
