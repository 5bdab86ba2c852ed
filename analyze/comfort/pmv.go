package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// PMVDoc documents [PMV] and [PPD].
var PMVDoc = method.Doc{
	Title:    "Predicted mean vote and predicted percentage dissatisfied (ISO 7730)",
	Question: "How warm or cool would a large group of people vote, and how many would be dissatisfied?",
	Formula: "PMV = (0.303 exp(-0.036 M) + 0.028) · (heat produced less heat lost to the room at neutral skin); " +
		"clothing surface temperature solved to 1e-9 K, 0 °C taken as 273 K as printed; " +
		"PPD = 100 - 95 exp(-0.03353 PMV⁴ - 0.2179 PMV²)",
	Limits: []string{
		"-2 < PMV < 2", "metabolic rate 0.8 to 4 met", "clothing 0 to 2 clo", "air temperature 10 to 30 °C",
		"mean radiant temperature 10 to 40 °C", "relative air speed 0 to 1 m/s", "vapour pressure 0 to 2700 Pa",
		"found too cold by people in naturally ventilated buildings: use adaptive limits there",
		"row 7 of the standard's Table D.1 is misprinted (0.50; the equations give 0.36)",
	},
	Sources: []string{
		method.Recomputed("ISO 7730:2005 eq. 1 to 5, Annex D"),
		method.Public("ASHRAE 55-2023 Appendix B"),
		method.Memory("ISO 7730:2005 4.1, ranges"),
	},
	Standing: method.Published,
}

const (
	wattsPerMet = 58.15 // W/m² per met
	m2KPerClo   = 0.155 // m²K/W per clo
)

// Conditions are the six things that decide thermal sensation.
type Conditions struct {
	AirC       float64 // air temperature
	RadiantC   float64 // mean radiant temperature
	AirSpeedMS float64 // relative to the person
	RHPct      float64 // clamped to [0, 100]
	Met        float64
	Clo        float64
	WorkMet    float64 // external work, nearly always 0
}

// PMV returns the predicted mean vote: -3 cold to +3 hot. It computes beyond
// the range of the standard; see [PMVOutOfRange]. Air speed and clothing are
// taken as given: ISO tables use them so, and [RelativeAirSpeedMS] and
// [DynamicClo] give the inputs of ASHRAE 55.
//
// ISO 7730:2005 eq. 1 to 4. About 100 ns.
func PMV(c Conditions) float64 {
	m := c.Met * wattsPerMet
	w := c.WorkMet * wattsPerMet
	icl := c.Clo * m2KPerClo
	if !(m > 0 && icl >= 0 && c.AirSpeedMS >= 0) {
		return math.NaN()
	}
	net := m - w
	fcl := 1.05 + 0.645*icl
	if icl <= 0.078 {
		fcl = 1 + 1.29*icl
	}
	pa := vapourPa(c.AirC, c.RHPct)
	forced := 12.1 * math.Sqrt(c.AirSpeedMS)
	tcl, convection, radiation := clothingSurface(35.7-0.028*net, icl, fcl, forced, c.AirC, c.RadiantC)
	if math.IsNaN(tcl) {
		return math.NaN()
	}
	load := net -
		3.05e-3*(5733-6.99*net-pa) -
		0.42*math.Max(0, net-wattsPerMet) -
		1.7e-5*m*(5867-pa) -
		0.0014*m*(34-c.AirC) -
		radiation - convection
	return (0.303*math.Exp(-0.036*m) + 0.028) * load
}

// vapourPa is the vapour pressure of ISO 7730's code (Antoine's equation).
func vapourPa(airC, rhPct float64) float64 {
	rh := math.Max(0, math.Min(100, rhPct))
	return rh * 10 * math.Exp(16.6536-4030.183/(airC+235))
}

// clothingSurface solves for the surface temperature of the clothing and the
// heat it sheds by convection and radiation in W/m². The left side less the
// right side rises by at least 1 per kelvin, so Newton's steps inside a
// shrinking bracket always arrive.
func clothingSurface(skin, icl, fcl, forced, airC, radiantC float64) (tcl, convection, radiation float64) {
	// The standard takes 0 °C as 273 K here; 273.15 would shift PMV.
	tr := radiantC + 273
	tr4 := tr * tr * tr * tr
	low := math.Min(skin, math.Min(airC, radiantC))
	high := math.Max(skin, math.Max(airC, radiantC))
	tcl = (skin + airC) / 2
	for range 60 {
		d := tcl - airC
		hc := 2.38 * math.Sqrt(math.Sqrt(math.Abs(d)))
		slopeC := 1.25 * hc // of hc·d with respect to tcl
		if !(hc > forced) {
			hc, slopeC = forced, forced
		}
		k := tcl + 273
		k3 := k * k * k
		radiation = 3.96e-8 * fcl * (k3*k - tr4)
		convection = fcl * hc * d
		excess := tcl - skin + icl*(radiation+convection)
		if math.IsNaN(excess) {
			return math.NaN(), math.NaN(), math.NaN()
		}
		if excess > 0 {
			high = tcl
		} else {
			low = tcl
		}
		step := excess / (1 + icl*fcl*(4*3.96e-8*k3+slopeC))
		if math.Abs(step) < 1e-9 {
			break
		}
		next := tcl - step
		if !(next >= low && next <= high) {
			next = (low + high) / 2
		}
		tcl = next
	}
	return tcl, convection, radiation
}

// PPD returns the predicted percentage dissatisfied (5 to 100 %) of a predicted
// mean vote. ISO 7730:2005 eq. 5.
func PPD(pmv float64) float64 {
	v := pmv * pmv
	return 100 - 95*math.Exp(-v*(0.03353*v+0.2179))
}

// pmvRange is the range of ISO 7730:2005 4.1 (from memory).
func pmvRange(c Conditions, pmv float64, outside func(name string)) {
	check := func(name string, x, low, high float64) {
		if !(x >= low && x <= high) {
			outside(name)
		}
	}
	check("air temperature", c.AirC, 10, 30)
	check("mean radiant temperature", c.RadiantC, 10, 40)
	check("air speed", c.AirSpeedMS, 0, 1)
	check("vapour pressure", vapourPa(c.AirC, c.RHPct), 0, 2700)
	check("metabolic rate", c.Met, 0.8, 4)
	check("clothing", c.Clo, 0, 2)
	if !(pmv > -2 && pmv < 2) {
		outside("predicted mean vote")
	}
}

// PMVOutOfRange names the conditions for which ISO 7730 does not vouch, in
// order; nil when all are inside. An unknown condition counts as outside.
func PMVOutOfRange(c Conditions, pmv float64) []string {
	var out []string
	pmvRange(c, pmv, func(name string) { out = append(out, name) })
	return out
}

// PMVInRange reports whether ISO 7730 vouches for the conditions and the vote;
// false where one is unknown.
func PMVInRange(c Conditions, pmv float64) bool {
	inside := true
	pmvRange(c, pmv, func(string) { inside = false })
	return inside
}

// RelativeAirSpeedMS adds the air speed that activity itself makes,
// 0.3 (M - 1) m/s above 1 met. ASHRAE 55-2023 Appendix B (the amount from
// memory).
func RelativeAirSpeedMS(airSpeedMS, met float64) float64 {
	return airSpeedMS + math.Max(0, 0.3*(met-1))
}

// DynamicClo lowers clothing insulation for movement: clo (0.6 + 0.4/M) from
// 1.2 met, unchanged below. ASHRAE 55-2023 Appendix B.
func DynamicClo(clo, met float64) float64 {
	if met < 1.2 {
		return clo
	}
	return clo * (0.6 + 0.4/met)
}
