package breeze

import (
	"math"
	"math/rand/v2"
	"testing"

	"sashlog/analyze/running"
)

// The interval of a group holds the median that its rates are drawn around, 95
// times in 100 or more (a median by order statistics is never below that): the
// sample's own median, by which rates are made relative, is taken along.
func TestGroupIntervals(t *testing.T) {
	held, judged := 0, 0
	for seed := range uint64(400) {
		rng := rand.New(rand.NewPCG(seed, 2))
		in := fixture(200)
		for day := range 200 {
			i := day * 24
			factor := 1.0
			if day%5 == 0 { // 40 rates with a strong wind bring twice as much
				in.Outdoor.WindMS[i], in.Outdoor.WindMS[i+1], factor = 5, 5, 2
			}
			in.Rates = append(in.Rates, Rate{FromStep: i, ToStep: i + 2, AirChangePerH: 2 * factor * math.Exp(0.3*rng.NormFloat64())})
		}
		d := Catch(in).Drive
		strong, usual := d.Speeds[4], d.Speeds[2]
		if strong.Rates() != 40 || usual.Rates() != 160 {
			t.Fatalf("%d and %d rates", strong.Rates(), usual.Rates())
		}
		judged++
		// Relative to the other group, the sample's own median drops out.
		if x := 2 * usual.Median; strong.Low <= x && x <= strong.High {
			held++
		}
	}
	// 95 % or more expected; at 95 %, fewer than 364 of 400 come once in 1000
	// (binomial). The other group's own spread is a quarter of it in variance.
	if held < 355 {
		t.Errorf("the interval held the ratio in %d of %d draws", held, judged)
	}
}

// Days and decays of a zone differ in level, and each is held against its own
// median; the wind of a day is that of its open steps alone.
func TestDaysBesideDecays(t *testing.T) {
	in := fixture(24)
	state, w := in.Running.Zones[0].State, in.Outdoor.WindMS
	for day := range 24 {
		i := day * 24
		for h := 12; h < 24; h++ { // shut and stormy in the afternoon
			state[i+h], w[i+h] = running.Shut, 9
		}
		rate := 2.0
		if day%2 == 0 {
			rate = 3
			for h := range 12 {
				w[i+h] = 4.5
			}
		}
		in.Rates = append(in.Rates, Rate{Day: true, FromStep: i, ToStep: i + 24, AirChangePerH: 10 * rate}, Rate{FromStep: i, ToStep: i + 4, AirChangePerH: rate})
	}
	d := Catch(in).Drive
	if g := d.Speeds[4]; g.Days != 12 || g.Decays != 12 || g.Zones != 1 {
		t.Errorf("%+v", g)
	}
	near(t, "windy", d.Speeds[4].Median/d.Speeds[2].Median, 1.5, 1e-9)
	near(t, "interval without spread", d.Speeds[4].High, d.Speeds[4].Low, 1e-9)
	if d.Days != 24 || len(d.Zones) != 1 || !d.Driven {
		t.Errorf("%+v", d)
	}
}

// Too few, too different, on too few days, or from nowhere: counted, not judged.
func TestDriveRefuses(t *testing.T) {
	in := fixture(5)
	for day, rate := range []float64{0.2, 2, 20, 2, 2} {
		i := day * 24
		in.Rates = append(in.Rates, Rate{FromStep: i, ToStep: i + 4, AirChangePerH: rate})
		if day < 3 {
			in.Outdoor.WindMS[i] = 6 // mean 3
		}
		if day > 2 {
			in.Outdoor.WindDirDeg[i], in.Outdoor.WindDirDeg[i+1] = 0, 350 // the wind turns half way
		}
	}
	in.Rates = append(in.Rates, Rate{Day: true, FromStep: 0, ToStep: 4, AirChangePerH: 7})
	d := Catch(in).Drive
	if g := d.Speeds[3]; g.Rates() != 3 || !math.IsNaN(g.Median) || !math.IsNaN(g.MedianPerH) {
		t.Errorf("three rates from 0.2 to 20: %+v", g)
	}
	if g := d.Speeds[2]; g.Rates() != 2 || !math.IsNaN(g.Median) {
		t.Errorf("two rates: %+v", g)
	}
	if !math.IsNaN(d.SlopePerMS) || d.Driven || d.Days != 5 {
		t.Errorf("slope from five days: %+v", d)
	}
	if d.Sides[3].Rates() != 2 || d.Alone != 1 {
		t.Errorf("turning wind: %+v, alone %d", d.Sides[3], d.Alone)
	}
}
