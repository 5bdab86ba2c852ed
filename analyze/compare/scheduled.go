package compare

import (
	"fmt"
	"math"

	"sashlog/analyze/randomisation"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
)

// DayRatios are the measures of one occupied day in the zones compared and in
// the untouched ones, as part and whole.
type DayRatios struct {
	Date              site.Date
	OutdoorTempC      float64 // mean of occupied hours
	Zones, NotTouched [NumMeasures]randomisation.Ratio
}

// Daily gives every occupied day of known weather between Before.From and
// After.To, in order of time, and the comfort criterion in words.
func Daily(in Input, zones, untouched []int) ([]DayRatios, string) {
	in.Before, in.After = Span{in.Before.From, in.After.To}, Span{}
	outside, words := outsideHours(&in)
	var out []DayRatios
	for _, d := range daysOf(&in, [2][]int{zones, untouched}, outside) {
		r := DayRatios{Date: d.date, OutdoorTempC: d.tempC}
		for m := range NumMeasures {
			r.Zones[m] = randomisation.Ratio{Part: d.of[0][m].part, Whole: d.of[0][m].whole}
			r.NotTouched[m] = randomisation.Ratio{Part: d.of[1][m].part, Whole: d.of[1][m].whole}
		}
		out = append(out, r)
	}
	return out, words
}

// Kept counts how a schedule was kept.
type Kept struct {
	// Days scheduled, of which Logged have known weather and occupied hours.
	Days, Logged int
	// As noted afterwards in the schedule: AsDrawn as scheduled, Otherwise the
	// other way, Stopped when a stopping rule was met, the rest NotNoted.
	AsDrawn, Otherwise, Stopped, NotNoted int
	// ToCome are scheduled days after the end of the logs.
	ToCome int
}

// ScheduledOutcome is one measure of a trial, as shares.
type ScheduledOutcome struct {
	Measure  Measure
	Answer   randomisation.Answer
	Verdict  Verdict
	Unusable string
}

// Scheduled is what a trial says.
type Scheduled struct {
	Schedule         *schedule.Schedule
	Zones, Untouched []int
	From, To         site.Date
	Kept             Kept
	TrialDays        int // logged days on trial
	TrialMeanC       float64
	UsualDays        int
	UsualMeanC       float64
	Outcomes         [NumMeasures]ScheduledOutcome
	Criterion        string
	Unusable         string
}

// LeastBlocks is how many fortnights with logged days a verdict needs.
const LeastBlocks = 2

// Trial gives the verdict of a trial by drawing its schedule again. Days belong
// to the group the schedule put them into, whatever was run.
func Trial(in Input, s *schedule.Schedule, zones, untouched []int) *Scheduled {
	r := &Scheduled{Schedule: s, From: s.Days[0].Date, To: s.Days[len(s.Days)-1].Date}
	open := func(list []int) (out []int) {
		for _, z := range list {
			if !in.Running.Zones[z].NoOpening {
				out = append(out, z)
			}
		}
		return out
	}
	r.Zones, r.Untouched = open(zones), open(untouched)
	in.Before, in.After = Span{From: r.From}, Span{To: r.To}
	days, words := Daily(in, r.Zones, r.Untouched)
	r.Criterion = words
	known := map[site.Date]*DayRatios{}
	for i := range days {
		known[days[i].Date] = &days[i]
	}
	lastLogged := in.Record.Hours[len(in.Record.Hours)-1].Date
	blocks := map[int]bool{}
	for _, d := range s.Days {
		r.Kept.count(d, lastLogged)
		k := known[d.Date]
		if k == nil {
			continue
		}
		r.Kept.Logged++
		blocks[d.Block] = true
		if d.Trial {
			r.TrialDays++
			r.TrialMeanC += k.OutdoorTempC
		} else {
			r.UsualDays++
			r.UsualMeanC += k.OutdoorTempC
		}
	}
	r.TrialMeanC /= float64(r.TrialDays)
	r.UsualMeanC /= float64(r.UsualDays)
	switch {
	case len(r.Zones) == 0:
		r.Unusable = "no zone with openings is left to compare"
	case len(blocks) < LeastBlocks:
		r.Unusable = fmt.Sprintf("the logs hold %d of the schedule's days, of %d fortnights; at least %d fortnights are needed", r.Kept.Logged, len(blocks), LeastBlocks)
	}
	for m := range NumMeasures {
		o := &r.Outcomes[m]
		*o = ScheduledOutcome{Measure: m, Unusable: r.Unusable}
		if r.Unusable == "" {
			t := randomisation.New(Blocks(s, known, m), len(r.Untouched) > 0)
			o.Answer = t.Infer(randomisation.Drawings, in.Seed)
			o.decide()
		}
	}
	return r
}

func (k *Kept) count(d schedule.Day, lastLogged site.Date) {
	k.Days++
	switch {
	case lastLogged.Before(d.Date):
		k.ToCome++
	case d.Ran == schedule.Stopped:
		k.Stopped++
	case d.Ran == schedule.NotNoted:
		k.NotNoted++
	case (d.Ran == schedule.RanTrial) == d.Trial:
		k.AsDrawn++
	default:
		k.Otherwise++
	}
}

// Blocks sets the days of one measure into the blocks of a schedule, with all
// patterns that may have been drawn.
func Blocks(s *schedule.Schedule, known map[site.Date]*DayRatios, m Measure) []randomisation.Block {
	weekdays := s.Weekdays()
	patterns := s.Design.Patterns(weekdays)
	var out []randomisation.Block
	for at := 0; at < len(s.Days); {
		to := at
		for to < len(s.Days) && s.Days[to].Block == s.Days[at].Block {
			to++
		}
		b := randomisation.Block{Patterns: make([][]bool, len(patterns)), Drawn: -1}
		for _, d := range s.Days[at:to] {
			var day randomisation.Day
			if k := known[d.Date]; k != nil {
				day = randomisation.Day{Main: k.Zones[m], Untouched: k.NotTouched[m]}
			}
			b.Days = append(b.Days, day)
		}
		for p, pattern := range patterns {
			agrees := true
			for _, d := range s.Days[at:to] {
				on := schedule.OnTrial(pattern, d.Week, schedule.Weekday(d.Date))
				b.Patterns[p] = append(b.Patterns[p], on)
				agrees = agrees && on == d.Trial
			}
			if agrees {
				b.Drawn = p
			}
		}
		out = append(out, b)
		at = to
	}
	return out
}

func (o *ScheduledOutcome) decide() {
	a := o.Answer
	switch {
	case math.IsNaN(a.P):
		o.Unusable = "too few hours are known"
	case a.P > 0.05:
		o.Verdict = NotShown
	case a.Difference*o.Measure.better() > 0:
		o.Verdict = Better
	default:
		o.Verdict = Worse
	}
}
