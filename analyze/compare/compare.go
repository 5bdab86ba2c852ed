// Package compare answers: did a change work? It sets two periods of one
// building against each other with the weather allowed for:
//
//  1. days.go: what each occupied day was like, from the hourly record
//  2. weather.go: days of like weather are compared; the earlier period is
//     weighted to the later one's weather, and a regression gives a second opinion
//  3. estimate.go: the differences, those of untouched zones taken off, with
//     intervals from resampled blocks of days
//     and a plain answer, or why there is none
//  4. scheduled.go: the verdict of a trial, by drawing its days again
package compare

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Span is a period of local days, both inclusive.
type Span struct{ From, To site.Date }

// Input is one audit over both periods, and what is compared.
type Input struct {
	Site          *site.Site
	Criteria      criteria.Settings
	Grid          *grid.Grid
	Calendar      *calendar.Calendar
	Outdoor       *outdoor.Outdoor
	Indoor        []indoor.Zone
	Running       *running.Result
	Exceedance    *exceedance.Result
	Record        *hours.Record
	Before, After Span
	// Untouched are zones the change did not reach (indexes into Site.Zones);
	// their difference is taken off, so that what happened to everybody is not
	// put down to the change.
	Untouched []int
	Seed      uint64
}

// Measure is what is compared.
type Measure uint8

// Measures. More is better of AchievedShare, less of all others.
const (
	// AchievedShare: achieved / (achieved + missed).
	AchievedShare Measure = iota
	// OutsideShare: share of known person-hours outside one criterion that does
	// not depend on the running state.
	OutsideShare
	// StaleShare: share of known occupied hours above the CO2 limit.
	StaleShare
	// ClashShare: share of known occupied hours with windows open and plant on.
	ClashShare
	NumMeasures
)

// String names a measure.
func (m Measure) String() string {
	return [...]string{"achieved_share", "outside_share", "stale_share", "clash_share"}[m]
}

// better is 1 where more is better, else -1.
func (m Measure) better() float64 {
	if m == AchievedShare {
		return 1
	}
	return -1
}

// Estimate is a figure with its 95 % interval.
type Estimate struct{ Value, Low, High float64 }

// Outcome is one measure in both periods, as shares.
type Outcome struct {
	Measure Measure
	// Before and After as they were, BeforeAdjusted weighted to the later
	// period's weather; AfterMatched over the days that have a counterpart.
	Before, After, BeforeAdjusted, AfterMatched float64
	// Difference is AfterMatched - BeforeAdjusted, less that of the untouched
	// zones where there are any.
	Difference Estimate
	// Untouched is the difference of the untouched zones alone.
	Untouched Estimate
	// SecondOpinion is the difference by a regression of days on weather.
	SecondOpinion Estimate
	// ProbabilityBetter is the share of resampled differences on the better
	// side.
	ProbabilityBetter float64
	Verdict           Verdict
	// Unusable says why there is no answer; empty when there is one.
	Unusable string
}

// Verdict is the plain answer.
type Verdict uint8

// Verdicts.
const (
	NoAnswer Verdict = iota
	Better
	Worse
	NotShown // the interval holds zero
)

// String names a verdict.
func (v Verdict) String() string {
	return [...]string{"no answer", "better", "worse", "not shown"}[v]
}

// Matched says how alike the weather of the two periods was.
type Matched struct {
	BeforeDays, AfterDays int // occupied days with known weather
	// BeforeShare and AfterShare are the shares of those days with a
	// counterpart in the other period.
	BeforeShare, AfterShare float64
	BeforeMeanC, AfterMeanC float64 // mean outdoor temperature of occupied hours
}

// Result is the answer.
type Result struct {
	Before, After Span
	Zones         []int // compared
	Untouched     []int
	Matched       Matched
	Outcomes      [NumMeasures]Outcome
	// Criterion is the comfort criterion of OutsideShare in words.
	Criterion string
	// Unusable says why nothing is compared; empty when something is.
	Unusable string
	Draws    int
}

// What the comparison asks for, all our assumptions.
const (
	// LeastDays is how many occupied days each period needs.
	LeastDays = 15
	// LeastMatched is the share of days that need a counterpart of like weather.
	LeastMatched = 0.5
	// BinK is how wide a class of like weather is, in K of outdoor temperature.
	BinK = 2
	// LeastInBin is how many days of each period a class needs.
	LeastInBin = 3
	// BlockDays is the length of the blocks of days that are resampled.
	BlockDays = 3
	// Draws is how often they are.
	Draws = 999
)

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Comparison of two periods",
	Question: "Did a change work?",
	Formula: "days are classed by outdoor temperature of occupied hours (2 K); within classes that hold at least 3 days of each period, the earlier period's days are weighted to the later one's; " +
		"difference of the ratios, less that of untouched zones; intervals by a circular block bootstrap of days (blocks of 3 occupied days, 999 draws) widened by Student's t for the number of blocks; " +
		"second opinion: weighted regression of daily shares on temperature, its square, suited hours and the period",
	Limits: []string{
		"at least 15 occupied days in each period, half of them with a counterpart of like weather",
		"comfort is held to one criterion that does not depend on the running state: the Indian mixed-mode model within its range, else a fixed 20 to 26 °C (our assumption)",
		"what else changed with the setting cannot be told apart without untouched zones",
		"the second opinion is a regression; no thermal model of the zones is consulted",
	},
	Sources: []string{
		method.Memory("Künsch 1989, Annals of Statistics 17:1217, and Politis & Romano 1992, blocks resampled in a circle"),
		method.Memory("post-stratification to a common distribution, e.g. Rosenbaum & Rubin 1984"),
	},
	Standing: method.OurAssumption,
}
