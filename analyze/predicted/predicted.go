// Package predicted answers: what would people be predicted to feel, by the
// models of the body's heat balance, in each occupied step? Predicted mean
// vote as ISO 7730 gives it and with ASHRAE 55's cooling effect of moving air,
// standard effective temperature, and draught where air speed is logged.
package predicted

import (
	"sashlog/analyze/comfort"
	"sashlog/analyze/indoor"
	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the predictions rest on.
type Input struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	Outdoor  *outdoor.Outdoor
	Indoor   []indoor.Zone
	Running  *running.Result
}

// Result is the answer for all zones.
type Result struct {
	Zones []Zone
	// SETEdition names the generation of the two-node model.
	SETEdition string
}

// Zone is one zone's predictions. The slices have one value per step of the
// grid and are NaN where the zone is not occupied or something is not known.
// Outside marks the votes beyond the range ISO 7730 vouches for.
type Zone struct {
	*Room
	Vote     []float32 // ISO 7730
	Elevated []float32 // with the cooling effect of moving air, ASHRAE 55
	Outside  []bool
	Summary  Summary
}

// Summary is a zone's occupied time of the period.
type Summary struct {
	// KnownH have a vote, OutsideH lie beyond ISO 7730's range, UnknownH lack
	// a temperature. OutsideOf counts hours by the quantity beyond its range;
	// an hour may count for several.
	KnownH, OutsideH, UnknownH float64
	OutsideOf                  map[string]float64
	// What was taken for granted, of KnownH and OutsideH: humidity as 50 %,
	// air speed as still, radiant as air temperature.
	AssumedHumidityH, AssumedSpeedH, AssumedRadiantH float64
	// MovingH are hours with more air movement than assumed for still air,
	// logged or from a fan that was on; LimitedH those of them in which more
	// than ASHRAE 55 allows without control by the people was not counted;
	// NoEffectH those in which moving air does not cool.
	MovingH, LimitedH, NoEffectH float64
	MeanCoolingK                 float64 // over MovingH, NaN without
	MeanVote, MeanElevated       float64 // over KnownH, NaN without
	// Standard effective temperature over KnownH and OutsideH: mean, 5th and
	// 95th percentile; NaN without.
	SETMeanC, SET5C, SET95C float64
	Draught                 Draught
}

// Draught says how often air movement would bother people, by ISO 7730, where
// air speed is logged.
type Draught struct {
	// JudgedH are within the range of the method; OutsideH are not (too warm,
	// too cold or 0.5 m/s and faster); UnknownH lack a reading. All 0 where air
	// speed is not logged.
	JudgedH, OutsideH, UnknownH float64
	MeanPct                     float64 // NaN without
	// AboveH: hours above 10, 20 and 30 % (categories A, B and C).
	AboveH [3]float64
}

// DraughtLimitsPct are the categories' limits. ISO 7730:2005 Table A.1.
var DraughtLimitsPct = [3]float64{10, 20, 30}

// options are the generation and posture SET is worked out for: seated, since
// zones are rooms to sit in (our assumption).
var options = comfort.SETOptions{Form: comfort.SETFormB, Posture: comfort.Sitting}

const edition = "ASHRAE 55-2023, seated"

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Predicted votes, SET and draught of every occupied step",
	Question: "What would people be predicted to feel where plant conditions the air, and does moving air help or bother them?",
	Formula: "PMV of each step from operative temperature (air and radiant where a globe is logged), humidity, relative air speed v + 0.3 (M - 1) and clothing; " +
		"air speed: as logged, else the fan's while it is logged to be on, else still; above 0.1 m/s also PMV at the temperature less the cooling effect; " +
		"SET and cooling effect from a table between exact values",
	Limits: []string{
		"votes beyond the range of ISO 7730 enter no mean; an hour counts as too warm or too cool also there (a room too hot for the method is not comfortable), never as comfortable",
		"humidity that is not known counts as 50 %, radiant as air temperature without a globe; the hours are given",
		"where people have no fan of their own, air speed counts up to the limit of ASHRAE 55 without control (0.2 m/s up to 23 °C, 0.8 m/s above 25.5 °C)",
		"SET form B (ASHRAE 55-2023) for seated people; tabulated within ±0.12 K (±0.25 K with radiant up to 2 K from air temperature), votes with moving air within ±0.02 (±0.05)",
		"draught: air at 20 to 26 °C and slower than 0.5 m/s, where air speed is logged; turbulence 40 % (from memory); a wanted breeze is no draught",
	},
	Sources: []string{
		method.Recomputed("ISO 7730:2005 eq. 1 to 6"), method.Recomputed("ASHRAE 55-2023 Appendix D"),
		method.Memory("ASHRAE 55-2017 5.3.3, limit of air speed"), method.Memory("ISO 7730:2005 Table A.1, draught"),
	},
	Standing: method.Published,
}
