package sample

import (
	"math"
	"testing"

	"sashlog/analyze/hours"
)

// TestIdentities keeps the sample honest: it must hold the identities that
// results hold, or tests of the report would prove nothing.
func TestIdentities(t *testing.T) {
	s := Make(Options{Days: 30, Zones: 3})
	for _, x := range append(s.Results.Summary.Zones, s.Results.Summary.Building) {
		h := x.H
		outcomes := h[hours.CAchieved] + h[hours.CMissed] + h[hours.CNotNeeded] + h[hours.CIllTimed] + h[hours.CClosedUnsuited] + h[hours.CNoOpening] + h[hours.CUnjudged]
		suited := h[hours.CAchieved] + h[hours.CMissed] + h[hours.CNotNeeded] + h[hours.CUnjudgedSuited]
		if math.Abs(outcomes-h[hours.COccupied]) > 1e-6 || math.Abs(suited-h[hours.CSuited]) > 1e-6 || h[hours.COccupied] == 0 || h[hours.CMissed] == 0 {
			t.Errorf("%s: outcomes %v of %v occupied, suited %v of %v", x.ID, outcomes, h[hours.COccupied], suited, h[hours.CSuited])
		}
	}
}
