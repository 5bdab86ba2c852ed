package doubt

import (
	"math"
	"testing"
)

// Parts of 3, 4 and 12 h make 13 h together; the one of 12 h halved leaves
// sqrt(9 + 16 + 36) = 7.81 h, that of 4 h sqrt(9 + 4 + 144) = 12.53 h. Hours
// nobody can judge come first where they leave more.
func TestGains(t *testing.T) {
	r := &Result{Logged: [NumParts]bool{true, true, true, false}, UnknownHalfH: 4}
	r.Building.MissedH.HalfWidth = [NumParts]float64{3, 12, 4, 0}
	g := r.Gains()
	if len(g) != 4 || g[0].Part != OutdoorHumidity || !g[1].Unknown || g[2].Part != IndoorTemp || g[3].Part != OutdoorTemp {
		t.Fatalf("%+v", g)
	}
	if math.Abs(g[0].FromH-13) > 1e-12 || math.Abs(g[0].ToH-math.Sqrt(61)) > 1e-12 || g[1].FromH != 4 || g[1].ToH != 0 || math.Abs(g[2].ToH-math.Sqrt(157)) > 1e-12 {
		t.Errorf("%+v", g)
	}
	r.UnknownHalfH = 40
	if g = r.Gains(); !g[0].Unknown || g[0].TakesAwayPc != 100 {
		t.Errorf("%+v", g)
	}
	if g = new(Result).Gains(); len(g) != 0 {
		t.Errorf("nothing to doubt, yet %+v", g)
	}
}
