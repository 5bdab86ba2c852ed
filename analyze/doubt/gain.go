package doubt

import (
	"cmp"
	"math"
	"slices"
)

// Gain is what one measurement would take off the doubt of the building's
// missed hours: half widths in hours before and after.
type Gain struct {
	// Unknown: the hours nobody can judge are judged; else the sensors of Part
	// become twice as accurate.
	Unknown     bool
	Part        Part
	FromH, ToH  float64
	TakesAwayPc float64 // share of FromH, in per cent
}

// Gains lists what could be measured, that which takes most away first. Bounds
// and the interval are different things and each shrinks by itself.
func (r *Result) Gains() []Gain {
	var out []Gain
	add := func(g Gain) {
		if g.FromH > 0 && g.ToH < g.FromH {
			g.TakesAwayPc = 100 * (1 - g.ToH/g.FromH)
			out = append(out, g)
		}
	}
	add(Gain{Unknown: true, FromH: r.UnknownHalfH})
	sum := 0.0
	for _, w := range r.Building.MissedH.HalfWidth {
		sum += w * w
	}
	for p := Part(0); p < NumParts; p++ {
		if w := r.Building.MissedH.HalfWidth[p]; r.Logged[p] {
			add(Gain{Part: p, FromH: math.Sqrt(sum), ToH: math.Sqrt(max(0, sum-0.75*w*w))})
		}
	}
	slices.SortStableFunc(out, func(a, b Gain) int { return cmp.Compare(b.FromH-b.ToH, a.FromH-a.ToH) })
	return out
}
