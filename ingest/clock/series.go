package clock

import "sashlog/ingest/reading"

// Tally counts what a clock met, in readings.
type Tally struct{ Skipped, Repeated, Ambiguous int64 }

// Series follows the written times of rows that belong together (a wide file,
// or one point of a long one) and settles repeated local hours by their order:
// the first pass through the hour, then, after the written time steps back,
// the second. Rows of the hour are held until it is over. Where the order
// proves nothing (a single pass, more than two, or rows out of order) their
// readings are rejected as reading.AmbiguousHour.
type Series struct {
	tally *Tally
	// exact is set where readings come at fixed intervals, so that two equal
	// times an interval from their neighbours are two passes.
	exact bool

	prev  int64
	began bool
	dir   int8 // direction of the rows: 1 forward, -1 newest first, 0 unknown
	run   int  // rows in that direction since the last turn
	turns int

	window Window
	rows   []heldRow
	cells  []heldCell
	full   bool
	entry  int8 // direction in which the rows came into the window
	fit    bool // the rows before the window were in order
	before int64
	first  bool // nothing came before the window
}

type heldRow struct {
	wallS int64
	at    reading.Where
}

type heldCell struct {
	row    int32
	point  int32
	reason reading.Reason
	unixS  int64
	value  float64
	at     reading.Where
	text   string
}

// maxHeld bounds the cells held for one repeated hour.
const maxHeld = 1 << 20

// trustAfter is how many rows in order make up for an earlier disorder.
const trustAfter = 64

// NewSeries returns a series that counts into the tally. exact says that the
// rows come at fixed intervals.
func NewSeries(tally *Tally, exact bool) *Series { return &Series{tally: tally, exact: exact} }

// Distrust tells the series that its rows are known to be out of order.
func (s *Series) Distrust() { s.turns++; s.run = 0 }

// Sure takes note of a row with a sure time and releases the hour before it.
func (s *Series) Sure(wallS int64, to reading.Sink) {
	if len(s.rows) != 0 {
		s.release(true, wallS, to)
	}
	if s.began {
		s.step(wallS)
	}
	s.prev, s.began = wallS, true
}

func (s *Series) step(wallS int64) {
	var d int8
	switch {
	case wallS > s.prev:
		d = 1
	case wallS < s.prev:
		d = -1
	default:
		return
	}
	if d == s.dir {
		s.run++
		return
	}
	if s.dir != 0 {
		s.turns++
	}
	s.dir, s.run = d, 1
}

// Hold begins a row, which stands at a place, within a repeated window; its
// readings go to the sink returned, with the instant of the first showing.
func (s *Series) Hold(wallS int64, w Window, at reading.Where, to reading.Sink) reading.Sink {
	if len(s.rows) != 0 && w != s.window {
		s.release(true, wallS, to)
	}
	if len(s.rows) == 0 {
		s.window = w
		s.fit = s.turns == 0 || s.run >= trustAfter
		s.first, s.before, s.entry = !s.began, s.prev, 0
		if s.began {
			s.entry = 1
			if s.prev >= w.HiS {
				s.entry = -1
			}
			if s.dir != 0 && s.dir != s.entry {
				s.fit = false // a turn right at the window
			}
		}
	}
	s.rows = append(s.rows, heldRow{wallS, at})
	s.prev, s.began = wallS, true
	return holder{s, to}
}

// Flush releases what is held at the end of the rows.
func (s *Series) Flush(to reading.Sink) {
	if len(s.rows) != 0 {
		s.release(false, 0, to)
	}
}

// release hands over the held rows, settled or rejected.
func (s *Series) release(more bool, nextS int64, to reading.Sink) {
	second, ok := s.settle(more, nextS)
	for i := range s.cells {
		c := &s.cells[i]
		switch {
		case c.reason != reading.Accepted:
			to.Reject(int(c.point), c.reason, c.at, c.text)
		case !ok:
			s.tally.Ambiguous++
			to.Reject(int(c.point), reading.AmbiguousHour, s.rows[c.row].at, c.text)
		default:
			s.tally.Repeated++
			u := c.unixS
			if second[c.row] {
				u += s.window.DeltaS
			}
			to.Reading(int(c.point), u, c.value)
		}
	}
	s.rows, s.cells, s.full = s.rows[:0], s.cells[:0], false
}

// settle says of every held row whether it belongs to the second pass.
func (s *Series) settle(more bool, nextS int64) (second []bool, ok bool) {
	var exit int8
	if more {
		exit = 1
		if nextS < s.window.LoS {
			exit = -1
		}
	}
	dir := s.entry
	if dir == 0 {
		dir = exit
	}
	if !s.fit || s.full || dir == 0 || exit != 0 && exit != dir {
		return nil, false
	}
	at := 0 // the row the second pass met begins with
	for i := 1; i < len(s.rows); i++ {
		if d := s.rows[i].wallS - s.rows[i-1].wallS; d != 0 && (d < 0) == (dir > 0) {
			if at != 0 {
				return nil, false
			}
			at = i
		}
	}
	if at == 0 && s.twice(more, nextS) {
		at = 1
	}
	if at == 0 {
		return nil, false
	}
	second = make([]bool, len(s.rows))
	for i := range second {
		second[i] = (i >= at) == (dir > 0)
	}
	return second, true
}

// twice reports the case of readings once per repeated hour (an hourly log):
// two equal times, whole passes away from the rows before and after.
func (s *Series) twice(more bool, nextS int64) bool {
	if !s.exact || len(s.rows) != 2 || s.rows[0].wallS != s.rows[1].wallS || s.first && !more {
		return false
	}
	w := s.rows[0].wallS
	if !s.first && (w-s.before)%s.window.DeltaS != 0 {
		return false
	}
	return !more || (nextS-w)%s.window.DeltaS == 0
}

// holder is the sink that records cells of the row begun last.
type holder struct {
	s  *Series
	to reading.Sink
}

func (h holder) add(c heldCell) {
	s := h.s
	if len(s.cells) >= maxHeld {
		s.full = true
		if c.reason == reading.Accepted {
			s.tally.Ambiguous++
			c.reason, c.at = reading.AmbiguousHour, s.rows[len(s.rows)-1].at
		}
		h.to.Reject(int(c.point), c.reason, c.at, c.text)
		return
	}
	c.row = int32(len(s.rows) - 1)
	s.cells = append(s.cells, c)
}

func (h holder) Reading(point int, unixS int64, value float64) {
	h.add(heldCell{point: int32(point), unixS: unixS, value: value})
}

func (h holder) Reject(point int, r reading.Reason, at reading.Where, text string) {
	h.add(heldCell{point: int32(point), reason: r, at: at, text: text})
}

func (h holder) Issue(i reading.Issue) { h.to.Issue(i) }
