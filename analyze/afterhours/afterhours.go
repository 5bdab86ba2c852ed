// Package afterhours answers: what ran or stood open when nobody was there?
package afterhours

// Zone is one zone outside its occupied time, in hours of the period.
type Zone struct {
	PlantOnH, PlantUnknownH       float64
	PlantConditioningH            float64 // heating or cooling
	WindowsOpenH, WindowsUnknownH float64
	PurgeH, PurgeAvailableH       float64
	PurgeUnknownH                 float64 // night hours that cannot be judged
	// Nights counts nights with plant or windows left on or open from evening
	// to morning.
	NightsPlantOn, NightsWindowsOpen, Nights int
	WarmUpH                                  float64 // heating within three hours before occupied time
	// VacantH is all time outside occupied time; OccupancyUnknownH is in
	// neither.
	VacantH, OccupancyUnknownH float64
	// NightsPlantKnown and NightsWindowsKnown are the nights of which at least
	// half is known.
	NightsPlantKnown, NightsWindowsKnown int
}

// Unit is one plant unit while every zone it serves was vacant.
type Unit struct {
	ID                              string
	VacantH, OnH, UnknownH          float64
	ConditioningH                   float64
	EnergyKWh                       float64 // OnH at rated power, NaN when not given: an upper bound
	NightsOn, NightsKnown           int
	WarmUpH                         float64 // heating within three hours before occupied time
	OvernightH                      float64 // of nights it was left on
	WeekendOrHolidayOnH, WorkdayOnH float64 // on days without and with occupied time
}

// Result is the answer for all zones, and of the plant units.
type Result struct {
	Zones    []Zone
	Building Zone // weighted like the building's figures
	Notes    []string
	Units    []Unit
}
