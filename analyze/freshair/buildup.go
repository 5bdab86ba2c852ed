package freshair

import (
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distuv"
)

// BuildUp is an air change rate fitted to one rise of CO2 after constant
// people came in. It needs neither the outdoor level nor the CO2 they give off.
type BuildUp struct {
	AirChangePerH, LowPerH, HighPerH float64 // 95 %, widened for correlated residuals
	SteadyPPM, StartPPM              float64
	LogSE, R2                        float64
}

// Bounds of a rate a fit may find, 1/h.
const rateLeastPerH, rateMostPerH = 0.01, 20.0

// FitBuildUp fits C(t) = Css + (C0 - Css) exp(-A t) with all three unknown
// (ASHRAE Fundamentals ch. 16 eq. 19 to 21). timeH are hours from the start,
// ppm readings while people, openings and plant stay as they are.
func FitBuildUp(timeH, ppm []float64) (BuildUp, error) {
	if len(ppm) < 5 || len(timeH) != len(ppm) {
		return BuildUp{}, errNoFit
	}
	low, high := ppm[0], ppm[0]
	for _, c := range ppm {
		if math.IsNaN(c) {
			return BuildUp{}, errNoFit
		}
		low, high = math.Min(low, c), math.Max(high, c)
	}
	last := timeH[len(timeH)-1] - timeH[0]
	if !(last > 0) || !(high > low) {
		return BuildUp{}, errNoFit
	}
	m := func(p, residuals []float64, jac *mat.Dense) {
		a := math.Exp(p[0])
		for i, t := range timeH {
			e := math.Exp(-a * t)
			residuals[i] = ppm[i] - (p[1] + (p[2]-p[1])*e)
			jac.Set(i, 0, -(p[2]-p[1])*a*t*e)
			jac.Set(i, 1, 1-e)
			jac.Set(i, 2, e)
		}
	}
	start := []float64{math.Log(math.Min(math.Max(2/last, 2*rateLeastPerH), rateMostPerH/2)), high, ppm[0]}
	s, err := leastSquares(m, start, []float64{math.Log(rateLeastPerH), 0, 0}, []float64{math.Log(rateMostPerH), 1e6, 1e6}, len(ppm))
	if err != nil {
		return BuildUp{}, err
	}
	mid, total := mean(ppm), 0.0
	for _, c := range ppm {
		total += (c - mid) * (c - mid)
	}
	b := BuildUp{AirChangePerH: math.Exp(s.at[0]), SteadyPPM: s.at[1], StartPPM: s.at[2],
		LogSE: math.Sqrt(s.cov.At(0, 0)), R2: 1 - s.squares/total}
	half := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(len(ppm) - 3)}.Quantile(0.975) * b.LogSE
	b.LowPerH, b.HighPerH = b.AirChangePerH*math.Exp(-half), b.AirChangePerH*math.Exp(half)
	return b, nil
}
