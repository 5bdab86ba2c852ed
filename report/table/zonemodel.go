package table

import "sashlog/analyze/zonemodel"

// missedModel writes what a zone's thermal model expects of its missed hours
// and how well it foresees.
func (in *Input) missedModel(z int) any {
	m := &in.Results.ZoneModel.Zones[z]
	errors := []any{}
	for _, e := range m.Errors {
		if e.N > 0 {
			errors = append(errors, (&object{}).set("ahead_h", num(e.HorizonH)).set("forecasts", e.N).set("days", e.Days).
				set("rms_error_k", num(e.RMSEK)).set("bias_k", num(e.BiasK)).set("staying_rms_error_k", num(e.PersistenceRMSEK)))
		}
	}
	o := (&object{}).set("refused", m.Refused).set("time_constants", m.Constants).set("open_days", m.OpenDays).
		set("held_out_days", m.HeldOutDays).set("errors", errors).set("missed_h", num(m.Missed.PlainH)).set("expected", nil)
	if m.Refused != "" {
		return o
	}
	o.values[len(o.values)-1] = in.expected(m)
	return o
}

func (in *Input) expected(m *zonemodel.Zone) *object {
	x := &m.Missed
	return (&object{}).set("comfortable_h", figure{num(x.ComfortableH.Value), num(x.ComfortableH.Low), num(x.ComfortableH.High)}).
		set("warm_h", num(x.WarmH)).set("cool_h", num(x.CoolH)).set("beyond_seen_h", num(x.OutsideH)).set("not_simulated_h", num(x.UnknownH)).
		set("taken_open_share", num(x.OpenShare)).set("residuals_white_p", num(m.Residuals.P)).set("slow_constant_h", num(m.SlowH))
}
