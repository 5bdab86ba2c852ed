package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
)

func outdoorLimitTest() test {
	return test{
		Test: Test{LimitTooTight, "the plant behaves as if it had an outdoor limit: on at least 80 % of six or more occasions when outdoors passed that temperature it started (or stopped) within " +
			"a quarter of an hour, and beyond it was off in at most 10 % of two or more suitable hours (running that the clock explains aside; starts that a calling room explains count for nothing); it explains the time beyond the limit", ourAssumption},
		explain: outdoorLimitExplains,
	}
}

func outdoorLimitExplains(e *evidence, s *spell) verdict {
	p := &e.zones[s.zone].Limit
	above, below := 0, 0
	suitedTo := math.NaN()
	by := explains(s, func(i int) bool {
		outC := at(e.in.Outdoor.TempC, i)
		switch {
		case outC >= p.UpperC-limitSlackK:
			above++
			if c := at(e.in.Exceedance.Zones[s.zone].Limits.UpperOfDayC, i) - e.in.Criteria.RiseK; !math.IsNaN(c) {
				suitedTo = c
			}
			return true
		case outC <= p.LowerC+limitSlackK:
			below++
			return true
		}
		return false
	})
	who := p.Unit
	if who == "" {
		who = "the zone"
	}
	if above >= below {
		why := fmt.Sprintf("%s ends open mode at about %.1f °C outdoors%s (%d of %s)", who, p.UpperC, within(p.UpperLowC, p.UpperHighC), p.UpperN, count(p.UpperPassed, "passing", "passings"))
		if !math.IsNaN(suitedTo) {
			why += fmt.Sprintf(", the weather suits up to %.1f °C that day", suitedTo)
		}
		return verdict{by, why, -1}
	}
	return verdict{by, fmt.Sprintf("%s allows open mode only from about %.1f °C outdoors%s (%d of %s), the weather suits from %.1f °C", who,
		p.LowerC, within(p.LowerLowC, p.LowerHighC), p.LowerN, count(p.LowerPassed, "passing", "passings"), e.in.Criteria.OutdoorLowC), -1}
}

// within words a 95 % interval, empty where unknown.
func within(low, high float64) string {
	if math.IsNaN(low) || math.IsNaN(high) {
		return ""
	}
	return fmt.Sprintf(", 95 %% interval %.1f to %.1f", low, high)
}

func indoorLimitTest() test {
	return test{
		Test: Test{LimitTooTight, "the plant ran while rooms called for cooling that were still within comfort: their calls (see few-room changeover) come at least 0.5 K below the comfort limit, " +
			"rooms of at least the few-room share of people called, and less than that share was too warm", ourAssumption},
		indoors: true,
		explain: indoorLimitExplains,
	}
}

func indoorLimitExplains(e *evidence, s *spell) verdict {
	me := &e.in.Running.Zones[s.zone]
	why, best := "", 0.0
	by := explains(s, func(i int) bool {
		if me.State[i] != running.Mech && me.State[i] != running.Both {
			return false
		}
		for _, u := range e.zones[s.zone].units {
			a := e.askingFor(u, i)
			if !e.cools(u, i) || a.led < 0 || a.early < 0 || !(a.share >= e.in.Criteria.FewRoomShare) || !(a.warm < e.in.Criteria.FewRoomShare) {
				continue
			}
			if a.share > best {
				c := e.callOf(u, a.early)
				best = a.share
				why = fmt.Sprintf("%s ran while rooms of %s of its people called for cooling and %s were too warm; zone %s calls from %.1f °C, %.1f K below its comfort limit (%d of %s)",
					e.in.Site.Plant[u].ID, percent(a.share), percent(a.warm), e.in.Site.Zones[a.early].ID, c.AboveC, c.MarginK, c.Followed, count(c.Passed, "time", "times"))
				if c.Logged {
					why = fmt.Sprintf("%s ran while rooms of %s of its people called for cooling and %s were too warm; the cooling set-point of zone %s is %.1f °C, %.1f K below its comfort limit",
						e.in.Site.Plant[u].ID, percent(a.share), percent(a.warm), e.in.Site.Zones[a.early].ID, c.AboveC, c.MarginK)
				}
			}
			return true
		}
		return false
	})
	return verdict{by, why, -1}
}

// callBandK is how far a room that called must cool before it no longer does.
// Our assumption: thermostats switch off within a kelvin.
const callBandK = 1.0

// latch is a switch with a band: on from a limit, off a kelvin below it; off
// where the temperature is unknown or there is no limit.
func (e *evidence) latch(tempC []float32, limitC func(i int) float64) []bool {
	out := make([]bool, e.in.Grid.N)
	on := false
	for i := range out {
		t, limit := at(tempC, i), limitC(i)
		switch {
		case math.IsNaN(t) || math.IsNaN(limit):
			on = false
		case t >= limit-crossBinK/2:
			on = true
		case t < limit-callBandK:
			on = false
		}
		out[i] = on
	}
	return out
}
