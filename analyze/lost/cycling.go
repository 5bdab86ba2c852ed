package lost

import (
	"fmt"

	"sashlog/configs/site"
)

// Short cycling: so many starts within so long. Three starts in two hours leave
// no window open long enough to be worth it. Our assumption; common practice
// asks for at most 3 to 6 starts an hour of a machine, for its own sake.
const (
	cycleStarts = 3
	cycleMin    = 120
)

// cyclesAt marks the steps of a plant state series from the first to the last
// of cycleStarts starts within cycleMin.
func (e *evidence) cyclesAt(runs []run, state []uint8) []bool {
	out := make([]bool, len(state))
	var starts []int
	for k := range runs {
		if runs[k].known && state[runs[k].from] != uint8(site.PlantHeat) {
			starts = append(starts, k)
		}
	}
	for k := 0; k+cycleStarts <= len(starts); k++ {
		first, last := runs[starts[k]], runs[starts[k+cycleStarts-1]]
		if last.from-first.from > e.steps(cycleMin) {
			continue
		}
		for i := first.from; i < last.to && i < last.from+e.steps(cycleMin); i++ {
			out[i] = true
		}
	}
	return out
}

func cyclingTest() test {
	return test{
		Test: Test{ShortCycling, "the zone's plant started three times or more within two hours, not to heat: from the first start to the end of the last run, stops between included", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			by := explains(s, func(i int) bool { return e.zones[s.zone].cycling[i] })
			n := 0
			for _, r := range e.zones[s.zone].runs {
				if r.known && r.from >= s.from-e.steps(cycleMin) && r.from < s.to {
					n++
				}
			}
			return verdict{by, fmt.Sprintf("the plant started %s around that time, within two hours each three", count(n, "time", "times")), -1}
		},
	}
}
