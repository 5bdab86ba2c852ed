// Package changeover answers: which limits does the building behave as if it
// had, how fast and how often does it change over, and on which date did its
// behaviour change?
//
// Steps:
//
//  1. moments: when a change was possible, per plant unit and zone; what the
//     clock explains is left out
//  2. choose and fit: the limits that explain the changes, once for closing and
//     once for opening
//  3. surface: the likelihood of every day for other levels of a limit; blocks
//     of days drawn again give its interval, a cut between days the date of a
//     change
//  4. rhythm: delays, spells, switches per day, weekday and month
package changeover

import "sashlog/analyze/method"

// Doc documents how observed changeover limits are inferred.
var Doc = method.Doc{
	Title:    "Observed changeover",
	Question: "Which limits does the building behave as if it had, and when did they change?",
	Formula: "P(open) = c·Π(1 − p_k), p_k = 1/(1 + exp(∓(T_k − L_k)/s_k)): every limit L_k holds the unit (or zone) closed with a logistic probability of the outdoor temperature or of one " +
		"room's temperature, something else with 1 − c; fitted by penalised maximum likelihood to the steps after an open one (closing) and after a closed one (opening); " +
		"limits are added while twice the log-likelihood rises by 25 or more; intervals by 150 resamples of blocks of three days; " +
		"date of a change: the cut between days that raises the likelihood most, tested by shuffling the days, P corrected for all behaviours tried",
	Limits: []string{
		"occupied steps with a known state on either side only; steps that a start by the clock explains are left out",
		"needs 12 changes, and 6 that the limit explains; a limit is never sharper than 0.1 K, so that perfectly separated data stay finite",
		"a limit whose interval is wider than 3 K, or that lies beyond the temperatures seen, is not determined",
		"two temperatures that always move together cannot be told apart",
		"what acts as a limit need not be a setting: a habit, a call of another system or a hidden sensor looks the same",
		"a change is told from 8 days with something to say on either side and from half a kelvin on; one date per limit",
		"the interval holds the other limits as fitted",
		"a limit that itself differs from day to day is read for openings on the far side, by about that spread",
	},
	Sources: []string{
		method.Memory("Künsch, Annals of Statistics 17 (1989): block bootstrap"),
		method.Memory("Hansen, Econometrica 68 (2000) 575: interval of a threshold, used for the date"),
		method.Memory("Firth, Biometrika 80 (1993) 27: separable data need a penalty"),
	},
	Standing: method.OurAssumption,
}
