// Package lag tells how far the clock of a log is off, from series alone: what
// the log says is held, day by day and at every lag, against what others say
// of the same thing. It knows series, days and lags; what may be held against
// what is the caller's to say.
//
// The evidence of a day at a lag is that day's share of the correlation of the
// two series (zero-lag normalised, so that the mean over the days is the
// correlation). Five explanations compete by the evidence they gather, in days
// of full correlation: a right clock, a constant shift, a shift that comes and
// goes with daylight saving, a shift for a span of days, and a drift.
package lag

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// Span is a half-open range of bins.
type Span struct{ From, To int }

// Pair is two series on the same bins, zero where nothing is known: what the
// log under test says, and what it should say. Their mean is near zero.
type Pair struct{ Mine, Truth []float64 }

// Class says what a witness can prove.
type Class uint8

// Classes of witness.
const (
	// Sky: weather or the sun, the same for all and independent of people.
	Sky Class = iota
	// Machine: one device seen through two logs.
	Machine
	// People: habits and rooms, alike but not the same.
	People
	// Coarse: the time of day within two or three hours.
	Coarse
)

// Witness is one kind of quantity that speaks of a log's clock.
type Witness struct {
	Name  string // what it is, in words
	Class Class
	Pairs []Pair
	Logs  []string // the logs it was held against; none: the sun, or the schedule
	// Points is the number of points it was held against.
	Points int

	plane *plane
}

// Release lets go of the series, which are large, once a finding is made.
func (w *Witness) Release() { w.Pairs, w.plane = nil, nil }

// plane holds a witness's products: at[day][lag+most], with the energies of
// both series per day.
type plane struct {
	most   int
	at     [][]float64
	xx, yy []float64
	scale  float64 // makes the mean over days a correlation
	days   int     // with evidence
}

// measure fills the plane of a witness.
func (w *Witness) measure(days []Span, most int) {
	p := &plane{most: most, at: make([][]float64, len(days)), xx: make([]float64, len(days)), yy: make([]float64, len(days))}
	cells := make([]float64, len(days)*(2*most+1))
	var sxx, syy float64
	for d, day := range days {
		row := cells[d*(2*most+1) : (d+1)*(2*most+1)]
		p.at[d] = row
		for _, pr := range w.Pairs {
			mine := pr.Mine[day.From:day.To]
			xx := floats.Dot(mine, mine)
			if xx == 0 {
				continue
			}
			own := pr.Truth[day.From:day.To]
			yy := floats.Dot(own, own)
			if yy == 0 {
				continue
			}
			p.xx[d], p.yy[d] = p.xx[d]+xx, p.yy[d]+yy
			for lag := -most; lag <= most; lag++ {
				from, to := max(day.From, lag), min(day.To, len(pr.Truth)+lag)
				if from < to {
					row[lag+most] += floats.Dot(pr.Mine[from:to], pr.Truth[from-lag:to-lag])
				}
			}
		}
		if p.xx[d] > 0 {
			p.days++
			sxx, syy = sxx+p.xx[d], syy+p.yy[d]
		}
	}
	if p.days > 0 {
		p.scale = float64(p.days) / math.Sqrt(sxx*syy)
	}
	w.plane = p
}

// fit is the correlation of the days [from, to) along a path of lags, and the
// number of days that had any.
func (p *plane) fit(from, to int, path func(day int) float64) (r float64, days int) {
	var xy, xx, yy float64
	for d := from; d < to; d++ {
		if p.xx[d] == 0 {
			continue
		}
		xy += at(p.at[d], path(d)+float64(p.most))
		xx, yy, days = xx+p.xx[d], yy+p.yy[d], days+1
	}
	if days == 0 {
		return 0, 0
	}
	return xy / math.Sqrt(xx*yy), days
}

// at reads a row between its cells, by the cubic through the four around
// (Catmull & Rom 1974); outside it is zero.
func at(row []float64, x float64) float64 {
	i := int(math.Floor(x))
	if i < 0 || i >= len(row) {
		return 0
	}
	f := x - float64(i)
	if f == 0 {
		return row[i]
	}
	if i < 1 || i+2 >= len(row) {
		if i+1 >= len(row) {
			return row[i]
		}
		return row[i]*(1-f) + row[i+1]*f
	}
	a, b, c, d := row[i-1], row[i], row[i+1], row[i+2]
	return b + f/2*(c-a+f*(2*a-5*b+4*c-d+f*(3*(b-c)+d-a)))
}

// peak is the place of the greatest value of a row near a cell, between cells.
func peak(row []float64, near, within float64) (x, value float64) {
	const step = 0.05
	x, value = near, math.Inf(-1)
	for u := near - within; u <= near+within+step/2; u += step {
		if v := at(row, u); v > value {
			x, value = u, v
		}
	}
	return x, value
}
