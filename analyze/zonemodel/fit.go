package zonemodel

import (
	"errors"
	"math"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize"
)

// fitted is a model of one form at the maximum of its (slightly penalised)
// likelihood.
type fitted struct {
	form  form
	list  []Parameter
	x     []float64 // free values
	rates rates
	// negLogL is that of the data alone; n counts its readings.
	negLogL float64
	n       int
	// covariance of the free values, robust against days that are alike within
	// and unlike between; information without the priors.
	covariance  *mat.SymDense
	information *mat.SymDense
	// priorShare[k] is the share of parameter k's precision that the prior brings.
	priorShare []float64
	days       int
}

// sweep is one pass with the derivatives of innovations by every parameter.
type sweep struct {
	form   form
	list   []Parameter
	s      *series
	x      []float64 // where it was made
	f      float64   // penalised
	plain  float64
	n      int
	grad   []float64
	hess   *mat.SymDense // expected information with the priors
	v, sv  []float64     // innovations and their variances
	dv, ds [][]float64   // by parameter
}

// slope is the step of the one-sided differences, in free values; innovations
// are smooth, so that the error is far below the noise.
const slope = 1e-5

func (w *sweep) value(x []float64) float64 {
	r := w.form.ratesOf(w.list, x)
	f, _ := r.negLogLikelihood(w.s)
	return f + w.penalty(x)
}

func (w *sweep) penalty(x []float64) float64 {
	sum := 0.0
	for k, p := range w.list {
		d := (x[k] - p.middle()) / priors[p].sd
		sum += d * d / 2
	}
	return sum
}

// at brings the sweep to x: value, gradient and expected information.
func (w *sweep) at(x []float64) {
	if w.x != nil && equal(w.x, x) {
		return
	}
	p := len(w.list)
	w.x = append(w.x[:0], x...)
	run := func(x []float64, v, sv []float64) ([]float64, []float64) {
		r := w.form.ratesOf(w.list, x)
		v, sv = v[:0], sv[:0]
		r.filter(w.s, func(_ int, e, variance float64) { v, sv = append(v, e), append(sv, variance) }, nil)
		return v, sv
	}
	w.v, w.sv = run(x, w.v, w.sv)
	w.n = len(w.v)
	w.plain = 0
	for t, e := range w.v {
		w.plain += (math.Log(2*math.Pi*w.sv[t]) + e*e/w.sv[t]) / 2
	}
	w.f = w.plain + w.penalty(x)
	if w.dv == nil {
		w.dv, w.ds, w.grad = make([][]float64, p), make([][]float64, p), make([]float64, p)
	}
	moved := make([]float64, p)
	for k := range w.list {
		copy(moved, x)
		moved[k] += slope
		w.dv[k], w.ds[k] = run(moved, w.dv[k], w.ds[k])
		for t := range w.dv[k] {
			w.dv[k][t] = (w.dv[k][t] - w.v[t]) / slope
			w.ds[k][t] = (w.ds[k][t] - w.sv[t]) / slope
		}
	}
	w.hess = mat.NewSymDense(p, nil)
	for k, q := range w.list {
		sd := priors[q].sd
		w.grad[k] = (x[k] - q.middle()) / (sd * sd)
		for t := range w.v {
			w.grad[k] += w.score(k, t)
		}
		for j := k; j < p; j++ {
			sum := 0.0
			for t, s := range w.sv {
				sum += w.dv[k][t]*w.dv[j][t]/s + w.ds[k][t]*w.ds[j][t]/(2*s*s)
			}
			if j == k {
				sum += 1 / (sd * sd)
			}
			w.hess.SetSym(k, j, sum)
		}
	}
}

// score is the derivative of one reading's negative log-likelihood.
func (w *sweep) score(k, t int) float64 {
	e, s := w.v[t], w.sv[t]
	return e*w.dv[k][t]/s + w.ds[k][t]/(2*s)*(1-e*e/s)
}

func equal(a, b []float64) bool {
	for k := range a {
		if a[k] != b[k] {
			return false
		}
	}
	return len(a) == len(b)
}

var errNoFit = errors.New("the fit does not converge")

// fit finds the maximum by Fisher scoring (Newton's method with the expected
// information), from the free values given by parameter.
func fit(s *series, dayOf []int32, f form, from *[NumParameters]float64) (*fitted, error) {
	w := &sweep{form: f, list: f.list(), s: s}
	x := make([]float64, len(w.list))
	for k, p := range w.list {
		x[k] = from[p]
	}
	problem := optimize.Problem{
		Func: func(x []float64) float64 {
			if w.x != nil && equal(w.x, x) {
				return w.f
			}
			return w.value(x)
		},
		Grad: func(g, x []float64) { w.at(x); copy(g, w.grad) },
		Hess: func(h *mat.SymDense, x []float64) { w.at(x); h.CopySym(w.hess) },
	}
	result, err := optimize.Minimize(problem, x, &optimize.Settings{MajorIterations: 40, GradientThreshold: 1e-3,
		Converger: &optimize.FunctionConverge{Absolute: 1e-3, Iterations: 2}}, &optimize.Newton{})
	if result == nil {
		return nil, errors.Join(errNoFit, err)
	}
	// At the optimum a line search may find nothing better and call it a failure;
	// the gradient decides.
	w.at(result.X)
	var chol mat.Cholesky
	if !chol.Factorize(w.hess) {
		return nil, errNoFit
	}
	g := mat.NewVecDense(len(w.grad), w.grad)
	var newton mat.VecDense
	if chol.SolveVecTo(&newton, g) != nil || math.IsNaN(w.f) || mat.Dot(g, &newton) > 0.1 {
		return nil, errNoFit
	}
	out := &fitted{form: f, list: w.list, x: append([]float64(nil), result.X...), negLogL: w.plain, n: w.n}
	out.rates = f.ratesOf(w.list, out.x)
	out.covary(w, &chol, dayOf)
	return out, nil
}

// covary is the sandwich of inverse information about the sum of squares of
// days' scores (Huber 1967; White 1982; clustered by day as the readings of a
// day depend on each other), with the factor D/(D−1) for D days.
func (o *fitted) covary(w *sweep, chol *mat.Cholesky, dayOf []int32) {
	p := len(w.list)
	var inverse mat.SymDense
	if chol.InverseTo(&inverse) != nil {
		return
	}
	meat := mat.NewSymDense(p, nil)
	sum := make([]float64, p)
	t, last := 0, int32(-1)
	flush := func() {
		if last < 0 {
			return
		}
		o.days++
		meat.SymRankOne(meat, 1, mat.NewVecDense(p, sum))
		clear(sum)
	}
	r := w.form.ratesOf(w.list, w.x)
	r.filter(w.s, func(i int, _, _ float64) {
		if dayOf[i] != last {
			flush()
			last = dayOf[i]
		}
		for k := range sum {
			sum[k] += w.score(k, t)
		}
		t++
	}, nil)
	flush()
	if o.days > 1 {
		meat.ScaleSym(float64(o.days)/float64(o.days-1), meat)
	}
	// The priors count as one observation each.
	o.priorShare = make([]float64, p)
	o.information = mat.NewSymDense(p, nil)
	o.information.CopySym(w.hess)
	for k, q := range w.list {
		own := 1 / (priors[q].sd * priors[q].sd)
		meat.SetSym(k, k, meat.At(k, k)+own)
		o.information.SetSym(k, k, o.information.At(k, k)-own)
		o.priorShare[k] = own * inverse.At(k, k)
	}
	var half, full mat.Dense
	half.Mul(&inverse, meat)
	full.Mul(&half, &inverse)
	o.covariance = mat.NewSymDense(p, nil)
	for k := range p {
		for j := k; j < p; j++ {
			o.covariance.SetSym(k, j, (full.At(k, j)+full.At(j, k))/2)
		}
	}
}
