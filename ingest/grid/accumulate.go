package grid

import (
	"math"

	"sashlog/configs/site"
)

// unit is the resolution readings are kept at: integers of 1e-4 of the
// canonical unit, so that sums are exact and free of order.
const unit = 1e4

// angleUnit is the resolution of the sine and cosine of a direction.
const angleUnit = 1e6

// accumulator gathers the step that is open. Steps are visited in order of
// time, so that one open step per point is enough.
type accumulator struct {
	stepS int64
	kind  site.Kind
	// step is the number of the open step since 1970, end the instant it ends;
	// nothing is open before the first reading.
	open      bool
	step, end int64
	covered   int64
	readings  uint16
	sum       int64 // Analog, Switch: value times seconds
	more      *moreSums
	blocks    blocks
}

// moreSums serves the kinds whose step is not a mean of numbers.
type moreSums struct {
	state    [5]int64 // Status: seconds per code
	sin, cos int64    // Angle
}

// at opens the step that holds t, which is not before the open one.
func (a *accumulator) at(t int64) {
	if a.open && t < a.end {
		return
	}
	a.flush()
	a.step = floorDiv(t, a.stepS)
	a.end = (a.step + 1) * a.stepS
	a.open = true
}

// hold lets q last over [from, to); from lies in the open step.
func (a *accumulator) hold(from, to, q int64) {
	if to <= a.end && a.kind <= site.Switch {
		d := to - from
		a.sum += q * d
		a.covered += d
		return
	}
	for {
		d := min(to, a.end) - from
		a.add(q, d)
		if to <= a.end {
			return
		}
		from += d
		a.at(from)
	}
}

func (a *accumulator) add(q, d int64) {
	a.covered += d
	switch a.kind {
	case site.Status:
		if c := q / unit; c >= 0 && c < int64(len(a.more.state)) {
			a.more.state[c] += d
		}
	case site.Angle:
		s, c := math.Sincos(float64(q) / unit * math.Pi / 180)
		a.more.sin += int64(math.Round(s*angleUnit)) * d
		a.more.cos += int64(math.Round(c*angleUnit)) * d
	default:
		a.sum += q * d
	}
}

// flush stores the open step.
func (a *accumulator) flush() {
	if !a.open {
		return
	}
	if a.covered > 0 || a.readings > 0 {
		mean, covered := a.result()
		a.blocks.put(a.step, mean, covered, a.readings)
	}
	a.open, a.covered, a.readings, a.sum = false, 0, 0, 0
	if a.more != nil {
		*a.more = moreSums{}
	}
}

func (a *accumulator) result() (float32, uint16) {
	if a.covered == 0 {
		return nan32(), 0
	}
	switch a.kind {
	case site.Status:
		longest := 0
		for code, s := range a.more.state {
			// Codes rise with strength, so a tie goes to the stronger.
			if s >= a.more.state[longest] {
				longest = code
			}
		}
		return float32(longest), uint16(a.covered)
	case site.Angle:
		// Winds that cancel out leave no direction: unknown, not north.
		limit := a.covered * angleUnit / 1000
		if abs(a.more.sin) < limit && abs(a.more.cos) < limit {
			return nan32(), 0
		}
		deg := math.Atan2(float64(a.more.sin), float64(a.more.cos)) * 180 / math.Pi
		if deg < 0 {
			deg += 360
		}
		if f := float32(deg); f < 360 {
			return f, uint16(a.covered)
		}
		return 0, uint16(a.covered)
	}
	return float32(float64(a.sum) / float64(a.covered) / unit), uint16(a.covered)
}

func abs(x int64) int64 {
	if x < 0 {
		return -x
	}
	return x
}

func nan32() float32 { return float32(math.NaN()) }
