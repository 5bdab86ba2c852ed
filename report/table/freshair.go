package table

import (
	"sashlog/analyze/freshair"
	"sashlog/analyze/running"
	"sashlog/report/privacy"
)

// airChange is a zone's air change rate per running state: the way that stands
// for it and all ways beside it.
func (in *Input) airChange(z int) *object {
	o := &object{}
	zone := &in.Results.FreshAir.Zones[z]
	for s := running.State(0); s < running.NumStates; s++ {
		a := &zone.AirChange[s]
		ways := []any{}
		for _, e := range a.Estimates {
			ways = append(ways, (&object{}).set("way", string(e.Way)).set("median_per_h", num(e.MedianPerH)).set("low_per_h", num(e.LowPerH)).
				set("high_per_h", num(e.HighPerH)).set("events", e.Events).set("not_measurable", e.NotMeasurable))
		}
		verdicts := &object{}
		for k, v := range zone.Verdicts[s] {
			verdicts.set(zone.Required[k].Name, string(v))
		}
		o.set(s.String(), (&object{}).set("median_per_h", num(a.MedianPerH)).set("low_per_h", num(a.LowPerH)).set("high_per_h", num(a.HighPerH)).
			set("outdoor_co2_low_per_h", num(a.OutdoorLowPerH)).set("outdoor_co2_high_per_h", num(a.OutdoorHighPerH)).
			set("range_low_per_h", num(a.FromPerH)).set("range_high_per_h", num(a.ToPerH)).
			set("flow_l_s", num(a.FlowLs)).set("flow_l_s_person", num(a.FlowLsPerson)).set("events", a.Events).
			set("method", a.Method).set("not_measurable", a.NotMeasurable).set("upper_value_only", a.UpperOnly).
			set("neighbours_share", num(zone.NeighbourShare[s])).set("per_10_l_s_of_neighbours_per_h", num(a.NeighbourPer10LsPerH)).
			set("rebreathed_share", num(zone.Rebreathed[s])).set("against", verdicts).set("ways", ways))
	}
	return o
}

// freshAirOf is what else is known of a zone's outdoor air.
func (in *Input) freshAirOf(z int) *object {
	zone := &in.Results.FreshAir.Zones[z]
	needs := []any{}
	for _, r := range zone.Required {
		needs = append(needs, (&object{}).set("name", r.Name).set("flow_l_s", num(r.Ls)).set("flow_l_s_person", num(r.LsPerson)).set("source", r.Source))
	}
	b := &zone.Baseline
	return (&object{}).set("required", needs).
		set("rebreathed_share", num(zone.Rebreathed[running.NumStates])).
		set("baseline_offset_ppm", num(b.OffsetPPM)).set("baseline_explained_ppm", num(b.ExplainedPPM)).set("baseline_weeks", b.Weeks).set("baseline_corrected", b.Corrected).set("baseline_note", b.Why)
}

// plantAir is what running plant adds to the air change of the zones it serves.
func (in *Input) plantAir(rule privacy.Rule) []any {
	out := []any{}
	for _, p := range in.Results.FreshAir.Plants {
		zones := []any{}
		for _, g := range p.Zones {
			zones = append(zones, (&object{}).set("zone", rule.ID(g.Zone)).set("mech_per_h", num(g.MechPerH)).set("shut_per_h", num(g.ShutPerH)).
				set("gain_per_h", num(g.PerH)).set("low_per_h", num(g.LowPerH)).set("high_per_h", num(g.HighPerH)).set("gain_l_s_person", num(g.LsPerson)))
		}
		out = append(out, (&object{}).set("plant", rule.Text(in.Site.Plant[p.Plant].ID)).set("declared", string(p.Declared)).
			set("finding", string(p.Finding)).set("zones", zones))
	}
	return out
}

// freshAir is the building's part: limits, outdoor level, plant, caution.
func (in *Input) freshAir(rule privacy.Rule) *object {
	f := in.Results.FreshAir
	limits := &object{}
	for i, name := range []string{"I", "II", "III"} {
		limits.set(name, num(f.LimitsPPM[i]))
	}
	return (&object{}).set("limits_above_outdoor_ppm", limits).set("outdoor", f.OutdoorNote).set("caution", f.Sentence).
		set("exhaled_ppm", freshair.ExhaledPPM).set("rebreathed_caution", f.RebreathedCaution).set("plant_air", in.plantAir(rule))
}
