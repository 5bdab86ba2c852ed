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
			by := explains(s, func(i int) bool { return e.in.Running.Zones[s.zone].State[i] == running.Both })
			return verdict{by, fmt.Sprintf("windows stood open with the plant running for %s of the time", percent(float64(marked(by))/float64(len(s.missed)))), -1}
		},
	}
}
