// Package zonemodel answers: how warm would each zone have become with its
// windows open? It fits a small thermal model to every zone's own logs and says
// how far it may be trusted.
//
// Steps, for every zone:
//
//  1. drives: outdoor temperature, sun, people, wind and openings on steps of a
//     quarter of an hour; each step is free (plant off), held or blind
//  2. form and fit: one or two time constants, ways the opening may act; maximum
//     likelihood by a Kalman filter on part of the days
//  3. forecast: errors 1, 4 and 8 hours ahead on days held out, against persistence
//  4. refusal: with a reason, where the model would not help
//  5. missed: missed steps simulated with the windows open, as chances of comfort
package zonemodel

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the models are fitted to.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Calendar   *calendar.Calendar
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Exceedance *exceedance.Result
	Record     *hours.Record
	// Seed makes the draws; the same seed gives the same figures.
	Seed uint64
}

// Estimate is a figure with its 90 % interval.
type Estimate struct{ Value, Low, High float64 }

// Value is one parameter of a fitted model.
type Value struct {
	Parameter Parameter
	Estimate
	// Told is false where the interval rests on our assumption about usual
	// values more than on the data.
	Told bool
}

// Horizons are how far ahead, in hours, models are tried.
var Horizons = [3]float64{1, 4, 8}

// Error is how well temperatures of open mode on days held out were foreseen.
type Error struct {
	HorizonH float64
	N, Days  int // forecasts and the days they begin on
	// RMSEK and BiasK (foreseen less measured) of the model; PersistenceRMSEK
	// of "it stays as it is"; NaN without forecasts.
	RMSEK, BiasK, PersistenceRMSEK float64
	// SpreadK is the standard deviation the model itself gives the errors.
	SpreadK float64
}

// Zone is one zone's model.
type Zone struct {
	ID string
	// Refused is why no model is offered, empty where one is.
	Refused string
	// Constants is 1 or 2, 0 without a fit. FastH and SlowH are the time
	// constants with windows open as usual (slow only with one).
	Constants    int
	FastH, SlowH float64
	Parameters   []Value
	// Opening says in words what the opening's effect depends on; Inputs how
	// sun, people and wind came about.
	Opening, Inputs string
	// OpenH and OpenDays are what there was to learn from: free steps with the
	// windows open; UsedDays those fitted to, HeldOutDays those tried on.
	OpenH                           float64
	OpenDays, UsedDays, HeldOutDays int
	// Errors, by Horizons.
	Errors [3]Error
	// Condition is the condition number of the parameters' correlations.
	Condition float64
	// Residuals of one step ahead on days held out.
	Residuals Residuals
	Missed    Missed
}

// Residuals says whether what one step leaves unexplained is white.
type Residuals struct {
	N int
	// Lag1 is the correlation of neighbours; LjungBox and P its test over Lags.
	Lag1, LjungBox, P float64
	Lags              int
	// SDK is the standard deviation of the residuals.
	SDK float64
}

// Missed is what the model expects of a zone's missed hours.
type Missed struct {
	// PlainH is the count as it stands in the record. PredictedH of it could
	// be simulated; OutsideH lies beyond the conditions seen with open windows,
	// UnknownH lacks an input.
	PlainH, PredictedH, OutsideH, UnknownH float64
	// ComfortableH are the hours expected inside the comfort limits of open
	// mode had the windows been open, of PredictedH. Low and High are a 90 %
	// interval; High has OutsideH and UnknownH added, as they may be either.
	ComfortableH Estimate
	// WarmH and CoolH are expected outside, of PredictedH.
	WarmH, CoolH float64
	// OpenShare is how far open the windows are taken to be: the zone's usual.
	OpenShare float64
}

// Result is the answer for all zones (same index as Site.Zones).
type Result struct {
	Zones           []Zone
	LimitRMSEK      float64 // setting in force
	LeastOpenDays   int
	StepMin         float64
	SunSource       string
	Members, Offers int // ensemble members; zones with a model
}
