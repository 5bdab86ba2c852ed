package zonemodel

import "sashlog/analyze/method"

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Thermal model of each zone in open mode",
	Question: "Would a zone have been comfortable in its missed hours, had its windows been open?",
	Formula: "dTi/dt = a·(Te − Ti) + U·(To − Ti) + s·S + p·P + g;  dTe/dt = b·(Ti − Te) + m·S;  U = shut + share open × (o + w·wind). " +
		"Steps of 15 min; maximum likelihood by a Kalman filter on free-running steps of at most 30 days, with wide priors; two constants and wind by likelihood ratio at 5 %; " +
		"errors 1, 4 and 8 h ahead on days held out. Missed runs: 60 trajectories, parameters and noise drawn, noise scaled to the errors held out; chance of comfort = share of them within the day's adaptive limits",
	Limits: []string{
		"no model where the error 4 h ahead on days held out exceeds 1 K or that of persistence, where parameters cannot be told apart, or with fewer than 20 days of open mode",
		"missed runs start from the temperatures as they were, cooled where the plant had cooled",
		"outdoor temperatures never seen with the windows open are counted apart, not predicted",
		"a residual that is not white makes intervals of parameters too narrow within a day; they are made from days' scores instead",
	},
	Sources: []string{
		method.Memory("Bacher & Madsen 2011, Energy Build. 43:1511 (forward selection, white residuals)"),
		method.Memory("Kristensen, Madsen & Jørgensen 2004, Automatica 40:225 (likelihood by the filter)"),
		method.Memory("Ljung & Box 1978, Biometrika 65:297"),
	},
	Standing: method.OurAssumption,
}
