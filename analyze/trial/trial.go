// Package trial answers: what is the next safe step, and how long until a
// verdict? Where the logs have only seen weather under today's limits they
// cannot say what wider ones would do; a small step on drawn days can.
//
//  1. step.go: which limits there are, what lies just beyond them, and which
//     one to move
//  2. power.go: how many fortnights until the step would show, by planting it
//     into the logged days
//  3. plan.go: when to begin, and the days drawn
//  4. watch.go: what to watch, and when to stop
package trial

import (
	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/lost"
	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is one audit, and what is wanted of the trial.
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
	Changeover *changeover.Result
	Lost       *lost.Result
	Design     schedule.Design
	// From is the earliest first day; zero: the season in which the step gains
	// most, after the end of the logs.
	From site.Date
	// Step is the ID of the step to try, empty for the one that gains most.
	Step string
	Seed uint64
}

// Step is one limit and how far a trial would move it.
type Step struct {
	ID string
	// Subject is the plant unit or, without plant, the zone whose limit it is.
	Subject string
	IsPlant bool
	// Index into Site.Plant or Site.Zones.
	Index int
	// Zone is the index of the zone whose temperature it is, -1 for outdoors.
	Zone int
	// Above: closed above the limit, else below.
	Above bool
	// NowC is the limit the building behaves as if it had, with its 95 %
	// interval (NaN for a room's call); TrialC that of the trial.
	NowC, LowC, HighC, TrialC float64
	// Zones it would reach; Untouched zones stand beside them.
	Zones, Untouched []int
	// BeyondH are the missed zone-hours of suitable weather beyond the limit,
	// StepH those within the trial's step; OpenInside is the share of the hours
	// just inside the limit that were open (half of that for a room's call, which
	// the room would reach again 1 K later), and GainH what the step would gain at
	// that share, in the period. GainPersonH NaN where people are not given.
	BeyondH, StepH, OpenInside, GainH, GainPersonH float64
	// others are the subject's other limits: hours beyond those do not count.
	others  []changeover.Limit
	beyondK []float32
}

// Power is how likely a trial of so many fortnights ends with a verdict.
type Power struct {
	Fortnights int
	// Days on trial and as usual together.
	Days int
	// Finds is the share of simulated trials that show the step's gain, Half the
	// same for half the gain, FalseAlarm for none.
	Finds, Half, FalseAlarm float64
	// EffectShare is the planted gain in the share of possible open hours.
	EffectShare float64
}

// Watch is one thing to watch, with the sign to stop at.
type Watch struct {
	What, Stop, Then string
	// Today is how it stands in the logs, empty when not logged.
	Today string
	// Basis says where the number is from.
	Basis string
}

// Plan is the answer.
type Plan struct {
	// Steps in order of their gain; Chosen is the index of the one planned, -1
	// when there is none.
	Steps  []Step
	Chosen int
	// Unusable says why nothing is planned; empty when something is.
	Unusable string
	Powers   []Power
	// Fortnights planned; TooShort when even the best length misses the power
	// asked for.
	Fortnights int
	TooShort   bool
	// SeasonFrom and SeasonTo are the logged days the plan was simulated on.
	SeasonFrom, SeasonTo site.Date
	Schedule             schedule.Schedule
	Watches              []Watch
	Simulations          int
}

// Step is the planned step.
func (p *Plan) Step() *Step { return &p.Steps[p.Chosen] }

// What a plan asks for, all our assumptions.
const (
	// StepK is how far a limit is moved.
	StepK = 1
	// LeastGainH is the least gain of a step, zone-hours in the period.
	LeastGainH = 5
	// LeastPower is how likely a trial should end with a verdict.
	LeastPower = 0.8
	// Most and LeastFortnights a trial may take.
	MostFortnights, LeastFortnights = 13, 2
	// insideK is how far inside a limit the share of open hours is read.
	insideK = 2
	// indoorMarginK is how far below the comfort limit an indoor trial stays.
	indoorMarginK = 0.5
	// indoorShare is the part of a run begun by a room's call that the step is
	// taken to gain: the room warms on, and calls 1 K later.
	indoorShare = 0.5
	// callTouchK is how near its call a room counts as calling.
	callTouchK = 0.1
	// simulations per length, and drawings within each.
	simulations, drawings = 300, 199
)

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Plan of the next safe trial",
	Question: "Which setting to try next, on which days, and how long until a verdict?",
	Formula: "gain of a step = missed hours of suitable weather within 1 K beyond an observed limit × the share of such hours within 2 K inside it that were open (a room's call: half the missed hours of the plant's runs that begin with it, × that share within 1 K); hours beyond another limit of the same plant do not count; " +
		"power: fortnights of the logs are drawn with replacement from the season planned for, their days put on trial by the schedule's own rule, each day's own gain added on trial days, and the verdict's test made (300 trials per length, 199 drawings each); " +
		"planned are the fewest fortnights that show the gain in 80 % of them",
	Limits: []string{
		"one step of 1 K: nothing is said about weather further beyond today's limits",
		"the gain supposes that windows are used beyond the limit as they are just inside it; the table of lengths shows half the gain too",
		"an indoor limit is moved only while it stays 0.5 K below the day's comfort limit",
		"local codes and licensed practice decide whether a trial may be run at all",
	},
	Sources: []string{
		method.Public("randomised blocks: Fisher 1935, The Design of Experiments, ch. IV"),
		"sizes, steps and power asked for are our assumption",
	},
	Standing: method.OurAssumption,
}
