package freshair

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// Bounds of a rate a fit may find, 1/h.
const rateLeastPerH, rateMostPerH = 0.01, 20.0

// Spell is a stretch of equal steps whose CO2 is followed with the people in
// the room. All slices have one value per step.
type Spell struct {
	StepH    float64
	VolumeM3 float64
	// PPM are means over the steps, NaN where unknown.
	PPM []float64
	// GenerationLs is the CO2 given off, L/s; OutdoorPPM the outdoor level.
	GenerationLs, OutdoorPPM []float64
	// Regime is the index of the rate in force; rates are looked for from 0 to
	// Regimes-1.
	Regime  []int
	Regimes int
}

// SpellFit holds a rate for each regime.
type SpellFit struct {
	AirChangePerH []float64
	// LogSE is the standard error of ln A, widened for correlated residuals.
	LogSE []float64
	// PerLogGeneration is by how much ln A moves when ln G does, PerOutdoorPPM
	// when the outdoor level (or the sensor's offset, with the other sign) moves
	// by 1 ppm.
	PerLogGeneration, PerOutdoorPPM []float64
	StartPPM, R2                    float64
	N                               int
}

// Follow is the level at the end of each step and its mean over each step, by
// C(i+1) = Css + (C(i) - Css) exp(-A dt), Css = Co + G/Q (Batterman 2017, Int.
// J. Environ. Res. Public Health 14:145, eq. 16).
func (s *Spell) Follow(startPPM float64, perH []float64) (endPPM, meanPPM []float64) {
	endPPM, meanPPM = make([]float64, len(s.Regime)), make([]float64, len(s.Regime))
	c := startPPM
	for i, g := range s.Regime {
		x := perH[g] * s.StepH
		e := math.Exp(-x)
		target := s.OutdoorPPM[i] + s.riseOf(i)/perH[g]
		meanPPM[i] = target + (c-target)*(1-e)/x
		c = target + (c-target)*e
		endPPM[i] = c
	}
	return endPPM, meanPPM
}

// riseOf is how fast the people alone raise CO2 in step i, ppm/h.
func (s *Spell) riseOf(i int) float64 { return 1e6 * s.GenerationLs[i] * 3.6 / s.VolumeM3 }

// Fit finds the rates, bounded to 0.01 and 20 per hour, and the first level by
// least squares over the known readings.
func (s *Spell) Fit() (*SpellFit, error) {
	n, first, mid := 0, math.NaN(), 0.0
	for _, c := range s.PPM {
		if math.IsNaN(c) {
			continue
		}
		if n == 0 {
			first = c
		}
		n, mid = n+1, mid+c
	}
	k := s.Regimes + 1
	if n <= k {
		return nil, errNoFit
	}
	mid /= float64(n)
	start, low, high := make([]float64, k), make([]float64, k), make([]float64, k)
	for j := range s.Regimes {
		low[j], high[j] = math.Log(rateLeastPerH), math.Log(rateMostPerH)
	}
	start[k-1], low[k-1], high[k-1] = first, 0, 1e6
	sides := mat.NewDense(n, 2, nil) // by ln G and by the outdoor level
	m := func(p, residuals []float64, jac *mat.Dense) { s.model(p, residuals, jac, sides) }
	sol, err := leastSquares(m, start, low, high, n)
	if err != nil {
		return nil, err
	}
	total := 0.0
	for _, c := range s.PPM {
		if !math.IsNaN(c) {
			total += (c - mid) * (c - mid)
		}
	}
	f := &SpellFit{N: n, StartPPM: sol.at[k-1], R2: 1 - sol.squares/total}
	jac := mat.NewDense(n, k, nil)
	m(sol.at, make([]float64, n), jac)
	var chol mat.Cholesky
	var right, moved mat.Dense
	right.Mul(jac.T(), sides)
	if !chol.Factorize(sol.normal) || chol.SolveTo(&moved, &right) != nil {
		return nil, errNoFit
	}
	for j := range s.Regimes {
		f.AirChangePerH = append(f.AirChangePerH, math.Exp(sol.at[j]))
		f.LogSE = append(f.LogSE, math.Sqrt(sol.cov.At(j, j)))
		// The readings stay: what the model gains by itself, the rates take back.
		f.PerLogGeneration = append(f.PerLogGeneration, -moved.At(j, 0))
		f.PerOutdoorPPM = append(f.PerOutdoorPPM, -moved.At(j, 1))
	}
	return f, nil
}

// model follows the level and its derivatives by ln A, the first level, ln G
// and the outdoor level.
func (s *Spell) model(p, residuals []float64, jac, sides *mat.Dense) {
	k := len(p)
	type pace struct{ a, x, e, f float64 }
	paces := make([]pace, s.Regimes)
	for j := range paces {
		a := math.Exp(p[j])
		x := a * s.StepH
		e := math.Exp(-x)
		paces[j] = pace{a, x, e, (1 - e) / x}
	}
	c, d := p[k-1], make([]float64, k+2)
	d[k-1] = 1
	row := 0
	for i, g := range s.Regime {
		r := &paces[g]
		rise := s.riseOf(i) / r.a
		target := s.OutdoorPPM[i] + rise
		known := !math.IsNaN(s.PPM[i])
		if known {
			residuals[row] = s.PPM[i] - (target + (c-target)*r.f)
		}
		for j := range d {
			end, mean := d[j]*r.e, d[j]*r.f
			switch {
			case j == g && j < k-1:
				end += -rise*(1-r.e) - (c-target)*r.x*r.e
				mean += -rise*(1-r.f) + (c-target)*(r.e-r.f)
			case j == k:
				end, mean = end+rise*(1-r.e), mean+rise*(1-r.f)
			case j == k+1:
				end, mean = end+1-r.e, mean+1-r.f
			}
			d[j] = end
			if !known {
				continue
			}
			if j < k {
				jac.Set(row, j, mean)
			} else {
				sides.Set(row, j-k, mean)
			}
		}
		c = target + (c-target)*r.e
		if known {
			row++
		}
	}
}
