package tabular

import (
	"fmt"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/clock"
	"sashlog/ingest/reading"
)

// Finish ends a pass: it releases held rows and reports what the pass met.
func (m *Mapper) Finish() {
	m.rows.flush()
	if m.order != nil {
		m.order.Flush(m.to)
	}
	for _, s := range m.orders {
		s.Flush(m.to)
	}
	issue := func(point int, text, hint string) {
		m.to.Issue(reading.Issue{Where: reading.Where{File: m.file}, Point: point, Text: text, Hint: hint})
	}
	m.doubts(issue)
	for i := range m.targets {
		t := &m.targets[i]
		if len(t.dec.Unknown) > 0 {
			issue(t.point, "words without a meaning: "+wordList(t.dec.Unknown), t.dec.Hint())
		}
	}
	for f, n := range m.badFaults {
		if n > 0 {
			issue(-1, fmt.Sprintf("%s with a time that cannot be read", Count(n, "row", "rows")), clock.Fault(f).Hint())
		}
	}
	if m.short > 0 {
		issue(-1, fmt.Sprintf("%s before the last mapped column", Count(m.short, "row ends", "rows end")), "was the file cut off, or does a cell hold the separator without quotes?")
	}
	if m.long > 0 {
		issue(-1, fmt.Sprintf("%s more cells than there are column names", Count(m.long, "row has", "rows have")), "if numbers are written with the separator as decimal mark, export with another separator")
	}
	if m.stray > 0 {
		issue(-1, fmt.Sprintf("%s never closed, read as ordinary text", Count(m.stray, "quote is", "quotes are")), "")
	}
	if m.multi > 0 {
		issue(-1, fmt.Sprintf("%s over several lines", Count(m.multi, "quoted cell runs", "quoted cells run")), "")
	}
	if n := m.tally.Skipped; n > 0 {
		issue(-1, fmt.Sprintf("%s in a local hour that daylight saving skipped", Count(n, "reading lies", "readings lie")), "does this log's clock follow daylight saving? if not, set its clock to standard or utc")
	}
	if n := m.tally.Ambiguous; n > 0 {
		issue(-1, fmt.Sprintf("%s in a repeated local hour that the order of rows does not settle", Count(n, "reading lies", "readings lie")), "export the rows in order of time, or with a written offset; if the clock does not follow daylight saving, set it to standard")
	}
}

// wordList lists words by how often they were met, most often first.
func wordList(words map[string]int64) string {
	var list []string
	for w := range words {
		if w != "" {
			list = append(list, w)
		}
	}
	sort.Slice(list, func(i, j int) bool {
		if words[list[i]] != words[list[j]] {
			return words[list[i]] > words[list[j]]
		}
		return list[i] < list[j]
	})
	var b strings.Builder
	for i, w := range list {
		if i == 12 {
			fmt.Fprintf(&b, " and %d more words", len(list)-i)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%q (%d)", w, words[w])
	}
	if n := words[""]; n > 0 {
		fmt.Fprintf(&b, " and %d cells of further words", n)
	}
	return b.String()
}

// Words describes the pass beside the dialect: date order, clock, and cells
// that were neither readings nor rejects.
func (m *Mapper) Words(proof string) []string {
	var w []string
	if proof != "" {
		w = append(w, proof)
	}
	if m.frame.Layout == site.Long {
		w = append(w, fmt.Sprintf("long layout, %s mapped", Count(int64(len(m.keys)), "name", "names")))
	}
	if m.NoChange > 0 {
		w = append(w, fmt.Sprintf("%s no change and no reading (change-of-value points)", Count(m.NoChange, "empty cell means", "empty cells mean")))
	}
	if m.repeatedHead > 0 {
		w = append(w, fmt.Sprintf("the header is repeated %s", Count(m.repeatedHead, "time", "times")))
	}
	return w
}

// ClockNotes tells what the clock met.
func (m *Mapper) ClockNotes() []reading.ClockNote {
	t := m.tally
	if t == (clock.Tally{}) {
		return nil
	}
	return []reading.ClockNote{{File: m.file, Skipped: t.Skipped, Repeated: t.Repeated, Ambiguous: t.Ambiguous,
		Text: fmt.Sprintf("%s in skipped local hours (rejected), %d in repeated hours settled by the order of rows, %d in repeated hours not settled (rejected)",
			Count(t.Skipped, "reading", "readings"), t.Repeated, t.Ambiguous)}}
}
