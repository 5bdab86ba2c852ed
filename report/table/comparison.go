package table

import (
	"encoding/json"
	"io"

	"sashlog/analyze/compare"
	"sashlog/report/privacy"
)

// WriteComparisonJSON writes every figure of a comparison.
func WriteComparisonJSON(w io.Writer, in Input, r *compare.Result) error {
	rule := privacy.For(in.Site)
	span := func(s compare.Span) *object {
		return (&object{}).set("from", s.From.String()).set("to", s.To.String())
	}
	ids := func(zones []int) []string {
		out := []string{}
		for _, z := range zones {
			out = append(out, rule.ID(z))
		}
		return out
	}
	three := func(e compare.Estimate) figure { return figure{num(e.Value), num(e.Low), num(e.High)} }
	outcomes := &object{}
	for m := compare.Measure(0); m < compare.NumMeasures; m++ {
		o := &r.Outcomes[m]
		outcomes.set(m.String(), (&object{}).set("before", num(o.Before)).set("after", num(o.After)).set("before_adjusted", num(o.BeforeAdjusted)).
			set("after_matched", num(o.AfterMatched)).set("difference", three(o.Difference)).set("untouched", three(o.Untouched)).
			set("second_opinion", three(o.SecondOpinion)).set("probability_better", num(o.ProbabilityBetter)).
			set("verdict", o.Verdict.String()).set("unusable", o.Unusable))
	}
	m := r.Matched
	root := (&object{}).set("tool", in.tool()).set("site", in.siteObject(rule)).set("inputs", in.inputs(rule)).set("criteria", in.criteriaObject()).
		set("before", span(r.Before)).set("after", span(r.After)).set("zones", ids(r.Zones)).set("untouched", ids(r.Untouched)).
		set("unusable", r.Unusable).set("criterion", r.Criterion).
		set("weather", (&object{}).set("before_days", m.BeforeDays).set("after_days", m.AfterDays).set("before_matched_share", num(m.BeforeShare)).
			set("after_matched_share", num(m.AfterShare)).set("before_mean_c", num(m.BeforeMeanC)).set("after_mean_c", num(m.AfterMeanC))).
		set("outcomes", outcomes).set("draws", r.Draws).set("interval", "95 %, circular block bootstrap of days")
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(true)
	enc.SetIndent("", " ")
	return enc.Encode(root)
}
