// Package freshair answers: was the air fresh enough, in each running state?
//
// Steps:
//
//  1. levels: CO2 over occupied time, per running state and in all
//  2. curve: how long it was above each level
//  3. decays: air change rates from the fall of CO2 after a room empties
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

// AirChange is an air change rate fitted to decays in one running state. All
// rates are NaN when not measurable.
type AirChange struct {
	MedianPerH, LowPerH, HighPerH float64 // over the decays found
	FlowLs, FlowLsPerson          float64 // NaN without volume or people
	Events                        int
	Method                        string
	NotMeasurable                 string // why not, when Events is too few
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
	LimitsPPM   [3]float64 // above outdoors, categories I, II, III
	Sentence    string     // that low CO2 with few people proves little
}
