// Package exceedance answers: how long, by how much and for how many people
// was each zone outside each comfort criterion?
package exceedance

// Model is the comfort model that applies in a step.
type Model uint8

// Models.
const (
	NoModel Model = iota
	ENAdaptive
	ENHeating  // EN 16798-1 operative range, heating season
	ENCooling  // EN 16798-1 operative range, cooling season
	ENBetween  // between the seasons: low of heating, high of cooling; our extension
	ENExtended // adaptive line beyond its range of validity; our extension
	EN15251Adaptive
	EN15251Extended
	ASHRAEAdaptive
	ASHRAEExtended
	IMACMixedMode
	IMACExtended
	NumModels
)

var modelWords = [NumModels]string{"", "EN 16798-1 adaptive", "EN 16798-1 heating range", "EN 16798-1 cooling range", "EN 16798-1 between seasons (our extension)", "EN 16798-1 adaptive, extended (our extension)",
	"EN 15251 adaptive", "EN 15251 adaptive, extended (our extension)", "ASHRAE 55 adaptive", "ASHRAE 55 adaptive, extended (our extension)",
	"Indian mixed-mode model", "Indian mixed-mode model, extended (our extension)"}

func (m Model) String() string { return modelWords[m] }

// Limits of the headline criterion per step of one zone, NaN where no model
// applies or the running mean is unknown.
type Limits struct {
	Model       []Model
	LowC, HighC []float32
	// Free marks the steps in which the zone counts as free-running.
	Free []bool
	// UpperOfDayC is the adaptive upper limit of the day before the rise is
	// taken off, per step; it does not depend on the running state. WithFanC
	// adds the site's fan speed. Zones may share both; nobody writes to them.
	UpperOfDayC, WithFanC []float32
	// LowOfDayC is the adaptive lower limit of the day, shared likewise.
	LowOfDayC []float32
}

// Criterion is the outcome of one criterion in one zone over the period, in
// occupied hours.
type Criterion struct {
	ID, Words string
	// AppliesH: occupied hours the criterion applies to and temperature is
	// known; NotApplicableH: outside its validity; UnknownH: no reading.
	AppliesH, NotApplicableH, UnknownH float64
	OverH, UnderH                      float64
	OverKh, UnderKh                    float64 // degree-hours
	PersonOverH, PersonUnderH          float64
	// OverShare and UnderShare are shares of AppliesH with bounds from
	// UnknownH going wholly either way.
	OverShare, UnderShare Range
	// Calculation only: the standard does not cover this building.
	CalculationOnly bool
	Note            string
	Source          string
}

// Range is a figure with its least and greatest possible value.
type Range struct{ Value, Low, High float64 }

// Hourly is one row of the long comfort table.
type Hourly struct {
	Zone                           int
	Hour                           int // index into hours.Record.Hours
	Criterion                      string
	Model                          string
	OverH, UnderH, OverKh, UnderKh float32
}

// Zone is one zone's limits and outcomes.
type Zone struct {
	Limits   Limits
	Criteria []Criterion
}

// Result is the answer for all zones.
type Result struct {
	Zones    []Zone
	Headline string // ID of the headline criterion
	// EachHour calls f for every zone, hour and criterion with something to
	// tell, in order; nothing is held in memory.
	EachHour func(f func(Hourly))
}
