package sources

import (
	"fmt"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

// Unmet lists, after everything was read, the points of long logs of which no
// row was met, with the nearest of the names that nobody mapped. Whether a
// long log holds a point is known only then.
func Unmet(s *site.Site, l *reading.Ledger) []Problem {
	var names []string
	for n := range l.Unmapped {
		names = append(names, n)
	}
	var out []Problem
	for i := range s.Points {
		p := &s.Points[i]
		if i >= len(l.Points) || l.Points[i].RowsRead != 0 || !inLong(s, p) {
			continue
		}
		hint := "no row of the log carries this name"
		if n := nearestSorted(p.Column, names); n != "" {
			hint = fmt.Sprintf("did you mean %q", n)
		}
		out = append(out, Problem{Kind: NoColumn, Where: reading.Where{File: "points.csv", Line: int64(p.Line)}, Point: i, Log: -1, Count: 1,
			Text: fmt.Sprintf("no row of %q carries the name %q", p.Source, p.Column), Hint: hint})
	}
	return out
}

// nearestSorted is the nearest name, the first in order among equals, so that
// the answer does not depend on the order of a map.
func nearestSorted(name string, names []string) string {
	set := make(map[string]bool, len(names))
	for _, n := range names {
		set[n] = true
	}
	return tabular.Nearest(name, sorted(set))
}

func inLong(s *site.Site, p *site.Point) bool {
	for i := range s.Logs {
		if s.Logs[i].Layout == site.Long && means(p.Source, s.Logs[i].Name) {
			return true
		}
	}
	return false
}
