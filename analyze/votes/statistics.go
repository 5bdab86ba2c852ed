package votes

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Regress fits sensation = a + b·t by least squares and gives the temperature
// of a neutral vote with Fieller's 95 % interval. t in °C, both slices of one
// length. It refuses fewer than LeastForFits votes and slopes that could be
// zero.
func Regress(tempC, sensation []float64) Fit {
	n := len(tempC)
	f := Fit{Votes: n, SlopePerK: math.NaN(), SlopeLow: math.NaN(), SlopeHigh: math.NaN(), NeutralC: math.NaN(), NeutralLowC: math.NaN(), NeutralHiC: math.NaN()}
	if n < LeastForFits {
		f.Refused = fmt.Sprintf("%d votes, at least %d are needed", n, LeastForFits)
		return f
	}
	a, b := stat.LinearRegression(tempC, sensation, nil, false)
	meanT, varT := stat.MeanVariance(tempC, nil)
	sxx := varT * float64(n-1)
	if sxx == 0 {
		f.Refused = "all votes were given at one temperature"
		return f
	}
	rss := 0.0
	for i := range tempC {
		r := sensation[i] - a - b*tempC[i]
		rss += r * r
	}
	s2 := rss / float64(n-2)
	t := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(n - 2)}.Quantile(0.975)
	half := t * math.Sqrt(s2/sxx)
	f.SlopePerK, f.SlopeLow, f.SlopeHigh = b, b-half, b+half
	g := half * half / (b * b)
	if !(g < 1) || b <= 0 {
		f.Refused = "votes do not rise with temperature for certain: no neutral temperature"
		return f
	}
	// The neutral temperature lies -mean vote / slope from the mean; the two
	// are independent.
	offset := -stat.Mean(sensation, nil) / b
	wide := t / b * math.Sqrt(s2/float64(n)*(1-g)+offset*offset*s2/sxx)
	f.NeutralC = meanT + offset
	f.NeutralLowC, f.NeutralHiC = meanT+(offset-wide)/(1-g), meanT+(offset+wide)/(1-g)
	return f
}

// GriffithsNeutral is the mean of t - vote/GriffithsPerK with its 95 % interval
// (Student's t).
func GriffithsNeutral(tempC, sensation []float64) Neutral {
	list := make([]float64, len(tempC))
	for i := range list {
		list[i] = tempC[i] - sensation[i]/GriffithsPerK
	}
	mean, low, high := meanInterval(list)
	return Neutral{Votes: len(list), MeanC: mean, LowC: low, HighC: high}
}

// meanInterval is a mean with its 95 % interval, NaN where it cannot be had.
func meanInterval(x []float64) (mean, low, high float64) {
	if len(x) == 0 {
		return math.NaN(), math.NaN(), math.NaN()
	}
	mean, sd := stat.MeanStdDev(x, nil)
	if len(x) < 2 {
		return mean, math.NaN(), math.NaN()
	}
	half := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(len(x) - 1)}.Quantile(0.975) * sd / math.Sqrt(float64(len(x)))
	return mean, mean - half, mean + half
}

// ShareOf is yes of n with the exact interval of Clopper and Pearson.
func ShareOf(yes, n int) Share {
	s := Share{Yes: yes, Of: n, Value: math.NaN(), Low: math.NaN(), High: math.NaN()}
	if n == 0 {
		return s
	}
	s.Value, s.Low, s.High = float64(yes)/float64(n), 0, 1
	k, m := float64(yes), float64(n)
	if yes > 0 {
		s.Low = distuv.Beta{Alpha: k, Beta: m - k + 1}.Quantile(0.025)
	}
	if yes < n {
		s.High = distuv.Beta{Alpha: k + 1, Beta: m - k}.Quantile(0.975)
	}
	return s
}

// rate is count per 1000 person-hours with its exact Poisson interval.
func rate(count int, personH float64) (value, low, high float64) {
	if !(personH > 0) {
		return math.NaN(), math.NaN(), math.NaN()
	}
	k := float64(count)
	if count > 0 {
		low = distuv.ChiSquared{K: 2 * k}.Quantile(0.025) / 2
	}
	high = distuv.ChiSquared{K: 2*k + 2}.Quantile(0.975) / 2
	return 1000 * k / personH, 1000 * low / personH, 1000 * high / personH
}
