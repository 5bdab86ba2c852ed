package potential

import "sashlog/analyze/method"

// Doc documents the headline rule for suitable weather.
var Doc = method.Doc{
	Title:    "Suitable hours: outdoor band with the day's adaptive upper limit",
	Question: "When could outdoor air have kept the zone within its limits?",
	Formula: "outdoor_low ≤ T_out ≤ adaptive upper limit of the day - rise; dew point, mean wind, rain (and the half hour after it) " +
		"and PM2.5 within their limits where logged; runs of suitable steps of at least 30 min",
	Limits: []string{
		"what is not logged is not tested, which is said, and never taken as calm, dry or clean",
		"a failing test outranks an unknown one; otherwise an unknown test makes the step unknown",
		"below a running mean of 10 °C the heating-season ceiling stands in for the adaptive limit, above 30 °C the line is frozen: our extension",
	},
	Sources: []string{
		method.Memory("Chen, Tong & Malkawi 2017, Building and Environment 122:386, lower limit 12.8 °C and dew point 17 °C"),
		method.Recomputed("EN 16798-1:2019 Annex B, upper limit"),
	},
	Standing: method.FromMemory,
}
