package tabular

import (
	"fmt"
	"strings"

	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/reading"
)

// longRow takes one row of a long log.
func (m *Mapper) longRow(cells [][]byte, starts []int, text []byte, st clock.Stamp, f clock.Fault) {
	e, key := m.lookup(cells)
	if e == nil {
		if f != clock.Fine && m.isHead(text) {
			m.repeatedHead++
			return
		}
		m.unmapped(key)
		return
	}
	var refused reading.Sink
	if f != clock.Fine {
		if refused = m.refuse(text, f); refused == nil {
			return
		}
	}
	several, cut := len(m.frame.Values) > 1, false
	for v, col := range m.frame.Values {
		for _, i := range e.targets[v] {
			t := &m.targets[i]
			to, u := refused, int64(0)
			if to == nil {
				to, u = m.place(st, m.orders[i])
			}
			switch {
			case col >= len(cells):
				cut = true
				to.Reject(t.point, reading.Truncated, m.where(0), "")
			case len(cells[col]) == 0 && !several:
				to.Reject(t.point, reading.Missing, m.where(startOf(starts, col)), "")
				if t.cov {
					m.gap(t, u, to)
				}
			default:
				m.cell(t, cells[col], u, startOf(starts, col), to)
			}
		}
	}
	if cut {
		m.short++
	}
}

func (m *Mapper) isHead(text []byte) bool {
	return m.headTime != "" && strings.TrimSpace(string(text)) == m.headTime
}

// lookup finds the entry of a row by its key columns.
func (m *Mapper) lookup(cells [][]byte) (*entry, []byte) {
	ks := m.frame.Keys
	for _, k := range ks {
		if k >= len(cells) {
			return nil, nil
		}
	}
	key := cells[ks[0]]
	if len(ks) > 1 {
		m.joined = append(m.joined[:0], key...)
		for _, k := range ks[1:] {
			m.joined = append(append(m.joined, '/'), cells[k]...)
		}
		key = m.joined
	}
	if e, ok := m.keys[string(key)]; ok {
		return e, key
	}
	return m.foldKey(key), key
}

// foldKey finds a name written with other case or spacing and remembers it;
// names that match nothing are remembered too, up to a bound.
func (m *Mapper) foldKey(key []byte) *entry {
	if _, ok := m.names[string(key)]; ok {
		return nil
	}
	s := cell.Text(key, false)
	want := cell.Fold(s)
	var found *entry
	for _, e := range m.keys {
		if e != nil && cell.Fold(e.name) == want {
			if found != nil && found != e {
				return nil
			}
			found = e
		}
	}
	if found != nil && len(m.keys) < maxNames {
		m.keys[string(key)] = found
	} else if found == nil && len(m.names) < maxNames {
		m.names[string(key)] = s
	}
	return found
}

// maxNames bounds the names of unmapped rows that are remembered.
const maxNames = 100_000

// unmapped rejects a row of a long log that no point claims, once.
func (m *Mapper) unmapped(key []byte) {
	name, ok := m.names[string(key)]
	if !ok {
		name = "(more than " + fmt.Sprint(maxNames) + " other names)"
		if key == nil {
			name = ""
			m.short++
		}
	}
	m.to.Reject(-1, reading.Unmapped, m.where(0), name)
}
