package lost

// spell is a run of missed steps in one zone with its bridged interruptions.
type spell struct {
	zone     int
	from, to int   // half-open
	missed   []int // the missed steps within
}

// spellsOf lists the runs of missed steps of a zone in the period.
// Interruptions up to Criteria.InterruptionMin are bridged, whatever they were.
func spellsOf(in *Input, z int) []*spell {
	class := in.Record.Class[z]
	bridge := int(in.Criteria.InterruptionMin * 60 / float64(in.Grid.StepS))
	var out []*spell
	var open *spell
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if !class[i].Missed() {
			continue
		}
		if open == nil || i-open.to > bridge {
			open = &spell{zone: z, from: i}
			out = append(out, open)
		}
		open.missed = append(open.missed, i)
		open.to = i + 1
	}
	return out
}
