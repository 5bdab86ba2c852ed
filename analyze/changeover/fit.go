package changeover

import (
	"math"

	"gonum.org/v1/gonum/optimize"
)

// The model of a changeover. Each limit k acts when its temperature x passes
// L_k, give or take s_k: with the logistic probability
// p_k(x) = 1/(1+exp(-(x-L_k)/s_k)), the sign turned for a limit from below.
//
//   - Closing: every open spell meets its own draw of the limit, so that it
//     survives limit k as long as the furthest reading x* of the spell has not
//     passed it: with probability 1-p_k(x*). A noisy reading that hovers just
//     inside a limit is thus not counted against it again and again. What
//     nothing explains ends a spell with probability 1-c per step.
//   - Opening: a closed subject opens in a step with probability
//     c·(1-p_1)·(1-p_2)... of the readings then.
//
// Limits act independently of each other. The two sets of limits differ by the
// hysteresis.
//
// Data that a level separates perfectly have no finite logistic fit. A limit
// therefore never is sharper than sharpestK, the resolution of a sensor, and
// weak priors keep the blur and c finite (as Firth's penalty does, Biometrika
// 80 (1993), from memory; ours is simpler).

const (
	sharpestK  = 0.1
	blurPriorK = 0.25
	blurPrior  = 1.2 // standard deviation of its logarithm
)

// edge is one limit of a model.
type edge struct {
	reason int
	levelC float64
	blurK  float64 // s, at least sharpestK
}

// model is a fitted set of limits.
type model struct {
	edges []edge
	free  float64 // c
	ll    float64 // log-likelihood without the priors
}

func logistic(x float64) float64 { return 1 / (1 + math.Exp(-x)) }

// holds is p of a reason at a temperature; 0 where that is unknown: what is
// not known explains nothing.
func holds(sign, x, levelC, blurK float64) float64 {
	if math.IsNaN(x) {
		return 0
	}
	return logistic(sign * (x - levelC) / blurK)
}

// openOdds gives the probability of being open at the end of every row.
func (m *model) openOdds(rows *moments, reasons []reason) []float64 {
	q := make([]float64, rows.n())
	for i := range q {
		q[i] = power(m.free, rows.steps[i])
	}
	for _, e := range m.edges {
		sign := reasons[e.reason].sign()
		for i := range q {
			if q[i] > 0 {
				q[i] *= rows.freeOf(e.reason, sign, i, e.levelC, e.blurK)
			}
		}
	}
	return q
}

func power(c, n float64) float64 {
	if n == 1 {
		return c
	}
	return math.Pow(c, n)
}

const least = 1e-12

// gain is the log-likelihood of one row with P(open) q.
func gain(closed bool, q float64) float64 {
	if closed {
		return math.Log(math.Max(least, 1-q))
	}
	return math.Log(math.Max(least, q))
}

// refine maximises the penalised likelihood over all parameters from where the
// model stands.
func (m *model) refine(rows *moments, reasons []reason, iterations int) {
	k := len(m.edges)
	theta := make([]float64, 1+2*k)
	theta[0] = math.Log(m.free / (1 - m.free))
	for j, e := range m.edges {
		theta[1+2*j] = e.levelC
		theta[2+2*j] = math.Log(math.Max(1e-3, e.blurK-sharpestK))
	}
	p := problem{rows: rows, reasons: reasons, of: make([]int, k)}
	for j, e := range m.edges {
		p.of[j] = e.reason
	}
	before := p.value(theta)
	res, err := optimize.Minimize(optimize.Problem{Func: p.value, Grad: func(g, t []float64) { p.gradient(g, t) }}, theta,
		&optimize.Settings{MajorIterations: iterations, GradientThreshold: 1e-3, Converger: &optimize.FunctionConverge{Absolute: 1e-3, Iterations: 4}}, &optimize.BFGS{})
	// A line search that ends early still leaves the best point found.
	if (err == nil || res != nil) && res.F <= before {
		theta = res.X
	}
	m.free = math.Min(1-1e-9, math.Max(1e-9, logistic(theta[0])))
	for j := range m.edges {
		m.edges[j].levelC, m.edges[j].blurK = theta[1+2*j], blurOf(theta[2+2*j])
	}
	m.ll = 0
	for i, q := range m.openOdds(rows, reasons) {
		m.ll += rows.weight[i] * gain(rows.closed[i], q)
	}
}

func blurOf(u float64) float64 { return sharpestK + math.Exp(math.Max(-12, math.Min(3, u))) }

type problem struct {
	rows    *moments
	reasons []reason
	of      []int // reason of each edge
}

// penalty is minus the log of the priors, and its slopes.
func (p *problem) penalty(theta, grad []float64) float64 {
	c := logistic(theta[0])
	v := -0.5 * (math.Log(math.Max(least, c)) + math.Log(math.Max(least, 1-c)))
	if grad != nil {
		grad[0] += c - 0.5
	}
	for j := range p.of {
		d := (theta[2+2*j] - math.Log(blurPriorK)) / blurPrior
		v += d * d / 2
		if grad != nil {
			grad[2+2*j] += d / blurPrior
		}
	}
	return v
}

func (p *problem) value(theta []float64) float64 {
	v := p.penalty(theta, nil)
	m := p.model(theta)
	for i, q := range m.openOdds(p.rows, p.reasons) {
		v -= p.rows.weight[i] * gain(p.rows.closed[i], q)
	}
	return v
}

func (p *problem) model(theta []float64) *model {
	m := &model{free: logistic(theta[0])}
	for j, r := range p.of {
		m.edges = append(m.edges, edge{r, theta[1+2*j], blurOf(theta[2+2*j])})
	}
	return m
}

func (p *problem) gradient(grad, theta []float64) {
	for i := range grad {
		grad[i] = 0
	}
	p.penalty(theta, grad)
	m := p.model(theta)
	n := p.rows.n()
	slope := make([]float64, n) // d(-ll)/d(log q)
	for i, q := range m.openOdds(p.rows, p.reasons) {
		if p.rows.closed[i] {
			slope[i] = p.rows.weight[i] * q / math.Max(least, 1-q)
		} else {
			slope[i] = -p.rows.weight[i]
		}
		grad[0] += slope[i] * (1 - m.free) * p.rows.steps[i]
	}
	for j, e := range m.edges {
		sign := p.reasons[e.reason].sign()
		dBlur := e.blurK - sharpestK // d s / d u
		add := func(i int, x float32, factor float64) {
			eta := sign * (float64(x) - e.levelC) / e.blurK
			if !(eta > -20) { // unknown, or far inside: no slope
				return
			}
			dEta := -slope[i] * factor * logistic(eta) // d log(1-p)/d eta = -p
			grad[1+2*j] += dEta * -sign / e.blurK
			grad[2+2*j] += dEta * -eta / e.blurK * dBlur
		}
		for i, x := range p.rows.x[e.reason] {
			if slope[i] == 0 {
				continue
			}
			if p.rows.from == nil {
				add(i, x, 1)
			} else if before := p.rows.from[e.reason][i]; before != x {
				add(i, x, 1)
				add(i, before, -1)
			}
		}
	}
}
