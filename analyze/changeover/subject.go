package changeover

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/lost"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// subject is a unit or zone with what is needed to read it. state is 1 open, 0
// closed, -1 unknown, per step; left marks steps that the clock explains or
// that are not occupied.
type subject struct {
	id      string
	index   int
	zones   []int // whose temperatures may hold it
	state   []int8
	use     []bool // occupied, in the period, not the clock's
	reasons []reason
	clock   *lost.ClockPattern
	seed    string
}

func (in *Input) unitSubject(u int, cal *calendar.Calendar) *subject {
	s := &subject{id: in.Site.Plant[u].ID, index: u, seed: "unit/" + in.Site.Plant[u].ID}
	on := in.Running.UnitState(in.Site, u)
	if on == nil {
		return nil
	}
	for _, id := range in.Site.Plant[u].Serves {
		if z := in.Site.ZoneIndex(id); z >= 0 {
			s.zones = append(s.zones, z)
		}
	}
	s.state = make([]int8, in.Grid.N)
	for i := range s.state {
		switch on[i] {
		case running.PlantUnknown:
			s.state[i] = -1
		case uint8(site.PlantOff):
			s.state[i] = 1
		}
	}
	s.use = in.usable(s.zones)
	in.leaveClock(s, cal)
	s.reasons = in.reasons(s.zones)
	return s
}

func (in *Input) zoneSubject(z int, cal *calendar.Calendar) *subject {
	me := &in.Running.Zones[z]
	if me.NoOpening || !me.HasContacts {
		return nil
	}
	s := &subject{id: in.Site.Zones[z].ID, index: z, zones: []int{z}, seed: "zone/" + in.Site.Zones[z].ID}
	s.state = make([]int8, in.Grid.N)
	for i := range s.state {
		switch me.State[i] {
		case running.Unknown:
			s.state[i] = -1
		case running.Open:
			s.state[i] = 1
		}
	}
	s.use = in.usable(s.zones)
	in.leaveClock(s, cal)
	s.reasons = in.reasons(s.zones)
	return s
}

// usable marks the occupied steps of the period (of any of the zones).
func (in *Input) usable(zones []int) []bool {
	use := make([]bool, in.Grid.N)
	for _, z := range zones {
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			use[i] = use[i] || in.Running.Zones[z].Occupied[i] == running.Occupied
		}
	}
	return use
}

// reasons are outdoors and the zones' own temperatures, each from above and
// from below.
func (in *Input) reasons(zones []int) []reason {
	var out []reason
	add := func(series []float32, zone int) {
		if series != nil {
			out = append(out, reason{series, true, zone, false}, reason{series, false, zone, false})
		}
	}
	add(in.Outdoor.TempC, -1)
	for _, z := range zones {
		add(smoothed(in.Indoor[z].OperativeC, in.Grid.StepS), z)
		if there := in.whilePresent(z); there != nil && len(zones) > 1 {
			out = append(out, reason{there, true, z, true})
		}
	}
	return out
}

// whilePresent is a zone's temperature while somebody was seen in it, NaN else;
// nil where presence is not logged. Some thermostats sleep in empty rooms.
func (in *Input) whilePresent(z int) []float32 {
	seen := in.Indoor[z].Presence
	if seen == nil || in.Indoor[z].OperativeC == nil {
		return nil
	}
	out := append([]float32(nil), in.Indoor[z].OperativeC...)
	for i, v := range seen {
		if !(v > 0) {
			out[i] = float32(math.NaN())
		}
	}
	return out
}

// leaveClock leaves out what a start by the clock explains: from the clock time
// until such runs last to on nine of ten days, on days on which it was closed
// then.
func (in *Input) leaveClock(s *subject, cal *calendar.Calendar) {
	if in.Lost == nil {
		return
	}
	for _, z := range s.zones {
		if z >= len(in.Lost.Patterns) {
			continue
		}
		p := &in.Lost.Patterns[z].Clock
		if !p.Found {
			continue
		}
		s.clock = p
		if p.RoundTheClock {
			clear(s.use)
			return
		}
		first := 1440
		for _, m := range p.Minutes {
			first = min(first, m)
		}
		for i := range s.use {
			m := int(cal.MinuteOfDay[i])
			if p.HoldMinute >= 0 && m >= first-5 && m < p.HoldMinute+15 {
				s.use[i] = false
			}
		}
		return
	}
}

// Of the steps at which nothing changed some are kept, with a weight that makes
// up for it: every fourth within an hour of a change, else every sixteenth. There
// are many and they say little.
const (
	thinNear, thinFar = 4, 16
	nearMin           = 60
)

// rows lists the moments of one direction. A unit that has only just started
// may not stop yet: armed is the number of steps a closed spell lasts at
// least. Open steps that end nothing are joined in rows of up to join steps.
func (s *subject) rows(opening bool, armed, join int, cal *calendar.Calendar, stepS int64) *moments {
	if opening {
		return s.openings(armed, cal, stepS)
	}
	return s.closings(join, cal)
}

func (s *subject) closings(join int, cal *calendar.Calendar) *moments {
	m := newMoments(false, len(s.reasons))
	unknown := float32(math.NaN())
	spell := make([]float32, len(s.reasons)) // furthest readings so far
	from := make([]float32, len(s.reasons))  // and before the row
	steps := 0
	push := func(i int, closed bool) {
		if steps == 0 {
			return
		}
		m.step, m.day = append(m.step, int32(i)), append(m.day, cal.DayOf[i])
		m.closed, m.steps, m.weight = append(m.closed, closed), append(m.steps, float64(steps)), append(m.weight, 1)
		for k := range s.reasons {
			m.x[k], m.from[k] = append(m.x[k], spell[k]), append(m.from[k], from[k])
		}
		copy(from, spell)
		steps = 0
	}
	inside := false
	for i := 1; i < len(s.state); i++ {
		if s.state[i-1] != 1 || s.state[i] < 0 || !s.use[i] || !s.use[i-1] {
			if inside {
				push(i-1, false)
			}
			inside = false
			continue
		}
		if !inside {
			for k := range spell {
				spell[k], from[k] = s.reasons[k].tempC[i-1], unknown
			}
			inside = true
		}
		closes := s.state[i] == 0
		if closes || cal.DayOf[i] != cal.DayOf[i-1] {
			push(i-1, false)
		}
		for k := range spell {
			r := &s.reasons[k]
			spell[k] = r.further(spell[k], r.tempC[i])
		}
		steps++
		if closes || steps >= join {
			push(i, closes)
		}
		inside = !closes
	}
	return m
}

func (s *subject) openings(armed int, cal *calendar.Calendar, stepS int64) *moments {
	m := newMoments(true, len(s.reasons))
	near := int(nearMin * 60 / stepS)
	next := make([]int, len(s.state)+1) // steps to the next change
	for i := len(s.state) - 1; i >= 0; i-- {
		next[i] = next[i+1] + 1
		if i > 0 && s.state[i] != s.state[i-1] {
			next[i] = 0
		}
	}
	run := 0 // steps of the present spell before i
	for i := 1; i < len(s.state); i++ {
		if s.state[i-1] == 0 {
			run++
		} else {
			run = 0
		}
		if run == 0 || run < armed || s.state[i] < 0 || !s.use[i] || !s.use[i-1] {
			continue
		}
		if math.IsNaN(float64(s.reasons[0].tempC[i])) {
			continue
		}
		closed := s.state[i] == 0
		w := 1.0
		if closed { // nothing changed
			every := thinFar
			if run < near || next[i] < near {
				every = thinNear
			}
			if i%every != 0 {
				continue
			}
			w = float64(every)
		}
		m.step, m.day = append(m.step, int32(i)), append(m.day, cal.DayOf[i])
		m.closed, m.steps, m.weight = append(m.closed, closed), append(m.steps, 1), append(m.weight, w)
		for k := range s.reasons {
			m.x[k] = append(m.x[k], s.reasons[k].reading(i))
		}
	}
	return m
}

// spells lists the complete spells of a state in occupied time, in minutes,
// and how many were cut short.
func (s *subject) spells(state int8, stepS int64) (minutes []float64, cut int) {
	for i := 1; i < len(s.state); {
		if s.state[i] != state || !s.use[i] {
			i++
			continue
		}
		from := i
		for i < len(s.state) && s.state[i] == state && s.use[i] {
			i++
		}
		whole := s.use[from-1] && s.state[from-1] >= 0 && i < len(s.state) && s.use[i] && s.state[i] >= 0
		if !whole {
			cut++
			continue
		}
		minutes = append(minutes, float64(int64(i-from)*stepS)/60)
	}
	return minutes, cut
}

// smoothed is the mean of a step and those before it within smoothMin, of those
// known: a thermostat's own mass does the same, and it quietens a sensor's
// noise.
func smoothed(series []float32, stepS int64) []float32 {
	back := int(smoothMin*60/stepS) - 1
	if series == nil || back < 1 {
		return series
	}
	out := make([]float32, len(series))
	for i := range series {
		sum, n := 0.0, 0
		for k := max(0, i-back); k <= i; k++ {
			if v := float64(series[k]); !math.IsNaN(v) {
				sum, n = sum+v, n+1
			}
		}
		out[i] = float32(sum / float64(n))
	}
	return out
}

const smoothMin = 10
