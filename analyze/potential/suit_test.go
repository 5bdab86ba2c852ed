package potential

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
	"sashlog/ingest/grid"
)

func settings() criteria.Settings {
	return criteria.Settings{OutdoorLowC: 12.8, RiseK: 0, DewPointMaxC: 17, WindMaxMS: 10, RainDryMin: 30, OutdoorPM25Max: 35,
		MinSuitedRunMin: 30, BandLowC: 12.8, BandHighC: 27.5}
}

func f32(v ...float64) []float32 {
	out := make([]float32, len(v))
	for i := range v {
		out[i] = float32(v[i])
	}
	return out
}

func repeated(n int, v float64) []float32 {
	out := make([]float32, n)
	for i := range out {
		out[i] = float32(v)
	}
	return out
}

// TestOutdoorBand is the synthetic check for the outdoor-band method of Chen,
// Tong & Malkawi 2017 (thresholds from memory): eight hours of outdoor
// temperature and dew point, limits 12.8 to 27.5 °C, dew point at most 17 °C,
// give 5 hours; without the humidity limit 6.
func TestOutdoorBand(t *testing.T) {
	out := &outdoor.Outdoor{
		TempC:     f32(11.9, 12.8, 16, 21, 24, 26, 27.4, 29),
		DewPointC: f32(8, 9, 12, 16.9, 17.0, 17.1, 14, 15), HumidityLogged: true,
	}
	w := newWeather(settings(), &grid.Grid{N: 8, StepS: 3600, Loc: time.UTC}, out)
	count := func(v []Suit) (n int) {
		for _, s := range v {
			if s == Suited {
				n++
			}
		}
		return n
	}
	upper := repeated(8, 27.5)
	if got := count(w.verdicts(upper, true)); got != 5 {
		t.Errorf("headline rule: %d suited hours, want 5", got)
	}
	if got := count(w.verdicts(upper, false)); got != 6 {
		t.Errorf("without humidity limit: %d suited hours, want 6", got)
	}
	if got := count(w.bandVerdicts(true)); got != 5 {
		t.Errorf("plain band: %d suited hours, want 5", got)
	}
	if got := count(w.bandVerdicts(false)); got != 6 {
		t.Errorf("plain band, any humidity: %d suited hours, want 6", got)
	}
}

// TestReasons states each test of the rule and the order in which failing
// tests name a step; the rule is the project's own definition.
func TestReasons(t *testing.T) {
	nan := math.NaN()
	tests := []struct {
		name                  string
		temp, dew, wind, rain float64
		want                  Suit
	}{
		{"suits", 20, 10, 3, 0, Suited},
		{"just warm enough", 12.8, 5, 3, 0, Suited},
		{"too cold", 12.7, 5, 3, 0, TooCold},
		{"too warm before too humid", 27, 20, 3, 0, TooWarmAndMore},
		{"at the upper limit", 26, 10, 3, 0, Suited},
		{"too humid", 22, 17.1, 3, 0, TooHumid},
		{"too windy", 22, 17, 10.1, 0, TooWindy},
		{"rain", 22, 17, 10, 0.2, Rain},
		{"a failing test outranks an unknown one", 22, nan, 11, 0, TooWindy},
		{"unknown humidity", 22, nan, 3, 0, SuitUnknown},
		{"unknown rain", 22, 12, 3, nan, SuitUnknown},
		{"cold whatever else", 2, nan, nan, nan, TooCold},
		{"unknown temperature", nan, 12, 3, 0, SuitUnknown},
	}
	for _, tt := range tests {
		out := &outdoor.Outdoor{TempC: f32(tt.temp), DewPointC: f32(tt.dew), WindMS: f32(tt.wind), RainMMH: f32(tt.rain), HumidityLogged: true}
		w := newWeather(settings(), &grid.Grid{N: 1, StepS: 300, Loc: time.UTC}, out)
		if got := w.verdicts(f32(26), true)[0]; got != tt.want {
			t.Errorf("%s: %v, want %v", tt.name, got, tt.want)
		}
	}
	// Not logged is not tested, and never unknown.
	w := newWeather(settings(), &grid.Grid{N: 1, StepS: 300, Loc: time.UTC}, &outdoor.Outdoor{TempC: f32(20)})
	if got := w.verdicts(f32(26), true)[0]; got != Suited {
		t.Errorf("temperature alone: %v, want %v", got, Suited)
	}
}

// TestRainDries: the 30 minutes after rain do not suit.
func TestRainDries(t *testing.T) {
	rain := repeated(20, 0)
	rain[3] = 1
	out := &outdoor.Outdoor{TempC: repeated(20, 20), RainMMH: rain}
	w := newWeather(settings(), &grid.Grid{N: 20, StepS: 300, Loc: time.UTC}, out)
	v := w.verdicts(repeated(20, 26), true)
	for i := range v {
		want := Suited
		if i >= 3 && i <= 9 { // the wet step and six steps of 5 min after it
			want = Rain
		}
		if v[i] != want {
			t.Errorf("step %d: %v, want %v", i, v[i], want)
		}
	}
}

// TestShortRuns: runs under 30 min are too brief, unless what lies beside them
// is unknown.
func TestShortRuns(t *testing.T) {
	w := &weather{c: settings(), g: &grid.Grid{StepS: 300}}
	run := func(spec string) []Suit {
		code := map[rune]Suit{'s': Suited, 'c': TooCold, '?': SuitUnknown}
		var v []Suit
		for _, r := range spec {
			v = append(v, code[r])
		}
		return w.dropBrief(v)
	}
	spell := func(v []Suit) string {
		out := ""
		for _, s := range v {
			out += map[Suit]string{Suited: "s", TooCold: "c", SuitUnknown: "?", TooBrief: "b"}[s]
		}
		return out
	}
	for in, want := range map[string]string{
		"csssssc":  "cbbbbbc",
		"cssssssc": "cssssssc",
		"csss?c":   "c????c",
		"sssc":     "???c", // may have begun before the record
	} {
		if got := spell(run(in)); got != want {
			t.Errorf("%s: %s, want %s", in, got, want)
		}
	}
}

// Limits are inside: wind of 10 m/s, fine dust of 35 µg/m³ and a dew point of
// 17 °C suit; dust is tested where it is logged.
func TestLimitsAreInside(t *testing.T) {
	judge := func(wind, dust, dew float64) Suit {
		out := &outdoor.Outdoor{TempC: f32(20), DewPointC: f32(dew), WindMS: f32(wind), PM25: f32(dust), HumidityLogged: true}
		return newWeather(settings(), &grid.Grid{N: 1, StepS: 300, Loc: time.UTC}, out).verdicts(f32(26), true)[0]
	}
	for _, tt := range []struct {
		wind, dust, dew float64
		want            Suit
	}{
		{10, 35, 17, Suited}, {10, 35.1, 17, Polluted}, {10.1, 36, 17, TooWindy}, {10, 35, 17.1, TooHumid}, {10, math.NaN(), 17, SuitUnknown}, {3, 0, 5, Suited},
	} {
		if got := judge(tt.wind, tt.dust, tt.dew); got != tt.want {
			t.Errorf("%g m/s, %g µg/m³, dew point %g °C: %v, want %v", tt.wind, tt.dust, tt.dew, got, tt.want)
		}
	}
}

// The plain band includes its ends, and the rise is taken off the comfort
// limit of the headline only.
func TestBandAndRise(t *testing.T) {
	c := settings()
	c.RiseK = 1
	out := &outdoor.Outdoor{TempC: f32(12.7, 12.8, 25, 25.1, 27.5, 27.6), DewPointC: repeated(6, 10), HumidityLogged: true}
	w := newWeather(c, &grid.Grid{N: 6, StepS: 3600, Loc: time.UTC}, out)
	for i, want := range []Suit{TooCold, Suited, Suited, TooWarm, TooWarm, TooWarm} {
		if got := w.verdicts(repeated(6, 26), true)[i]; got != want {
			t.Errorf("headline, step %d: %v, want %v", i, got, want)
		}
	}
	for i, want := range []bool{false, true, true, true, true, false} {
		if got := w.bandVerdicts(true)[i] == Suited; got != want {
			t.Errorf("band, step %d: suited %v, want %v", i, got, want)
		}
	}
}

// Rain dries for as long as the setting says, from the last wet step on, and
// rain nobody measured may have fallen for as long.
func TestRainDriesBySetting(t *testing.T) {
	for _, tt := range []struct {
		min  float64
		wet  int
		want Suit
	}{{0, 1, Suited}, {5, 2, Suited}, {10, 3, Suited}, {12, 4, Suited}} {
		c := settings()
		c.RainDryMin, c.MinSuitedRunMin = tt.min, 0
		rain := repeated(10, 0)
		rain[2] = 0.1
		w := newWeather(c, &grid.Grid{N: 10, StepS: 300, Loc: time.UTC}, &outdoor.Outdoor{TempC: repeated(10, 20), RainMMH: rain})
		v, n := w.verdicts(repeated(10, 26), true), 0
		for _, s := range v {
			if s == Rain {
				n++
			}
		}
		if n != tt.wet || v[2+tt.wet] != tt.want {
			t.Errorf("%g min: %d wet steps, want %d", tt.min, n, tt.wet)
		}
		rain[2] = float32(math.NaN())
		w = newWeather(c, w.g, &outdoor.Outdoor{TempC: repeated(10, 20), RainMMH: rain})
		v, n = w.verdicts(repeated(10, 26), true), 0
		for _, s := range v {
			if s == SuitUnknown {
				n++
			}
		}
		if n != tt.wet {
			t.Errorf("%g min: %d unknown steps, want %d", tt.min, n, tt.wet)
		}
	}
}
