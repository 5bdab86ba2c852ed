package randomisation

import (
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"
)

// pairs makes blocks of two, the first of each on trial.
func pairs(trial, usual []float64) []Block {
	var out []Block
	for i := range trial {
		out = append(out, Block{Days: []Day{{Main: Ratio{trial[i], 1}}, {Main: Ratio{usual[i], 1}}}, Patterns: [][]bool{{true, false}, {false, true}}})
	}
	return out
}

// The lady tasting tea: eight cups, four of each kind, all told right. One
// drawing of 70 does as well (Fisher 1935, The Design of Experiments, section 5).
func TestTea(t *testing.T) {
	b := Block{}
	for k := range 8 {
		part := 0.0
		if k < 4 {
			part = 1
		}
		b.Days = append(b.Days, Day{Main: Ratio{part, 1}})
	}
	for mask := range 1 << 8 {
		var p []bool
		n := 0
		for k := range 8 {
			p = append(p, mask>>k&1 == 1)
			n += mask >> k & 1
		}
		if n == 4 {
			if mask == 0b1111 {
				b.Drawn = len(b.Patterns)
			}
			b.Patterns = append(b.Patterns, p)
		}
	}
	a := New([]Block{b}, false).Infer(Drawings, 1)
	if !a.Exact || a.Drawings != 70 || math.Abs(a.P-2.0/70) > 1e-15 || a.Difference != 1 {
		t.Errorf("%+v, want 1/70 in the one tail", a)
	}
}

// Darwin's fifteen pairs of maize, crossed less self-fertilised, in eighths of
// an inch. Of the 32,768 ways the pairs may have fallen, 1,726 give a total as
// far from zero as 314 (Fisher 1935, The Design of Experiments, section 21, from
// memory; the count is what full enumeration of the same numbers gives).
func TestDarwinsMaize(t *testing.T) {
	d := []float64{49, -67, 8, 16, 6, 23, 28, 41, 14, 29, 56, 24, 75, 60, -48}
	a := New(pairs(d, make([]float64, len(d))), false).Infer(Drawings, 1)
	if !a.Exact || a.Drawings != 32768 || math.Abs(a.P-1726.0/32768) > 1e-12 || math.Abs(a.Difference-314.0/15) > 1e-12 {
		t.Errorf("p %.6f of %d drawings, difference %g; want 1,726 of 32,768 = %.6f", a.P, a.Drawings, a.Difference, 1726.0/32768)
	}
	// Not rejected at 5 %: zero lies just inside the interval.
	if !(a.Low < 0 && a.Low > -2 && a.High > 40) {
		t.Errorf("interval %g to %g", a.Low, a.High)
	}
}

// fortnights makes blocks of four days of which two are on trial, with unequal
// wholes and untouched zones; the effect is added to every share on trial.
func fortnights(rng *rand.Rand, n int, effect float64) []Block {
	var out []Block
	all := [][]bool{{true, true, false, false}, {true, false, true, false}, {true, false, false, true}, {false, true, true, false}, {false, true, false, true}, {false, false, true, true}}
	for range n {
		b := Block{Patterns: all, Drawn: rng.IntN(len(all))}
		for k := range 4 {
			whole, share := 1+4*rng.Float64(), rng.Float64()*0.6
			d := Day{Main: Ratio{whole * share, whole}, Untouched: Ratio{5 * (share + 0.1*rng.Float64()), 5}}
			if all[b.Drawn][k] {
				d.Main.Part += effect * whole
			}
			b.Days = append(b.Days, d)
		}
		out = append(out, b)
	}
	return out
}

// shifted takes a difference out of every day that was on trial.
func shifted(blocks []Block, by float64) []Block {
	var out []Block
	for _, b := range blocks {
		c := b
		c.Days = append([]Day(nil), b.Days...)
		for k := range c.Days {
			if b.Patterns[b.Drawn][k] {
				c.Days[k].Main.Part -= by * c.Days[k].Main.Whole
			}
		}
		out = append(out, c)
	}
	return out
}

// The interval is what the test says when asked for every difference: at its
// ends the p value crosses 5 %, checked by taking the difference out and testing
// anew.
func TestIntervalIsTheTestInverted(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		rng := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1))
		blocks := fortnights(rng, 4, rapid.Float64Range(-0.3, 0.3).Draw(t, "effect"))
		a := New(blocks, true).Infer(Drawings, 1)
		if !a.Exact || !(a.Low <= a.Difference && a.Difference <= a.High) {
			t.Fatalf("%+v", a)
		}
		for _, c := range []struct {
			at     float64
			inside bool
		}{{a.Low - 1e-6, false}, {a.Low + 1e-6, true}, {a.High - 1e-6, true}, {a.High + 1e-6, false}} {
			if p := New(shifted(blocks, c.at), true).Infer(Drawings, 1).P; (p > 0.05) != c.inside {
				t.Fatalf("at %g: p %g, interval %g to %g", c.at, p, a.Low, a.High)
			}
		}
	})
}

// Nothing differs: p is at most 5 % in at most 5 % of trials, and the interval
// holds the planted difference in at least 95 %; drawn anew agrees with all.
func TestNominalRates(t *testing.T) {
	const n = 1000
	rejected, missed := 0, 0
	for seed := range uint64(n) {
		rng := rand.New(rand.NewPCG(seed, 2))
		if New(fortnights(rng, 4, 0), true).Infer(Drawings, 1).P <= 0.05 {
			rejected++
		}
		a := New(fortnights(rng, 4, 0.2), true).Infer(Drawings, 1)
		if 0.2 < a.Low || 0.2 > a.High {
			missed++
		}
	}
	half := 1.96 * math.Sqrt(0.05*0.95/n)
	t.Logf("of %d trials in which nothing differed %.1f %% were called different; %.1f %% of intervals missed the difference (5 %% ± %.1f)", n, 100*float64(rejected)/n, 100*float64(missed)/n, 100*half)
	for _, k := range []int{rejected, missed} {
		if share := float64(k) / n; share > 0.05+half*1.3 || share < 0.02 {
			t.Errorf("%.3f, want about 0.05", share)
		}
	}
	rng := rand.New(rand.NewPCG(5, 5))
	blocks := fortnights(rng, 5, 0.1)
	all := New(blocks, true).Infer(Drawings, 1)
	trial := New(append(blocks, fortnights(rng, 1, 0.1)...), true)
	if a := trial.Infer(Drawings, 1); a.Exact || a.Drawings != Drawings+1 || !all.Exact {
		t.Errorf("%+v", a)
	}
}

// So few drawings exclude nothing; nothing to compare gives no figure.
func TestTooFew(t *testing.T) {
	a := New(pairs([]float64{1, 1, 1}, []float64{0, 0, 0}), false).Infer(Drawings, 1)
	if a.P != 0.25 || !math.IsInf(a.Low, -1) || !math.IsInf(a.High, 1) {
		t.Errorf("%+v", a)
	}
	if a := New(nil, false).Infer(Drawings, 1); !math.IsNaN(a.P) || !math.IsNaN(a.Difference) {
		t.Errorf("%+v", a)
	}
}
