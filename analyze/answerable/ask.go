package answerable

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// asked is one question with the keys of what it needs (see needs); without a
// key after "+" the answer is partial, one after "~" only makes it surer.
type asked struct {
	id, question string
	needs        []string
	// allZones also asks of zones without openings.
	allZones bool
}

func questions() []asked {
	return []asked{
		{"suited", "How many occupied hours did the weather suit?", []string{"outdoor temperature", "+outdoor humidity", "+wind", "+rain"}, false},
		{"running", "What was each zone doing: open, mechanical, both, shut?", []string{"windows", "plant"}, true},
		{"mech_free", "How many suitable hours passed without mechanical plant?", []string{"outdoor temperature", "plant"}, false},
		{"achieved", "How many suitable hours ran open, and how many were missed?", []string{"outdoor temperature", "windows", "plant", "room temperature", "+CO2"}, false},
		{"comfort", "How long was it too warm or too cool, by the temperature logged?", []string{"room temperature", "outdoor temperature", "~operative"}, true},
		{"fresh_air", "Was the air fresh enough, by CO2?", []string{"CO2", "~outdoor CO2", "~people counted"}, true},
		{"fresh_by_state", "In which running state was the air fresh?", []string{"CO2", "windows", "plant"}, false},
		{"air_change", "How fast is the air of a zone changed in each running state?", []string{"CO2", "windows", "plant", "~outdoor CO2"}, false},
		{"litres_person", "How many litres per second of outdoor air reach each person?", []string{"CO2", "windows", "plant", "volume", "usual people"}, false},
		{"causes", "What were the missed hours lost to?", []string{"outdoor temperature", "windows", "plant", "room temperature", "+plant type"}, false},
		{"few_room", "Did a few rooms get the building closed up?", []string{"plant", "room temperature", "usual people", "~cooling set-point"}, true},
		{"night_purge", "Was the night used to cool the building?", []string{"windows", "plant", "room temperature", "outdoor temperature"}, false},
		{"after_hours", "What ran or stood open when nobody was there?", []string{"plant", "windows"}, true},
		{"occupied", "When were the zones really used?", []string{"presence"}, true},
		{"people", "How many people were affected?", []string{"usual people", "~people counted"}, true},
		{"energy", "How much energy did the missed hours take?", []string{"plant", "rated or metered power", "outdoor temperature", "windows"}, false},
	}
}

// Ask lists what the logs can answer, in the order a reader asks.
func Ask(s *site.Site, g *grid.Grid) []Question {
	l := look(s, g)
	known := needs()
	var out []Question
	for _, a := range questions() {
		out = append(out, a.ask(l, known))
	}
	return out
}

// tally counts the zones that have one need wholly or in part.
type tally struct{ whole, part, asked int }

func (a asked) ask(l *logs, known map[string]need) Question {
	q := Question{ID: a.id, Question: a.question, Answer: No}
	list := make([]need, len(a.needs))
	var required, optional []string
	for k, key := range a.needs {
		name, bonus := strings.CutPrefix(key, "~")
		name, partial := strings.CutPrefix(name, "+")
		list[k] = known[name]
		list[k].optional, list[k].bonus = partial, bonus
		if partial || bonus {
			optional = append(optional, list[k].words)
		} else {
			required = append(required, list[k].words)
		}
	}
	q.Needs = strings.Join(required, ", ")
	if len(optional) > 0 {
		q.Needs += "; better with " + strings.Join(optional, ", ")
	}
	counts := make([]tally, len(list))
	zonesPartly := 0
	for z := range l.s.Zones {
		if !a.allZones && l.s.Zones[z].Openings.None() {
			continue
		}
		q.ZonesTotal++
		whole, some := true, true
		for k, n := range list {
			have := n.met(l, z)
			if math.IsNaN(have) {
				continue
			}
			counts[k].asked++
			switch {
			case have >= 0.99:
				counts[k].whole++
			case have > 0:
				counts[k].part++
				whole = whole && n.bonus
			default:
				whole = whole && n.bonus
				some = some && (n.optional || n.bonus)
			}
		}
		switch {
		case whole:
			q.ZonesYes++
		case some:
			zonesPartly++
		}
	}
	switch {
	case q.ZonesTotal > 0 && q.ZonesYes == q.ZonesTotal:
		q.Answer = Yes
	case q.ZonesYes+zonesPartly > 0:
		q.Answer = Partly
	}
	var ways []string
	for k, n := range list {
		q.note(n, counts[k], &ways)
	}
	if refused := l.refusedWindows(); len(refused) > 0 && slices.ContainsFunc(list, func(n need) bool { return n.words == windowWords }) {
		ways = slices.Insert(ways, 0, "the contacts of "+strings.Join(refused, ", ")+" are mapped, but their readings were refused or never came: the chapter on the data says why, and points.csv can often put it right (open_value, values, column)")
	}
	q.Cheapest = strings.Join(ways, "; ")
	return q
}

// note writes what there is and is not of one need, counting zones where they
// differ.
func (q *Question) note(n need, c tally, ways *[]string) {
	missing := c.asked - c.whole - c.part
	of := func(k int) string {
		if k == c.asked {
			return n.words
		}
		return fmt.Sprintf("%s in %d of %s", n.words, k, zones(c.asked))
	}
	if c.whole > 0 {
		q.Have = append(q.Have, of(c.whole))
	}
	if c.part > 0 {
		q.Have = append(q.Have, fmt.Sprintf("%s in part in %d of %s", n.words, c.part, zones(c.asked)))
	}
	if n.bonus {
		return
	}
	if missing > 0 {
		q.Missing = append(q.Missing, of(missing))
	}
	if missing+c.part == 0 {
		return
	}
	for _, w := range *ways {
		if w == n.cheapest {
			return
		}
	}
	*ways = append(*ways, n.cheapest)
}

func zones(n int) string {
	if n == 1 {
		return "1 zone"
	}
	return fmt.Sprintf("%d zones", n)
}
