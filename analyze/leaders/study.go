package leaders

import (
	"hash/fnv"
	"math"
	"math/rand/v2"
	"sort"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// study holds the moments without a start, by time of day.
type study struct {
	in     *Input
	u      *unit
	bySlot [48][]int
}

const (
	matchK    = 1.5
	matchMin  = 5  // moments needed
	matchMost = 80 // moments used
	awayMin   = 60 // no start so near
)

func (in *Input) newStudy(u *unit) *study {
	s := &study{in: in, u: u}
	g := in.Grid
	away := int(awayMin * 60 / g.StepS)
	near := make([]bool, g.N)
	for _, st := range u.starts {
		for k := max(0, st.FromStep-away); k < min(g.N, st.FromStep+away); k++ {
			near[k] = true
		}
	}
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		if near[i] || u.state[i] != uint8(site.PlantOff) || i%2 != 0 {
			continue
		}
		for _, z := range u.zones {
			if in.Running.Zones[z].Occupied[i] == running.Occupied {
				m := in.Calendar.MinuteOfDay[i]
				s.bySlot[m/30] = append(s.bySlot[m/30], i)
				break
			}
		}
	}
	return s
}

// excess is a zone's temperature just before a start less its mean at matched
// moments, NaN without enough of them.
func (s *study) excess(z, start int) float64 {
	in := s.in
	t, outC := at(in.Indoor[z].OperativeC, start-1), at(in.Outdoor.TempC, start-1)
	if math.IsNaN(t) || math.IsNaN(outC) {
		return math.NaN()
	}
	slot := int(in.Calendar.MinuteOfDay[start]) / 30
	sum, n := 0.0, 0
	for _, k := range []int{slot, (slot + 47) % 48, (slot + 1) % 48} {
		for _, i := range s.bySlot[k] {
			if n >= matchMost {
				break
			}
			if in.Calendar.DayOf[i] == in.Calendar.DayOf[start] || math.Abs(at(in.Outdoor.TempC, i)-outC) > matchK {
				continue
			}
			if v := at(in.Indoor[z].OperativeC, i); !math.IsNaN(v) {
				sum, n = sum+v, n+1
			}
		}
	}
	if n < matchMin {
		return math.NaN()
	}
	return t - sum/float64(n)
}

func stream(seed uint64, key string) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(key))
	return rand.New(rand.NewPCG(seed, h.Sum64()))
}

const resamples = 400

// meanOver is a mean with its interval by drawing days.
func meanOver(values []float64, days []int32, rng *rand.Rand) Interval {
	sum, n := map[int32]float64{}, map[int32]float64{}
	var list []int32
	for k, v := range values {
		if math.IsNaN(v) {
			continue
		}
		if n[days[k]] == 0 {
			list = append(list, days[k])
		}
		sum[days[k]] += v
		n[days[k]]++
	}
	if len(list) < 2 {
		return Interval{math.NaN(), math.NaN(), math.NaN()}
	}
	mean := func(pick func(k int) int32) float64 {
		a, b := 0.0, 0.0
		for k := range list {
			d := pick(k)
			a, b = a+sum[d], b+n[d]
		}
		return a / b
	}
	out := Interval{Value: mean(func(k int) int32 { return list[k] })}
	draws := make([]float64, resamples)
	for r := range draws {
		draws[r] = mean(func(int) int32 { return list[rng.IntN(len(list))] })
	}
	out.Low, out.High = bounds(draws)
	return out
}

func bounds(draws []float64) (low, high float64) {
	sort.Float64s(draws)
	n := float64(len(draws) - 1)
	return draws[int(math.Round(0.025*n))], draws[int(math.Round(0.975*n))]
}

// explained draws blocks of days for the share of the missed hours that the
// first leaders explain.
func (in *Input) explained(perDay [][]float64) []Explained {
	days := len(in.Calendar.Days)
	missed := make([]float64, days)
	for z := range in.Record.Class {
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			if in.Record.Class[z][i].Missed() {
				missed[in.Calendar.DayOf[i]] += in.Grid.StepH()
			}
		}
	}
	var list []int
	for d, h := range missed {
		if h > 0 {
			list = append(list, d)
		}
	}
	var out []Explained
	if len(list) < 2 {
		return out
	}
	rng := stream(in.Seed, "leaders/explained")
	upTo := make([]float64, days)
	share := func(pick func(k int) int) float64 {
		a, b := 0.0, 0.0
		for k := range list {
			d := pick(k)
			a, b = a+upTo[d], b+missed[d]
		}
		return a / b
	}
	for n := range perDay {
		for d, h := range perDay[n] {
			upTo[d] += h
		}
		e := Explained{N: n + 1, Share: Interval{Value: share(func(k int) int { return list[k] })}}
		draws := make([]float64, resamples)
		for r := range draws {
			block := 0
			draws[r] = share(func(k int) int {
				if k%3 == 0 {
					block = rng.IntN(max(1, len(list)-2))
				}
				return list[min(len(list)-1, block+k%3)]
			})
		}
		e.Share.Low, e.Share.High = bounds(draws)
		out = append(out, e)
	}
	return out
}
