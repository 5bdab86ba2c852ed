package lost

import (
	"math"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// LimitPattern is the changeover limits a zone behaves as if it had, inferred
// from when it leaves and enters open mode. Temperatures are NaN when no limit
// shows.
type LimitPattern struct {
	// UpperC: above this outdoor temperature it does not run open, although
	// the weather suits; LowerC: below. N counts the changeovers that show it.
	UpperC, LowerC float64
	UpperN, LowerN int
	// OpenShareAbove, OpenShareBelow: share of the suitable hours beyond the
	// limit that ran open all the same; OpenShareWithin between them.
	OpenShareAbove, OpenShareBelow, OpenShareWithin float64
	// IndoorC: the indoor temperature at which it leaves open mode, when that
	// hardly varies and lies below comfort; MarginK how far below.
	IndoorC, MarginK float64
	IndoorN          int
}

// Rules of an inferred limit, our assumptions.
const (
	limitEvents   = 5    // changeovers within windowK that show it
	limitWindowK  = 1.0  // they lie this close together
	limitRivalK   = 2.0  // at least half of those this far inside the limit, or beyond it, lie in the window
	limitOpenMax  = 0.1  // share of suitable hours beyond it that run open
	limitBeyondH  = 2.0  // suitable hours beyond it
	limitSlackK   = 0.25 // sensors and steps blur the edge
	indoorSpreadK = 1.0  // middle half of indoor temperatures at changeover
	indoorMarginK = 1.0  // below the comfort limit
)

// changeovers are the moments a zone passed between open and mechanical.
type changeovers struct {
	leaveOutC, leaveInC, leaveMarginK []float64
	enterOutC                         []float64 // while it warmed outdoors, not at the start of the day
}

// limitPattern infers the limits of zone z.
func (e *evidence) limitPattern(z int) LimitPattern {
	nan := math.NaN()
	p := LimitPattern{UpperC: nan, LowerC: nan, IndoorC: nan, MarginK: nan, OpenShareAbove: nan, OpenShareBelow: nan, OpenShareWithin: nan}
	ch := e.changeoversOf(z)
	x := e.exposureOf(z)
	if c, n := edge(ch.leaveOutC, true, x); n > 0 {
		p.UpperC, p.UpperN = c, n
		p.OpenShareAbove, _ = x.openShare(c+limitSlackK, math.Inf(1))
	}
	if c, n := edge(ch.enterOutC, false, x); n > 0 && (n == 0 || !(c >= p.UpperC)) {
		p.LowerC, p.LowerN = c, n
		p.OpenShareBelow, _ = x.openShare(math.Inf(-1), c-limitSlackK)
	}
	low, high := math.Inf(-1), math.Inf(1)
	if !math.IsNaN(p.LowerC) {
		low = p.LowerC
	}
	if !math.IsNaN(p.UpperC) {
		high = p.UpperC
	}
	p.OpenShareWithin, _ = x.openShare(low, high)
	e.indoorLimit(&p, ch)
	return p
}

// changeoversOf lists the changeovers of zone z in occupied time.
func (e *evidence) changeoversOf(z int) changeovers {
	in := e.in
	me := &in.Running.Zones[z]
	limits := &in.Exceedance.Zones[z].Limits
	soon, hour := e.steps(15), e.steps(60)
	var ch changeovers
	for i := in.Grid.PeriodFrom + 1; i < in.Grid.PeriodTo; i++ {
		if me.Occupied[i] != running.Occupied || me.Occupied[i-1] != running.Occupied {
			continue
		}
		outC := at(in.Outdoor.TempC, i)
		if math.IsNaN(outC) {
			continue
		}
		switch {
		case me.State[i-1] == running.Open && e.leaves(me, i, soon):
			ch.leaveOutC = append(ch.leaveOutC, outC)
			inC := at(in.Indoor[z].OperativeC, i-1)
			ch.leaveInC = append(ch.leaveInC, inC)
			ch.leaveMarginK = append(ch.leaveMarginK, at(limits.HighC, i-1)-inC)
		case me.State[i] == running.Open && closedFor(me, i, e.steps(30)) && outC > at(in.Outdoor.TempC, i-hour)+0.2:
			ch.enterOutC = append(ch.enterOutC, outC)
		}
	}
	return ch
}

// leaves reports whether open mode ended at step i for the plant (not for
// heat), or, without plant, for shut windows that stay shut.
func (e *evidence) leaves(me *running.Zone, i, soon int) bool {
	if me.State[i] == running.Open || me.State[i] == running.Unknown {
		return false
	}
	end := min(i+soon, len(me.State))
	if !me.ServedByPlant {
		for k := i; k < end; k++ {
			if me.State[k] != running.Shut {
				return false
			}
		}
		return true
	}
	for k := i; k < end; k++ {
		if me.State[k] == running.Mech || me.State[k] == running.Both {
			return me.Plant[k] != uint8(site.PlantHeat)
		}
		if me.State[k] == running.Open {
			return false
		}
	}
	return false
}

// closedFor reports whether the zone was occupied and not open for n steps
// before i.
func closedFor(me *running.Zone, i, n int) bool {
	if i < n {
		return false
	}
	for k := i - n; k < i; k++ {
		if me.State[k] == running.Open || me.State[k] == running.Unknown || me.Occupied[k] != running.Occupied {
			return false
		}
	}
	return true
}

// exposure is how suitable occupied time splits into open and missed by
// outdoor temperature, in tenths of a kelvin.
type exposure struct {
	stepH        float64
	open, missed map[int]int
}

// exposureOf counts achieved and missed steps of zone z; steps in runs started
// by the clock say nothing about limits and are left out.
func (e *evidence) exposureOf(z int) exposure {
	in := e.in
	x := exposure{stepH: in.Grid.StepH(), open: map[int]int{}, missed: map[int]int{}}
	class := in.Record.Class[z]
	runs := e.zones[z].runs
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		c := class[i]
		if !c.Achieved() && !c.Missed() {
			continue
		}
		outC := at(in.Outdoor.TempC, i)
		if math.IsNaN(outC) {
			continue
		}
		bin := int(math.Floor(outC * 10))
		if c.Achieved() {
			x.open[bin]++
			continue
		}
		if c == hours.MissedBoth {
			continue
		}
		if r := runAt(runs, i); r != nil && e.clocked(z, r) && e.beforeHold(z, i) {
			continue
		}
		x.missed[bin]++
	}
	return x
}

func (e *evidence) beforeHold(z, i int) bool {
	p := &e.zones[z].Clock
	return p.RoundTheClock || p.HoldMinute < 0 || int(e.cal.MinuteOfDay[i]) < p.HoldMinute+10
}

// openShare is the share of the time between two outdoor temperatures that ran
// open, NaN of none, and how long that time is.
func (x exposure) openShare(fromC, toC float64) (share, h float64) {
	open, all := 0, 0
	for bin, n := range x.open {
		if c := float64(bin)/10 + 0.05; c >= fromC && c < toC {
			open, all = open+n, all+n
		}
	}
	for bin, n := range x.missed {
		if c := float64(bin)/10 + 0.05; c >= fromC && c < toC {
			all += n
		}
	}
	if all == 0 {
		return math.NaN(), 0
	}
	return float64(open) / float64(all), float64(all) * x.stepH
}

// edge looks for the outdoor temperature at which changeovers crowd and beyond
// which the zone hardly ever runs open. It returns the middle of the crowd and
// its size, 0 when there is none.
func edge(changesC []float64, upper bool, x exposure) (limitC float64, n int) {
	sign := 1.0
	if !upper {
		sign = -1
	}
	best := 0
	for _, c := range changesC {
		// The window begins at c and reaches inwards.
		var within []float64
		rivals := 0
		for _, d := range changesC {
			inward := (c - d) * sign
			if inward >= 0 && inward <= limitWindowK {
				within = append(within, d)
			}
			if inward <= limitWindowK+limitRivalK {
				rivals++
			}
		}
		if len(within) < limitEvents || 2*len(within) < rivals || len(within) <= best {
			continue
		}
		middle := quantile(within, 0.5)
		var beyond, beyondH, inside float64
		if upper {
			beyond, beyondH = x.openShare(middle+limitSlackK, math.Inf(1))
			inside, _ = x.openShare(middle-3, middle)
		} else {
			beyond, beyondH = x.openShare(math.Inf(-1), middle-limitSlackK)
			inside, _ = x.openShare(middle, middle+3)
		}
		if beyondH < limitBeyondH || beyond > limitOpenMax || !(inside >= 3*beyond) || inside == 0 {
			continue
		}
		best, limitC, n = len(within), middle, len(within)
	}
	return limitC, n
}

// indoorLimit looks for an indoor temperature at which the zone always leaves
// open mode. Changeovers at the outdoor limit are left out.
func (e *evidence) indoorLimit(p *LimitPattern, ch changeovers) {
	var inC, margin []float64
	for k, c := range ch.leaveInC {
		if math.IsNaN(c) || math.IsNaN(ch.leaveMarginK[k]) || ch.leaveOutC[k] > p.UpperC-0.5 {
			continue
		}
		inC, margin = append(inC, c), append(margin, ch.leaveMarginK[k])
	}
	if len(inC) < limitEvents || quantile(inC, 0.75)-quantile(inC, 0.25) > indoorSpreadK || quantile(margin, 0.5) < indoorMarginK {
		return
	}
	p.IndoorC, p.MarginK, p.IndoorN = quantile(inC, 0.5), quantile(margin, 0.5), len(inC)
}
