package table

import (
	"fmt"
	"sashlog/analyze/hours"
	"sashlog/report/privacy"
)

func (in *Input) tool() *object {
	p := &in.Provenance
	return (&object{}).set("name", "sashlog").set("version", p.Version).set("generated", p.Generated).set("command", p.Command)
}

func (in *Input) siteObject(rule privacy.Rule) *object {
	s := in.Site
	return (&object{}).set("name", s.Name).set("invented", s.Invented).set("time_zone", s.TimeZone).
		set("latitude_deg", num(s.LatitudeDeg)).set("longitude_deg", num(s.LongitudeDeg)).set("elevation_m", num(s.ElevationM)).
		set("zones", len(s.Zones)).set("plant", len(s.Plant)).set("points", len(s.Points)).set("privacy_internal", rule.Internal())
}

func (in *Input) period() *object {
	list := in.Results.Hours.Hours
	o := &object{}
	if len(list) == 0 {
		return o.set("from", nil).set("to", nil).set("days", 0).set("working_days", 0).set("step_s", in.Grid.StepS)
	}
	return o.set("from", list[0].Date.String()).set("to", list[len(list)-1].Date.String()).set("days", in.Results.Summary.Days).
		set("working_days", in.Results.Summary.WorkingDays).set("step_s", in.Grid.StepS)
}

func (in *Input) inputs(rule privacy.Rule) []any {
	out := []any{}
	for i, f := range in.Ledger.Files {
		out = append(out, (&object{}).set("path", rule.File(i, f.Path)).set("sha256", f.SHA256).set("bytes", f.Bytes).set("rows", f.Rows))
	}
	for _, f := range in.Provenance.ConfigFiles {
		out = append(out, (&object{}).set("path", f.Path).set("sha256", f.SHA256).set("bytes", f.Bytes).set("rows", nil))
	}
	return out
}

func (in *Input) criteriaObject() *object {
	o := (&object{}).set("preset", in.Criteria.Preset).set("hash", in.Provenance.CriteriaHash).set("headline", in.Results.Exceedance.Headline)
	list := []any{}
	settings := in.Criteria
	for _, n := range settings.Ordered() {
		list = append(list, (&object{}).set("key", n.Key).set("value", n.Value).set("unit", n.Unit).set("words", n.Words).
			set("standing", n.Standing).set("source", n.Source))
	}
	return o.set("settings", list)
}

func (in *Input) answerableList() []any {
	out := []any{}
	for _, q := range in.Results.Answerable {
		out = append(out, (&object{}).set("id", q.ID).set("question", q.Question).set("needs", q.Needs).set("have", texts(q.Have)).
			set("missing", texts(q.Missing)).set("answer", string(q.Answer)).set("zones_yes", q.ZonesYes).set("zones", q.ZonesTotal).
			set("cheapest", q.Cheapest))
	}
	return out
}

// texts is never null in JSON.
func texts(s []string) []string {
	if s == nil {
		return []string{}
	}
	return s
}

func (in *Input) lostTo() *object { return causes(in.Results.Lost.BuildingH) }

func (in *Input) potential() *object {
	p := in.Results.Potential
	methods := []any{}
	for _, m := range p.Methods {
		methods = append(methods, (&object{}).set("method", m.Name).set("words", m.Words).set("source", m.Source).
			set("suited_h", figure{num(m.SuitedH), num(m.SuitedH), num(m.SuitedH + m.UnknownH)}))
	}
	o := (&object{}).set("methods", methods).set("tested", texts(p.Tested))
	if t := p.Typical; t != nil {
		return o.set("typical_year", (&object{}).set("name", t.Name).set("months", t.Months).set("typical_h", num(t.TypicalH)).
			set("measured_h", num(t.MeasuredH)).set("typical_mean_c", num(t.TypicalMeanC)).set("measured_mean_c", num(t.MeasuredMeanC)))
	}
	return o.set("typical_year", nil)
}

func (in *Input) outOfHours(rule privacy.Rule) *object {
	a := in.Results.AfterHours
	zones := []any{}
	for z := range a.Zones {
		h := &a.Zones[z]
		o := (&object{}).set("id", rule.ID(z)).set("plant_on_h", num(h.PlantOnH)).set("plant_conditioning_h", num(h.PlantConditioningH)).
			set("plant_unknown_h", num(h.PlantUnknownH)).set("warm_up_h", num(h.WarmUpH)).set("windows_open_h", num(h.WindowsOpenH)).
			set("windows_unknown_h", num(h.WindowsUnknownH)).set("purge_h", num(h.PurgeH)).set("purge_available_h", num(h.PurgeAvailableH)).set("purge_unknown_h", num(h.PurgeUnknownH)).
			set("nights_plant_on", h.NightsPlantOn).set("nights_windows_open", h.NightsWindowsOpen).set("nights", h.Nights).set("nights_plant_known", h.NightsPlantKnown).set("nights_windows_known", h.NightsWindowsKnown)
		zones = append(zones, o)
	}
	units := []any{}
	for i := range a.Units {
		u := &a.Units[i]
		units = append(units, (&object{}).set("id", u.ID).set("vacant_h", num(u.VacantH)).set("on_h", num(u.OnH)).set("unknown_h", num(u.UnknownH)).
			set("conditioning_h", num(u.ConditioningH)).set("warm_up_h", num(u.WarmUpH)).set("nights_on", u.NightsOn).set("nights_known", u.NightsKnown).
			set("energy_kwh_at_most", num(u.EnergyKWh)))
	}
	return (&object{}).set("zones", zones).set("plant", units).set("notes", texts(a.Notes))
}

// uncertainty gathers what is unknown: bounds are given with every figure.
func (in *Input) uncertainty() *object {
	b := &in.Results.Summary.Building
	return (&object{}).set("kind", "bounds: the unknown hours going wholly either way; no sensor error or sampling is in them").
		set("judged_share", num(b.JudgedShare)).set("unjudged_h", num(b.H[hours.CUnjudged])).set("unjudged_suited_h", num(b.H[hours.CUnjudgedSuited])).
		set("weather_unknown_h", num(b.H[hours.CSuitedUnknown])).set("running_unknown_h", num(b.H[hours.CUnknown])).
		set("occupancy_unknown_h", num(b.H[hours.COccupiedUnknown])).set("achieved_share", bounded(b.AchievedShare)).
		set("unknown_half_h", in.unknownHalf()).set("sensors", in.sensorDoubt()).set("gains", in.gains())
}

func (in *Input) unknownHalf() any {
	if in.Results.Doubt == nil {
		return nil
	}
	return num(in.Results.Doubt.UnknownHalfH)
}

func (in *Input) findings(rule privacy.Rule) []any {
	out := []any{}
	for k, f := range in.Results.Findings {
		if k == listMax {
			break
		}
		rivals := []string{}
		for _, r := range f.RivalExplanations {
			rivals = append(rivals, rule.Text(r))
		}
		points := []string{}
		for _, p := range f.Evidence.Points {
			if !rule.Coded() { // names of columns name rooms
				points = append(points, rule.Text(p))
			}
		}
		if rule.Coded() && len(f.Evidence.Points) > 0 {
			points = append(points, fmt.Sprintf("%d points, names left out", len(f.Evidence.Points)))
		}
		out = append(out, (&object{}).set("id", rule.Text(f.ID)).set("what", rule.Text(f.What)).set("zones", rule.IDs(f.Zones)).
			set("hours", num(f.Hours)).set("person_h", num(f.PersonH)).set("low", num(f.Low)).set("high", num(f.High)).
			set("confidence", f.Confidence).
			set("evidence", (&object{}).set("points", points).set("figure", f.Evidence.Figure).set("typical_day", f.Evidence.TypicalDay).
				set("contrary_day", f.Evidence.ContraryDay)).
			set("rival_explanations", rivals).set("check_on_site", rule.Text(f.CheckOnSite)).set("do_next", rule.Text(f.DoNext)).
			set("who", f.Who).set("undo_if", rule.Text(f.UndoIf)).set("caution", f.Caution))
	}
	return out
}
