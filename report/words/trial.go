package words

import (
	"fmt"
	"math"

	"sashlog/analyze/compare"
	"sashlog/analyze/trial"
	"sashlog/configs/schedule"
)

// StepWords says what a step moves: "plant unit AHU-1 keeps windows shut above
// 22.2 °C outdoors; on trial above 23.2 °C".
func (in Input) StepWords(st *trial.Step) (now, then string) {
	side, where := "below", "outdoors"
	if st.Above {
		side = "above"
	}
	if st.Zone >= 0 {
		where = "in " + in.Zone(st.Zone)
	}
	who := "the windows of " + in.Foreign(st.Subject) + " are kept"
	if st.IsPlant {
		who = "plant unit " + Clean(st.Subject) + " keeps its zones"
	}
	interval := ""
	if known(st.LowC) && known(st.HighC) {
		interval = " (" + Number(st.LowC, 1) + " to " + Number(st.HighC, 1) + ")"
	}
	return fmt.Sprintf("%s from open mode %s about %s %s%s", who, side, Unit(st.NowC, 1, "°C"), where, interval),
		fmt.Sprintf("on trial only %s %s %s", side, Unit(st.TrialC, 1, "°C"), where)
}

// DesignWords says how the days are drawn.
func DesignWords(d schedule.Design) string {
	if d == schedule.ByWeeks {
		return "Whole weeks alternate: of every two weeks in a row one is on trial, which one is drawn by lot."
	}
	return "Days alternate: of every two weeks in a row each weekday is on trial once and as usual once, in which week is drawn by lot, two or three days of a five-day week at a time, so that weekdays balance exactly and the weather of a fortnight nearly."
}

// Planned says in plain sentences what the next trial is.
func Planned(in Input, p *trial.Plan) []string {
	if p.Unusable != "" {
		return []string{"No trial is planned: " + in.Foreign(p.Unusable) + "."}
	}
	st := p.Step()
	now, then := in.StepWords(st)
	days := p.Schedule.Days
	pw := PlannedPower(p)
	out := []string{
		capital(now) + "; " + then + ". Within that step " + Hours(st.StepH) + " of suitable weather were missed in the period, summed over " + Zones(len(st.Zones)) +
			"; used as the hours just inside the limit are, about " + Hours(st.GainH) + " of them would be open.",
		fmt.Sprintf("The trial takes %s, from %s to %s: %s, of which %d on trial.", Plural(p.Fortnights, "fortnight", "fortnights"), Date(days[0].Date), Date(days[len(days)-1].Date),
			Plural(len(days), "day", "days"), onTrial(days)),
	}
	length := fmt.Sprintf("Trials of this length, simulated on the logged days with the gain planted (%s of the possible open hours), showed it in %s of %s; half the gain in %s.",
		SharePoints(pw.EffectShare), Share(pw.Finds), Count(int64(p.Simulations)), Share(pw.Half))
	if p.TooShort {
		length += " The season is too short for a verdict that can be relied on: even the best length finds the gain in fewer than " + Share(trial.LeastPower) + " of trials. Take its verdict as a hint only, or begin in a season that gains more."
	}
	out = append(out, length)
	if len(st.Untouched) == 0 {
		out = append(out, "No zone is left untouched, so what happens to the whole building cannot be taken off; the drawing alone guards against it.")
	} else {
		out = append(out, Zones(len(st.Untouched))+" the step does not reach stand beside as they are; leave their settings alone.")
	}
	return append(out, "Local codes and licensed practice decide whether it may be run at all, and when to stop.")
}

func onTrial(days []schedule.Day) (n int) {
	for _, d := range days {
		if d.Trial {
			n++
		}
	}
	return n
}

// PlannedPower is the power of the planned length.
func PlannedPower(p *trial.Plan) trial.Power {
	for _, w := range p.Powers {
		if w.Fortnights == p.Fortnights {
			return w
		}
	}
	return trial.Power{EffectShare: math.NaN(), Finds: math.NaN(), Half: math.NaN(), FalseAlarm: math.NaN()}
}

// SharePoints writes a difference of shares in percentage points.
func SharePoints(v float64) string {
	if !known(v) {
		return Dash
	}
	return Number(v*100, 1) + " points"
}

// Tried answers in plain sentences what a trial showed, the main measure first.
func Tried(r *compare.Scheduled) []string {
	if r.Unusable != "" {
		return []string{"What the trial showed cannot be said: " + r.Unusable + "."}
	}
	var out []string
	for m := range compare.NumMeasures {
		o := &r.Outcomes[m]
		name := measure[m].Name
		if o.Unusable != "" {
			out = append(out, capital(name)+" cannot be compared: "+o.Unusable+".")
			continue
		}
		a := o.Answer
		d := Points(Spread(o)) + " percentage points"
		if len(r.Untouched) > 0 {
			d += " once that of the untouched zones is taken off"
		}
		values := fmt.Sprintf("%s on days on trial, %s on days as usual; %s, p %s", Share(a.Trial), Share(a.Usual), d, PValue(a.P))
		switch o.Verdict {
		case compare.Better:
			out = append(out, fmt.Sprintf("%s was better on trial: %s.", capital(name), values))
		case compare.Worse:
			out = append(out, fmt.Sprintf("%s was worse on trial: %s.", capital(name), values))
		default:
			out = append(out, fmt.Sprintf("No difference is shown in %s: %s, which the drawing of the days alone may give.", name, values))
		}
	}
	return append(out, KeptWords(&r.Kept))
}

// Spread is a trial's difference with its interval; an interval without an end
// is none.
func Spread(o *compare.ScheduledOutcome) compare.Estimate {
	e := compare.Estimate{Value: o.Answer.Difference, Low: math.Max(-1, o.Answer.Low), High: math.Min(1, o.Answer.High)}
	if math.IsInf(o.Answer.Low, 0) || math.IsInf(o.Answer.High, 0) {
		e.Low, e.High = math.NaN(), math.NaN()
	}
	return e
}

// PValue writes a p value.
func PValue(p float64) string {
	switch {
	case !known(p):
		return Dash
	case p < 0.001:
		return "under 0.001"
	case p < 0.1:
		return Number(p, 3)
	}
	return Number(p, 2)
}

// KeptWords says how the schedule was kept.
func KeptWords(k *compare.Kept) string {
	t := fmt.Sprintf("Of %s scheduled, %s have readings; by the notes in the schedule %d were run as drawn, %d the other way and %d were stopped, %d are not noted. All count as they were drawn, so that no choice of days can favour either side.",
		Plural(k.Days, "day", "days"), Count(int64(k.Logged)), k.AsDrawn, k.Otherwise, k.Stopped, k.NotNoted)
	if k.ToCome > 0 {
		t += fmt.Sprintf(" %s to come: a verdict taken before the end, and again later, is wrong more often than it says.", Plural(k.ToCome, "scheduled day is", "scheduled days are"))
	}
	return t
}
