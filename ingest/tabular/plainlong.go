package tabular

import (
	"encoding/binary"
	"math/bits"

	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
)

// long takes one line of a long log when nothing about it is special: a time
// that can be read, the name of one point and a short number or the state met
// last. Everything else goes the long way round.
func (p *plainer) long(no int64, b []byte, end int) bool {
	m := p.m
	f := m.frame
	if f.Time < 0 || len(f.Keys) != 1 || len(f.Values) != 1 {
		return false
	}
	p.starts = p.starts[:0]
	at := 0
	for range p.maxCol {
		p.starts = append(p.starts, at)
		if at = until(b, at, end, p.sep) + 1; at > end {
			return false // a cell is missing
		}
	}
	p.starts = append(p.starts, at, until(b, at, end, p.sep)+1)
	text := b[p.starts[f.Time] : p.starts[f.Time+1]-1]
	name := b[p.starts[f.Keys[0]] : p.starts[f.Keys[0]+1]-1]
	value := b[p.starts[f.Values[0]] : p.starts[f.Values[0]+1]-1]
	e := p.names.find(name, m.keys)
	if e == nil || len(e.targets[0]) != 1 {
		return false
	}
	i := e.targets[0][0]
	t := &m.targets[i]
	var v float64
	switch {
	case t.dec.Plain:
		var n int
		// b goes on behind the cell, so that Short can take a whole word.
		if v, n = cell.Short(b[p.starts[f.Values[0]]:], p.mark); n == 0 || n != len(value) || v <= -999 {
			return false
		}
		v = t.dec.Scale(v)
	case len(t.hit) > 0 && string(value) == string(t.hit):
		v = t.hitValue
	default:
		return false
	}
	st, fault := m.stamp(text)
	if fault != clock.Fine {
		return false
	}
	m.line = no
	m.Rows++
	to, u := m.place(st, m.orders[i])
	to.Reading(t.point, u, v)
	return true
}

// until finds the separator at or after a place, or the end. Cells of logs are
// short, so eight bytes at a time beat a call.
func until(b []byte, at, end int, sep byte) int {
	pattern := uint64(sep) * 0x0101010101010101
	for ; at+8 <= len(b); at += 8 {
		x := binary.LittleEndian.Uint64(b[at:]) ^ pattern
		if found := (x - 0x0101010101010101) &^ x & 0x8080808080808080; found != 0 {
			return min(at+bits.TrailingZeros64(found)>>3, end)
		}
		if at+8 >= end {
			return end
		}
	}
	for ; at < end; at++ {
		if b[at] == sep {
			return at
		}
	}
	return end
}

// nameCache holds names of a long log met before, one in each place; what a
// hash costs less than the map's matters once per row.
type nameCache [1024]struct {
	name  string
	entry *entry
}

func (c *nameCache) find(name []byte, all map[string]*entry) *entry {
	if len(name) == 0 {
		return nil
	}
	h := uint64(len(name))
	if n := len(name); n >= 8 {
		h ^= binary.LittleEndian.Uint64(name[n-8:])
	} else {
		for _, b := range name {
			h = h<<8 ^ uint64(b)
		}
	}
	place := &c[h*0x9e3779b97f4a7c15>>54]
	if string(name) == place.name {
		return place.entry
	}
	if e := all[string(name)]; e != nil {
		place.name, place.entry = string(name), e
		return e
	}
	return nil
}
