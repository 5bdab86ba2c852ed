package page

import (
	"fmt"
	"io"
	"time"

	"sashlog/analyze/compare"
	"sashlog/analyze/trial"
	"sashlog/configs/schedule"
	"sashlog/report/words"
)

// WriteTrial writes the plan of the next trial, to print and hang up.
func WriteTrial(w io.Writer, in Input, p *trial.Plan) error {
	b := newBuilder(in)
	sections := []section{{ID: "answer", Title: "What to try", Blocks: texts(words.Planned(b.w, p)...)}}
	if p.Unusable == "" {
		sections = append(sections,
			section{ID: "days", Title: "The days", Blocks: b.trialDays(p)},
			section{ID: "stop", Title: "What to watch, and when to stop", Blocks: b.trialWatches(p)},
			section{ID: "length", Title: "How long until a verdict", Blocks: b.trialLength(p)})
	}
	if len(p.Steps) > 0 {
		sections = append(sections, section{ID: "steps", Title: "What else could be tried", Blocks: b.trialSteps(p)})
	}
	return b.write(w, sheet{Title: "the next safe trial", Question: "What is the next safe step, on which days, and when will it be known?",
		Sections: append(sections, b.provenance(), b.cautions())})
}

func settingWords(trial bool) string {
	if trial {
		return "TRIAL"
	}
	return "usual"
}

func (b *builder) trialDays(p *trial.Plan) []block {
	s := &p.Schedule
	out := texts(words.DesignWords(s.Design)+fmt.Sprintf(" Seed %d draws them again.", s.Seed),
		"Change the setting before people come, and back after they have left. Write into the last column, or into the column ran of schedule.csv, what was really run: trial, usual, or stopped. A day missed or stopped is not made up for; it stays where it was drawn.")
	var weekdays []time.Weekday
	for k := range 7 {
		if w := time.Weekday((k + 1) % 7); s.Weekdays().Holds(w) {
			weekdays = append(weekdays, w)
		}
	}
	t := table{ID: "schedule", Caption: "The days as drawn", Head: []column{keep("Week of"), num("Fortnight")}}
	for _, w := range weekdays {
		t.Head = append(t.Head, keep(w.String()[:3]))
	}
	t.Head = append(t.Head, col("Really run, and notes"))
	for at := 0; at < len(s.Days); {
		monday := schedule.AddDays(s.Days[at].Date, -(int(schedule.Weekday(s.Days[at].Date))+6)%7)
		r := row(words.Date(monday), words.Count(int64(s.Days[at].Block)))
		to := at
		for _, w := range weekdays {
			c := cell{Text: words.Dash}
			if to < len(s.Days) && s.Days[to].Date.Before(schedule.AddDays(monday, 7)) && schedule.Weekday(s.Days[to].Date) == w {
				c = cell{Text: settingWords(s.Days[to].Trial), Strong: s.Days[to].Trial}
				to++
			}
			r = append(r, c)
		}
		t.Rows = append(t.Rows, append(r, cell{}))
		at = max(to, at+1)
	}
	t.Foot = []string{words.Dash + " holiday in the site file. The same days stand in schedule.csv."}
	return append(out, b.table(t))
}

func (b *builder) trialWatches(p *trial.Plan) []block {
	t := table{ID: "watch", Caption: "Signs to stop at", Head: []column{col("What"), col("Stop when"), col("Then"), col("Today"), col("Basis")}}
	for _, x := range p.Watches {
		today := x.Today
		if today == "" {
			today = words.Dash
		}
		t.Rows = append(t.Rows, row(x.What, x.Stop, x.Then, today, x.Basis))
	}
	t.Foot = []string{words.Dash + " not worked out from the logs."}
	return []block{
		text("Somebody by name watches on every day on trial and may stop it without asking. Tell the people in the zones before it begins, and whom to call; those at risk from heat stay out of it. A stopped day is noted as stopped and stays in the verdict."),
		b.table(t)}
}

func (b *builder) trialLength(p *trial.Plan) []block {
	t := table{ID: "power", Caption: fmt.Sprintf("How often simulated trials show the step's gain (%s per length)", words.Count(int64(p.Simulations))), Small: true,
		Head: []column{num("Fortnights"), num("Days"), num("Gain planted"), num("Shown"), num("Half of it shown"), num("Shown with no gain")}}
	for _, x := range p.Powers {
		r := row(words.Count(int64(x.Fortnights)), words.Count(int64(x.Days)), words.SharePoints(x.EffectShare), words.Share(x.Finds), words.Share(x.Half), words.Share(x.FalseAlarm))
		r[0].Strong = x.Fortnights == p.Fortnights
		t.Rows = append(t.Rows, r)
	}
	t.Foot = []string{fmt.Sprintf("Fortnights of the season %s to %s of the logs (shorter and longer lengths: of the weeks that gain most) were drawn with replacement, put on trial by the same rule, and each day's own gain added on trial. The last column should be 5 %% or less. Planned is the fewest that show the gain in %s.",
		words.Date(p.SeasonFrom), words.Date(p.SeasonTo), words.Share(trial.LeastPower))}
	return []block{text("The longer the trial, the surer the verdict. Do not look for a verdict before its end: sashlog compare SITE.yaml --schedule schedule.csv gives it then, by drawing the days again."), b.table(t)}
}

func (b *builder) trialSteps(p *trial.Plan) []block {
	t := table{ID: "steps-table", Caption: "Limits beyond which suitable weather was missed", Head: []column{col("Step"), col("Today"), col("On trial"), num("Missed beyond (h)"), num("Within the step (h)"), num("Open just inside"), num("Would gain (h)")}}
	for i := range p.Steps {
		st := &p.Steps[i]
		now, then := b.w.StepWords(st)
		r := row(b.w.Foreign(st.ID), words.Sentence(now), then, words.HoursNumber(st.BeyondH), words.HoursNumber(st.StepH), words.Share(st.OpenInside), words.HoursNumber(st.GainH))
		r[0].Strong = i == p.Chosen
		t.Rows = append(t.Rows, r)
	}
	t.Foot = []string{"Hours summed over the zones reached, in the period; hours beyond another limit of the same plant do not count, since the step alone would not free them. A room's call: hours of the runs it began, half of which the step is taken to gain, since the room warms on and calls 1 K later. Only limits the logs show well enough are listed. Another step is planned with --step and its name."}
	return []block{b.table(t)}
}

// WriteTrialVerdict writes what a trial showed.
func WriteTrialVerdict(w io.Writer, in Input, r *compare.Scheduled) error {
	b := newBuilder(in)
	answer := section{ID: "answer", Title: "The answer", Blocks: texts(words.Tried(r)...)}
	if r.Unusable == "" {
		t := table{ID: "differences", Caption: "Days on trial and days as usual, as shares in per cent and differences in percentage points with 95 % intervals",
			Head: []column{col("Measure"), num("On trial"), num("As usual"), num("Untouched, on trial"), num("Untouched, as usual"), num("Difference"), num("p")}}
		for m := range compare.NumMeasures {
			o := &r.Outcomes[m]
			t.Rows = append(t.Rows, row(words.MeasureName(m), words.Share(o.Answer.Trial), words.Share(o.Answer.Usual), words.Share(o.Answer.UntouchedTrial), words.Share(o.Answer.UntouchedUsual),
				words.Points(words.Spread(o)), words.PValue(o.Answer.P)))
		}
		t.Foot = []string{"p: how often the drawing of the days alone gives a difference as great. The interval holds the differences the drawing does not contradict; without one, too few drawings were possible to exclude any. The first measure decides; the others say what it cost. " + words.Dash + " cannot be told."}
		answer.Blocks = append(answer.Blocks, b.table(t))
	}
	return b.write(w, sheet{Title: "what did the trial show?", Question: fmt.Sprintf("What did the trial show? %s to %s", words.Date(r.From), words.Date(r.To)),
		Sections: []section{answer, {ID: "how", Title: "How it was judged", Blocks: b.howTried(r)}, b.provenance(), b.cautions()}})
}

func (b *builder) howTried(r *compare.Scheduled) []block {
	var zones, untouched []string
	for _, z := range r.Zones {
		zones = append(zones, b.w.Zone(z))
	}
	for _, z := range r.Untouched {
		untouched = append(untouched, b.w.Zone(z))
	}
	drawings := fmt.Sprintf("%s drawings by the same rule", words.Count(int64(r.Outcomes[0].Answer.Drawings)))
	if r.Outcomes[0].Answer.Exact {
		drawings = "all " + words.Count(int64(r.Outcomes[0].Answer.Drawings)) + " drawings there might have been"
	}
	out := texts(words.DesignWords(r.Schedule.Design),
		fmt.Sprintf("%s on trial and %s as usual have readings; the mean outdoor temperature of occupied hours was %s and %s.", words.Plural(r.TrialDays, "day", "days"), words.Plural(r.UsualDays, "day", "days"),
			words.Unit(r.TrialMeanC, 1, "°C"), words.Unit(r.UsualMeanC, 1, "°C")),
		"Comfort is held to one criterion on all days: "+words.Clean(r.Criterion)+".",
		"Zones on trial: "+words.List(zones, 30)+".")
	if len(untouched) > 0 {
		out = append(out, text("Untouched zones: "+words.List(untouched, 30)+"."))
	} else {
		out = append(out, note("No untouched zones are named in the schedule."))
	}
	if r.Unusable == "" {
		out = append(out, text("The days are taken as they were and the lot is drawn again: the difference seen is held against that of "+drawings+". Nothing is assumed about how days follow one another."))
	}
	return out
}
