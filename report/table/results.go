package table

import (
	"encoding/json"
	"io"
	"math"
	"strconv"

	_ "embed"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/lost"
	"sashlog/analyze/running"
	"sashlog/ingest/reading"
	"sashlog/report/privacy"
)

//go:embed results.schema.json
var schema []byte

// Schema describes results.json (JSON Schema 2020-12).
func Schema() []byte { return schema }

// listMax caps lists; the rest is in the CSV files.
const listMax = 200

// num is a number that may be unknown: NaN is written as null, others with at
// most six significant decimals.
type num float64

// MarshalJSON writes the number or null.
func (n num) MarshalJSON() ([]byte, error) {
	v := float64(n)
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return []byte("null"), nil
	}
	v = math.Round(v*1e6) / 1e6
	if v == 0 {
		v = 0
	}
	return strconv.AppendFloat(nil, v, 'f', -1, 64), nil
}

// figure is a figure with its least and greatest possible value.
type figure struct {
	Value num `json:"value"`
	Low   num `json:"low"`
	High  num `json:"high"`
}

func bounded(r hours.Range) figure { return figure{num(r.Value), num(r.Low), num(r.High)} }

func plain(v float64) figure { return figure{num(v), num(v), num(v)} }

// object keeps the order its keys were added in.
type object struct {
	keys   []string
	values []any
}

func (o *object) set(key string, value any) *object {
	o.keys, o.values = append(o.keys, key), append(o.values, value)
	return o
}

// MarshalJSON writes the keys in order.
func (o *object) MarshalJSON() ([]byte, error) {
	b := []byte{'{'}
	for i, k := range o.keys {
		if i > 0 {
			b = append(b, ',')
		}
		key, err := json.Marshal(k)
		if err != nil {
			return nil, err
		}
		value, err := json.Marshal(o.values[i])
		if err != nil {
			return nil, err
		}
		b = append(append(append(b, key...), ':'), value...)
	}
	return append(b, '}'), nil
}

// WriteJSON writes every figure of the report. Keys whose analysis does not
// exist yet are null.
func WriteJSON(w io.Writer, in Input) error {
	rule := privacy.For(in.Site)
	root := &object{}
	root.set("tool", in.tool()).set("site", in.siteObject(rule)).set("period", in.period()).set("inputs", in.inputs(rule)).
		set("criteria", in.criteriaObject()).set("answerable", in.answerableList()).
		set("building", totalObject(&in.Results.Summary.Building).set("weighted_by", in.Results.Summary.WeightedBy)).
		set("zones", in.zoneList(rule)).set("months", in.months()).set("quality", in.quality(rule)).
		set("episodes", in.episodeList(rule)).set("lost_to", in.lostTo()).
		set("fresh_air", in.freshAir(rule)).set("potential", in.climateInto(in.potential(), rule)).set("comfort_spread", in.comfortSpread(rule)).
		set("wind", in.wind(rule)).set("changeover", in.changeover(rule)).set("votes", in.votes()).set("energy", in.energy()).
		set("out_of_hours", in.outOfHours(rule)).set("uncertainty", in.uncertainty()).set("findings", in.findings(rule))
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(true)
	enc.SetIndent("", " ")
	return enc.Encode(root)
}

// totalObject writes a zone's or the building's hours.
func totalObject(t *hours.Total) *object {
	o := &object{}
	for _, f := range []struct {
		name string
		r    hours.Range
	}{
		{"occupied_h", t.Occupied}, {"suited_h", t.Suited}, {"suited_fan_h", t.SuitedFan}, {"achieved_h", t.Achieved},
		{"achieved_ok_h", t.AchievedOK}, {"missed_h", t.Missed}, {"not_needed_h", t.NotNeeded}, {"ill_timed_h", t.IllTimed},
		{"closed_unsuited_h", t.ClosedUnsuited}, {"no_opening_h", t.NoOpening}, {"unjudged_h", t.Unjudged}, {"both_h", t.Both},
		{"achieved_share", t.AchievedShare}, {"mech_free_share", t.MechFreeShare},
	} {
		o.set(f.name, bounded(f.r))
	}
	o.set("judged_share", num(t.JudgedShare)).set("over_kh", num(t.OverKh)).set("under_kh", num(t.UnderKh)).
		set("person_h", plain(t.PersonH)).set("person_over_h", plain(t.PersonOverH)).set("person_under_h", plain(t.PersonUnderH))
	counts := &object{}
	for c := hours.Col(0); c < hours.NumCols; c++ {
		counts.set(hours.ColName(c), num(t.H[c]))
	}
	return o.set("hours", counts)
}

func (in *Input) zoneList(rule privacy.Rule) []any {
	out := []any{}
	for z := range in.Results.Summary.Zones {
		t, def := &in.Results.Summary.Zones[z], &in.Site.Zones[z]
		o := (&object{}).set("id", rule.ID(z)).set("name", rule.Name(z)).set("people", num(def.People)).set("area_m2", num(def.AreaM2)).
			set("protected", rule.Protected(z))
		total := totalObject(t)
		o.keys, o.values = append(o.keys, total.keys...), append(o.values, total.values...)
		people := t.PeopleH
		if rule.Protected(z) {
			people = math.NaN()
		}
		o.set("people_h", plain(people)).set("comfort", in.comfort(z)).set("predicted", in.predicted(z)).set("long_term", in.longTerm(z)).set("sensor_interval", in.zoneDoubt(z)).set("co2", in.co2(z)).set("air_change", in.airChange(z)).set("fresh_air", in.freshAirOf(z)).
			set("lost_to_h", causes(in.Results.Lost.ByCauseH[z]))
		if in.Results.ZoneModel != nil {
			o.set("missed_model", in.missedModel(z))
		}
		out = append(out, o)
	}
	return out
}

func causes(h [lost.NumCauses]float64) *object {
	o := &object{}
	for c := range h {
		o.set(lost.Cause(c).String(), num(h[c]))
	}
	return o
}

func (in *Input) comfort(z int) []any {
	out := []any{}
	share := func(r exceedance.Range) figure { return figure{num(r.Value), num(r.Low), num(r.High)} }
	for _, c := range in.Results.Exceedance.Zones[z].Criteria {
		out = append(out, (&object{}).set("criterion", c.ID).set("words", c.Words).
			set("applies_h", num(c.AppliesH)).set("not_applicable_h", num(c.NotApplicableH)).set("unknown_h", num(c.UnknownH)).
			set("over_h", num(c.OverH)).set("under_h", num(c.UnderH)).set("over_share", share(c.OverShare)).set("under_share", share(c.UnderShare)).
			set("over_kh", num(c.OverKh)).set("under_kh", num(c.UnderKh)).
			set("person_over_h", num(c.PersonOverH)).set("person_under_h", num(c.PersonUnderH)).
			set("calculation_only", c.CalculationOnly).set("note", c.Note).set("source", c.Source))
	}
	return out
}

func (in *Input) co2(z int) any {
	f := &in.Results.FreshAir.Zones[z]
	if !f.HasCO2 {
		return nil
	}
	o := (&object{}).set("all", levels(&f.All.KnownH, f.All.UnknownH, f.All.MeanPPM, f.All.P95PPM, f.All.AboveOutdoorMeanPPM, f.All.AboveCatH, f.All.Category))
	for s := running.State(0); s < running.NumStates; s++ {
		l := &f.State[s]
		o.set(s.String(), levels(&l.KnownH, l.UnknownH, l.MeanPPM, l.P95PPM, l.AboveOutdoorMeanPPM, l.AboveCatH, l.Category))
	}
	return o.set("few_people", f.FewPeople)
}

func levels(known *float64, unknown, mean, p95, above float64, over [4]float64, category string) *object {
	return (&object{}).set("known_h", num(*known)).set("unknown_h", num(unknown)).set("mean_ppm", num(mean)).set("p95_ppm", num(p95)).
		set("above_outdoor_mean_ppm", num(above)).set("above_category_i_h", num(over[0])).set("above_category_ii_h", num(over[1])).
		set("above_category_iii_h", num(over[2])).set("above_site_limit_h", num(over[3])).set("category", category)
}

func (in *Input) episodeList(rule privacy.Rule) []any {
	out := []any{}
	for _, e := range in.episodes(rule) {
		if len(out) == listMax {
			break
		}
		out = append(out, (&object{}).set("zone", rule.ID(e.Zone)).set("start_local", in.localAt(e.FromStep)).set("end_local", in.localAt(e.ToStep)).
			set("hours", num(e.Hours)).set("running", e.Running).set("outdoor_temp_c", num(e.OutdoorTempC)).set("indoor_temp_c", num(e.IndoorTempC)).
			set("comfort_high_c", num(e.ComfortHighC)).set("co2_ppm", num(e.CO2PPM)).set("cause", e.Cause.String()).
			set("contributing", contributing(&e)).set("evidence", rule.Text(e.Evidence)).set("people", num(e.People)).set("person_h", num(e.PersonH)))
	}
	return out
}

func (in *Input) months() []any {
	out := []any{}
	for k := range in.Results.Summary.Months {
		m := &in.Results.Summary.Months[k]
		o := (&object{}).set("year", m.Year).set("month", m.Month)
		total := totalObject(&m.Building)
		o.keys, o.values = append(o.keys, total.keys...), append(o.values, total.values...)
		out = append(out, o)
	}
	return out
}

func (in *Input) quality(rule privacy.Rule) *object {
	l := in.Ledger
	var read, accepted int64
	var by [reading.NumReasons]int64
	points := []any{}
	for i := range l.Points {
		p := &l.Points[i]
		read += p.RowsRead
		accepted += p.Counts[reading.Accepted]
		for r := range by {
			by[r] += p.Counts[r]
		}
		points = append(points, (&object{}).set("point", rule.Text(reading.Title(in.Site, i))).set("rows_read", p.RowsRead).
			set("accepted", p.Counts[reading.Accepted]).set("rejected", p.Rejected()).set("coverage", num(p.Coverage)).
			set("interval_s", p.IntervalS).set("hold_s", p.HoldS).set("disordered", p.Disordered))
	}
	rejected := &object{}
	for r := reading.Accepted + 1; r < reading.NumReasons; r++ {
		rejected.set(r.String(), by[r])
	}
	checks := []any{}
	for k := range l.Checks {
		c := &l.Checks[k]
		names := []string{}
		for _, p := range c.Points {
			names = append(names, rule.Text(reading.Title(in.Site, p)))
		}
		var from, to any
		if c.FromUTC != 0 || c.ToUTC != 0 {
			from, to = utc(c.FromUTC, true), utc(c.ToUTC, true)
		}
		checks = append(checks, (&object{}).set("check", string(c.Kind)).set("points", names).set("effect", string(c.Effect)).
			set("from_utc", from).set("to_utc", to).set("readings", c.Readings).set("evidence", rule.Text(rule.Logs(logNames(l), c.Evidence))).set("do_next", rule.Text(c.DoNext)))
	}
	clocks := []any{}
	for k, n := range l.Clock {
		clocks = append(clocks, (&object{}).set("file", rule.File(k, n.File)).set("text", n.Text).set("skipped", n.Skipped).
			set("repeated", n.Repeated).set("ambiguous", n.Ambiguous))
	}
	if len(checks) > listMax {
		checks = checks[:listMax]
	}
	return (&object{}).set("rows_read", read).set("accepted", accepted).set("rejected", read-accepted).set("rejected_share", num(l.RejectedShare())).
		set("rejected_by_reason", rejected).set("checks", checks).set("clock", clocks).set("clocks", in.clockVerdicts(rule)).set("points", points)
}
