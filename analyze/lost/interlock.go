package lost

import (
	"fmt"

	"sashlog/analyze/running"
)

func interlockTest() test {
	return test{
		Test: Test{NotInterlocked, "a window was open while the plant ran for at least half of the missed time: " +
			"a contact that stops the plant would have made it open mode", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			both := 0
			for _, i := range s.missed {
				if e.in.Running.Zones[s.zone].State[i] == running.Both {
					both++
				}
			}
			share := float64(both) / float64(len(s.missed))
			return verdict{share, fmt.Sprintf("windows stood open with the plant running for %s of the time", percent(share)), -1}
		},
	}
}
