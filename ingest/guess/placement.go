package guess

import (
	"fmt"
	"math"

	"sashlog/configs/site"
)

// ductLeap is how many times a sensor must leap further in the quarter-hour
// after its unit starts than it usually moves, and ductLeapK the least leap,
// before it is suspected to hang in a return duct: still air there drifts away
// from the room's while the fan is off. Our choice.
const (
	ductLeap  = 4.0
	ductLeapK = 0.8
)

// proposePlacement names room sensors that behave as if they hung in a return
// duct. Their placement stays open: a person must look.
func (p *Proposal) proposePlacement() {
	for i := range p.Plant {
		u := &p.Plant[i]
		r := p.runningOf(u.ID)
		if r == nil {
			continue
		}
		for _, z := range u.Serves {
			for _, t := range p.Tracks {
				if t.Mapped() && t.Owner == z && t.Quantity == site.AirTemp && t.Placement == "" && !t.textual() {
					t.duct(r, u.ID)
				}
			}
		}
	}
}

// duct compares a sensor's leaps at its unit's starts with its usual moves.
func (t *Track) duct(r *running, unit string) {
	var leaps, moves []float64
	for i := 1; i < len(r.on); i++ {
		k := r.from + int64(i)
		d := math.Abs(t.bins.at(k+1) - t.bins.at(k-1))
		if d != d {
			continue
		}
		if r.on[i-1] == 0 && r.on[i] == 1 {
			leaps = append(leaps, d)
		} else if r.on[i-1] == r.on[i] {
			moves = append(moves, d)
		}
	}
	factor := 1.0
	if t.Unit == "degF" {
		factor = 1.8
	}
	if len(leaps) < 20 || len(moves) < 200 {
		return
	}
	l, m := half(leaps), half(moves)
	if l > ductLeapK*factor && l > ductLeap*m {
		t.Doubts = append(t.Doubts, fmt.Sprintf("it leaps by %.1f when %s starts: does it hang in the return duct? then write placement return_duct", l, unit))
	}
}
