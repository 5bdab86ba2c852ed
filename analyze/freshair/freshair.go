// Package freshair answers: was the air fresh enough, in each running state?
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
}

// Levels are the CO2 figures of one state.
type Levels struct {
	KnownH, UnknownH    float64
	MeanPPM, P95PPM     float64
	AboveCatH           [4]float64 // hours above category I, II, III limit; [3] above the site's own
	AboveOutdoorMeanPPM float64
	Category            string // the best category held for 95 % of known time
}

// AirChange is a fitted air change rate.
type AirChange struct {
	MedianPerH, LowPerH, HighPerH float64
	FlowLs, FlowLsPerson          float64 // NaN without volume or people
	Events                        int
	Method                        string
	NotMeasurable                 string // why not, when Events is too few
}

// Result is the answer for all zones.
type Result struct {
	Zones       []Zone
	CurvePPM    []float64
	OutdoorNote string
	LimitsPPM   [3]float64 // above outdoors, categories I, II, III
	Sentence    string     // that low CO2 with few people proves little
}
