package freshair

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/mat"
)

// errNoFit says that a model could not be fitted.
var errNoFit = errors.New("the fit did not settle")

// solution is a least-squares fit of a model that bends.
type solution struct {
	at        []float64
	cov       *mat.SymDense // of the parameters, widened for correlated residuals
	normal    *mat.SymDense // J'J
	residuals []float64     // reading less model
	squares   float64
}

// A model fills residuals (reading less model) and the derivatives of the
// model, one row of width parameters for each reading.
type model func(p, residuals []float64, jacobian *mat.Dense)

const (
	iterationsMax = 60
	settled       = 1e-9 // relative change of the sum of squares
)

// leastSquares fits by Gauss-Newton steps damped after Levenberg and Marquardt
// (Marquardt 1963, SIAM J. Appl. Math. 11:431, from memory). n readings; low and
// high bound each parameter.
func leastSquares(m model, start, low, high []float64, n int) (*solution, error) {
	k := len(start)
	if n <= k {
		return nil, errNoFit
	}
	s := &solution{at: append([]float64(nil), start...), residuals: make([]float64, n)}
	jac, trial, tryJac := mat.NewDense(n, k, nil), make([]float64, n), mat.NewDense(n, k, nil)
	m(s.at, s.residuals, jac)
	s.squares = squaresOf(s.residuals)
	s.normal = mat.NewSymDense(k, nil)
	damped, step, gradient := mat.NewSymDense(k, nil), mat.NewVecDense(k, nil), mat.NewVecDense(k, nil)
	next := make([]float64, k)
	lambda := 1e-3
	var chol mat.Cholesky
	for iteration := 0; iteration < iterationsMax; iteration++ {
		s.normal.SymOuterK(1, jac.T())
		gradient.MulVec(jac.T(), mat.NewVecDense(n, s.residuals))
		better := false
		for ; lambda < 1e12; lambda *= 10 {
			damped.CopySym(s.normal)
			for j := range k {
				damped.SetSym(j, j, s.normal.At(j, j)*(1+lambda)+1e-300)
			}
			if !chol.Factorize(damped) || chol.SolveVecTo(step, gradient) != nil {
				continue
			}
			for j := range k {
				next[j] = math.Min(math.Max(s.at[j]+step.AtVec(j), low[j]), high[j])
			}
			m(next, trial, tryJac)
			if sq := squaresOf(trial); sq <= s.squares {
				done := s.squares-sq <= settled*(s.squares+1e-30)
				copy(s.at, next)
				s.residuals, trial = trial, s.residuals
				jac, tryJac = tryJac, jac
				s.squares, lambda, better = sq, lambda/10, true
				if done {
					return s.finish(jac)
				}
				break
			}
		}
		if !better {
			return s.finish(jac)
		}
	}
	return nil, errNoFit
}

func (s *solution) finish(jac *mat.Dense) (*solution, error) {
	n, k := jac.Dims()
	s.normal.SymOuterK(1, jac.T())
	var chol mat.Cholesky
	if !chol.Factorize(s.normal) || math.IsNaN(s.squares) {
		return nil, errNoFit
	}
	s.cov = mat.NewSymDense(k, nil)
	if chol.InverseTo(s.cov) != nil {
		return nil, errNoFit
	}
	readings := float64(n)
	s.cov.ScaleSym(s.squares/float64(n-k)*readings/independent(readings, lag1(s.residuals)), s.cov)
	return s, nil
}

func squaresOf(r []float64) float64 {
	sum := 0.0
	for _, x := range r {
		sum += x * x
	}
	return sum
}
