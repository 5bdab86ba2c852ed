package comfort

import (
	"math"
	"sync/atomic"
)

// axis is a row of equally spaced nodes.
type axis struct {
	low, step float64
	n         int // at least 2
}

func (a axis) high() float64 { return a.low + a.step*float64(a.n-1) }

func (a axis) holds(x float64) bool { return x >= a.low && x <= a.high() }

// cell returns the node below x and how far x lies towards the next.
func (a axis) cell(x float64) (node int, share float64) {
	pos := (x - a.low) / a.step
	node = min(int(pos), a.n-2)
	return node, pos - float64(node)
}

// lattice interpolates a function of four quantities between nodes that are
// worked out when they are first asked for. It is safe for concurrent use: two
// callers may work out a node twice and store the same value.
type lattice struct {
	axes [4]axis
	f    func(x [4]float64) float64
	node []atomic.Uint32 // bits of a float32, inverted so that 0 means "not yet"
}

func newLattice(axes [4]axis, f func(x [4]float64) float64) *lattice {
	n := 1
	for _, a := range axes {
		n *= a.n
	}
	return &lattice{axes: axes, f: f, node: make([]atomic.Uint32, n)}
}

// at is the interpolated value at a place inside all axes. Corners that weigh
// nothing are not asked for.
func (l *lattice) at(x [4]float64) float64 {
	var index [16]int
	var weight [16]float64
	weight[0] = 1
	n, stride := 1, 1
	for k := len(x) - 1; k >= 0; k-- {
		node, share := l.axes[k].cell(x[k])
		for j := range n {
			index[j] += node * stride
		}
		if share != 0 {
			for j := range n {
				index[n+j] = index[j] + stride
				weight[n+j] = weight[j] * share
				weight[j] *= 1 - share
			}
			n *= 2
		}
		stride *= l.axes[k].n
	}
	sum := 0.0
	for j := range n {
		bits := l.node[index[j]].Load()
		if bits == 0 {
			bits = l.fill(index[j])
		}
		sum += weight[j] * float64(math.Float32frombits(^bits))
	}
	return sum
}

func (l *lattice) fill(index int) uint32 {
	var x [4]float64
	rest := index
	for k := len(l.axes) - 1; k >= 0; k-- {
		a := l.axes[k]
		x[k] = a.low + a.step*float64(rest%a.n)
		rest /= a.n
	}
	bits := ^math.Float32bits(float32(l.f(x)))
	l.node[index].Store(bits)
	return bits
}
