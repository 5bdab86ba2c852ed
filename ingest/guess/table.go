package guess

import (
	"encoding/csv"
	"fmt"
	"io"
	"sort"
	"strings"

	"sashlog/configs/site"
)

// WritePoints writes the points table. Columns left open follow as rows whose
// first cell begins with #; the loader passes over them.
func (p *Proposal) WritePoints(w io.Writer) error {
	cw := csv.NewWriter(w)
	rows := [][]string{{"source", "column", "belongs_to", "quantity", "unit", "logging", "stamp", "hold", "open_value", "values", "placement", "share", "note"}}
	for _, t := range p.sorted(true) {
		rows = append(rows, p.row(t, t.Source, t.Quantity))
	}
	for _, t := range p.sorted(false) {
		rows = append(rows, p.row(t, "# "+t.Source, t.Likely))
	}
	for _, r := range rows {
		if err := cw.Write(r); err != nil {
			return fmt.Errorf("cannot write the points table: %w", err)
		}
	}
	cw.Flush()
	return cw.Error()
}

func (p *Proposal) row(t *Track, source string, q site.Quantity) []string {
	unit, logging, placement := t.Unit, string(t.Logging), string(t.Placement)
	if q == "" {
		unit = ""
	}
	return []string{clean(source), clean(t.Column), t.Owner, string(q), unit, logging, string(t.Stamp), "", "", t.Values, placement, "", clean(t.Note())}
}

// clean keeps a cell on one line.
func clean(s string) string {
	return strings.Map(func(r rune) rune {
		if r == '\n' || r == '\r' {
			return ' '
		}
		return r
	}, s)
}

// Note gives the guess's confidence, reasons and doubts in words.
func (t *Track) Note() string {
	var b strings.Builder
	switch {
	case t.Mapped():
		fmt.Fprintf(&b, "guess, %.0f %% sure: ", 100*min(t.Confidence, t.OwnerConf))
	case t.Likely != "":
		fmt.Fprintf(&b, "left open, perhaps %s: ", t.Likely)
	default:
		b.WriteString("left open: ")
	}
	b.WriteString(strings.Join(t.Reasons, "; "))
	if len(t.Doubts) > 0 {
		b.WriteString("; but " + strings.Join(t.Doubts, "; "))
	}
	return b.String()
}

// sorted lists mapped or open tracks by owner and column.
func (p *Proposal) sorted(mapped bool) []*Track {
	var out []*Track
	for _, t := range p.Tracks {
		if t.Mapped() == mapped {
			out = append(out, t)
		}
	}
	logAt := map[*Log]int{}
	for i, l := range p.Logs {
		logAt[l] = i
	}
	sort.SliceStable(out, func(i, j int) bool {
		a, b := out[i], out[j]
		if logAt[a.Log] != logAt[b.Log] {
			return logAt[a.Log] < logAt[b.Log]
		}
		return natural(a.Owner) < natural(b.Owner)
	})
	return out
}
