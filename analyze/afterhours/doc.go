package afterhours

import "sashlog/analyze/method"

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Outside occupied time: plant, windows and night ventilation",
	Question: "What ran or stood open when nobody was there, and was the night's cool air used?",
	Formula: "hours by plant and window evidence outside occupied time; a night counts as left on or open when it was so from evening to morning; " +
		"energy of a unit at rated power while every zone it serves was vacant: an upper bound",
	Limits: []string{
		"nights less than half known do not count (our assumption)",
		"heating within three hours before occupied time is warm-up and named apart (our assumption)",
		"whether windows may stay open at night is a matter of rain, security and safety, not of this count",
	},
	Sources:  []string{"common practice; the times and temperatures of night ventilation are settings with their own sources"},
	Standing: method.OurAssumption,
}
