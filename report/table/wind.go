package table

import (
	"sashlog/analyze/breeze"
	"sashlog/report/privacy"
)

// wind writes the roses, what the openings catch, and the air change measured
// against the wind; what is not logged is said in "missing".
func (in *Input) wind(rule privacy.Rule) any {
	w := in.Results.Breeze
	if w == nil {
		return nil
	}
	var missing any
	if w.Missing != "" {
		missing = w.Missing
	}
	o := (&object{}).set("missing", missing).set("wanted_above_c", num(w.WantedAboveC)).set("calm_below_m_s", num(w.CalmMS)).set("height_correction", speedObject(&w.Speed))
	if !w.SpeedLogged {
		return o.set("roses", nil).set("wanted_suited_h", nil).set("facings", []any{}).set("zones_without_direction", rule.IDs(in.zoneIDs(w.FacesUnknown))).set("ventilation", nil)
	}
	roses := (&object{}).set("all", roseObject(&w.All)).set("suited", roseObject(&w.Suited)).set("wanted", roseObject(&w.Wanted))
	facings := []any{}
	for i := range w.Facings {
		f := &w.Facings[i]
		facings = append(facings, (&object{}).set("face_deg", num(f.FaceDeg)).set("zones", rule.IDs(in.zoneIDs(f.Zones))).set("windward_h", num(f.WindwardH)).
			set("leeward_h", num(f.LeewardH)).set("calm_h", num(f.CalmH)).set("unknown_h", num(f.UnknownH)).
			set("windward_share", num(f.WindwardShare)).set("windward_mean_m_s", num(f.MeanWindwardMS)))
	}
	return o.set("roses", roses).set("wanted_suited_h", num(w.WantedSuitedH)).set("facings", facings).
		set("zones_without_direction", rule.IDs(in.zoneIDs(w.FacesUnknown))).set("ventilation", in.ventilation(w.Drive, rule))
}

func (in *Input) ventilation(d *breeze.Drive, rule privacy.Rule) any {
	if d == nil {
		return nil
	}
	return driveObject(d, rule.IDs(in.zoneIDs(d.Zones)))
}

func (in *Input) zoneIDs(zones []int) []string {
	out := []string{}
	for _, z := range zones {
		out = append(out, in.Site.Zones[z].ID)
	}
	return out
}

func speedObject(s *breeze.Speed) *object {
	return (&object{}).set("mast_m", num(s.MastM)).set("mast_terrain", s.MastTerrain).set("opening_m", num(s.OpeningM)).set("opening_terrain", s.OpeningTerrain).
		set("factor", num(s.Factor)).set("en16798_7_factor", num(s.ENFactor))
}

func roseObject(r *breeze.Rose) *object {
	sectors := []any{}
	for s, name := range breeze.SectorNames {
		classes := []any{}
		for k := range r.HoursH[s] {
			classes = append(classes, num(r.HoursH[s][k]))
		}
		sectors = append(sectors, (&object{}).set("sector", name).set("hours_by_speed_h", classes))
	}
	return (&object{}).set("known_h", num(r.KnownH)).set("calm_h", num(r.CalmH)).set("no_direction_h", num(r.NoDirectionH)).set("unknown_h", num(r.UnknownH)).
		set("mean_m_s", num(r.MeanMS)).set("mean_direction_deg", num(r.MeanDeg)).set("steadiness", num(r.Steadiness)).
		set("speed_classes", breeze.ClassNames).set("sectors", sectors)
}

func driveObject(d *breeze.Drive, zones any) *object {
	groups := func(list []breeze.Group) []any {
		out := []any{}
		for _, g := range list {
			out = append(out, (&object{}).set("group", g.Name).set("rates", g.Rates()).set("decays", g.Decays).set("days", g.Days).set("zones", g.Zones).
				set("relative", figure{num(g.Median), num(g.Low), num(g.High)}).set("median_per_h", num(g.MedianPerH)))
		}
		return out
	}
	decays := 0
	for _, p := range d.Points {
		if !p.Day {
			decays++
		}
	}
	return (&object{}).set("rates", len(d.Points)).set("decays", decays).set("days_counted", len(d.Points)-decays).set("rates_without_wind", d.NoWind).
		set("rates_alone", d.Alone).set("least_rates", d.Least).set("zones", zones).set("different_days", d.Days).
		set("slope_per_m_s", figure{num(d.SlopePerMS), num(d.SlopeLow), num(d.SlopeHigh)}).set("driven", d.Driven).
		set("by_speed", groups(d.Speeds)).set("by_side", groups(d.Sides)).set("by_sector", groups(d.Sectors))
}
