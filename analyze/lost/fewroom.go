package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// call is the temperature at which a zone seems to call for its unit: where
// it is warmest while the unit is off, and where the unit keeps starting.
type call struct {
	aboveC float64 // NaN when the zone does not seem to call
	// share of the unit's starts with the zone so warm.
	share float64
}

// Rules of an inferred call, our assumptions.
const (
	callStarts  = 8    // starts of the unit needed
	callCeiling = 0.95 // quantile of the zone's temperature while the unit is off
	callShare   = 0.3  // of the starts
	startWithin = 10   // minutes between the unit's and the zone's start
)

// callsOf infers which of a unit's zones call for it.
func (e *evidence) callsOf(u int) []call {
	in, unit := e.in, &e.units[u]
	out := make([]call, len(unit.zones))
	starts := e.demandStarts(u)
	for k, z := range unit.zones {
		out[k].aboveC = math.NaN()
		if len(starts) < callStarts {
			continue
		}
		var offC []float64
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			if unit.on[i] == uint8(site.PlantOff) && in.Running.Zones[z].Occupied[i] == running.Occupied {
				if c := at(in.Indoor[z].OperativeC, i); !math.IsNaN(c) {
					offC = append(offC, c)
				}
			}
		}
		ceiling := quantile(offC, callCeiling)
		hit := 0
		for _, s := range starts {
			if e.beforeC(z, s) >= ceiling-0.2 {
				hit++
			}
		}
		out[k].share = float64(hit) / float64(len(starts))
		if out[k].share >= callShare {
			out[k].aboveC = ceiling - 0.2
		}
	}
	return out
}

// demandStarts lists the starts of a unit in occupied time that are not for
// heat, nor at a clock time.
func (e *evidence) demandStarts(u int) []int {
	unit := &e.units[u]
	var out []int
	for k := range unit.runs {
		r := &unit.runs[k]
		if !r.known || r.from < e.in.Grid.PeriodFrom || r.from >= e.in.Grid.PeriodTo || unit.on[r.from] == uint8(site.PlantHeat) {
			continue
		}
		occupied, clocked := false, false
		for _, z := range unit.zones {
			occupied = occupied || e.in.Running.Zones[z].Occupied[r.from] == running.Occupied
			clocked = clocked || e.clocked(z, r)
		}
		if occupied && !clocked {
			out = append(out, r.from)
		}
	}
	return out
}

// beforeC is a zone's mean temperature in the quarter of an hour up to the
// step a unit started in, NaN when unknown.
func (e *evidence) beforeC(z, step int) float64 {
	var before []int
	for i := max(0, step-e.steps(15)); i <= step; i++ {
		before = append(before, i)
	}
	return meanAt(e.in.Indoor[z].OperativeC, before)
}

// fewRooms judges the start of a unit: the share of the people it serves that
// were too warm or whose room called, and the zone that led (-1 without).
func (e *evidence) fewRooms(u, start int) (share, warmShare float64, led int, leadC float64) {
	unit := &e.units[u]
	led = -1
	var all, warm, calling, most float64
	leads := false // a zone outside comfort outranks one that merely calls
	for k, z := range unit.zones {
		people := e.in.Site.Zones[z].People
		if !e.peopleGiven(u) {
			people = 1
		}
		c := e.beforeC(z, start)
		if math.IsNaN(c) {
			continue
		}
		all += people
		over := c - e.limitBefore(z, start)
		above := c - e.callAbove(z, unit.calls, k, start)
		switch {
		case over > 0:
			warm += people
			calling += people
			if !leads || over > most {
				led, most, leadC, leads = z, over, c, true
			}
		case above >= 0:
			calling += people
			// Of several that call, the one the unit follows most often.
			weight := 1.0
			if unit.calls != nil {
				weight += unit.calls[k].share
			}
			if !leads && weight > most {
				led, most, leadC = z, weight, c
			}
		}
	}
	if all == 0 {
		return math.NaN(), math.NaN(), -1, math.NaN()
	}
	return calling / all, warm / all, led, leadC
}

// limitBefore is a zone's comfort limit just before a start, before the limit
// itself changes over.
func (e *evidence) limitBefore(z, start int) float64 {
	l := &e.in.Exceedance.Zones[z].Limits
	for _, c := range []float64{at(l.HighC, start-1), at(l.HighC, start), at(l.UpperOfDayC, start)} {
		if !math.IsNaN(c) {
			return c
		}
	}
	return math.NaN()
}

// callAbove is the temperature above which a zone calls: its logged cooling
// set-point, else the inferred one, NaN when it does not seem to call.
func (e *evidence) callAbove(z int, calls []call, k, start int) float64 {
	if c := at(e.zones[z].setpoint, start); !math.IsNaN(c) {
		return c
	}
	if calls == nil {
		return math.NaN()
	}
	return calls[k].aboveC
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
		Test: Test{FewRoom, "the plant unit started while only a small share of the people it serves (common practice: 30 %) was too warm or sat in a room that calls for cooling, " +
			"and at least one did; a room calls above its logged cooling set-point, or as warm as it hardly gets without the unit starting (in 30 % of 8 or more starts)", ourAssumption},
		explain: fewRoomExplains,
	}
}

func fewRoomExplains(e *evidence, s *spell) verdict {
	by := 0
	v := nothing
	e.countRuns(s, func(r *run, steps []int) {
		if !r.known || e.clocked(s.zone, r) {
			return
		}
		for _, u := range e.zones[s.zone].units {
			unit := &e.units[u]
			start := e.unitStart(u, r.from)
			if start < 0 || len(unit.zones) < 2 || unit.on[start] == uint8(site.PlantHeat) {
				continue
			}
			share, warm, led, leadC := e.fewRooms(u, start)
			if led < 0 || !(share < e.in.Criteria.FewRoomShare) {
				continue
			}
			by += len(steps)
			v.led = led
			name := e.in.Site.Plant[u].ID
			lead := e.in.Site.Zones[led].ID
			v.why = fmt.Sprintf("%s started at %s while %s of the people it serves were too warm; %s led at %.1f °C", name,
				clock(int(e.cal.MinuteOfDay[start])), percent(warm), lead, leadC)
			return
		}
	})
	v.share = float64(by) / float64(len(s.missed))
	return v
}

// unitStart is the start of the unit that a zone's plant run followed, -1 when
// it started at another time.
func (e *evidence) unitStart(u, zoneStart int) int {
	within := e.steps(startWithin)
	for i := zoneStart; i >= max(0, zoneStart-within); i-- {
		if r := runAt(e.units[u].runs, i); r != nil && r.known && r.from >= zoneStart-within && r.from <= zoneStart {
			return r.from
		}
	}
	return -1
}
