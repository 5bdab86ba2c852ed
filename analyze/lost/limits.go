package lost

import (
	"math"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// LimitPattern is the outdoor changeover limits a plant unit, or a zone
// without plant, behaves as if it had, inferred from what follows when the
// outdoor temperature passes a level. Temperatures are NaN when no limit
// shows.
type LimitPattern struct {
	// Unit is the id of the plant unit, empty for the zone itself.
	Unit string
	// UpperC: above this outdoor temperature it does not leave the zone to its
	// windows, although the weather suits; LowerC: below. N counts the
	// passings that changed what it did, Passed all.
	UpperC, LowerC float64
	// 95 % intervals of those, from days drawn again.
	UpperLowC, UpperHighC, LowerLowC, LowerHighC float64
	UpperN, LowerN                               int
	UpperPassed, LowerPassed                     int
	// FreeShareAbove, FreeShareBelow: share of the suitable hours beyond the
	// limit with the plant off (or open, without plant) all the same;
	// FreeShareWithin between the limits. Hours explained by the clock are left
	// out.
	FreeShareAbove, FreeShareBelow, FreeShareWithin float64
	// IndoorC: the zone's own temperature at which the plant takes over, when
	// that lies below comfort; MarginK how far below.
	IndoorC, MarginK      float64
	IndoorN, IndoorPassed int
}

// Rules of an inferred limit, our assumptions.
const (
	limitRate    = 0.8  // of the passings of an outdoor limit are followed
	limitFreeMax = 0.1  // share of suitable hours beyond it with the plant off
	limitBeyondH = 2.0  // suitable hours beyond it
	limitSlackK  = 0.25 // sensors and steps blur the edge
	callTouchK   = 0.05 // nearer to its call than this a room may be calling
)

// IndoorMarginK is how far below the comfort limit a call must come to be too
// tight a limit. Our assumption: half a kelvin is beyond a sensor's error.
const IndoorMarginK = 0.5

func noLimit() LimitPattern {
	nan := math.NaN()
	return LimitPattern{UpperC: nan, LowerC: nan, UpperLowC: nan, UpperHighC: nan, LowerLowC: nan, LowerHighC: nan, IndoorC: nan, MarginK: nan, FreeShareAbove: nan, FreeShareBelow: nan, FreeShareWithin: nan}
}

// subject is what a limit may belong to: a plant unit or a zone without plant.
type subject struct {
	// suited: suitable occupied time; free: left to the windows; kept: not, and
	// not for the clock; held: kept, and not for heat; started, stopped: what ends and begins
	// freedom; called: a room is as warm as when it calls.
	suited, free, kept, held func(i int) bool
	started, stopped, called func(i int) bool
}

// limitOf infers a subject's outdoor limits.
func (e *evidence) limitOf(s subject) LimitPattern {
	p := noLimit()
	ahead := e.steps(crossWithinMin) + 2
	// A start that a calling room explains says nothing about outdoors.
	uncalled := func(i int) bool {
		if !s.free(i) {
			return false
		}
		for k := i; k <= min(e.in.Grid.N-1, i+ahead); k++ {
			if s.called(k) {
				return false
			}
		}
		return true
	}
	x := e.exposureOf(s)
	if c := e.level(e.in.Outdoor.TempC, true, uncalled, s.started); x.confirms(c, true) {
		p.UpperC, p.UpperN, p.UpperPassed = c.levelC, c.followed, c.passed
		p.UpperLowC, p.UpperHighC = e.levelInterval(e.in.Outdoor.TempC, true, uncalled, s.started, c.levelC)
		p.FreeShareAbove, _ = x.share(c.levelC+limitSlackK, math.Inf(1))
	}
	rising, armed, answer := false, uncalled, s.started
	lower := e.level(e.in.Outdoor.TempC, rising, armed, answer)
	if !x.confirms(lower, false) {
		// Mornings warm up through the lower limit more often than open hours
		// cool down through it.
		rising, armed, answer = true, s.kept, s.stopped
		lower = e.level(e.in.Outdoor.TempC, rising, armed, answer)
	}
	if x.confirms(lower, false) && !(lower.levelC >= p.UpperC) {
		p.LowerC, p.LowerN, p.LowerPassed = lower.levelC, lower.followed, lower.passed
		p.LowerLowC, p.LowerHighC = e.levelInterval(e.in.Outdoor.TempC, rising, armed, answer, lower.levelC)
		p.FreeShareBelow, _ = x.share(math.Inf(-1), lower.levelC-limitSlackK)
	}
	low, high := math.Inf(-1), math.Inf(1)
	if !math.IsNaN(p.LowerC) {
		low = p.LowerC
	}
	if !math.IsNaN(p.UpperC) {
		high = p.UpperC
	}
	p.FreeShareWithin, _ = x.share(low, high)
	return p
}

// unitSubject is a plant unit seen from the zones it serves.
func (e *evidence) unitSubject(u int) subject {
	unit := &e.units[u]
	run := e.in.Running.Zones
	occupied := func(i int) bool {
		for _, z := range unit.zones {
			if run[z].Occupied[i] == running.Occupied {
				return true
			}
		}
		return false
	}
	heats := uint8(site.PlantHeat)
	on := func(i int) bool { return unit.on[i] != running.PlantUnknown && unit.on[i] != uint8(site.PlantOff) }
	kept := func(i int) bool { return on(i) && occupied(i) && !e.unitClocked(u, i) }
	return subject{
		suited: func(i int) bool {
			for _, z := range unit.zones {
				if c := e.in.Record.Class[z][i]; c.Achieved() || c.Missed() || c == hours.NotNeeded {
					return true
				}
			}
			return false
		},
		free:    func(i int) bool { return unit.on[i] == uint8(site.PlantOff) && occupied(i) },
		kept:    kept,
		held:    func(i int) bool { return kept(i) && unit.on[i] != heats },
		started: func(i int) bool { return i > 0 && on(i) && unit.on[i] != heats && unit.on[i-1] == uint8(site.PlantOff) },
		stopped: func(i int) bool { return i > 0 && unit.on[i] == uint8(site.PlantOff) && on(i-1) },
		called: func(i int) bool {
			for k, z := range unit.zones {
				if at(e.in.Indoor[z].OperativeC, i) >= unit.calls[k].AboveC-callTouchK {
					return true
				}
			}
			return false
		},
	}
}

// unitClocked reports whether the clock explains that a unit runs at a step.
func (e *evidence) unitClocked(u, i int) bool {
	r := runAt(e.units[u].runs, i)
	if r == nil {
		return false
	}
	for _, z := range e.units[u].zones {
		if e.clocked(z, r) && e.beforeHold(z, i) {
			return true
		}
	}
	return false
}

// zoneSubject is a zone without plant, whose windows alone can be kept shut.
func (e *evidence) zoneSubject(z int) subject {
	me := &e.in.Running.Zones[z]
	is := func(s running.State) func(i int) bool {
		return func(i int) bool { return me.State[i] == s && me.Occupied[i] == running.Occupied }
	}
	turned := func(from, to running.State) func(i int) bool {
		return func(i int) bool { return i > 0 && me.State[i] == to && me.State[i-1] == from }
	}
	return subject{
		suited: func(i int) bool {
			c := e.in.Record.Class[z][i]
			return c.Achieved() || c.Missed()
		},
		free: is(running.Open), kept: is(running.Shut), held: is(running.Shut),
		started: turned(running.Open, running.Shut), stopped: turned(running.Shut, running.Open),
		called: func(int) bool { return false },
	}
}

// limitPattern gives zone z the limits of the unit that shows them best, or
// its own where no unit serves it.
func (e *evidence) limitPattern(z int) LimitPattern {
	p := noLimit()
	switch {
	case e.in.Running.Zones[z].NoOpening:
		return p
	case !e.in.Running.Zones[z].ServedByPlant:
		return e.limitOf(e.zoneSubject(z))
	}
	for _, u := range e.zones[z].units {
		if q := e.units[u].limit; q.UpperN+q.LowerN > p.UpperN+p.LowerN {
			p = q
		}
	}
	e.indoorLimit(&p, z)
	return p
}

// indoorLimit adds the zone's own call, where it lies below comfort.
func (e *evidence) indoorLimit(p *LimitPattern, z int) {
	for _, u := range e.zones[z].units {
		for _, c := range e.units[u].calls {
			if c.Zone == z && !math.IsNaN(c.AboveC) && c.MarginK >= IndoorMarginK && c.Followed > p.IndoorN {
				p.IndoorC, p.MarginK, p.IndoorN, p.IndoorPassed = c.AboveC, c.MarginK, c.Followed, c.Passed
			}
		}
	}
}

// exposure is how suitable time splits into free and held by outdoor
// temperature, in tenths of a kelvin.
type exposure struct {
	stepH      float64
	free, held map[int]int
}

func (e *evidence) exposureOf(s subject) exposure {
	x := exposure{stepH: e.in.Grid.StepH(), free: map[int]int{}, held: map[int]int{}}
	for i := e.in.Grid.PeriodFrom; i < e.in.Grid.PeriodTo; i++ {
		outC := at(e.in.Outdoor.TempC, i)
		if math.IsNaN(outC) || !s.suited(i) {
			continue
		}
		switch {
		case s.free(i):
			x.free[bin(outC)]++
		case s.held(i):
			x.held[bin(outC)]++
		}
	}
	return x
}

// share is the share of the time between two outdoor temperatures that was
// free, NaN of none, and how long that time is.
func (x exposure) share(fromC, toC float64) (share, h float64) {
	count := func(bins map[int]int) int {
		n := 0
		for b, k := range bins {
			if c := (float64(b) + 0.5) * crossBinK; c >= fromC && c < toC {
				n += k
			}
		}
		return n
	}
	free, held := count(x.free), count(x.held)
	if free+held == 0 {
		return math.NaN(), 0
	}
	return float64(free) / float64(free+held), float64(free+held) * x.stepH
}

// confirms reports whether a level is an outdoor limit: suitable time beyond it
// is hardly ever free, and well more often just inside it.
func (x exposure) confirms(c crossing, upper bool) bool {
	levelC := c.levelC
	if math.IsNaN(levelC) || float64(c.followed) < limitRate*float64(c.passed) {
		return false
	}
	beyond, h := x.share(levelC+limitSlackK, math.Inf(1))
	inside, _ := x.share(levelC-3, levelC)
	if !upper {
		beyond, h = x.share(math.Inf(-1), levelC-limitSlackK)
		inside, _ = x.share(levelC, levelC+3)
	}
	return h >= limitBeyondH && beyond <= limitFreeMax && inside > 0 && inside >= 2*beyond
}
