// Package hours answers: where did the occupied hours go? It makes the hourly
// record, one row per zone and local clock hour, that everything else is
// summed from, and keeps its identities exactly: counts are whole seconds.
package hours

import "sashlog/configs/site"

// Class is the one class an occupied step lands in.
type Class uint8

// Classes of occupied time.
const (
	NotOccupied Class = iota
	AchievedOK
	AchievedWarm
	AchievedCool
	AchievedStale
	AchievedUnassessed
	MissedCool // the plant was cooling
	MissedVent
	MissedBoth
	MissedShut // shut while warm or stale
	MissedUntyped
	NotNeeded
	IllTimed
	ClosedUnsuitedFresh // or freshness unknown
	ClosedUnsuitedStale
	NoOpening
	UnjudgedSuited
	Unjudged // weather unknown, or unsuited with an unknown running state
	NumClasses
)

// Achieved, Missed report which group a class belongs to.
func (c Class) Achieved() bool { return c >= AchievedOK && c <= AchievedUnassessed }

// Missed reports whether the class is one of the missed ones.
func (c Class) Missed() bool { return c >= MissedCool && c <= MissedUntyped }

// Col is a column of counted seconds.
type Col int

// Columns of counted time. Names in tables are ColName(c).
const (
	COccupied Col = iota
	COccupiedUnknown
	COpen
	CMech
	CBoth
	CShut
	CUnknown
	CBothCool
	CBothHeat
	CBothVent
	CBothUntyped
	CSuited
	CSuitedFan
	CSuitedRaw
	CSuitedUnknown
	CTooCold
	CTooWarm
	CTooHumid
	CTooWindy
	CRain
	CPolluted
	CTooBrief
	CAchieved
	CAchievedOK
	CAchievedWarm
	CAchievedCool
	CAchievedStale
	CAchievedUnassessed
	CMissed
	CMissedCool
	CMissedVent
	CMissedBoth
	CMissedShut
	CMissedUntyped
	CNotNeeded
	CIllTimed
	CClosedUnsuited
	CClosedUnsuitedStale
	CNoOpening
	CUnjudged
	CUnjudgedSuited
	CAllOpen
	CAllMech
	CAllBoth
	CAllShut
	CAllUnknown
	CPurge
	CPurgeAvailable
	COver
	CUnder
	CCO2Over
	// Ours, beyond the contract: suited time by plant evidence alone, for
	// sites without contacts.
	CSuitedPlantOff
	CSuitedPlantUnknown
	// Ours: weather with air movement not known.
	CSuitedFanUnknown
	// Ours: night hours in which purge cannot be judged.
	CPurgeUnknown
	NumCols
)

var colNames = [NumCols]string{
	"occupied_h", "occupied_unknown_h", "open_h", "mech_h", "both_h", "shut_h", "unknown_h",
	"both_cool_h", "both_heat_h", "both_vent_h", "both_untyped_h",
	"suited_h", "suited_fan_h", "suited_raw_h", "suited_unknown_h",
	"too_cold_h", "too_warm_h", "too_humid_h", "too_windy_h", "rain_h", "polluted_h", "too_brief_h",
	"achieved_h", "achieved_ok_h", "achieved_warm_h", "achieved_cool_h", "achieved_stale_h", "achieved_unassessed_h",
	"missed_h", "missed_cool_h", "missed_vent_h", "missed_both_h", "missed_shut_h", "missed_untyped_h",
	"not_needed_h", "ill_timed_h", "closed_unsuited_h", "closed_unsuited_stale_h", "no_opening_h",
	"unjudged_h", "unjudged_suited_h",
	"all_open_h", "all_mech_h", "all_both_h", "all_shut_h", "all_unknown_h", "purge_h", "purge_available_h",
	"over_h", "under_h", "co2_over_h", "suited_plant_off_h", "suited_plant_unknown_h", "suited_fan_unknown_h", "purge_unknown_h",
}

// ColName is the column's name in the contract.
func ColName(c Col) string { return colNames[c] }

// Val is a column of means or sums that are not counted time.
type Val int

// Columns of values; NaN where unknown.
const (
	VOpenShare Val = iota
	VTempC
	VRHPct
	VCO2PPM
	VOutdoorTempC
	VOutdoorRHPct
	VRunningMeanENC
	VRunningMeanASHRAEC
	VComfortLowC
	VComfortHighC
	VOverKh
	VUnderKh
	VPeopleH // measured person-hours, NaN without a counter
	VPersonH // occupied hours times the usual number, NaN when not given
	VPersonOverH
	VPersonUnderH
	VCO2LimitPPM
	VCoverage
	NumVals
)

var valNames = [NumVals]string{"open_share", "temp_c", "rh_pct", "co2_ppm", "outdoor_temp_c", "outdoor_rh_pct",
	"running_mean_en_c", "running_mean_ashrae_c", "comfort_low_c", "comfort_high_c", "over_kh", "under_kh",
	"people_h", "person_h", "person_over_h", "person_under_h", "co2_limit_ppm", "coverage"}

// ValName is the column's name in the contract.
func ValName(v Val) string { return valNames[v] }

// Hour is one local clock hour of the period.
type Hour struct {
	StartUTC         int64
	OffsetS          int // of the local zone at its start
	Date             site.Date
	HourOfDay        int // local, 0..23
	FromStep, ToStep int
}

// Record is the hourly record by columns. Row of zone z and hour h is
// z*len(Hours)+h.
type Record struct {
	Hours   []Hour
	ZoneIDs []string
	People  []float64 // usual number per zone, NaN unknown
	Seconds [NumCols][]uint16
	Values  [NumVals][]float32
	// ComfortModel holds exceedance.Model codes of the hour's last judged step.
	ComfortModel []uint8
	// Class holds the class of every step of the grid per zone (len N), for
	// carpets and episodes.
	Class [][]Class
}

// Row returns the index of zone z's row for hour h.
func (r *Record) Row(z, h int) int { return z*len(r.Hours) + h }

// Range is a figure with its least and greatest possible value, given the
// unknown hours.
type Range struct {
	Value float64 `json:"value"`
	Low   float64 `json:"low"`
	High  float64 `json:"high"`
}

// Total sums one zone (or, weighted, the building) over the period, in hours.
type Total struct {
	ID string
	// H are the counted columns in hours.
	H [NumCols]float64
	// With bounds from unknown hours.
	Occupied, Suited, SuitedFan, Achieved, AchievedOK, Missed, NotNeeded Range
	IllTimed, ClosedUnsuited, Unjudged, Both, NoOpening                  Range
	AchievedShare, MechFreeShare                                         Range
	OverKh, UnderKh, PeopleH, PersonH, PersonOverH, PersonUnderH         float64
	JudgedShare                                                          float64 // share of occupied hours not unjudged
}

// Summary is the record summed: per zone, per zone and month, per month for
// the average occupant, and for the building.
type Summary struct {
	Zones    []Total
	Months   []Month
	Building Total // the average occupant: mean over zones weighted by Weights
	// Weights sum to 1 over zones with openings; WeightedBy says by what
	// ("people", "floor area", "equally").
	Weights    []float64
	WeightedBy string
	// WorkingDays counts days with occupied time; Days all days.
	WorkingDays, Days int
	// Carpet is the building's most frequent class per step of the period,
	// by weight of people; its states likewise.
	CarpetClass []Class
}

// Month is the average occupant's month and each zone's.
type Month struct {
	Year, Month int
	Building    Total
	Zones       []Total
}
