package opening

import "math"

// Terrain is the roughness of the ground a wind has come over.
type Terrain int

const (
	City    Terrain = iota // large city centre, half the buildings above 21 m
	Suburb                 // suburban, urban or wooded
	Country                // open, scattered obstacles below 10 m: airports
	Water                  // flat, unobstructed
)

// layer holds the exponent and the thickness in m of the wind's boundary
// layer: ASHRAE Fundamentals ch. 24 Table 1 (read in a public text).
func (t Terrain) layer() (exponent, thicknessM float64) {
	switch t {
	case City:
		return 0.33, 460
	case Suburb:
		return 0.22, 370
	case Country:
		return 0.14, 270
	case Water:
		return 0.10, 210
	}
	return math.NaN(), math.NaN()
}

// WindAt returns the wind at heightM over the local terrain from the wind a
// station measured at stationHeightM over its own:
// U_met (d_met/H_met)^a_met (H/d)^a. Less reliable below the mean height of
// obstacles. At height 0 it is 0.
//
// ASHRAE Fundamentals ch. 24 eq. 4 and Table 1 (read in a public text).
func WindAt(stationMs, stationHeightM float64, station Terrain, heightM float64, local Terrain) float64 {
	if !valid(stationMs, heightM) || !(stationHeightM > 0) {
		return math.NaN()
	}
	return stationMs * WindFactor(stationHeightM, station, heightM, local)
}

// WindFactor returns the ratio of [WindAt] to the station's wind: constant for
// a site, so that a simulation computes it once.
func WindFactor(stationHeightM float64, station Terrain, heightM float64, local Terrain) float64 {
	aMet, dMet := station.layer()
	a, d := local.layer()
	return math.Pow(dMet/stationHeightM, aMet) * math.Pow(heightM/d, a)
}

// RoughnessFactorEN16798 returns C_R = K_R ln(z / z0) at heightM, not below the
// terrain's least height z_min: EN 16798-7 (read in public code). It takes
// [Country] for open field and [City] for urban.
func RoughnessFactorEN16798(heightM float64, t Terrain) float64 {
	if !valid(heightM) {
		return math.NaN()
	}
	var k, z0, least float64
	switch t {
	case Water:
		k, z0, least = 0.17, 0.01, 2
	case Country:
		k, z0, least = 0.19, 0.05, 4
	case Suburb:
		k, z0, least = 0.22, 0.3, 8
	case City:
		k, z0, least = 0.24, 1.0, 16
	default:
		return math.NaN()
	}
	return k * math.Log(math.Max(heightM, least)/z0)
}
