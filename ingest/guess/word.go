package guess

import (
	"strings"
	"unicode"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/reading"
)

// token is one word or number of a name.
type token struct {
	raw, fold string
	glued     bool // unknown, but grown together with a known word
	number    bool
	from, to  int // bytes of the name
	tags      []tag
	strength  float64
	unit      bool // part of a unit, taken out
}

func (t *token) is(want tag) bool {
	for _, x := range t.tags {
		if x == want {
			return true
		}
	}
	return false
}

// known reports a word that the lexicon holds.
func (t *token) known() bool { return len(t.tags) > 0 }

// tokens cuts a name into words and numbers: at separators, between letters
// and digits, where a capital begins a word, and compound words at the words
// they are made of.
func tokens(name string) []token {
	var raw []token
	begin, last := -1, rune(0)
	class := func(r rune) int {
		switch {
		case unicode.IsDigit(r):
			return 1
		case unicode.IsLetter(r) || r == '°':
			return 2
		case unicode.IsMark(r):
			return 2
		}
		return 0
	}
	flush := func(to int) {
		if begin >= 0 {
			raw = append(raw, token{raw: name[begin:to], from: begin, to: to})
		}
		begin = -1
	}
	var rs []rune
	var starts []int // the byte each begins at; invalid bytes take one
	for at, r := range name {
		rs, starts = append(rs, r), append(starts, at)
	}
	for i, r := range rs {
		at := starts[i]
		c := class(r)
		switch {
		case c == 0:
			flush(at)
		case begin < 0:
			begin = at
		case class(last) != c:
			flush(at)
			begin = at
		case c == 2 && unicode.IsUpper(r) && unicode.IsLower(last):
			flush(at)
			begin = at
		case c == 2 && unicode.IsUpper(last) && unicode.IsUpper(r) && i+2 < len(rs) && unicode.IsLower(rs[i+1]) && unicode.IsLower(rs[i+2]):
			flush(at)
			begin = at
		}
		last = r
	}
	flush(len(name))
	raw = joinSpecial(raw, name)
	var out []token
	for _, t := range raw {
		t.fold = cell.Fold(t.raw)
		t.number = t.fold != "" && t.fold[0] >= '0' && t.fold[0] <= '9'
		if t.number {
			out = append(out, t)
			continue
		}
		out = append(out, meanings(t)...)
	}
	return out
}

// joinSpecial puts back together what belongs together: CO2, PM2.5, kW, set
// point, dew point.
func joinSpecial(in []token, name string) []token {
	var out []token
	for i := 0; i < len(in); i++ {
		a := in[i]
		fold := strings.ToLower(a.raw)
		next := func(k int) string {
			if i+k < len(in) {
				return strings.ToLower(in[i+k].raw)
			}
			return ""
		}
		join := func(k int, fold string) {
			t := token{raw: name[a.from:in[i+k].to], from: a.from, to: in[i+k].to, fold: fold}
			e := lexicon[fold]
			t.raw, t.tags, t.strength = fold, e.tags, e.strength
			out = append(out, t)
			i += k
		}
		switch {
		case fold == "co" && next(1) == "2":
			join(1, "co2")
		case fold == "pm" && next(1) == "2" && next(2) == "5":
			join(2, "pm25")
		case fold == "pm" && (next(1) == "25" || next(1) == "10" || next(1) == "1" || next(1) == "4"):
			join(1, "pm"+next(1))
		case fold == "k" && (next(1) == "w" || next(1) == "wh"):
			join(1, "k"+next(1))
		case (fold == "set" || fold == "soll") && (next(1) == "point" || next(1) == "pt" || next(1) == "wert"):
			join(1, "setpoint")
		case fold == "dew" && (next(1) == "point" || next(1) == "pt"):
			join(1, "dewpoint")
		case fold == "air" && next(1) == "handling" && next(2) == "unit":
			join(2, "ahu")
		case fold == "fan" && next(1) == "coil" && next(2) == "unit":
			join(2, "fcu")
		case fold == "fan" && next(1) == "coil":
			join(1, "fcu")
		case (fold == "rooftop" || fold == "roof") && next(1) == "unit", fold == "roof" && next(1) == "top":
			join(1, "rtu")
			if next(1) == "unit" {
				i++
			}
		case fold == "carbon" && next(1) == "dioxide":
			join(1, "co2")
		case fold == "zn" && next(1) == "t" || fold == "rm" && next(1) == "t" || fold == "zone" && next(1) == "t":
			join(1, "znt")
		case fold == "point" && next(1) == "de" && next(2) == "rosee", fold == "point" && next(1) == "de" && next(2) == "rosée":
			join(2, "dewpoint")
		default:
			out = append(out, a)
		}
	}
	return out
}

// meanings looks a word up, and where it is unknown cuts it into known ones.
func meanings(t token) []token {
	if t.tags != nil {
		return []token{t}
	}
	if e, ok := lookup(t.fold); ok {
		t.tags, t.strength = e.tags, e.strength
		return []token{t}
	}
	if parts := cut(t.fold); parts != nil {
		var out []token
		for _, p := range parts {
			e, known := lookup(p)
			out = append(out, token{glued: !known, raw: p, fold: p, from: t.from, to: t.to, tags: e.tags, strength: min(e.strength, 0.95)})
		}
		return out
	}
	return []token{t}
}

// umlauts takes back the e that stands for two dots.
var umlauts = strings.NewReplacer("ae", "a", "oe", "o", "ue", "u")

// lookup finds a word, also where an umlaut is written with an e, or with a
// plural s.
func lookup(w string) (entry, bool) {
	if e, ok := lexicon[w]; ok {
		return e, true
	}
	if strings.ContainsAny(w, "e") && len(w) > 3 {
		u := umlauts.Replace(w)
		if e, ok := lexicon[u]; ok && u != w {
			return e, true
		}
	}
	if len(w) > 4 && strings.HasSuffix(w, "s") {
		if e, ok := lexicon[w[:len(w)-1]]; ok && (e.strength == fullWord || w == "temps") {
			return e, true
		}
	}
	return entry{}, false
}

// cut divides a compound word into known words, the fewest; the first may be
// unknown when a long known word ends it (a room's name). Nil when it cannot.
func cut(w string) []string {
	if len(w) < 6 || len(w) > 60 {
		return nil
	}
	w = umlauts.Replace(w)
	n := len(w)
	best := make([][]string, n+1)
	best[0] = []string{}
	for i := 1; i <= n; i++ {
		for j := max(0, i-22); j <= i-3; j++ {
			if best[j] == nil {
				continue
			}
			piece := w[j:i]
			e, ok := lexicon[piece]
			if !ok && i < n && strings.HasSuffix(piece, "s") && len(piece) > 5 { // a linking s
				e, ok = lexicon[piece[:len(piece)-1]]
				piece = piece[:len(piece)-1]
			}
			if !ok || e.strength < fullWord && len(piece) < 4 {
				continue
			}
			if best[i] == nil || len(best[j])+1 < len(best[i]) {
				best[i] = append(append([]string{}, best[j]...), piece)
			}
		}
	}
	if len(best[n]) > 1 {
		return best[n]
	}
	for j := 3; j <= n-4; j++ {
		if e, ok := lexicon[w[j:]]; ok && e.strength == fullWord && len(w[j:]) >= 6 {
			return []string{w[:j], w[j:]}
		}
	}
	return nil
}

// speaks reports whether a name says anything about a quantity.
func speaks(ts []token) bool {
	for i := range ts {
		for _, t := range ts[i].tags {
			switch t {
			case "noiseword", "calendar", "floor", "room", "air", "rel", "global", "unit":
				continue
			}
			if ts[i].strength > shortWord {
				return true
			}
		}
	}
	return false
}

// keyWords are words in the names of columns that name points.
var keyWords = wordSet("id name point object objekt sensor contact kontakt drive antrieb detector melder tag device gerat geraet source origin station channel kanal messpunkt datapoint datenpunkt " +
	"variable parameter signal room raum zone zimmer key location ort item measure punto capteur nom bezeichnung series trend window fenster nr no number unit space building floor description beschreibung messstelle quelle " +
	"punkt sensorid meter zahler equipment asset topic path entity label")

func wordSet(s string) map[string]bool {
	m := map[string]bool{}
	for _, w := range strings.Fields(s) {
		m[w] = true
	}
	return m
}

// isKeyName reports a name such as "Room_ID" or "sensor name".
func isKeyName(ts []token) bool {
	n := 0
	for i := range ts {
		if ts[i].number || !keyWords[ts[i].fold] {
			return false
		}
		n++
	}
	return n > 0
}

// keyRank puts general keys first: buildings, rooms, then what is in them.
func keyRank(ts []token) int {
	rank := 5
	for i := range ts {
		switch ts[i].fold {
		case "building", "site", "origin":
			rank = min(rank, 0)
		case "floor":
			rank = min(rank, 1)
		case "room", "raum", "zone", "zimmer", "space", "location", "ort":
			rank = min(rank, 2)
		}
	}
	return rank
}

// isCalendar reports a column that holds a part of the date or time.
func isCalendar(ts []token) bool {
	n := 0
	for i := range ts {
		switch {
		case ts[i].is("calendar"), ts[i].fold == "local", ts[i].fold == "utc", ts[i].fold == "of", ts[i].fold == "id", ts[i].fold == "end", ts[i].fold == "start":
			if ts[i].is("calendar") {
				n++
			}
		default:
			return false
		}
	}
	return n > 0
}

var (
	lockWords = wordSet("released locked freigegeben gesperrt verriegelt lock unlock unlocked libere verrouille blocked permitted summer winter auto automatic automatik auto1 manual hand")
	presWords = wordSet("occupied unoccupied vacant present absent belegt frei anwesend abwesend occupe inoccupe libre presence presente motion besetzt leer bezet vrij occupato libero")
	openWords = wordSet("open closed close shut offen zu geschlossen ouvert ferme ouverte fermee aperto chiuso aperta chiusa abierto cerrado auf dicht gesloten opened geoffnet abierta cerrada")
	goodWords = wordSet("good ok bad uncertain valid invalid fault stale gut fehler schlecht bon mauvais normal overridden questionable raw interpolated")
)

func isState(s string) bool {
	w := cell.Fold(s)
	return lockWords[w] || presWords[w] || openWords[w] || plantMeaning(w) != "" || onOff(w) != ""
}

func isQuality(s string) bool {
	ts := strings.FieldsFunc(cell.Fold(s), func(r rune) bool { return r == '{' || r == '}' || r == ',' || r == ' ' })
	if len(ts) == 0 {
		return false
	}
	return goodWords[ts[0]]
}

// decoderOf answers what the shared vocabulary of cells says of a word.
func decoderOf(q site.Quantity) func(w string) (float64, bool) {
	p := site.Point{Quantity: q}
	d := cell.NewDecoder(-1, &p, cell.Style{Mark: '.'}, nil)
	return func(w string) (float64, bool) {
		v, why, _ := d.Decode([]byte(w))
		return v, why == reading.Accepted
	}
}

// plantMeaning is what a word says of a plant unit: off, on, vent, heat, cool,
// or empty.
func plantMeaning(w string) string {
	v, ok := decoderOf(site.PlantStatus)(w)
	if !ok {
		// "Heating stage 2", "Fan only", "Cooling 1": the first known word.
		for _, t := range tokens(w) {
			switch {
			case t.is("heat") && t.strength >= abbreviation:
				return "heat"
			case t.is("cool") && t.strength >= abbreviation:
				return "cool"
			}
		}
		return ""
	}
	return [...]string{"off", "on", "vent", "heat", "cool"}[int(v)]
}

// onOff is what a word says of a switch: on, off, or empty.
func onOff(w string) string {
	v, ok := decoderOf(site.Presence)(w)
	switch {
	case !ok:
		return ""
	case v == 1:
		return "on"
	}
	return "off"
}

func isMissing(s string) bool {
	p := site.Point{Quantity: site.AirTemp}
	_, why, _ := cell.NewDecoder(-1, &p, cell.Style{Mark: '.'}, nil).Decode([]byte(s))
	return why == reading.Missing
}
