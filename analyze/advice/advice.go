// Package advice answers: what should be done first?
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
