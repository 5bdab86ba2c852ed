package compare

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Periods compares the two periods.
func Periods(in Input) *Result {
	r := &Result{Before: in.Before, After: in.After, Untouched: in.Untouched, Draws: Draws}
	var group [2][]int
	for z := range in.Site.Zones {
		if in.Running.Zones[z].NoOpening {
			continue
		}
		if slices.Contains(in.Untouched, z) {
			group[1] = append(group[1], z)
		} else {
			group[0] = append(group[0], z)
		}
	}
	r.Zones = group[0]
	outside, words := outsideHours(&in)
	r.Criterion = words
	days := daysOf(&in, group, outside)
	m := matched(days)
	r.Matched = m
	switch {
	case len(group[0]) == 0:
		r.Unusable = "no zone with openings is left to compare"
	case m.BeforeDays < LeastDays || m.AfterDays < LeastDays:
		r.Unusable = fmt.Sprintf("the periods are too short: %d and %d occupied days with known weather, at least %d are needed in each", m.BeforeDays, m.AfterDays, LeastDays)
	case m.BeforeShare < LeastMatched || m.AfterShare < LeastMatched:
		r.Unusable = fmt.Sprintf("the weather was too unlike: %.0f %% of the earlier and %.0f %% of the later days have counterparts of like outdoor temperature, at least %.0f %% are needed",
			100*m.BeforeShare, 100*m.AfterShare, 100*LeastMatched)
	}
	for k := range r.Outcomes {
		r.Outcomes[k] = Outcome{Measure: Measure(k), Unusable: r.Unusable}
	}
	if r.Unusable != "" {
		return r
	}
	r.estimate(days, len(group[1]) > 0, in.Seed)
	return r
}

// differences are what one resample says of one measure.
type differences struct{ main, untouched, second float64 }

func differencesOf(days []*day, m Measure, controls bool) differences {
	before, after := weigh(days, 0, m)
	d := differences{main: after - before, second: regress(days, 0, m)}
	if controls {
		b, a := weigh(days, 1, m)
		d.untouched = a - b
		d.main -= d.untouched
		d.second -= regress(days, 1, m)
	}
	return d
}

func (r *Result) estimate(days []day, controls bool, seed uint64) {
	var periods [2][]*day
	var all []*day
	for i := range days {
		k := 0
		if days[i].after {
			k = 1
		}
		periods[k] = append(periods[k], &days[i])
		all = append(all, &days[i])
	}
	rng := rand.New(rand.NewPCG(seed, 0x5eed))
	var resampled [NumMeasures][3][]float64
	for range Draws {
		var draw []*day
		for _, p := range periods {
			draw = append(draw, blocks(rng, p)...)
		}
		for m := range resampled {
			d := differencesOf(draw, Measure(m), controls)
			for k, v := range [...]float64{d.main, d.untouched, d.second} {
				if !math.IsNaN(v) {
					resampled[m][k] = append(resampled[m][k], v)
				}
			}
		}
	}
	// Few blocks vary less than they should; Student's t with their number
	// and the usual n/(n-1) widen the interval.
	fewest := min(len(periods[0]), len(periods[1])) / BlockDays
	widen := distuv.StudentsT{Sigma: 1, Nu: float64(max(fewest-1, 2))}.Quantile(0.975) / distuv.UnitNormal.Quantile(0.975) *
		math.Sqrt(float64(max(fewest, 2))/float64(max(fewest-1, 1)))
	for m := range r.Outcomes {
		o := &r.Outcomes[m]
		o.Before, o.After = plain(all, false, 0, Measure(m)), plain(all, true, 0, Measure(m))
		o.BeforeAdjusted, o.AfterMatched = weigh(all, 0, Measure(m))
		d := differencesOf(all, Measure(m), controls)
		o.Difference = interval(d.main, resampled[m][0], widen)
		if controls {
			o.Untouched = interval(d.untouched, resampled[m][1], widen)
		}
		o.SecondOpinion = interval(d.second, resampled[m][2], widen)
		o.ProbabilityBetter = probability(o.Measure, d.main, resampled[m][0], widen)
		o.decide()
	}
}

// blocks resamples the days of one period in blocks, in a circle.
func blocks(rng *rand.Rand, days []*day) []*day {
	out := make([]*day, 0, len(days)+BlockDays)
	for len(out) < len(days) {
		at := rng.IntN(len(days))
		for k := range BlockDays {
			out = append(out, days[(at+k)%len(days)])
		}
	}
	return out[:len(days)]
}

// interval is value ± the resampled spread, widened.
func interval(value float64, resampled []float64, widen float64) Estimate {
	e := Estimate{Value: value, Low: math.NaN(), High: math.NaN()}
	if math.IsNaN(value) || len(resampled) < Draws/2 {
		return e
	}
	x := slices.Clone(resampled)
	slices.Sort(x)
	low, high := stat.Quantile(0.025, stat.LinInterp, x, nil), stat.Quantile(0.975, stat.LinInterp, x, nil)
	middle := stat.Mean(x, nil)
	e.Low, e.High = value+widen*(low-middle), value+widen*(high-middle)
	return e
}

// probability is that the difference lies on the better side.
func probability(m Measure, value float64, resampled []float64, widen float64) float64 {
	if math.IsNaN(value) || len(resampled) < Draws/2 {
		return math.NaN()
	}
	middle, n := stat.Mean(resampled, nil), 0
	for _, x := range resampled {
		if (value+widen*(x-middle))*m.better() > 0 {
			n++
		}
	}
	return float64(n) / float64(len(resampled))
}

// decide gives the verdict.
func (o *Outcome) decide() {
	d := o.Difference
	switch {
	case math.IsNaN(d.Value) || math.IsNaN(d.Low):
		o.Unusable = "too few hours are known on days of like weather"
	case d.Low == 0 && d.High == 0:
		o.Verdict = NotShown
	case d.Low*o.Measure.better() > 0 && d.High*o.Measure.better() > 0:
		o.Verdict = Better
	case d.Low*o.Measure.better() < 0 && d.High*o.Measure.better() < 0:
		o.Verdict = Worse
	default:
		o.Verdict = NotShown
	}
}
