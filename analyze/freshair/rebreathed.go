package freshair

import "math"

// ExhaledPPM is the CO2 that breathing adds to the air breathed out, 3.8 %
// (Rudnick & Milton 2003, Indoor Air 13:237; from memory, 4.0 % is used too).
const ExhaledPPM = 38000

// RebreathedFraction is the share of the air breathed in that somebody had
// breathed out before: (C - Co)/Ca after Rudnick & Milton 2003; 0 where the
// level is below outdoors.
func RebreathedFraction(ppm, outdoorPPM float64) float64 {
	return math.Max(0, ppm-outdoorPPM) / ExhaledPPM
}

// rebreathedCaution goes with every figure of rebreathed air.
const rebreathedCaution = "The share of air breathed before compares times and rooms with each other. It says nothing about whether anyone catches " +
	"anything: that depends on who is there, filters, sunlight and much else. Ask whoever is competent for health, and follow local rules."
