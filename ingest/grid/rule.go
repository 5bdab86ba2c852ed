package grid

// Rule is what the builder checks while readings of one point stream past. All
// values are in the canonical unit.
type Rule struct {
	// Low and High bound what is accepted, both inclusive.
	Low, High float64
	// Spike rejects a single reading that differs from both neighbours by more
	// than this while the neighbours agree to a quarter of it; 0 means never.
	Spike float64
	// FrozenS lists runs of exactly the same value that last at least so many
	// seconds; 0 means none are listed.
	FrozenS int64
	// Bins says how readings are counted before the range is checked.
	Bins Bins
}

// Bins is a way to count readings by value, for robust statistics of a whole
// series in fixed memory.
type Bins uint8

// Ways to count.
const (
	NoBins Bins = iota
	// TempBins: 1 K from -60 to 340, so that kelvin and Fahrenheit taken for
	// Celsius are seen too.
	TempBins
	// ShareBins: 0.01 from 0 to 2, then 1 to 120, for percent and fractions.
	ShareBins
	// GasBins: 10 ppm from 0 to 3000.
	GasBins
)

const (
	tempFloor, tempBins  = -60, 401
	fineBins, coarseBins = 200, 119
	gasBins, gasWidth    = 301, 10
)

func (b Bins) len() int {
	switch b {
	case TempBins:
		return tempBins
	case ShareBins:
		return fineBins + coarseBins
	case GasBins:
		return gasBins
	}
	return 0
}

// index returns the bin of v; values outside go to the nearest bin.
func (b Bins) index(v float64) int {
	i, n := 0, b.len()
	switch b {
	case TempBins:
		i = int(v - tempFloor)
	case ShareBins:
		if v < 2 {
			// A hair above the bin's edge, so that 0.07 does not land in 0.06.
			i = int(v*100 + 1e-6)
		} else {
			i = fineBins + int(v) - 2
		}
	case GasBins:
		i = int(v / gasWidth)
	}
	return min(max(i, 0), n-1)
}

// value returns the middle of bin i (ShareBins below 2: its lower edge).
func (b Bins) value(i int) float64 {
	switch b {
	case TempBins:
		return float64(i+tempFloor) + 0.5
	case ShareBins:
		if i < fineBins {
			return float64(i) / 100
		}
		return float64(i-fineBins+2) + 0.5
	}
	return (float64(i) + 0.5) * gasWidth
}

// Histogram counts the readings of a point by value.
type Histogram struct {
	Bins   Bins
	Counts []uint32
}

// Total returns the number of readings counted.
func (h *Histogram) Total() int64 {
	var n int64
	for _, c := range h.Counts {
		n += int64(c)
	}
	return n
}

// Quantile returns the value below which the share p of the readings lies, to
// the width of a bin; ok is false when nothing was counted.
func (h *Histogram) Quantile(p float64) (v float64, ok bool) {
	total := h.Total()
	if total == 0 {
		return 0, false
	}
	want, have := p*float64(total), int64(0)
	for i, c := range h.Counts {
		have += int64(c)
		if float64(have) >= want && have > 0 {
			return h.Bins.value(i), true
		}
	}
	return h.Bins.value(len(h.Counts) - 1), true
}

// ShareBetween returns the share of readings in bins from the one of low up to
// and including the one of high.
func (h *Histogram) ShareBetween(low, high float64) float64 {
	total := h.Total()
	if total == 0 {
		return 0
	}
	var n int64
	for i := h.Bins.index(low); i <= h.Bins.index(high); i++ {
		n += int64(h.Counts[i])
	}
	return float64(n) / float64(total)
}
