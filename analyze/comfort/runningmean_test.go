package comfort

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// EN 16798-1 and EN 15251: the seven-day formula and the recursion, recomputed
// from the published equations. Powers of 0.8 would give 19.5928 and a sum that
// is not normalised 15.484: both are known mistakes.
func TestSevenDayMean(t *testing.T) {
	days := [7]float64{20, 22, 18, 21, 19, 17, 16}
	near(t, "seven days", SevenDayMeanEN(days), 19.6842, 5e-5)
	near(t, "oldest day counts 0.2", SevenDayMeanEN([7]float64{10, 10, 10, 10, 10, 10, 17}), 10.3684, 5e-5)
	near(t, "one step", NextRunningMean(23, 18, RunningMeanAlpha), 19.0, 1e-12)
	days[3] = math.NaN()
	near(t, "one day missing", SevenDayMeanEN(days), (20+0.8*22+0.6*18+0.4*19+0.3*17+0.2*16)/3.3, 1e-9)
	days[5] = math.NaN()
	if got := SevenDayMeanEN(days); !math.IsNaN(got) {
		t.Errorf("two days missing: %g, want NaN", got)
	}
}

// The recursion from the first day's mean, recomputed (alpha 0.8).
func TestRecursion(t *testing.T) {
	daily := []float64{15, 16, 18, 20, 22, 24, 25, 23, 21, 19}
	want := []float64{15, 15, 15.2, 15.76, 16.608, 17.6864, 18.94912, 20.159296, 20.727437, 20.781949}
	for i, got := range RunningMeanFrom(daily, 0.8, daily[0]) {
		near(t, "day", got, want[i], 1e-6)
	}
	if got := RunningMeanFrom(nil, 0.8, 15); len(got) != 0 {
		t.Errorf("no days: %v", got)
	}
}

// The series begins with the seven-day formula on the eighth day, leaves the
// day itself out, and starts anew after a gap.
func TestRunningMeanEN(t *testing.T) {
	nan := math.NaN()
	daily := []float64{16, 17, 19, 21, 18, 22, 20, 25, 99, 12}
	got := RunningMeanEN(daily)
	for i := range 6 {
		if !math.IsNaN(got[i]) {
			t.Errorf("day %d = %g with %d days before it, want NaN", i, got[i], i)
		}
	}
	// Day 6 has six days before it, enough by the 80 % rule.
	near(t, "six days", got[6], (22+0.8*18+0.6*21+0.5*19+0.4*17+0.3*16)/3.6, 1e-9)
	near(t, "day 7", got[7], 0.2*20+0.8*got[6], 1e-9)
	near(t, "day 8 takes day 7's mean, not its own", got[8], 0.2*25+0.8*got[7], 1e-9)
	near(t, "day 9", got[9], 0.2*99+0.8*got[8], 1e-9)

	full := [7]float64{}
	long := make([]float64, 40)
	for i := range long {
		long[i] = 15 + 5*math.Sin(float64(i))
	}
	long[20] = nan
	got = RunningMeanEN(long)
	near(t, "one missing day leaves the mean", got[21], got[20], 0)
	long[21] = nan
	got = RunningMeanEN(long)
	for i := 22; i <= 27; i++ {
		if !math.IsNaN(got[i]) {
			t.Errorf("day %d = %g, want NaN: two of its seven days are missing", i, got[i])
		}
	}
	for k := range full {
		full[k] = long[28-1-k]
	}
	near(t, "starts anew", got[28], SevenDayMeanEN(full), 1e-9)
}

// ASHRAE 55: arithmetic mean of the days before, the day itself left out.
func TestPrevailingMean(t *testing.T) {
	daily := []float64{10, 11, 12, 13, 14, 15, 16, 50, 20}
	got, err := PrevailingMean(daily, 7)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "seven days before", got[7], 13, 1e-12)
	near(t, "the day itself is out", got[8], (11+12+13+14+15+16+50)/7.0, 1e-12)
	near(t, "six of seven days", got[6], 12.5, 1e-12)
	if !math.IsNaN(got[5]) {
		t.Errorf("five of seven days = %g, want NaN", got[5])
	}
	month := make([]float64, 31)
	for i := range month {
		month[i] = 20
		if i < 6 {
			month[i] = math.NaN()
		}
	}
	got, _ = PrevailingMean(month, 30)
	near(t, "24 of 30 days", got[30], 20, 1e-12)
	month[6] = math.NaN()
	got, _ = PrevailingMean(month, 30)
	if !math.IsNaN(got[30]) {
		t.Errorf("23 of 30 days = %g, want NaN", got[30])
	}
	for _, n := range []int{0, 6, 31} {
		if _, err := PrevailingMean(daily, n); err == nil {
			t.Errorf("%d days: no error", n)
		}
	}
}

// A running mean lies between the least and the greatest day before it.
func TestMeansStayWithin(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		daily := rapid.SliceOfN(rapid.OneOf(rapid.Float64Range(-20, 35), rapid.Just(math.NaN())), 0, 60).Draw(t, "daily")
		prevailing, err := PrevailingMean(daily, 30)
		if err != nil {
			t.Fatal(err)
		}
		for name, series := range map[string][]float64{"EN": RunningMeanEN(daily), "ASHRAE": prevailing} {
			low, high := math.Inf(1), math.Inf(-1)
			for i, got := range series {
				if got < low-1e-9 || got > high+1e-9 {
					t.Fatalf("%s, day %d: %g outside %g to %g", name, i, got, low, high)
				}
				if !math.IsNaN(daily[i]) {
					low, high = math.Min(low, daily[i]), math.Max(high, daily[i])
				}
			}
		}
	})
}
