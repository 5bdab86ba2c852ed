// Package afterhours answers: what ran or stood open when nobody was there?
package afterhours

// Zone is one zone outside its occupied time, in hours of the period.
type Zone struct {
	PlantOnH, PlantUnknownH       float64
	PlantConditioningH            float64 // heating or cooling
	WindowsOpenH, WindowsUnknownH float64
	PurgeH, PurgeAvailableH       float64
	// Nights counts nights with plant or windows left on or open from evening
	// to morning.
	NightsPlantOn, NightsWindowsOpen, Nights int
	WarmUpH                                  float64 // heating within three hours before occupied time
}

// Result is the answer for all zones, and of the plant units.
type Result struct {
	Zones    []Zone
	Building Zone // weighted like the building's figures
	Notes    []string
}
