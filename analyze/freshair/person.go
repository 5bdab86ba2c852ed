package freshair

// Sex chooses the basal metabolic rate.
type Sex uint8

// Sexes of Schofield's equations.
const (
	Male Sex = iota
	Female
)

// schofield are slope and intercept of the basal metabolic rate, MJ/day, on
// body mass, kg, up to an age (Schofield 1985, coefficients from memory, agree
// with every rate of the paper named below).
var schofield = [2][]struct{ belowY, perKg, rest float64 }{
	Male:   {{3, 0.249, -0.127}, {10, 0.095, 2.110}, {18, 0.074, 2.754}, {30, 0.063, 2.896}, {60, 0.048, 3.653}, {200, 0.049, 2.459}},
	Female: {{3, 0.244, -0.130}, {10, 0.085, 2.033}, {18, 0.056, 2.898}, {30, 0.062, 2.036}, {60, 0.034, 3.538}, {200, 0.038, 2.755}},
}

// BasalMetabolicRate is in MJ/day, for an age in years and a mass in kg.
func BasalMetabolicRate(sex Sex, ageY, massKg float64) float64 {
	for _, row := range schofield[sex] {
		if ageY < row.belowY {
			return row.perKg*massKg + row.rest
		}
	}
	return 0
}

// PersonCO2Ls is the CO2 a person gives off, L/s: RQ BMR M (T/P) 0.000211 with
// RQ 0.85, BMR in MJ/day, M in met, T in K, P in kPa (Persily & de Jonge 2017,
// Indoor Air 27:868). Their Table 4 is at 0 °C; air flows are at room
// temperature.
func PersonCO2Ls(basalMJDay, met, tempC, pressureKPa float64) float64 {
	return 0.85 * basalMJDay * met * (tempC + 273.15) / pressureKPa * 0.000211
}
