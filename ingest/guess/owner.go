package guess

import (
	"fmt"
	"sort"
	"strconv"
	"strings"

	"sashlog/configs/site"
)

// own finds out what every track belongs to, and makes the list of zones and
// plant units.
func (p *Proposal) own() {
	o := owning{p: p, zones: map[string]*Zone{}, units: map[string]string{}, of: map[*Track]place{}}
	for _, t := range p.Tracks {
		if t.Likely != "" {
			o.of[t] = o.placeOf(t)
		}
	}
	o.dropCommon()
	// Rooms with conditions of their own first, so that windows and presence
	// find them.
	for _, pass := range []bool{true, false} {
		for _, t := range p.Tracks {
			if t.Quantity != "" && conditions(t.Quantity) == pass {
				o.assign(t)
			}
		}
	}
	o.merge()
	o.lone()
	o.finish()
}

func conditions(q site.Quantity) bool {
	switch q {
	case site.AirTemp, site.CO2, site.Humidity, site.ThermostatTemp, site.OperativeTemp, site.GlobeTemp, site.ReturnAirTemp:
		return true
	}
	return false
}

type owning struct {
	p      *Proposal
	zones  map[string]*Zone // by key of place
	order  []string
	units  map[string]string // folded to id
	uorder []string
	of     map[*Track]place
	alone  []*Track // zone quantities without any place
	serves map[string]map[string]bool
}

// placeOf reads the place from the track's own name, else from what stands
// around it: the key of its rows, the sheet, the file, the folder.
func (o *owning) placeOf(t *Track) place {
	own := placeIn(t.name, t.names.tokens, t.Log.Setting.Layout == site.PerPoint && t.names.text == t.Column)
	if len(t.Log.Setting.KeyColumns) > 1 {
		key := t.name
		if t.Column != t.name {
			key = t.around
		}
		if room := roomOf(t.Log.Setting.KeyColumns, key); room != "" {
			return placeIn(room, tokens(room), false)
		}
	}
	if t.Log.Setting.Layout == site.Long && t.around != "" && t.Column != t.name {
		ts := tokens(t.around)
		unitOf(t.around, ts)
		key := placeIn(t.around, ts, false)
		if deviceKey(t.Log) && !key.marked {
			key = place{unit: key.unit}
			own.words = nil
		}
		if key.room != "" || key.floor != "" {
			if key.unit == "" {
				key.unit = own.unit
			}
			return key
		}
		if own.empty() && !key.empty() {
			return key
		}
	}
	if t.Log.Setting.Layout == site.Long && t.Column == t.name && deviceKey(t.Log) && !own.marked && own.room == "" {
		own.words = nil
	}
	if !own.empty() || own.unit != "" {
		return own
	}
	return o.around(t)
}

// roomOf takes from the keys of a row those that name floor and room, when
// their columns say so; empty when none does.
func roomOf(columns []string, key string) string {
	parts := strings.SplitN(key, "/", len(columns))
	var out []string
	found := false
	for i, c := range columns {
		if i >= len(parts) {
			break
		}
		room, level, inner := false, false, false
		for _, t := range tokens(c) {
			room = room || t.is("room") || t.fold == "space" || t.fold == "location" || t.fold == "ort"
			level = level || t.is("floor") && len(t.fold) > 1
			inner = inner || t.is("window") || t.is("contact") || t.is("door")
		}
		switch {
		case inner:
		case level:
			out = append(out, "floor "+parts[i])
		case room:
			found = true
			if _, err := strconv.Atoi(parts[i]); err == nil {
				parts[i] = "room " + parts[i]
			}
			out = append(out, parts[i])
		}
	}
	if !found {
		return ""
	}
	return strings.Join(out, " ")
}

// deviceKey reports keys that name what measured, not where.
func deviceKey(l *Log) bool {
	for _, k := range l.Setting.KeyColumns {
		for _, t := range tokens(k) {
			switch t.fold {
			case "source", "origin", "device", "station", "gerat", "geraet", "quelle":
				return len(l.Setting.KeyColumns) == 1
			}
		}
	}
	return false
}

// around reads the place from sheet, file or folder.
func (o *owning) around(t *Track) place {
	var names []string
	if t.Log.Setting.Sheet != "" {
		names = append(names, t.Log.Setting.Sheet)
	}
	if t.Log.Setting.Layout != site.PerPoint {
		for _, s := range t.Log.shapes {
			if !t.Log.bySource || s.file.Base == t.Source {
				names = append(names, s.file.Stem())
				break
			}
		}
	}
	for _, n := range names {
		ts := tokens(n)
		pl := placeIn(n, ts, true)
		pl.words = specific(pl.words)
		if !pl.empty() || pl.unit != "" {
			pl.marked = false
			return pl
		}
	}
	return place{}
}

// specific drops words that files of any building carry.
func specific(words []string) []string {
	common := wordSet("sheet blatt feuille book mappe site final copy kopie sample test gebaude building bldg study week q backup new download hourly minute minutes min hour climate klima comfort environment env conditions sbs ddc gtc gtb glt gbt bacnet modbus knx")
	var out []string
	for _, w := range words {
		if !common[w] {
			out = append(out, w)
		}
	}
	return out
}

// dropCommon takes out words that every room's name carries: the building's.
func (o *owning) dropCommon() {
	count := map[string]int{}
	n := 0
	keys := map[string]bool{}
	for _, t := range o.p.Tracks {
		pl, ok := o.of[t]
		if !ok || pl.empty() || t.Likely.IsWeather() {
			continue
		}
		n++
		keys[pl.key()] = true
		seen := map[string]bool{}
		for _, w := range pl.words {
			if !seen[w] {
				count[w]++
			}
			seen[w] = true
		}
	}
	if len(keys) < 2 {
		return
	}
	for t, pl := range o.of {
		var kept []string
		for _, w := range pl.words {
			if count[w] < n {
				kept = append(kept, w)
			}
		}
		if len(kept) < len(pl.words) {
			pl.words = kept
			pl.text = ""
			o.of[t] = pl
		}
	}
}

// assign settles the owner of one mapped track.
func (o *owning) assign(t *Track) {
	pl := o.of[t]
	q := t.Quantity
	if q == site.ReturnAirTemp && t.Placement == site.PlacementReturn {
		if !pl.empty() && pl.unit == "" {
			q = site.AirTemp
			t.Quantity, t.Likely = q, q
			t.Reasons = append(t.Reasons, "a room's sensor in its return duct")
		} else {
			t.Placement = ""
		}
	}
	switch {
	case q.IsWeather():
		t.Owner, t.OwnerKind, t.OwnerConf = "site", site.OwnerSite, 0.95
	case pl.unit != "" && q.MayBelong(site.OwnerPlant):
		o.toUnit(t, pl)
	case !pl.empty() && q.MayBelong(site.OwnerZone):
		o.toZone(t, pl)
	case pl.unit != "" && q.MayBelong(site.OwnerZone):
		// A room's point named by its unit alone.
		zone := pl
		zone.words = []string{"room of", strings.ToLower(pl.unit)}
		zone.text = "room-of-" + pl.unit
		o.toZone(t, zone)
		o.link(pl.unit, t)
		t.OwnerConf = 0.7
		t.Doubts = append(t.Doubts, "the room is named by its unit "+pl.unit+" only")
	case q.MayBelong(site.OwnerSite) && t.names.any("unit") == 0 && q != site.PlantStatus:
		t.Owner, t.OwnerKind, t.OwnerConf = "site", site.OwnerSite, 0.65
		t.Doubts = append(t.Doubts, "the name says neither room nor unit: taken for the whole site")
	case q.MayBelong(site.OwnerPlant) && !q.MayBelong(site.OwnerZone), q == site.PlantStatus, q == site.SupplyAirTemp:
		pl.unit = o.loneUnit(t)
		o.toUnit(t, pl)
		t.OwnerConf = 0.65
		t.Doubts = append(t.Doubts, "the name says no unit")
	default:
		o.alone = append(o.alone, t)
	}
}

// loneUnit is the unit of a log whose names carry none.
func (o *owning) loneUnit(t *Track) string {
	if len(o.uorder) == 1 {
		return o.uorder[0]
	}
	return "unit of " + t.Log.Name
}

func (o *owning) toUnit(t *Track, pl place) {
	key := strings.ToLower(strings.NewReplacer("-", "", "_", "", " ", "", ".", "").Replace(pl.unit))
	// "AHU-01" and "AHU1" are one.
	ts := tokens(pl.unit)
	key = ""
	for _, x := range ts {
		if x.number {
			key += "-" + bare(x.fold)
		} else {
			key += "-" + x.fold
		}
	}
	id, ok := o.units[key]
	if !ok {
		id = pl.unit
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
// without its floor.
func (o *owning) merge() {
	for _, k := range append([]string{}, o.order...) {
		z := o.zones[k]
		var into *Zone
		if s, ok := z.key.split(); ok {
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
		delete(o.zones, k)
		for i, x := range o.order {
			if x == k {
				o.order = append(o.order[:i], o.order[i+1:]...)
				break
			}
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

// oneStation keeps one weather station where rows of several are mixed: which
// is nearest only a person can say. Copies of one series are kept once.
func (o *owning) oneStation() {
	best := map[string]*Track{}
	for _, t := range o.p.Tracks {
		if t.OwnerKind != site.OwnerSite || t.Quantity == "" || !t.Quantity.IsWeather() {
			continue
		}
		k := string(t.Quantity)
		b := best[k]
		switch {
		case b == nil:
			best[k] = t
		case t.copies(b):
			t.Likely, t.Quantity = t.Quantity, ""
			t.Doubts = append(t.Doubts, fmt.Sprintf("the same readings as %q", b.Column))
		case t.Log == b.Log && t.Log.Setting.Layout == site.Long && len(t.Log.Setting.ValueColumns) > 1:
			t.Likely, t.Quantity = t.Quantity, ""
			t.Doubts = append(t.Doubts, fmt.Sprintf("several stations in one log: %q was taken; keep the one nearest to the site", b.around))
		}
	}
}

// copies reports the same series under another name.
func (t *Track) copies(u *Track) bool {
	if t.number != u.number || t.min != u.min || t.max != u.max || len(t.bins.mean) != len(u.bins.mean) || t.number < 10 {
		return false
	}
	for i := range t.bins.mean {
		a, b := t.bins.mean[i], u.bins.mean[i]
		if a != b && (a == a || b == b) {
			return false
		}
	}
	return true
}

// natural pads numbers so that 2 sorts before 10.
func natural(s string) string {
	return figures.ReplaceAllStringFunc(s, func(d string) string { return strings.Repeat("0", max(0, 8-len(d))) + d })
}
