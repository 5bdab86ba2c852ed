package trial

import (
	"fmt"
	"strings"

	"sashlog/analyze/compare"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
)

// Next plans the next trial.
func Next(in Input) *Plan {
	p := &Plan{Chosen: -1, Simulations: simulations}
	p.Steps = steps(&in)
	if len(p.Steps) == 0 {
		p.Unusable = fmt.Sprintf("no limit shows in the logs beyond which at least %d zone-hours of suitable weather were missed within %d K", LeastGainH, StepK)
		return p
	}
	for i := range p.Steps {
		if p.Chosen < 0 && (in.Step == "" || strings.EqualFold(in.Step, p.Steps[i].ID)) {
			p.Chosen = i
		}
	}
	if p.Chosen < 0 {
		var ids []string
		for i := range p.Steps {
			ids = append(ids, p.Steps[i].ID)
		}
		p.Unusable = fmt.Sprintf("there is no step %q; those with something to gain are %s", in.Step, strings.Join(ids, ", "))
		return p
	}
	p.lengthen(&in)
	return p
}

// lengthen finds when to begin and how long to go on.
func (p *Plan) lengthen(in *Input) {
	st := p.Step()
	s, mondays, gains := st.season(in)
	if s.weekdays == 0 || len(mondays) < 2*LeastFortnights {
		p.Unusable = fmt.Sprintf("the logs hold %d whole weeks; at least %d are needed to tell how long a trial takes", len(mondays), 2*LeastFortnights)
		return
	}
	last := in.Record.Hours[len(in.Record.Hours)-1].Date
	// first is the week the trial begins in, as the logs saw it.
	first, begin := -1, site.Date{}
	if !in.From.IsZero() {
		begin = schedule.Monday(in.From)
		if first = sameSeason(mondays, begin); first < 0 {
			p.Unusable = fmt.Sprintf("the logs have not seen the season that begins on %s; let the trial begin in one they have seen", begin)
			return
		}
	}
	chosen := -1
	var firsts []int
	for n := LeastFortnights; n <= MostFortnights && 2*n <= len(mondays); n++ {
		at := first
		if first < 0 {
			at = richest(gains, 2*n)
		} else if at+2*n > len(mondays) {
			break
		}
		p.Powers = append(p.Powers, s.power(mondays[at], 2*n, n, simulations, len(st.Untouched) > 0, in.Seed))
		firsts = append(firsts, at)
		if chosen < 0 && p.Powers[len(p.Powers)-1].Finds >= LeastPower {
			chosen = len(p.Powers) - 1
		}
	}
	if len(p.Powers) == 0 {
		p.Unusable = "the logs end too soon after that season begins; let the trial begin earlier in it"
		return
	}
	if p.TooShort = chosen < 0; p.TooShort {
		for i := range p.Powers {
			if chosen < 0 || p.Powers[i].Finds > p.Powers[chosen].Finds {
				chosen = i
			}
		}
	}
	p.Fortnights = p.Powers[chosen].Fortnights
	p.SeasonFrom = mondays[firsts[chosen]]
	p.SeasonTo = schedule.AddDays(p.SeasonFrom, 14*p.Fortnights-1)
	if begin.IsZero() {
		for begin = p.SeasonFrom; !last.Before(begin); {
			begin = schedule.AddDays(begin, 364)
		}
	}
	p.Schedule = schedule.Schedule{Design: in.Design, Seed: in.Seed, Setting: st.ID, Zones: ids(in.Site, st.Zones), Untouched: ids(in.Site, st.Untouched),
		Days: schedule.Draw(in.Design, in.Seed, begin, p.Fortnights, s.weekdays, in.Site.Occupancy.Holidays)}
	p.Watches = watches(in, st, p.SeasonFrom, p.SeasonTo)
}

func ids(s *site.Site, zones []int) []string {
	var out []string
	for _, z := range zones {
		out = append(out, s.Zones[z].ID)
	}
	return out
}

// season gathers the logged days, the Mondays of whole logged weeks, and the
// gain of each week.
func (st *Step) season(in *Input) (s *season, mondays []site.Date, gains []float64) {
	rec := in.Record
	from, to := rec.Hours[0].Date, rec.Hours[len(rec.Hours)-1].Date
	days, _ := compare.Daily(compare.Input{Site: in.Site, Criteria: in.Criteria, Grid: in.Grid, Calendar: in.Calendar, Outdoor: in.Outdoor, Indoor: in.Indoor,
		Running: in.Running, Exceedance: in.Exceedance, Record: rec, Before: compare.Span{From: from}, After: compare.Span{To: to}}, st.Zones, st.Untouched)
	gainOf := map[site.Date]float64{}
	for d, g := range st.gains(in) {
		gainOf[in.Calendar.Days[d].Date] = g
	}
	s = &season{days: map[site.Date]logged{}, design: in.Design}
	var perWeekday [7]int
	for _, d := range days {
		l := logged{gain: gainOf[d.Date]}
		l.day.Main, l.day.Untouched = d.Zones[compare.AchievedShare], d.NotTouched[compare.AchievedShare]
		s.days[d.Date] = l
		perWeekday[schedule.Weekday(d.Date)]++
	}
	for m := schedule.Monday(from); !to.Before(schedule.AddDays(m, 6)); m = schedule.AddDays(m, 7) {
		mondays = append(mondays, m)
		week := 0.0
		for k := range 7 {
			week += s.days[schedule.AddDays(m, k)].gain
		}
		gains = append(gains, week)
	}
	for w, n := range perWeekday {
		// A weekday on which the building was used only now and then is no day
		// of a trial.
		if 4*n >= len(mondays) && n > 0 {
			s.weekdays |= 1 << w
		}
	}
	return s, mondays, gains
}

// richest is the start of the run of so many weeks that gains most.
func richest(gains []float64, weeks int) int {
	best, at := -1.0, 0
	for i := 0; i+weeks <= len(gains); i++ {
		sum := 0.0
		for _, g := range gains[i : i+weeks] {
			sum += g
		}
		if sum > best+1e-9 {
			best, at = sum, i
		}
	}
	return at
}

// sameSeason is the logged week of the same season as a Monday: whole years of
// 52 weeks before it, or -1.
func sameSeason(mondays []site.Date, begin site.Date) int {
	for back := range 6 {
		want := schedule.AddDays(begin, -364*back)
		for i, m := range mondays {
			if m == want {
				return i
			}
		}
	}
	return -1
}
