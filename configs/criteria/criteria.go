// Package criteria holds the numbers the analyses judge by, each with its
// published source. The numbers live in presets (embedded YAML); a site file
// may replace any of them.
package criteria

// Settings are the numbers in force for one audit. All are plain values so
// that analyses read them without lookups; Notes says where each came from.
type Settings struct {
	Preset string

	// Suited (design: "How a step is judged").
	OutdoorLowC     float64 // coldest outdoor air that suits, default 12.8
	RiseK           float64 // margin below the upper comfort limit, default 1
	DewPointMaxC    float64 // humidity limit, default 17
	WindMaxMS       float64 // mean wind limit, default 10
	RainDryMin      float64 // minutes after rain that do not suit, default 30
	OutdoorPM25Max  float64 // ug/m3, only where logged
	MinSuitedRunMin float64 // shortest run of suited steps, default 30
	// Plain outdoor band, the second method.
	BandLowC, BandHighC float64

	// Running states.
	OpenThreshold      float64 // open share above which a zone is open, default 0.05
	AiringMin          float64 // longest opening that is a short airing, default 15
	ValveOpenPct       float64 // valve position that means conditioning, default 5
	DamperOpenPct      float64 // zone damper position that means air, default 5
	FlowOnM3hPerM2     float64 // zone air flow that means air moves
	StepCoverageMin    float64 // least covered share of a step that counts, default 0.5
	InterruptionMin    float64 // interruptions of an episode that are bridged, default 15
	EpisodeMin         float64 // shortest missed episode listed, default 15
	FewRoomShare       float64 // share of people outside comfort below which a change to mechanical is few-room
	ReopenDelayMin     float64 // delay after plant stops or weather suits that counts as slow
	PurgeFromH         float64 // local hour night purge may begin, default 22
	PurgeToH           float64 // local hour it ends, default 7
	PurgeIndoorMinC    float64 // indoors warm enough to purge
	PurgeDifferenceK   float64 // outdoors cooler than indoors by
	PurgeOutdoorMinC   float64 // not colder than this outdoors
	PlantOvernightMinH float64 // plant left on overnight: at least so long

	// Comfort.
	Headline         string  // "en16798-1" (default) | "ashrae55" | "en15251" | "imac-mm"
	Category         string  // "I" | "II" | "III"
	ASHRAE55Percent  int     // 80 or 90
	AdaptiveAfterH   float64 // hours after plant stopped before adaptive applies, default 1
	AdaptiveLeastMin float64 // shortest spell the adaptive model applies to, default 30
	FanSpeedMS       float64 // air speed of suited_fan, default 0.9
	MetabolicMet     float64
	ClothingClo      float64 // NaN: from the outdoor temperature at 06:00
	AirSpeedMS       float64 // still air indoors, default 0.1
	RunningMeanMinD  float64 // days behind ASHRAE's prevailing mean, 7 to 30

	// Fresh air.
	CO2Category          string  // "I" | "II" | "III"
	CO2AboveOutdoorPPM   float64 // limit above outdoors of CO2Category
	OutdoorCO2PPM        float64 // when not logged and not given by the site; NaN: by the year
	OutdoorCO2DoubtPPM   float64
	CO2PerPersonLs       float64
	CO2PerPersonDoubtPct float64 // how far it may be off
	PeopleDoubtPct       float64 // how far the usual number may be off where nobody counts
	CO2Baseline          string  // "stated" | "corrected": what is done about a sensor's offset
	DecayStartAbovePPM   float64 // a decay event starts at least so far above outdoors
	MinDecayEvents       int
	FreshAirLsPerson     float64 // the site's own least outdoor air, 0: none
	PollutionClass       string  // of the building, EN 16798-1: one of Pollutions
	AirSpaceUse          string  // of the rooms, ASHRAE 62.1: one of SpaceUses
	AirDistribution      float64 // zone air distribution effectiveness E_z of ASHRAE 62.1

	// What the climate offers, by the heat balance and at night.
	ClimateGainsWm2         float64 // heat from people, sun and equipment per floor area
	ClimateLossWm2K         float64 // conductance of the envelope per floor area
	ClimateMinAirChangePerH float64 // outdoor air needed for the people
	ClimateMaxAirChangePerH float64 // most the openings can be expected to bring
	ClimateHeatingC         float64 // set-points of the heat balance
	ClimateCoolingC         float64
	NightStoreC             float64 // temperature of the mass that stores cold

	// Wind.
	BreezeAboveC       float64 // outdoors above this, a breeze is wanted
	WindCalmMS         float64 // slower wind is calm and has no direction
	WindMastM          float64 // height of the anemometer above ground
	WindMastTerrain    string  // one of Terrains
	WindOpeningM       float64 // height of the openings above ground
	WindOpeningTerrain string

	// Accuracy of sensors, as ranges that hold 95 times in 100.
	AccuracyOutdoorTempK float64
	AccuracyIndoorTempK  float64
	AccuracyHumidityPct  float64
	AccuracyCO2PPM       float64 // and AccuracyCO2Pct of the reading on top
	AccuracyCO2Pct       float64

	Notes map[string]Note
}

// Note says where a number comes from.
type Note struct {
	Key, Unit, Words string
	Value            string
	Source           string
	// Standing: "published" (read in a public text), "from memory",
	// "our assumption", "common practice", or "site file".
	Standing string
}
