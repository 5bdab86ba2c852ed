package freshair

import "sashlog/analyze/method"

// Doc documents how freshness is judged by CO2.
var Doc = method.Doc{
	Title:    "Fresh air by CO2 (EN 16798-1:2019) and air change rates from decays",
	Question: "Was the air fresh enough in each running state, and how fast was it changed?",
	Formula: "level: C - C outdoors against 550 / 800 / 1350 ppm (categories I / II / III), over occupied time; " +
		"rate: ln(C - Co) = ln(C0 - Co) - A t by least squares after the room empties; flow: Q = A V",
	Limits: []string{
		"a level at the limit is still within it; a category is named when it holds for 95 % of known time",
		"the 95th percentile is type 7 of Hyndman & Fan (1996) over steps, which all last equally long, so that time is the weight",
		"CO2 is never averaged over running states to get a flow: its mean gives the mean of 1/Q, not 1 over the mean of Q",
		"a decay needs an empty room, one steady state of plant and openings, a start well above outdoors, at least 3 readings, R² of 0.9 and a fall by 15 %",
		"rates hold for empty rooms; the range over decays and the doubt in the outdoor level are usually wider than the interval of a fit",
		"low CO2 with few people proves little",
	},
	Sources: []string{
		method.Public("EN 16798-1:2019, CO2 above outdoors at 20 L/h per person"),
		method.Recomputed("ASHRAE Fundamentals ch. 16 eq. 16 to 22, mass balance and decay"),
		method.Public("ASTM E741-11, ISO 12569:2017 and ASTM D6245-18, tracer decay"),
		method.Recomputed("Persily & de Jonge 2017, Indoor Air 27:868, CO2 per person"),
		method.Memory("Hyndman & Fan 1996, The American Statistician 50:361, sample quantiles"),
	},
	Standing: method.Published,
}
