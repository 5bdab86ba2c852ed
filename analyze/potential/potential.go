// Package potential answers: when did the weather suit open mode?
package potential

// Suit is the verdict on a step's weather for one zone.
type Suit uint8

// Verdicts; of several failing tests the first in this order names the step.
const (
	Suited Suit = iota
	TooCold
	TooWarm        // and nothing else is known to fail
	TooWarmAndMore // and humid, windy, wet or polluted too
	TooHumid
	TooWindy
	Rain
	Polluted
	TooBrief // suits, but in a run shorter than the minimum
	SuitUnknown
	NumSuits
)

var suitWords = [NumSuits]string{"weather suitable", "too cold", "too warm", "too warm", "too humid", "too windy", "rain", "polluted", "too brief", "unknown"}

func (s Suit) String() string { return suitWords[s] }

// Zone is one zone on the grid: verdicts per step by the headline rule, with
// air movement (site's fan speed) and without the shortest-run rule (Raw), and
// with the humidity limit ignored.
type Zone struct {
	Suit, Fan, Raw, AnyHumidity []Suit
}

// Method is one way of counting suitable hours; hours are occupied hours of
// the average occupant over the period.
type Method struct {
	Name, Words string
	SuitedH     float64
	UnknownH    float64
	Source      string
}

// Result is the answer for all zones, and the comparison of methods.
type Result struct {
	Zones   []Zone
	Methods []Method
	// Tested says which tests the logs allowed: "rain: not logged, not tested".
	Tested []string
	// Typical: what a typical year offers by the plain band, nil without one.
	Typical *TypicalPotential
}

// TypicalPotential compares the logged year with a typical one on the same
// rule (plain band with humidity limit, occupied times of the site).
type TypicalPotential struct {
	Name                        string
	TypicalH, MeasuredH         float64 // occupied hours in the band, per year of occupied time
	TypicalMeanC, MeasuredMeanC float64
	// Months are the calendar months compared, those with measured weather.
	Months int
}
