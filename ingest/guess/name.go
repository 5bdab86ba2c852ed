package guess

import "strings"

// naming is what a name says: its words, the unit it carries, and where each
// tag is met.
type naming struct {
	text     string
	tokens   []token
	unit     unit
	hasUnit  bool
	strength map[tag]float64
	last     map[tag]int // position of the last word with the tag
	word     map[tag]string
}

// readName reads the name of a column together with what stands around it: the
// key of the row or the name of the value column. The nearer part comes last
// and counts more.
func readName(around, name string) *naming {
	n := &naming{text: name, strength: map[tag]float64{}, last: map[tag]int{}, word: map[tag]string{}}
	ts := tokens(name)
	n.unit, n.hasUnit = unitOf(name, ts)
	var before []token
	if around != "" && around != name {
		before = tokens(around)
		if u, ok := unitOf(around, before); ok && !n.hasUnit {
			n.unit, n.hasUnit = u, true
		}
	}
	n.tokens = append(n.tokens, ts...)
	at := 0
	take := func(list []token, factor float64) {
		for i := range list {
			at++
			if list[i].unit {
				continue
			}
			if list[i].is("co2") && i+1 < len(list) && device(&list[i+1]) {
				factor := factor * 0.4 // "CO2 meter": the device, not what it shows
				n.see(&list[i], at, factor)
				continue
			}
			n.see(&list[i], at, factor)
		}
	}
	take(before, 0.8)
	at += 100
	take(ts, 1)
	return n
}

// within returns the name as read inside a file of the title: the title's words
// are added, weaker and before all others.
func (n *naming) within(title string) *naming {
	w := *n
	w.strength, w.last, w.word = map[tag]float64{}, map[tag]int{}, map[tag]string{}
	for i, t := range tokens(title) {
		t := t
		w.see(&t, i-1000, 0.8)
	}
	for g, s := range n.strength {
		if s > w.strength[g] {
			w.strength[g], w.word[g] = s, n.word[g]
		}
		w.last[g] = n.last[g]
	}
	return &w
}

// glued is an unknown word grown together with a known one: the name of a room
// in one language, "outdoor" in another.
func (n *naming) glued() string {
	for i := range n.tokens {
		if n.tokens[i].glued {
			return n.tokens[i].raw
		}
	}
	return ""
}

func device(t *token) bool { return t.fold == "meter" || t.fold == "logger" || t.fold == "monitor" }

func (n *naming) see(t *token, at int, factor float64) {
	for _, g := range t.tags {
		s := t.strength * factor
		if s >= n.strength[g]*0.7 {
			n.last[g] = at
		}
		if s > n.strength[g] {
			n.strength[g] = s
			n.word[g] = t.raw
		}
	}
}

// has is the strength with which all the tags are named; 0 when one is not.
func (n *naming) has(tags ...tag) float64 {
	least := 1.0
	for _, t := range tags {
		s, ok := n.strength[t]
		if !ok {
			return 0
		}
		least = min(least, s)
	}
	return least
}

// any is the strength of the strongest of the tags.
func (n *naming) any(tags ...tag) float64 {
	most := 0.0
	for _, t := range tags {
		most = max(most, n.strength[t])
	}
	return most
}

// quoted lists the words behind tags, for reasons.
func (n *naming) quoted(tags ...tag) string {
	var out []string
	seen := map[string]bool{}
	for _, t := range tags {
		if w := n.word[t]; w != "" && !seen[w] && (len(w) > 1 || len(out) == 0) {
			seen[w] = true
			out = append(out, `"`+w+`"`)
		}
	}
	return strings.Join(out, " ")
}
