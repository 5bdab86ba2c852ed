package demo

import (
	"bufio"
	"encoding/csv"
	"slices"
	"strings"
	"time"
)

// note is one line of the diary: local days, both inclusive.
type note struct {
	from, to   time.Time
	zones      []string
	kind, text string
}

// writeDiary writes events.csv: what a site would have noted, in order of date.
func (b *building) writeDiary(dir string) error {
	notes := append(b.routineNotes(), b.faultNotes()...)
	first, last := b.from.Start(b.loc), b.to.Start(b.loc)
	notes = slices.DeleteFunc(notes, func(n note) bool { return n.to.Before(first) || n.from.After(last) })
	slices.SortStableFunc(notes, func(x, y note) int { return x.from.Compare(y.from) })
	return writeFile(dir, "events.csv", func(w *bufio.Writer) error {
		cw := csv.NewWriter(w)
		cw.Write([]string{"from", "to", "zones", "kind", "note"}) // errors stay with the writer
		for _, n := range notes {
			cw.Write([]string{n.from.Format(time.DateOnly), n.to.Format(time.DateOnly), strings.Join(n.zones, ";"), n.kind, n.text})
		}
		cw.Flush()
		return cw.Error()
	})
}

// routineNotes are changed settings and the cleaning of panes.
func (b *building) routineNotes() []note {
	var out []note
	for y := b.from.Year; y <= b.to.Year; y++ {
		on := func(m time.Month, d int) time.Time { return time.Date(y, m, d, 0, 0, 0, 0, b.loc) }
		if b.hasZone("L3.01") {
			out = append(out,
				note{on(6, 10), on(6, 10), nil, "setting", "night purge of the second floor switched on for the summer (AHU-3)"},
				note{on(9, 8), on(9, 8), nil, "setting", "night purge switched off (AHU-3)"})
		}
		if b.hasZone("L1.04") {
			for _, m := range []time.Month{time.April, time.October} {
				d := on(m, 1)
				for d.Weekday() != time.Thursday {
					d = d.AddDate(0, 0, 1)
				}
				out = append(out, note{d, d, []string{"L1.04"}, "works", "window cleaning, reception"})
			}
		}
	}
	return out
}

// faultNotes are the faults that somebody noticed, or all that can be told in
// a diary if the faults are declared.
func (b *building) faultNotes() []note {
	var out []note
	end := b.truth.StartUTC + int64(b.truth.N)*stepS
	for _, f := range b.truth.Faults {
		from, last := time.Unix(f.FromUTC, 0).In(b.loc), time.Unix(f.ToUTC-1, 0).In(b.loc)
		over := f.ToUTC < end
		switch {
		case f.Kind == FaultMissing:
			out = append(out, note{from, last, f.Zones, "other", "trend storage of the ground floor full; rows lost until it was emptied"})
		case f.Kind == FaultClock:
			out = append(out, note{from, from, f.Zones, "other", "battery of the tenant's logger changed"})
			if over {
				out = append(out, note{last, last, f.Zones, "other", "tenant's logger found one hour ahead since the battery change; set right"})
			}
		case f.Kind == FaultCO2Drift && over:
			day := time.Unix(f.ToUTC, 0).In(b.loc)
			out = append(out, note{day, day, f.Zones, "sensor_swap", "CO2 sensor changed, the old one read too high"})
		case f.Kind == FaultFrozen && b.options.Declared:
			out = append(out, note{from, last, f.Zones, "fault", "temperature sensor stuck"})
		}
	}
	return out
}
