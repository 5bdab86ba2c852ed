// Package freshair answers: was the air fresh enough, in each running state?
//
// Steps:
//
//  1. levels: CO2 over occupied time, per running state and in all
//  2. curve: how long it was above each level
//  3. decays, spells: air change rates from the fall of CO2 after a room
//     empties, from whole days with people, and from rises
//  4. estimate: the typical rate of each state with its interval
//  5. required, plantair, rebreathed, baseline: what the rates and levels mean
//
// CO2 is never averaged over running states to get an air flow: the mean of C
// gives the mean of 1/Q and not 1 over the mean of Q (ASHRAE Fundamentals
// ch. 16 eq. 22), so each rate comes from decays within one state.
package freshair

import "sashlog/analyze/running"

// Zone is one zone's CO2 over occupied time. Levels are above outdoors where
// named so. NaN where nothing is known.
type Zone struct {
	HasCO2 bool
	All    Levels
	State  [running.NumStates]Levels
	// AirChange per running state, from decays after the room empties.
	AirChange [running.NumStates]AirChange
	// Decays are those found in all states, Days the whole days with people
	// counted, one entry for each state of a day; both in order of time.
	Decays, Days []Event
	// NeighbourShare is how far the zones of the same floor stood above outdoors
	// during the events behind its rate, per state, as a share of this zone's own
	// excess, median; NaN when unknown. Air that comes from them is no outdoor air:
	// what is measured is outdoor air plus (1 - share) of the air exchanged with
	// them (of a balance, nearly).
	NeighbourShare [running.NumStates]float64
	// Required are the amounts of outdoor air asked for, Verdicts how each
	// state's measured flow stands to them.
	Required []Requirement
	Verdicts [running.NumStates][]Verdict
	// Rebreathed is the time mean of the share of air breathed before, per state
	// and (index NumStates) in all; NaN where unknown.
	Rebreathed [running.NumStates + 1]float64
	Baseline   Baseline
	// Curve is the duration curve: Curve[i] is the share of known occupied
	// time above CurvePPM[i], per state and (index NumStates) all together.
	Curve [running.NumStates + 1][]float64
	// Caution: low CO2 with few people proves little; true when counted
	// people were on average under half the usual number, or not counted.
	FewPeople bool
	// PeopleMean is the mean number counted over occupied time, NaN without a
	// counter.
	PeopleMean float64
}

// Levels are the CO2 figures of one state, weighted by time.
type Levels struct {
	KnownH, UnknownH float64
	MeanPPM          float64
	// P95PPM is the 95th percentile, Hyndman & Fan (1996) type 7 over steps;
	// all steps last equally long, so time is the weight.
	P95PPM              float64
	AboveCatH           [4]float64 // hours above category I, II, III limit; [3] above the site's own
	AboveOutdoorMeanPPM float64
	Category            string // the best category held for 95 % of known time
}

// Event is one measurement of an air change rate: a fall of CO2 after a room
// emptied, or a day with people counted, of which the steps in State count.
type Event struct {
	State         running.State
	FromStep      int
	ToStep        int // after the last reading used
	AirChangePerH float64
}

// Way is a way of measuring an air change rate.
type Way string

// Ways, in the order of trust. The first of decay and counted balance that is
// measurable stands for the state; the others are shown beside it.
const (
	ByDecay     Way = "decay"                     // fall after the room empties
	ByCounted   Way = "balance, people counted"   // whole days, with a counter
	ByBuildUp   Way = "build-up"                  // rise with constant people
	ByScheduled Way = "balance, people scheduled" // whole days, usual people in occupied time: an upper value
)

// Estimate is the rate of a state by one way. All rates are NaN when not
// measurable, and NotMeasurable says why.
type Estimate struct {
	Way                           Way
	MedianPerH, LowPerH, HighPerH float64 // typical rate with its 95 % interval
	FromPerH, ToPerH              float64 // range over the events
	Events                        int
	NotMeasurable                 string
	// OffsetLogLow and OffsetLogHigh are the parts of the interval, of ln A,
	// that come from outdoor level, sensor offset and people and are common to
	// all events.
	OffsetLogLow, OffsetLogHigh float64
}

// AirChange is the air change rate of one running state by the most trusted
// way. All rates are NaN when not measurable.
type AirChange struct {
	// MedianPerH is the typical rate; LowPerH and HighPerH bound it 95 times in
	// 100: events, correlated readings, outdoor level, sensor offset, people.
	MedianPerH, LowPerH, HighPerH float64
	FromPerH, ToPerH              float64 // range over the events
	FlowLs, FlowLsPerson          float64 // NaN without volume or people
	Events                        int
	Way                           Way
	// UpperOnly: air exchanged with neighbours, which counts as outdoor air, may
	// be most of it: the rate is slow, or the zone has no opening to outdoors and
	// no plant runs.
	UpperOnly bool
	// NeighbourPer10LsPerH is what each 10 L/s exchanged with neighbours adds to
	// the rate, 1/h; NaN where their level or the volume is unknown.
	NeighbourPer10LsPerH float64
	// Estimates are all ways, in the order of trust.
	Estimates     []Estimate
	Method        string
	NotMeasurable string // why not, when Events is too few
	// MedianR2 and Points describe the fits: the median coefficient of
	// determination and the number of readings used in all decays.
	MedianR2 float64
	Points   int
	// Median rate if the outdoor level were lower or higher by the doubt in
	// it; this is usually wider than the confidence interval of a fit.
	OutdoorLowPerH, OutdoorHighPerH float64
	// AtUsualPeoplePPM is what the usual number of people would bring the room
	// to within four hours at this rate, starting from outdoor air.
	AtUsualPeoplePPM float64
}

// Result is the answer for all zones.
type Result struct {
	Zones       []Zone
	CurvePPM    []float64
	OutdoorNote string
	// Plants compares, per plant unit, rates with it running and with everything
	// shut.
	Plants            []PlantAir
	RebreathedCaution string
	LimitsPPM         [3]float64 // above outdoors, categories I, II, III
	Sentence          string     // that low CO2 with few people proves little
}
