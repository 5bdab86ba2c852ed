// Package leaders answers: which room's thermostat closes the building, what do
// the others lose to it, and what would have happened without?
//
// Steps:
//
//  1. starts: every start of a unit to cool or ventilate, with what led it: a
//     room whose limit was passed just before, outdoors, the clock, or unknown
//  2. study: how much warmer the rooms were than at matched moments without a
//     start
//  3. losses: missed hours of the other rooms while such runs lasted
//  4. instead: the same runs with the thermostat ignored, moved, or two calls
//     needed
package leaders

import "sashlog/analyze/method"

// Doc documents how the leading rooms are found.
var Doc = method.Doc{
	Title:    "Who closes the building",
	Question: "Which thermostat starts the plant that closes the other rooms, and what do they lose to it?",
	Formula: "a start is led by the room that passed its observed limit (see observed changeover, else the call of few-room changeovers) in the half hour before, of several the one furthest beyond; " +
		"event study: its temperature less the mean of the same room at matched moments without a start (within 30 min of the same time of day, outdoors within 1.5 K, on other days), " +
		"interval by resampled days; lost hours: missed hours of the other rooms while the run lasted and the leading room went on calling or nothing else asked for it; at least those with no other reason, at most all; " +
		"instead: the same runs, kept on only by what else asked for them",
	Limits: []string{
		"starts to heat, starts by the clock and starts while outdoors is beyond a limit have no leading room",
		"the temperatures are those logged: without cooling, rooms would have been warmer, so that freed hours are at most those given",
		"the leading room's own warm hours without cooling are bracketed: it stays as warm as at the start, or goes on warming as before such starts, by 2 K at most",
		"people-hours use the usual number of people of a room",
	},
	Sources:  []string{"definitions of this project; the event study is common practice in statistics"},
	Standing: method.OurAssumption,
}
