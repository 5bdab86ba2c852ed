package lost

import (
	"fmt"
	"math"
	"sort"

	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// ClockPattern is how far the starts of a zone's plant follow the clock.
type ClockPattern struct {
	Found bool
	// Minutes are the local minutes of the day, at most three, around which
	// starts gather.
	Minutes []int
	// Share of the working days with known plant on which it started within
	// 5 min of one of them; ShareSuited the same of the days when the weather
	// suited at that time (or, where those are fewer than five, in the four
	// hours after).
	Share, ShareSuited float64
	Days, SuitedDays   int
	// HoldMinute is the minute of the day such runs lasted to on nine of ten
	// days at least, -1 when unknown.
	HoldMinute int
	// Outdoor temperatures at those starts, NaN when not logged.
	OutdoorLowC, OutdoorHighC float64
	// RoundTheClock: the plant ran for at least 95 % of all known time.
	RoundTheClock bool
}

const (
	clockWithinMin  = 5
	clockOffMin     = 60 // off so long before: no cycling
	clockShare      = 0.5
	clockDaysMin    = 5
	clockPartMin    = 0.15 // least share of days of a second or third start time
	roundClockShare = 0.95
)

// workday is one working day's first moments of plant.
type workday struct {
	day    int // index into the calendar
	starts []run
}

// clockPattern looks for start times that recur whatever the weather.
func (e *evidence) clockPattern(z int) ClockPattern {
	p := ClockPattern{HoldMinute: -1, OutdoorLowC: math.NaN(), OutdoorHighC: math.NaN()}
	if e.roundTheClock(z) {
		p.Found, p.RoundTheClock = true, true
		return p
	}
	days := e.workdays(z)
	p.Days = len(days)
	used := map[int]bool{}
	for len(p.Minutes) < 3 {
		minute, hit := e.densest(days, used)
		if len(hit) < clockDaysMin || float64(len(hit)) < clockPartMin*float64(len(days)) {
			break
		}
		p.Minutes = append(p.Minutes, minute)
		for _, d := range hit {
			used[d] = true
		}
	}
	if len(p.Minutes) == 0 {
		return p
	}
	p.Share = float64(len(used)) / float64(len(days))
	e.compareSuited(z, days, &p)
	if p.SuitedDays >= clockDaysMin {
		p.Found = p.ShareSuited >= clockShare
	} else {
		p.Found = p.Share >= 0.8 // too few suitable days to compare: only a plain pattern counts
	}
	e.holdAndRange(z, days, &p)
	return p
}

func (e *evidence) roundTheClock(z int) bool {
	on, known := 0, 0
	for i := e.in.Grid.PeriodFrom; i < e.in.Grid.PeriodTo; i++ {
		switch e.in.Running.Zones[z].Plant[i] {
		case running.PlantUnknown:
		case uint8(site.PlantOff):
			known++
		default:
			on++
			known++
		}
	}
	day := int(24 / e.in.Grid.StepH())
	return known >= 7*day && float64(on) >= roundClockShare*float64(known)
}

// workdays lists the zone's days with occupied time and mostly known plant,
// with their plant starts after at least an hour off.
func (e *evidence) workdays(z int) []workday {
	g, me := e.in.Grid, &e.in.Running.Zones[z]
	var out []workday
	r := 0
	runs := e.zones[z].runs
	for d, day := range e.cal.Days {
		if day.FromStep < g.PeriodFrom || day.ToStep > g.PeriodTo {
			continue
		}
		occupied, known := false, 0
		for i := day.FromStep; i < day.ToStep; i++ {
			occupied = occupied || me.Occupied[i] == running.Occupied
			if me.Plant[i] != running.PlantUnknown {
				known++
			}
		}
		if !occupied || 2*known < day.ToStep-day.FromStep {
			continue
		}
		w := workday{day: d}
		for ; r < len(runs) && runs[r].from < day.ToStep; r++ {
			if runs[r].from >= day.FromStep && runs[r].known && runs[r].offSteps >= e.steps(clockOffMin) {
				w.starts = append(w.starts, runs[r])
			}
		}
		out = append(out, w)
	}
	return out
}

// densest finds the minute of the day around which most days have a start;
// days already used do not count. Ties go to the earlier minute.
func (e *evidence) densest(days []workday, used map[int]bool) (minute int, hit []int) {
	var byMinute [1440][]int
	for _, w := range days {
		if used[w.day] {
			continue
		}
		for _, s := range w.starts {
			m := e.cal.MinuteOfDay[s.from]
			byMinute[m] = append(byMinute[m], w.day)
		}
	}
	best := 0
	for m := range byMinute {
		if n := len(daysNear(&byMinute, m)); n > best {
			best, minute = n, m
		}
	}
	if best == 0 {
		return 0, nil
	}
	// The middle of the starts found, so that the window sits on them.
	var at []float64
	for k := max(0, minute-clockWithinMin); k <= min(1439, minute+clockWithinMin); k++ {
		for range byMinute[k] {
			at = append(at, float64(k))
		}
	}
	minute = int(math.Round(quantile(at, 0.5)))
	return minute, daysNear(&byMinute, minute)
}

func daysNear(byMinute *[1440][]int, m int) []int {
	seen := map[int]bool{}
	var out []int
	for k := max(0, m-clockWithinMin); k <= min(1439, m+clockWithinMin); k++ {
		for _, d := range byMinute[k] {
			if !seen[d] {
				seen[d] = true
				out = append(out, d)
			}
		}
	}
	return out
}

// compareSuited counts the starts on days with suitable weather: were the
// plant started by the weather, it would have stayed off on those.
func (e *evidence) compareSuited(z int, days []workday, p *ClockPattern) {
	suit := e.in.Potential.Zones[z].Raw
	for _, ahead := range []int{e.steps(30), e.steps(240)} {
		p.SuitedDays = 0
		hits := 0
		for _, w := range days {
			from := e.stepOf(w.day, p.Minutes[0])
			if !suitedWithin(suit, from, from+ahead) {
				continue
			}
			p.SuitedDays++
			if e.clockedStart(w.starts, p) != nil {
				hits++
			}
		}
		if p.SuitedDays > 0 {
			p.ShareSuited = float64(hits) / float64(p.SuitedDays)
		}
		if p.SuitedDays >= clockDaysMin {
			return
		}
	}
}

func suitedWithin(suit []potential.Suit, from, to int) bool {
	for i := max(0, from); i < min(to, len(suit)); i++ {
		if suit[i] == potential.Suited {
			return true
		}
	}
	return false
}

// stepOf is the step of a day that begins at or after a local minute.
func (e *evidence) stepOf(day, minute int) int {
	d := e.cal.Days[day]
	return d.FromStep + sort.Search(d.ToStep-d.FromStep, func(k int) bool { return int(e.cal.MinuteOfDay[d.FromStep+k]) >= minute })
}

// clockedStart returns the day's start near one of the pattern's minutes.
func (e *evidence) clockedStart(starts []run, p *ClockPattern) *run {
	for k := range starts {
		if e.near(&starts[k], p) {
			return &starts[k]
		}
	}
	return nil
}

func (e *evidence) near(r *run, p *ClockPattern) bool {
	if !r.known || r.offSteps < e.steps(clockOffMin) {
		return false
	}
	for _, m := range p.Minutes {
		if d := int(e.cal.MinuteOfDay[r.from]) - m; d >= -clockWithinMin && d <= clockWithinMin {
			return true
		}
	}
	return false
}

// holdAndRange finds how long clocked runs last at least, and how warm it was
// outdoors when they began.
func (e *evidence) holdAndRange(z int, days []workday, p *ClockPattern) {
	var ends, outdoorC []float64
	for _, w := range days {
		r := e.clockedStart(w.starts, p)
		if r == nil {
			continue
		}
		if r.to-1 < e.in.Grid.N && int(e.cal.DayOf[r.to-1]) == w.day {
			ends = append(ends, float64(e.cal.MinuteOfDay[r.to-1])+float64(e.in.Grid.StepS)/60)
		}
		if t := at(e.in.Outdoor.TempC, r.from); !math.IsNaN(t) {
			outdoorC = append(outdoorC, t)
		}
	}
	if len(ends) >= clockDaysMin {
		p.HoldMinute = int(math.Ceil(quantile(ends, 0.1)))
	}
	if len(outdoorC) > 0 {
		p.OutdoorLowC, p.OutdoorHighC = quantile(outdoorC, 0), quantile(outdoorC, 1)
	}
}

// clocked reports whether a run of the zone's plant was started by the clock.
func (e *evidence) clocked(z int, r *run) bool {
	p := &e.zones[z].Clock
	return p.Found && (p.RoundTheClock || e.near(r, p))
}

// beforeHold reports whether a step lies before the time clocked runs last to
// at least, with ten minutes of grace for the stop itself.
func (e *evidence) beforeHold(z, i int) bool {
	p := &e.zones[z].Clock
	return p.RoundTheClock || p.HoldMinute < 0 || int(e.cal.MinuteOfDay[i]) < p.HoldMinute+10
}

func clockTest() test {
	return test{
		Test: Test{ClockStart, "the plant had run without a stop since a start within 5 min of a clock time at which it also starts on at least half of the working days " +
			"on which the weather suits then; it counts until the time such runs last to on nine of ten days; plant that runs round the clock counts throughout", ourAssumption},
		explain: clockExplains,
	}
}

func clockExplains(e *evidence, s *spell) verdict {
	p := &e.zones[s.zone].Clock
	if !p.Found {
		return nothing
	}
	runs, began := e.zones[s.zone].runs, -1
	by := explains(s, func(i int) bool {
		r := runAt(runs, i)
		if r == nil || !e.clocked(s.zone, r) || !e.beforeHold(s.zone, i) {
			return false
		}
		began = r.from
		return true
	})
	v := verdict{by: by, led: -1}
	switch {
	case by == nil:
	case p.RoundTheClock:
		v.why = "the plant ran round the clock, whatever the weather"
	default:
		days := fmt.Sprintf("on %s of %d working days", percent(p.Share), p.Days)
		if p.SuitedDays >= clockDaysMin {
			days = fmt.Sprintf("on %s of working days and on %s of the %d with suitable weather", percent(p.Share), percent(p.ShareSuited), p.SuitedDays)
		}
		m := p.Minutes[0]
		for _, k := range p.Minutes {
			if d := int(e.cal.MinuteOfDay[began]) - k; d >= -clockWithinMin && d <= clockWithinMin {
				m = k
			}
		}
		v.why = fmt.Sprintf("the plant started at %s, as it does within 5 min of %s %s", clock(int(e.cal.MinuteOfDay[began])), clock(m), days)
		if t := at(e.in.Outdoor.TempC, began); !math.IsNaN(t) {
			v.why += fmt.Sprintf(" (%.1f °C outdoors at that start)", t)
		}
	}
	return v
}
