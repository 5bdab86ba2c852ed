package zonemodel

import "math"

// openShareOfRun is the share of a forecast's steps that must be open for it to
// count as one of open mode.
const openShareOfRun = 0.5

// tries collects forecasts of one horizon.
type tries struct {
	n, days                   int
	sum, sum2, stay2, spread2 float64
	lastDay                   int32
}

// forecast tries a model on the days held out: from every step there that is
// open, ahead over free steps at least half of which are open.
func forecast(r *rates, s *zoneSeries, states []state, dayOf []int32, heldOut []bool) (out [3]Error, inflate float64) {
	var all [3]tries
	for h := range all {
		all[h].lastDay = -1
	}
	far := int(math.Round(Horizons[2] / s.hours))
	for from := range s.tempC {
		if !heldOut[dayOf[from]] || !s.open[from] || math.IsNaN(s.tempC[from]) {
			continue
		}
		x, opened := states[from], 0
		for n := 1; n <= far && from+n < len(s.tempC) && s.kind[from+n] == free; n++ {
			d := halfway(&s.drive[from+n-1], &s.drive[from+n])
			x = r.predict(s.hours, &d, &x)
			if s.open[from+n] {
				opened++
			}
			y := s.tempC[from+n]
			for h := range Horizons {
				if n != int(math.Round(Horizons[h]/s.hours)) || math.IsNaN(y) || float64(opened) < openShareOfRun*float64(n) {
					continue
				}
				t := &all[h]
				e, stay := x.airC-y, s.tempC[from]-y
				t.n++
				t.sum, t.sum2, t.stay2, t.spread2 = t.sum+e, t.sum2+e*e, t.stay2+stay*stay, t.spread2+x.vAir+r.noiseSensorK*r.noiseSensorK
				if t.lastDay != dayOf[from] {
					t.lastDay, t.days = dayOf[from], t.days+1
				}
			}
		}
	}
	inflate = 1
	for h := range all {
		t := &all[h]
		out[h] = Error{HorizonH: Horizons[h], N: t.n, Days: t.days, RMSEK: math.NaN(), BiasK: math.NaN(), PersistenceRMSEK: math.NaN(), SpreadK: math.NaN()}
		if t.n == 0 {
			continue
		}
		k := float64(t.n)
		out[h].RMSEK, out[h].BiasK, out[h].PersistenceRMSEK = math.Sqrt(t.sum2/k), t.sum/k, math.Sqrt(t.stay2/k)
		out[h].SpreadK = math.Sqrt(t.spread2 / k)
		if h > 0 {
			inflate = math.Max(inflate, out[h].RMSEK/out[h].SpreadK)
		}
	}
	return out, inflate
}
