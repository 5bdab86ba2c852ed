package demo

import (
	"math"
	"testing"
	"time"
)

// column returns a floor's column on the truth's steps, NaN where nothing was
// logged. Rows are taken in order; the gap of the first floor is known.
func column(t *testing.T, dir, log, name string, tr *Truth) []float64 {
	t.Helper()
	head, rows := table(t, dir, log, ';')
	k, ok := head[name]
	if !ok {
		t.Fatalf("%s has no column %q", log, name)
	}
	out := make([]float64, 0, tr.N)
	gap := fault(t, tr, FaultMissing)
	next := 0
	for i := range tr.N {
		at := tr.StartUTC + int64(i)*stepS
		if log == floorFile(1) && at >= gap.FromUTC && at < gap.ToUTC {
			out = append(out, math.NaN())
			continue
		}
		out = append(out, number(t, rows[next][k]))
		next++
	}
	if next != len(rows) {
		t.Fatalf("%s: %d rows, want %d", log, len(rows), next)
	}
	return out
}

func fault(t *testing.T, tr *Truth, kind FaultKind) Fault {
	t.Helper()
	for _, f := range tr.Faults {
		if f.Kind == kind {
			return f
		}
	}
	t.Fatalf("no %s planted", kind)
	return Fault{}
}

// spread returns mean and greatest absolute difference of logged and true
// values over the steps that keep holds for.
func spread(logged []float64, truth func(i int) float64, keep func(i int) bool) (mean, worst float64, n int) {
	for i, x := range logged {
		if math.IsNaN(x) || !keep(i) {
			continue
		}
		d := x - truth(i)
		mean += d
		worst = math.Max(worst, math.Abs(d))
		n++
	}
	return mean / float64(n), worst, n
}

func TestPlantedFaults(t *testing.T) {
	dir, tr := wholeYear(t)
	inside := func(f Fault) func(int) bool {
		return func(i int) bool {
			at := tr.StartUTC + int64(i)*stepS
			return at >= f.FromUTC && at < f.ToUTC
		}
	}
	outside := func(f Fault) func(int) bool {
		in := inside(f)
		return func(i int) bool { return !in(i) }
	}
	always := func(int) bool { return true }

	// A clean zone reads the truth: 0.3 K and 45 ppm are several times the
	// noise and offset its sensors are given.
	z := tr.Zone("L2.04")
	if !tr.Clean("L2.04") || tr.Clean("L2.05") {
		t.Error("L2.04 should be clean and L2.05 not")
	}
	if m, w, n := spread(column(t, dir, floorFile(2), "F2_R04_TMP [°C]", tr), z.wallSensorC, always); n < 105000 || math.Abs(m) > 0.2 || w > 0.6 {
		t.Errorf("clean temperature: mean %g, worst %g, n %d", m, w, n)
	}
	if m, w, n := spread(column(t, dir, floorFile(2), "F2_R04_CO2 [ppm]", tr), func(i int) float64 { return float64(z.CO2PPM[i]) }, always); n < 105000 || math.Abs(m) > 30 || w > 70 {
		t.Errorf("clean CO2: mean %g, worst %g, n %d", m, w, n)
	}

	f := fault(t, tr, FaultFahrenheit)
	z = tr.Zone(f.Zones[0])
	if m, w, _ := spread(column(t, dir, floorFile(1), f.Column, tr), func(i int) float64 { return z.wallSensorC(i)*1.8 + 32 }, always); math.Abs(m) > 0.4 || w > 1.1 {
		t.Errorf("Fahrenheit: mean %g, worst %g °F", m, w)
	}

	f = fault(t, tr, FaultFrozen)
	z = tr.Zone(f.Zones[0])
	logged := column(t, dir, floorFile(1), f.Column, tr)
	values := map[float64]int{}
	for i, x := range logged {
		if inside(f)(i) && !math.IsNaN(x) {
			values[x]++
		}
	}
	if len(values) != 1 {
		t.Errorf("frozen sensor shows %d values", len(values))
	}
	if _, w, _ := spread(logged, z.wallSensorC, outside(f)); w > 0.6 {
		t.Errorf("frozen sensor is off by %g K outside its fault", w)
	}
	if days := (f.ToUTC - f.FromUTC) / 86400; days < 14 {
		t.Errorf("frozen for %d days, want weeks", days)
	}

	f = fault(t, tr, FaultMissing)
	if h := (f.ToUTC - f.FromUTC) / 3600; h != 14*24 || len(f.Zones) != 4 {
		t.Errorf("missing: %d h in %v", h, f.Zones)
	}

	f = fault(t, tr, FaultCO2Drift)
	z = tr.Zone(f.Zones[0])
	truth := func(i int) float64 { return float64(z.CO2PPM[i]) }
	logged = column(t, dir, floorFile(3), f.Column, tr)
	if m, _, _ := spread(logged, truth, outside(f)); math.Abs(m) > 30 {
		t.Errorf("drifting sensor is off by %g ppm outside its drift", m)
	}
	last := func(i int) bool {
		at := tr.StartUTC + int64(i)*stepS
		return at >= f.ToUTC-7*86400 && at < f.ToUTC
	}
	if m, _, _ := spread(logged, truth, last); m < 180 || m > 260 {
		t.Errorf("drift reaches %g ppm", m)
	}

	f = fault(t, tr, FaultReturnDuct)
	z = tr.Zone(f.Zones[0])
	logged = column(t, dir, floorFile(3), f.Column, tr)
	room := func(i int) float64 { return float64(z.AirC[i]) }
	steady := func(state bool) func(int) bool {
		return func(i int) bool {
			for k := max(0, i-12); k <= i; k++ {
				if (z.Plant[k] != codeOff) != state {
					return false
				}
			}
			return z.Occupied[i] == 1
		}
	}
	if m, _, n := spread(logged, room, steady(true)); n < 1000 || math.Abs(m) > 0.6 {
		t.Errorf("return duct with the fan on: mean difference %g K, n %d", m, n)
	}
	if m, _, n := spread(logged, room, steady(false)); n < 1000 || m < 0.8 {
		t.Errorf("return duct with the fan off: mean difference %g K, n %d", m, n)
	}
}

// The own logger's file is an hour ahead for its month: shifted back it fits
// the truth, unshifted it does not.
func TestLoggerAnHourAhead(t *testing.T) {
	dir, tr := wholeYear(t)
	f := fault(t, tr, FaultClock)
	z := tr.Zone(f.Zones[0])
	loc, _ := time.LoadLocation(zoneName)
	_, rows := table(t, dir, "logs/logger206.csv", ',')
	var raw, shifted float64
	n, previous := 0, int64(0)
	for _, r := range rows {
		local, err := time.ParseInLocation("2006-01-02 15:04:05", r[0], loc)
		if err != nil {
			t.Fatal(err)
		}
		at := local.Unix()
		if m := local.Month(); m >= 6 && m <= 7 {
			if at <= previous {
				t.Fatalf("%s: rows go back in time", r[0])
			}
			previous = at
		}
		if at < f.FromUTC+3600 || at >= f.ToUTC-3600 {
			continue
		}
		i := int((at - tr.StartUTC) / stepS)
		co2 := number(t, r[3])
		raw += math.Pow(co2-float64(z.CO2PPM[i]), 2)
		shifted += math.Pow(co2-float64(z.CO2PPM[i-12]), 2)
		n++
	}
	if n < 8000 || !(shifted < raw/3) {
		t.Errorf("squared difference %g as written, %g shifted back, n %d", raw, shifted, n)
	}
}

// Without faults the logs are honest and the list is empty.
func TestNoFaults(t *testing.T) {
	tr, err := Simulate(Options{Seed: 1, Days: 1})
	if err != nil {
		t.Fatal(err)
	}
	if len(tr.Faults) != 0 {
		t.Errorf("%d faults planted", len(tr.Faults))
	}
}
