package table

import "sashlog/analyze/hours"

// Field is one column of an output with its meaning.
type Field struct{ Table, Column, Unit, Words string }

// Dictionary describes every column of the tables. Columns of hours.* that
// end in _h count occupied hours unless they begin with all_ or purge.
func Dictionary() []Field {
	var out []Field
	add := func(table, column, unit, words string) { out = append(out, Field{table, column, unit, words}) }
	add("hours", "start_utc", "", "start of the local clock hour, universal time (of a protected room: of the local day)")
	add("hours", "start_local", "", "the same in local time with its offset")
	add("hours", "local_date", "", "local calendar day")
	add("hours", "zone", "", "zone id, or its code")
	add("hours", "people", "persons", "usual number of people")
	for c := hours.Col(0); c < hours.NumCols; c++ {
		add("hours", hours.ColName(c), "h", colWords[c])
	}
	for v := hours.Val(0); v < hours.NumVals; v++ {
		add("hours", hours.ValName(v), valWords[v][0], valWords[v][1])
	}
	add("hours", "comfort_model", "", "the headline comfort model in force at the end of the hour")
	for _, f := range otherFields {
		add(f.Table, f.Column, f.Unit, f.Words)
	}
	return out
}

var colWords = [hours.NumCols]string{
	hours.COccupied: "occupied", hours.COccupiedUnknown: "occupancy not known (the sensor is silent); not in occupied_h",
	hours.COpen: "window open, plant off", hours.CMech: "windows shut, plant on", hours.CBoth: "window open and plant on",
	hours.CShut: "windows shut, plant off", hours.CUnknown: "running state not known",
	hours.CBothCool: "window open while cooling", hours.CBothHeat: "window open while heating", hours.CBothVent: "window open while ventilating",
	hours.CBothUntyped: "window open with plant of unknown kind",
	hours.CSuited:      "weather suitable", hours.CSuitedFan: "weather suitable with air movement at the site's fan speed",
	hours.CSuitedRaw: "weather suitable, runs of any length", hours.CSuitedUnknown: "weather not known",
	hours.CTooCold: "too cold outdoors", hours.CTooWarm: "too warm outdoors", hours.CTooHumid: "too humid outdoors", hours.CTooWindy: "too windy",
	hours.CRain: "rain or just after it", hours.CPolluted: "outdoor air polluted", hours.CTooBrief: "suitable for too short a run",
	hours.CAchieved: "suited and running open", hours.CAchievedOK: "of these comfortable and fresh", hours.CAchievedWarm: "of these too warm",
	hours.CAchievedCool: "of these too cool", hours.CAchievedStale: "of these stale", hours.CAchievedUnassessed: "of these without a reading to judge by",
	hours.CMissed: "suited and could have been open", hours.CMissedCool: "of these with the plant cooling", hours.CMissedVent: "of these with the plant ventilating",
	hours.CMissedBoth: "of these with windows open and plant on", hours.CMissedShut: "of these shut while warm or stale",
	hours.CMissedUntyped: "of these with plant of unknown kind", hours.CNotNeeded: "suited, nothing wanted",
	hours.CIllTimed:       "open outside limits for longer than a short airing",
	hours.CClosedUnsuited: "closed, weather unsuitable (short and harmless openings included)", hours.CClosedUnsuitedStale: "of these stale",
	hours.CNoOpening: "zone without any opening", hours.CUnjudged: "cannot be assessed", hours.CUnjudgedSuited: "of these in suitable weather",
	hours.CAllOpen: "all hours, occupied or not: open", hours.CAllMech: "all hours: mechanical", hours.CAllBoth: "all hours: open with plant",
	hours.CAllShut: "all hours: shut", hours.CAllUnknown: "all hours: not known",
	hours.CPurge: "night purge used", hours.CPurgeAvailable: "night purge available",
	hours.COver: "above the headline comfort limit", hours.CUnder: "below it", hours.CCO2Over: "above the CO2 limit",
	hours.CSuitedPlantOff: "weather suitable and the plant known to be off", hours.CSuitedPlantUnknown: "weather suitable and the plant not known",
	hours.CPurgeUnknown:     "night purge cannot be judged: a temperature, the windows or the plant are not known",
	hours.CSuitedFanUnknown: "weather with air movement not known",
}

var valWords = [hours.NumVals][2]string{
	hours.VOpenShare: {"1", "area-weighted share of openings open"}, hours.VTempC: {"°C", "indoor temperature comfort is judged on"},
	hours.VRHPct: {"%", "indoor relative humidity"}, hours.VCO2PPM: {"ppm", "indoor CO2"}, hours.VOutdoorTempC: {"°C", "outdoor temperature"},
	hours.VOutdoorRHPct: {"%", "outdoor relative humidity"}, hours.VRunningMeanENC: {"°C", "running mean of EN 16798-1"},
	hours.VRunningMeanASHRAEC: {"°C", "prevailing mean of ASHRAE 55"}, hours.VComfortLowC: {"°C", "lower headline limit"},
	hours.VComfortHighC: {"°C", "upper headline limit"}, hours.VOverKh: {"K h", "degree-hours above the limit, occupied"},
	hours.VUnderKh: {"K h", "degree-hours below the limit, occupied"}, hours.VPeopleH: {"person h", "measured person-hours, occupied or not"},
	hours.VPersonH: {"person h", "occupied hours times the usual number"}, hours.VPersonOverH: {"person h", "too warm, times the usual number"},
	hours.VPersonUnderH: {"person h", "too cool, times the usual number"}, hours.VCO2LimitPPM: {"ppm", "CO2 limit in force"},
	hours.VCoverage: {"1", "share of the time covered by readings, over the zone's points"},
}

var otherFields = []Field{
	{"comfort", "start_utc", "", "start of the local clock hour, universal time"}, {"comfort", "start_local", "", "the same in local time"},
	{"comfort", "zone", "", "zone id, or its code"}, {"comfort", "criterion", "", "criterion id, as in results.json"},
	{"comfort", "model", "", "the model used within the criterion"}, {"comfort", "over_h", "h", "occupied, too warm"},
	{"comfort", "under_h", "h", "occupied, too cool"}, {"comfort", "over_kh", "K h", "degree-hours too warm (PMV: votes times hours)"},
	{"comfort", "under_kh", "K h", "degree-hours too cool (PMV: votes times hours)"},
	{"episodes", "zone", "", "zone id, or its code"}, {"episodes", "start_local", "", "first missed step"}, {"episodes", "end_local", "", "end of the last missed step"},
	{"episodes", "hours", "h", "missed hours within"}, {"episodes", "running", "", "the running state most of it was spent in"},
	{"episodes", "outdoor_temp_c", "°C", "mean outdoor temperature"}, {"episodes", "indoor_temp_c", "°C", "mean indoor temperature"},
	{"episodes", "comfort_high_c", "°C", "mean upper comfort limit"}, {"episodes", "co2_ppm", "ppm", "mean CO2"},
	{"episodes", "cause", "", "first sufficient cause"}, {"episodes", "contributing", "", "further causes"}, {"episodes", "evidence", "", "what the cause rests on"},
	{"episodes", "people", "persons", "usual number of people"}, {"episodes", "person_h", "person h", "missed hours times that number"},
	{"readings", "source", "", "log, as in points.csv"}, {"readings", "column", "", "column, as in points.csv"}, {"readings", "point", "", "what the point is"},
	{"readings", "rows_read", "", "cells read"}, {"readings", "accepted", "", "accepted readings"}, {"readings", "rejected", "", "rejected readings"},
	{"readings", "rejected_by_reason", "", "how many for which reason"}, {"readings", "first_utc", "", "first accepted reading"},
	{"readings", "last_utc", "", "last accepted reading"}, {"readings", "gaps", "", "gaps longer than the hold limit"},
	{"readings", "longest_gap_h", "h", "the longest of them"}, {"readings", "coverage", "1", "covered share of the period"},
	{"readings", "checks", "", "what the checks found"}, {"readings", "clock", "", "how the log's clock was read, with its corrections, and what the check of it found"},
}
