package guess

import (
	"strconv"
	"strings"

	"sashlog/configs/site"
)

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

// leads finds the words all names of a log begin with: the building, the
// controller. They are no part of a place, unless nothing else is.
func (o *owning) leads() {
	for _, l := range o.p.Logs {
		var names [][]token
		for _, t := range o.p.Tracks {
			if t.Log == l {
				names = append(names, t.names.tokens)
			}
		}
		l.lead = 0
		if len(names) < 4 {
			continue
		}
		k := 0
		for ; ; k++ {
			same := true
			for _, n := range names {
				same = same && k < len(n)-1 && n[k].fold == names[0][k].fold
			}
			if !same || speaksOfPlace(names[0], k) {
				break
			}
		}
		placed, all := 0, 0
		for _, t := range o.p.Tracks {
			if t.Log != l || t.Likely == "" || t.Likely.IsWeather() {
				continue
			}
			all++
			if pl := placeAfter(t.name, t.names.tokens, false, k); !pl.empty() || pl.unit != "" {
				placed++
			}
		}
		if placed*10 >= all*8 {
			l.lead = k
		}
	}
}

// speaksOfPlace reports that word k of a name stands for floor, room or unit, or
// is a number that no unknown word claims.
func speaksOfPlace(ts []token, k int) bool {
	t := &ts[k]
	if t.is("floor") || t.is("room") || t.is("unit") || t.is("vavbox") || t.number && k+1 < len(ts) && (ts[k+1].fold == "og" || ts[k+1].fold == "etage" || ts[k+1].fold == "stock" || ts[k+1].fold == "obergeschoss") {
		return true
	}
	return t.number && (k == 0 || ts[k-1].known() || ts[k-1].number)
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
