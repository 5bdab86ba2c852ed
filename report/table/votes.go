package table

import (
	"sashlog/analyze/running"
	"sashlog/analyze/votes"
)

// votes writes what the occupants said; null without votes.
func (in *Input) votes() any {
	r := in.Results.Votes
	if r == nil {
		return nil
	}
	states := &object{}
	for s := running.State(0); s < running.NumStates; s++ {
		states.set(s.String(), voteGroup(&r.States[s]))
	}
	complaints := []any{}
	for _, c := range r.Complaints {
		by := &object{}
		for s := running.State(0); s < running.NumStates; s++ {
			by.set(s.String(), c.ByState[s])
		}
		complaints = append(complaints, (&object{}).set("kind", string(c.Kind)).set("count", c.Count).set("by_state", by).
			set("per_1000_person_h", figure{num(c.Per1000PersonH), num(c.Low), num(c.High)}).set("outside_limit", c.Explained).set("known", c.Known))
	}
	return (&object{}).set("given", r.Given).set("outside_period", r.OutsidePeriod).set("no_temperature", r.NoTemperature).set("state_unknown", r.StateUnknown).
		set("all", voteGroup(&r.All)).set("states", states).set("complaints", complaints)
}

func voteGroup(g *votes.Group) *object {
	share := func(s votes.Share) *object {
		return (&object{}).set("yes", s.Yes).set("of", s.Of).set("value", num(s.Value)).set("low", num(s.Low)).set("high", num(s.High))
	}
	return (&object{}).set("votes", g.Votes).set("too_few", g.TooFew).set("mean_temp_c", num(g.MeanTempC)).
		set("sensations", g.Sensations).set("mean_sensation", num(g.MeanVote)).set("mean_pmv", num(g.MeanPMV)).
		set("difference", figure{num(g.Difference), num(g.DiffLow), num(g.DiffHigh)}).set("within_one", share(g.WithinOne)).set("acceptable", share(g.Acceptable)).
		set("prefer_cooler", g.PreferCooler).set("no_change", g.NoChange).set("prefer_warmer", g.PreferUp).
		set("neutral_c", figure{num(g.Neutral.NeutralC), num(g.Neutral.NeutralLowC), num(g.Neutral.NeutralHiC)}).
		set("slope_per_k", figure{num(g.Neutral.SlopePerK), num(g.Neutral.SlopeLow), num(g.Neutral.SlopeHigh)}).set("regression_refused", g.Neutral.Refused).
		set("griffiths_c", figure{num(g.Griffiths.MeanC), num(g.Griffiths.LowC), num(g.Griffiths.HighC)})
}
