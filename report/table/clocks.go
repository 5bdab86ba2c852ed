package table

import (
	"fmt"
	"slices"
	"strings"

	"sashlog/ingest/reading"
	"sashlog/report/privacy"
)

// clockVerdicts lists what the check of every log's clock came to.
func (in *Input) clockVerdicts(rule privacy.Rule) []any {
	out := []any{}
	l := in.Ledger
	for k := range l.Clocks {
		v := &l.Clocks[k]
		var from, to any
		if v.FromUTC != 0 || v.ToUTC != 0 {
			from, to = utc(v.FromUTC, true), utc(v.ToUTC, true)
		}
		out = append(out, (&object{}).set("log", rule.Text(rule.Log(k, v.Log))).set("read_as", v.Declared).set("found", string(v.Verdict)).set("sure", v.Sure).
			set("shift_min", num(v.ShiftMin)).set("end_shift_min", num(v.EndShiftMin)).set("from_utc", from).set("to_utc", to).
			set("held_against", rule.Text(v.HeldAgainst)).set("correlation", num(v.Fit)).set("correlation_without", num(v.FitWithout)).
			set("days_better", v.Better).set("days", v.Days).set("evidence", rule.Text(rule.Logs(logNames(l), v.Evidence))).
			set("do_next", rule.Text(v.DoNext)).set("site_file", rule.Text(v.SiteFile)))
	}
	return out
}

func logNames(l *reading.Ledger) []string {
	var names []string
	for k := range l.Clocks {
		names = append(names, l.Clocks[k].Log)
	}
	return names
}

// clockOf says how a point's clock was read and what the check of it came to.
func clockOf(l *reading.Ledger, point int) string {
	var parts []string
	for k := range l.Clocks {
		v := &l.Clocks[k]
		if !slices.Contains(v.Points, point) {
			continue
		}
		s := v.Declared + ": " + string(v.Verdict)
		if v.SiteFile != "" {
			s += fmt.Sprintf(", runs %+.0f min ahead", v.ShiftMin)
			if v.EndShiftMin != v.ShiftMin {
				s += fmt.Sprintf(" to %+.0f", v.EndShiftMin)
			}
		}
		parts = append(parts, s)
	}
	return strings.Join(parts, "; ")
}
