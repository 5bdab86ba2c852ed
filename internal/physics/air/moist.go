package air

import "math"

const (
	// molarRatio is the molar mass of water over that of dry air.
	molarRatio = 0.621945
	// vapourGasConstant is in J/(kg·K).
	vapourGasConstant = 461.5
)

// clampRH limits relative humidity to [0, 100] %; NaN stays NaN.
func clampRH(rhPct float64) float64 { return clamp(rhPct, 0, 100) }

// VapourPressurePa returns the partial pressure of water vapour from air
// temperature and relative humidity.
func VapourPressurePa(tempC, rhPct float64) float64 {
	return clampRH(rhPct) / 100 * SatPressurePa(tempC)
}

// RelHumidityPct returns the relative humidity from air temperature and dew
// point. A dew point above the air temperature, which only sensor error
// gives, counts as 100 %.
func RelHumidityPct(tempC, dewPointC float64) float64 {
	lnDew, _ := lnSat(dewPointC)
	lnAir, _ := lnSat(tempC)
	return math.Min(100, 100*math.Exp(lnDew-lnAir))
}

// DewPointC returns the dew point (below 0 °C the frost point) from air
// temperature and relative humidity by inverting [SatPressurePa]. NaN when
// rhPct is 0 or less. At 100 % it is the air temperature.
func DewPointC(tempC, rhPct float64) float64 {
	rh := clampRH(rhPct)
	if rh == 100 && tempC >= minSatTempC && tempC <= maxSatTempC {
		return tempC
	}
	return SatTempC(VapourPressurePa(tempC, rh))
}

// HumidityRatio returns kg of water vapour per kg of dry air from the vapour's
// partial pressure and the pressure of the air. NaN unless
// 0 <= vapourPa < pressurePa.
func HumidityRatio(vapourPa, pressurePa float64) float64 {
	if !(vapourPa >= 0 && vapourPa < pressurePa) {
		return math.NaN()
	}
	return molarRatio * vapourPa / (pressurePa - vapourPa)
}

// HumidityRatioFromRH returns kg of water vapour per kg of dry air from air
// temperature, relative humidity and pressure.
func HumidityRatioFromRH(tempC, rhPct, pressurePa float64) float64 {
	return HumidityRatio(VapourPressurePa(tempC, rhPct), pressurePa)
}

// VapourPressureFromRatioPa returns the partial pressure of water vapour from
// the humidity ratio (kg/kg dry air) and the pressure of the air.
func VapourPressureFromRatioPa(ratio, pressurePa float64) float64 {
	return pressurePa * ratio / (molarRatio + ratio)
}

// EnthalpyKJkg returns the specific enthalpy in kJ per kg of dry air, zero for
// dry air at 0 °C; ratio in kg/kg dry air.
func EnthalpyKJkg(tempC, ratio float64) float64 {
	return 1.006*tempC + ratio*(2501+1.86*tempC)
}

// SpecificVolumeM3kg returns m³ of moist air per kg of dry air.
func SpecificVolumeM3kg(tempC, ratio, pressurePa float64) float64 {
	return 0.287042 * (tempC + ZeroC) * (1 + 1.607858*ratio) / (pressurePa / 1000)
}

// DensityKgM3 returns the density of moist air, dry air and vapour together.
func DensityKgM3(tempC, ratio, pressurePa float64) float64 {
	return (1 + ratio) / SpecificVolumeM3kg(tempC, ratio, pressurePa)
}

// AbsoluteHumidityGm3 returns grams of water vapour per m³ of moist air from
// air temperature and partial pressure.
func AbsoluteHumidityGm3(tempC, vapourPa float64) float64 {
	return 1000 * vapourPa / (vapourGasConstant * (tempC + ZeroC))
}

// PressureAtPa returns the pressure of the standard atmosphere at an elevation
// in m above the sea; -5000 to 11 000 m, NaN outside.
func PressureAtPa(elevationM float64) float64 {
	if !(elevationM >= -5000 && elevationM <= 11000) {
		return math.NaN()
	}
	return StandardPressurePa * math.Pow(1-2.25577e-5*elevationM, 5.2559)
}

// StandardTempC returns the temperature of the standard atmosphere at an
// elevation in m above the sea; -5000 to 11 000 m, NaN outside.
func StandardTempC(elevationM float64) float64 {
	if !(elevationM >= -5000 && elevationM <= 11000) {
		return math.NaN()
	}
	return 15 - 0.0065*elevationM
}
