package words_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"sashlog/analyze/hours"
	"sashlog/report/internal/sample"
	"sashlog/report/words"
)

var nan = math.NaN()

// plain turns the spaces that hold a number and its unit together into common ones.
func plain(s string) string { return strings.ReplaceAll(s, "\u00a0", " ") }

func TestNumbers(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{words.Number(1234567.8, 0), "1,234,568"},
		{words.Number(-3.04, 1), "−3.0"},
		{words.Number(-0.04, 1), "0.0"},
		{words.Number(nan, 1), "–"},
		{words.Number(math.Inf(1), 0), "–"},
		{words.Hours(1286.4), "1,286 h"},
		{words.Hours(3.44), "3.4 h"},
		{words.Hours(0), "0 h"},
		{words.Hours(0.01), "<0.1 h"},
		{words.Hours(nan), "–"},
		{words.HoursBetween(217.34, 180, 260), "220 h (180 to 260)"},
		{words.HoursBetween(217.34, 181, 259), "220 h (180 to 260)"},
		{words.HoursBetween(217.34, 217.34, 217.34), "217 h"},
		{words.HoursBetween(217.34, 216, 219), "217 h (216 to 219)"},
		{words.HoursBetween(3.26, 3.0, 3.5), "3.3 h (3.0 to 3.5)"},
		{words.HoursBetween(0, 0, 0), "0 h"},
		{words.HoursBetween(0, 0, 30), "0 h (0 to 30)"},
		{words.HoursBetween(4, 0, 300), "under 100 h (0 to 300)"},
		{words.HoursBetween(nan, 180, 260), "180 to 260 h"},
		{words.HoursBetween(nan, nan, nan), "–"},
		{words.HoursBetween(5, nan, nan), "5.0 h"},
		{words.Share(0.625), "62 %"},
		{words.Share(0.001), "under 1 %"},
		{words.Share(0.999), "over 99 %"},
		{words.Share(1), "100 %"},
		{words.Share(nan), "–"},
		{words.ShareBetween(0.43, 0.41, 0.47), "43 % (41 to 47)"},
		{words.ShareBetween(0.43, 0.43, 0.43), "43 %"},
		{words.ShareBetween(0.43, 0.1, 0.9), "40 % (10 to 90)"},
		{words.Duration(1.34), "1 h 20 min"},
		{words.Duration(0.75), "45 min"},
		{words.Duration(0.004), "under 1 min"},
		{words.Duration(0), "0 min"},
		{words.Duration(2.99), "3 h"},
		{words.Duration(14.4), "14 h"},
		{words.Duration(nan), "–"},
		{words.DurationBetween(3.17, 2.85, 3.4), "3 h 10 min (2 h 50 min to 3 h 25 min)"},
		{words.DurationBetween(3.17, 3.17, 3.17), "3 h 10 min"},
		{words.DurationBetween(nan, 1, 2), "1 h to 2 h"},
		{words.DurationBetween(1, nan, nan), "1 h"},
		{words.Plural(1, "zone", "zones"), "1 zone"},
		{words.Plural(1200, "zone", "zones"), "1,200 zones"},
		{words.Zones(0), "0 zones"},
		{words.People(1), "1 person"},
		{words.People(2.5), "2.5 people"},
		{words.People(nan), "number of people not given"},
		{words.List([]string{"a"}, 0), "a"},
		{words.List([]string{"a", "b", "c"}, 0), "a, b and c"},
		{words.List([]string{"a", "b", "c", "d"}, 2), "a, b and 2 more"},
		{words.List(nil, 3), ""},
		{words.Sentence("the plant starts"), "The plant starts."},
		{words.Sentence("CO2 is low."), "CO2 is low."},
		{words.Sentence(" "), ""},
		{words.Clean("a\nb\u202ec\u0000d"), "a bc d"},
	} {
		if plain(c.got) != c.want {
			t.Errorf("got %q, want %q", plain(c.got), c.want)
		}
	}
}

// TestBoundsHold: printed bounds are rounded outwards, whatever the figures.
func TestBoundsHold(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		low := rapid.Float64Range(0, 5000).Draw(t, "low")
		v := low + rapid.Float64Range(0, 500).Draw(t, "up")
		high := v + rapid.Float64Range(0, 500).Draw(t, "more")
		s := strings.ReplaceAll(plain(words.HoursBetween(v, low, high)), ",", "")
		_, rest, ok := strings.Cut(s, " (")
		if !ok {
			return
		}
		var a, b float64
		if _, err := fmt.Sscanf(rest, "%g to %g)", &a, &b); err != nil {
			t.Fatalf("%q: %v", s, err)
		}
		if a > low+1e-6 || b < high-1e-6 {
			t.Fatalf("%v (%v to %v) printed as %q", v, low, high, s)
		}
	})
}

func TestSummary(t *testing.T) {
	s := sample.Make(sample.Options{Days: 365, Zones: 6})
	in := words.Input{Site: s.Site, Criteria: s.Criteria, Grid: s.Grid, Ledger: s.Ledger, Results: s.Results}
	lines := words.Summary(in)
	if n := len(lines); n < 8 || n > 13 {
		t.Errorf("%d lines, want about ten:\n%s", n, strings.Join(lines, "\n"))
	}
	all := strings.Join(lines, "\n")
	f := words.FrontOf(in)
	for _, x := range f.Figures {
		if !strings.Contains(all, plain(x.PerDay)) || !strings.Contains(all, plain(x.PerYear)) {
			t.Errorf("%s: %s and %s of page one are not in the summary:\n%s", x.Label, x.PerDay, x.PerYear, all)
		}
		main, _, _ := strings.Cut(x.PerDay, " (")
		if x.Label != "Open, comfortable and fresh" && !strings.Contains(f.Answer, main) {
			t.Errorf("the answer does not give %s as %s: %s", x.Label, main, f.Answer)
		}
	}
	if strings.ContainsAny(all, "\u00a0\r") {
		t.Error("a terminal gets plain spaces and no control characters")
	}
	t.Log("\n" + all)
}

// TestMuchUnknown: the answer says how much is unknown before anybody takes
// the known hours for the whole.
func TestMuchUnknown(t *testing.T) {
	s := sample.Make(sample.Options{Days: 30, Zones: 3})
	b := &s.Results.Summary.Building
	b.H[hours.CUnjudgedSuited], b.Missed.Value = 0.6*b.Suited.Value, 0
	in := words.Input{Site: s.Site, Criteria: s.Criteria, Results: s.Results}
	if a := words.Answer(in); !strings.Contains(a, "no missed hour is known") || !strings.Contains(a, "are unknown.") {
		t.Error(a)
	}
	b.H[hours.CUnjudgedSuited] = 0
	if a := words.Answer(in); !strings.Contains(a, "no hour that could have been open was missed.") {
		t.Error(a)
	}
}
