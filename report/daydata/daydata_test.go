package daydata

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/report/internal/sample"
	"sashlog/report/privacy"
)

func input(s sample.Sample) Input {
	return Input{Site: s.Site, Criteria: s.Criteria, Grid: s.Grid, Results: s.Results, Rule: privacy.For(s.Site), Outcomes: int(hours.NumClasses),
		Outcome: func(z, i int) int { return int(s.Results.Hours.Class[z][i]) },
		Label:   func(z int) string { return s.Site.Zones[z].ID }}
}

func made(t *testing.T, in Input) *Data {
	t.Helper()
	d, err := Make(in)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// Any column comes back as it was packed.
func TestRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 300).Draw(t, "steps")
		value := rapid.OneOf(rapid.Int32Range(-400, 400), rapid.Int32Range(-1e8, 1e8), rapid.Just(int32(missing)))
		series := []Series{{"a", 1}, {"b", 1}, {"c", 1}}
		columns := make([]column, len(series))
		for k := range columns {
			if rapid.Bool().Draw(t, "logged") {
				columns[k] = rapid.SliceOfN(value, n, n).Draw(t, "values")
			}
		}
		got, err := Unpack(block(columns), series, n)
		if err != nil {
			t.Fatal(err)
		}
		for k, c := range columns {
			if (c == nil) != (got[k] == nil) {
				t.Fatalf("series %d: logged %v, came back %v", k, c != nil, got[k] != nil)
			}
			for i, v := range c {
				if v == missing && !math.IsNaN(got[k][i]) || v != missing && got[k][i] != float64(v) {
					t.Fatalf("series %d step %d: packed %d, came back %g", k, i, v, got[k][i])
				}
			}
		}
	})
}

// A broken block is an error, whatever is broken.
func TestBroken(t *testing.T) {
	series := []Series{{"a", 1}}
	good := block([]column{{1, 2, missing, 400}})
	for name, text := range map[string]string{"empty": "", "no base64": "%%%", "cut": good[:len(good)-8], "too few": block([]column{{1, 2}}), "too many": block([]column{{1, 2, 3, 4, 5}})} {
		if _, err := Unpack(text, series, 4); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

// What the blocks hold is what the results hold, to the stated rounding.
func TestWhatIsPacked(t *testing.T) {
	s := sample.Make(sample.Options{Days: 40, Zones: 3, People: []float64{9, 9, 9}})
	d := made(t, input(s))
	if len(d.Months) != 3 || d.Months[1] != 31*48 || d.Months[2] != 40*48 || len(d.Days) != 41 || d.FirstDay != "2031-05-01" || d.StepS != 1800 {
		t.Fatalf("months %v, %d days from %s at %d s", d.Months, len(d.Days)-1, d.FirstDay, d.StepS)
	}
	for z, zone := range d.Zones {
		for m := range zone.Blocks {
			from, to := d.Months[m], d.Months[m+1]
			got, err := Unpack(zone.Blocks[m], d.Zone, to-from)
			if err != nil {
				t.Fatal(err)
			}
			for i := from; i < to; i++ {
				at := func(key string) float64 { return valueOf(got, d.Zone, key, i-from) }
				if v, want := at("temp_c"), float64(s.Results.Indoor[z].OperativeC[i]); math.Abs(v-want) > 0.0501 {
					t.Fatalf("zone %d step %d: %g °C, want %g", z, i, v, want)
				}
				if v, want := at("co2_ppm"), float64(s.Results.Indoor[z].CO2PPM[i]); math.Abs(v-want) > 5.001 {
					t.Fatalf("zone %d step %d: %g ppm, want %g", z, i, v, want)
				}
				if v, want := at("running"), s.Results.Running.Zones[z].State[i]; running.State(v) != want {
					t.Fatalf("zone %d step %d: %v, want %v", z, i, v, want)
				}
				if v, want := at("outcome"), s.Results.Hours.Class[z][i]; hours.Class(v) != want {
					t.Fatalf("zone %d step %d: outcome %v, want %v", z, i, v, want)
				}
			}
		}
	}
	got, err := Unpack(d.Weather[0], d.Outdoor, d.Months[1])
	if err != nil || math.Abs(got[0][100]-float64(s.Results.Outdoor.TempC[100])) > 0.0501 {
		t.Errorf("outdoors %v %v, want %g", got[0][100], err, s.Results.Outdoor.TempC[100])
	}
}

func valueOf(block [][]float64, series []Series, key string, i int) float64 {
	for k := range series {
		if series[k].Key == key && block[k] != nil {
			return block[k][i]
		}
	}
	return math.NaN()
}

// A small budget makes steps coarser, a tiny one is refused; means and longest
// states stand for the finer steps.
func TestBudget(t *testing.T) {
	s := sample.Make(sample.Options{Days: 14, Zones: 2, StepS: 300, People: []float64{9, 9}})
	in := input(s)
	whole := made(t, in)
	if whole.StepS != 300 {
		t.Fatalf("%d s although everything fits", whole.StepS)
	}
	in.Budget = whole.Bytes() - 1
	coarse := made(t, in)
	if coarse.StepS != 900 || coarse.Bytes() > in.Budget || len(coarse.Days) != 15 {
		t.Fatalf("%d s, %d bytes of %d", coarse.StepS, coarse.Bytes(), in.Budget)
	}
	got, err := Unpack(coarse.Zones[0].Blocks[0], coarse.Zone, coarse.Months[1])
	if err != nil {
		t.Fatal(err)
	}
	for _, i := range []int{0, 500, 14*96 - 1} {
		mean := 0.0
		for k := range 3 {
			mean += float64(s.Results.Indoor[0].OperativeC[3*i+k]) / 3
		}
		if v := valueOf(got, coarse.Zone, "temp_c", i); math.Abs(v-mean) > 0.0501 {
			t.Errorf("step %d: %g °C, want the mean %g", i, v, mean)
		}
		a := s.Results.Running.Zones[0].State[3*i : 3*i+3]
		want := a[0]
		if a[1] == a[2] {
			want = a[1]
		}
		if v := valueOf(got, coarse.Zone, "running", i); running.State(v) != want {
			t.Errorf("step %d: %v, want the longest of %v", i, v, a)
		}
	}
	in.Budget = 100
	if _, err := Make(in); !errors.Is(err, ErrTooMuch) {
		t.Errorf("got %v, want too much", err)
	}
}

// Where a few zones show that a width cannot fit, the next is tried, with the
// same result; one that just fits is not given up.
func TestHopeless(t *testing.T) {
	people := make([]float64, 14)
	for i := range people {
		people[i] = 9
	}
	in := input(sample.Make(sample.Options{Days: 10, Zones: 14, StepS: 300, People: people}))
	whole := made(t, in).Bytes()
	for _, c := range []struct {
		budget int
		step   int64
	}{{whole, 300}, {whole * 9 / 10, 900}, {whole * 7 / 10, 900}} {
		in.Budget = c.budget
		if d := made(t, in); d.StepS != c.step || d.Bytes() > c.budget {
			t.Errorf("budget %d of %d: steps of %d s in %d bytes, want %d s", c.budget, whole, d.StepS, d.Bytes(), c.step)
		}
	}
}

// Rooms for one to three people, and rooms that open through them, have no
// steps, no people, no CO2 and no windows; with measured presence they are told
// by week. privacy: internal shows all.
func TestPrivacy(t *testing.T) {
	s := sample.Make(sample.Options{Days: 21, Zones: 4, People: []float64{2, 9, 9, 3}})
	s.Site.Zones[1].Openings = site.Openings{Through: []string{s.Site.Zones[0].ID}}
	s.Site.Zones[3].OccupancySource = site.ByPresence
	d := made(t, input(s))
	for _, series := range d.Span {
		for _, never := range []string{"people", "occupied", "co2", "open", "running", "plant"} {
			if strings.Contains(series.Key, never) {
				t.Errorf("a protected room tells %s", series.Key)
			}
		}
	}
	for z, want := range []struct {
		protected, weekly bool
		spans             int
	}{{true, false, 21}, {true, false, 21}, {false, false, 0}, {true, true, 4}} { // 2031-05-01 is a Thursday
		got := d.Zones[z]
		if got.Protected != want.protected || got.Weekly != want.weekly || got.SpanCount != want.spans || (len(got.Blocks) > 0) == want.protected {
			t.Errorf("zone %d: protected %v, by week %v, %d spans, %d blocks; want %+v", z, got.Protected, got.Weekly, got.SpanCount, len(got.Blocks), want)
		}
	}
	spans, err := Unpack(d.Zones[0].Spans, d.Span, 21)
	if err != nil {
		t.Fatal(err)
	}
	for day := range 21 {
		minutes := 0.0
		for k, series := range d.Span {
			if strings.HasPrefix(series.Key, "outcome_") {
				minutes += spans[k][day]
			}
		}
		if spans[0][day] != float64(day) || minutes != 1440 {
			t.Errorf("day %d: number %g with %g minutes", day, spans[0][day], minutes)
		}
	}
	s.Site.Privacy.Internal = true
	for z, zone := range made(t, input(s)).Zones {
		if zone.Protected || len(zone.Blocks) != 1 {
			t.Errorf("zone %d is protected although the report is internal", z)
		}
	}
}

// The same results give the same bytes, however many cores share the work.
func TestSameBytes(t *testing.T) {
	s := sample.Make(sample.Options{Days: 14, Zones: 6})
	a, b := made(t, input(s)), made(t, input(s))
	for z := range a.Zones {
		if strings.Join(a.Zones[z].Blocks, " ") != strings.Join(b.Zones[z].Blocks, " ") || a.Zones[z].Spans != b.Zones[z].Spans {
			t.Errorf("zone %d differs", z)
		}
	}
}

// Days and months begin at local midnight, through the days of 23 and 25 hours
// (Europe/Zurich: last Sundays of March and October 2031).
func TestClock(t *testing.T) {
	zurich, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	s := sample.Make(sample.Options{Days: 365, Zones: 1, StepS: 3600, People: []float64{9}})
	s.Grid.Loc = zurich
	d := made(t, input(s))
	for day, want := range map[int]int{0: 24, 87: 24, 88: 23, 89: 24, 298: 25, 299: 24} {
		if got := d.Days[day+1] - d.Days[day]; got != want {
			t.Errorf("day %d has %d hours, want %d", day, got, want)
		}
	}
	if len(d.Days) != 366 || len(d.Months) != 13 || d.Months[3] != d.Days[90] || len(d.Offsets) != 3 || d.Offsets[1][1] != 7200 || d.Offsets[2][1] != 3600 {
		t.Errorf("%d days, months %v, offsets %v", len(d.Days)-1, d.Months, d.Offsets)
	}
}

func BenchmarkMake(b *testing.B) {
	in := input(sample.Make(sample.Options{Days: 365, Zones: 4, StepS: 300, People: []float64{9, 9, 9, 9}}))
	for b.Loop() {
		d, err := Make(in)
		if err != nil {
			b.Fatal(err)
		}
		b.ReportMetric(float64(d.Bytes()), "bytes")
	}
}
