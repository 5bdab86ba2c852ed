package air

import "math"

// WetBulbC returns the thermodynamic wet-bulb temperature from air
// temperature, relative humidity and pressure, to 1e-6 K. At 100 % it is the
// air temperature; in perfectly dry air it still exists. NaN where the
// saturation pressure reaches the pressure of the air.
//
// Equations 33 and 35 of ASHRAE Fundamentals 2017 ch. 1: liquid water above
// 0 °C, ice at and below. Bisection, because the two branches do not meet.
func WetBulbC(tempC, rhPct, pressurePa float64) float64 {
	rh := clampRH(rhPct)
	ratio := HumidityRatioFromRH(tempC, rh, pressurePa)
	if math.IsNaN(ratio) || math.IsNaN(HumidityRatio(SatPressurePa(tempC), pressurePa)) {
		return math.NaN()
	}
	if rh == 100 {
		return tempC
	}
	low, high := DewPointC(tempC, rh), tempC
	if math.IsNaN(low) {
		low = minSatTempC
	}
	for high-low > 1e-6 {
		mid := (low + high) / 2
		if ratioAtWetBulb(tempC, mid, pressurePa) > ratio {
			high = mid
		} else {
			low = mid
		}
	}
	return (low + high) / 2
}

// ratioAtWetBulb returns the humidity ratio of air with the given dry-bulb and
// wet-bulb temperatures.
func ratioAtWetBulb(tempC, wetC, pressurePa float64) float64 {
	sat := HumidityRatio(SatPressurePa(wetC), pressurePa)
	if wetC > 0 {
		return ((2501-2.326*wetC)*sat - 1.006*(tempC-wetC)) / (2501 + 1.86*tempC - 4.186*wetC)
	}
	return ((2830-0.24*wetC)*sat - 1.006*(tempC-wetC)) / (2830 + 1.86*tempC - 2.1*wetC)
}

// HumidityRatioFromWetBulb returns kg of water vapour per kg of dry air from
// dry-bulb and wet-bulb temperatures and pressure. NaN when the pair would
// need less than no vapour.
func HumidityRatioFromWetBulb(tempC, wetC, pressurePa float64) float64 {
	if !(wetC <= tempC) {
		return math.NaN()
	}
	ratio := ratioAtWetBulb(tempC, wetC, pressurePa)
	if ratio < 0 {
		return math.NaN()
	}
	return ratio
}

// StullWetBulbC returns the wet-bulb temperature at sea level by one closed
// formula, within about -1 to +0.65 K of [WetBulbC]: Stull 2011, Journal of
// Applied Meteorology and Climatology 50:2267 (citation from memory). Valid
// for 5 to 99 % and -20 to 50 °C; NaN outside.
func StullWetBulbC(tempC, rhPct float64) float64 {
	if !(rhPct >= 5 && rhPct <= 99 && tempC >= -20 && tempC <= 50) {
		return math.NaN()
	}
	return tempC*math.Atan(0.151977*math.Sqrt(rhPct+8.313659)) +
		math.Atan(tempC+rhPct) - math.Atan(rhPct-1.676331) +
		0.00391838*math.Pow(rhPct, 1.5)*math.Atan(0.023101*rhPct) - 4.686035
}
