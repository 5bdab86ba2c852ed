package leaders

import (
	"math"
	"sort"

	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the search looks at.
type Input struct {
	Site       *site.Site
	Grid       *grid.Grid
	Calendar   *calendar.Calendar
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Exceedance *exceedance.Result
	Record     *hours.Record
	Lost       *lost.Result
	Changeover *changeover.Result
	Seed       uint64
}

const (
	backMin    = 30  // a limit was passed so long before the start at most
	touchK     = 0.1 // a sensor's resolution
	bandK      = 0.8 // a room that called stops calling so far below, where no limit for opening shows; common practice 0.5 to 1 K
	leaderMin  = 3   // starts
	warmestByK = 2.0
)

// unit is one plant unit with its rooms' limits.
type unit struct {
	index  int
	zones  []int
	state  []uint8
	callC  map[int]float64 // by zone; absent without a limit
	calmC  map[int]float64 // stops calling below
	lowC   float64         // outdoors, NaN without
	highC  float64
	starts []Start
	// calling[zone][step]
	calling map[int][]bool
}

// Find finds the leading rooms.
func Find(in Input) *Result {
	r := &Result{}
	for z := range in.Record.Class {
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			if in.Record.Class[z][i].Missed() {
				r.MissedH += in.Grid.StepH()
			}
		}
	}
	perDay := [][]float64{} // lost hours of each leader by day
	for k := range in.Changeover.Units {
		u := in.unitOf(&in.Changeover.Units[k])
		if len(u.zones) < 2 {
			continue
		}
		in.findStarts(u)
		sum := Unit{ID: in.Site.Plant[u.index].ID, Starts: len(u.starts)}
		byZone := map[int][]int{}
		for n, s := range u.starts {
			switch s.Led {
			case Clock:
				sum.ByClock++
			case Outdoors:
				sum.ByOutdoors++
			case Unknown:
				sum.Unexplained++
			default:
				sum.Led++
				byZone[s.Led] = append(byZone[s.Led], n)
			}
		}
		r.Units = append(r.Units, sum)
		r.Starts = append(r.Starts, u.starts...)
		study := in.newStudy(u)
		for _, z := range u.zones {
			if len(byZone[z]) < leaderMin {
				continue
			}
			l, days := in.leader(u, z, byZone[z], study)
			r.Leaders = append(r.Leaders, l)
			perDay = append(perDay, days)
		}
	}
	order := make([]int, len(r.Leaders))
	for k := range order {
		order[k] = k
	}
	sort.SliceStable(order, func(a, b int) bool { return r.Leaders[order[a]].LostH > r.Leaders[order[b]].LostH })
	var sorted []Leader
	var sortedDays [][]float64
	for _, k := range order {
		sorted, sortedDays = append(sorted, r.Leaders[k]), append(sortedDays, perDay[k])
	}
	r.Leaders = sorted
	r.Explained = in.explained(sortedDays)
	return r
}

func (in *Input) unitOf(s *changeover.Subject) *unit {
	u := &unit{index: s.Index, state: in.Running.UnitState(in.Site, s.Index), callC: map[int]float64{}, calmC: map[int]float64{},
		calling: map[int][]bool{}, lowC: math.NaN(), highC: math.NaN()}
	for _, id := range in.Site.Plant[s.Index].Serves {
		if z := in.Site.ZoneIndex(id); z >= 0 {
			u.zones = append(u.zones, z)
		}
	}
	for _, l := range s.Limits() {
		if l.Undetermined != "" {
			continue
		}
		switch {
		case l.Zone >= 0 && l.Above && !l.Opening:
			u.callC[l.Zone] = l.LevelC
		case l.Zone >= 0 && l.Above:
			u.calmC[l.Zone] = l.LevelC
		case l.Zone < 0 && l.Above: // of the two directions the one that is passed first
			u.highC = least(u.highC, l.LevelC)
		case l.Zone < 0:
			u.lowC = -least(-u.lowC, -l.LevelC)
		}
	}
	// A room whose call shows only as it passes a level (see few-room changeover)
	// calls as well.
	if s.Index < len(in.Lost.Units) {
		for _, c := range in.Lost.Units[s.Index].Calls {
			if _, known := u.callC[c.Zone]; !known && !math.IsNaN(c.AboveC) {
				u.callC[c.Zone] = c.AboveC
			}
		}
	}
	for z, c := range u.callC {
		if calm, ok := u.calmC[z]; !ok || calm > c-0.2 {
			u.calmC[z] = c - bandK
		}
		u.calling[z] = latch(in.Indoor[z].OperativeC, c, u.calmC[z])
	}
	return u
}

// least of those known.
func least(a, b float64) float64 {
	if math.IsNaN(a) || b < a {
		return b
	}
	return a
}

// latch is on from one temperature up, until below the other.
func latch(tempC []float32, onC, offC float64) []bool {
	out := make([]bool, len(tempC))
	on := false
	for i, v := range tempC {
		t := float64(v)
		switch {
		case math.IsNaN(t) || t < offC:
			on = false
		case t >= onC-touchK:
			on = true
		}
		out[i] = on
	}
	return out
}

func (u *unit) cools(i int) bool {
	s := u.state[i]
	return s != running.PlantUnknown && s != uint8(site.PlantOff) && s != uint8(site.PlantHeat)
}

func at(series []float32, i int) float64 {
	if i < 0 || i >= len(series) {
		return math.NaN()
	}
	return float64(series[i])
}

// beyond reports whether outdoors is beyond one of the unit's limits.
func (in *Input) beyond(u *unit, i int) bool {
	t := at(in.Outdoor.TempC, i)
	return t >= u.highC-touchK || t <= u.lowC+touchK
}

// clocked reports whether the clock explains a run from a step at another.
func (in *Input) clocked(u *unit, start, i int) bool {
	for _, z := range u.zones {
		p := &in.Lost.Patterns[z].Clock
		if !p.Found {
			continue
		}
		if p.RoundTheClock {
			return true
		}
		m := int(in.Calendar.MinuteOfDay[start])
		for _, k := range p.Minutes {
			if m >= k-5 && m <= k+5 && (p.HoldMinute < 0 || int(in.Calendar.MinuteOfDay[i]) < p.HoldMinute+10) {
				return true
			}
		}
	}
	return false
}

// findStarts lists the unit's starts in occupied time with what led them.
func (in *Input) findStarts(u *unit) {
	g := in.Grid
	back := int(backMin * 60 / g.StepS)
	for i := max(g.PeriodFrom, 1); i < g.PeriodTo; i++ {
		if u.state[i-1] != uint8(site.PlantOff) || u.state[i] == running.PlantUnknown || !u.cools(i) {
			continue
		}
		occupied := false
		for _, z := range u.zones {
			occupied = occupied || in.Running.Zones[z].Occupied[i] == running.Occupied
		}
		if !occupied {
			continue
		}
		s := Start{Unit: u.index, FromStep: i, ToStep: i, Led: Unknown}
		for s.ToStep < g.PeriodTo && u.state[s.ToStep] != uint8(site.PlantOff) && u.state[s.ToStep] != running.PlantUnknown {
			s.ToStep++
		}
		most := math.Inf(-1)
		for _, z := range u.zones {
			c, ok := u.callC[z]
			if !ok {
				s.Followed = append(s.Followed, z)
				continue
			}
			hi := math.Inf(-1)
			for k := max(0, i-3); k <= i; k++ {
				if t := at(in.Indoor[z].OperativeC, k); t > hi {
					hi = t
				}
			}
			before := at(in.Indoor[z].OperativeC, i-back)
			over := hi - c
			if over < -touchK {
				s.Followed = append(s.Followed, z)
				continue
			}
			// A room beyond its limit all along did not set it off just now.
			if before > c+3*touchK {
				over -= before - c
			}
			if over > most {
				s.Led, most = z, over
			}
		}
		switch {
		case in.clocked(u, i, i):
			s.Led = Clock
		case s.Led == Unknown && in.beyond(u, i):
			s.Led = Outdoors
		}
		if s.Led >= 0 {
			var rest []int
			for _, z := range u.zones {
				if z != s.Led {
					rest = append(rest, z)
				}
			}
			s.Followed = rest
		}
		u.starts = append(u.starts, s)
	}
}
