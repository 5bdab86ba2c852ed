package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// EN16798AdaptiveDoc documents [EN16798Adaptive].
var EN16798AdaptiveDoc = method.Doc{
	Title:    "Adaptive comfort limits (EN 16798-1:2019)",
	Question: "Which operative temperatures suit people who can open windows and choose their clothes?",
	Formula:  "θ_c = 0.33 θ_rm + 18.8; I +2/-3 K, II +3/-4 K, III +4/-5 K, limits included",
	Limits: []string{
		"running mean outdoor temperature between 10 and 30 °C",
		"no mechanical cooling in operation (wording from memory)",
		"sedentary work, 1.0 to 1.3 met; windows people can open; free choice of clothing",
	},
	Sources: []string{
		method.Recomputed("EN 16798-1:2019 Annex B, as tabulated in public texts"),
		method.Public("range of validity: EN 15251:2007"),
	},
	Standing: method.Published,
}

// EN16798Adaptive returns the adaptive limits of EN 16798-1:2019 at a running
// mean outdoor temperature (see [RunningMeanEN]). All NaN outside
// 10 < runningMeanC < 30 and for categories other than I to III.
func EN16798Adaptive(runningMeanC float64, c Category) Band {
	up, down, ok := enWidths(c)
	if !ok || !(runningMeanC > 10 && runningMeanC < 30) {
		return noBand()
	}
	neutral := 0.33*runningMeanC + 18.8
	return Band{neutral - down, neutral, neutral + up}
}

// enWidths returns the widths in K above and below of EN 16798-1:2019.
func enWidths(c Category) (up, down float64, ok bool) {
	switch c {
	case CategoryI:
		return 2, 3, true
	case CategoryII:
		return 3, 4, true
	case CategoryIII:
		return 4, 5, true
	}
	return 0, 0, false
}

// EN16798Extended returns the limits of [EN16798Adaptive] where they exist and
// our extension of them elsewhere, with extended true: at 10 °C and below the
// operative range of the heating season, at 30 °C and above the line frozen at
// 30 °C. The extension is no part of the standard.
func EN16798Extended(runningMeanC float64, c Category) (band Band, extended bool) {
	up, down, ok := enWidths(c)
	switch {
	case !ok || math.IsNaN(runningMeanC):
		return noBand(), false
	case runningMeanC <= 10:
		return OfficeRange(c, HeatingSeason), true
	case runningMeanC >= 30:
		const neutral = 0.33*30 + 18.8
		return Band{neutral - down, neutral, neutral + up}, true
	}
	return EN16798Adaptive(runningMeanC, c), false
}

// EN15251AdaptiveDoc documents [EN15251Adaptive].
var EN15251AdaptiveDoc = method.Doc{
	Title:    "Adaptive comfort limits (EN 15251:2007, withdrawn)",
	Question: "The same as EN 16798-1, by its predecessor, for comparison with older studies.",
	Formula:  "θ_c = 0.33 θ_rm + 18.8; I ±2 K, II ±3 K, III ±4 K, limits included",
	Limits: []string{
		"upper limits: running mean between 10 and 30 °C",
		"lower limits: running mean between 15 and 30 °C (from memory)",
		"no mechanical cooling; windows people can open; free choice of clothing",
	},
	Sources:  []string{method.Public("EN 15251:2007 Annex A.2"), method.Memory("range of the lower limits")},
	Standing: method.FromMemory,
}

// EN15251Adaptive returns the adaptive limits of EN 15251:2007. The upper limit
// exists for 10 < runningMeanC < 30, the lower for 15 < runningMeanC < 30; NaN
// elsewhere and for categories other than I to III.
func EN15251Adaptive(runningMeanC float64, c Category) Band {
	if c < CategoryI || c > CategoryIII || !(runningMeanC > 10 && runningMeanC < 30) {
		return noBand()
	}
	half := float64(c-CategoryI) + 2
	neutral := 0.33*runningMeanC + 18.8
	band := Band{neutral - half, neutral, neutral + half}
	if runningMeanC <= 15 {
		band.LowC = math.NaN()
	}
	return band
}

// ASHRAE55AdaptiveDoc documents [ASHRAE55Adaptive] and [AirSpeedIncrementK].
var ASHRAE55AdaptiveDoc = method.Doc{
	Title:    "Adaptive comfort limits (ASHRAE 55, same lines 2013 to 2023)",
	Question: "Which operative temperatures would 80 % or 90 % of people accept where they control the windows?",
	Formula: "t_cmf = 0.31 t_pma + 17.8; 80 % ±3.5 K, 90 % ±2.5 K, limits included; above 25 °C the upper limit " +
		"rises by 1.2, 1.8, 2.2 K at 0.6, 0.9, 1.2 m/s of occupant-controlled air speed, in steps",
	Limits: []string{
		"prevailing mean outdoor temperature 10 to 33.5 °C; no extrapolation",
		"occupant-controlled openings to outdoors",
		"1.0 to 1.3 met by the 2023 appendix (1.0 to 1.5 met elsewhere: sources differ); free choice of 0.5 to 1.0 clo",
		"editions to 2020 exclude buildings with mechanical cooling (from memory): in a mixed-mode building calculation only",
	},
	Sources: []string{
		method.Recomputed("ASHRAE 55-2023, lines and ranges"),
		method.Public("ASHRAE 55-2020 Table 5-13, air speed"),
	},
	Standing: method.Published,
}

// Acceptability is the share of people, in per cent, who accept a limit.
type Acceptability int

// Acceptabilities ASHRAE 55 gives limits for.
const (
	Accept80 Acceptability = 80
	Accept90 Acceptability = 90
)

// ASHRAE55Adaptive returns the adaptive limits of ASHRAE 55 at a prevailing
// mean outdoor temperature (see [PrevailingMean]), still air. All NaN outside
// 10 to 33.5 °C and for other acceptabilities.
func ASHRAE55Adaptive(prevailingMeanC float64, a Acceptability) Band {
	var half float64
	switch a {
	case Accept80:
		half = 3.5
	case Accept90:
		half = 2.5
	default:
		return noBand()
	}
	if !(prevailingMeanC >= 10 && prevailingMeanC <= 33.5) {
		return noBand()
	}
	neutral := 0.31*prevailingMeanC + 17.8
	return Band{neutral - half, neutral, neutral + half}
}

// AirSpeedIncrementK returns by how much air speed that people control raises
// an upper adaptive limit above 25 °C: 1.2 K from 0.6 m/s, 1.8 K from 0.9 m/s,
// 2.2 K from 1.2 m/s, no interpolation; 0 below. The same in ASHRAE 55 and
// EN 16798-1.
func AirSpeedIncrementK(airSpeedMS float64) float64 {
	switch v := airSpeedMS; {
	case math.IsNaN(v):
		return math.NaN()
	case v >= 1.2:
		return 2.2
	case v >= 0.9:
		return 1.8
	case v >= 0.6:
		return 1.2
	}
	return 0
}

// WithAirMovementC returns an upper limit raised by air speed that people
// control. The standards raise it only for operative temperatures above 25 °C,
// so a limit that would still lie at or below 25 °C stays as it was.
func WithAirMovementC(highC, airSpeedMS float64) float64 {
	raised := highC + AirSpeedIncrementK(airSpeedMS)
	if raised <= 25 {
		return highC
	}
	return raised
}

// IMACDoc documents [IMAC].
var IMACDoc = method.Doc{
	Title:    "India model for adaptive comfort (IMAC)",
	Question: "Which operative temperatures suit people in Indian offices, by type of building?",
	Formula: "T the 30-day mean outdoor temperature; naturally ventilated 0.54 T + 12.83, 90 % ±2.38 K; " +
		"mixed mode 0.28 T + 17.87, 90 % ±3.46 K; air-conditioned 0.078 T + 23.25, 90 % ±1.5 K",
	Limits: []string{
		"mixed mode 13 to 38.5 °C, naturally ventilated 12.5 to 31 °C; air-conditioned range not known here",
		"the mixed-mode line serves both modes",
		"one secondary source prints ±3.48 K for mixed mode",
	},
	Sources: []string{
		method.Public("Manu et al. 2016, Building and Environment 98:55, equations and ranges"),
		method.Memory("±1.5 K for air-conditioned buildings"),
	},
	Standing: method.Published,
}

// IMACBuilding is the type of building in IMAC.
type IMACBuilding int

// Building types of IMAC.
const (
	IMACNaturallyVentilated IMACBuilding = iota
	IMACMixedMode
	IMACAirConditioned
)

// IMAC returns the 90 % limits at a 30-day mean outdoor temperature
// ([PrevailingMean] with 30 days). All NaN outside 12.5 to 31 °C (naturally
// ventilated) or 13 to 38.5 °C (mixed mode; also applied to air-conditioned,
// whose range is not known here).
func IMAC(meanC float64, b IMACBuilding) Band {
	var slope, base, half float64
	low, high := 13.0, 38.5
	switch b {
	case IMACNaturallyVentilated:
		slope, base, half = 0.54, 12.83, 2.38
		low, high = 12.5, 31
	case IMACMixedMode:
		slope, base, half = 0.28, 17.87, 3.46
	case IMACAirConditioned:
		slope, base, half = 0.078, 23.25, 1.5
	default:
		return noBand()
	}
	if !(meanC >= low && meanC <= high) {
		return noBand()
	}
	neutral := slope*meanC + base
	return Band{neutral - half, neutral, neutral + half}
}

// OfficeRangeDoc documents [OfficeRange].
var OfficeRangeDoc = method.Doc{
	Title:    "Operative temperature ranges for offices with plant running (EN 16798-1 Tables B.2 and B.5)",
	Question: "Which operative temperatures suit an office that is heated or cooled?",
	Formula:  "heating season I 21-23, II 20-24, III 19-25 °C; cooling season I 23.5-25.5, II 23-26, III 22-27 °C",
	Limits: []string{
		"sedentary work, about 1.2 met; about 1.0 clo in winter, 0.5 clo in summer; still air, 50 % humidity",
		"category IV is not given: the printed values are in doubt here",
		"between the seasons the lower heating and the upper cooling limit are used: our extension",
	},
	Sources: []string{
		method.Public("EN 16798-1:2019 Tables B.2 and B.5, category II"),
		method.Memory("categories I and III"),
	},
	Standing: method.FromMemory,
}

// Season is the season an operative range holds for.
type Season int

// Seasons. BetweenSeasons takes the low limit of heating and the high limit of
// cooling, which is our extension.
const (
	HeatingSeason Season = iota
	CoolingSeason
	BetweenSeasons
)

// OfficeRange returns the operative range for offices; NeutralC is its middle.
// All NaN for categories other than I to III.
func OfficeRange(c Category, s Season) Band {
	if c < CategoryI || c > CategoryIII || s < HeatingSeason || s > BetweenSeasons {
		return noBand()
	}
	heating := [...]Band{{LowC: 21, HighC: 23}, {LowC: 20, HighC: 24}, {LowC: 19, HighC: 25}}[c-CategoryI]
	cooling := [...]Band{{LowC: 23.5, HighC: 25.5}, {LowC: 23, HighC: 26}, {LowC: 22, HighC: 27}}[c-CategoryI]
	band := heating
	switch s {
	case CoolingSeason:
		band = cooling
	case BetweenSeasons:
		band = Band{LowC: heating.LowC, HighC: cooling.HighC}
	}
	band.NeutralC = (band.LowC + band.HighC) / 2
	return band
}
