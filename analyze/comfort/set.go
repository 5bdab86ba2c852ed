package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// SETDoc documents [SET].
var SETDoc = method.Doc{
	Title:    "Standard effective temperature (Gagge's two-node model)",
	Question: "Which temperature in still standard air would strain the body as much?",
	Formula: "60 one-minute steps of a skin and a core node (sweating, shivering, blood flow), then the temperature " +
		"of a standard environment (50 % humidity, standard clothing, still air) with the same loss from the skin",
	Limits: []string{
		"two generations differ: form A (ASHRAE 55-2010 to 2020) and form B (2023, activity raises convection in both " +
			"environments); at 2 met and more they differ by 4 to 5.6 K",
		"not smooth once sweating reaches the greatest skin wettedness: hot and heavily dressed or active people",
		"form B uses posture; dilation constant 120 in form A, 200 in form B",
	},
	Sources: []string{
		method.Recomputed("ASHRAE 55-2023 Appendix D and Table D-1 (form B)"),
		method.Recomputed("ASHRAE 55-2017 printed table (form A found by fitting variants to it)"),
	},
	Standing: method.Published,
}

// SETForm is a generation of the two-node model.
type SETForm int

// Generations.
const (
	SETFormA SETForm = iota // ASHRAE 55-2010 to 2020
	SETFormB                // ASHRAE 55-2023
)

// Posture decides how much of the body radiates in form B.
type Posture int

// Postures.
const (
	Standing Posture = iota
	Sitting
)

// SETOptions chooses the form. The zero value is form A at sea level.
type SETOptions struct {
	Form    SETForm
	Posture Posture // form B only
	// PressurePa is the air's pressure; 0 means 101 325 Pa.
	PressurePa float64
	// ForCoolingEffect leaves the activity term out of form B's convection,
	// as ASHRAE 55-2023 demands when it is inside the cooling effect.
	ForCoolingEffect bool
}

// SET returns the standard effective temperature in °C. Air speeds below
// 0.1 m/s count as 0.1. A few microseconds.
//
// ASHRAE 55-2023 Appendix D; both generations, see [SETDoc].
func SET(c Conditions, o SETOptions) float64 {
	if !validConditions(c) {
		return math.NaN()
	}
	n := newTwoNode(c, o)
	for range 60 {
		n.minute()
	}
	return n.standardTempC()
}

func validConditions(c Conditions) bool {
	for _, x := range [...]float64{c.AirC, c.RadiantC, c.AirSpeedMS, c.RHPct, c.Met, c.Clo, c.WorkMet} {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return false
		}
	}
	return c.Met > 0 && c.Clo >= 0 && c.AirSpeedMS >= 0
}

// satTorr is the saturation pressure of the two-node model in torr.
func satTorr(tempC float64) float64 {
	return math.Exp(18.6686 - 4030.183/(tempC+235))
}
