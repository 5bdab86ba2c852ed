package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// OperativeDoc documents [OperativeISO], [OperativeASHRAE] and
// [RadiantFromGlobeC].
var OperativeDoc = method.Doc{
	Title:    "Operative temperature (ISO 7726, ASHRAE 55)",
	Question: "Which one temperature stands for the air and the surfaces together?",
	Formula: "ISO 7726: (t_a sqrt(10 v) + t_r) / (1 + sqrt(10 v)); " +
		"ASHRAE 55: A t_a + (1 - A) t_r, A = 0.5 below 0.2 m/s, 0.6 to below 0.6 m/s, 0.7 to 1.0 m/s; " +
		"t_r from a globe: ((t_g + 273.15)^4 + h (t_g - t_a) / (0.95 · 5.67e-8))^(1/4) - 273.15, " +
		"h the greater of 1.4 (|t_g - t_a| / d)^0.25 and 6.3 v^0.6 / d^0.4",
	Limits: []string{
		"air speed up to 1 m/s",
		"a globe is taken as black, 150 mm wide, at least 10 minutes in place; small globes read nearer to the air",
		"without a reading of air beside it a globe stands for the operative temperature; without a globe the air temperature does (our assumption: the surfaces are as warm as the air)",
		"surface temperatures of single walls or slabs are not used: one surface is not the room",
	},
	Sources: []string{
		method.Public("ISO 7726:1998; CIBSE Guide A"), method.Public("ASHRAE 55-2023"),
		method.Recomputed("ISO 7726:1998 Annex B, globe thermometer"),
	},
	Standing: method.Published,
}

// GlobeDiameterM is the diameter of the standard globe thermometer. ISO 7726.
const GlobeDiameterM = 0.15

// RadiantFromGlobeC returns the mean radiant temperature from a black globe of
// a diameter in m, the air temperature beside it and the air speed (0 and
// more). NaN for negative speeds or diameters. ISO 7726:1998 Annex B.
func RadiantFromGlobeC(globeC, airC, airSpeedMS, diameterM float64) float64 {
	if !(airSpeedMS >= 0 && diameterM > 0) {
		return math.NaN()
	}
	const zeroC = 273.15
	natural := 1.4 * math.Sqrt(math.Sqrt(math.Abs(globeC-airC)/diameterM))
	forced := 6.3 * math.Pow(airSpeedMS, 0.6) / math.Pow(diameterM, 0.4)
	g := globeC + zeroC
	fourth := g*g*g*g + math.Max(natural, forced)*(globeC-airC)/(0.95*5.67e-8)
	if fourth <= 0 {
		return math.NaN()
	}
	return math.Sqrt(math.Sqrt(fourth)) - zeroC
}

// OperativeISO returns the operative temperature from air and mean radiant
// temperature and air speed. ISO 7726. NaN for negative speeds.
func OperativeISO(airC, radiantC, airSpeedMS float64) float64 {
	r := math.Sqrt(10 * airSpeedMS)
	return (airC*r + radiantC) / (1 + r)
}

// OperativeASHRAE returns the operative temperature from air and mean radiant
// temperature and air speed, 0 to 1 m/s; NaN outside. ASHRAE 55.
func OperativeASHRAE(airC, radiantC, airSpeedMS float64) float64 {
	var a float64
	switch v := airSpeedMS; {
	case !(v >= 0 && v <= 1):
		return math.NaN()
	case v < 0.2:
		a = 0.5
	case v < 0.6:
		a = 0.6
	default:
		a = 0.7
	}
	return a*airC + (1-a)*radiantC
}

// ClothingDoc documents [ClothingClo].
var ClothingDoc = method.Doc{
	Title:    "Clothing from the outdoor temperature (Schiavon & Lee)",
	Question: "How warmly are people likely to be dressed today?",
	Formula: "t outdoors at 06:00: below -5 °C 1.00 clo; to 5 °C 0.818 - 0.0364 t; " +
		"to 26 °C 10^(-0.1635 - 0.0066 t); from 26 °C 0.46 clo",
	Limits:   []string{"offices with free choice of dress", "a typical person, not everybody"},
	Sources:  []string{method.Memory("Schiavon & Lee 2013, Building and Environment 59:250; ASHRAE 55-2017")},
	Standing: method.FromMemory,
}

// ClothingClo returns the clothing insulation from the outdoor air temperature
// at 06:00 of the day.
func ClothingClo(outdoorAtSixC float64) float64 {
	switch t := outdoorAtSixC; {
	case math.IsNaN(t):
		return math.NaN()
	case t < -5:
		return 1.00
	case t < 5:
		return 0.818 - 0.0364*t
	case t < 26:
		return math.Pow(10, -0.1635-0.0066*t)
	default:
		return 0.46
	}
}

// DraughtDoc documents [DraughtRate].
var DraughtDoc = method.Doc{
	Title:    "Draught rate (ISO 7730)",
	Question: "How many people would be bothered by the draught?",
	Formula:  "DR = (34 - t_a)(v - 0.05)^0.62 (0.37 v Tu + 3.14) %, v at least 0.05 m/s, DR at most 100 %",
	Limits: []string{
		"near-sedentary people close to thermally neutral", "air temperature 20 to 26 °C",
		"mean air speed below 0.5 m/s", "turbulence 10 to 60 %; 40 % when unknown",
		"a wanted breeze is no draught",
	},
	Sources:  []string{method.Recomputed("ISO 7730:2005 eq. 6"), method.Memory("its ranges")},
	Standing: method.Published,
}

// DraughtInRange reports whether ISO 7730 gives a draught rate: air at 20 to
// 26 °C, slower than 0.5 m/s, turbulence 10 to 60 % (ranges from memory).
func DraughtInRange(airC, airSpeedMS, turbulencePct float64) bool {
	return airC >= 20 && airC <= 26 && airSpeedMS >= 0 && airSpeedMS < 0.5 && turbulencePct >= 10 && turbulencePct <= 60
}

// DraughtRate returns the percentage of people dissatisfied by draught, 0 to
// 100, from the local air temperature, mean speed and turbulence intensity in
// per cent.
func DraughtRate(airC, airSpeedMS, turbulencePct float64) float64 {
	v := math.Max(airSpeedMS, 0.05)
	dr := (34 - airC) * math.Pow(v-0.05, 0.62) * (0.37*v*turbulencePct + 3.14)
	return math.Max(0, math.Min(100, dr))
}
