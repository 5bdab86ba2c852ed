package zonemodel

import "math"

// rates are a zone's thermal model per hour, everything divided by the heat
// capacity of the air node (with what follows it quickly) or of the mass:
//
//	dTi/dt = mass·(Te − Ti) + U·(To − Ti) + sunAir·S + people·P + gain
//	dTe/dt = back·(Ti − Te) + massOut·(To − Te) + sunMass·S
//	U      = shut + share·max(0, open + wind·W + stack·√|To − Ti|)
//
// with temperatures in °C, S in kW/m², P in shares of the usual number of
// people and W in m/s. Without a mass (one time constant) mass, back, massOut
// and sunMass are zero. It is an RC network: 1/mass = Ri·Ci, 1/back = Ri·Ce,
// 1/massOut = Ro·Ce.
type rates struct {
	mass, back, massOut       float64 // 1/h
	shut                      float64 // 1/h
	open, wind, stack         float64 // 1/h fully open, per m/s, per √K
	sunAir, sunMass           float64 // K/h per kW/m²
	people, gain              float64 // K/h
	noiseAirK, noiseMassK     float64 // standard deviation added in each step, K
	noiseSensorK              float64 // standard deviation of a reading, K
	twoConstants, windy, tall bool
}

// drive is what acts on a zone during one step.
type drive struct {
	outdoorC, sunKWm2, people, windMS, share float64
}

// leastPerH keeps the exchange with outdoors from vanishing, so that a steady
// state exists.
const leastPerH = 1e-4

// exchangePerH is the air node's direct exchange with outdoors over its heat
// capacity.
func (r *rates) exchangePerH(d *drive, airC float64) float64 {
	opening := r.open
	if r.windy {
		opening += r.wind * d.windMS
	}
	if r.tall {
		opening += r.stack * math.Sqrt(math.Abs(d.outdoorC-airC))
	}
	return math.Max(leastPerH, r.shut+d.share*math.Max(0, opening))
}

// step is the exact solution over a step with the drive held: the state at its
// end is transition·(state − steady) + steady.
type step struct {
	a11, a12, a21, a22 float64 // transition matrix
	airC, massC        float64 // steady state
}

// over solves the model over hours for an exchange with outdoors that is held.
func (r *rates) over(hours, exchangePerH float64, d *drive) step {
	gain := exchangePerH*d.outdoorC + r.sunAir*d.sunKWm2 + r.people*d.people + r.gain
	if !r.twoConstants {
		return step{a11: math.Exp(-exchangePerH * hours), airC: gain / exchangePerH}
	}
	m11, m12, m21, m22 := -(r.mass + exchangePerH), r.mass, r.back, -(r.back + r.massOut)
	s := transition(m11, m12, m21, m22, hours)
	store := r.massOut*d.outdoorC + r.sunMass*d.sunKWm2
	det := m11*m22 - m12*m21
	s.airC = (m12*store - m22*gain) / det
	s.massC = (m21*gain - m11*store) / det
	return s
}

// transition is the exponential of a 2×2 matrix times hours, whose eigenvalues
// are real (the products of its off-diagonal elements are not negative).
func transition(m11, m12, m21, m22, hours float64) step {
	mean, half := (m11+m22)/2, (m11-m22)/2
	root := math.Sqrt(half*half + m12*m21)
	up, down := math.Exp((mean+root)*hours), math.Exp((mean-root)*hours)
	c, s := (up+down)/2, hours*up
	if root*hours > 1e-9 {
		s = (up - down) / (2 * root)
	}
	return step{a11: c + half*s, a12: m12 * s, a21: m21 * s, a22: c - half*s}
}

// next is the state at the end of the step.
func (s *step) next(airC, massC float64) (float64, float64) {
	a, m := airC-s.airC, massC-s.massC
	return s.airC + s.a11*a + s.a12*m, s.massC + s.a21*a + s.a22*m
}

// massUnder is the mass after hours in which the air was held at airC by
// something else, and the share of the difference that stays.
func (r *rates) massUnder(hours, airC, massC float64, d *drive) (float64, float64) {
	k := r.back + r.massOut
	if k <= 0 {
		return massC, 1
	}
	steady := (r.back*airC + r.massOut*d.outdoorC + r.sunMass*d.sunKWm2) / k
	stay := math.Exp(-k * hours)
	return steady + (massC-steady)*stay, stay
}

// constantsH are the time constants in hours with the drive held, the longer
// last; the first is zero with one constant.
func (r *rates) constantsH(exchangePerH float64) (fast, slow float64) {
	if !r.twoConstants {
		return 0, 1 / exchangePerH
	}
	m11, m22 := -(r.mass + exchangePerH), -(r.back + r.massOut)
	mean, half := (m11+m22)/2, (m11-m22)/2
	root := math.Sqrt(half*half + r.mass*r.back)
	return -1 / (mean - root), -1 / (mean + root)
}
