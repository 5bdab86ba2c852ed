package table

import (
	"encoding/json"
	"io"
	"strconv"
	"strings"

	"sashlog/analyze/compare"
	"sashlog/analyze/randomisation"
	"sashlog/analyze/trial"
	"sashlog/configs"
	"sashlog/configs/schedule"
	"sashlog/report/privacy"
)

// WriteScheduleCSV writes the days of a trial as configs.ReadSchedule reads
// them.
func WriteScheduleCSV(w io.Writer, in Input, s *schedule.Schedule) error {
	rule := privacy.For(in.Site)
	b := []byte(bom + strings.Join(configs.ScheduleColumns, ",") + "\n")
	zones, untouched := strings.Join(rule.IDs(s.Zones), "; "), strings.Join(rule.IDs(s.Untouched), "; ")
	for _, d := range s.Days {
		setting := configs.SettingUsual
		if d.Trial {
			setting = configs.SettingTrial
		}
		b = append(b, d.Date.String()...)
		for _, cell := range []string{strconv.Itoa(d.Block), strconv.Itoa(d.Week + 1), setting, string(s.Design), schedule.Weekday(d.Date).String(), string(d.Ran), d.Note,
			strconv.FormatUint(s.Seed, 10), rule.Text(s.Setting), zones, untouched} {
			b = appendText(append(b, ','), cell)
		}
		b = append(b, '\n')
	}
	_, err := w.Write(b)
	return err
}

// WriteTrialJSON writes every figure of a plan.
func WriteTrialJSON(w io.Writer, in Input, p *trial.Plan) error {
	rule := privacy.For(in.Site)
	ids := func(zones []int) []string {
		out := []string{}
		for _, z := range zones {
			out = append(out, rule.ID(z))
		}
		return out
	}
	steps := []any{}
	for i := range p.Steps {
		st := &p.Steps[i]
		where, side := "outdoors", "below"
		if st.Zone >= 0 {
			where = rule.ID(st.Zone)
		}
		if st.Above {
			side = "above"
		}
		steps = append(steps, (&object{}).set("id", rule.Text(st.ID)).set("chosen", i == p.Chosen).set("temperature_of", where).set("closed", side).
			set("now_c", figure{num(st.NowC), num(st.LowC), num(st.HighC)}).set("trial_c", num(st.TrialC)).set("zones", ids(st.Zones)).set("untouched", ids(st.Untouched)).
			set("missed_beyond_h", num(st.BeyondH)).set("missed_within_step_h", num(st.StepH)).set("open_inside_share", num(st.OpenInside)).
			set("gain_h", num(st.GainH)).set("gain_person_h", num(st.GainPersonH)))
	}
	powers := []any{}
	for _, x := range p.Powers {
		powers = append(powers, (&object{}).set("fortnights", x.Fortnights).set("days", x.Days).set("planted_gain_share", num(x.EffectShare)).
			set("shown_share", num(x.Finds)).set("half_gain_shown_share", num(x.Half)).set("no_gain_shown_share", num(x.FalseAlarm)))
	}
	watches := []any{}
	for _, x := range p.Watches {
		watches = append(watches, (&object{}).set("what", x.What).set("stop_when", x.Stop).set("then", x.Then).set("today", x.Today).set("basis", x.Basis))
	}
	root := (&object{}).set("tool", in.tool()).set("site", in.siteObject(rule)).set("inputs", in.inputs(rule)).set("criteria", in.criteriaObject()).
		set("unusable", rule.Text(p.Unusable)).set("steps", steps).set("lengths", powers).set("fortnights", p.Fortnights).set("season_too_short", p.TooShort).
		set("simulations", p.Simulations).set("season_from", p.SeasonFrom.String()).set("season_to", p.SeasonTo.String()).
		set("schedule", scheduleObject(&p.Schedule, rule)).set("watch", watches)
	return indented(w, root)
}

func scheduleObject(s *schedule.Schedule, rule privacy.Rule) *object {
	days := []any{}
	for _, d := range s.Days {
		days = append(days, (&object{}).set("date", d.Date.String()).set("block", d.Block).set("week", d.Week+1).set("trial", d.Trial).set("ran", string(d.Ran)))
	}
	return (&object{}).set("design", string(s.Design)).set("seed", s.Seed).set("change", rule.Text(s.Setting)).set("days", days)
}

func indented(w io.Writer, root *object) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(true)
	enc.SetIndent("", " ")
	return enc.Encode(root)
}

// WriteTrialVerdictJSON writes every figure of a trial's verdict.
func WriteTrialVerdictJSON(w io.Writer, in Input, r *compare.Scheduled) error {
	rule := privacy.For(in.Site)
	ids := func(zones []int) []string {
		out := []string{}
		for _, z := range zones {
			out = append(out, rule.ID(z))
		}
		return out
	}
	outcomes := &object{}
	var first randomisation.Answer
	for m := range compare.NumMeasures {
		o := &r.Outcomes[m]
		a := o.Answer
		if m == 0 {
			first = a
		}
		outcomes.set(m.String(), (&object{}).set("trial", num(a.Trial)).set("usual", num(a.Usual)).set("untouched_trial", num(a.UntouchedTrial)).set("untouched_usual", num(a.UntouchedUsual)).
			set("difference", figure{num(a.Difference), num(a.Low), num(a.High)}).set("p", num(a.P)).set("verdict", o.Verdict.String()).set("unusable", o.Unusable))
	}
	k := r.Kept
	root := (&object{}).set("tool", in.tool()).set("site", in.siteObject(rule)).set("inputs", in.inputs(rule)).set("criteria", in.criteriaObject()).
		set("schedule", scheduleObject(r.Schedule, rule)).set("zones", ids(r.Zones)).set("untouched", ids(r.Untouched)).set("unusable", r.Unusable).set("criterion", r.Criterion).
		set("kept", (&object{}).set("days", k.Days).set("logged", k.Logged).set("as_drawn", k.AsDrawn).set("otherwise", k.Otherwise).set("stopped", k.Stopped).set("not_noted", k.NotNoted).set("to_come", k.ToCome)).
		set("weather", (&object{}).set("trial_days", r.TrialDays).set("usual_days", r.UsualDays).set("trial_mean_c", num(r.TrialMeanC)).set("usual_mean_c", num(r.UsualMeanC))).
		set("outcomes", outcomes).set("drawings", first.Drawings).set("drawings_are_all", first.Exact).
		set("interval", "95 %, differences the randomisation test does not reject; null where unbounded")
	return indented(w, root)
}
