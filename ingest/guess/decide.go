package guess

import (
	"fmt"
	"sort"
	"strings"

	"sashlog/configs/site"
)

// decide settles the quantity of every track: first by its own name and
// values, then once more with what the rest of its log turned out to be.
func (p *Proposal) decide() {
	byLog := map[*Log][]*Track{}
	for _, t := range p.Tracks {
		byLog[t.Log] = append(byLog[t.Log], t)
	}
	for _, l := range p.Logs {
		list := byLog[l]
		names := make([]*naming, len(list))
		imperial := false
		for i, t := range list {
			names[i] = readName(t.around, t.name)
			t.names = names[i]
			if !names[i].hasUnit && t.unitText != "" {
				names[i].unit, names[i].hasUnit = unitNamed(t.unitText)
			}
			imperial = imperial || names[i].unit.text == "degF" || names[i].unit.text == "mph"
		}
		counted := map[string]bool{}
		for _, t := range list {
			counted[t.name] = counted[t.name] || t.number > 0 && t.whole && t.max > 1 && t.max < 1000 && t.Log.Setting.Layout == site.Long && t.Column != t.name
		}
		for i, t := range list {
			t.counted = counted[t.name]
			t.decideIn(names[i], imperial)
			imperial = imperial || t.Unit == "degF" && !sameText(names[i].unit.text, "degC")
		}
		if imperial {
			for i, t := range list {
				t.decideIn(names[i], true)
			}
		}
		l.weather(list)
		for _, t := range list {
			t.sayLogging()
			t.seldom()
		}
	}
}

// judged is a candidate with what the values say to it.
type judged struct {
	candidate
	conf   float64
	v      fit
	unit   string
	sure   bool
	said   string // why this unit
	doubts []string
}

// decideIn decides by the name alone, and where that maps nothing once more
// with what the file (or sheet) is called: "windows.csv", "plant_temps.csv".
func (t *Track) decideIn(n *naming, imperial bool) {
	t.decide(n, imperial)
	if t.Quantity != "" || t.Log.Setting.Layout == site.PerPoint && len(n.tokens) == 0 {
		return
	}
	first := t.Guess
	wider := n.within(t.Log.title())
	t.decide(wider, imperial)
	if t.Quantity == "" {
		t.Guess = first
		return
	}
	t.Reasons = append(t.Reasons, fmt.Sprintf("the file is called %q", t.Log.title()))
}

// title is what the files of a log are called.
func (l *Log) title() string {
	if l.Setting.Layout == site.PerPoint || len(l.shapes) == 0 {
		return l.Name
	}
	s := l.shapes[0]
	if s.log.Sheet != "" {
		return s.file.Stem() + " " + s.log.Sheet
	}
	return s.file.Stem()
}

// decide weighs the candidates of a name against the values.
func (t *Track) decide(n *naming, imperial bool) {
	t.Guess = Guess{}
	var list []judged
	for _, c := range n.candidates(t) {
		j := judged{candidate: c}
		if c.q == "" {
			j.conf = 0.9 * c.score
			list = append(list, j)
			continue
		}
		var doubt string
		j.unit, j.sure, j.said, doubt = t.fitUnit(c.q, n.unit, imperial)
		if doubt != "" {
			j.doubts = append(j.doubts, doubt)
		}
		j.v = t.fits(c.q, j.unit)
		j.conf = 1 - (1-0.9*c.score)*(1-j.v.support)
		if j.v.against != "" {
			j.conf *= 0.3
		}
		list = append(list, j)
	}
	sort.SliceStable(list, func(a, b int) bool { return list[a].conf > list[b].conf })
	if len(list) == 0 {
		t.lookOnly()
		return
	}
	b := list[0]
	t.Confidence = b.conf
	if b.q == "" {
		t.Reasons = []string{b.why, b.other}
		return
	}
	t.Likely, t.Unit, t.UnitSure, t.Doubts = b.q, b.unit, b.sure, b.doubts
	t.Reasons = append(t.Reasons, b.why)
	if n.hasUnit && n.unit.text != "" {
		t.Reasons = append(t.Reasons, "unit "+n.unit.text)
	}
	if b.v.why != "" {
		t.Reasons = append(t.Reasons, b.v.why)
	}
	if b.said != "" && !n.hasUnit {
		t.Reasons = append(t.Reasons, b.said)
	}
	t.Placement = b.placed
	t.Doubts = append(t.Doubts, b.v.doubts...)
	if g := n.glued(); g != "" && b.q == site.AirTemp {
		t.Doubts = append(t.Doubts, fmt.Sprintf("what does %q say of it?", g))
		t.Confidence = min(t.Confidence, MapAt-0.01)
		return
	}
	switch {
	case b.v.against != "":
		t.Doubts = append(t.Doubts, b.v.against)
		return
	case b.needs != "":
		t.Doubts = append(t.Doubts, b.needs)
		return
	case b.v.needs != "":
		t.Doubts = append(t.Doubts, b.v.needs)
		return
	}
	for _, o := range list[1:] {
		if o.q != b.q && o.conf > b.conf-0.05 && o.v.against == "" {
			what := string(o.q)
			if o.q == "" {
				what = o.other
			}
			t.Doubts = append(t.Doubts, fmt.Sprintf("as well %s (%s)", what, o.why))
			t.Confidence = min(t.Confidence, MapAt-0.01)
			return
		}
	}
	t.Values = b.v.values
	if b.conf >= MapAt {
		t.Quantity = b.q
	}
}

// lookOnly says what the values of a track without any telling name look like;
// that alone never maps a column.
func (t *Track) lookOnly() {
	switch {
	case t.textual():
		t.Reasons = []string{"the name says nothing known; states " + t.someWords()}
	case t.number < 20:
		t.Reasons = []string{"the name says nothing known"}
	case t.q(0.05) > 370 && t.q(0.05) < 480 && t.q(0.99) > 550 && t.q(0.99) < 5000 && t.q(0.5) < 900:
		t.Likely, t.Confidence = site.CO2, 0.5
		t.Reasons = []string{fmt.Sprintf("the name says nothing known; from %.0f to %.0f the values look like CO2 in ppm", t.q(0.05), t.q(0.99))}
	case t.binary():
		t.Reasons = []string{"the name says nothing known; values 0 and 1"}
	case t.q(0.02) > 12 && t.q(0.98) < 34 && t.q(0.98)-t.q(0.02) > 1:
		t.Likely, t.Confidence = site.AirTemp, 0.4
		t.Reasons = []string{fmt.Sprintf("the name says nothing known; from %.1f to %.1f the values could be a room's temperature", t.q(0.02), t.q(0.98))}
	default:
		t.Reasons = []string{fmt.Sprintf("the name says nothing known; values %.4g to %.4g", t.min, t.max)}
	}
}

// weather turns plain temperature and humidity into outdoor ones where the
// rest of the log is weather, or its name says so.
func (l *Log) weather(list []*Track) {
	outdoor, indoor := 0, 0
	for _, t := range list {
		q := t.Likely
		switch {
		case q == site.WindSpeed || q == site.WindDirection || q == site.WindGust || q == site.Rain || q == site.Solar || q == site.OutdoorDewPoint:
			outdoor++
		case q == site.AirTemp || q == site.Humidity || q == "" || q.IsWeather():
			if t.names.any("room") > 0 {
				indoor++
			}
		default:
			indoor++
		}
	}
	named := ""
	for _, s := range l.shapes {
		n := readName("", s.file.Stem())
		if n.any("out") >= abbreviation && n.any("room") <= shortWord {
			named = s.file.Stem()
		}
	}
	if indoor > 0 || outdoor < 2 && named == "" {
		return
	}
	why := fmt.Sprintf("%d other columns of the log are weather", outdoor)
	if outdoor < 2 {
		why = fmt.Sprintf("the file is called %q", named)
	}
	for _, t := range list {
		to := site.Quantity("")
		switch t.Likely {
		case site.AirTemp:
			to = site.OutdoorTemp
		case site.Humidity:
			to = site.OutdoorHumidity
		case site.CO2:
			to = site.OutdoorCO2
		case site.PM25:
			to = site.OutdoorPM25
		default:
			continue
		}
		if f := t.fits(to, t.Unit); f.against != "" {
			t.Doubts = append(t.Doubts, f.against)
			t.Quantity = ""
			continue
		}
		t.Likely = to
		t.Confidence = max(t.Confidence, 0.8)
		if len(t.Doubts) == 0 || t.Quantity != "" {
			t.Quantity = to
		}
		t.Reasons = append(t.Reasons, why)
	}
}

// sayLogging settles whether the track was sampled or logged on change.
func (t *Track) sayLogging() {
	t.Logging = site.Sampled
	n := t.number + t.wordN()
	if n < 3 {
		return
	}
	changes := 1 - float64(t.equal)/float64(n-1)
	share := t.pace.share()
	// On change: no usual interval, and nearly every record differs from the
	// one before. Words that follow each other at a steady interval without
	// repeating need an even steadier one; states at no steady interval cannot
	// have been sampled.
	if share < 0.5 && changes > 0.9 || (t.textual() || t.binary()) && share < 0.6 || t.textual() && share < 0.9 && changes > 0.95 {
		t.Logging = site.COV
	}
}

// seldom leaves open what was only noted now and then: spot readings are not a
// log, and a state between them is not known.
func (t *Track) seldom() {
	n := t.number + t.wordN()
	if t.Quantity == "" || t.Log.Undated || n >= 60 {
		return
	}
	days := float64(t.pace.last-t.pace.first) / 86400
	if n < 8 || days > 3 && t.Logging == site.Sampled && float64(n) < 6*days && t.equal*10 > n {
		t.Quantity = ""
		t.Doubts = append(t.Doubts, fmt.Sprintf("only %s in %.0f days: spot readings, not a log", count(n, "reading", "readings"), days))
	}
}

// someWords lists a track's states, the most frequent first.
func (t *Track) someWords() string {
	type wc struct {
		w string
		n int
	}
	var list []wc
	for w, n := range t.words {
		list = append(list, wc{w, n})
	}
	sort.Slice(list, func(i, j int) bool {
		if list[i].n != list[j].n {
			return list[i].n > list[j].n
		}
		return list[i].w < list[j].w
	})
	var out []string
	for i, x := range list {
		if i == 6 {
			out = append(out, "...")
			break
		}
		out = append(out, fmt.Sprintf("%q", x.w))
	}
	return strings.Join(out, ", ")
}
