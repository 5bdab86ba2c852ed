// Package air holds the properties of moist air: saturation pressure, humidity
// ratio, dew point, wet bulb, enthalpy, specific volume, density.
//
// Temperatures are in °C, pressures in Pa, relative humidity in per cent.
// Functions are pure. NaN in gives NaN out, and so does an argument outside
// the range a formula was fitted to. Relative humidity above 100 % counts as
// 100 % and below 0 % as 0 %, because sensors overshoot; at 0 % the dew point
// does not exist and is NaN.
//
// Source of the equations unless a function says otherwise: ASHRAE Handbook
// Fundamentals 2017, chapter 1.
package air

import "math"

// ZeroC is 0 °C in kelvin.
const ZeroC = 273.15

// StandardPressurePa is the pressure of the standard atmosphere at sea level.
const StandardPressurePa = 101325.0

// The range of the Hyland and Wexler equations in °C.
const (
	minSatTempC = -100
	maxSatTempC = 200
)

// SatPressurePa returns the saturation pressure of water vapour over ice
// (-100 to 0 °C) or liquid water (above 0 to 200 °C). NaN outside.
//
// Hyland & Wexler 1983, equations 5 and 6 of ASHRAE Fundamentals 2017 ch. 1.
// The two branches differ by 0.06 Pa at 0 °C, where this follows the handbook
// and uses the ice branch.
func SatPressurePa(tempC float64) float64 {
	lnP, _ := lnSat(tempC)
	return math.Exp(lnP)
}

// lnSat returns ln(p_ws / Pa) and its derivative by temperature (1/K).
func lnSat(tempC float64) (lnP, slope float64) {
	if !(tempC >= minSatTempC && tempC <= maxSatTempC) {
		return math.NaN(), math.NaN()
	}
	t := tempC + ZeroC
	if tempC <= 0 {
		const (
			c1 = -5.6745359e3
			c2 = 6.3925247
			c3 = -9.677843e-3
			c4 = 6.2215701e-7
			c5 = 2.0747825e-9
			c6 = -9.484024e-13
			c7 = 4.1635019
		)
		lnP = c1/t + c2 + t*(c3+t*(c4+t*(c5+t*c6))) + c7*math.Log(t)
		slope = -c1/(t*t) + c3 + t*(2*c4+t*(3*c5+t*4*c6)) + c7/t
		return lnP, slope
	}
	const (
		c8  = -5.8002206e3
		c9  = 1.3914993
		c10 = -4.8640239e-2
		c11 = 4.1764768e-5
		c12 = -1.4452093e-8
		c13 = 6.5459673
	)
	lnP = c8/t + c9 + t*(c10+t*(c11+t*c12)) + c13*math.Log(t)
	slope = -c8/(t*t) + c10 + t*(2*c11+t*3*c12) + c13/t
	return lnP, slope
}

// SatTempC returns the temperature at which water vapour of the given pressure
// saturates: the inverse of [SatPressurePa], exact to better than 1e-9 K. NaN
// for pressures of 0 or less and outside the range of the equations.
func SatTempC(vapourPa float64) float64 {
	if !(vapourPa > 0) {
		return math.NaN()
	}
	target := math.Log(vapourPa)
	if lowest, _ := lnSat(minSatTempC); target < lowest {
		return math.NaN()
	}
	if highest, _ := lnSat(maxSatTempC); target > highest {
		return math.NaN()
	}
	// Newton steps on ln p stay on the branch of their own side of 0 °C, so
	// that the step between the branches cannot make them oscillate.
	atZeroIce, _ := lnSat(0)
	low, high := 0.0, float64(maxSatTempC)
	if target <= atZeroIce {
		low, high = minSatTempC, 0
	}
	t := clamp(magnusInverseC(vapourPa, target <= atZeroIce), low, high)
	for range 60 {
		lnP, slope := lnSat(t)
		next := clamp(t-(lnP-target)/slope, low, high)
		if math.Abs(next-t) < 1e-10 {
			return next
		}
		t = next
	}
	return t
}

// clamp limits x to [low, high]; NaN stays NaN.
func clamp(x, low, high float64) float64 {
	return math.Max(low, math.Min(high, x))
}
