// Package advice answers: what should be done first?
//
// Steps:
//
//  1. look for findings, one per main cause, each with hours to gain
//  2. bound them by what is unknown and by rival causes
//  3. choose a typical and a contrary day from the record
//  4. rank by person-hours, then hours
package advice

// Finding is one thing found, with what to do about it.
type Finding struct {
	ID    string
	What  string // one sentence with a number and its bounds
	Zones []string
	// Hours lost per year (of the period) summed over the zones named, with
	// bounds; PersonH the person-hours, NaN when people are not given.
	Hours, PersonH, Low, High                 float64
	Confidence                                string // "high", "fair", "low"
	Evidence                                  Evidence
	RivalExplanations                         []string
	CheckOnSite, DoNext, Who, UndoIf, Caution string
}

// Evidence points to what a finding rests on.
type Evidence struct {
	Points      []string
	Figure      string // the id of the figure that shows it
	TypicalDay  string // local date, empty when none
	ContraryDay string
}

// Figures that findings point to.
const (
	FigureEpisodes   = "episodes"
	FigureCarpet     = "carpet"
	FigureExceedance = "exceedance"
	FigureCO2        = "co2-duration"
	FigureAfterHours = "after-hours"
	FigureAnswerable = "answerable"
)
