package guess

import (
	"fmt"
	"math"
	"strings"

	"sashlog/configs/site"
)

// A sensor in a return duct drifts in still air while the fan is off and leaps
// back to the room's temperature when it starts; a room's own sensor goes on
// moving the same way, since the plant heats or cools it. Of leaps above
// ductLeapK at the unit's starts at least ductLeaps must be met, and the hour
// after must go the other way as often as not. Our choice, tried on the demo
// building's logs.
const (
	ductLeapK = 0.6
	ductLeaps = 30
)

// proposePlacement names room sensors that behave as if they hung in a return
// duct. Their placement stays open: a person must look.
func (p *Proposal) proposePlacement() {
	served := map[string]bool{}
	for i := range p.Plant {
		for _, z := range p.Plant[i].Serves {
			served[z] = true
		}
	}
	for i := range p.Plant {
		u := &p.Plant[i]
		r := p.runningOf(u.ID)
		if r == nil {
			continue
		}
		mine := map[string]bool{}
		for _, z := range u.Serves {
			mine[z] = true
		}
		for _, t := range p.Tracks {
			// Where no unit is known, each may be the one.
			if (mine[t.Owner] || !served[t.Owner]) && t.Mapped() && t.Quantity == site.AirTemp && t.Placement == "" && !t.textual() {
				t.duct(r, u.ID)
			}
		}
	}
}

// duct looks at what follows a sensor's leaps at its unit's starts.
func (t *Track) duct(r *running, unit string) {
	for _, d := range t.Doubts {
		if strings.Contains(d, "return duct") {
			return
		}
	}
	least := ductLeapK
	if t.Unit == "degF" {
		least *= 1.8
	}
	var onward []float64
	for i := 1; i < len(r.on); i++ {
		if r.on[i-1] != 0 || r.on[i] != 1 {
			continue
		}
		k := r.from + int64(i)
		leap := t.bins.at(k+1) - t.bins.at(k-1)
		after := (t.bins.at(k+4) - t.bins.at(k+1)) / leap
		if math.Abs(leap) > least && after == after {
			onward = append(onward, after)
		}
	}
	if len(onward) >= ductLeaps && half(onward) < 0 {
		t.Doubts = append(t.Doubts, fmt.Sprintf("it leaps when %s starts and then turns back (%d times): does it hang in the return duct? then write placement return_duct", unit, len(onward)))
	}
}
