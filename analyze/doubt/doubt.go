// Package doubt answers: how far could the sensors' own errors move the
// answer, which of them most, and what would shrink the doubt? It judges the
// occupied time again with errors added to the readings. The result is an
// interval, something else than the bounds that unknown hours leave: bounds
// hold whatever the unknown hours were, an interval holds nine times in ten if
// the sensors are as accurate as assumed. A logged year is counted in full, so
// days are not resampled here.
package doubt

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/hours"
	"sashlog/analyze/method"
)

// Input is what the figures rest on.
type Input struct {
	hours.Input
	Calendar *calendar.Calendar
	// Weights are the zones' weights in the building's figures.
	Weights []float64
	// Seed makes the draws; the same seed gives the same intervals.
	Seed uint64
}

// Part is a source of error.
type Part uint8

// Parts. Outdoor sensors are shared by all zones; each zone has its own error
// indoors, and its own of CO2, which takes in the doubt of the outdoor level.
const (
	OutdoorTemp Part = iota
	OutdoorHumidity
	IndoorTemp
	CO2
	NumParts
)

// String names a part.
func (p Part) String() string {
	return [...]string{"outdoor temperature", "outdoor humidity", "indoor temperature", "CO2"}[p]
}

// Interval is a figure with its 90 % interval from the accuracy of sensors.
// HalfWidth is the half width each part alone would give.
type Interval struct {
	Value, Low, High float64
	HalfWidth        [NumParts]float64
}

// Figures are the hours of a zone or of the average occupant.
type Figures struct {
	SuitedH, AchievedH, AchievedOKH, MissedH, NotNeededH Interval
	// AchievedShare is achieved / (achieved + missed).
	AchievedShare Interval
}

// Result is the answer.
type Result struct {
	Building Figures
	Zones    []Figures
	// Logged says which parts rest on a logged quantity; others add no error
	// here, because nothing was judged by them.
	Logged [NumParts]bool
	// Assumed says in words what accuracy each part was given.
	Assumed [NumParts]string
	// UnknownHalfH is half the width of the bounds that unknown hours leave
	// for the missed hours of the average occupant, to stand beside the parts.
	UnknownHalfH float64
	Draws        int
}

// Largest is the part with the greatest half width of the building's achieved
// share, the first of several.
func (r *Result) Largest() Part {
	best := Part(0)
	for p, w := range r.Building.AchievedShare.HalfWidth {
		if w > r.Building.AchievedShare.HalfWidth[best] {
			best = Part(p)
		}
	}
	return best
}

// draws per part: the quantiles at (k + 1/2)/draws of a normal error, scaled
// to unit variance, so that few draws give the spread.
const draws = 8

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Doubt from the accuracy of sensors",
	Question: "How far could the sensors' own errors move the answer?",
	Formula: "each part in turn: readings with a constant error per sensor (normal, standard deviation half the accuracy) and noise from step to step (a tenth of the accuracy) are judged again, " +
		"8 draws at equally likely quantiles; parts add in squares; interval = value ± 1.645 standard deviations",
	Limits: []string{
		"an interval, not bounds: unknown hours are not in it",
		"to first order: parts are varied one at a time; indoor sensors err independently of each other",
		"the accuracy is taken as a range that holds 95 times in 100 (our assumption)",
		"running states (contacts, plant status) are taken as logged",
	},
	Sources: []string{
		"JCGM 100:2008, combination of uncertainties to first order (from memory)",
		method.Memory("ISO 7726:1998, required accuracy of air temperature ±0.5 K"),
	},
	Standing: method.OurAssumption,
}
