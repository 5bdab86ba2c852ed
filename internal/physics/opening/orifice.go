package opening

import "math"

// OrificeFlow returns C_D A sqrt(2 |dp| / rho), signed as the pressure
// difference: ASHRAE Fundamentals ch. 16 eq. 36 (read in a public text).
// Density in kg/m³.
func OrificeFlow(discharge, areaM2, pressureDiffPa, density float64) float64 {
	if !valid(discharge, areaM2) || !(density > 0) {
		return math.NaN()
	}
	q := discharge * areaM2 * math.Sqrt(2*math.Abs(pressureDiffPa)/density)
	return math.Copysign(q, pressureDiffPa)
}

// WindFlow returns the wind-driven flow through an inlet, C_v A U: ASHRAE
// Fundamentals ch. 16 eq. 37. effectiveness C_v is 0.5 to 0.6 for wind
// perpendicular to the opening and 0.25 to 0.35 for diagonal wind.
func WindFlow(effectiveness, areaM2, windMs float64) float64 {
	if !valid(effectiveness, areaM2, windMs) {
		return math.NaN()
	}
	return effectiveness * areaM2 * windMs
}

// StackFlow returns the buoyancy-driven flow C_D A sqrt(2 g dH dT / T), T the
// warmer side's absolute temperature: ASHRAE Fundamentals ch. 16 eq. 38.
// neutralM is the height from the middle of the lower opening to the neutral
// level. The discharge coefficient is 0.65 with several openings.
func StackFlow(discharge, areaM2, neutralM, indoorC, outdoorC float64) float64 {
	if !valid(discharge, areaM2, neutralM) {
		return math.NaN()
	}
	warmer := math.Max(indoorC, outdoorC) + zeroC
	return discharge * areaM2 * math.Sqrt(2*gravity*neutralM*math.Abs(indoorC-outdoorC)/warmer)
}

// DischargeSingle returns the discharge coefficient of one opening with flow
// both ways, 0.40 + 0.0045 |dT|: ASHRAE Fundamentals ch. 16 eq. 39.
func DischargeSingle(indoorC, outdoorC float64) float64 {
	return 0.40 + 0.0045*math.Abs(indoorC-outdoorC)
}

// StackFlowSingle returns the buoyancy-driven flow through one opening: eq. 38
// with the coefficient of eq. 39 and the neutral level at half its height.
func StackFlowSingle(areaM2, heightM, indoorC, outdoorC float64) float64 {
	return StackFlow(DischargeSingle(indoorC, outdoorC), areaM2, heightM/2, indoorC, outdoorC)
}

// CombineQuadrature returns the flow under wind and buoyancy together, the
// root of the sum of squares: ASHRAE Fundamentals ch. 16.
func CombineQuadrature(windFlow, stackFlow float64) float64 {
	return math.Hypot(windFlow, stackFlow)
}

// SeriesArea returns the equivalent area A of two openings in series,
// 1/A² = 1/A1² + 1/A2²; 0 when either is shut.
func SeriesArea(area1M2, area2M2 float64) float64 {
	if !valid(area1M2, area2M2) {
		return math.NaN()
	}
	if area1M2 == 0 || area2M2 == 0 {
		return 0
	}
	return area1M2 * area2M2 / math.Hypot(area1M2, area2M2)
}

// StackTwoOpenings returns the buoyancy-driven flow in at one opening and out
// at another heightM above it: C_d A sqrt(2 g h dT / T), A by [SeriesArea], T
// the mean of both temperatures, C_d about 0.61. The form of CIBSE AM10 (from
// memory).
func StackTwoOpenings(discharge, area1M2, area2M2, heightM, indoorC, outdoorC float64) float64 {
	if !valid(discharge, heightM) {
		return math.NaN()
	}
	return discharge * SeriesArea(area1M2, area2M2) * math.Sqrt(2*gravity*heightM*relativeDifference(indoorC, outdoorC))
}

// CrossFlow returns the wind-driven flow in on one façade and out on another:
// C_d A U sqrt(dC_p), A by [SeriesArea], dC_p the difference of the pressure
// coefficients for the same reference wind. The form of CIBSE AM10 (from
// memory).
func CrossFlow(discharge, area1M2, area2M2, windMs, pressureDiff float64) float64 {
	if !valid(discharge, windMs, pressureDiff) {
		return math.NaN()
	}
	return discharge * SeriesArea(area1M2, area2M2) * windMs * math.Sqrt(pressureDiff)
}

// Shielding is how freely the wind reaches a façade.
type Shielding int

const (
	Open Shielding = iota
	Normal
	Shielded
)

// PressureCoefficient returns the wind pressure coefficient of a façade below
// 15 m by EN 16798-7 Table B.7 (read in public code): offsetDeg is the angle
// between the wind's origin and the façade's outward normal; up to 60° the
// façade is windward, beyond it leeward.
func PressureCoefficient(s Shielding, offsetDeg float64) float64 {
	if math.IsNaN(offsetDeg) {
		return math.NaN()
	}
	offset := math.Abs(math.Remainder(offsetDeg, 360))
	table := [...]struct{ windward, leeward float64 }{
		Open:     {0.50, -0.70},
		Normal:   {0.25, -0.50},
		Shielded: {0.05, -0.30},
	}
	if s < Open || s > Shielded {
		return math.NaN()
	}
	if offset <= 60 {
		return table[s].windward
	}
	return table[s].leeward
}
