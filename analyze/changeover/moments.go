package changeover

import "math"

// reason is something that may keep a zone or unit closed: a temperature above
// or below a level.
type reason struct {
	tempC []float32 // one value per step of the grid
	above bool
	zone  int // index of the zone whose temperature it is, -1 for outdoors
	// present: the zone calls only while somebody is known to be there.
	present bool
}

func (r *reason) sign() float64 {
	if r.above {
		return 1
	}
	return -1
}

// moments are the occasions on which a change was possible, one row each.
type moments struct {
	opening bool
	step    []int32 // the last step of the row
	day     []int32 // index into the calendar's days
	closed  []bool  // how the row ended
	steps   []float64
	weight  []float64
	// x is the reading at the end of a row, [reason][row], NaN where unknown. For
	// closings it is the furthest reading of the open spell so far, and from that
	// before the row.
	x, from [][]float32
}

func newMoments(opening bool, reasons int) *moments {
	m := &moments{opening: opening, x: make([][]float32, reasons)}
	if !opening {
		m.from = make([][]float32, reasons)
	}
	return m
}

func (m *moments) n() int { return len(m.step) }

// events counts the rows in which the state changed.
func (m *moments) events() int {
	n := 0
	for _, c := range m.closed {
		if c != m.opening {
			n++
		}
	}
	return n
}

// reading is the temperature an opening at a step may have followed: the
// plant's own effect sets in within the step, so that of the step and the one
// before the one further inside the limit counts.
func (r *reason) reading(step int) float32 {
	if r.zone < 0 { // the plant does not warm the weather
		return r.tempC[step]
	}
	a, b := r.tempC[step], r.tempC[step-1]
	if math.IsNaN(float64(a)) || math.IsNaN(float64(b)) || (b > a) == r.above {
		return a
	}
	return b
}

// further is the reading further beyond the limit; what is unknown is not.
func (r *reason) further(a, b float32) float32 {
	switch {
	case math.IsNaN(float64(a)):
		return b
	case math.IsNaN(float64(b)) || (a > b) == r.above:
		return a
	}
	return b
}

// free is the probability that a limit does not hold in row i: for an opening
// that of the reading, for a closing that of the furthest reading of the spell
// given that it did not hold up to the row.
func (m *moments) freeOf(r int, sign float64, i int, levelC, blurK float64) float64 {
	x := float64(m.x[r][i])
	eta := sign * (x - levelC) / blurK
	if !(eta > -20) {
		return 1
	}
	if m.from == nil {
		return logistic(-eta)
	}
	before := float64(m.from[r][i])
	if x == before {
		return 1
	}
	f := logistic(-eta)
	if b := sign * (before - levelC) / blurK; b > -20 {
		f /= logistic(-b)
	}
	return f
}
