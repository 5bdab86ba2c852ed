package lost

import (
	"math"
	"math/rand/v2"
)

// A control that acts at a limit betrays it: every time the temperature passes
// the limit, something follows. At any other level the same response follows
// only now and then. So for every level passed we count how often the response
// came within a quarter of an hour, and take the level at which it came most
// often and most surely.

// crossing is such a level.
type crossing struct {
	levelC float64
	// passed counts the times the level was passed while a response was
	// possible, followed those that the response followed.
	passed, followed int
	at               []int // steps of the passings followed
}

// Rules of a level, our assumptions.
const (
	crossWithinMin = 15  // the response comes within
	crossQuietMin  = 30  // the level had not been passed for so long
	crossFollowed  = 6   // passings that were followed
	crossRate      = 0.5 // of all
	crossEdgeK     = 1.0 // a kelvin before the level at most half as many are
	crossBinK      = 0.1
)

// passing is a rise (or fall) of a series through levels not reached in the
// half hour before, at a step just before which a response was possible. From
// and to are the levels passed, in bins.
type passing struct{ step, from, to int }

// passings lists them over the period. armed says whether the response was
// possible at a step.
func (e *evidence) passings(series []float32, rising bool, armed func(i int) bool) []passing {
	if series == nil {
		return nil
	}
	sign := 1.0
	if !rising {
		sign = -1
	}
	var all []passing
	quiet := max(1, e.steps(crossQuietMin))
	g := e.in.Grid
	for i := max(g.PeriodFrom, quiet, 2); i < g.PeriodTo; i++ {
		v := at(series, i) * sign
		// The reading may lag the control by a step.
		if math.IsNaN(v) || !armed(i-2) {
			continue
		}
		before, known := math.Inf(-1), 0
		for k := i - quiet; k < i; k++ {
			if x := at(series, k) * sign; !math.IsNaN(x) {
				before = math.Max(before, x)
				known++
			}
		}
		if 2*known < quiet || v <= before {
			continue
		}
		if p := (passing{step: i, from: bin(before) + 1, to: bin(v)}); p.from <= p.to {
			all = append(all, p)
		}
	}
	return all
}

// outcome of a passing.
type outcome uint8

const (
	unanswered outcome = iota
	answeredOnce
	explainedElse // answered, but something else explains it: counts for nothing
)

// bestLevel finds the level whose passing is answered most often and most
// surely, and hardly a kelvin before it.
func bestLevel(all []passing, rising bool, of func(p passing) outcome) crossing {
	none := crossing{levelC: math.NaN()}
	if len(all) == 0 {
		return none
	}
	low, high := all[0].from, all[0].to
	for _, p := range all {
		low, high = min(low, p.from), max(high, p.to)
	}
	passed, followed := make([]int, high-low+1), make([]int, high-low+1)
	outcomes := make([]outcome, len(all))
	for k, p := range all {
		if outcomes[k] = of(p); outcomes[k] == explainedElse {
			continue
		}
		for b := p.from; b <= p.to; b++ {
			passed[b-low]++
			if outcomes[k] == answeredOnce {
				followed[b-low]++
			}
		}
	}
	best, score := -1, 0.0
	for b := range passed {
		rate := float64(followed[b]) / float64(passed[b])
		if followed[b] < crossFollowed || rate < crossRate {
			continue
		}
		if k := b - int(crossEdgeK/crossBinK); k >= 0 && passed[k] >= crossFollowed && float64(followed[k]) > rate/2*float64(passed[k]) {
			continue
		}
		if x := float64(followed[b]) * rate * rate; x > score {
			best, score = b, x
		}
	}
	if best < 0 {
		return none
	}
	c := crossing{levelC: float64(best+low) * crossBinK, passed: passed[best], followed: followed[best]}
	if !rising {
		c.levelC = -c.levelC
	}
	for k, p := range all {
		if outcomes[k] == answeredOnce && p.from <= best+low && p.to >= best+low {
			c.at = append(c.at, p.step)
		}
	}
	return c
}

// responses is the span of steps in which a passing is answered, inclusive.
func (e *evidence) responses(p passing) (from, to int) {
	return p.step - 1, min(e.in.Grid.PeriodTo-1, p.step+max(1, e.steps(crossWithinMin)))
}

// level finds the level of a series whose passing is followed by a response.
func (e *evidence) level(series []float32, rising bool, armed, response func(i int) bool) crossing {
	return bestLevel(e.passings(series, rising, armed), rising, func(p passing) outcome {
		for from, to := e.responses(p); from <= to; from++ {
			if response(from) {
				return answeredOnce
			}
		}
		return unanswered
	})
}

// bin is the greatest whole number of tenths not above v.
func bin(v float64) int { return int(math.Floor(v/crossBinK + 1e-4)) }

const levelDraws = 200

// levelInterval draws days again for the 95 % interval of a level found by
// level, never narrower than a bin to either side.
func (e *evidence) levelInterval(series []float32, rising bool, armed, response func(i int) bool, levelC float64) (low, high float64) {
	byDay := map[int32][]passing{}
	var days []int32
	answered := map[int]outcome{}
	for _, p := range e.passings(series, rising, armed) {
		d := e.cal.DayOf[p.step]
		if byDay[d] == nil {
			days = append(days, d)
		}
		byDay[d] = append(byDay[d], p)
		for from, to := e.responses(p); from <= to; from++ {
			if response(from) {
				answered[p.step] = answeredOnce
				break
			}
		}
	}
	if len(days) == 0 {
		return math.NaN(), math.NaN()
	}
	rng := rand.New(rand.NewPCG(1, uint64(len(days)))) // the same days, the same interval
	var levels []float64
	for range levelDraws {
		var drawn []passing
		for range days {
			drawn = append(drawn, byDay[days[rng.IntN(len(days))]]...)
		}
		if c := bestLevel(drawn, rising, func(p passing) outcome { return answered[p.step] }); !math.IsNaN(c.levelC) {
			levels = append(levels, c.levelC)
		}
	}
	if len(levels) < levelDraws/2 {
		return math.NaN(), math.NaN()
	}
	return math.Min(levelC, quantile(levels, 0.025)) - crossBinK, math.Max(levelC, quantile(levels, 0.975)) + crossBinK
}
