package lost

import "sashlog/analyze/method"

// Doc documents how missed hours are explained; Result.Tests has the rules.
var Doc = method.Doc{
	Title:    "Causes of missed hours",
	Question: "What were the suitable hours lost to that did not run open?",
	Formula: "every test marks the missed steps of an episode it explains; the first cause that explains at least half takes it, in the order: " +
		"opening never used, no interlock, manual override, clock start, outdoor limit, slow to reopen, windows locked, thermostat, few-room changeover, indoor limit, short cycling, windows not opened; " +
		"where only several together explain half, the one that explains most beyond those before it",
	Limits: []string{
		"limits and calls are what the plant behaves as if it had: a temperature whose passing it follows within a quarter of an hour, six times or more; the interval of a limit comes from days drawn again",
		"two causes that always act together cannot be told apart; the bounds run from what only one explains to all it may explain",
		"a cause is a setting or an opening, never a person",
		"what no test explains stays unexplained",
	},
	Sources:  []string{"definitions of this project, in the trade's words; the few-room share of 30 % is common practice"},
	Standing: method.OurAssumption,
}
