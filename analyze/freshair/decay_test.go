package freshair

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/stat"
)

// Arithmetic on the published equation (ASHRAE Fundamentals ch. 16 eq. 18):
// 2 air changes per hour from 980 ppm above 420 ppm.
func TestCleanDecay(t *testing.T) {
	hours := []float64{0, 0.25, 0.5, 0.75, 1}
	ppm := []float64{1400, 1014.400, 780.522, 638.668, 552.629}
	f, err := FitDecay(hours, ppm, 420)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(f.AirChangePerH-2) > 1e-5 || f.N != 5 || f.R2 < 1-1e-9 {
		t.Errorf("got %+v, want 2 per hour", f)
	}
	if f.LowPerH >= f.HighPerH || math.Abs(f.LowPerH-2) > 1e-4 || math.Abs(f.HighPerH-2) > 1e-4 {
		t.Errorf("interval %v to %v", f.LowPerH, f.HighPerH)
	}
}

// CDC, Guidelines for Preventing the Transmission of Mycobacterium
// tuberculosis, MMWR 1994;43(RR-13), Table S3-1: minutes to remove 90, 99 and
// 99.9 % at so many air changes per hour, printed to the minute. A decay with
// readings at these points must give the rate back, as far as the rounding of
// the table allows.
func TestPublishedPurgeTimes(t *testing.T) {
	table := []struct{ perH, min90, min99, min999 float64 }{
		{1, 138, 276, 414}, {2, 69, 138, 207}, {4, 35, 69, 104}, {6, 23, 46, 69}, {8, 17, 35, 52},
		{10, 14, 28, 41}, {12, 12, 23, 35}, {15, 9, 18, 28}, {20, 7, 14, 21}, {50, 3, 6, 8},
	}
	for _, row := range table {
		const outdoor, start = 400.0, 1e6
		ppm := []float64{outdoor + start, outdoor + start/10, outdoor + start/100, outdoor + start/1000}
		f, err := FitDecay([]float64{0, row.min90 / 60, row.min99 / 60, row.min999 / 60}, ppm, outdoor)
		if err != nil {
			t.Fatal(err)
		}
		// Half a minute in the longest time.
		if tol := row.perH * 0.6 / row.min999; math.Abs(f.AirChangePerH-row.perH) > tol+0.002*row.perH {
			t.Errorf("%v per hour: fitted %.3f, tolerance %.3f", row.perH, f.AirChangePerH, tol)
		}
	}
}

// Slope and determination against a general reference library, the interval
// against Student's t of 4 degrees of freedom, 2.776 (printed in any table of
// the distribution).
func TestFitAgainstReferenceRegression(t *testing.T) {
	hours := []float64{0, 0.1, 0.2, 0.3, 0.4, 0.5}
	ppm := []float64{1210, 1090, 1003, 905, 850, 770}
	logs := make([]float64, len(ppm))
	for i, c := range ppm {
		logs[i] = math.Log(c - 430)
	}
	alpha, beta := stat.LinearRegression(hours, logs, nil, false)
	var rss, stt float64
	for i, h := range hours {
		r := logs[i] - alpha - beta*h
		rss += r * r
		stt += (h - 0.25) * (h - 0.25)
	}
	half := 2.776 * math.Sqrt(rss/4/stt)
	f, err := FitDecay(hours, ppm, 430)
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(f.AirChangePerH+beta) > 1e-12 || math.Abs(f.R2-stat.RSquared(hours, logs, nil, alpha, beta)) > 1e-12 {
		t.Errorf("got %+v, want slope %v", f, -beta)
	}
	if math.Abs((f.HighPerH-f.LowPerH)/2-half) > 1e-3*half {
		t.Errorf("half width %v, want %v", (f.HighPerH-f.LowPerH)/2, half)
	}
}

func TestNoDecay(t *testing.T) {
	for _, c := range []struct {
		name       string
		hours, ppm []float64
	}{
		{"two readings", []float64{0, 1}, []float64{900, 700}},
		{"at outdoors", []float64{0, 1, 2}, []float64{900, 700, 420}},
		{"one instant", []float64{1, 1, 1}, []float64{900, 800, 700}},
		{"unknown", []float64{0, 1, 2}, []float64{900, math.NaN(), 700}},
	} {
		if f, err := FitDecay(c.hours, c.ppm, 420); err == nil {
			t.Errorf("%s: fitted %+v", c.name, f)
		}
	}
}

// Arithmetic on the published balance (ASHRAE Fundamentals ch. 16 eq. 16 to
// 22): 200 m3, 60 L/s, 10 people of 0.0052 L/s, 420 ppm outdoors.
func TestBuildUp(t *testing.T) {
	b := Balance{VolumeM3: 200, FlowLs: 60, GenerationLs: 0.052, OutdoorPPM: 420}
	check := func(what string, got, want, tol float64) {
		t.Helper()
		if math.Abs(got-want) > tol {
			t.Errorf("%s: %v, want %v", what, got, want)
		}
	}
	check("air change", b.AirChangePerH(), 1.08, 1e-12)
	check("steady", b.SteadyPPM(), 1286.667, 1e-3)
	check("half an hour", b.After(0.5, 420), 781.618, 1e-3)
	check("one hour", b.After(1, 420), 992.351, 1e-3)
	check("two hours", b.After(2, 420), 1186.718, 1e-3)
	check("three hours", b.After(3, 420), 1252.725, 1e-3)
	check("95 % of the way", (b.After(2.774, 420)-420)/(b.SteadyPPM()-420), 0.95, 1e-4)
}

// Hyndman & Fan 1996 type 7 is the default of two reference systems: their
// documented answers for 1 to 10 are 3.25, 5.5 and 9.55 (general reference
// libraries, from memory).
func TestQuantileType7(t *testing.T) {
	v := []float64{1, 2, 3, 4, 5, 6, 7, 8, 9, 10}
	for _, c := range []struct{ p, want float64 }{{0, 1}, {0.25, 3.25}, {0.5, 5.5}, {0.95, 9.55}, {1, 10}} {
		if got := quantile(v, c.p); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("p %v: %v, want %v", c.p, got, c.want)
		}
	}
}
