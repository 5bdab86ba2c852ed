package freshair

import "sashlog/analyze/method"

// Doc documents how freshness is judged by CO2.
var Doc = method.Doc{
	Title:    "Fresh air by CO2 (EN 16798-1:2019) and air change rates from decays",
	Question: "Was the air fresh enough in each running state, and how fast was it changed?",
	Formula: "level: C - C outdoors against 550 / 800 / 1350 ppm (categories I / II / III), over occupied time; " +
		"rate: ln(C - Co) = ln(C0 - Co) - A t by least squares after the room empties, " +
		"or C(i+1) = Css + (C(i) - Css) exp(-A dt), Css = Co + n G/Q, over whole days with people counted, one A per running state; flow: Q = A V; " +
		"asked for: n qp + area qB (EN 16798-1 method 1), (Rp n + Ra area)/Ez (ASHRAE 62.1); rebreathed share: (C - Co)/0.038",
	Limits: []string{
		"a level at the limit is still within it; a category is named when it holds for 95 % of known time",
		"the 95th percentile is type 7 of Hyndman & Fan (1996) over steps, which all last equally long, so that time is the weight",
		"CO2 is never averaged over running states to get a flow: its mean gives the mean of 1/Q, not 1 over the mean of Q",
		"a decay needs an empty room, one steady state of plant and openings, a start well above outdoors, at least 3 readings, R² of 0.9 and a fall by 15 %",
		"a balance needs people counted, 6 h without unknown states, R² of 0.8 and an hour in the state; up to 120 days are fitted, spread over the period; with usual people instead of a counter it is an upper value and stands for no state",
		"the interval joins the spread of events (order statistics, Student's t below 6 events), residuals that depend on each other (n (1-r)/(1+r)), and what all events share: outdoor level, sensor offset, CO2 per person; a state whose interval spans more than a factor of 10, or with too few events, is not measurable",
		"air exchanged with neighbouring rooms counts as outdoor air: a decay finds outdoor air plus (1 - s) of that exchange, s the neighbours' level above outdoors as a share of the room's own; s is stated, and what each 10 L/s of exchange adds; rates below 0.5 per hour, and those of zones without openings while no plant runs, are upper values",
		"in an invented building of known flows (24 buildings of 60 days, sensors of 8 ppm offset and 6 ppm noise, with and without counters) the interval held the truth for 99 % of 832 rates stated, half of them within a factor of 1.13; of 609 rates marked as upper values the truth lay below the upper end for more than 99 %; where airing varies by the hour a balance finds less than the mean flow, 0.83 of it in open mode",
		"in a real office with a known valve 10 decays gave 0.69 per hour (0.44 to 1.41) for 0.64 by the valve, leakage and doors not counted",
		"decays hold for empty rooms, often in the evening; counted days for occupied time",
		"a sensor's offset is its lowest level of each week against outdoors, stated; it is taken off only where the settings ask for it and where sensor and outdoor level explain it",
		"the rebreathed share compares times and rooms; it says nothing about infection",
		"low CO2 with few people proves little",
	},
	Sources: []string{
		method.Public("EN 16798-1:2019, CO2 above outdoors at 20 L/h per person"),
		method.Recomputed("ASHRAE Fundamentals ch. 16 eq. 16 to 22, mass balance and decay"),
		method.Public("ASTM E741-11, ISO 12569:2017 and ASTM D6245-18, tracer decay"),
		method.Recomputed("Persily & de Jonge 2017, Indoor Air 27:868, CO2 per person"),
		method.Recomputed("Batterman 2017, Int. J. Environ. Res. Public Health 14:145, transient balance"),
		method.Recomputed("EN 16798-1:2019, outdoor air by method 1 and 2"),
		method.Recomputed("ASHRAE 62.1-2016 to 2022 Table 6-1, part of its rows"),
		method.Memory("Rudnick & Milton 2003, Indoor Air 13:237, rebreathed share and CO2 of breath"),
		method.Memory("Marquardt 1963, SIAM J. Appl. Math. 11:431, damped least squares"),
		method.Memory("Conover, Practical Nonparametric Statistics, interval of a median by order statistics"),
		method.Memory("Hyndman & Fan 1996, The American Statistician 50:361, sample quantiles"),
	},
	Standing: method.Published,
}
