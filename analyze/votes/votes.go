// Package votes answers: what did the occupants say, and does it agree with
// what the comfort models predict, in each running state?
package votes

import (
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what votes are held against.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Predicted  *predicted.Result
	Exceedance *exceedance.Result
}

// Least numbers of votes. Our assumption: fewer give no idea of the spread.
const (
	LeastForShares = 10
	LeastForFits   = 30
)

// Result is the answer; nil when the site has no votes.
type Result struct {
	Given int // rows of the table
	// What could not be used, and why.
	OutsidePeriod, NoTemperature, StateUnknown int
	// All are the votes with a known temperature; States those of a running
	// state among them.
	All    Group
	States [running.NumStates]Group
	// Complaints count by kind, in the period.
	Complaints []ComplaintCount
}

// Group is what a group of votes says.
type Group struct {
	Votes int
	// Sensation: mean vote and mean predicted vote (PMV) over the votes for
	// which both exist, and their mean difference with its 95 % interval.
	Sensations                       int
	MeanVote, MeanPMV                float64
	Difference, DiffLow, DiffHigh    float64
	WithinOne                        Share // of sensations from -1 to 1
	Neutral                          Fit
	Griffiths                        Neutral
	Acceptable                       Share
	PreferCooler, NoChange, PreferUp int
	MeanTempC                        float64
	// TooFew says in words what is missing for shares and means; empty when
	// there are enough votes.
	TooFew string
}

// Share is a share with its exact (Clopper-Pearson) 95 % interval.
type Share struct {
	Yes, Of          int
	Value, Low, High float64
}

// Fit is the regression of sensation on operative temperature and the
// temperature of a neutral vote, with 95 % intervals (Fieller's for the
// temperature).
type Fit struct {
	Votes                             int
	SlopePerK, SlopeLow, SlopeHigh    float64
	NeutralC, NeutralLowC, NeutralHiC float64
	// Refused says why there is no fit.
	Refused string
}

// Neutral is the mean of the temperatures at which each vote would have been
// neutral if sensation changed by GriffithsPerK per kelvin, with its 95 %
// interval.
type Neutral struct {
	Votes              int
	MeanC, LowC, HighC float64
}

// GriffithsPerK is how much sensation changes per kelvin by Griffiths' method.
const GriffithsPerK = 0.5

// ComplaintCount counts complaints of one kind.
type ComplaintCount struct {
	Kind  site.Complaint
	Count int
	// ByState splits them by the zone's running state.
	ByState [running.NumStates]int
	// Per1000PersonH is the rate over occupied person-hours with its exact 95 %
	// interval (Poisson); NaN where people are not given.
	Per1000PersonH, Low, High float64
	// Explained are those made while the zone was outside its limits on the
	// side complained of; Known those with a known temperature. Only for too
	// warm and too cool.
	Explained, Known int
}

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Votes and complaints of occupants",
	Question: "What did the occupants say, and do the models predict it?",
	Formula: "each vote takes its zone's operative temperature, predicted vote and running state of the step; neutral temperature by regression t = -a/b with Fieller's interval, " +
		"and by Griffiths' method, mean of t - vote/0.5; shares with exact (Clopper-Pearson) intervals; complaint rates with exact Poisson intervals",
	Limits: []string{
		"shares from 10 votes, regression from 30 (our assumption); a slope that could be zero gives no neutral temperature",
		"intervals take votes as independent: people who voted often make them too narrow",
		"who votes is not who is there: complaints come from those who complain",
	},
	Sources: []string{
		method.Memory("Griffiths 1990, constant of 0.5 per kelvin as recommended by Nicol, Humphreys & Roaf 2012"),
		method.Memory("Fieller 1954, J. Royal Statistical Society B 16:175"),
		method.Memory("Clopper & Pearson 1934, Biometrika 26:404"),
	},
	Standing: method.FromMemory,
}
