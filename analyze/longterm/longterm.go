// Package longterm answers: how did each zone fare over the period by the
// published long-term indices of comfort, and was anybody always worse off
// than the average shows? The formulas are those of package comfort; limits
// per step are those of package exceedance.
package longterm

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/comfort"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the indices are worked out from.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Calendar   *calendar.Calendar
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Predicted  *predicted.Result
	Exceedance *exceedance.Result
}

// Sides are a figure of the warm and of the cool side.
type Sides struct{ Warm, Cool float64 }

// Zone is one zone's indices over occupied time of the period. Steps without
// a temperature or a limit are in UnknownH and in no index.
type Zone struct {
	KnownH, UnknownH float64
	// ISO 7730 Annex H against the headline limits: A hours outside, B hours
	// weighted by 1 + distance / (limit - middle of the limits).
	OutsideH, WeightedH Sides
	// ISO 7730 Annex H by the predicted mean vote, in the VoteH hours within
	// the range the vote is given for: C hours weighted by PPD over the PPD at
	// the category's limit, D mean PPD in per cent, E sum of PPD in per cent
	// times hours.
	VoteH, NoVoteH float64
	PPDWeightedH   Sides
	MeanPPDPct     float64
	SumPPDPctH     float64
	// TM52 is the outcome of its three criteria against EN 15251's upper lines.
	// TM52Date is the day with the greatest weighted exceedance.
	TM52     comfort.TM52Result
	TM52Date site.Date
	// TM52OutsideH are occupied hours with a running mean beyond 10 to 30 °C,
	// the range of EN 15251's lines; they enter none of the three criteria.
	TM52OutsideH float64
	Home         Home
	// Deviations say how the time outside spreads over days, weeks, months and
	// the whole period.
	Deviations []Deviation
}

// Deviation is the occupied time outside the headline limits in one kind of
// span. Only spans of which at least half the occupied time is known count
// (our assumption).
type Deviation struct {
	Span       Span
	Spans      int     // that count
	WorstShare float64 // of occupied time outside, NaN without any span
	WorstFrom  site.Date
	Over3      int // spans with more than 3 % of occupied time outside
	Over5      int // spans with more than 5 %
}

// Span is a stretch of time deviations are counted in.
type Span uint8

// Spans.
const (
	Day Span = iota
	Week
	Month
	Period
	numSpans
)

// String names the span.
func (s Span) String() string { return [...]string{"day", "week", "month", "period"}[s] }

// Spread says whether an average hides people who are worse off. Shares are
// of people (zones weighted by WeightedBy) whose temperature and limits are
// known in a step.
type Spread struct {
	WeightedBy string
	// KnownH: hours with anybody's comfort known; PersonOutsideShare: share of
	// known person-hours outside, with bounds from the unknown ones.
	KnownH             float64
	PersonOutsideShare exceedance.Range
	PersonWarmShare    float64
	PersonCoolShare    float64
	// AverageInsideH: hours in which the weighted mean temperature lies within
	// the weighted mean limits; HiddenH of them have at least 20 % of people
	// outside.
	AverageInsideH, HiddenH float64
	// Hidden are the zones outside in those hours, most person-hours first.
	Hidden []HiddenZone
}

// HiddenZone is a zone that is outside while the average is inside.
type HiddenZone struct {
	Zone         int
	WarmH, CoolH float64
	PersonH      float64 // NaN without a number of people
}

// Result is the answer for all zones.
type Result struct {
	Zones  []Zone
	Spread Spread
	// Southern says that TM52's season was taken as November to March.
	Southern bool
	// RoomsWithin3 and RoomsWithin5 are shares of zones (by floor area where
	// all are known) with at most 3 % and 5 % of known occupied time outside.
	RoomsWithin3, RoomsWithin5 float64
	RoomsBy                    string
}

// hiddenShare is the share of people outside from which an average hides
// something. Our assumption.
const hiddenShare = 0.2

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Long-term comfort: indices of a season, allowed deviations, and people the average hides",
	Question: "How long and how badly was a zone outside comfort over the period, and is anybody always worse off than the average?",
	Formula: "ISO 7730 Annex H, methods A to E; TM52 criteria 1 to 3 (two failures: overheating); TM59 in homes; share of occupied time outside per day, week, month and period against 3 % and 5 %; " +
		"hours in which at least 20 % of people are outside while the weighted mean temperature lies within the weighted mean limits",
	Limits: []string{
		"methods A and B use the headline limits; the optimum of method B is the middle of the limits (our assumption)",
		"methods C to E leave out steps in which the predicted mean vote is outside the range of ISO 7730",
		"TM52 was written for buildings without cooling: here a calculation over all occupied hours; its season in the south is November to March (our assumption); days beyond a running mean of 10 to 30 °C, where EN 15251's lines end, are left out and counted",
		"TM59 only where the site file names a bedroom, living room or kitchen: of the hours audited, as far as known, not of a whole year where less was audited (our reading); 3 % of occupied hours above 26 °C where a zone has no opening",
		"spans of which less than half the occupied time is known do not count",
	},
	Sources: []string{
		method.Memory("ISO 7730:2005 Annex H"), method.Public("CIBSE TM52:2013 section 6.1.2"), method.Public("CIBSE TM59:2017, criteria a and b; homes with mostly mechanical ventilation in outline"),
		method.Memory("EN 15251:2007 Annex G, 3 % and 5 % of occupied time; CEN/TR 16798-2:2019 keeps the idea"),
	},
	Standing: method.FromMemory,
}
