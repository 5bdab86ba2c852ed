package running

import "sashlog/analyze/method"

// Doc documents how occupied time and running states are settled.
var Doc = method.Doc{
	Title:    "Occupied time and running states",
	Question: "When was each zone occupied, and was it running open, mechanical, both, shut, or is it unknown?",
	Formula: "open = a window open and the plant off; mechanical = windows shut, plant on; both; shut = windows shut, plant off; " +
		"a contact counts as open in a step when it was open for at least half of the covered time",
	Limits: []string{
		"zone air flow or damper, coil valves and local units outrank the plant unit's status; of several the strongest counts",
		"ventilation beside an open window is open mode only where windows and plant are meant to run together",
		"heating with a window open is never open mode",
		"where only some openings have contacts, \"all shut\" is unknown",
		"a step with less than half of its time covered by readings is unknown",
		"a state logged on change holds until the next record, 25 h at most unless the points table says otherwise: within that time a silent logger looks like a state that lasts, which no bound covers",
	},
	Sources:  []string{"definitions of this project, in the trade's words"},
	Standing: method.OurAssumption,
}
