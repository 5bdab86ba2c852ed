// Package analyze turns the grid into answers. Run asks the questions in this
// order, once, for all verbs:
//
//  1. outdoor: what was it like outside?
//  2. indoor: what was it like in each zone?
//  3. running: when was each zone occupied, and what was it doing?
//  4. exceedance: which comfort limits apply, and how long were they exceeded? predicted: what would people be predicted to feel?
//  5. potential: when did the weather suit open mode?
//  6. hours: where did the occupied hours go?
//  7. freshair: was the air fresh enough in each running state?
//  8. lost: which hours were missed, in which episodes, and why?
//  9. afterhours: what ran or stood open when nobody was there?
//  10. climate: what could this climate have offered, by published ways of counting?
//  11. breeze: where did the wind come from, also when it was wanted, and what did it do?
//  12. longterm: how did the season compare by published indices, and whom does the average hide?
//  13. doubt: how far could the sensors' own errors move all this?
//  14. votes: what did the occupants say, and do the models predict it?
//  15. energy: what did the plant use in hours that could have been open?
//  16. changeover: which limits does the building behave as if it had, and when did they change?
//  17. leaders: which room's thermostat closes the building?
//  18. zonemodel: how warm would each zone have become with its windows open?
//  19. answerable: what can these logs answer at all?
//  20. advice: what should be done first?
package analyze

import (
	"sashlog/analyze/advice"
	"sashlog/analyze/afterhours"
	"sashlog/analyze/answerable"
	"sashlog/analyze/breeze"
	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/climate"
	"sashlog/analyze/doubt"
	"sashlog/analyze/energy"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/leaders"
	"sashlog/analyze/longterm"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/analyze/votes"
	"sashlog/analyze/zonemodel"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is everything the analyses may look at.
type Input struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	// ZoneModels asks for a thermal model of every zone, which takes several
	// seconds for a year of a dozen zones.
	ZoneModels bool
}

// Results holds every answer; nothing in it is computed again further right.
type Results struct {
	Calendar   *calendar.Calendar
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Predicted  *predicted.Result
	Exceedance *exceedance.Result
	Potential  *potential.Result
	Climate    *climate.Result
	Breeze     *breeze.Result
	Hours      *hours.Record
	Summary    *hours.Summary
	FreshAir   *freshair.Result
	Lost       *lost.Result
	AfterHours *afterhours.Result
	Answerable []answerable.Question
	LongTerm   *longterm.Result
	Changeover *changeover.Result
	Leaders    *leaders.Result
	ZoneModel  *zonemodel.Result // nil unless asked for
	Doubt      *doubt.Result
	Votes      *votes.Result // nil without votes
	Energy     *energy.Result
	Findings   []advice.Finding
}
