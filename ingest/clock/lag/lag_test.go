package lag

import (
	"math"
	"math/rand/v2"
	"testing"
)

// The series are noise with a known shift, so what must be found follows from
// how they were made.
const (
	binMin = 15.0
	perDay = 96
)

// common is smooth noise known between bins: the sum of waves of 0.8 to 30 h.
type common struct{ freq, phase []float64 }

func newCommon(seed uint64) *common {
	r := rand.New(rand.NewPCG(seed, 1))
	c := &common{}
	for range 40 {
		c.freq, c.phase = append(c.freq, 2*math.Pi/(60*0.8*math.Pow(37.5, r.Float64()))), append(c.phase, 2*math.Pi*r.Float64())
	}
	return c
}

func (c *common) at(min float64) (v float64) {
	for i, f := range c.freq {
		v += math.Sin(f*min + c.phase[i])
	}
	return v / 4.5
}

// logs makes what others say and what a log says that runs ahead by shift
// minutes on each day, with noise of its own.
func logs(seed uint64, days int, noise float64, shift func(day int) float64) (*Frame, []Pair) {
	r := rand.New(rand.NewPCG(seed, 2))
	c := newCommon(seed)
	n := days * perDay
	truth, mine := make([]float64, n), make([]float64, n)
	for b := range n {
		truth[b] = c.at(float64(b) * binMin)
		mine[b] = c.at(float64(b)*binMin-shift(b/perDay)) + noise*r.NormFloat64()
	}
	fr := &Frame{BinMin: binMin, MostH: 14}
	for d := range days {
		fr.Days = append(fr.Days, Span{d * perDay, (d + 1) * perDay})
	}
	return fr, []Pair{{mine, truth}}
}

func summer(day int) bool { return day >= 80 && day < 290 }

func TestFind(t *testing.T) {
	for _, c := range []struct {
		name  string
		days  int
		shift func(day int) float64
		kind  Kind
		at    float64 // shift in the end
		tol   float64
	}{
		{"right", 365, func(int) float64 { return 0 }, Right, 0, 3},
		{"a slow room", 365, func(int) float64 { return 12 }, Right, 12, 3},
		{"another zone", 120, func(int) float64 { return -480 }, Constant, -480, 0},
		{"half an hour", 120, func(int) float64 { return 330 }, Constant, 330, 0},
		{"daylight saving", 365, func(d int) float64 {
			if summer(d) {
				return -60
			}
			return 0
		}, Seasonal, 0, 0},
		{"another zone without daylight saving", 365, func(d int) float64 {
			if summer(d) {
				return -360
			}
			return -300
		}, Seasonal, -300, 0},
		{"a month", 365, func(d int) float64 {
			if d >= 130 && d < 160 {
				return 60
			}
			return 0
		}, ForATime, 60, 0},
		{"a slow drift", 365, func(d int) float64 { return 2 * float64(d) / monthDays }, Drift, 24, 4},
		{"a drift", 365, func(d int) float64 { return -10 * float64(d) / monthDays }, Drift, -120, 6},
		{"a drift that was put right", 365, func(d int) float64 {
			if d < 84 || d >= 84+140 {
				return 0
			}
			return 10 * float64(d-84) / monthDays
		}, Drift, 46, 10},
	} {
		for seed := uint64(1); seed <= 3; seed++ {
			fr, pairs := logs(seed, c.days, 0.7, c.shift)
			fr.Seasonal = make([]float64, c.days)
			for d := range fr.Seasonal {
				if summer(d) {
					fr.Seasonal[d] = -60
				}
			}
			f := Find(fr, []*Witness{{Name: "noise", Class: Sky, Pairs: pairs, Logs: []string{"a", "b"}, Points: 2}})
			got := f.EndShiftMin
			if f.Kind == Right {
				got = f.ShiftMin
			}
			if f.Kind != c.kind || math.Abs(got-c.at) > c.tol {
				t.Errorf("%s, seed %d: kind %d, %g to %g min, days %d to %d, gain %.1f; want kind %d, %g", c.name, seed, f.Kind, f.ShiftMin, f.EndShiftMin, f.From, f.To, f.Gain, c.kind, c.at)
			}
			if c.kind == ForATime && (f.From < 129 || f.From > 131 || f.To < 159 || f.To > 161) {
				t.Errorf("%s, seed %d: days %d to %d", c.name, seed, f.From, f.To)
			}
		}
	}
}

// Series that have nothing in common say nothing, whatever their length.
func TestNothingInCommon(t *testing.T) {
	for seed := uint64(1); seed <= 20; seed++ {
		fr, a := logs(seed, 200, 0.7, func(int) float64 { return 0 })
		_, b := logs(seed+100, 200, 0.7, func(int) float64 { return 0 })
		f := Find(fr, []*Witness{{Class: Sky, Pairs: []Pair{{a[0].Mine, b[0].Truth}}, Points: 1}})
		if f.Kind > Right {
			t.Errorf("seed %d: kind %d, %g min, fit %.2f", seed, f.Kind, f.ShiftMin, f.Fit)
		}
	}
	if f := Find(&Frame{BinMin: binMin, MostH: 14}, nil); f.Kind != Unknown {
		t.Errorf("no witness: kind %d", f.Kind)
	}
}

// Two witnesses that contradict each other accuse nobody.
func TestContradiction(t *testing.T) {
	fr, a := logs(1, 120, 0.3, func(int) float64 { return 60 })
	_, b := logs(2, 120, 0.3, func(int) float64 { return 0 })
	f := Find(fr, []*Witness{{Name: "a", Class: People, Pairs: a, Points: 1}, {Name: "b", Class: People, Pairs: b, Points: 1}})
	if f.Kind > Right {
		t.Errorf("kind %d, %g min", f.Kind, f.ShiftMin)
	}
}

// The cubic goes through its points and keeps straight lines.
func TestAt(t *testing.T) {
	row := []float64{0, 1, 2, 3, 4, 9}
	for x, want := range map[float64]float64{1: 1, 1.5: 1.5, 2.25: 2.25, 5: 9, 4.5: 6.5, -1: 0, 7: 0} {
		if got := at(row, x); math.Abs(got-want) > 1e-12 {
			t.Errorf("at %g: %g, want %g", x, got, want)
		}
	}
}
