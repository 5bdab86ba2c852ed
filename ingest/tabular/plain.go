package tabular

import (
	"bytes"
	"encoding/binary"

	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/reading"
)

// plainer takes lines without quotes: it parses cells where they stand,
// without cutting the row first. Everything that is not a short number or the
// state met last goes through Mapper.cell, like the cells of any other row.
type plainer struct {
	m      *Mapper
	sep    byte
	mark   byte
	maxCol int // the last column a long row needs
	starts []int
	cells  [][]byte
	names  nameCache
	quick  []quick
}

func newPlainer(m *Mapper, sep byte, style cell.Style) *plainer {
	p := &plainer{m: m, sep: sep, mark: style.Mark}
	f := m.frame
	for _, c := range append(append([]int{f.Time, f.Date, f.Clock}, f.Keys...), f.Values...) {
		p.maxCol = max(p.maxCol, c)
	}
	p.cells = make([][]byte, 0, p.maxCol+1)
	return p
}

// line takes the line at the front of b; end is where its text ends, with a
// line break behind it.
func (p *plainer) line(no int64, b []byte, end int) {
	m := p.m
	if m.keys != nil && p.long(no, b, end) {
		return
	}
	if m.keys != nil || m.frame.Time < 0 {
		p.cutLine(no, b[:end])
		return
	}
	m.line = no
	m.Rows++
	// The time first, wherever it stands.
	at := 0
	for c := m.frame.Time; c > 0; c-- {
		j := bytes.IndexByte(b[at:end], p.sep)
		if j < 0 {
			at = -1
			break
		}
		at += j + 1
	}
	var st clock.Stamp
	f := clock.Unreadable
	var text []byte
	if at >= 0 {
		text = b[at:end]
		if j := bytes.IndexByte(text, p.sep); j >= 0 {
			text = text[:j]
		}
		st, f = m.stamp(text)
	}
	var to reading.Sink
	var u int64
	if f != clock.Fine {
		if to = m.refuse(text, f); to == nil {
			return
		}
	} else {
		to, u = m.placeRow(st)
	}
	p.wide(b, end, u, to)
}

// quick is what taking a target's cell where it stands needs.
type quick struct {
	mode           quickMode
	again          bool // the next target stands in the same column
	point          int
	factor, offset float64
	// The state met last with the separator behind it, as a word of eight bytes.
	word, mask uint64
	length     int
	value      float64
}

type quickMode uint8

const (
	notQuick quickMode = iota
	quickNumber
	quickWord
)

func (p *plainer) quicks() []quick {
	ts := p.m.targets
	q := make([]quick, len(ts))
	for i := range ts {
		q[i].point = ts[i].point
		q[i].again = i+1 < len(ts) && ts[i+1].col == ts[i].col
		if ts[i].dec.Plain {
			q[i].mode, q[i].factor, q[i].offset = quickNumber, ts[i].dec.Factor, ts[i].dec.Offset
		}
	}
	return q
}

// learn notes the state met last.
func (q *quick) learn(t *target, sep byte) {
	n := len(t.hit)
	if q.mode == quickNumber || n == 0 || n > 7 {
		return
	}
	var b [8]byte
	copy(b[:], t.hit)
	b[n] = sep
	q.mode, q.word, q.mask = quickWord, binary.LittleEndian.Uint64(b[:]), ^uint64(0)>>(56-8*n)
	q.length, q.value = n, t.hitValue
}

// wide hands over the cells of a line.
func (p *plainer) wide(b []byte, end int, u int64, to reading.Sink) {
	m, sep, mark := p.m, p.sep, p.mark
	var values []float64 // of this row, a column apart
	if m.rows != nil && to == reading.Sink(m.rows) {
		values = m.rows.block.Values[m.rows.row:]
	}
	if p.quick == nil {
		p.quick = p.quicks()
	}
	col, at := 0, 0
	for i := range p.quick {
		q := &p.quick[i]
		if want := m.targets[i].col; col < want {
			for ; col < want; col++ {
				j := bytes.IndexByte(b[at:end], sep)
				if j < 0 {
					m.cut(i, to)
					return
				}
				at += j + 1
			}
		}
		v, n := 0.0, -1 // the cell's value and length when it is quickly read
		if at+8 <= len(b) {
			w := binary.LittleEndian.Uint64(b[at:])
			switch q.mode {
			case quickNumber:
				x, k := cell.Word(w, mark)
				if k == 0 {
					x, k = cell.Short(b[at:], mark)
				}
				if k > 0 && x > -999 && (b[at+k] == sep || at+k == end) {
					v, n = float64(x*q.factor)+q.offset, k
				}
			case quickWord:
				if w&q.mask == q.word && at+q.length < end {
					v, n = q.value, q.length
				}
			}
		}
		if n >= 0 {
			if values != nil {
				values[i*reading.BlockRows] = v
			} else {
				to.Reading(q.point, u, v)
			}
		} else {
			if n = bytes.IndexByte(b[at:end], sep); n < 0 {
				n = end - at
			}
			t := &m.targets[i]
			m.cell(t, b[at:at+n], u, at+1, to)
			q.learn(t, sep)
		}
		if q.again {
			continue
		}
		if at += n; at < end {
			at++
			col++
		}
	}
	// Something written past the last named column?
	for n := len(m.frame.Names); col < n; col++ {
		j := bytes.IndexByte(b[at:end], sep)
		if j < 0 {
			return
		}
		at += j + 1
	}
	for ; at < end; at++ {
		if b[at] != sep {
			m.long++
			return
		}
	}
}

// cutLine cuts a line as far as it is needed and takes it as a row.
func (p *plainer) cutLine(no int64, b []byte) {
	m := p.m
	p.cells, p.starts = p.cells[:0], p.starts[:0]
	need := p.maxCol
	if m.keys == nil {
		need = len(m.frame.Names)
	}
	at := 0
	for len(p.cells) <= need {
		p.starts = append(p.starts, at)
		j := bytes.IndexByte(b[at:], p.sep)
		if j < 0 {
			p.cells = append(p.cells, b[at:])
			break
		}
		p.cells = append(p.cells, b[at:at+j])
		at += j + 1
	}
	m.Row(no, p.cells, p.starts, false)
}
