package zonemodel

import (
	"math"
	"math/rand/v2"
	"os"
	"testing"
)

// simulated is a record of the model's own form: weather with a day and with
// days unlike one another, windows opened at times that follow neither.
func simulated(r *rates, days int, rng *rand.Rand) (*series, []int32) {
	const perDay = 96
	s := &series{hours: 0.25}
	var dayOf []int32
	air, mass, weather := 22.0, 22.0, 0.0
	share, cloud := 0.0, 1.0
	for i := range days * perDay {
		h := float64(i%perDay) / 4
		if i%perDay == 0 {
			weather = 0.7*weather + 2*rng.NormFloat64()
			cloud = 0.2 + 0.8*rng.Float64()
		}
		if i%12 == 0 {
			share = float64(rng.IntN(3)) / 2
		}
		d := drive{outdoorC: 16 + weather - 5*math.Cos((h-3)/24*2*math.Pi), share: share,
			sunKWm2: cloud * math.Max(0, 0.6*math.Sin((h-6)/12*math.Pi))}
		if h >= 8 && h < 18 && (i/perDay)%7 < 5 {
			d.people = 1
		}
		s.drive = append(s.drive, d)
		if i > 0 {
			w := halfway(&s.drive[i-1], &s.drive[i])
			st := r.over(s.hours, r.exchangePerH(&w, air), &w)
			air, mass = st.next(air, mass)
			air += r.noiseAirK * rng.NormFloat64()
			mass += r.noiseMassK * rng.NormFloat64()
		}
		s.tempC = append(s.tempC, air+r.noiseSensorK*rng.NormFloat64())
		s.kind, s.learn = append(s.kind, free), append(s.learn, true)
		dayOf = append(dayOf, int32(i/perDay))
	}
	s.kind[0] = blind
	return s, dayOf
}

// Parameters come back from the model's own data, and 90 % intervals hold them
// in about 90 % of seeds. 90 % intervals from D days' scores are a little narrow
// for few days; the bound of the short run is three standard errors of a
// binomial below 85 %.
func TestParametersComeBack(t *testing.T) {
	seeds, floor := 6, 0.70
	if os.Getenv("SASHLOG_LONG") != "" {
		seeds, floor = 150, 0.85
	}
	for _, c := range []struct {
		name string
		r    rates
		f    form
	}{
		{"one constant", rates{shut: 0.05, open: 0.2, sunAir: 1.5, people: 0.3, gain: 0.15, noiseAirK: 0.05, noiseSensorK: 0.04}, form{sun: true, people: true}},
		{"two constants", rates{twoConstants: true, mass: 2, back: 0.2, shut: 0.12, open: 0.7, sunAir: 1.5, sunMass: 0.6, people: 0.8, gain: 0.6,
			noiseAirK: 0.04, noiseMassK: 0.03, noiseSensorK: 0.03}, form{twoConstants: true, sun: true, people: true}},
	} {
		covered, n := 0, 0
		var from [NumParameters]float64
		for p := range from {
			from[p] = Parameter(p).middle()
		}
		for seed := range seeds {
			s, dayOf := simulated(&c.r, 20, rand.New(rand.NewPCG(uint64(seed), 5)))
			m, err := fit(s, dayOf, c.f, &from)
			if err != nil {
				t.Fatalf("%s, seed %d: %v", c.name, seed, err)
			}
			for k, p := range m.list {
				if p >= NoiseAirK {
					continue
				}
				truth, sd := p.free(*c.r.at(p)), math.Sqrt(m.covariance.At(k, k))
				n++
				if math.Abs(m.x[k]-truth) <= wide90(m.days)*sd {
					covered++
				}
				if math.Abs(m.x[k]-truth) > 6*sd {
					t.Errorf("%s, seed %d: %s %g ± %g, is %g", c.name, seed, p, m.x[k], sd, truth)
				}
			}
		}
		share := float64(covered) / float64(n)
		t.Logf("%s: %.1f %% of %d intervals hold the parameter (nominal 90 %%)", c.name, 100*share, n)
		if share < floor {
			t.Errorf("%s: %.1f %% of intervals hold the parameter", c.name, 100*share)
		}
	}
}
