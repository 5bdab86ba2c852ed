package guess

import (
	"fmt"
	"sort"

	"sashlog/configs/site"
)

// column is what a sample of rows shows of one column.
type column struct {
	name                 string
	filled, number, word int
	states, quality      int
	units                int
	distinct             map[string]int
	rising               bool // whole numbers that only rise
	tokens               []token
}

// statesMost is how many different texts a column of states may hold, marks of
// missing values and numbers included.
const statesMost = 300

// sampleMax bounds the rows kept for the decision about the layout.
const sampleMax = 4000

func (s *shape) columns(sample [][]string) []column {
	fr := s.rows.Frame()
	cols := make([]column, len(fr.Names))
	for i := range cols {
		c := &cols[i]
		c.name, c.distinct, c.rising = fr.Names[i], map[string]int{}, true
		c.tokens = tokens(c.name)
		if i == fr.Time || i == fr.Date || i == fr.Clock {
			continue
		}
		last := -1.0
		for _, r := range sample {
			if i >= len(r) || r[i] == "" {
				continue
			}
			c.filled++
			if len(c.distinct) < 2000 || c.distinct[r[i]] > 0 {
				c.distinct[r[i]]++
			}
			v, rest, ok := s.style.Number([]byte(r[i]))
			if ok && len(rest) <= 6 {
				c.number++
				c.rising = c.rising && v > last && v == float64(int64(v))
				last = v
				continue
			}
			c.rising = false
			c.word++
		}
		if c.word == 0 || len(c.distinct) > statesMost {
			continue // numbers, times, free text
		}
		for text, n := range c.distinct {
			if _, _, ok := s.style.Number([]byte(text)); ok {
				continue
			}
			switch {
			case isMissing(text):
				c.word -= n
			case isState(text):
				c.states += n
			case isQuality(text):
				c.quality += n
			}
			if isUnit(text) {
				c.units += n
			}
		}
	}
	return cols
}

// isSurvey reports columns that hold people's votes.
func isSurvey(cols []column) bool {
	n := 0
	for i := range cols {
		for _, t := range cols[i].tokens {
			switch t.fold {
			case "vote", "votes", "tsv", "tpv", "sensation", "preference", "acceptability", "clothing", "clo", "met", "questionnaire", "gender", "votum", "empfindung", "ressenti":
				n++
			}
		}
	}
	return n >= 2
}

// arrange decides between wide, long and one file per point.
func (s *shape) arrange(cols []column, sample [][]string, pace *pace) {
	fr := s.rows.Frame()
	var labels, ids []int
	skip := map[int]bool{fr.Time: true, fr.Date: true, fr.Clock: true}
	for i := range cols {
		c := &cols[i]
		switch {
		case skip[i] || c.filled == 0:
		case s.rising(c, pace) || isCalendar(c.tokens):
			skip[i] = true
		case c.word*2 > c.filled && c.units*2 > c.filled && len(c.distinct) > 0:
			s.unitCol = i
			skip[i] = true
		case c.word*2 > c.filled && c.quality*10 >= c.word*9:
			skip[i] = true
			s.notes = append(s.notes, fmt.Sprintf("column %q holds marks of quality", c.name))
		case c.word*2 > c.filled && c.states*2 < c.word && len(c.distinct)*3 <= c.filled+6:
			labels = append(labels, i)
		case c.number*10 >= c.filled*9 && isKeyName(c.tokens) && len(c.distinct) <= 500:
			ids = append(ids, i)
		}
	}
	varied := func(list []int) (out []int) {
		for _, i := range list {
			if len(cols[i].distinct) > 1 {
				out = append(out, i)
			}
		}
		return out
	}
	mixed := pace.back > 0 || pace.equal*50 > pace.n
	var keys []int
	if l := varied(labels); len(l) > 0 && (mixed || pace.share() < 0.6 && hasHint(cols, l)) {
		keys = append(keys, l...)
	}
	if l := varied(ids); mixed && len(l) > 0 {
		keys = append(keys, l...)
	}
	keys = undetermined(keys, cols, sample)
	for _, i := range append(append([]int{}, labels...), ids...) {
		// Constant names, and names that another name determines, are no values.
		if hasIndex(keys, i) {
			continue
		}
		if len(cols[i].distinct) == 1 || len(keys) > 0 {
			skip[i] = true
		}
	}
	for i := range cols {
		c := &cols[i]
		if skip[i] || hasIndex(keys, i) || c.filled == 0 || c.name == "" && fr.HeaderLine > 0 {
			continue
		}
		s.values = append(s.values, i)
	}
	s.keys = keys
	switch {
	case len(keys) > 0 && len(s.values) > 0:
		s.log.Layout = site.Long
		for _, k := range keys {
			s.log.KeyColumns = append(s.log.KeyColumns, fr.Names[k])
		}
		for _, v := range s.values {
			s.log.ValueColumns = append(s.log.ValueColumns, fr.Names[v])
		}
	default:
		s.log.Layout = site.Wide
		s.generic = len(s.values) == 1 && (fr.HeaderLine == 0 || !speaks(cols[s.values[0]].tokens))
	}
}

// rising reports a column that only counts rows.
func (s *shape) rising(c *column, pace *pace) bool {
	return c.rising && c.number == c.filled && c.number > 2 && !speaks(c.tokens)
}

func hasHint(cols []column, list []int) bool {
	for _, i := range list {
		if isKeyName(cols[i].tokens) {
			return true
		}
	}
	return false
}

func hasIndex(list []int, x int) bool {
	for _, v := range list {
		if v == x {
			return true
		}
	}
	return false
}

// undetermined drops keys that another key determines (a description beside a
// name), and puts the more general first: rooms before windows.
func undetermined(keys []int, cols []column, sample [][]string) []int {
	sort.SliceStable(keys, func(a, b int) bool { return len(cols[keys[a]].distinct) > len(cols[keys[b]].distinct) })
	var out []int
	for _, k := range keys {
		by := false
		for _, m := range out {
			by = by || determines(m, k, sample)
		}
		if !by {
			out = append(out, k)
		}
	}
	sort.SliceStable(out, func(a, b int) bool { return keyRank(cols[out[a]].tokens) < keyRank(cols[out[b]].tokens) })
	return out
}

func determines(a, b int, sample [][]string) bool {
	of := map[string]string{}
	for _, r := range sample {
		if a >= len(r) || b >= len(r) {
			continue
		}
		if v, ok := of[r[a]]; ok && v != r[b] {
			return false
		}
		of[r[a]] = r[b]
	}
	return true
}
