// Package breeze answers: where did the wind come from, also when it was
// wanted, and what did it do in open mode?
//
// Steps:
//
//  1. speed: the wind at the height of the openings, from that of the mast
//  2. roses: all hours, occupied suited hours, hours when a breeze is wanted
//  3. facings: which direction's openings catch the wanted wind
//  4. drive: air change measured in open mode against wind speed and sector, with intervals
package breeze

import "sashlog/analyze/method"

// RoseDoc documents [Rose].
var RoseDoc = method.Doc{
	Title:    "Wind roses for all hours, occupied suited hours, and hours when a breeze is wanted",
	Question: "Where did the wind come from, and how often when it was wanted?",
	Formula: "16 sectors of 22.5° centred on north (N from 348.75° to below 11.25°), the direction the wind comes from; calm below the calm limit counts in the total " +
		"and has no sector; speed classes begin at the lower bounds of the Beaufort scale; mean direction atan2(Σ sin, Σ cos), steadiness R = resultant / n",
	Limits: []string{
		"steps with speed but no direction are counted apart; without a logged wind nothing is said",
		"shares are of the known hours: sectors and calm together make 100 %",
		"a step's direction is the mean of its readings; equal and opposite winds have none",
		"the mean direction weighs every hour alike, whatever its speed, and calm not at all",
	},
	Sources: []string{
		method.Public("ASHRAE Fundamentals ch. 24, sectors"),
		method.Memory("WMO Beaufort scale, lower bounds in m/s"),
		"a breeze is wanted above about 24 °C outdoors: common practice",
	},
	Standing: method.FromMemory,
}

// HeightDoc documents the correction of the wind for height and terrain.
var HeightDoc = method.Doc{
	Title:    "Wind at the openings, from height and terrain (ASHRAE Fundamentals ch. 24; EN 16798-7)",
	Question: "How strong is the wind at the openings when the mast measures this much?",
	Formula: "U = U_met (δ_met/H_met)^a_met (H/δ)^a, a and δ: city 0.33, 460 m; suburb 0.22, 370 m; country 0.14, 270 m; water 0.10, 210 m; " +
		"beside it the ratio of C_R = K_R ln(z/z_0), z at least z_min: water 0.17, 0.01, 2; country 0.19, 0.05, 4; suburb 0.22, 0.3, 8; city 0.24, 1.0, 16",
	Limits: []string{
		"less reliable below the mean height of the obstacles about",
		"one factor for the whole site: sheltering by single buildings is not in it",
		"the two methods differ; the first is used and the other shown",
	},
	Sources: []string{
		method.Recomputed("ASHRAE Fundamentals ch. 24 eq. 4 and Table 1"),
		method.Public("EN 16798-7, roughness factor"),
	},
	Standing: method.Published,
}

// FacingDoc documents which openings catch the wind.
var FacingDoc = method.Doc{
	Title:    "Openings in the wind (EN 16798-7 Table B.7)",
	Question: "Which façade's openings catch the wind when it is wanted?",
	Formula:  "an opening is windward when the wind comes from within 60° of the direction it faces, else leeward; calm apart",
	Limits: []string{
		"directions as the site file gives them; zones without any are left out and counted",
		"neighbouring buildings, reveals and screens are not in it",
	},
	Sources:  []string{method.Public("EN 16798-7 Table B.7, windward up to 60° from the normal")},
	Standing: method.Published,
}

// DriveDoc documents the measured air change against the wind.
var DriveDoc = method.Doc{
	Title:    "Measured air change in open mode against the wind",
	Question: "Does the wind drive the air change of open rooms?",
	Formula: "each air change rate measured in open mode, from a decay of CO2 or from a day with the people counted, is held against the mean wind at the openings and the mean direction over the same open steps; " +
		"rates of several zones and ways as multiples of the median of the zone's rates by the same way; median by speed class, by side (calm, windward, leeward) and by 8 sectors, with its 95 % interval by order statistics of their logarithms " +
		"(Student's t below 6 rates); slope by least squares with its 95 % interval (Student's t), rates of one day counting as one",
	Limits: []string{
		"decays happen when rooms empty, mostly in the evening, when wind is often weaker than by day; counted days hold for the whole of the open time",
		"temperature difference and opening area vary too and are not taken out",
		"groups of fewer rates than the site's minimum, and those whose interval spans more than a factor of 10, are counted and not judged; a slope needs 6 days",
		"in 24 invented buildings of known flows with people counted, 5,579 days gave 4.5 % of a zone's usual rate per m/s at the mast where 5.5 % was true",
		"wind with a steadiness below 0.7 over the time of a rate has no direction",
		"sectors join zones that face different ways where more than one was measured; windward and leeward do not",
	},
	Sources:  []string{"rates: see the method of the air change rate; grouping of this project"},
	Standing: method.OurAssumption,
}

// Docs lists the documentation of the package's methods.
func Docs() []method.Doc { return []method.Doc{RoseDoc, HeightDoc, FacingDoc, DriveDoc} }
