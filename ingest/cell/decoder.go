package cell

import (
	"math"
	"strconv"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Decoder reads the cells of one point of one log. It remembers the texts it
// has met, so states cost one lookup. Not safe for concurrent use; make a new
// one for every pass, since it takes the point's conversion when it is made.
type Decoder struct {
	// Point indexes Site.Points.
	Point int
	// Plain is true when a short number needs nothing but Factor and Offset.
	Plain          bool
	Factor, Offset float64

	kind      site.Kind
	quantity  site.Quantity
	style     Style
	unit      string
	low, high float64
	extra     map[string]bool    // further missing markers, folded
	known     map[string]float64 // folded word to value
	openWord  string             // folded; empty when not given
	openNum   float64            // the number openWord is, NaN when none
	cache     map[string]verdict

	// Unknown counts words that nothing maps, as written; New ones beyond a
	// cap are counted under "".
	Unknown map[string]int64
}

type verdict struct {
	value  float64
	reason reading.Reason
	text   string
}

const (
	cacheMax   = 4096
	unknownMax = 50
)

// NewDecoder returns a decoder for the point with the index in a log that
// writes numbers in the style, with further missing markers.
func NewDecoder(point int, p *site.Point, style Style, markers []string) *Decoder {
	t, _ := p.Quantity.Trait()
	d := &Decoder{Point: point, Factor: p.Conversion.Factor, Offset: p.Conversion.Offset,
		kind: t.Kind, quantity: p.Quantity, style: style, unit: unitKey(p.Unit), low: t.Low, high: t.High,
		cache: map[string]verdict{}, Unknown: map[string]int64{}, openNum: math.NaN()}
	if d.Factor == 0 { // no conversion given
		d.Factor, d.Offset = 1, 0
	}
	d.extra = map[string]bool{}
	for _, m := range markers {
		d.extra[Fold(m)] = true
		if v, rest, ok := style.Number([]byte(m)); ok && len(rest) == 0 {
			d.extra[strconv.FormatFloat(v, 'f', -1, 64)] = true
		}
	}
	switch t.Kind {
	case site.Switch, site.Status:
		d.known = d.wordsOf(p)
	default:
		d.Plain = true
		for m := range d.extra { // a marker that is a number needs the long way
			if _, _, ok := style.Number([]byte(m)); ok {
				d.Plain = false
			}
		}
	}
	return d
}

// wordsOf joins the vocabulary with the point's own words.
func (d *Decoder) wordsOf(p *site.Point) map[string]float64 {
	base := vocabulary
	if d.kind == site.Status {
		base = plantWords
	}
	m := make(map[string]float64, len(base)+len(p.Values))
	for w, v := range base {
		m[w] = v
	}
	if p.Quantity == site.ManualOverride {
		m["auto"], m["automatic"], m["automatik"] = 0, 0, 0
	}
	for w, meaning := range p.Values {
		if v, ok := meaningOf(meaning, d.kind); ok {
			m[Fold(w)] = v
		}
	}
	if p.OpenValue != "" {
		d.openWord = Fold(p.OpenValue)
		if v, rest, ok := d.style.Number([]byte(p.OpenValue)); ok && len(rest) == 0 {
			d.openNum = v
		}
		if d.kind == site.Switch { // every other known word means shut
			for w := range m {
				m[w] = 0
			}
		}
		m[d.openWord] = 1
	}
	return m
}

// meaningOf is the value of a meaning written in a mapping.
func meaningOf(s string, k site.Kind) (float64, bool) {
	w := strings.ToLower(strings.TrimSpace(s))
	if k == site.Status {
		switch w {
		case "off", "shut", "0":
			return float64(site.PlantOff), true
		case "on", "open":
			return float64(site.PlantOn), true
		case "vent":
			return float64(site.PlantVent), true
		case "heat":
			return float64(site.PlantHeat), true
		case "cool":
			return float64(site.PlantCool), true
		}
		return 0, false
	}
	switch w {
	case "open", "on", "1", "vent", "heat", "cool":
		return 1, true
	case "shut", "closed", "off", "0":
		return 0, true
	}
	return 0, false
}

// Scale turns a logged number into the canonical unit.
func (d *Decoder) Scale(x float64) float64 { return float64(x*d.Factor) + d.Offset }

// Numeric reports whether the point's cells are numbers (and not states).
func (d *Decoder) Numeric() bool { return d.known == nil }

// Decode reads a cell: a value in the canonical unit with reading.Accepted, or
// the reason it is none. text is the cell for a message; it costs nothing for
// texts met before.
func (d *Decoder) Decode(b []byte) (value float64, r reading.Reason, text string) {
	b = trim(b)
	if len(b) == 0 {
		return 0, reading.Missing, ""
	}
	if d.known == nil {
		if v, n := Short(b, d.style.Mark); n == len(b) && len(d.extra) == 0 {
			return d.number(v)
		}
	}
	if v, ok := d.cache[string(b)]; ok {
		if v.reason == reading.UnknownWord {
			d.count(v.text)
		}
		return v.value, v.reason, v.text
	}
	v := d.decode(b)
	if len(d.cache) < cacheMax && (d.known != nil || v.reason != reading.Accepted) {
		d.cache[string(b)] = v
	}
	if v.reason == reading.UnknownWord {
		d.count(v.text)
	}
	return v.value, v.reason, v.text
}

func (d *Decoder) count(word string) {
	if _, ok := d.Unknown[word]; !ok && len(d.Unknown) >= unknownMax {
		word = ""
	}
	d.Unknown[word]++
}

// number judges a plain number: a value, or a marker such as -999 where that
// is not physical.
func (d *Decoder) number(x float64) (float64, reading.Reason, string) {
	v := d.Scale(x)
	if x <= -999 && d.marker(x, v) {
		return 0, reading.Missing, ""
	}
	return v, reading.Accepted, ""
}

// marker reports whether x is a number that stands for a missing value; v is
// x in the canonical unit.
func (d *Decoder) marker(x, v float64) bool {
	// A quantity without a physical floor, such as power, has no use for these
	// numbers either.
	return (x == -999 || x == -9999 || x == -99999) && (v < d.low || v > d.high || d.low <= -1e5)
}

func (d *Decoder) decode(b []byte) verdict {
	text := Text(b, d.style.Latin)
	word := Fold(text)
	if missing[word] && !d.mapped(word) || d.extra[word] {
		return verdict{0, reading.Missing, text}
	}
	if d.known != nil {
		return d.state(b, word, text)
	}
	x, rest, ok := d.style.Number(b)
	if !ok || len(rest) != 0 && !d.sameUnit(Text(rest, d.style.Latin)) || math.IsInf(x, 0) {
		return verdict{0, reading.NotNumber, text}
	}
	if d.extra[strconv.FormatFloat(x, 'f', -1, 64)] {
		return verdict{0, reading.Missing, text}
	}
	v, r, _ := d.number(x)
	return verdict{v, r, text}
}

func (d *Decoder) mapped(word string) bool { _, ok := d.known[word]; return ok }

// state reads a switch or a plant status: a word of the mapping or the
// vocabulary, or 0 and 1.
func (d *Decoder) state(b []byte, word, text string) verdict {
	if v, ok := d.known[word]; ok {
		return verdict{v, reading.Accepted, text}
	}
	x, rest, ok := d.style.Number(b)
	if !ok || len(rest) != 0 {
		return verdict{0, reading.UnknownWord, text}
	}
	if x == -999 || x == -9999 || x == -99999 {
		return verdict{0, reading.Missing, text}
	}
	if v, ok := d.known[strconv.FormatFloat(x, 'f', -1, 64)]; ok { // "1.0" where 1 is mapped
		return verdict{v, reading.Accepted, text}
	}
	if d.openWord != "" && d.kind == site.Switch {
		if x == d.openNum {
			return verdict{1, reading.Accepted, text}
		}
		if x == 0 || x == 1 {
			return verdict{0, reading.Accepted, text}
		}
	}
	if x == 0 || x == 1 {
		return verdict{x, reading.Accepted, text}
	}
	return verdict{0, reading.UnknownWord, text}
}

// SameUnit reports whether two spellings mean one unit.
func SameUnit(a, b string) bool { return unitKey(a) == unitKey(b) }

// sameUnit reports whether a unit repeated in a cell is the point's.
func (d *Decoder) sameUnit(s string) bool {
	k := unitKey(s)
	return k == d.unit || k == "%" && d.unit == "percent"
}

// unitKey brings the spellings of one unit together.
func unitKey(s string) string {
	s = strings.ToLower(strings.TrimSpace(s))
	s = strings.NewReplacer("\u00b3", "3", "\u00b2", "2", "\u00b5", "u", "\u03bc", "u", "\u00b0", "", "\u00ba", "", " ", "", "deg.", "", "^", "").Replace(s)
	switch s {
	case "degc", "celsius":
		return "c"
	case "degf", "fahrenheit":
		return "f"
	case "kelvin":
		return "k"
	case "percent", "pct", "%rh", "%r.h.", "%rf", "%hr":
		return "%"
	}
	return s
}

// Hint says how unknown words of the point can be mapped.
func (d *Decoder) Hint() string {
	if d.kind == site.Status {
		return "map them in the point's values to off, on, vent, heat or cool"
	}
	return "name the word that means open (or on) in open_value, or map them in the point's values"
}
