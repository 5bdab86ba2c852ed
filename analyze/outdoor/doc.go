package outdoor

import "sashlog/analyze/method"

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Measured weather: moist air and daily means",
	Question: "What was it like outside?",
	Formula: "dew point from temperature and relative humidity where no dew point is logged (saturation pressure over water and ice by Hyland & Wexler); " +
		"daily means weighted by covered time; running means from the 30 days before the period on",
	Limits: []string{
		"saturation pressure: over ice -100 to 0 °C, over water 0 to 200 °C; relative humidity above 0 %",
		"a day counts when at least 80 % of it is covered (our assumption)",
		"weather is as measured on the site or at a nearby station; a typical year never stands in for it",
	},
	Sources:  []string{method.Recomputed("Hyland & Wexler 1983, as printed in ASHRAE Fundamentals 2017 ch. 1 eq. 5 and 6"), "daily coverage: our assumption"},
	Standing: method.Published,
}
