package tabular

import (
	"bytes"

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
		to, u = m.place(st, m.order)
	}
	p.wide(b, end, u, to)
}

// wide hands over the cells of a line.
func (p *plainer) wide(b []byte, end int, u int64, to reading.Sink) {
	m, sep := p.m, p.sep
	col, at := 0, 0
	for i := range m.targets {
		t := &m.targets[i]
		for col < t.col {
			j := bytes.IndexByte(b[at:end], sep)
			if j < 0 {
				m.cut(i, to)
				return
			}
			at += j + 1
			col++
		}
		again := i+1 < len(m.targets) && m.targets[i+1].col == col
		if t.dec.Plain {
			if v, n := cell.Short(b[at:], p.mark); n > 0 && v > -999 {
				if c := b[at+n]; c == sep || at+n == end {
					to.Reading(t.point, u, t.dec.Scale(v))
					if !again {
						at += n
						if c == sep && at < end {
							at++
							col++
						}
					}
					continue
				}
			}
		} else if n := len(t.hit); n > 0 && at+n <= end && string(b[at:at+n]) == string(t.hit) && (at+n == end || b[at+n] == sep) {
			to.Reading(t.point, u, t.hitValue)
			if !again {
				at += n
				if at < end {
					at++
					col++
				}
			}
			continue
		}
		stop := end
		if j := bytes.IndexByte(b[at:end], sep); j >= 0 {
			stop = at + j
		}
		m.cell(t, b[at:stop], u, at+1, to)
		if !again {
			at = stop
			if at < end {
				at++
				col++
			}
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
