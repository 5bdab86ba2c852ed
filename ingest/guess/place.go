package guess

import (
	"strconv"
	"strings"
)

// place is where in the building a name says a point is: floor, room and
// further words, brought to a form in which "F1_R03", "L1.03" and "1.3" are
// the same.
type place struct {
	floor, room string
	words       []string
	marked      bool   // a word such as room or floor stands beside a number
	text        string // as written, for the id
	unit        string // the plant unit named, such as AHU-1
	unitKind    string
	index       string // number of a window or sensor within the room
}

func (p *place) key() string {
	if p.empty() {
		return ""
	}
	return p.floor + "|" + p.room + "|" + strings.Join(p.words, "_")
}

func (p *place) empty() bool { return p.floor == "" && p.room == "" && len(p.words) == 0 }

// bare drops leading zeros.
func bare(s string) string {
	t := strings.TrimLeft(s, "0")
	if t == "" {
		return "0"
	}
	return t
}

var (
	sideWords = wordSet("left right links rechts gauche droite upper lower oben unten top bottom haut bas sinistra destra izquierda derecha inner outer main master gesamt total all new old neu alt mitte middle center centre " +
		"east_ and und et y e de der die das la le les of the for in an am im du da do cl op no min max std lowest highest")
	roomNames = wordSet("office buro bureau chambre meeting besprechung kamer stanza sala camera habitacion local lokaal int interior interieur inside innen indoor interno inne binnen")
	genericIn = wordSet("int interior interieur inside innen indoor interno inne binnen ambiance ambiante ambiant room raum zone")
	localUnit = wordSet("fcu vav cav fancoil ventiloconvecteur umluftkuhlgerat split klimagerat vavbox fc lg vc raumklimagerat")
)

// placeIn reads the place out of the words of a name. stem is set for names of
// files, where dates are passed over.
func placeIn(name string, ts []token, stem bool) place {
	return placeAfter(name, ts, stem, 0)
}

// placeAfter reads the place from the words after the first skip ones.
func placeAfter(name string, ts []token, stem bool, skip int) place {
	var p place
	from, to := -1, -1
	span := func(i int) {
		if from < 0 {
			from = ts[i].from
		}
		to = max(to, ts[i].to)
	}
	next := func(i int) *token {
		if i+1 < len(ts) && !ts[i+1].unit {
			return &ts[i+1]
		}
		return nil
	}
	adjacent := func(i int) bool { return i+1 < len(ts) && ts[i+1].from-ts[i].to <= 1 }
	for i := skip; i < len(ts); i++ {
		t := &ts[i]
		if t.unit {
			continue
		}
		n := next(i)
		switch {
		case stem && t.number && dateLike(t.fold, n):
			for i+1 < len(ts) && ts[i+1].number && len(ts[i+1].fold) <= 2 {
				i++ // the month and day after a year
			}
		case t.is("unit") && (t.strength >= abbreviation || n != nil && n.number):
			p.unitKind = t.fold
			p.unit = strings.ToUpper(t.raw)
			j := i + 1
			got := false
			for j < len(ts) && !ts[j].unit {
				x := &ts[j]
				isMark := x.is("room") || x.is("floor") && len(x.fold) == 1
				if x.number || !got && isMark && j+1 < len(ts) && ts[j+1].number {
					sep := "-"
					if got {
						sep = "."
					}
					if !x.number {
						p.unit += sep + strings.ToUpper(x.raw) + ts[j+1].raw
						j++
					} else {
						if got && len(ts[j-1].raw) > 1 && !localUnit[p.unitKind] {
							break
						}
						p.unit += sep + x.raw
					}
					got = true
					j++
					continue
				}
				break
			}
			i = j - 1
		case t.is("vavbox"):
			p.marked = true
			j := i + 1
			var nums []string
			for j < len(ts) && !ts[j].unit && (ts[j].number || len(ts[j].fold) == 1 && j+1 < len(ts) && ts[j+1].number && len(nums) == 0) {
				if ts[j].number {
					nums = append(nums, bare(ts[j].fold))
				}
				span(j)
				j++
			}
			p.numbers(nums)
			i = j - 1
		case t.is("floor"):
			switch {
			case n != nil && n.number:
				p.marked = true
				span(i)
				span(i + 1)
				i++
				num := n.fold
				if t.fold == "g" && adjacentTo(t, n) && p.floor == "" {
					p.floor, p.room = "g", bare(num)
					break
				}
				if p.floor == "" {
					p.floor = bare(num)
				} else {
					p.room = bare(num)
				}
			case t.fold == "eg" || t.fold == "rdc" || t.fold == "erdgeschoss":
				p.floor, p.marked = "g", true
				span(i)
			case t.fold == "dg" || t.fold == "ug" || t.fold == "untergeschoss":
				p.floor, p.marked = t.fold, true
				span(i)
			case t.fold == "og" || t.fold == "obergeschoss" || t.fold == "etage" || t.fold == "stock":
				if i > skip && ts[i-1].number && p.floor == "" { // "1. OG"
					p.floor, p.marked = bare(ts[i-1].fold), true
					p.room = ""
					span(i - 1)
					span(i)
				}
			}
		case t.is("room") && (n != nil && n.number || n != nil && len(n.fold) == 1 && !n.known()):
			if p.marked && p.room != "" && p.floor == "" { // "R+1 Salle 02": the first was the floor
				p.floor, p.room = p.room, ""
			}
			p.marked = true
			span(i)
			if roomNames[t.fold] && !genericIn[t.fold] {
				p.words = append(p.words, t.fold)
			}
		case t.is("room"):
			if roomNames[t.fold] && !genericIn[t.fold] && t.strength == fullWord {
				p.words = append(p.words, t.fold)
				span(i)
			}
		case (t.is("window") || t.is("contact")) && n != nil && n.number && len(n.fold) <= 2 && !p.empty():
			p.index = n.fold
			i++
		case t.fold == "ai" || t.fold == "ao" || t.fold == "bi" || t.fold == "bo" || t.fold == "di" || t.fold == "do" || t.fold == "bv" || t.fold == "msv" || t.fold == "dp":
			if n != nil && n.number {
				i++ // an address, not a place
			}
		case t.number:
			p.number(ts, i, span)
		case !t.known() && len(t.fold) == 1 && n != nil && n.number && adjacent(i):
			switch {
			case !p.empty() || p.unit != "": // W1 of a room: which window
				p.index = n.fold
			default:
				p.words = append(p.words, t.fold+bare(n.fold)) // "B12"
				span(i)
				span(i + 1)
			}
			i++
		case !t.known() && len(t.fold) == 1:
			if i > 0 && ts[i-1].number && ts[i].from == ts[i-1].to && p.room != "" { // 101a
				p.room += t.fold
				span(i)
			}
		case !t.known() && !sideWords[t.fold]:
			p.words = append(p.words, t.fold)
			span(i)
		}
	}
	if from >= 0 && to <= len(name) {
		p.text = strings.Trim(name[from:to], " _-./:")
	}
	return p
}

func adjacentTo(a, b *token) bool { return a.to == b.from }

// number takes a number that no marker claims.
func (p *place) number(ts []token, i int, span func(int)) {
	t := &ts[i]
	switch {
	case p.room == "" && p.floor == "" && i+1 < len(ts) && ts[i+1].number && len(t.fold) <= 2 && len(ts[i+1].fold) <= 3 && ts[i+1].from-t.to == 1:
		p.floor = bare(t.fold)
		span(i)
	case p.room == "":
		after := i > 0 && ts[i-1].known() && !ts[i-1].is("room") && !ts[i-1].is("noiseword") && !ts[i-1].is("floor")
		if after && len(t.fold) == 1 { // "T2": perhaps a second sensor
			p.index = t.fold
			return
		}
		p.room = bare(t.fold)
		span(i)
	case !p.marked && len(p.room) <= 2 && len(t.fold) >= 3:
		// "NAE1 FEC-101": the longer number is the room's.
		p.words = append(p.words, p.room)
		p.room = bare(t.fold)
		span(i)
	default:
		p.index = t.fold
	}
}

// numbers takes the numbers of a terminal box: floor and room, or room.
func (p *place) numbers(nums []string) {
	switch {
	case len(nums) >= 2:
		p.floor, p.room = nums[0], nums[1]
	case len(nums) == 1:
		p.room = nums[0]
	}
}

// dateLike reports a number that is a year or a date.
func dateLike(s string, next *token) bool {
	v, err := strconv.Atoi(s)
	if err != nil {
		return false
	}
	switch len(s) {
	case 4:
		return v >= 1990 && v <= 2100
	case 6:
		return v/100 >= 1990 && v/100 <= 2100 && v%100 >= 1 && v%100 <= 12
	case 8:
		return v/10000 >= 1990 && v/10000 <= 2100
	}
	return len(s) >= 9
}

// split gives the floor and room a three-digit room number may mean: 206 is
// room 6 on floor 2 (common practice).
func (p *place) split() (place, bool) {
	if p.floor != "" || len(p.room) != 3 || len(p.words) > 0 {
		return place{}, false
	}
	for _, c := range p.room {
		if c < '0' || c > '9' {
			return place{}, false
		}
	}
	return place{floor: p.room[:1], room: bare(p.room[1:])}, true
}
