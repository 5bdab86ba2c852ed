package air

import "math"

// Magnus constants of the WMO, pressures in Pa.
//
// WMO-No. 8, Guide to Meteorological Instruments and Methods of Observation,
// 2008 edition onward, Annex 4.B (citation from memory). Other constants in
// circulation (17.27 and 237.3; 17.625 and 243.04) are not the WMO's.
const (
	magnusBasePa = 611.2
	magnusWaterA = 17.62
	magnusWaterB = 243.12
	magnusIceA   = 22.46
	magnusIceB   = 272.62
)

// MagnusSatPressurePa returns the saturation pressure over liquid water, also
// supercooled, by the WMO's Magnus formula; -45 to 60 °C, NaN outside. Within
// 0.3 % of [SatPressurePa] from 0 to 50 °C.
func MagnusSatPressurePa(tempC float64) float64 {
	if !(tempC >= -45 && tempC <= 60) {
		return math.NaN()
	}
	return magnusBasePa * math.Exp(magnusWaterA*tempC/(magnusWaterB+tempC))
}

// MagnusIceSatPressurePa returns the saturation pressure over ice by the WMO's
// Magnus formula; -65 to 0 °C, NaN outside.
func MagnusIceSatPressurePa(tempC float64) float64 {
	if !(tempC >= -65 && tempC <= 0) {
		return math.NaN()
	}
	return magnusBasePa * math.Exp(magnusIceA*tempC/(magnusIceB+tempC))
}

// MagnusDewPointC returns the dew point over liquid water by the inverted
// Magnus formula: the fast form, within 0.03 K of [DewPointC] from 0 to 40 °C.
// It stays on liquid water below 0 °C. NaN when rhPct is 0 or less.
func MagnusDewPointC(tempC, rhPct float64) float64 {
	rh := clampRH(rhPct)
	if !(rh > 0) {
		return math.NaN()
	}
	if !(tempC >= -45 && tempC <= 60) {
		return math.NaN()
	}
	x := math.Log(rh/100) + magnusWaterA*tempC/(magnusWaterB+tempC)
	return magnusWaterB * x / (magnusWaterA - x)
}

// MagnusEnhancement returns the factor by which moist air of the given
// pressure raises the saturation pressure of pure vapour: 1.0047 at sea level.
// WMO-No. 8, Annex 4.B (from memory).
func MagnusEnhancement(pressurePa float64) float64 {
	hPa := pressurePa / 100
	return 1.0016 + 3.15e-6*hPa - 0.074/hPa
}

// magnusInverseC is a first estimate of the saturation temperature.
func magnusInverseC(vapourPa float64, ice bool) float64 {
	a, b := magnusWaterA, magnusWaterB
	if ice {
		a, b = magnusIceA, magnusIceB
	}
	x := math.Log(vapourPa / magnusBasePa)
	return b * x / (a - x)
}
