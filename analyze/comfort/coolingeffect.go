package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// CoolingEffectDoc documents [CoolingEffectK] and [PMVElevated].
var CoolingEffectDoc = method.Doc{
	Title:    "Cooling effect of air movement (ASHRAE 55)",
	Question: "By how much may it be warmer when the air moves?",
	Formula: "CE such that SET(t_a, t_r, v) = SET(t_a - CE, t_r - CE, 0.1 m/s); " +
		"PMV with elevated air speed = PMV(t_a - CE, t_r - CE, 0.1 m/s); no effect at 0.1 m/s and below",
	Limits: []string{
		"0 to 40 K; no solution (air warmer than skin) is reported as none",
		"without control by the occupants the air speed is limited: 0.2 m/s up to 23 °C, 0.8 m/s above 25.5 °C",
	},
	Sources: []string{
		method.Recomputed("ASHRAE 55-2023 Appendix D eq. D-1 to D-3"),
		method.Memory("ASHRAE 55-2017 5.3.3, limit of air speed"),
	},
	Standing: method.Published,
}

// CoolingEffectK returns the cooling effect of air movement in K, to 1e-4 K,
// and true; 0 and true at 0.1 m/s and below; 0 and false when no temperature
// 0 to 40 K lower gives the same SET in still air, and for NaN. The activity
// term of form B is left out as the standard demands. About ten times the cost
// of [SET].
func CoolingEffectK(c Conditions, o SETOptions) (ceK float64, found bool) {
	if !validConditions(c) {
		return 0, false
	}
	if c.AirSpeedMS <= 0.1 {
		return 0, true
	}
	o.ForCoolingEffect = true
	target := SET(c, o)
	excess := func(ce float64) float64 {
		return SET(stillAndCooler(c, ce), o) - target
	}
	// Excess falls as ce rises; false position with the Illinois correction.
	low, high := 0.0, 40.0
	atLow, atHigh := excess(low), excess(high)
	if !(atLow >= 0 && atHigh <= 0) {
		return 0, false
	}
	if atLow == 0 {
		return 0, true
	}
	ce, side := low, 0
	for range 100 {
		next := (low*atHigh - high*atLow) / (atHigh - atLow)
		moved := math.Abs(next - ce)
		ce = next
		at := excess(ce)
		if at == 0 || moved < 1e-4 {
			break
		}
		if at > 0 {
			low, atLow = ce, at
			if side == +1 {
				atHigh /= 2
			}
			side = +1
		} else {
			high, atHigh = ce, at
			if side == -1 {
				atLow /= 2
			}
			side = -1
		}
	}
	return ce, true
}

// PMVElevated returns the predicted mean vote with the cooling effect of air
// movement, as ASHRAE 55 demands above 0.1 m/s; NaN when there is none to be
// found. Air speed and clothing are taken as given.
func PMVElevated(c Conditions, o SETOptions) float64 {
	if c.AirSpeedMS <= 0.1 {
		return PMV(c)
	}
	ce, found := CoolingEffectK(c, o)
	if !found {
		return math.NaN()
	}
	return PMV(stillAndCooler(c, ce))
}

func stillAndCooler(c Conditions, ceK float64) Conditions {
	c.AirC -= ceK
	c.RadiantC -= ceK
	c.AirSpeedMS = 0.1
	return c
}

// AirSpeedLimitMS returns the greatest air speed ASHRAE 55 allows where the
// occupants cannot control it, from the operative temperature: 0.2 m/s up to
// 23 °C, 50.49 - 4.4047 t + 0.096425 t² to 25.5 °C but at most 0.8, 0.8 above.
// ASHRAE 55-2017 5.3.3 (from memory; the pieces do not quite meet).
func AirSpeedLimitMS(operativeC float64) float64 {
	switch t := operativeC; {
	case math.IsNaN(t):
		return math.NaN()
	case t <= 23:
		return 0.2
	case t <= 25.5:
		return math.Min(0.8, 50.49-4.4047*t+0.096425*t*t)
	default:
		return 0.8
	}
}
