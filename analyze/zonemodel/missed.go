package zonemodel

import (
	"hash/fnv"
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat"

	"sashlog/analyze/hours"
)

// members of the ensemble of simulated trajectories.
const members = 60

func missed(c hours.Class) bool { return c >= hours.MissedCool && c <= hours.MissedUntyped }

// plain counts the missed hours as the record has them.
func (w *weather) plain(in *Input, z int) Missed {
	out := Missed{}
	for _, c := range in.Record.Class[z] {
		if missed(c) {
			out.PlainH += float64(in.Grid.StepS) / 3600
		}
	}
	return out
}

// missedH is how much of every model step was missed, in hours.
func (w *weather) missedH(in *Input, z int) []float64 {
	out := make([]float64, w.n)
	for k := range out {
		for _, c := range in.Record.Class[z][k*w.ratio : (k+1)*w.ratio] {
			if missed(c) {
				out[k] += float64(in.Grid.StepS) / 3600
			}
		}
	}
	return out
}

// expect simulates every missed run with the windows as far open as the zone
// usually has them, from the temperatures at its start, and counts the hours
// inside the comfort limits of open mode.
func (w *weather) expect(in *Input, z int, s *zoneSeries, states []state, m *fitted, inflate float64, out *Missed) {
	at := w.missedH(in, z)
	seen, share := s.seen()
	out.OpenShare = share
	low, high := in.Exceedance.Zones[z].Limits.LowOfDayC, in.Exceedance.Zones[z].Limits.UpperOfDayC
	lowC, highC := aggregate(low, w.n, w.ratio), aggregate(high, w.n, w.ratio)
	key := fnv.New64a()
	key.Write([]byte(in.Site.Zones[z].ID))
	rng := rand.New(rand.NewPCG(in.Seed, key.Sum64()))
	drawn := m.draw(rng, inflate)
	totals := make([]float64, members)
	air, mass := make([]float64, members), make([]float64, members)
	running := false
	for k := 1; k < w.n; k++ {
		if at[k] == 0 {
			running = false
			continue
		}
		d := halfway(&s.drive[k-1], &s.drive[k])
		d.share = share
		start := &states[k-1]
		switch {
		case math.IsNaN(d.outdoorC+d.sunKWm2+d.people+d.windMS+lowC[k]+highC[k]) || (!running && (start.vAir == 0 || math.IsNaN(s.tempC[k-1]))):
			out.UnknownH += at[k]
			running = false
			continue
		case d.outdoorC < seen[0] || d.outdoorC > seen[1]:
			out.OutsideH += at[k]
			running = false
			continue
		}
		if !running {
			running = true
			for j := range members {
				air[j] = start.airC + math.Sqrt(start.vAir)*rng.NormFloat64()
				mass[j] = start.massC + math.Sqrt(math.Max(0, start.vMass))*rng.NormFloat64()
			}
		}
		out.PredictedH += at[k]
		for j := range members {
			r := &drawn[j]
			st := r.over(s.hours, r.exchangePerH(&d, air[j]), &d)
			air[j], mass[j] = st.next(air[j], mass[j])
			air[j] += r.noiseAirK * rng.NormFloat64()
			mass[j] += r.noiseMassK * rng.NormFloat64()
			switch {
			case air[j] > highC[k]:
				out.WarmH += at[k] / members
			case air[j] < lowC[k]:
				out.CoolH += at[k] / members
			default:
				totals[j] += at[k]
			}
		}
	}
	for k := w.n * w.ratio; k < in.Grid.N; k++ { // less than a model step is left
		if missed(in.Record.Class[z][k]) {
			out.UnknownH += float64(in.Grid.StepS) / 3600
		}
	}
	if at[0] > 0 {
		out.UnknownH += at[0]
	}
	slices.Sort(totals)
	// A mean may lie beyond the quantiles where few members differ from the rest.
	mean := stat.Mean(totals, nil)
	out.ComfortableH = Estimate{mean, math.Min(mean, stat.Quantile(0.05, stat.LinInterp, totals, nil)),
		math.Max(mean, stat.Quantile(0.95, stat.LinInterp, totals, nil)) + out.OutsideH + out.UnknownH}
}

// seen is the range of outdoor temperatures with windows open, and how far they
// usually were.
func (s *zoneSeries) seen() (outdoorC [2]float64, share float64) {
	outdoorC = [2]float64{math.Inf(1), math.Inf(-1)}
	n := 0.0
	for k, open := range s.open {
		if open {
			d := &s.drive[k]
			outdoorC[0], outdoorC[1] = math.Min(outdoorC[0], d.outdoorC), math.Max(outdoorC[1], d.outdoorC)
			share, n = share+d.share, n+1
		}
	}
	return outdoorC, share / n
}

// draw makes members of the parameters' distribution, their noise made larger by
// as much as forecasts on days held out erred more than the model says.
func (m *fitted) draw(rng *rand.Rand, inflate float64) []rates {
	out := make([]rates, members)
	p := len(m.list)
	var eigen mat.EigenSym
	ok := eigen.Factorize(m.covariance, true)
	var vectors mat.Dense
	var values []float64
	if ok {
		eigen.VectorsTo(&vectors)
		values = eigen.Values(nil)
	}
	x := make([]float64, p)
	for j := range out {
		copy(x, m.x)
		if ok {
			for e, v := range values {
				step := math.Sqrt(math.Max(0, v)) * rng.NormFloat64()
				for k := range x {
					x[k] += vectors.At(k, e) * step
				}
			}
		}
		out[j] = m.form.ratesOf(m.list, x)
		out[j].noiseAirK = m.rates.noiseAirK * inflate
		out[j].noiseMassK = m.rates.noiseMassK * inflate
	}
	return out
}
