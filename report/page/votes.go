package page

import (
	"fmt"

	"sashlog/analyze/running"
	"sashlog/analyze/votes"
	"sashlog/report/words"
)

// said is the chapter on occupants' votes and complaints; empty without any.
func (b *builder) said() section {
	r := b.in.Results.Votes
	if r == nil {
		return section{}
	}
	s := section{ID: "votes", Title: "What the occupants said"}
	lost := ""
	if n := r.NoTemperature + r.OutsidePeriod; n > 0 {
		lost = fmt.Sprintf(" %s could not be used: %s outside the period, %s without a temperature in the zone at that time.",
			words.Count(int64(n)), words.Count(int64(r.OutsidePeriod)), words.Count(int64(r.NoTemperature)))
	}
	s.Blocks = append(s.Blocks, text(words.Plural(r.Given, "vote or complaint was", "votes and complaints were")+" given."+lost+
		" Sensation runs from -3 (cold) over 0 (neutral) to 3 (hot). The predicted vote (PMV) is what ISO 7730 expects of people at that temperature who cannot adapt; a difference that is not zero says that people here feel warmer or cooler than that."))
	t := table{ID: "votes-by-state", Caption: "Votes by running state, with 95 % intervals", Head: []column{col("Running state"), num("Votes"), num("Mean temperature (°C)"),
		num("Mean sensation"), num("Predicted"), num("Difference"), num("Within -1 to 1"), num("Acceptable"), num("Prefer cooler / no change / warmer")}}
	fits := table{ID: "votes-neutral", Caption: "Temperature at which people feel neutral (°C)", Head: []column{col("Running state"), num("Votes"), num("Regression"), num("Sensation per K"), num("Griffiths’ method"), col("Note")}}
	add := func(name string, g *votes.Group) {
		if g.Votes == 0 {
			return
		}
		if g.TooFew != "" {
			t.Rows = append(t.Rows, row(name, words.Count(int64(g.Votes)), "too few", words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash))
			return
		}
		t.Rows = append(t.Rows, row(name, words.Count(int64(g.Votes)), words.Number(g.MeanTempC, 1), words.Number(g.MeanVote, 2), words.Number(g.MeanPMV, 2),
			threeOf(g.Difference, g.DiffLow, g.DiffHigh, 2), shareOf(g.WithinOne), shareOf(g.Acceptable),
			fmt.Sprintf("%d / %d / %d", g.PreferCooler, g.NoChange, g.PreferUp)))
		fits.Rows = append(fits.Rows, row(name, words.Count(int64(g.Neutral.Votes)), threeOf(g.Neutral.NeutralC, g.Neutral.NeutralLowC, g.Neutral.NeutralHiC, 1),
			threeOf(g.Neutral.SlopePerK, g.Neutral.SlopeLow, g.Neutral.SlopeHigh, 2), threeOf(g.Griffiths.MeanC, g.Griffiths.LowC, g.Griffiths.HighC, 1), g.Neutral.Refused))
	}
	for st := running.State(0); st < running.NumStates; st++ {
		add(stateLook[st].Label(), &r.States[st])
	}
	add("all", &r.All)
	t.Foot = []string{fmt.Sprintf("Shares are shown from %d votes. %s not asked or not known. Intervals take votes as independent; people who voted often make them too narrow, and who votes is not who is there.", votes.LeastForShares, words.Dash)}
	fits.Foot = []string{fmt.Sprintf("Regression from %d votes, with Fieller's interval; Griffiths' method takes a change of %g per kelvin (from memory).", votes.LeastForFits, votes.GriffithsPerK)}
	if len(t.Rows) > 0 {
		s.Blocks = append(s.Blocks, b.table(t))
	}
	if len(fits.Rows) > 0 {
		s.Blocks = append(s.Blocks, b.table(fits))
	}
	if len(r.Complaints) > 0 {
		s.Blocks = append(s.Blocks, b.complaints(r))
	}
	return s
}

func (b *builder) complaints(r *votes.Result) block {
	t := table{ID: "complaints", Caption: "Complaints by kind", Head: []column{col("Complaint"), num("Number"), num("per 1,000 person-hours"), num(stateLook[running.Open].Label()), num(stateLook[running.Mech].Label()), num(stateLook[running.Both].Label()), num(stateLook[running.Shut].Label()), num(stateLook[running.Unknown].Label()), col("Was it so?")}}
	for _, c := range r.Complaints {
		so := words.Dash
		if c.Known > 0 {
			so = fmt.Sprintf("in %d of %d the zone was outside its comfort limit on that side", c.Explained, c.Known)
		}
		count := func(s running.State) string { return words.Count(int64(c.ByState[s])) }
		t.Rows = append(t.Rows, row(words.Sentence(string(c.Kind)), words.Count(int64(c.Count)), threeOf(c.Per1000PersonH, c.Low, c.High, 2),
			count(running.Open), count(running.Mech), count(running.Both), count(running.Shut), count(running.Unknown), so))
	}
	t.Foot = []string{"Rates over occupied person-hours with exact 95 % intervals."}
	return b.table(t)
}

func threeOf(v, low, high float64, decimals int) string {
	s := words.Number(v, decimals)
	if s == words.Dash || words.Number(low, decimals) == words.Dash {
		return s
	}
	return s + " (" + words.Number(low, decimals) + " to " + words.Number(high, decimals) + ")"
}

func shareOf(s votes.Share) string {
	if s.Of == 0 {
		return words.Dash
	}
	return words.Share(s.Value) + " (" + words.Number(s.Low*100, 0) + " to " + words.Number(s.High*100, 0) + ")"
}
