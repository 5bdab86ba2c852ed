package hours

import (
	"math"
	"testing"

	"sashlog/analyze/running"
	"sashlog/ingest/grid"
)

// Bounds of the achieved share hold whatever the unknown hours were: 40 h
// achieved, 49 h missed and 50 h of unknown weather leave 40/139 to 90/139.
func TestShareWithUnknownWeather(t *testing.T) {
	var total Total
	total.H[CAchieved], total.H[CMissed], total.H[CSuitedUnknown], total.H[CUnjudged] = 40, 49, 50, 50
	total.bound()
	r := total.AchievedShare
	if math.Abs(r.Low-40./139) > 1e-12 || math.Abs(r.High-90./139) > 1e-12 || math.Abs(r.Value-40./89) > 1e-12 {
		t.Errorf("%+v", r)
	}
}

// A run of openings beside an unknown step may have been longer than an
// airing.
func TestMechFreeWithUnknownWeather(t *testing.T) {
	var x Total
	x.H[COccupied], x.H[CSuited], x.H[CSuitedPlantOff], x.H[CSuitedPlantUnknown], x.H[CSuitedUnknown] = 100, 10, 6, 1, 20
	x.bound()
	// 21 of 30 hours may have gone either way.
	if r := x.MechFreeShare; math.Abs(r.Value-6.0/9) > 1e-12 || math.Abs(r.Low-6.0/30) > 1e-12 || math.Abs(r.High-27.0/30) > 1e-12 {
		t.Errorf("%+v", r)
	}
}

func TestAiringBesideUnknown(t *testing.T) {
	g := &grid.Grid{StepS: 300}
	o, s, u := running.Open, running.Shut, running.Unknown
	got := shortOpenings(g, []running.State{s, o, o, s, o, u, o, s, o}, 15)
	for i, want := range []bool{false, true, true, false, false, false, false, false, true} {
		if got[i] != want {
			t.Errorf("step %d: short %v, want %v", i, got[i], want)
		}
	}
}
