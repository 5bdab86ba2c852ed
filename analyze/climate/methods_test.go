package climate

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"sashlog/analyze/comfort"
	"sashlog/analyze/method"
)

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %v, want %v ± %v", what, got, want, tolerance)
	}
}

// worked is the worked case of the heat balance: 30 W/m², 0.8 W/m²K, 0.5 air
// changes per hour in a room 3 m high.
var worked = HeatBalance{GainsWm2: 30, LossWm2K: 0.8, MinAirChangePerH: 0.5, MaxAirChangePerH: 10, HeightM: 3, HeatingC: 20, CoolingC: 26, DewPointMaxC: 17}

// The equations of Axley & Emmerich 2002 and Emmerich, Polidoro & Axley 2011
// (from memory), recomputed by hand: m c_p = 0.5 · 1.2 · 1006 · 3 / 3600 =
// 0.503 W/m²K; T_hbp = 20 - 30/1.303; at 18 °C 30/8 - 0.8 = 2.950 W/m²K, and
// so on. Arithmetic on published equations.
func TestHeatBalance(t *testing.T) {
	near(t, "least air change carries", worked.MinAirChangePerH*worked.PerAirChangeWm2K(), 0.503, 1e-9)
	near(t, "balance point", worked.BalancePointC(), -3.0238, 5e-5)
	near(t, "least air change is enough to", worked.MinimumEnoughToC(), 2.9762, 5e-5)
	for _, c := range []struct{ outdoorC, conductance, perH float64 }{
		{18, 2.950, 2.9324}, {22, 6.700, 6.6600}, {24, 14.200, 14.1153},
	} {
		got := worked.RequiredAirChangePerH(c.outdoorC)
		near(t, "air change asked for", got, c.perH, 5e-5)
		near(t, "conductance asked for", got*worked.PerAirChangeWm2K(), c.conductance, 1e-9)
	}
	if !math.IsInf(worked.RequiredAirChangePerH(26), 1) || !math.IsNaN(worked.RequiredAirChangePerH(math.NaN())) {
		t.Error("at the cooling set-point no air change is enough")
	}
	for _, c := range []struct {
		outdoorC, dewC float64
		want           Need
	}{
		{-4, -6, NeedNone}, {0, -6, NeedMinimum}, {2.97, 0, NeedMinimum}, {2.98, 0, NeedMore}, {22, 17, NeedMore}, {22, 17.1, NeedTooHumid},
		{24, 10, NeedBeyond}, {24, math.NaN(), NeedBeyond}, {26, 10, NeedTooWarm}, {30, 25, NeedTooWarm},
		{22, math.NaN(), NeedUnknown}, {math.NaN(), 10, NeedUnknown}, {22, math.Inf(-1), NeedMore},
	} {
		if got := worked.Need(c.outdoorC, c.dewC); got != c.want {
			t.Errorf("%g °C, dew point %g °C: %s, want %s", c.outdoorC, c.dewC, got, c.want)
		}
	}
}

// Emmerich, Polidoro & Axley 2011 (from memory), recomputed: 6 K cooler gives
// 6.036 W/m² per air change; stored for 8 h and used for 10 h, 4.829.
func TestStorageCredit(t *testing.T) {
	near(t, "per air change", 6*worked.PerAirChangeWm2K(), 6.036, 1e-9)
	near(t, "spread over the day", worked.StorageCreditWm2PerAirChange(6, 8, 10), 4.8288, 1e-9)
	near(t, "warm nights store nothing", worked.StorageCreditWm2PerAirChange(-2, 8, 10), 0, 0)
	if !math.IsNaN(worked.StorageCreditWm2PerAirChange(6, 8, 0)) {
		t.Error("a day without use has no credit")
	}
}

// Artmann, Manz & Heiselberg 2007 (from memory): building temperature by the
// hour, and constant nights. The published sanity figure: 80 K·h at 6 air
// changes per hour in a room 2.5 m high is 400 Wh/m², 50 W/m² over 8 h, with
// air of 1000 J/kgK.
func TestClimaticCoolingPotential(t *testing.T) {
	for i, want := range []float64{27.0, 26.9148, 26.6651, 26.2678, 25.75, 25.1470, 24.5, 23.8530, 23.25, 22.7322, 22.3349, 22.0852, 22.0} {
		near(t, "building temperature", NightBuildingC(float64(19+i)), want, 5e-5)
	}
	constant := func(c float64, n int) []float64 {
		out := make([]float64, n)
		for i := range out {
			out[i] = c
		}
		return out
	}
	for _, c := range []struct {
		outdoorC float64
		samples  int
		want     float64
	}{
		{18, 13, 84.5}, {18, 12, 80.5}, {20, 13, 49.348}, {20, 12, 49.348}, {23, 13, 14.848}, {23, 12, 14.848}, {30, 12, 0},
	} {
		near(t, "constant night", ClimaticCoolingPotentialKh(constant(c.outdoorC, c.samples), 3), c.want, 5e-4)
	}
	perKelvin := 6 * 2.5 * 1.2 * 1000 / 3600
	near(t, "published sanity figure, W/m²K", perKelvin, 5.0, 1e-9)
	near(t, "Wh/m²", 80*perKelvin, 400, 1e-9)
	night := constant(18, 12)
	night[4] = math.NaN()
	if !math.IsNaN(ClimaticCoolingPotentialKh(night, 3)) {
		t.Error("a night with an unknown hour has no potential")
	}
}

// Chen, Tong & Malkawi 2017 (thresholds from memory): the synthetic eight hours
// of the outdoor band, limits 12.8 to 27.5 °C, dew point at most 17 °C: 5
// hours; by temperature alone 6; degree-hours above 26 °C 4.4.
func TestOutdoorBandHours(t *testing.T) {
	temps := []float64{11.9, 12.8, 16, 21, 24, 26, 27.4, 29}
	dews := []float64{8, 9, 12, 16.9, 17.0, 17.1, 14, 15}
	band := comfort.Band{LowC: 12.8, HighC: 27.5}
	with, without, degreeHours := 0, 0, 0.0
	for i := range temps {
		if withinBand(temps[i], dews[i], band, 17) == yes {
			with++
		}
		if withinBand(temps[i], math.Inf(-1), band, 17) == yes {
			without++
		}
		degreeHours += comfort.DegreesOver(temps[i], 26)
	}
	if with != 5 || without != 6 {
		t.Errorf("%d hours with and %d without the humidity limit, want 5 and 6", with, without)
	}
	near(t, "degree-hours above 26 °C", degreeHours, 4.4, 1e-9)
}

// EN 16798-1:2019: running mean 20 °C, category II 21.4 to 28.4 °C, limits
// included; below and above the range of validity (10 to 30 °C) the method has
// no say.
func TestAdaptiveBand(t *testing.T) {
	band := comfort.EN16798Adaptive(20, comfort.CategoryII)
	for _, c := range []struct {
		tempC float64
		want  vote
	}{{21.39, no}, {21.4, yes}, {28.4, yes}, {28.41, no}, {math.NaN(), unknown}} {
		if got := withinBand(c.tempC, 10, band, 17); got != c.want {
			t.Errorf("%g °C: %d, want %d", c.tempC, got, c.want)
		}
	}
	if withinBand(25, 10, comfort.EN16798Adaptive(31, comfort.CategoryII), 17) != outside {
		t.Error("beyond 30 °C the adaptive limits do not apply")
	}
	if withinBand(25, math.NaN(), band, 17) != unknown || withinBand(40, math.NaN(), band, 17) != no {
		t.Error("unknown humidity leaves only a failing temperature certain")
	}
}

// More gains never ask for less air, warmer air never for less, and the air
// asked for holds the cooling set-point.
func TestHeatBalanceProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := worked
		b.GainsWm2 = rapid.Float64Range(0, 80).Draw(t, "gains")
		b.LossWm2K = rapid.Float64Range(0, 3).Draw(t, "loss")
		out := rapid.Float64Range(-20, 25.9).Draw(t, "outdoors")
		more := b
		more.GainsWm2 += rapid.Float64Range(0, 40).Draw(t, "more")
		asked := b.RequiredAirChangePerH(out)
		if more.RequiredAirChangePerH(out) < asked || b.RequiredAirChangePerH(out+0.05) < asked {
			t.Fatal("more heat or warmer air asked for less air")
		}
		room := out + b.GainsWm2/(asked*b.PerAirChangeWm2K()+b.LossWm2K)
		if room > b.CoolingC+1e-9 {
			t.Fatalf("the room gets to %g °C", room)
		}
		if n := b.Need(out, 5); n == NeedMinimum && math.Abs(asked-b.MinAirChangePerH) > 1e-6 {
			t.Fatalf("least air change said to be enough at %g °C, %g asked for", out, asked)
		}
	})
}

// ASHRAE 55-2023 Appendix D, cooling effect (its published rows are tests of
// package comfort): what feels like the limit must, less its own cooling
// effect, be the limit.
func TestRaisedByEffect(t *testing.T) {
	at := raisedLimits(1.2)
	for k, v := range SpeedsMS {
		last := 0.0
		for _, limit := range []float64{22.3, 25.1, 26, 28.4, 29.7, 31} {
			got := raisedByEffectC(&at[k], limit)
			ce, ok := comfort.CoolingEffectK(comfort.Conditions{AirC: got, RadiantC: got, AirSpeedMS: v, RHPct: effectRHPct, Met: 1.2, Clo: effectClo}, comfort.SETOptions{Form: comfort.SETFormB})
			if !ok {
				t.Fatal("no effect")
			}
			near(t, "raised less its effect", got-ce, limit, 0.02)
			if got <= last {
				t.Errorf("%g m/s: a higher limit is raised to less", v)
			}
			last = got
		}
		if k > 0 && raisedByEffectC(&at[k], 27) <= raisedByEffectC(&at[k-1], 27) {
			t.Error("faster air raises the limit less")
		}
	}
	// Beyond the table nothing is made up.
	if raisedByEffectC(&at[3], 40) != 40 || raisedByEffectC(&at[3], 10) != 10 || !math.IsNaN(raisedByEffectC(&at[3], math.NaN())) {
		t.Error("limits beyond the table must stay")
	}
}

func TestDocs(t *testing.T) {
	for _, d := range Docs() {
		if d.Title == "" || d.Question == "" || d.Formula == "" || len(d.Limits) == 0 || len(d.Sources) == 0 {
			t.Errorf("incomplete: %+v", d)
		}
		if d.Standing != method.Published && d.Standing != method.FromMemory && d.Standing != method.OurAssumption {
			t.Errorf("%s: standing %q", d.Title, d.Standing)
		}
	}
}
