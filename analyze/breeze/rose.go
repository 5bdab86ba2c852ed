package breeze

import "math"

// speedClasses is the number of speed classes of a rose: Beaufort 1 to 6 and
// more.
const speedClasses = 6

// Rose is how often the wind blew from each sector at each speed, in hours.
type Rose struct {
	// HoursH[s][k] are the hours of sector s in speed class k: Beaufort k+1, the
	// last 6 and more. Classes below the calm limit stay empty.
	HoursH [Sectors][speedClasses]float64
	// CalmH have no sector. KnownH are all sectors and calm.
	CalmH, KnownH float64
	// NoDirectionH are hours with wind whose direction is not known, UnknownH
	// those without a speed (or, for the wanted hours, without a temperature).
	NoDirectionH, UnknownH float64
	// MeanMS is the mean speed at the mast, calm and wind without a known
	// direction included; NaN without any.
	MeanMS float64
	// MeanDeg is the mean direction of the hours with wind, every hour alike,
	// and Steadiness its resultant, 0 to 1; NaN without any.
	MeanDeg, Steadiness float64

	mean           direction
	speed, speedOf float64
}

// ClassNames are the speed classes of a rose.
var ClassNames = [speedClasses]string{"to 1.5 m/s", "1.6 to 3.3 m/s", "3.4 to 5.4 m/s", "5.5 to 7.9 m/s", "8.0 to 10.7 m/s", "from 10.8 m/s"}

// add counts h hours of wind.
func (r *Rose) add(ms, deg, calmMS, h float64) {
	if !(ms >= 0) {
		r.UnknownH += h
		return
	}
	r.speed += ms * h
	r.speedOf += h
	if ms < calmMS {
		r.CalmH += h
		r.KnownH += h
		return
	}
	s := Sector(deg)
	if s < 0 {
		r.NoDirectionH += h
		return
	}
	// A calm limit of 0 leaves Beaufort 0 in the lowest class.
	r.HoursH[s][min(max(Beaufort(ms)-1, 0), speedClasses-1)] += h
	r.KnownH += h
	r.mean.add(deg, h)
}

func (r *Rose) finish() {
	r.MeanMS = math.NaN()
	if r.speedOf > 0 {
		r.MeanMS = r.speed / r.speedOf
	}
	r.MeanDeg, r.Steadiness = r.mean.mean()
}

// SectorH are the hours of a sector.
func (r *Rose) SectorH(s int) float64 {
	sum := 0.0
	for _, h := range r.HoursH[s] {
		sum += h
	}
	return sum
}

// Main is the sector with most hours, -1 without any.
func (r *Rose) Main() int {
	best := -1
	for s := range r.HoursH {
		if h := r.SectorH(s); h > 0 && (best < 0 || h > r.SectorH(best)) {
			best = s
		}
	}
	return best
}
