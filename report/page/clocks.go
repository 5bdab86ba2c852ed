package page

import (
	"math"

	"sashlog/ingest/reading"
	"sashlog/report/words"
)

// clockTable says of every log what the check of its clock came to.
func (b *builder) clockTable() []block {
	l := b.in.Ledger
	if len(l.Clocks) == 0 {
		return nil
	}
	t := table{ID: "clocks", Caption: "The clock of every log",
		Head: []column{col("Log"), col("Read as"), col("Found"), num("Runs ahead"), col("Time"), col("Evidence"), col("To correct it, write in the site file")}}
	for k := range l.Clocks {
		v := &l.Clocks[k]
		shift, span, write := words.Dash, words.Dash, words.Dash
		if !math.IsNaN(v.ShiftMin) {
			shift = words.Unit(v.ShiftMin, 0, "min")
			if v.EndShiftMin != v.ShiftMin {
				shift += " to " + words.Unit(v.EndShiftMin, 0, "min")
			}
			span, write = b.utcSpan(v.FromUTC, v.ToUTC), b.w.Foreign(v.SiteFile)
		}
		found := string(v.Verdict)
		if !math.IsNaN(v.ShiftMin) && !v.Sure {
			found += " (perhaps)"
		}
		t.Rows = append(t.Rows, row(b.w.Foreign(b.rule.Log(k, v.Log)), v.Declared, found, shift, span, words.Sentence(b.w.Foreign(b.rule.Logs(logNames(l), v.Evidence))), write))
	}
	t.Foot = []string{"A minus means behind. A finding marked “perhaps” takes nothing out: habits may explain it, or one other log alone speaks against this one. “Cannot be told”: nothing else that is logged would show a wrong clock."}
	return []block{b.table(t)}
}

// logNames are the names of the logs, in the order of their verdicts.
func logNames(l *reading.Ledger) []string {
	var names []string
	for k := range l.Clocks {
		names = append(names, l.Clocks[k].Log)
	}
	return names
}
