package climate

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"

	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
)

// heightUsualM stands in where no zone's height is given. Common practice.
const heightUsualM = 3.0

// balanceOf sets up the heat balance; the height is the weighted mean of the
// zones that give one.
func balanceOf(s *site.Site, c criteria.Settings, run *running.Result) (HeatBalance, string) {
	sum, weight := 0.0, 0.0
	for z := range s.Zones {
		if h := s.Zones[z].HeightM; h > 0 && run.Weights[z] > 0 {
			sum += h * run.Weights[z]
			weight += run.Weights[z]
		}
	}
	if weight == 0 {
		return balanceBy(c, heightUsualM), fmt.Sprintf("no zone's height is given: %g m assumed (common practice)", heightUsualM)
	}
	return balanceBy(c, sum/weight), fmt.Sprintf("mean height of the zones, %.2f m", sum/weight)
}

// balanceBy is the heat balance of rooms of a height by the settings.
func balanceBy(c criteria.Settings, heightM float64) HeatBalance {
	return HeatBalance{GainsWm2: c.ClimateGainsWm2, LossWm2K: c.ClimateLossWm2K, MinAirChangePerH: c.ClimateMinAirChangePerH,
		MaxAirChangePerH: math.Max(c.ClimateMaxAirChangePerH, c.ClimateMinAirChangePerH), HeightM: heightM,
		HeatingC: c.ClimateHeatingC, CoolingC: math.Max(c.ClimateCoolingC, c.ClimateHeatingC), DewPointMaxC: c.DewPointMaxC}
}

// needsOf judges every step of a record by the balance.
func needsOf(r *record, b HeatBalance) []Need {
	needs := make([]Need, r.g.N)
	for i := range needs {
		needs[i] = b.Need(float64(r.out.TempC[i]), r.dew(i))
	}
	return needs
}

// countOf counts a way's votes over the average occupant's time.
func countOf(w way, r *record) Method {
	m := Method{Name: w.name, Words: w.words, Source: w.source}
	var sum [outside + 1]float64
	for i := r.g.PeriodFrom; i < r.g.PeriodTo; i++ {
		sum[w.votes[i]] += float64(r.occ[i])
	}
	h := r.g.StepH()
	m.SuitedH, m.UnknownH, m.OutsideH = sum[yes]*h, sum[unknown]*h, sum[outside]*h
	return m
}

// offer counts everything that a record needs no zone for.
func (res *Result) offer(c criteria.Settings, r *record) (*Offer, []vote) {
	upper := upperOfDay(c, r)
	headline := headlineBare(c, r, upper)
	o, _ := res.offerOf(c, r, upper)
	o.Methods = slices.Insert(o.Methods, 0, countOf(way{"headline", "the headline rule by temperature and humidity alone, runs of any length", "as measured, less wind, rain and pollution", headline}, r))
	return o, headline
}

// offerOf counts the ways other than the headline.
func (res *Result) offerOf(c criteria.Settings, r *record, upper []float32) (*Offer, []way) {
	o := &Offer{Name: r.name, RequiredMedianPerH: math.NaN(), Required90PerH: math.NaN()}
	needs := needsOf(r, res.Balance)
	credited := make([]bool, r.g.N)
	o.Night = nights(r, res.Balance, c.NightStoreC, c.PurgeDifferenceK, needs, credited)
	o.require(r, res.Balance, needs)
	ways := waysOf(c, r, upper, res.Balance, needs, credited)
	for _, w := range ways {
		o.Methods = append(o.Methods, countOf(w, r))
	}
	return o, ways
}

// require sums the hours by need and the air change asked for.
func (o *Offer) require(r *record, b HeatBalance, needs []Need) {
	const perUnit = 100 // classes of 0.01 per hour keep the quantiles exact enough
	hours := map[int]float64{}
	for i := r.g.PeriodFrom; i < r.g.PeriodTo; i++ {
		h := float64(r.occ[i]) * r.g.StepH()
		if h == 0 {
			continue
		}
		o.OccupiedH += h
		o.NeedH[needs[i]] += h
		if needs[i] == NeedMore || needs[i] == NeedBeyond {
			asked := math.Min(b.RequiredAirChangePerH(float64(r.out.TempC[i])), 1e6)
			hours[int(math.Round(asked*perUnit))] += h
		}
	}
	if len(hours) == 0 {
		return
	}
	var rate, weight []float64
	for k := range hours {
		rate = append(rate, float64(k)/perUnit)
	}
	slices.Sort(rate)
	for _, v := range rate {
		weight = append(weight, hours[int(math.Round(v*perUnit))])
	}
	o.RequiredMedianPerH = stat.Quantile(0.5, stat.Empirical, rate, weight)
	o.Required90PerH = stat.Quantile(0.9, stat.Empirical, rate, weight)
}

// measure counts the measured record, with the headline as the zones have it,
// and how far the ways agree.
func (res *Result) measure(in *Input, r *record) {
	o, ways := res.offerOf(in.Criteria, r, upperOfDay(in.Criteria, r))
	n := len(ways) + 1
	agree := newAgreement(n)
	votes := agree.pack(r.g.N, ways)
	headline := Method{Name: "headline", Words: "the headline rule with wind, rain and pollution where logged, each zone by its own category", Source: "lower limit from memory: Chen, Tong & Malkawi 2017; upper limit EN 16798-1"}
	for z := range in.Running.Zones {
		w := in.Running.Weights[z]
		if w == 0 || in.Running.Zones[z].NoOpening || in.Potential.Zones[z].Suit == nil {
			continue
		}
		suit := in.Potential.Zones[z].Suit
		var sum [outside + 1]float64
		for i := r.g.PeriodFrom; i < r.g.PeriodTo; i++ {
			if in.Running.Zones[z].Occupied[i] != running.Occupied {
				continue
			}
			v := ofSuit(suit[i])
			sum[v]++
			agree.add(votes[i]|agree.bits(0, v), w)
		}
		headline.SuitedH += w * sum[yes] * r.g.StepH()
		headline.UnknownH += w * sum[unknown] * r.g.StepH()
	}
	o.Methods = slices.Insert(o.Methods, 0, headline)
	res.Measured, res.Agreement = o, agree.pairs(r.g.StepH())
}

// agreement counts the steps by what all ways say of them: one bit per way for
// yes, one for known.
type agreement struct {
	n      int
	weight []float64
}

func newAgreement(n int) *agreement { return &agreement{n: n, weight: make([]float64, 1<<(2*n))} }

func (a *agreement) bits(k int, v vote) uint32 {
	switch v {
	case yes:
		return 1<<k | 1<<(a.n+k)
	case no:
		return 1 << (a.n + k)
	}
	return 0
}

// pack gathers the votes of ways 1 and on.
func (a *agreement) pack(steps int, ways []way) []uint32 {
	out := make([]uint32, steps)
	for k, w := range ways {
		for i, v := range w.votes {
			out[i] |= a.bits(k+1, v)
		}
	}
	return out
}

func (a *agreement) add(bits uint32, weight float64) { a.weight[bits] += weight }

func (a *agreement) pairs(stepH float64) [][]Pair {
	out := make([][]Pair, a.n)
	for j := range out {
		out[j] = make([]Pair, a.n)
		for k := range out[j] {
			p := &out[j][k]
			same := 0.0
			both := uint32(1<<(a.n+j) | 1<<(a.n+k))
			for bits, w := range a.weight {
				if w == 0 || uint32(bits)&both != both {
					continue
				}
				h := w * stepH
				p.KnownH += h
				first, second := bits>>j&1, bits>>k&1
				switch {
				case first == second:
					same += h
				case first == 1:
					p.OnlyFirstH += h
				default:
					p.OnlySecondH += h
				}
			}
			p.AgreeShare = same / p.KnownH // NaN without common hours
		}
	}
	return out
}
