package demo

import (
	"math"
	"testing"
	"time"
)

// The invented climate is a mild one: means and spreads over three seeds.
// Bounds are ours: generous limits around temperate lowland climates (common
// practice), so that a broken generator fails and no seed does.
func TestClimate(t *testing.T) {
	for seed := uint64(1); seed <= 3; seed++ {
		start := time.Date(2025, 1, 1, 0, 0, 0, 0, time.UTC).Unix()
		n := 365 * 288
		w := makeWeather(seed, start, n)
		var year, jan, jul, rain, wet, wind, calm, global, night, swing float64
		for i := range n {
			x := float64(w.tempC[i])
			year += x / float64(n)
			switch d := i / 288; {
			case d < 31:
				jan += x / (31 * 288)
			case d >= 181 && d < 212:
				jul += x / (31 * 288)
			}
			rain += float64(w.rainMMh[i]) / 12
			if w.rainMMh[i] > 0 {
				wet += 1 / float64(n)
			}
			wind += float64(w.windMS[i]) / float64(n)
			if w.windMS[i] < 0.5 {
				calm += 1 / float64(n)
			}
			global += float64(w.globalWm2[i]) / float64(n)
			if h := i % 288 / 12; h >= 22 || h < 2 {
				night += float64(w.globalWm2[i])
			}
			if w.dewC[i] > w.tempC[i] || w.rhPct[i] > 100 || w.rhPct[i] < 5 {
				t.Fatalf("seed %d step %d: %g °C, dew %g °C, %g %%", seed, i, x, w.dewC[i], w.rhPct[i])
			}
			if w.rainMMh[i] > 0 && w.cloud[i] < rainThreshold {
				t.Fatalf("seed %d step %d: rain from a clear sky", seed, i)
			}
			if !(w.windDeg[i] >= 0 && w.windDeg[i] < 360) || w.windMS[i] < 0 || w.windMS[i] > 28 {
				t.Fatalf("seed %d step %d: wind %g m/s from %g", seed, i, w.windMS[i], w.windDeg[i])
			}
		}
		for d := range 365 {
			low, high := math.Inf(1), math.Inf(-1)
			for i := d * 288; i < (d+1)*288; i++ {
				low, high = math.Min(low, float64(w.tempC[i])), math.Max(high, float64(w.tempC[i]))
			}
			swing += (high - low) / 365
		}
		for _, c := range []struct {
			what           string
			got, low, high float64
		}{
			{"year's mean", year, 10, 14.5}, {"January", jan, 0, 9}, {"July", jul, 15.5, 25}, {"rain mm", rain, 350, 1400},
			{"raining share", wet, 0.03, 0.13}, {"wind", wind, 1.4, 4}, {"calm share", calm, 0, 0.15}, {"global", global, 100, 180},
			{"sun at night", night, 0, 0}, {"daily swing", swing, 4, 11},
		} {
			if !(c.got >= c.low && c.got <= c.high) {
				t.Errorf("seed %d: %s = %.2f, want %g to %g", seed, c.what, c.got, c.low, c.high)
			}
		}
	}
}

// On a clear day walls see the sun in the order of the day: east, south, west.
func TestFacadesFollowTheSun(t *testing.T) {
	start := time.Date(2025, 6, 1, 0, 0, 0, 0, time.UTC).Unix()
	w := makeWeather(1, start, 30*288)
	var weight, centre [4]float64
	for i := range w.n {
		for f := range 4 {
			x := float64(w.facadeWm2[f][i])
			weight[f] += x
			centre[f] += x * float64(i%288) / 12
		}
	}
	east, south, west := centre[1]/weight[1], centre[2]/weight[2], centre[3]/weight[3]
	// Solar noon lies near 11:28 UTC at 8° east.
	if !(east < south-1 && south < west-1) || math.Abs(south-11.47) > 1 {
		t.Errorf("walls are brightest at %.1f (E), %.1f (S), %.1f (W) UTC", east, south, west)
	}
	if weight[0] > weight[2] {
		t.Errorf("the north wall gets more sun than the south wall")
	}
}

func TestEaster(t *testing.T) {
	// Dates of Easter Sunday, public calendars (from memory).
	for year, want := range map[int]string{2019: "2019-04-21", 2024: "2024-03-31", 2025: "2025-04-20", 2026: "2026-04-05", 2038: "2038-04-25"} {
		if got := easter(year).Format("2006-01-02"); got != want {
			t.Errorf("Easter %d = %s, want %s", year, got, want)
		}
	}
}
