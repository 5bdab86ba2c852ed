package hours

import "sashlog/analyze/method"

// Doc documents the hourly record.
var Doc = method.Doc{
	Title:    "The hourly record: where the occupied hours went",
	Question: "Of the occupied hours, which ran open, which could have and did not, and which could not?",
	Formula: "every occupied step lands in one class: achieved (suited and open), missed (suited, and plant cooled, ventilated or ran, or " +
		"windows and plant ran together, or shut while warm or stale), not needed (suited, nothing wanted), ill-timed (open in unsuited " +
		"weather for more than a short airing), closed unsuited, no opening, unjudged; achieved share = achieved / (achieved + missed)",
	Limits: []string{
		"counts are whole seconds, so that the classes sum exactly to the occupied time",
		"bounds: the unjudged hours going wholly one way or the other",
		"not needed is said only when every quantity the zone logs is known; otherwise the step is unjudged",
		"opening in too warm weather is ill-timed only while outdoors is warmer than indoors",
		"building figures are means over zones weighted by people, else floor area, else equally",
	},
	Sources:  []string{"definitions of this project"},
	Standing: method.OurAssumption,
}
