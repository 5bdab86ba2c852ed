// Package answerable answers: what can these logs answer at all?
//
// It asks for points with readings on the grid, not for results: so it can be
// asked before anything is analysed.
package answerable

// Status of a question.
type Status string

// Statuses.
const (
	Yes    Status = "yes"
	Partly Status = "partly"
	No     Status = "no"
)

// Question is one thing a reader may want to know.
type Question struct {
	ID, Question         string
	Needs                string   // the points it needs, in words
	Have, Missing        []string // which are there and which are not, in words
	Answer               Status
	ZonesYes, ZonesTotal int
	// Cheapest is the cheapest way to get the rest, empty when nothing is missing.
	Cheapest string
}
