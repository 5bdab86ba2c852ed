package page

import (
	"sashlog/report/words"
)

// missedModel shows what thermal models of the zones expect of missed hours,
// beside the count.
func (b *builder) missedModel() []block {
	r := b.in.Results.ZoneModel
	if r == nil {
		return nil
	}
	t := table{ID: "missed-model", Caption: "Missed hours as counted, and those a model of the zone expects to have been comfortable with windows open",
		Head: []column{col("Zone"), num("Counted (h)"), num("Expected comfortable (h)"), num("90 % interval"), num("Too warm (h)"), num("Too cool (h)"), num("Not predicted (h)"), num("Error 4 h ahead (K)")}}
	refused := table{ID: "missed-model-refused", Caption: "Zones without a model", Head: []column{col("Zone"), col("Reason")}}
	for z := range r.Zones {
		m := &r.Zones[z]
		if m.Missed.PlainH == 0 {
			continue
		}
		if m.Refused != "" {
			refused.Rows = append(refused.Rows, row(b.w.Zone(z), words.Sentence(m.Refused)))
			continue
		}
		x := &m.Missed
		t.Rows = append(t.Rows, row(b.w.Zone(z), words.HoursNumber(x.PlainH), words.HoursNumber(x.ComfortableH.Value),
			words.HoursNumber(x.ComfortableH.Low)+" to "+words.HoursNumber(x.ComfortableH.High), words.HoursNumber(x.WarmH), words.HoursNumber(x.CoolH),
			words.HoursNumber(x.OutsideH+x.UnknownH), words.Number(m.Errors[1].RMSEK, 2)))
	}
	if len(t.Rows)+len(refused.Rows) == 0 {
		return nil
	}
	out := []block{heading("Would it have been comfortable?")}
	if len(t.Rows) > 0 {
		t.Foot = []string{"Hours over the period. Each run of missed hours is simulated from the temperatures at its start with windows as far open as usual in that zone; where the plant had cooled before, it starts cool. The upper end of the interval counts hours that were not predicted as comfortable. The count stands; this is a second opinion."}
		out = append(out, b.table(t))
	}
	if len(refused.Rows) > 0 {
		out = append(out, b.table(refused))
	}
	return out
}
