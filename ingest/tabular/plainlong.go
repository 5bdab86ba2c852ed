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
	if f.Time < 0 || len(f.Keys) != 1 || len(f.Values) != 1 || p.maxCol >= longCells {
		return false
	}
	var starts [longCells + 1]int // of the cells, and one behind the last
	at := 0
	for c := range p.maxCol {
		starts[c] = at
		if at = until(b, at, end, p.sep) + 1; at > end {
			return false // a cell is missing
		}
	}
	starts[p.maxCol] = at
	starts[p.maxCol+1] = until(b, at, end, p.sep) + 1
	i := p.names.find(b[starts[f.Keys[0]]:starts[f.Keys[0]+1]-1], m.keys)
	if i < 0 {
		return false
	}
	if p.quick == nil {
		p.quick = p.quicks()
	}
	q := &p.quick[i]
	from, to := starts[f.Values[0]], starts[f.Values[0]+1]-1
	var v float64
	switch q.mode {
	case quickNumber:
		// b goes on behind the cell, so that Short can take a whole word.
		x, n := cell.Short(b[from:], p.mark)
		if n == 0 || n != to-from || x <= -999 {
			return false
		}
		v = float64(x*q.factor) + q.offset
	default:
		t := &m.targets[i]
		if len(t.hit) == 0 || string(b[from:to]) != string(t.hit) {
			return false
		}
		v = t.hitValue
	}
	st, fault := m.stamp(b[starts[f.Time] : starts[f.Time+1]-1])
	if fault != clock.Fine {
		return false
	}
	m.line = no
	m.Rows++
	sink, u := m.place(st, m.orders[i])
	sink.Reading(q.point, u, v)
	return true
}

// longCells is how many cells of a long row are looked through at most.
const longCells = 8

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

// nameCache holds names of a long log met before, each near the place its hash
// gives; what a hash costs less than the map's matters once per row.
type nameCache [1024]struct {
	name string
	// target is the index of the name's only target, -1 when it has others.
	target int
}

// nameProbes is how many places are looked at for a name.
const nameProbes = 4

// find returns the index of the target that rows of the name go to, or -1.
func (c *nameCache) find(name []byte, all map[string]*entry) int {
	if len(name) == 0 {
		return -1
	}
	h := uint64(len(name))
	if n := len(name); n >= 8 {
		h ^= binary.LittleEndian.Uint64(name[n-8:])
	} else {
		for _, b := range name {
			h = h<<8 ^ uint64(b)
		}
	}
	at := h * 0x9e3779b97f4a7c15 >> 54
	for i := range uint64(nameProbes) {
		place := &c[(at+i)%uint64(len(c))]
		if string(name) == place.name {
			return place.target
		}
		if place.name == "" {
			return c.learn(at+i, name, all)
		}
	}
	return c.learn(at, name, all)
}

// learn looks a name up and keeps it in a place.
func (c *nameCache) learn(at uint64, name []byte, all map[string]*entry) int {
	e := all[string(name)]
	if e == nil {
		return -1
	}
	place := &c[at%uint64(len(c))]
	place.name, place.target = string(name), -1
	if len(e.targets[0]) == 1 {
		place.target = e.targets[0][0]
	}
	return place.target
}
