// Package opening holds the flow of outdoor air through windows and other
// openings by buoyancy and wind, and the wind's change with height and terrain.
//
// Flows are in m³/s, areas in m², temperatures in °C, air speeds in m/s,
// heights in m, pressures in Pa. Temperature differences count by size, either
// way. Functions are pure; NaN in gives NaN out; negative areas, heights and
// speeds give NaN.
//
// These are models for a still picture of the building: weather-station wind
// and one opening's geometry. Measured flows scatter around them by a factor
// of two (common practice); use them for comparisons.
package opening

import "math"

const (
	gravity = 9.81 // m/s²
	zeroC   = 273.15
)

// EN 16798-7:2017 coefficients, Table 11 (read in two public implementations);
// the standard's own unit labels are not consistent.
const (
	enWind       = 0.001  // C_wnd, dimensionless
	enStack      = 0.0035 // C_st, m/(s²·K)
	enRefDensity = 1.204  // kg/m³ at 293 K
	enDischarge  = 0.67   // C_D
	// ENCrossPressure is the default difference of wind pressure coefficients
	// between windward and leeward openings.
	ENCrossPressure = 0.75
)

// SingleSidedEN16798 returns the flow through openings on one façade.
//
// EN 16798-7:2017, 6.4.3.5: (rho_ref/rho_e)(A/2) sqrt(max(C_wnd u², C_st h dT));
// the larger of wind and buoyancy governs, they do not add. windMs is the wind
// at 10 m on the site, heightM the highest top less the lowest bottom of the
// openings. Densities by [AirDensityEN16798].
func SingleSidedEN16798(areaM2, heightM, windMs, indoorC, outdoorC, elevationM float64) float64 {
	if !valid(areaM2, heightM, windMs) {
		return math.NaN()
	}
	drive := math.Max(enWind*windMs*windMs, enStack*heightM*math.Abs(indoorC-outdoorC))
	return enRefDensity / AirDensityEN16798(elevationM) * areaM2 / 2 * math.Sqrt(drive)
}

// CrossEN16798 returns the flow with openings on opposite façades, wind and
// buoyancy in quadrature. crossAreaM2 is the equivalent area of the openings
// in series, areaM2 the whole area open.
//
// EN 16798-7:2017; the coefficients were read in public code, the combination
// and the rule for the cross area are from memory and in doubt.
func CrossEN16798(crossAreaM2, areaM2, heightM, windMs, pressureDiff, indoorC, outdoorC, elevationM float64) float64 {
	if !valid(crossAreaM2, areaM2, heightM, windMs, pressureDiff) {
		return math.NaN()
	}
	wind := enDischarge * crossAreaM2 * windMs * math.Sqrt(pressureDiff)
	stack := areaM2 * areaM2 / 4 * enStack * heightM * math.Abs(indoorC-outdoorC)
	return enRefDensity / AirDensityEN16798(elevationM) * math.Sqrt(wind*wind+stack)
}

// AirDensityEN16798 returns the density of outdoor air in kg/m³ at an
// elevation in m: 1.204 (1 - 0.00651 H/293)^4.255.
func AirDensityEN16798(elevationM float64) float64 {
	return enRefDensity * math.Pow(1-0.00651*elevationM/293, 4.255)
}

// HingedShare returns the share of a bottom- or side-hung opening's area that
// is free at an opening angle in degrees, 0 to 90; NaN outside.
// CEN/TR 16798-8 (read in public code).
func HingedShare(angleDeg float64) float64 {
	if !(angleDeg >= 0 && angleDeg <= 90) {
		return math.NaN()
	}
	return angleDeg * (1.86e-2 + angleDeg*(-1.19e-4+angleDeg*2.6e-7))
}

// SingleSidedDeGidsPhaff returns the flow through one window:
// (A/2) sqrt(0.001 u² + 0.0035 h dT + 0.01), the last term being turbulence.
//
// de Gids & Phaff 1982, Air Infiltration Review 4(1) (formula read in a public
// text). windMs is the meteorological wind at 10 m, heightM the opening's.
func SingleSidedDeGidsPhaff(areaM2, heightM, windMs, indoorC, outdoorC float64) float64 {
	if !valid(areaM2, heightM, windMs) {
		return math.NaN()
	}
	return areaM2 / 2 * math.Sqrt(0.001*windMs*windMs+0.0035*heightM*math.Abs(indoorC-outdoorC)+0.01)
}

// StackWarrenParkins returns the buoyancy-driven flow through one opening:
// (C_d/3) A sqrt(g H dT / T), T the mean of both temperatures, C_d about 0.61.
// Warren & Parkins 1984, Windows and airflow (read in a public text).
func StackWarrenParkins(discharge, areaM2, heightM, indoorC, outdoorC float64) float64 {
	if !valid(discharge, areaM2, heightM) {
		return math.NaN()
	}
	return discharge / 3 * areaM2 * math.Sqrt(gravity*heightM*relativeDifference(indoorC, outdoorC))
}

// WindWarrenParkins returns the wind-driven flow through one opening, 0.025 A u
// with the reference wind at the height of the building. Source as
// [StackWarrenParkins].
func WindWarrenParkins(areaM2, windMs float64) float64 {
	if !valid(areaM2, windMs) {
		return math.NaN()
	}
	return 0.025 * areaM2 * windMs
}

// SingleSidedWarrenParkins returns the larger of the buoyancy-driven and the
// wind-driven flow. Source as [StackWarrenParkins].
func SingleSidedWarrenParkins(discharge, areaM2, heightM, windMs, indoorC, outdoorC float64) float64 {
	return math.Max(StackWarrenParkins(discharge, areaM2, heightM, indoorC, outdoorC), WindWarrenParkins(areaM2, windMs))
}

// relativeDifference is |Ti - To| over the mean absolute temperature.
func relativeDifference(indoorC, outdoorC float64) float64 {
	return math.Abs(indoorC-outdoorC) / ((indoorC+outdoorC)/2 + zeroC)
}

// valid reports whether none of the arguments is negative or NaN.
func valid(args ...float64) bool {
	for _, x := range args {
		if !(x >= 0) {
			return false
		}
	}
	return true
}
