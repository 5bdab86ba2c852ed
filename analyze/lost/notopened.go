package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// releaseOf reads whether windows were released for use, NaN where unknown:
// the zone's own signal, else that of a unit serving it, else the site's; nil
// when none is logged.
func releaseOf(in *Input, z int) []float32 {
	rank := func(p *site.Point) int {
		switch {
		case p.Owner == site.OwnerZone && p.Index == z:
			return 3
		case p.Owner == site.OwnerPlant && serves(in.Site, p.Index, z):
			return 2
		case p.Owner == site.OwnerSite:
			return 1
		}
		return 0
	}
	best, found := 0, -1
	for k := range in.Site.Points {
		p := &in.Site.Points[k]
		if p.Quantity == site.WindowEnable && in.Grid.Columns[k].Mean != nil && rank(p) > best {
			best, found = rank(p), k
		}
	}
	if found < 0 {
		return nil
	}
	return in.Grid.Columns[found].Mean
}

func serves(s *site.Site, unit, z int) bool {
	if unit < 0 || unit >= len(s.Plant) {
		return false
	}
	for _, id := range s.Plant[unit].Serves {
		if id == s.Zones[z].ID {
			return true
		}
	}
	return false
}

func notOpenedTest() test {
	return test{
		Test: Test{NotOpened, "people can open the windows themselves, nothing mechanical ran, the windows were released where that is logged, and they stayed shut " +
			"while it was warm or stale for at least half of the missed time", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			me := &e.in.Running.Zones[s.zone]
			if !me.PeopleCanOpen {
				return nothing
			}
			locked := 0
			by := explains(s, func(i int) bool {
				if me.State[i] != running.Shut {
					return false
				}
				if v := at(e.zones[s.zone].released, i); !math.IsNaN(v) && v < 0.5 {
					locked++
					return false
				}
				return true
			})
			why := fmt.Sprintf("nothing mechanical ran and windows that people can open stayed shut for %s", minutes(float64(marked(by))*e.in.Grid.StepH()*60))
			if locked > 0 {
				why += fmt.Sprintf(" (locked for another %s)", minutes(float64(locked)*e.in.Grid.StepH()*60))
			}
			return verdict{by, why, -1}
		},
	}
}
