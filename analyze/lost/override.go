package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// overriddenAt says at which steps a logged manual override of a zone, of a
// unit that serves it or of the site was on; nil when none is logged.
func overriddenAt(in *Input, z int) []bool {
	var out []bool
	for k := range in.Site.Points {
		p := &in.Site.Points[k]
		concerns := p.Owner == site.OwnerSite || (p.Owner == site.OwnerZone && p.Index == z) || (p.Owner == site.OwnerPlant && serves(in.Site, p.Index, z))
		if p.Quantity != site.ManualOverride || !concerns || in.Grid.Columns[k].Mean == nil {
			continue
		}
		if out == nil {
			out = make([]bool, in.Grid.N)
		}
		for i, v := range in.Grid.Columns[k].Mean {
			out[i] = out[i] || v >= 0.5
		}
	}
	return out
}

func overrideTest() test {
	return test{
		Test: Test{Overridden, "a logged manual override of the zone, its plant unit or the site was on while the plant ran or the windows stayed shut", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			on := e.zones[s.zone].overridden
			if on == nil {
				return nothing
			}
			by := explains(s, func(i int) bool { return on[i] })
			return verdict{by, fmt.Sprintf("a manual override was on for %s", minutes(float64(marked(by))*e.in.Grid.StepH()*60)), -1}
		},
	}
}

// Lock-outs. Weather that suits is no reason to lock windows, but weather just
// over the edge is a reason to have done so: that tells a lock that is released
// too late, or set too tight, from one that has nothing to do with weather.
const (
	lockRainMin  = 60  // it rained so shortly before
	lockNearMS   = 2.0 // mean wind this near to the site's limit
	lockNearDewK = 1.0 // dew point this near to the site's limit
)

func lockedOutTest() test {
	return test{
		Test: Test{LockedOut, "nothing mechanical ran and the windows were logged as not released for at least half of the missed time, although the weather suited; " +
			"rain in the hour before, wind within 2 m/s or dew point within 1 K of the site's limits is named as what may have locked them", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			me := &e.in.Running.Zones[s.zone]
			guards := map[string]int{}
			by := explains(s, func(i int) bool {
				if v := at(e.zones[s.zone].released, i); me.State[i] != running.Shut || math.IsNaN(v) || v >= 0.5 {
					return false
				}
				guards[e.guard(i)]++
				return true
			})
			if by == nil {
				return nothing
			}
			likely, most := "", 0
			for _, g := range []string{"rain shortly before", "wind near its limit", "humidity near its limit", ""} {
				if guards[g] > most {
					likely, most = g, guards[g]
				}
			}
			why := fmt.Sprintf("windows were locked for %s with nothing running although the weather suited", minutes(float64(marked(by))*e.in.Grid.StepH()*60))
			if likely != "" {
				why += " (" + likely + ": the lock holds longer or sets in earlier than the site's limits ask)"
			} else {
				why += " (neither rain, wind nor humidity was near its limit: not justified by weather)"
			}
			return verdict{by, why, -1}
		},
	}
}

// guard names the weather that may have locked windows at a step.
func (e *evidence) guard(i int) string {
	out := e.in.Outdoor
	for k := max(0, i-e.steps(lockRainMin)); k <= i; k++ {
		if at(out.RainMMH, k) > 0 {
			return "rain shortly before"
		}
	}
	if at(out.WindMS, i) > e.in.Criteria.WindMaxMS-lockNearMS {
		return "wind near its limit"
	}
	if at(out.DewPointC, i) > e.in.Criteria.DewPointMaxC-lockNearDewK {
		return "humidity near its limit"
	}
	return ""
}
