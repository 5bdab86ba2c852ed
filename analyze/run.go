package analyze

import (
	"sashlog/analyze/advice"
	"sashlog/analyze/afterhours"
	"sashlog/analyze/answerable"
	"sashlog/analyze/breeze"
	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/climate"
	"sashlog/analyze/cores"
	"sashlog/analyze/doubt"
	"sashlog/analyze/energy"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/leaders"
	"sashlog/analyze/longterm"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/analyze/votes"
	"sashlog/analyze/zonemodel"
)

// Run answers every question, in the order of the package comment.
func Run(in Input) *Results {
	s, c, g := in.Site, in.Criteria, in.Grid
	r := &Results{Calendar: calendar.Of(g)}
	clockHours, hourOf := hours.Clock(g, r.Calendar)

	r.Outdoor = outdoor.Measure(s, c, g, r.Calendar)
	r.Indoor = indoor.Combine(s, c, g)
	baselines := freshair.Baselines(c, r.Indoor, r.Outdoor, g)
	r.Running = running.Judge(s, c, g, r.Calendar, r.Indoor)
	r.Exceedance = exceedance.Limit(s, c, g, r.Outdoor, r.Running)
	r.Predicted = predicted.Sense(predicted.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor, Running: r.Running})
	r.Exceedance.Count(s, c, g, r.Outdoor, r.Indoor, r.Running, r.Predicted, hourOf)
	r.Potential = potential.Judge(s, c, g, r.Calendar, r.Outdoor, r.Running, r.Exceedance)
	record := hours.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor,
		Running: r.Running, Exceedance: r.Exceedance, Potential: r.Potential, Calendar: r.Calendar, Hours: clockHours}
	r.Hours = hours.Make(record)
	r.Summary = hours.Sum(r.Hours, g, r.Calendar, r.Running)
	cores.Together(
		func() {
			r.FreshAir = freshair.Assess(freshair.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor, Running: r.Running,
				Calendar: r.Calendar, Baselines: baselines})
		},
		func() {
			r.Lost = lost.Find(lost.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor, Running: r.Running,
				Exceedance: r.Exceedance, Potential: r.Potential, Record: r.Hours, Summary: r.Summary})
		},
		func() {
			r.AfterHours = afterhours.Look(afterhours.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor,
				Running: r.Running, Record: r.Hours, Summary: r.Summary})
		},
		func() {
			r.Climate = climate.Offered(climate.Input{Site: s, Criteria: c, Grid: g, Calendar: r.Calendar, Outdoor: r.Outdoor, Indoor: r.Indoor,
				Running: r.Running, Exceedance: r.Exceedance, Potential: r.Potential})
		},
		func() { r.Energy = energy.Assess(energy.Input{Site: s, Grid: g, Running: r.Running, Record: r.Hours}) },
		func() {
			r.Doubt = doubt.Estimate(doubt.Input{Input: record, Calendar: r.Calendar, Weights: r.Summary.Weights, Seed: 1})
		},
	)
	r.Breeze = breeze.Catch(breeze.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Running: r.Running, Potential: r.Potential, Rates: openRates(r.FreshAir)})
	r.LongTerm = longterm.Assess(longterm.Input{Site: s, Criteria: c, Grid: g, Calendar: r.Calendar, Outdoor: r.Outdoor, Indoor: r.Indoor,
		Running: r.Running, Predicted: r.Predicted, Exceedance: r.Exceedance})
	r.Votes = votes.Compare(votes.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor, Running: r.Running, Predicted: r.Predicted, Exceedance: r.Exceedance})
	r.Changeover = changeover.Read(changeover.Input{Site: s, Grid: g, Calendar: r.Calendar, Outdoor: r.Outdoor, Indoor: r.Indoor,
		Running: r.Running, Potential: r.Potential, Lost: r.Lost, Seed: 1})
	r.Leaders = leaders.Find(leaders.Input{Site: s, Grid: g, Calendar: r.Calendar, Outdoor: r.Outdoor, Indoor: r.Indoor, Running: r.Running,
		Exceedance: r.Exceedance, Record: r.Hours, Lost: r.Lost, Changeover: r.Changeover, Seed: 1})
	if in.ZoneModels {
		r.ZoneModel = zonemodel.Learn(zonemodel.Input{Site: s, Criteria: c, Grid: g, Calendar: r.Calendar, Outdoor: r.Outdoor, Indoor: r.Indoor,
			Running: r.Running, Exceedance: r.Exceedance, Record: r.Hours, Seed: 1})
	}
	r.Answerable = answerable.Ask(s, g)
	r.Findings = advice.Advise(advice.Input{Site: s, Criteria: c, Grid: g, Outdoor: r.Outdoor, Indoor: r.Indoor, Running: r.Running,
		Exceedance: r.Exceedance, Potential: r.Potential, Record: r.Hours, Summary: r.Summary, FreshAir: r.FreshAir,
		Lost: r.Lost, AfterHours: r.AfterHours, Changeover: r.Changeover, Leaders: r.Leaders})
	return r
}

// openRates are the air change rates measured in open mode, for the wind: those
// of the ways that may stand for a state.
func openRates(f *freshair.Result) []breeze.Rate {
	var out []breeze.Rate
	add := func(z int, day bool, events []freshair.Event) {
		for _, e := range events {
			if e.State == running.Open {
				out = append(out, breeze.Rate{Zone: z, Day: day, FromStep: e.FromStep, ToStep: e.ToStep, AirChangePerH: e.AirChangePerH})
			}
		}
	}
	for z := range f.Zones {
		add(z, false, f.Zones[z].Decays)
		add(z, true, f.Zones[z].Days)
	}
	return out
}
