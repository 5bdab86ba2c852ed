package guess

import (
	"fmt"
	"sort"
	"strings"

	"sashlog/configs/site"
)

// loneUnit is the unit of a log whose names carry none.
func (o *owning) loneUnit(t *Track) string {
	if len(o.uorder) == 1 {
		return o.uorder[0]
	}
	return "unit of " + t.Log.Name
}

func (o *owning) toUnit(t *Track, pl place) {
	key := "" // "AHU-01" and "AHU1" are one
	for _, x := range tokens(pl.unit) {
		if x.number {
			key += "-" + bare(x.fold)
		} else {
			key += "-" + x.fold
		}
	}
	id, ok := o.units[key]
	if !ok {
		id = pl.unit
		for _, z := range o.zones {
			if z.ID == id { // ids name one thing each
				id = "unit " + id
				break
			}
		}
		o.units[key] = id
		o.uorder = append(o.uorder, id)
	}
	t.Owner, t.OwnerKind, t.OwnerConf = id, site.OwnerPlant, 0.9
	if !pl.empty() {
		if z, ok := o.zones[pl.key()]; ok {
			o.serve(id, z.ID)
		}
	}
}

func (o *owning) link(unit string, t *Track) { o.serve(unit, t.Owner) }

func (o *owning) serve(unit, zone string) {
	if o.serves == nil {
		o.serves = map[string]map[string]bool{}
	}
	if o.serves[unit] == nil {
		o.serves[unit] = map[string]bool{}
	}
	o.serves[unit][zone] = true
}

// toZone finds or makes the zone of a place.
func (o *owning) toZone(t *Track, pl place) {
	t.OwnerConf = 0.8
	if pl.marked || pl.room != "" {
		t.OwnerConf = 0.9
	}
	key := pl.key()
	z := o.zones[key]
	if z == nil {
		if near := o.nearest(pl); near != "" && !conditions(t.Quantity) {
			z = o.zones[near]
			t.OwnerConf = min(t.OwnerConf, 0.8)
		}
	}
	if z == nil {
		z = &Zone{ID: o.id(pl), Floor: pl.floor, key: pl}
		o.zones[key] = z
		o.order = append(o.order, key)
	}
	t.Owner, t.OwnerKind = z.ID, site.OwnerZone
	if pl.unit != "" {
		o.serve(pl.unit, z.ID)
	}
}

// nearest finds the only zone whose place is part of another place.
func (o *owning) nearest(pl place) string {
	found := ""
	for _, k := range o.order {
		z := &o.zones[k].key
		if z.room != pl.room || z.floor != "" && pl.floor != "" && z.floor != pl.floor || !subset(z.words, pl.words) {
			continue
		}
		if z.room == "" && len(z.words) == 0 {
			continue
		}
		if found != "" {
			return ""
		}
		found = k
	}
	return found
}

func subset(a, b []string) bool {
	for _, x := range a {
		in := false
		for _, y := range b {
			in = in || x == y
		}
		if !in {
			return false
		}
	}
	return true
}

// id is a zone's id: as written in the name, where that is short and unused.
func (o *owning) id(pl place) string {
	id := pl.text
	if id == "" || len(id) > 40 {
		var parts []string
		if pl.floor != "" {
			parts = append(parts, pl.floor)
		}
		if pl.room != "" {
			parts = append(parts, pl.room)
		}
		parts = append(parts, pl.words...)
		id = strings.Join(parts, ".")
	}
	id = strings.TrimSpace(strings.Map(func(r rune) rune {
		if r < ' ' || r == '"' || r == '\\' || r == ',' || r == ';' {
			return '_'
		}
		return r
	}, id))
	if strings.EqualFold(id, "site") || id == "" {
		id = "zone " + id
	}
	for base, n := id, 2; ; n++ {
		used := false
		for _, z := range o.zones {
			used = used || z.ID == id
		}
		for _, u := range o.uorder {
			used = used || u == id
		}
		if !used {
			return id
		}
		id = fmt.Sprintf("%s (%d)", base, n)
	}
}

// merge joins zones that are one: 206 with room 6 on floor 2, a room with and
// without its floor, a room with and without a word that only one of its
// quantities carries.
func (o *owning) merge() {
	for _, k := range append([]string{}, o.order...) {
		z := o.zones[k]
		into := o.plainer(z)
		if s, ok := z.key.split(); ok && into == nil {
			into = o.zones[s.key()]
		}
		if into == nil && z.key.floor == "" && z.key.room != "" && len(z.key.words) == 0 {
			n := 0
			for _, other := range o.zones {
				if other != z && other.key.room == z.key.room && other.key.floor != "" && len(other.key.words) == 0 {
					into = other
					n++
				}
			}
			if n != 1 || len(z.key.room) < 2 {
				into = nil
			}
		}
		if into == nil {
			continue
		}
		for _, t := range o.p.Tracks {
			if t.Owner == z.ID && t.OwnerKind == site.OwnerZone {
				t.Owner = into.ID
				t.OwnerConf = min(t.OwnerConf, 0.75)
				t.Doubts = append(t.Doubts, fmt.Sprintf("%q taken for zone %s", z.key.text, into.ID))
			}
		}
		for _, zs := range o.serves {
			if zs[z.ID] {
				delete(zs, z.ID)
				zs[into.ID] = true
			}
		}
		o.drop(k)
	}
}

// plainer finds the zone of the same floor and room whose name has fewer words,
// when the two hold different quantities: then the further words speak of the
// quantity and not of another room.
func (o *owning) plainer(z *Zone) *Zone {
	if len(z.key.words) == 0 {
		return nil
	}
	mine := o.held(z.ID)
	var into *Zone
	for _, k := range o.order {
		other := o.zones[k]
		if other == z || other.key.floor != z.key.floor || other.key.room != z.key.room || other.key.room == "" && len(other.key.words) == 0 ||
			len(other.key.words) >= len(z.key.words) || !subset(other.key.words, z.key.words) {
			continue
		}
		apart := true
		for q := range o.held(other.ID) {
			apart = apart && !mine[q]
		}
		if apart && (into == nil || len(other.key.words) < len(into.key.words)) {
			into = other
		}
	}
	return into
}

// held are the quantities a zone has.
func (o *owning) held(id string) map[site.Quantity]bool {
	m := map[site.Quantity]bool{}
	for _, t := range o.p.Tracks {
		if t.Owner == id && t.OwnerKind == site.OwnerZone {
			m[t.Quantity] = true
		}
	}
	return m
}

// drop takes a zone off the list.
func (o *owning) drop(key string) {
	delete(o.zones, key)
	for i, x := range o.order {
		if x == key {
			o.order = append(o.order[:i], o.order[i+1:]...)
			return
		}
	}
}

// lone settles tracks of rooms that no name places: with one zone in all, or
// none, they are its; otherwise they stay open.
func (o *owning) lone() {
	logs := map[*Log]bool{}
	for _, t := range o.alone {
		logs[t.Log] = true
	}
	for _, t := range o.alone {
		switch {
		case len(o.order) == 0 && len(logs) == 1:
			o.toZone(t, place{words: []string{"zone1"}, text: "Z1"})
		case len(o.order) == 1:
			z := o.zones[o.order[0]]
			t.Owner, t.OwnerKind = z.ID, site.OwnerZone
		default:
			t.Doubts = append(t.Doubts, "of which room? its name, file and key say none")
			continue
		}
		t.OwnerConf = 0.65
		t.Doubts = append(t.Doubts, "no name says the room: taken for the only one")
	}
}

// finish makes the lists and leaves open what belongs to nothing.
func (o *owning) finish() {
	o.oneStation()
	for _, k := range o.order {
		o.p.Zones = append(o.p.Zones, *o.zones[k])
	}
	sort.SliceStable(o.p.Zones, func(i, j int) bool { return natural(o.p.Zones[i].ID) < natural(o.p.Zones[j].ID) })
	for i := range o.p.Zones {
		z := &o.p.Zones[i]
		for _, t := range o.p.Tracks {
			if t.Owner == z.ID && t.Quantity != "" && t.OwnerKind == site.OwnerZone {
				z.HasWindow = z.HasWindow || t.Quantity == site.Window || t.Quantity == site.WindowOpening
				z.Driven = z.Driven || t.Quantity == site.WindowOpening || t.Quantity == site.WindowCommand
			}
		}
	}
	for _, u := range o.uorder {
		pl := Plant{ID: u}
		for z := range o.serves[u] {
			pl.Serves = append(pl.Serves, z)
		}
		sort.Strings(pl.Serves)
		if len(pl.Serves) > 0 {
			pl.Sure, pl.Why = true, "names of points join them"
		}
		o.p.Plant = append(o.p.Plant, pl)
	}
	sort.SliceStable(o.p.Plant, func(i, j int) bool { return natural(o.p.Plant[i].ID) < natural(o.p.Plant[j].ID) })
	for _, t := range o.p.Tracks {
		if t.Quantity != "" && t.Owner == "" {
			t.Likely, t.Quantity = t.Quantity, ""
		}
		if t.Log.Undated && t.Quantity != "" {
			t.Quantity = ""
			t.Doubts = append(t.Doubts, "its file has times of day without dates: it cannot be placed in time")
		}
	}
}

// natural pads numbers so that 2 sorts before 10.
func natural(s string) string {
	return figures.ReplaceAllStringFunc(s, func(d string) string { return strings.Repeat("0", max(0, 8-len(d))) + d })
}
