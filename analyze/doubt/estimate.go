package doubt

import (
	"fmt"
	"hash/fnv"
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/stat/distuv"

	"sashlog/analyze/cores"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
)

// z90 is the half width of a 90 % interval in standard deviations.
var z90 = distuv.UnitNormal.Quantile(0.95)

// counts are one zone's hours in one draw.
type counts struct{ suited, achieved, ok, missed, notNeeded float64 }

// Estimate works out the intervals of every zone and of the building.
func Estimate(in Input) *Result {
	c := in.Criteria
	r := &Result{Zones: make([]Figures, len(in.Site.Zones)), Draws: draws}
	accuracy := [NumParts]float64{c.AccuracyOutdoorTempK, c.AccuracyHumidityPct, c.AccuracyIndoorTempK, c.AccuracyCO2PPM}
	r.Assumed = [NumParts]string{
		fmt.Sprintf("±%g K", accuracy[OutdoorTemp]), fmt.Sprintf("±%g %% relative humidity", accuracy[OutdoorHumidity]), fmt.Sprintf("±%g K", accuracy[IndoorTemp]),
		fmt.Sprintf("±(%g ppm + %g %%), and ±%g ppm outdoors", accuracy[CO2], c.AccuracyCO2Pct, c.OutdoorCO2DoubtPPM),
	}
	r.Logged = [NumParts]bool{OutdoorTemp: in.Outdoor.TempC != nil, OutdoorHumidity: in.Outdoor.DewPointC != nil}
	for z := range in.Indoor {
		r.Logged[IndoorTemp] = r.Logged[IndoorTemp] || in.Indoor[z].OperativeC != nil
		r.Logged[CO2] = r.Logged[CO2] || in.Indoor[z].CO2PPM != nil
	}
	e := &estimator{in: &in, quantiles: unitQuantiles(), every: 1}
	base := e.draw(in.Outdoor, nil, nil)
	e.every = max(1, int(lookEachS/in.Grid.StepS))
	var sample [NumParts][][]counts // by draw, zone
	for p := range sample {
		if !r.Logged[p] {
			continue
		}
		for k := range draws {
			sample[p] = append(sample[p], e.part(Part(p), k, accuracy[p]))
		}
	}
	for z := range r.Zones {
		var byPart [NumParts][]counts
		for p := range sample {
			for k := range sample[p] {
				byPart[p] = append(byPart[p], sample[p][k][z])
			}
		}
		r.Zones[z] = figures(base[z], byPart)
	}
	r.Building = building(in.Weights, base, &sample)
	r.UnknownHalfH = unknownHalfH(&in)
	return r
}

// unknownHalfH is half of what the suited hours nobody can judge leave open for
// the average occupant.
func unknownHalfH(in *Input) float64 {
	sum := 0.0
	for z, w := range in.Weights {
		if w > 0 {
			sum += w * float64(hours.ClassSteps(in.Input, z, 1)[hours.UnjudgedSuited])
		}
	}
	return sum * in.Grid.StepH() / 2
}

// unitQuantiles are equally likely values of a standard normal error, scaled
// to unit variance.
func unitQuantiles() [draws]float64 {
	var q [draws]float64
	sum := 0.0
	for k := range q {
		q[k] = distuv.UnitNormal.Quantile((float64(k) + 0.5) / draws)
		sum += q[k] * q[k]
	}
	for k := range q {
		q[k] /= math.Sqrt(sum / draws)
	}
	return q
}

type estimator struct {
	in        *Input
	quantiles [draws]float64
	every     int // steps are looked at
}

// lookEachS is how far apart the steps lie that the draws look at: enough for
// a spread, at a third of the cost.
const lookEachS = 900

// part judges once with the k-th error of one part.
func (e *estimator) part(p Part, k int, accuracy float64) []counts {
	in := e.in
	sd, noiseSD := accuracy/2, accuracy/10
	switch p {
	case OutdoorTemp, OutdoorHumidity:
		n := newNoise(in.Seed, p.String(), k)
		list := make([]float32, in.Grid.N)
		for i := range list {
			list[i] = float32(e.quantiles[k]*sd + n.at(i)*noiseSD)
		}
		if p == OutdoorTemp {
			return e.draw(in.Outdoor.WithErrors(in.Grid, in.Calendar, list, nil), nil, nil)
		}
		return e.draw(in.Outdoor.WithErrors(in.Grid, in.Calendar, nil, list), nil, nil)
	case IndoorTemp:
		return e.draw(in.Outdoor, func(z int, t []float32) []float32 {
			n := newNoise(in.Seed, in.Site.Zones[z].ID+"/temperature", k)
			bias := e.quantiles[n.order[k]] * sd
			return shifted(t, func(i int, v float64) float64 { return v + bias + n.at(i)*noiseSD })
		}, nil)
	}
	share := in.Criteria.AccuracyCO2Pct / 100
	return e.draw(in.Outdoor, nil, func(z int, ppm []float32) []float32 {
		n := newNoise(in.Seed, in.Site.Zones[z].ID+"/CO2", k)
		unit := e.quantiles[n.order[k]]
		outdoorSD := in.Criteria.OutdoorCO2DoubtPPM / 2
		return shifted(ppm, func(i int, v float64) float64 {
			own := (accuracy + share*v) / 2
			return v + unit*math.Hypot(own, outdoorSD) + n.at(i)*noiseSD
		})
	})
}

func shifted(list []float32, by func(i int, v float64) float64) []float32 {
	if list == nil {
		return nil
	}
	out := make([]float32, len(list))
	for i, v := range list {
		out[i] = float32(by(i, float64(v)))
	}
	return out
}

// draw judges every zone under the given weather and errors of its sensors.
func (e *estimator) draw(out *outdoor.Outdoor, temp, co2 func(z int, list []float32) []float32) []counts {
	in := e.in
	same := out == in.Outdoor
	var limiter *exceedance.Limiter
	var headline *potential.Headline
	suits := map[*float32][]potential.Suit{}
	if !same {
		limiter, headline = exceedance.NewLimiter(in.Site, in.Criteria, in.Grid, out), potential.NewHeadline(in.Criteria, in.Grid, out)
		for z := range in.Site.Zones { // zones share the limits of a day
			if in.Running.Zones[z].NoOpening || in.Grid.N == 0 {
				continue
			}
			if upper := limiter.Upper(z); suits[&upper[0]] == nil {
				suits[&upper[0]] = headline.Suit(upper)
			}
		}
	}
	list := make([]counts, len(in.Site.Zones))
	cores.Each(len(list), func(z int) {
		if in.Running.Zones[z].NoOpening || in.Grid.N == 0 {
			return
		}
		one := in.Input
		one.Outdoor = out
		if !same {
			one.Exceedance = &exceedance.Result{Zones: make([]exceedance.Zone, len(list))}
			one.Exceedance.Zones[z].Limits = limiter.Zone(z, in.Exceedance.Zones[z].Limits.Free)
			one.Potential = &potential.Result{Zones: make([]potential.Zone, len(list))}
			one.Potential.Zones[z].Suit = suits[&limiter.Upper(z)[0]]
		}
		if temp != nil || co2 != nil {
			one.Indoor = make([]indoor.Zone, len(list))
			room := in.Indoor[z]
			if temp != nil {
				room.OperativeC = temp(z, room.OperativeC)
			}
			if co2 != nil {
				room.CO2PPM = co2(z, room.CO2PPM)
			}
			one.Indoor[z] = room
		}
		list[z] = countsOf(hours.ClassSteps(one, z, e.every), in.Grid.StepH())
	})
	return list
}

func countsOf(steps [hours.NumClasses]int, stepH float64) (c counts) {
	for k, n := range steps {
		class, h := hours.Class(k), float64(n)*stepH
		switch {
		case class.Achieved():
			c.achieved += h
			if class == hours.AchievedOK {
				c.ok += h
			}
		case class.Missed():
			c.missed += h
		case class == hours.NotNeeded:
			c.notNeeded += h
		case class != hours.UnjudgedSuited:
			continue
		}
		c.suited += h
	}
	return c
}

// noise is a table of standard normal errors read at a stride, so that a year
// costs no more than a few thousand draws; order is the zone's own order of
// the quantiles, so that zones err independently of each other.
type noise struct {
	table  [1 << noiseBits]float32
	offset int
	order  [draws]int
}

const noiseBits = 10

func newNoise(seed uint64, key string, k int) *noise {
	h := fnv.New64a()
	h.Write([]byte(key))
	own := rand.New(rand.NewPCG(seed, h.Sum64()))
	n := &noise{}
	copy(n.order[:], own.Perm(draws))
	rng := rand.New(rand.NewPCG(seed^uint64(k+1), h.Sum64()))
	for i := range n.table {
		n.table[i] = float32(rng.NormFloat64())
	}
	n.offset = rng.IntN(len(n.table))
	return n
}

func (n *noise) at(i int) float64 { return float64(n.table[(i*467+n.offset)&(1<<noiseBits-1)]) }
