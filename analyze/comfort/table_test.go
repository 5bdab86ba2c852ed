package comfort

import (
	"math"
	"math/rand/v2"
	"os"
	"sync"
	"testing"
)

// The middle of a cell is where straight lines between nodes err most: every
// cell of the table (every 29th unless SASHLOG_LONG is set), radiant as air
// temperature, both generations of the model.
func TestTableBoundInEveryCell(t *testing.T) {
	stride := 29
	if os.Getenv("SASHLOG_LONG") != "" {
		stride = 1
	}
	for _, o := range []SETOptions{{Form: SETFormB, Posture: Sitting}, {Form: SETFormA}} {
		tab := NewTable(1.2, o)
		var worst gaps
		cells, n := 0, 0
		for a := range tableTempC.n - 1 {
			for b := range tableRHPct.n - 1 {
				for c := range tableClo.n - 1 {
					for d := range tableSpeedsN - 1 {
						if n++; n%stride != 0 {
							continue
						}
						x := [4]float64{}
						for k, i := range []int{a, b, c, d} {
							ax := tab.coolK.axes[k]
							if k == 0 {
								ax = tableTempC
							}
							x[k] = ax.low + ax.step*(float64(i)+0.5)
						}
						if at := tab.at(x); tab.Covers(at) {
							cells++
							worst.add(tab, at, o)
						}
					}
				}
			}
		}
		if cells < 20000/stride {
			t.Fatalf("only %d cells", cells)
		}
		worst.check(t, TableSETWithinK, TableCoolingWithinK, TablePMVWithin)
	}
}

// Random conditions of several activities, with radiant as air temperature and
// apart from it.
func TestTableBoundAtRandom(t *testing.T) {
	rng := rand.New(rand.NewPCG(20, 26))
	o := SETOptions{Form: SETFormB, Posture: Sitting}
	for _, met := range []float64{1.0, 1.1, 1.2, 1.4} {
		tab := NewTable(met, o)
		for _, apart := range []float64{0, TableRadiantK} {
			var worst gaps
			for range 400 {
				c := Conditions{AirC: 12 + 19*rng.Float64(), AirSpeedMS: 1.25 * rng.Float64(), RHPct: 100 * rng.Float64(), Met: met, Clo: 0.25 + rng.Float64()}
				c.RadiantC = c.AirC + apart*(2*rng.Float64()-1)
				worst.add(tab, c, o)
			}
			if apart == 0 {
				worst.check(t, TableSETWithinK, TableCoolingWithinK, TablePMVWithin)
			} else {
				worst.check(t, TableSETRadiantWithinK, TableCoolingRadiantWithinK, TablePMVRadiantWithin)
			}
		}
	}
}

// gaps are the greatest differences from the exact functions.
type gaps struct{ set, cooling, pmv float64 }

func (g *gaps) add(tab *Table, c Conditions, o SETOptions) {
	g.set = math.Max(g.set, math.Abs(tab.SET(c)-SET(c, o)))
	exact, found := CoolingEffectK(c, o)
	got, also := tab.CoolingEffectK(c)
	if found != also && exact+got > TableCoolingWithinK {
		g.cooling = math.Inf(1)
	}
	if !found || !also {
		return
	}
	g.cooling = math.Max(g.cooling, math.Abs(got-exact))
	want := PMV(c)
	if c.AirSpeedMS > 0.1 {
		want = PMV(stillAndCooler(c, exact))
	}
	g.pmv = math.Max(g.pmv, math.Abs(tab.PMVElevated(c)-want))
}

func (g *gaps) check(t *testing.T, set, cooling, pmv float64) {
	t.Helper()
	t.Logf("SET %.3f K, cooling effect %.3f K, PMV %.4f", g.set, g.cooling, g.pmv)
	if !(g.set <= set) || !(g.cooling <= cooling) || !(g.pmv <= pmv) {
		t.Errorf("off by SET %g K, cooling effect %g K, PMV %g; the bounds are %g, %g, %g", g.set, g.cooling, g.pmv, set, cooling, pmv)
	}
	if g.set == 0 || g.cooling == 0 {
		t.Error("no difference at all: the table was not asked")
	}
}

// Outside the table the exact functions answer, bit by bit.
func TestTableOutside(t *testing.T) {
	o := SETOptions{Form: SETFormB}
	tab := NewTable(1.2, o)
	for _, c := range []Conditions{
		{AirC: 34, RadiantC: 34, AirSpeedMS: 0.4, RHPct: 50, Met: 1.2, Clo: 0.5},
		{AirC: 8, RadiantC: 8, AirSpeedMS: 0.4, RHPct: 50, Met: 1.2, Clo: 0.5},
		{AirC: 25, RadiantC: 25 + TableRadiantK + 0.01, AirSpeedMS: 0.4, RHPct: 50, Met: 1.2, Clo: 0.5},
		{AirC: 25, RadiantC: 25, AirSpeedMS: 1.3, RHPct: 50, Met: 1.2, Clo: 0.5},
		{AirC: 25, RadiantC: 25, AirSpeedMS: 0.4, RHPct: 50, Met: 2, Clo: 0.5},
		{AirC: 25, RadiantC: 25, AirSpeedMS: 0.4, RHPct: 50, Met: 1.2, Clo: 1.3},
		{AirC: 30.5, RadiantC: 30.5, AirSpeedMS: 0.4, RHPct: 70, Met: 1.2, Clo: 0.5},
		{AirC: 29.5, RadiantC: 29.5, AirSpeedMS: 0.4, RHPct: 50, Met: 1.2, Clo: 0.9},
	} {
		if tab.Covers(c) {
			t.Errorf("%+v is said to be covered", c)
		}
		if got, want := tab.SET(c), SET(c, o); got != want {
			t.Errorf("%+v: %v, want %v", c, got, want)
		}
		if got, want := tab.PMVElevated(c), PMVElevated(c, o); got != want {
			t.Errorf("%+v: %v, want %v", c, got, want)
		}
	}
	unknown := Conditions{AirC: math.NaN(), RadiantC: 20, AirSpeedMS: 0.4, RHPct: 50, Met: 1.2, Clo: 0.5}
	if v := tab.SET(unknown); !math.IsNaN(v) {
		t.Errorf("unknown gives %g", v)
	}
	if v := tab.PMVElevated(unknown); !math.IsNaN(v) {
		t.Errorf("unknown gives %g", v)
	}
}

// Two callers at once get what one gets.
func TestTableShared(t *testing.T) {
	o := SETOptions{Form: SETFormB}
	alone, shared := NewTable(1.2, o), NewTable(1.2, o)
	var wait sync.WaitGroup
	for range 4 {
		wait.Add(1)
		go func() {
			defer wait.Done()
			for i := range 40 {
				c := yearStep(i * 997)
				if shared.SET(c) != alone.SET(c) {
					t.Error("differs")
				}
			}
		}()
	}
	wait.Wait()
}

// yearStep are the conditions of an invented room in step i.
func yearStep(i int) Conditions {
	day, hour := float64(i)/288, float64(i%288)/12
	t := 23 - 2*math.Cos(2*math.Pi*day/365) + 1.5*math.Sin(2*math.Pi*(hour-9)/24) + 0.3*math.Sin(float64(i)/17)
	return Conditions{AirC: t, RadiantC: t, AirSpeedMS: 0.16 + 0.3*math.Max(0, math.Sin(float64(i)/31)), RHPct: 45 + 15*math.Sin(day/11), Met: 1.2, Clo: 0.7 + 0.2*math.Cos(2*math.Pi*day/365)}
}

// A year of 60 rooms in steps of 5 min: votes, votes with moving air and SET
// of every step, on one core. The exact functions are asked for every 200th
// step; set the times side by side.
func BenchmarkYearOf60Rooms(b *testing.B) {
	const steps = 60 * 105120
	o := SETOptions{Form: SETFormB, Posture: Sitting}
	sum := 0.0
	b.Run("PMV and SET, table", func(b *testing.B) {
		for b.Loop() {
			tab := NewTable(1.2, o)
			for i := range steps {
				c := yearStep(i)
				sum += PMV(c) + tab.SET(c)
			}
		}
	})
	b.Run("PMV with moving air, table", func(b *testing.B) {
		for b.Loop() {
			tab := NewTable(1.2, o)
			for i := range steps {
				sum += tab.PMVElevated(yearStep(i))
			}
		}
	})
	b.Run("conditions alone", func(b *testing.B) {
		for b.Loop() {
			for i := range steps {
				sum += yearStep(i).AirC
			}
		}
	})
	b.Run("PMV and SET, exact, one step in 200", func(b *testing.B) {
		for b.Loop() {
			for i := 0; i < steps; i += 200 {
				c := yearStep(i)
				sum += PMV(c) + SET(c, o)
			}
		}
	})
	b.Run("PMV with moving air, exact, one step in 200", func(b *testing.B) {
		for b.Loop() {
			for i := 0; i < steps; i += 200 {
				sum += PMVElevated(yearStep(i), o)
			}
		}
	})
	_ = sum
}
