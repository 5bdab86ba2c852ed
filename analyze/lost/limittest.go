package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
)

func outdoorLimitTest() test {
	return test{
		Test: Test{LimitTooTight, "the zone behaves as if it had an outdoor limit: at least 5 changeovers lie within 1 K of each other, at least half of all from 2 K inside it outwards, " +
			"and beyond it at most a tenth of 2 or more suitable hours ran open (starts by the clock aside); the missed time lay beyond it", ourAssumption},
		explain: outdoorLimitExplains,
	}
}

func outdoorLimitExplains(e *evidence, s *spell) verdict {
	p := &e.zones[s.zone].Limit
	above, below := 0, 0
	suitedTo := math.NaN()
	for _, i := range s.missed {
		outC := at(e.in.Outdoor.TempC, i)
		switch {
		case outC >= p.UpperC-limitSlackK:
			above++
			if c := at(e.in.Exceedance.Zones[s.zone].Limits.UpperOfDayC, i) - e.in.Criteria.RiseK; !math.IsNaN(c) {
				suitedTo = c
			}
		case outC <= p.LowerC+limitSlackK:
			below++
		}
	}
	n := float64(len(s.missed))
	if above >= below {
		why := fmt.Sprintf("the zone leaves open mode at about %.1f °C outdoors (%d changeovers)", p.UpperC, p.UpperN)
		if !math.IsNaN(suitedTo) {
			why += fmt.Sprintf(", the weather suits up to %.1f °C that day", suitedTo)
		}
		return verdict{float64(above) / n, why, -1}
	}
	return verdict{float64(below) / n, fmt.Sprintf("the zone enters open mode only from about %.1f °C outdoors (%d changeovers), the weather suits from %.1f °C",
		p.LowerC, p.LowerN, e.in.Criteria.OutdoorLowC), -1}
}

func indoorLimitTest() test {
	return test{
		Test: Test{LimitTooTight, "open mode ended at an indoor temperature that hardly varies (middle half within 1 K over 5 or more changeovers) and lies at least 1 K below " +
			"the comfort limit", ourAssumption},
		explain: indoorLimitExplains,
	}
}

func indoorLimitExplains(e *evidence, s *spell) verdict {
	p := &e.zones[s.zone].Limit
	if math.IsNaN(p.IndoorC) {
		return nothing
	}
	by := 0
	startC := math.NaN()
	e.countRuns(s, func(r *run, steps []int) {
		if c, ok := e.leftOpenAt(s.zone, r); ok && math.Abs(c-p.IndoorC) <= indoorSpreadK/2 {
			by += len(steps)
			startC = c
		}
	})
	return verdict{float64(by) / float64(len(s.missed)), fmt.Sprintf("open mode ended at %.1f °C indoors, as it does at about %.1f °C (%d changeovers), %.1f K below the comfort limit",
		startC, p.IndoorC, p.IndoorN, p.MarginK), -1}
}

// leftOpenAt gives the indoor temperature at which a plant run ended open mode
// in the quarter of an hour before it.
func (e *evidence) leftOpenAt(z int, r *run) (indoorC float64, ok bool) {
	if !r.known {
		return 0, false
	}
	for i := r.from - 1; i >= max(0, r.from-e.steps(15)); i-- {
		if e.in.Running.Zones[z].State[i] == running.Open {
			c := at(e.in.Indoor[z].OperativeC, i)
			return c, !math.IsNaN(c)
		}
	}
	return 0, false
}
