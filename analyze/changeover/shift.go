package changeover

import (
	"math"
	"math/rand/v2"
	"sort"

	"gonum.org/v1/gonum/stat"
)

// Shift is a date at which a behaviour changed.
type Shift struct {
	// What changed, in the units of Before and After.
	What string
	// Day is the index into the calendar of the first day of the new behaviour;
	// FromDay and ToDay are its 95 % interval, both inclusive.
	Day, FromDay, ToDay int
	// Before and After are the behaviour on either side (°C of a limit, share of
	// working days of a clock start), with 95 % intervals where known.
	Before, BeforeLow, BeforeHigh float64
	After, AfterLow, AfterHigh    float64
	// P is how often chance alone, days being shuffled, shifts as much; it is
	// corrected for all behaviours tried.
	P    float64
	Days int // days with something to say
}

const (
	shiftSideDays = 8 // days with something to say on either side
	shuffles      = 1999
	shiftAlpha    = 0.05
	// shiftGiveUp stops the shuffling once so many were as great: P is then
	// above any threshold (Besag & Clifford, Biometrika 78 (1991), from memory).
	shiftGiveUp = 10
	// dateDrop is how far twice the log-likelihood may fall below its greatest
	// value within the 95 % interval of the date of a change (Hansen,
	// Econometrica 68 (2000), table 1, from memory).
	dateDrop = 7.35
	// shiftLeastK is the least change of a limit that is told.
	shiftLeastK = 0.5
	// shiftLeastShare is that of the days with a start by the clock.
	shiftLeastShare = 0.5
)

// cut finds the split of the listed days that raises the log-likelihood most,
// and by how much; rise[k] is the rise when day k is the first after it.
func (s *surface) cut(list []int, rise []float64) (at int, most float64) {
	cols := s.cols()
	total := make([]float64, cols)
	for _, d := range list {
		for c, v := range s.ll[d*cols : (d+1)*cols] {
			total[c] += v
		}
	}
	all := total[peak(total)]
	before := make([]float64, cols)
	at = -1
	for k := 0; k < len(list)-shiftSideDays; k++ {
		if k >= shiftSideDays {
			a, b := math.Inf(-1), math.Inf(-1)
			for c, v := range before {
				if v > a {
					a = v
				}
				if w := total[c] - v; w > b {
					b = w
				}
			}
			g := a + b - all
			if rise != nil {
				rise[k] = g
			}
			if g > most {
				at, most = k, g
			}
		}
		d := list[k]
		for c, v := range s.ll[d*cols : (d+1)*cols] {
			before[c] += v
		}
	}
	return at, most
}

// shift looks for the date at which the level changed. tried is the number of
// behaviours looked at in all, for which P is corrected.
// drifts are what a level may drift with, one value per day of the calendar.
func (s *surface) shift(rng *rand.Rand, tried int, drifts [][]float64) (Shift, bool) {
	var list []int
	for d, in := range s.informs {
		if in {
			list = append(list, d)
		}
	}
	if len(list) < 2*shiftSideDays {
		return Shift{}, false
	}
	rise := make([]float64, len(list))
	at, most := s.cut(list, rise)
	if at < 0 || most < 4 { // never significant: not worth the shuffling
		return Shift{}, false
	}
	shuffled := append([]int(nil), list...)
	greater, done := 0, 0
	for done = 0; done < shuffles && greater < shiftGiveUp; done++ {
		rng.Shuffle(len(shuffled), func(a, b int) { shuffled[a], shuffled[b] = shuffled[b], shuffled[a] })
		if _, g := s.cut(shuffled, nil); g >= most {
			greater++
		}
	}
	p := math.Min(1, float64(tried)*float64(greater+1)/float64(done+1))
	if p > shiftAlpha {
		return Shift{}, false
	}
	for _, along := range drifts {
		if s.drift(list, along) > most-driftMargin {
			return Shift{}, false // it drifts with that rather than jumps
		}
	}
	first, last := at, at
	for k := range list {
		if k >= shiftSideDays && k < len(list)-shiftSideDays && 2*(most-rise[k]) <= dateDrop {
			first, last = min(first, k), max(last, k)
		}
	}
	out := Shift{P: p, Days: len(list), Day: int(s.days[list[at]]),
		FromDay: int(s.days[list[first-1]]) + 1, ToDay: int(s.days[list[last]])}
	out.Before, out.After = s.levelOf(s.sum(0, list[at])), s.levelOf(s.sum(list[at], len(s.days)))
	out.BeforeLow, out.BeforeHigh = s.interval(0, list[at], rng)
	out.AfterLow, out.AfterHigh = s.interval(list[at], len(s.days), rng)
	return out, true
}

// driftMargin is how much more of the log-likelihood a jump must explain than a
// level that drifts evenly with the date or the weather: a season looks like a
// change too.
const driftMargin = 2.0

// drift is the rise of the log-likelihood when the level moves evenly along
// something, from one constant level.
func (s *surface) drift(list []int, along []float64) float64 {
	var v []float64
	for _, d := range list {
		v = append(v, along[s.days[d]])
	}
	mean, sd := stat.MeanStdDev(v, nil)
	if !(sd > 0) {
		return 0
	}
	cols, n := s.cols(), len(s.levelC)
	span := s.levelC[n-1] - s.levelC[0]
	best := math.Inf(-1)
	all := peakOf(s, list)
	for b := 0; b < s.blurs; b++ {
		for _, a := range s.levelC {
			for k := -8; k <= 8; k++ {
				ll := 0.0
				for i, d := range list {
					l := a + float64(k)/16*span/2*(v[i]-mean)/sd
					at := min(n-1, sort.SearchFloat64s(s.levelC, l))
					if at > 0 && l-s.levelC[at-1] < s.levelC[at]-l {
						at--
					}
					ll += s.ll[d*cols+at*s.blurs+b]
				}
				best = math.Max(best, ll)
			}
		}
	}
	return best - all
}

func peakOf(s *surface, list []int) float64 {
	cols := s.cols()
	total := make([]float64, cols)
	for _, d := range list {
		for c, v := range s.ll[d*cols : (d+1)*cols] {
			total[c] += v
		}
	}
	return total[peak(total)]
}
