package zonemodel

import (
	"math"
	"testing"
)

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %.9g, want %.9g", what, got, want)
	}
}

// One resistance and capacity: R 0.005 K/W, C 1e7 J/K, steps of 900 s; the
// differential equation solved by hand. Arithmetic on a published form.
func TestOneConstant(t *testing.T) {
	r := rates{shut: 3600 / (0.005 * 1e7), gain: 500 * 3600 / 1e7}
	d := drive{outdoorC: 14}
	_, slow := r.constantsH(r.exchangePerH(&d, 24))
	near(t, "time constant, h", slow, 13.888888889, 1e-8)
	s := r.over(0.25, r.exchangePerH(&d, 24), &d)
	near(t, "a", s.a11, 0.98216103, 1e-8)
	air, _ := s.next(24, 0)
	near(t, "after a step", air, 23.866208, 1e-6)
	s = r.over(8, r.exchangePerH(&d, 24), &d)
	air, _ = s.next(24, 0)
	near(t, "after 8 h", air, 20.716068, 1e-6)
	near(t, "in the end", s.airC, 16.5, 1e-9)
}

// Two resistances and capacities: Ri 0.002, Ro 0.008 K/W, Ci 2e6, Ce 2e7 J/K,
// 900 s; transition and input matrices by matrix exponential. The network has
// its way outdoors through the mass alone.
func TestTwoConstants(t *testing.T) {
	r := rates{twoConstants: true, mass: 3600 / (0.002 * 2e6), back: 3600 / (0.002 * 2e7), massOut: 3600 / (0.008 * 2e7), gain: 3600 / 2e6}
	d := drive{}
	s := r.over(0.25, 0, &d) // by a gain of 1 W
	near(t, "a11", s.a11, 0.80067782, 1e-8)
	near(t, "a12", s.a12, 0.19873960, 1e-8)
	near(t, "a21", s.a21, 0.01987396, 1e-8)
	near(t, "a22", s.a22, 0.97457498, 1e-8)
	air, mass := s.next(0, 0)
	near(t, "air per W", air, 4.0330494e-4, 1e-11)
	near(t, "mass per W", mass, 4.6605862e-6, 1e-13)
	r.gain, d.outdoorC = 0, 1
	s = r.over(0.25, 0, &d) // by 1 K outdoors
	air, mass = s.next(0, 0)
	near(t, "air per K", air, 5.8257328e-4, 1e-11)
	near(t, "mass per K", mass, 5.5510633e-3, 1e-10)
}

// A scalar filter: a 0.9, q 0.1, r 0.2, x 20, P 1, readings 20.5, 17.0, 16.2;
// the textbook's recursion worked by hand.
func TestFilter(t *testing.T) {
	r := rates{shut: -math.Log(0.9), noiseAirK: math.Sqrt(0.1), noiseSensorK: math.Sqrt(0.2)}
	x := state{airC: 20, vAir: 1}
	logL := 0.0
	for k, y := range []float64{20.5, 17.0, 16.2} {
		x = r.predict(1, &drive{}, &x)
		v, variance := y-x.airC, x.vAir+0.2
		logL -= (math.Log(2*math.Pi*variance) + v*v/variance) / 2
		x.update(v, variance)
		near(t, "state", x.airC, []float64{20.049550, 17.482703, 15.959484}[k], 1e-6)
		near(t, "variance", x.vAir, []float64{0.163964, 0.107581, 0.096678}[k], 1e-6)
	}
	near(t, "log-likelihood", logL, -6.271613, 1e-6)
}
