package freshair

import (
	"fmt"
	"math"

	"sashlog/configs/criteria"
)

// Requirement is an amount of outdoor air a rule asks of a zone.
type Requirement struct {
	Name            string
	LsPerson, Ls    float64
	Source          string
	ByPeople, ByM2  float64 // its two parts, L/s per person and L/s per m2
	CalculatedUsual bool    // for the usual number of people
}

// leastENLsPerson is the least total of EN 16798-1 (from memory).
const leastENLsPerson = 4

// ENPersonLs and ENBuildingLsM2 are the parts of method 1 of EN 16798-1:2019 by
// category: outdoor air for people, and for the building by its pollution (the
// value of category IV, not low polluting, is from memory).
var (
	ENPersonLs     = map[string]float64{"I": 10, "II": 7, "III": 4, "IV": 2.5}
	ENBuildingLsM2 = map[string]map[string]float64{
		"very-low": {"I": 0.5, "II": 0.35, "III": 0.2, "IV": 0.15},
		"low":      {"I": 1.0, "II": 0.7, "III": 0.4, "IV": 0.3},
		"not-low":  {"I": 2.0, "II": 1.4, "III": 0.8, "IV": 0.6},
	}
)

// ENMethod1Ls is the outdoor air of EN 16798-1:2019 method 1, L/s: people times
// the rate of the category and floor area times that of the building, and not
// less than 4 L/s per person.
func ENMethod1Ls(people, areaM2 float64, category, pollution string) float64 {
	q := people*ENPersonLs[category] + areaM2*ENBuildingLsM2[pollution][category]
	return math.Max(q, people*leastENLsPerson)
}

// ENMethod2LsPerson is the outdoor air per person that keeps CO2 at a level
// above outdoors: q = G / (dC e), with ventilation effectiveness e (EN 16798-1).
func ENMethod2LsPerson(generationLs, aboveOutdoorPPM, effectiveness float64) float64 {
	return 1e6 * generationLs / (aboveOutdoorPPM * effectiveness)
}

// SpaceRate is a row of ASHRAE 62.1 Table 6-1.
type SpaceRate struct {
	PersonLs, LsM2 float64
	PeoplePer100M2 float64 // default
}

// ASHRAE621 are the rates of ASHRAE 62.1 (2016, 2019 and 2022 agree) by use.
var ASHRAE621 = map[string]SpaceRate{
	"office": {2.5, 0.3, 5}, "classroom-5-8": {5, 0.6, 25}, "classroom-9-up": {5, 0.6, 35}, "lecture-classroom": {3.8, 0.3, 65},
	"computer-lab": {5, 0.6, 25}, "library": {2.5, 0.6, 10}, "meeting": {2.5, 0.3, 50}, "reception": {2.5, 0.3, 30},
	"dining": {3.8, 0.9, 70}, "music": {5, 0.3, 35},
}

// Ls is the outdoor air at the zone's outlets: (Rp P + Ra A)/Ez (ASHRAE 62.1 eq.
// 6-1 and 6-2).
func (r SpaceRate) Ls(people, areaM2, distribution float64) float64 {
	return (r.PersonLs*people + r.LsM2*areaM2) / distribution
}

// requirements are those in force for a zone; none without people and area.
func requirements(c criteria.Settings, people, areaM2 float64) []Requirement {
	if !(people > 0) {
		return nil
	}
	var out []Requirement
	add := func(name, source string, ls, byPeople, byM2 float64) {
		out = append(out, Requirement{Name: name, Source: source, Ls: ls, LsPerson: ls / people, ByPeople: byPeople, ByM2: byM2, CalculatedUsual: true})
	}
	if areaM2 > 0 && c.CO2Category != "" && c.PollutionClass != "" {
		add(fmt.Sprintf("EN 16798-1 category %s, %s polluting", c.CO2Category, c.PollutionClass), "EN 16798-1:2019, method 1",
			ENMethod1Ls(people, areaM2, c.CO2Category, c.PollutionClass), ENPersonLs[c.CO2Category], ENBuildingLsM2[c.PollutionClass][c.CO2Category])
	}
	if r, ok := ASHRAE621[c.AirSpaceUse]; ok && areaM2 > 0 && c.AirDistribution > 0 {
		add("ASHRAE 62.1 "+c.AirSpaceUse, "ASHRAE 62.1 Table 6-1", r.Ls(people, areaM2, c.AirDistribution), r.PersonLs, r.LsM2)
	}
	if c.FreshAirLsPerson > 0 {
		add("the site's own minimum", "site file", c.FreshAirLsPerson*people, c.FreshAirLsPerson, 0)
	}
	return out
}

// Verdict is how a measured flow with its interval stands to a requirement.
type Verdict string

// Verdicts.
const (
	Met      Verdict = "met"      // the whole interval is at or above it
	NotMet   Verdict = "not met"  // the whole interval is below it
	Unproven Verdict = "unproven" // the interval holds it, or nothing was measured
)

func verdict(lowLs, highLs, needLs float64) Verdict {
	switch {
	case lowLs >= needLs:
		return Met
	case highLs < needLs:
		return NotMet
	}
	return Unproven
}
