package table

import "sashlog/analyze/doubt"

// sensorDoubt writes the intervals that the accuracy of sensors leaves.
func (in *Input) sensorDoubt() any {
	d := in.Results.Doubt
	if d == nil {
		return nil
	}
	parts := &object{}
	for p := doubt.Part(0); p < doubt.NumParts; p++ {
		parts.set(p.String(), (&object{}).set("logged", d.Logged[p]).set("accuracy", d.Assumed[p]))
	}
	return (&object{}).set("kind", "90 % intervals from the accuracy of sensors; unknown hours are not in them").set("draws", d.Draws).
		set("parts", parts).set("building", doubtFigures(&d.Building))
}

// gains writes what would shrink the doubt of the missed hours, most first.
func (in *Input) gains() []any {
	out := []any{}
	if in.Results.Doubt == nil {
		return out
	}
	for _, g := range in.Results.Doubt.Gains() {
		what := "hours that cannot be judged are judged"
		if !g.Unknown {
			what = g.Part.String() + " measured twice as accurately"
		}
		out = append(out, (&object{}).set("what", what).set("from_half_h", num(g.FromH)).set("to_half_h", num(g.ToH)))
	}
	return out
}

func doubtFigures(f *doubt.Figures) *object {
	of := func(i doubt.Interval) *object {
		half := &object{}
		for p := doubt.Part(0); p < doubt.NumParts; p++ {
			half.set(p.String(), num(i.HalfWidth[p]))
		}
		return (&object{}).set("value", num(i.Value)).set("low", num(i.Low)).set("high", num(i.High)).set("half_width", half)
	}
	return (&object{}).set("suited_h", of(f.SuitedH)).set("achieved_h", of(f.AchievedH)).set("achieved_ok_h", of(f.AchievedOKH)).
		set("missed_h", of(f.MissedH)).set("not_needed_h", of(f.NotNeededH)).set("achieved_share", of(f.AchievedShare))
}

func (in *Input) zoneDoubt(z int) any {
	if in.Results.Doubt == nil {
		return nil
	}
	return doubtFigures(&in.Results.Doubt.Zones[z])
}
