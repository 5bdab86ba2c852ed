package comfort

import (
	"math"
	"strings"
	"testing"
)

// Operative temperature, ISO 7726 and ASHRAE 55, recomputed.
func TestOperative(t *testing.T) {
	near(t, "ISO, 0.1 m/s", OperativeISO(26, 24, 0.1), 25.000, 5e-4)
	near(t, "ISO, 0.3 m/s", OperativeISO(26, 24, 0.3), 25.268, 5e-4)
	near(t, "ASHRAE, 0.3 m/s", OperativeASHRAE(26, 24, 0.3), 25.200, 1e-9)
	near(t, "ASHRAE, 0.1 m/s", OperativeASHRAE(26, 24, 0.1), 25, 1e-9)
	near(t, "ASHRAE, 0.2 m/s", OperativeASHRAE(26, 24, 0.2), 25.2, 1e-9)
	near(t, "ASHRAE, 0.6 m/s", OperativeASHRAE(26, 24, 0.6), 25.4, 1e-9)
	for _, got := range []float64{OperativeASHRAE(26, 24, 1.1), OperativeISO(26, 24, -1), OperativeISO(math.NaN(), 24, 0.1)} {
		if !math.IsNaN(got) {
			t.Errorf("got %g, want NaN", got)
		}
	}
}

// Globe of 100 mm, 53.2 °C in air of 30 °C at 0.3 m/s: 74.8 °C (from memory:
// check value of an open formula library for ISO 7726; the equation, read in a
// public text, gives it). A globe as warm as the air says the surfaces are too.
func TestRadiantFromGlobe(t *testing.T) {
	near(t, "published", RadiantFromGlobeC(53.2, 30, 0.3, 0.1), 74.8, 0.05)
	near(t, "equal", RadiantFromGlobeC(24, 24, 0.1, GlobeDiameterM), 24, 1e-9)
	near(t, "still air", RadiantFromGlobeC(26, 24, 0, GlobeDiameterM), 26+1.4*math.Pow(2/0.15, 0.25)*2/(0.95*5.67e-8*4*math.Pow(299.15, 3)), 0.02)
	if RadiantFromGlobeC(22, 24, 0.2, GlobeDiameterM) >= 22 {
		t.Error("a globe cooler than the air means colder surfaces still")
	}
	for _, x := range []float64{RadiantFromGlobeC(math.NaN(), 24, 0.1, 0.15), RadiantFromGlobeC(24, 24, -1, 0.15), RadiantFromGlobeC(24, 24, 0.1, 0), RadiantFromGlobeC(-100, 90, 5, 0.15)} {
		if !math.IsNaN(x) {
			t.Errorf("%g, want nothing", x)
		}
	}
}

// Schiavon & Lee 2013 (from memory), continuity recomputed.
func TestClothing(t *testing.T) {
	near(t, "-10 °C", ClothingClo(-10), 1.00, 0)
	near(t, "-5 °C", ClothingClo(-5), 1.00, 1e-9)
	near(t, "0 °C", ClothingClo(0), 0.818, 1e-9)
	near(t, "5 °C", ClothingClo(5), 0.636, 5e-4)
	near(t, "15 °C", ClothingClo(15), 0.5464, 5e-5)
	near(t, "just below 26 °C", ClothingClo(25.999999), 0.462, 5e-4)
	near(t, "26 °C", ClothingClo(26), 0.46, 0)
	if !math.IsNaN(ClothingClo(math.NaN())) {
		t.Error("unknown outdoor temperature gives a number")
	}
}

// ISO 7730:2005 eq. 6, recomputed.
func TestDraught(t *testing.T) {
	for _, r := range []struct{ airC, v, tu, dr float64 }{
		{22, 0.15, 40, 15.429}, {23, 0.20, 40, 20.697}, {20, 0.10, 10, 7.670},
		{25, 0.30, 50, 33.112}, {20, 0.05, 40, 0}, {20, 0, 40, 0}, {21, 0.5, 60, 100},
	} {
		near(t, "draught rate", DraughtRate(r.airC, r.v, r.tu), r.dr, 5e-4)
	}
}

// CIBSE TM52:2013 6.1.2, worked by hand: T_rm 16, T_max 27.08. Rounding comes
// before weighting.
func TestTM52(t *testing.T) {
	maxC := TM52MaxC(16, CategoryII)
	near(t, "T_max", maxC, 27.08, 1e-9)
	near(t, "T_max, I", TM52MaxC(16, CategoryI), 26.08, 1e-9)
	near(t, "T_max, III", TM52MaxC(16, CategoryIII), 28.08, 1e-9)
	temps := []float64{26.2, 27.0, 27.6, 28.3, 29.4, 30.6, 29.9, 28.6, 27.4}
	rounded := []float64{-1, 0, 1, 1, 2, 4, 3, 2, 0}
	var hourly, fine TM52
	for i, top := range temps {
		near(t, "rounded excess", TM52ExcessK(top, maxC), rounded[i], 0)
		hourly.Add(150, true, 1, top, maxC)
		for range 12 {
			fine.Add(150, true, 1.0/12, top, maxC)
		}
	}
	for _, r := range []TM52Result{hourly.Result(), fine.Result()} {
		near(t, "H_e", r.ExceededH, 6, 1e-9)
		near(t, "W_e", r.WorstDayKh, 13, 1e-9)
		near(t, "greatest excess", r.MaxExcessK, 4, 0)
		if r.Fails != [3]bool{true, true, false} || !r.Overheats || r.WorstDay != 150 {
			t.Errorf("result %+v", r)
		}
	}
	near(t, "half rounds up", TM52ExcessK(27.58, maxC), 1, 0)
	near(t, "just below half", TM52ExcessK(27.579, maxC), 0, 0)
}

// 3 % and 6 Kh are allowed, beyond them is not; days do not add up; outside
// the season criterion 1 does not count; unknown hours stay unknown.
func TestTM52Edges(t *testing.T) {
	var a TM52
	for i := range 100 {
		top := 25.0
		if i < 3 {
			top = 29 // 2 K over 27 on each of three days
		}
		a.Add(i, true, 1, top, 27)
	}
	r := a.Result()
	near(t, "share", r.ExceededShare, 0.03, 1e-12)
	near(t, "worst day", r.WorstDayKh, 2, 1e-12)
	if r.Fails != [3]bool{} || r.Overheats {
		t.Errorf("result %+v", r)
	}
	a.Add(100, true, 3, 29, 27)
	if r = a.Result(); !r.Fails[0] || r.Fails[1] {
		t.Errorf("6 Kh on one day: %+v", r)
	}
	a.Add(100, false, 0.5, 31.5, 27)
	if r = a.Result(); !r.Fails[1] || !r.Fails[2] || r.SeasonH != 103 {
		t.Errorf("raw excess of 4.5 K rounds to 5: %+v", r)
	}
	a.Add(101, true, 2, math.NaN(), 27)
	if r = a.Result(); r.UnknownH != 2 || r.SeasonH != 103 {
		t.Errorf("unknown hours: %+v", r)
	}
	empty := new(TM52).Result()
	if !math.IsNaN(empty.ExceededShare) || !math.IsNaN(empty.MaxExcessK) || empty.Overheats || empty.AnythingJudged {
		t.Errorf("nothing judged: %+v", empty)
	}
	// 1 May to 30 September; November to March in the south.
	for month, want := range map[int][2]bool{4: {false, false}, 5: {true, false}, 9: {true, false}, 10: {false, false}, 11: {false, true}, 3: {false, true}} {
		if got := [2]bool{TM52InSeason(month, false), TM52InSeason(month, true)}; got != want {
			t.Errorf("month %d: %v, want %v", month, got, want)
		}
	}
	// CIBSE TM59:2017 b: 1 % of 3285 h.
	if !TM59BedroomOK(32, 3285) || TM59BedroomOK(33, 3285) {
		t.Error("of 3285 h, 32 must pass and 33 fail")
	}
}

// ISO 7730:2005 Annex H, recomputed: limit 26, optimum 24.5 °C; EN 15251 Annex
// F degree-hours; PMV limit 0.5.
func TestLongTermIndices(t *testing.T) {
	sum, degreeHours := 0.0, 0.0
	want := []float64{0, 1, 1.3333, 1.6667, 2.3333}
	for i, top := range []float64{25.5, 26.0, 26.5, 27.0, 28.0} {
		wf := WeightByTemperature(top, 26, 24.5)
		near(t, "method B", wf, want[i], 5e-5)
		if top > 26 {
			sum += wf
		}
		degreeHours += DegreesOver(top, 26)
	}
	near(t, "method B, strictly outside", sum, 5.3333, 5e-5)
	near(t, "degree-hours", degreeHours, 3.5, 1e-12)
	near(t, "cold side", WeightByTemperature(21, 22, 24.5), 1.4, 1e-12)
	near(t, "degrees under", DegreesUnder(21, 22), 1, 0)

	sumC, sumE := 0.0, 0.0
	for _, pmv := range []float64{0.2, 0.5, 0.6, 0.8, 1.0} {
		sumC += WeightByPPD(pmv, 0.5)
		sumE += PPD(pmv)
	}
	near(t, "method C", sumC, 5.5903, 1e-4)
	near(t, "method D", sumE/5, 14.643, 5e-4)
	near(t, "method E", sumE, 73.216, 5e-4)
}

// Every method says what it is, what it asks, how, within which limits and
// where it comes from, and every source says how it is known.
func TestDocs(t *testing.T) {
	seen := map[string]bool{}
	for _, d := range Docs() {
		if d.Title == "" || d.Question == "" || d.Formula == "" || d.Standing == "" || len(d.Limits) == 0 || len(d.Sources) == 0 {
			t.Errorf("incomplete: %+v", d)
		}
		if seen[d.Title] {
			t.Errorf("twice: %s", d.Title)
		}
		seen[d.Title] = true
		for _, s := range d.Sources {
			if !strings.Contains(s, "read in a public text") && !strings.Contains(s, "from memory") {
				t.Errorf("%s: source without standing: %s", d.Title, s)
			}
		}
	}
}
