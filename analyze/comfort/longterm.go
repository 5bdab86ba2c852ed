package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// LongTermDoc documents the weights of ISO 7730 Annex H.
var LongTermDoc = method.Doc{
	Title:    "Long-term indices of comfort (ISO 7730 Annex H, EN 15251 Annex F)",
	Question: "How long and how badly was a zone outside comfort over a period?",
	Formula: "A: hours outside the limits; B: Σ wf·h, wf = 1 + |t_op - t_lim| / |t_opt - t_lim|; " +
		"C: Σ wf·h, wf = PPD / PPD_lim; D: mean PPD; E: Σ PPD·h; degree-hours: Σ |t_op - t_lim|·h",
	Limits:   []string{"warm and cool sides are summed apart", "occupied time only"},
	Sources:  []string{method.Memory("ISO 7730:2005 Annex H"), method.Memory("EN 15251:2007 Annex F")},
	Standing: method.FromMemory,
}

// WeightByTemperature returns the weight of ISO 7730 method B on one side: 1
// at the limit, 1 + |t_op - t_lim| / |t_opt - t_lim| beyond it, 0 inside. The
// side is the one the limit lies on of the optimum; NaN when both coincide.
func WeightByTemperature(operativeC, limitC, optimumC float64) float64 {
	span := limitC - optimumC
	if span == 0 {
		return math.NaN()
	}
	beyond := (operativeC - limitC) / span
	if beyond < 0 {
		return 0
	}
	return 1 + beyond
}

// WeightByPPD returns the weight of ISO 7730 method C: PPD over the PPD at the
// limit where |PMV| exceeds the limit, 0 inside.
func WeightByPPD(pmv, pmvLimit float64) float64 {
	if math.Abs(pmv) <= pmvLimit {
		return 0
	}
	return PPD(pmv) / PPD(pmvLimit)
}

// DegreesOver returns by how much an operative temperature exceeds a limit, 0
// at or below it; times hours it gives degree-hours.
func DegreesOver(operativeC, limitC float64) float64 {
	return math.Max(0, operativeC-limitC)
}

// DegreesUnder returns by how much an operative temperature falls short of a
// limit, 0 at or above it.
func DegreesUnder(operativeC, limitC float64) float64 {
	return math.Max(0, limitC-operativeC)
}
