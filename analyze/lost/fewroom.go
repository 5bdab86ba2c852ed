package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// UnitPattern is what the whole period shows of one plant unit.
type UnitPattern struct {
	ID    string
	Calls []Call
}

// Call is a zone that a unit seems to follow: the unit starts when the zone
// passes AboveC.
type Call struct {
	Zone   int
	AboveC float64 // NaN when the zone does not seem to call
	// Passed counts the times it passed that temperature while the unit was
	// off in occupied time, Followed those the unit started upon.
	Passed, Followed int
	// MarginK is how far below the zone's comfort limit that lies (median at
	// those times, or over occupied time for a logged set-point), NaN unknown.
	MarginK float64
	// Logged: AboveC is the mean of the zone's logged cooling set-point.
	Logged bool
}

// callsOf settles which of a unit's zones call for it, and when. Rooms beside
// each other warm up together, so the zone the unit follows most often is taken
// first, and starts that it explains count for no other.
func (e *evidence) callsOf(u int) {
	in, unit := e.in, &e.units[u]
	free := make([]bool, in.Grid.N) // starts that no call explains yet
	for k := range unit.runs {
		r := &unit.runs[k]
		free[r.from] = r.known && unit.on[r.from] != uint8(site.PlantHeat)
	}
	started := append([]bool(nil), free...)
	all := make([][]passing, len(unit.zones))
	open := make([]bool, len(unit.zones))
	for k, z := range unit.zones {
		unit.calls = append(unit.calls, Call{Zone: z, AboveC: math.NaN(), MarginK: math.NaN()})
		if e.zones[z].setpoint != nil {
			e.loggedCall(&unit.calls[k])
			continue
		}
		open[k] = true
		all[k] = e.passings(in.Indoor[z].OperativeC, true, func(i int) bool {
			return unit.on[i] == uint8(site.PlantOff) && in.Running.Zones[z].Occupied[i] == running.Occupied
		})
	}
	for {
		best, most := -1, crossing{}
		for k := range unit.zones {
			if !open[k] {
				continue
			}
			if c := bestLevel(all[k], true, func(p passing) outcome { return e.callOutcome(p, started, free) }); c.followed > most.followed {
				best, most = k, c
			}
		}
		if best < 0 {
			break
		}
		open[best] = false
		e.inferredCall(&unit.calls[best], most)
		for i := range free {
			free[i] = free[i] && !e.touches(unit.zones[best], i, most.levelC)
		}
	}
	for k, z := range unit.zones {
		c := &unit.calls[k]
		unit.calling = append(unit.calling, e.latch(in.Indoor[z].OperativeC, func(i int) float64 { return e.callAt(c, i) }))
	}
}

// touches reports whether a zone was as warm as when it calls, around a start.
func (e *evidence) touches(z, start int, levelC float64) bool {
	for i := start - e.steps(crossWithinMin); i <= start+1; i++ {
		if at(e.in.Indoor[z].OperativeC, i) >= levelC-callTouchK {
			return true
		}
	}
	return false
}

// callOutcome says whether the unit started upon a passing, and whether that
// start is already explained.
func (e *evidence) callOutcome(p passing, started, free []bool) outcome {
	out := unanswered
	for from, to := e.responses(p); from <= to; from++ {
		switch {
		case free[from]:
			return answeredOnce
		case started[from]:
			out = explainedElse
		}
	}
	return out
}

func (e *evidence) inferredCall(c *Call, x crossing) {
	c.AboveC, c.Passed, c.Followed = x.levelC, x.passed, x.followed
	var margin []float64
	for _, i := range x.at {
		margin = append(margin, e.limitBefore(c.Zone, i-1)-x.levelC)
	}
	c.MarginK = quantile(finite(margin), 0.5)
}

func (e *evidence) loggedCall(c *Call) {
	set := e.zones[c.Zone].setpoint
	c.Logged, c.AboveC = true, meanKnown(set)
	var margin []float64
	for i := e.in.Grid.PeriodFrom; i < e.in.Grid.PeriodTo; i++ {
		if e.in.Running.Zones[c.Zone].Occupied[i] == running.Occupied {
			margin = append(margin, e.limitBefore(c.Zone, i)-at(set, i))
		}
	}
	c.MarginK = quantile(finite(margin), 0.5)
}

func meanKnown(series []float32) float64 {
	sum, n := 0.0, 0.0
	for _, v := range series {
		if !math.IsNaN(float64(v)) {
			sum, n = sum+float64(v), n+1
		}
	}
	return sum / n
}

func finite(values []float64) []float64 {
	var out []float64
	for _, v := range values {
		if !math.IsNaN(v) {
			out = append(out, v)
		}
	}
	return out
}

// callOf is a zone's call for a unit.
func (e *evidence) callOf(u, z int) Call {
	for _, c := range e.units[u].calls {
		if c.Zone == z {
			return c
		}
	}
	return Call{Zone: z, AboveC: math.NaN(), MarginK: math.NaN()}
}

// setpointOf is a zone's logged cooling set-point, nil when there is none.
func setpointOf(in *Input, z int) []float32 {
	for p := range in.Site.Points {
		pt := &in.Site.Points[p]
		if pt.Owner == site.OwnerZone && pt.Index == z && pt.Quantity == site.SetpointCool && in.Grid.Columns[p].Mean != nil {
			return in.Grid.Columns[p].Mean
		}
	}
	return nil
}

// asking is who asked for a unit at a step.
type asking struct {
	share float64 // of the people it serves: too warm, or in a room that calls
	warm  float64 // of the people it serves: too warm
	led   int     // the zone that asked most, -1 when none did
	early int     // the zone with most people that calls well below its comfort limit, -1 when none does
}

// askingFor weighs the zones of a unit at a step by their usual people, equally
// where any of those is not given. Zones whose temperature is unknown are left
// out. A zone outside comfort leads before one that merely calls; of several,
// the one furthest above its limit, or above where it calls.
func (e *evidence) askingFor(u, i int) asking {
	unit := &e.units[u]
	a := asking{led: -1, early: -1}
	earlyPeople := 0.0
	all, most, outside := 0.0, math.Inf(-1), false
	given := e.peopleGiven(u)
	for k, z := range unit.zones {
		t := at(e.in.Indoor[z].OperativeC, i)
		if math.IsNaN(t) {
			continue
		}
		people := 1.0
		if given {
			people = e.in.Site.Zones[z].People
		}
		all += people
		over := t - e.limitBefore(z, i)
		switch {
		case over > 0:
			a.warm += people
			a.share += people
			if !outside || over > most {
				a.led, most, outside = z, over, true
			}
		case unit.calling[k][i]:
			a.share += people
			if unit.calls[k].MarginK >= IndoorMarginK && people > earlyPeople {
				a.early, earlyPeople = z, people
			}
			if above := t - e.callAt(&unit.calls[k], i); !outside && above > most {
				a.led, most = z, above
			}
		}
	}
	if all == 0 {
		return asking{led: -1, early: -1, share: math.NaN(), warm: math.NaN()}
	}
	a.share, a.warm = a.share/all, a.warm/all
	return a
}

// callAt is where a zone calls at a step.
func (e *evidence) callAt(c *Call, i int) float64 {
	if c.Logged {
		return at(e.zones[c.Zone].setpoint, i)
	}
	return c.AboveC
}

// limitBefore is a zone's comfort limit just before a step, before the limit
// itself changes over.
func (e *evidence) limitBefore(z, i int) float64 {
	l := &e.in.Exceedance.Zones[z].Limits
	for _, c := range []float64{at(l.HighC, i-1), at(l.HighC, i), at(l.UpperOfDayC, i)} {
		if !math.IsNaN(c) {
			return c
		}
	}
	return math.NaN()
}

func (e *evidence) peopleGiven(u int) bool {
	for _, z := range e.units[u].zones {
		if math.IsNaN(e.in.Site.Zones[z].People) {
			return false
		}
	}
	return true
}

func fewRoomTest() test {
	return test{
		Test: Test{FewRoom, "the plant unit started, and kept running (also after a start by the clock), while only a small share of the people it serves (common practice: 30 %) was too warm " +
			"or sat in a room that calls for cooling, and at least one room did; a room calls from its logged cooling set-point, or from the temperature whose passing the unit followed " +
			"within a quarter of an hour on at least half of six or more occasions and at most half as often a kelvin below, until it has cooled by 1 K", ourAssumption},
		explain: fewRoomExplains,
	}
}

func fewRoomExplains(e *evidence, s *spell) verdict {
	me := &e.in.Running.Zones[s.zone]
	led := map[int]int{}
	example := map[int]string{}
	by := explains(s, func(i int) bool {
		if me.State[i] != running.Mech && me.State[i] != running.Both {
			return false
		}
		for _, u := range e.zones[s.zone].units {
			a, ok := e.fewRooms(u, i)
			if !ok {
				continue
			}
			if led[a.led] == 0 {
				example[a.led] = fmt.Sprintf("%s ran while %s of the people it serves were too warm; zone %s led with %.1f °C", e.in.Site.Plant[u].ID, percent(a.warm),
					e.in.Site.Zones[a.led].ID, at(e.in.Indoor[a.led].OperativeC, i)) + e.callWords(u, a.led)
			}
			led[a.led]++
			return true
		}
		return false
	})
	v := verdict{by: by, led: -1}
	for z := range e.zones { // in order, so that ties go the same way everywhere
		if led[z] > led[v.led] {
			v.led = z
		}
	}
	v.why = example[v.led]
	return v
}

// callWords says how surely a unit follows a zone.
func (e *evidence) callWords(u, z int) string {
	switch c := e.callOf(u, z); {
	case math.IsNaN(c.AboveC):
		return ""
	case c.Logged:
		return fmt.Sprintf(" (cooling set-point %.1f °C)", c.AboveC)
	default:
		return fmt.Sprintf(" (it starts when that zone passes %.1f °C: %d of %s)", c.AboveC, c.Followed, count(c.Passed, "time", "times"))
	}
}

// cools reports whether a unit runs at a step, and not to heat.
func (e *evidence) cools(u, i int) bool {
	s := e.units[u].on[i]
	return s != running.PlantUnknown && s != uint8(site.PlantOff) && s != uint8(site.PlantHeat)
}

// fewRooms reports whether few rooms held a unit at a step: someone asked, but
// few, and no more at the unit's start.
func (e *evidence) fewRooms(u, i int) (asking, bool) {
	unit := &e.units[u]
	if len(unit.zones) < 2 || !e.cools(u, i) {
		return asking{}, false
	}
	a := e.askingFor(u, i)
	if a.led < 0 || !(a.share < e.in.Criteria.FewRoomShare) {
		return a, false
	}
	r := runAt(unit.runs, i)
	if r == nil || !r.known || r.from < e.in.Grid.PeriodFrom {
		return a, true
	}
	for _, z := range unit.zones {
		if e.clocked(z, r) {
			return a, true
		}
	}
	at := e.askingFor(u, r.from)
	return a, !(at.share >= e.in.Criteria.FewRoomShare)
}
