package demo

import (
	"hash/fnv"
	"math"
	"math/rand/v2"
)

// stream returns the random stream of one purpose. Streams are keyed by (seed,
// name), so that leaving out a zone does not change the others' people.
func stream(seed uint64, name string) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(name))
	return rand.New(rand.NewPCG(seed, h.Sum64()))
}

// drifter is a stationary Gaussian process of unit variance whose correlation
// decays exponentially (Ornstein and Uhlenbeck), sampled at a fixed interval.
type drifter struct {
	x, keep, kick float64
	rng           *rand.Rand
}

func newDrifter(rng *rand.Rand, intervalS, decayS float64) *drifter {
	keep := math.Exp(-intervalS / decayS)
	return &drifter{x: rng.NormFloat64(), keep: keep, kick: math.Sqrt(1 - keep*keep), rng: rng}
}

func (d *drifter) next() float64 {
	d.x = d.keep*d.x + d.kick*d.rng.NormFloat64()
	return d.x
}

func logistic(x float64) float64 { return 1 / (1 + math.Exp(-x)) }

func clamp(x, low, high float64) float64 { return math.Max(low, math.Min(high, x)) }

// ramp rises from 0 at a to 1 at b.
func ramp(x, a, b float64) float64 { return clamp((x-a)/(b-a), 0, 1) }
