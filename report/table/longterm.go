package table

import (
	"sashlog/analyze/longterm"
	"sashlog/report/privacy"
)

// longTerm writes the long-term indices of a zone.
func (in *Input) longTerm(z int) any {
	if in.Results.LongTerm == nil {
		return nil
	}
	o := &in.Results.LongTerm.Zones[z]
	tm := &o.TM52
	deviations := []any{}
	for _, d := range o.Deviations {
		from := any(nil)
		if d.Spans > 0 {
			from = d.WorstFrom.String()
		}
		deviations = append(deviations, (&object{}).set("span", d.Span.String()).set("spans", d.Spans).set("worst_share", num(d.WorstShare)).
			set("worst_from", from).set("over_3_percent", d.Over3).set("over_5_percent", d.Over5))
	}
	return (&object{}).set("known_h", num(o.KnownH)).set("unknown_h", num(o.UnknownH)).
		set("iso7730_a_h", sides(o.OutsideH)).set("iso7730_b_h", sides(o.WeightedH)).set("iso7730_c_h", sides(o.PPDWeightedH)).
		set("iso7730_d_percent", num(o.MeanPPDPct)).set("iso7730_e_percent_h", num(o.SumPPDPctH)).set("vote_h", num(o.VoteH)).set("no_vote_h", num(o.NoVoteH)).
		set("tm52", (&object{}).set("judged", tm.AnythingJudged).set("season_h", num(tm.SeasonH)).set("exceeded_h", num(tm.ExceededH)).
			set("exceeded_share", num(tm.ExceededShare)).set("worst_day_kh", num(tm.WorstDayKh)).set("max_excess_k", num(tm.MaxExcessK)).
			set("unknown_h", num(tm.UnknownH)).set("outside_range_h", num(o.TM52OutsideH)).set("fails", tm.Fails[:]).set("overheats", tm.Overheats)).
		set("tm59", home(&o.Home)).set("deviations", deviations)
}

// home writes TM59's outcome, or why there is none.
func home(o *longterm.Home) *object {
	if o.NotApplicable != "" {
		return (&object{}).set("applies", false).set("why_not", o.NotApplicable)
	}
	return (&object{}).set("applies", true).set("mechanical", o.Mechanical).set("a_share", num(o.AShare)).set("night_h", num(o.NightH)).
		set("night_over_26_h", num(o.NightOver26H)).set("night_unknown_h", num(o.NightUnknownH)).set("occupied_h", num(o.OccupiedH)).
		set("over_26_h", num(o.Over26H)).set("known", o.Known).set("passes", o.Passes)
}

func sides(s longterm.Sides) *object {
	return (&object{}).set("warm", num(s.Warm)).set("cool", num(s.Cool))
}

// comfortSpread writes whom the average hides.
func (in *Input) comfortSpread(rule privacy.Rule) any {
	if in.Results.LongTerm == nil {
		return nil
	}
	lt := in.Results.LongTerm
	s := &lt.Spread
	hidden := []any{}
	for _, h := range s.Hidden {
		hidden = append(hidden, (&object{}).set("zone", rule.ID(h.Zone)).set("warm_h", num(h.WarmH)).set("cool_h", num(h.CoolH)).set("person_h", num(h.PersonH)))
	}
	return (&object{}).set("weighted_by", s.WeightedBy).set("known_h", num(s.KnownH)).
		set("person_outside_share", figure{num(s.PersonOutsideShare.Value), num(s.PersonOutsideShare.Low), num(s.PersonOutsideShare.High)}).
		set("person_warm_share", num(s.PersonWarmShare)).set("person_cool_share", num(s.PersonCoolShare)).
		set("average_inside_h", num(s.AverageInsideH)).set("hidden_h", num(s.HiddenH)).set("hidden_zones", hidden).
		set("rooms_within_3_percent", num(lt.RoomsWithin3)).set("rooms_within_5_percent", num(lt.RoomsWithin5)).set("rooms_by", lt.RoomsBy)
}
