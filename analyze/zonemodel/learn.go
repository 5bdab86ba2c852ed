package zonemodel

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"

	"sashlog/analyze/cores"
)

// Settings of the method; our assumptions.
const (
	// LeastOpenDays with at least two hours of open mode are asked for.
	LeastOpenDays = 20
	// LimitRMSEK is the greatest error 4 hours ahead on days held out.
	LimitRMSEK = 1.0
	// MaxLearnDays are fitted to, spread over the period, to bound the work.
	MaxLearnDays = 30
	// leastTriedDays with a forecast 4 hours ahead make an error worth stating.
	leastTriedDays = 5
	// maxPriorShare of the precision of the opening's effect may come from the
	// prior; beyond, the data do not tell it.
	maxPriorShare = 0.5
	// maxCondition of the parameters' correlations: beyond, they cannot be told
	// apart.
	maxCondition = 1e5
	lags         = 8
	// leastReadings is a week of quarters of an hour.
	leastReadings = 672
)

// Learn fits a model to every zone's logs, tries it on days held out, and says
// what it expects of the zone's missed steps.
func Learn(in Input) *Result {
	w := gatherWeather(&in)
	out := &Result{Zones: make([]Zone, len(in.Site.Zones)), LimitRMSEK: LimitRMSEK, LeastOpenDays: LeastOpenDays, StepMin: stepS / 60, SunSource: w.sunSource, Members: members}
	sunlit := make([][]float64, len(out.Zones))
	for z := range sunlit {
		sunlit[z] = w.sunOn(in.Site.Zones[z].FacesDeg)
	}
	cores.Each(len(out.Zones), func(z int) { out.Zones[z] = w.learn(&in, z, sunlit[z]) })
	for z := range out.Zones {
		if out.Zones[z].Refused == "" {
			out.Offers++
		}
	}
	return out
}

func (w *weather) learn(in *Input, z int, sunWm2 []float64) Zone {
	out := Zone{ID: in.Site.Zones[z].ID}
	if in.Running.Zones[z].NoOpening {
		out.Refused = "the zone has no openings"
		return out
	}
	s := w.seriesOf(in, z, sunWm2)
	out.Inputs = s.words
	days := w.openDays(s, len(in.Calendar.Days), &out)
	out.Missed = w.plain(in, z)
	if out.OpenDays < LeastOpenDays {
		out.Refused = fmt.Sprintf("open mode with plant, openings and weather known on %d days; %d are needed", out.OpenDays, LeastOpenDays)
		return out
	}
	learned, dayOf := s.only(days.learn, w.dayOf)
	best, err := choose(learned, dayOf, form{sun: sunWm2 != nil, people: s.hasPeople}, w.windKnown)
	if err != nil {
		out.Refused = err.Error()
		return out
	}
	if best.n < leastReadings || best.covariance == nil {
		out.Refused = fmt.Sprintf("the zone's temperature is known in only %d quarters of an hour to learn from; %d are needed", best.n, leastReadings)
		return out
	}
	out.describe(best, s)
	states := make([]state, w.n)
	best.rates.filter(&s.series, nil, func(i int, x *state) { states[i] = *x })
	var inflate float64
	out.Errors, inflate = forecast(&best.rates, s, states, w.dayOf, days.heldOut)
	out.Residuals = whiteness(&best.rates, s, w.dayOf, days.heldOut)
	if out.Refused = out.refusal(best); out.Refused == "" {
		w.expect(in, z, s, states, best, inflate, &out.Missed)
	}
	return out
}

// split are the days fitted to and those held out.
type split struct{ learn, heldOut []bool }

// openDays parts the days: of every eight the third and fourth are held out.
func (w *weather) openDays(s *zoneSeries, days int, out *Zone) split {
	steps := make([]int, days)
	for k, o := range s.open {
		if o {
			steps[w.dayOf[k]]++
			out.OpenH += s.hours
		}
	}
	p := split{make([]bool, days), make([]bool, days)}
	var usable []int
	for d, n := range steps {
		if float64(n)*s.hours < 2 {
			continue
		}
		out.OpenDays++
		if (d/2)%4 == 1 {
			p.heldOut[d] = true
			out.HeldOutDays++
		} else {
			usable = append(usable, d)
		}
	}
	out.UsedDays = min(len(usable), MaxLearnDays)
	for k := range out.UsedDays {
		p.learn[usable[k*len(usable)/out.UsedDays]] = true
	}
	return p
}

// only copies the steps of some days, each run of days beginning anew.
func (s *zoneSeries) only(days []bool, dayOf []int32) (*series, []int32) {
	out, of := &series{hours: s.hours}, []int32(nil)
	last := -1
	for k, d := range dayOf {
		if !days[d] {
			continue
		}
		how := s.kind[k]
		if last != k-1 {
			how = blind
		}
		last = k
		out.tempC, out.drive, out.kind = append(out.tempC, s.tempC[k]), append(out.drive, s.drive[k]), append(out.kind, how)
		out.learn, of = append(out.learn, true), append(of, d)
	}
	return out, of
}

// choose selects forward by likelihood ratios at 5 % (Bacher & Madsen 2011):
// one constant, two, wind on the opening.
func choose(s *series, dayOf []int32, f form, wind bool) (*fitted, error) {
	var from [NumParameters]float64
	for p := range from {
		from[p] = Parameter(p).middle()
	}
	best, err := fit(s, dayOf, f, &from)
	two := f
	two.twoConstants = true
	tries := []form{two}
	if wind {
		tries = append(tries, f)
	}
	for k, t := range tries {
		if best != nil {
			if t = best.form; k == 0 {
				t.twoConstants = true
			} else {
				t.wind = true
			}
			for j, p := range best.list {
				from[p] = best.x[j]
			}
		}
		richer, errRicher := fit(s, dayOf, t, &from)
		if errRicher != nil {
			continue
		}
		if best == nil || 2*(best.negLogL-richer.negLogL) > (distuv.ChiSquared{K: float64(len(richer.list) - len(best.list))}).Quantile(0.95) {
			best, err = richer, nil
		}
	}
	return best, err
}

// wide90 makes a 90 % interval of a standard deviation that rests on some days.
func wide90(days int) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(max(1, days-1))}.Quantile(0.95)
}

func (o *Zone) describe(m *fitted, s *zoneSeries) {
	o.Constants, o.Opening = 1, "a rate proportional to how far the windows are open"
	if m.form.twoConstants {
		o.Constants = 2
	}
	if m.form.wind {
		o.Opening += ", and to the wind beside it"
	}
	var sum, n, windSum float64
	for k, open := range s.open {
		if open {
			sum, windSum, n = sum+s.drive[k].share, windSum+s.drive[k].windMS, n+1
		}
	}
	usual := drive{share: sum / n, windMS: windSum / n}
	o.FastH, o.SlowH = m.rates.constantsH(m.rates.exchangePerH(&usual, 0))
	wide := wide90(m.days)
	for k, p := range m.list {
		sd := math.Sqrt(m.covariance.At(k, k))
		e := Estimate{m.x[k], m.x[k] - wide*sd, m.x[k] + wide*sd}
		if priors[p].log {
			e = Estimate{math.Exp(e.Value), math.Exp(e.Low), math.Exp(e.High)}
		}
		o.Parameters = append(o.Parameters, Value{Parameter: p, Estimate: e, Told: m.priorShare[k] <= maxPriorShare})
	}
	o.Condition = condition(m.covariance)
}

// condition number of the correlations of a covariance.
func condition(c *mat.SymDense) float64 {
	n := c.SymmetricDim()
	correlation := mat.NewSymDense(n, nil)
	for k := range n {
		for j := k; j < n; j++ {
			correlation.SetSym(k, j, c.At(k, j)/math.Sqrt(c.At(k, k)*c.At(j, j)))
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(correlation, false) {
		return math.Inf(1)
	}
	v := eigen.Values(nil)
	if v[0] <= 0 {
		return math.Inf(1)
	}
	return v[n-1] / v[0]
}

// refusal is why the model is not offered, empty where it is.
func (o *Zone) refusal(m *fitted) string {
	e := o.Errors[1]
	switch {
	case e.Days < leastTriedDays:
		return fmt.Sprintf("forecasts 4 hours ahead on only %d of the days held out; %d are needed", e.Days, leastTriedDays)
	case e.RMSEK > LimitRMSEK:
		return fmt.Sprintf("the error 4 hours ahead on days held out is %.2f K, above the limit of %g K", e.RMSEK, LimitRMSEK)
	case e.RMSEK >= e.PersistenceRMSEK:
		return fmt.Sprintf("the error 4 hours ahead on days held out is %.2f K, no better than %.2f K of a temperature that stays as it is", e.RMSEK, e.PersistenceRMSEK)
	case o.Condition > maxCondition:
		return fmt.Sprintf("the data cannot tell the parameters apart (condition number %.2g)", o.Condition)
	}
	for k, p := range m.list {
		if p == OpenPerH && m.priorShare[k] > maxPriorShare {
			return "the data cannot tell what the openings do from what else acts on the zone"
		}
	}
	return ""
}

// whiteness tests the residuals of one step ahead on days held out (Ljung & Box
// 1978), over neighbours in one unbroken run.
func whiteness(r *rates, s *zoneSeries, dayOf []int32, heldOut []bool) (out Residuals) {
	residual := make([]float64, len(s.tempC))
	for k := range residual {
		residual[k] = math.NaN()
	}
	saved := s.learn
	s.learn = make([]bool, len(saved))
	for k := range s.learn {
		s.learn[k] = heldOut[dayOf[k]]
	}
	var raw, raw2 float64
	r.filter(&s.series, func(i int, e, variance float64) {
		residual[i] = e / math.Sqrt(variance)
		raw, raw2 = raw+e, raw2+e*e
		out.N++
	}, nil)
	s.learn = saved
	if out.N <= 10*lags {
		return Residuals{N: out.N, Lag1: math.NaN(), LjungBox: math.NaN(), P: math.NaN(), Lags: lags, SDK: math.NaN()}
	}
	n := float64(out.N)
	out.SDK, out.Lags = math.Sqrt(raw2/n-raw*raw/n/n), lags
	var square float64
	for _, e := range residual {
		if e == e {
			square += e * e
		}
	}
	for lag := 1; lag <= lags; lag++ {
		product := 0.0
		for k := lag; k < len(residual); k++ {
			if v := residual[k] * residual[k-lag]; v == v {
				product += v
			}
		}
		rho := product / square
		if lag == 1 {
			out.Lag1 = rho
		}
		out.LjungBox += n * (n + 2) * rho * rho / (n - float64(lag))
	}
	out.P = distuv.ChiSquared{K: lags}.Survival(out.LjungBox)
	return out
}
