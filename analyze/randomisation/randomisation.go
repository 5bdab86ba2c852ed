// Package randomisation answers: is what a trial shows more than the chance of
// which days were drawn? The days are taken as they were; only the drawing is
// random, and it is drawn again by the rule it was drawn by (Fisher 1935).
package randomisation

import (
	"math"
	"math/rand/v2"
	"slices"

	"sashlog/analyze/method"
)

// Ratio is a part of a whole that days add up to.
type Ratio struct{ Part, Whole float64 }

// Day is one day of a block: what was seen in the zones of the trial and in the
// untouched ones.
type Day struct{ Main, Untouched Ratio }

// Block is what was drawn together. Patterns are all that might have been
// drawn, each as likely: Patterns[p][k] reports whether day k is on trial.
// Drawn is the index of the one that was.
type Block struct {
	Days     []Day
	Patterns [][]bool
	Drawn    int
}

// Answer is what the drawing says.
type Answer struct {
	// Trial and Usual are the ratios of the days on trial and as usual, of the
	// trial's zones and of the untouched ones.
	Trial, Usual, UntouchedTrial, UntouchedUsual float64
	// Difference is Trial - Usual, less that of the untouched zones where there
	// are any, with the interval of differences the drawing does not contradict
	// (95 %; infinite where so few were possible that none can be excluded).
	Difference, Low, High float64
	// P is how often the drawing alone gives a difference as great (twice the
	// smaller tail).
	P float64
	// Drawings compared; Exact when they are all there are.
	Drawings int
	Exact    bool
}

// Limits of the work: all drawings where there are at most so many, else so
// many drawn anew.
const (
	mostExact = 1 << 15
	// Drawings is how many are drawn when there are too many for all.
	Drawings = 4999
)

// level is the share either tail leaves out of the interval.
const level = 0.025

// sums are what a drawing adds up to: main part and whole, untouched part and
// whole, and the whole of the days that were on trial in truth.
type sums [5]float64

func (s *sums) add(o *sums) {
	for i := range s {
		s[i] += o[i]
	}
}

// Trial holds the sums of every block's patterns, so that drawings are cheap.
type Trial struct {
	patterns  [][]sums // block, pattern: sums of the days on trial
	drawn     []int
	total     sums
	untouched bool
}

// New prepares a trial. Untouched tells whether there are untouched zones.
func New(blocks []Block, untouched bool) *Trial {
	t := &Trial{untouched: untouched}
	for _, b := range blocks {
		list := make([]sums, len(b.Patterns))
		for k, d := range b.Days {
			row := sums{d.Main.Part, d.Main.Whole, d.Untouched.Part, d.Untouched.Whole, 0}
			if b.Patterns[b.Drawn][k] {
				row[4] = d.Main.Whole
			}
			t.total.add(&row)
			for p := range list {
				if b.Patterns[p][k] {
					list[p].add(&row)
				}
			}
		}
		t.patterns, t.drawn = append(t.patterns, list), append(t.drawn, b.Drawn)
	}
	return t
}

// difference is the statistic of one drawing and how far the drawing agrees
// with what was on trial in truth (1: wholly).
func (t *Trial) difference(on *sums) (difference, agrees float64) {
	off := t.total
	for i := range off {
		off[i] -= on[i]
	}
	difference = on[0]/on[1] - off[0]/off[1]
	if t.untouched {
		difference -= on[2]/on[3] - off[2]/off[3]
	}
	return difference, on[4]/on[1] - off[4]/off[1]
}

func (t *Trial) truth() sums {
	var on sums
	for b, p := range t.drawn {
		on.add(&t.patterns[b][p])
	}
	return on
}

// Infer compares what was drawn with what might have been.
func (t *Trial) Infer(drawings int, seed uint64) Answer {
	on := t.truth()
	off := t.total
	for i := range off {
		off[i] -= on[i]
	}
	a := Answer{Trial: on[0] / on[1], Usual: off[0] / off[1], UntouchedTrial: on[2] / on[3], UntouchedUsual: off[2] / off[3],
		Low: math.NaN(), High: math.NaN(), P: math.NaN()}
	a.Difference, _ = t.difference(&on)
	if math.IsNaN(a.Difference) {
		return a
	}
	// What difference a drawing would have to be told from: where the true one
	// is d, the drawing's statistic is as great as that seen when d is at least
	// (seen - drawing's) / (1 - agreement). Those bounds are the interval.
	var bounds []float64
	same, greater, less := 0, 0, 0
	count := func(on *sums) {
		d, agrees := t.difference(on)
		if math.IsNaN(d) || agrees > 1-1e-9 {
			// As drawn; or nothing to divide by, which excludes nothing.
			same++
			return
		}
		bounds = append(bounds, (a.Difference-d)/(1-agrees))
		if d >= a.Difference-fuzz {
			greater++
		}
		if d <= a.Difference+fuzz {
			less++
		}
	}
	if t.possible() <= mostExact {
		a.Exact = true
		t.all(count)
	} else {
		rng := rand.New(rand.NewPCG(seed, 0xd2a3))
		count(&on)
		for range drawings {
			on := t.redrawn(rng)
			count(&on)
		}
	}
	n := same + len(bounds)
	a.Drawings = n
	a.P = math.Min(1, 2*float64(same+min(greater, less))/float64(n))
	a.Low, a.High = ends(bounds, same)
	return a
}

// PValue is P alone, from so many drawings and no more; for planning, where it is
// asked for thousands of times.
func (t *Trial) PValue(drawings int, rng *rand.Rand) float64 {
	on := t.truth()
	seen, _ := t.difference(&on)
	if math.IsNaN(seen) {
		return math.NaN()
	}
	greater, less := 1, 1 // the one drawn
	for range drawings {
		on = t.redrawn(rng)
		d, _ := t.difference(&on)
		if !(d < seen-fuzz) {
			greater++
		}
		if !(d > seen+fuzz) {
			less++
		}
	}
	return math.Min(1, 2*float64(min(greater, less))/float64(drawings+1))
}

// redrawn is one drawing by the schedule's rule.
func (t *Trial) redrawn(rng *rand.Rand) (on sums) {
	for _, list := range t.patterns {
		on.add(&list[rng.IntN(len(list))])
	}
	return on
}

// fuzz keeps differences that are alike but for rounding alike.
const fuzz = 1e-12

// ends are the least and the greatest difference that leave more than the level
// in either tail.
func ends(bounds []float64, same int) (low, high float64) {
	slices.Sort(bounds)
	n := float64(same + len(bounds))
	if float64(same) > level*n || len(bounds) == 0 {
		return math.Inf(-1), math.Inf(1)
	}
	// k bounds may be passed before more than the level agrees.
	k := int(math.Floor(level*n+1e-9)) - same
	return bounds[k], bounds[len(bounds)-1-k]
}

// possible is how many drawings there are.
func (t *Trial) possible() float64 {
	n := 1.0
	for _, list := range t.patterns {
		n *= float64(len(list))
	}
	return n
}

// all visits every drawing.
func (t *Trial) all(visit func(*sums)) {
	at := make([]int, len(t.patterns))
	for {
		var on sums
		for b, p := range at {
			on.add(&t.patterns[b][p])
		}
		visit(&on)
		b := 0
		for ; b < len(at); b++ {
			if at[b]++; at[b] < len(t.patterns[b]) {
				break
			}
			at[b] = 0
		}
		if b == len(at) {
			return
		}
	}
}

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Verdict of a randomised trial",
	Question: "Is what a trial shows more than the chance of which days were drawn?",
	Formula: "D = Σ part / Σ whole of the days on trial − the same of the days as usual, less that of the untouched zones; " +
		"p = 2 × the smaller share of drawings by the schedule's own rule with D at least, or at most, as great as seen (all drawings where at most 32,768, else 4,999 drawn anew and the one seen); " +
		"95 % interval: the constant differences that the same test does not reject (test inversion)",
	Limits: []string{
		"days count where the schedule put them, whatever was run (intention to treat); days not run as scheduled are counted and shown",
		"the interval takes the trial to move every day's share by the same amount; the p value does not",
		"what carries over from one day to the next (heat in the structure) makes a true difference look smaller",
	},
	Sources: []string{
		method.Public("Fisher 1935, The Design of Experiments, ch. II (the lady tasting tea) and ch. III"),
		method.Memory("intervals by inverting the test: e.g. Ernst 2004, Statistical Science 19:676"),
	},
	Standing: method.Published,
}
