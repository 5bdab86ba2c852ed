package zonemodel

import "math"

// kind says how the filter treats the way from one step to the next.
type kind uint8

const (
	blind kind = iota // nothing can be said: the state begins anew
	held              // the air did something the model does not know, its temperature is known
	free              // plant off, openings and weather known at both ends
)

// series is a stretch of the record on the model's steps. Way i leads from
// step i-1 to step i with the mean of both ends' drives.
type series struct {
	hours float64 // length of a step
	tempC []float64
	drive []drive
	kind  []kind
	// learn marks the steps the likelihood counts.
	learn []bool
}

// state is what is known at a step: means and covariances.
type state struct {
	airC, massC float64
	vAir, vMass float64
	cov         float64
}

// freshMassK is how far the mass may lie from the air when nothing is known:
// our assumption.
const freshMassK = 2

func fresh(r *rates, tempC float64) state {
	return state{airC: tempC, massC: tempC, vAir: r.noiseSensorK * r.noiseSensorK, vMass: freshMassK * freshMassK}
}

// halfway is the drive on the way between two steps.
func halfway(a, b *drive) drive {
	return drive{(a.outdoorC + b.outdoorC) / 2, (a.sunKWm2 + b.sunKWm2) / 2, (a.people + b.people) / 2, (a.windMS + b.windMS) / 2, (a.share + b.share) / 2}
}

// filter runs the Kalman filter over a series (Jazwinski 1970; Kristensen,
// Madsen & Jørgensen 2004). At every step with a prediction and a reading it
// calls see with the innovation and its variance; it calls after with every
// step's state. Either may be nil.
func (r *rates) filter(s *series, see func(i int, innovation, variance float64), after func(i int, x *state)) {
	var x state
	valid := false
	sensor := r.noiseSensorK * r.noiseSensorK
	for i := range s.tempC {
		y := s.tempC[i]
		known := !math.IsNaN(y)
		k := s.kind[i]
		switch {
		case !valid || k == blind:
			if valid = known; known {
				x = fresh(r, y)
			}
		case k == held:
			d := halfway(&s.drive[i-1], &s.drive[i])
			stay := 0.0
			if r.twoConstants {
				x.massC, stay = r.massUnder(s.hours, (s.tempC[i-1]+y)/2, x.massC, &d)
			}
			x = state{airC: y, massC: x.massC, vAir: sensor, vMass: stay*stay*x.vMass + r.noiseMassK*r.noiseMassK}
		default:
			d := halfway(&s.drive[i-1], &s.drive[i])
			x = r.predict(s.hours, &d, &x)
			if known {
				v, variance := y-x.airC, x.vAir+sensor
				if see != nil && s.learn[i] {
					see(i, v, variance)
				}
				x.update(v, variance)
			}
		}
		if after != nil && valid {
			after(i, &x)
		}
	}
}

func (r *rates) predict(hours float64, d *drive, x *state) state {
	s := r.over(hours, r.exchangePerH(d, x.airC), d)
	var n state
	n.airC, n.massC = s.next(x.airC, x.massC)
	n.vAir = s.a11*s.a11*x.vAir + 2*s.a11*s.a12*x.cov + s.a12*s.a12*x.vMass + r.noiseAirK*r.noiseAirK
	if r.twoConstants {
		n.cov = s.a11*s.a21*x.vAir + (s.a11*s.a22+s.a12*s.a21)*x.cov + s.a12*s.a22*x.vMass
		n.vMass = s.a21*s.a21*x.vAir + 2*s.a21*s.a22*x.cov + s.a22*s.a22*x.vMass + r.noiseMassK*r.noiseMassK
	}
	return n
}

func (x *state) update(innovation, variance float64) {
	gAir, gMass := x.vAir/variance, x.cov/variance
	x.airC += gAir * innovation
	x.massC += gMass * innovation
	x.vMass -= gMass * x.cov
	x.cov -= gMass * x.vAir
	x.vAir -= gAir * x.vAir
}

// negLogLikelihood of a series, and how many readings it counts.
func (r *rates) negLogLikelihood(s *series) (sum float64, n int) {
	r.filter(s, func(_ int, v, variance float64) {
		sum += (math.Log(2*math.Pi*variance) + v*v/variance) / 2
		n++
	}, nil)
	return sum, n
}
