package comfort

import (
	"fmt"
	"math"

	"sashlog/analyze/method"
)

// RunningMeanENDoc documents [RunningMeanEN] and [SevenDayMeanEN].
var RunningMeanENDoc = method.Doc{
	Title:    "Running mean outdoor temperature (EN 16798-1)",
	Question: "Which outdoor temperature are people used to, recent days counting most?",
	Formula: "θ_rm = (1 - α) θ_ed-1 + α θ_rm-1, α = 0.8; started by " +
		"(θ_-1 + 0.8 θ_-2 + 0.6 θ_-3 + 0.5 θ_-4 + 0.4 θ_-5 + 0.3 θ_-6 + 0.2 θ_-7) / 3.8",
	Limits: []string{
		"of daily means; the day itself is not in it",
		"a missing day leaves the mean as it was; with fewer than 6 of the last 7 days it is unknown and starts anew (our rule: 80 %)",
	},
	Sources:  []string{method.Recomputed("EN 16798-1:2019, EN 15251:2007")},
	Standing: method.Published,
}

// RunningMeanAlpha is the constant of EN 16798-1.
const RunningMeanAlpha = 0.8

// leastShare is the share of days that must be there for a mean.
const leastShare = 0.8

// startWeights are the weights of the day before, two days before and so on.
// They are not powers of 0.8.
var startWeights = [7]float64{1, 0.8, 0.6, 0.5, 0.4, 0.3, 0.2}

// SevenDayMeanEN returns the approximate running mean from the daily means of
// the seven days before, latest first: daily[0] is yesterday. With one day
// missing (NaN) the other weights are scaled up; with more it is NaN.
func SevenDayMeanEN(daily [7]float64) float64 {
	sum, weight, n := 0.0, 0.0, 0
	for i, t := range daily {
		if !math.IsNaN(t) {
			sum += startWeights[i] * t
			weight += startWeights[i]
			n++
		}
	}
	if float64(n) < leastShare*7 {
		return math.NaN()
	}
	return sum / weight
}

// RunningMeanEN returns the running mean of each day from the daily means of
// the days before it; dailyC[i] and the result's [i] are the same day. It
// starts with [SevenDayMeanEN] on the first day that has enough days before
// it and goes on by recursion with [RunningMeanAlpha]. A missing day (NaN)
// leaves the mean as it was. A day with fewer than 6 of the 7 days before it
// is NaN, and after that the mean starts anew.
func RunningMeanEN(dailyC []float64) []float64 {
	out := make([]float64, len(dailyC))
	previous := math.NaN()
	for i := range dailyC {
		before, known := sevenBefore(dailyC, i)
		switch {
		case float64(known) < leastShare*7:
			previous = math.NaN()
		case math.IsNaN(previous):
			previous = SevenDayMeanEN(before)
		case !math.IsNaN(before[0]):
			previous = NextRunningMean(before[0], previous, RunningMeanAlpha)
		}
		out[i] = previous
	}
	return out
}

// sevenBefore returns the seven days before day i, latest first, NaN before
// the record begins, and how many are known.
func sevenBefore(dailyC []float64, i int) (before [7]float64, known int) {
	for k := range before {
		before[k] = math.NaN()
		if j := i - 1 - k; j >= 0 {
			before[k] = dailyC[j]
		}
		if !math.IsNaN(before[k]) {
			known++
		}
	}
	return before, known
}

// NextRunningMean returns (1 - alpha) yesterday's daily mean + alpha
// yesterday's running mean: one step of EN 16798-1 and of ASHRAE 55-2023 eq.
// J-1.
func NextRunningMean(yesterdayC, yesterdayRunningC, alpha float64) float64 {
	return (1-alpha)*yesterdayC + alpha*yesterdayRunningC
}

// RunningMeanFrom returns the running mean of each day by recursion from a
// given value for the first day. A NaN day makes all later ones NaN.
func RunningMeanFrom(dailyC []float64, alpha, firstC float64) []float64 {
	out := make([]float64, len(dailyC))
	for i := range out {
		if i == 0 {
			out[i] = firstC
			continue
		}
		out[i] = NextRunningMean(dailyC[i-1], out[i-1], alpha)
	}
	return out
}

// PrevailingMeanDoc documents [PrevailingMean].
var PrevailingMeanDoc = method.Doc{
	Title:    "Prevailing mean outdoor temperature (ASHRAE 55)",
	Question: "Which outdoor temperature are people used to, a week to a month counting alike?",
	Formula:  "arithmetic mean of the daily means of the n days before, 7 ≤ n ≤ 30; the day itself is not in it",
	Limits: []string{
		"at least 80 % of the n days must be there, else it is unknown (our rule)",
	},
	Sources:  []string{method.Public("ASHRAE 55-2023 Appendix J")},
	Standing: method.Published,
}

// PrevailingMean returns for each day the arithmetic mean of the daily means of
// the n days before it; dailyC[i] and the result's [i] are the same day.
// Missing days (NaN, or before the record) are left out; with less than 80 %
// of the n days the result is NaN. An error when n is not 7 to 30.
func PrevailingMean(dailyC []float64, n int) ([]float64, error) {
	if n < 7 || n > 30 {
		return nil, fmt.Errorf("prevailing mean over %d days: ASHRAE 55 allows 7 to 30", n)
	}
	out := make([]float64, len(dailyC))
	for i := range out {
		sum, known := 0.0, 0
		for _, t := range dailyC[max(0, i-n):i] {
			if !math.IsNaN(t) {
				sum += t
				known++
			}
		}
		out[i] = math.NaN()
		if known*5 >= n*4 {
			out[i] = sum / float64(known)
		}
	}
	return out, nil
}
