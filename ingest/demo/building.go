package demo

// drive says who moves a zone's windows.
type drive uint8

const (
	noWindows drive = iota
	manual
	automatic
	mixed
)

// windowSpec is one window or group of windows with a point of its own.
type windowSpec struct {
	key      string  // how the window log calls it
	share    float64 // of the zone's opening area
	position bool    // driven and logged as a position in percent, not as a contact
}

// zoneSpec is the fabric and use of one zone.
type zoneSpec struct {
	id, name   string
	floor      int
	areaM2     float64
	heightM    float64
	people     int
	core       bool
	faces      string // letters of N, E, S, W
	drive      drive
	through    string
	windows    []windowSpec
	plant      int     // index into the plant list
	facadeM2   float64 // outer wall with its glass
	glassShare float64
	roof       bool
	openM2     float64 // opening area with every window fully open
	openHighM  float64
	equipWm2   float64 // equipment of a fully used zone
	alwaysWm2  float64 // equipment that never stops
	coolOnC    float64 // its thermostat calls for cooling above
	meeting    bool    // used in meetings only; its thermostat sleeps while nobody is there
	neverOpens bool    // furniture stands before the windows
	fanMS      float64
}

// plantSpec is one unit and its programme.
type plantSpec struct {
	id, name string
	kind     plantKind
	ratedKW  float64
	// Changeover limits: windows are released between these outdoors.
	naturalLowC, naturalHighC float64
	// clockStart is the minute after midnight the time programme starts the
	// unit on working days whatever the weather, -1 without; it keeps running
	// until clockHold.
	clockStart, clockHold int
	stopMin               int // end of the day's programme
	minRunMin             int // shortest run of the unit
	reopenMin             int // windows stay locked so long after it stopped
	purge                 bool
}

type plantKind uint8

const (
	airHandler plantKind = iota
	ceilingUnit
)

var plantSpecs = []plantSpec{
	{id: "AHU-1", name: "Air handling unit ground floor", kind: airHandler, ratedKW: 18,
		naturalLowC: 15, naturalHighC: 22.5, clockStart: 390, clockHold: 570, stopMin: 1110, minRunMin: 40, reopenMin: 10},
	{id: "AHU-2", name: "Air handling unit first floor", kind: airHandler, ratedKW: 18,
		naturalLowC: 14, naturalHighC: 24.5, clockStart: -1, stopMin: 1110, minRunMin: 40, reopenMin: 5},
	{id: "AHU-3", name: "Air handling unit second floor", kind: airHandler, ratedKW: 12,
		naturalLowC: 13, naturalHighC: 25.5, clockStart: -1, stopMin: 1110, minRunMin: 30, reopenMin: 80, purge: true},
	{id: "FCU-1", name: "Ceiling units west wing", kind: ceilingUnit, ratedKW: 4,
		clockStart: -1, stopMin: 1140, minRunMin: 20},
	{id: "FCU-2", name: "Ceiling unit corner office", kind: ceilingUnit, ratedKW: 2,
		clockStart: -1, stopMin: 1140, minRunMin: 20},
}

func one(key string) []windowSpec { return []windowSpec{{key: key, share: 1}} }

var zoneSpecs = []zoneSpec{
	{id: "L1.01", name: "Open office south", floor: 1, areaM2: 180, heightM: 3.2, people: 16, faces: "S", drive: manual,
		windows: []windowSpec{{"F1-R01-W1", 0.4, false}, {"F1-R01-W2", 0.3, false}, {"F1-R01-W3", 0.3, false}},
		plant:   0, facadeM2: 84, glassShare: 0.38, openM2: 6.8, openHighM: 1.3, equipWm2: 6.5, alwaysWm2: 1.0, coolOnC: 25.0},
	{id: "L1.02", name: "Open office north", floor: 1, areaM2: 150, heightM: 3.2, people: 13, faces: "N", drive: manual,
		windows: []windowSpec{{"F1-R02-W1", 0.5, false}, {"F1-R02-W2", 0.5, false}},
		plant:   0, facadeM2: 72, glassShare: 0.36, openM2: 5.6, openHighM: 1.3, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 25.2},
	{id: "L1.03", name: "Conference core", floor: 1, areaM2: 60, heightM: 3.0, people: 7, core: true, drive: noWindows,
		plant: 0, equipWm2: 6, alwaysWm2: 0.6, coolOnC: 23.8, meeting: true},
	{id: "L1.04", name: "Reception east", floor: 1, areaM2: 90, heightM: 3.2, people: 5, faces: "E", drive: manual,
		windows: one("F1-R04-W1"), plant: 0, facadeM2: 48, glassShare: 0.40, openM2: 2.8, openHighM: 1.2, equipWm2: 6, alwaysWm2: 1.5, coolOnC: 25.2, neverOpens: true},
	{id: "L2.01", name: "Studio south", floor: 2, areaM2: 170, heightM: 3.2, people: 15, faces: "S", drive: automatic,
		windows: []windowSpec{{"F2-R01-V1", 0.6, true}, {"F2-R01-V2", 0.4, true}},
		plant:   1, facadeM2: 80, glassShare: 0.36, openM2: 7.0, openHighM: 1.4, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 25.5},
	{id: "L2.02", name: "Studio north", floor: 2, areaM2: 150, heightM: 3.2, people: 13, faces: "N", drive: mixed,
		windows: []windowSpec{{"F2-R02-V1", 0.4, true}, {"F2-R02-W1", 0.3, false}, {"F2-R02-W2", 0.3, false}},
		plant:   1, facadeM2: 72, glassShare: 0.36, openM2: 6.0, openHighM: 1.3, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 25.5},
	{id: "L2.03", name: "Print and team core", floor: 2, areaM2: 70, heightM: 3.0, people: 6, core: true, drive: noWindows, through: "L2.01",
		plant: 1, equipWm2: 5, alwaysWm2: 1.2, coolOnC: 24.5},
	{id: "L2.04", name: "Project room west", floor: 2, areaM2: 60, heightM: 3.2, people: 5, faces: "W", drive: manual,
		windows: one("F2-R04-W1"), plant: 1, facadeM2: 34, glassShare: 0.36, openM2: 2.5, openHighM: 1.2, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 25.8},
	{id: "L2.05", name: "Meeting room east", floor: 2, areaM2: 45, heightM: 3.2, people: 7, faces: "E", drive: manual,
		windows: one("F2-R05-W1"), plant: 1, facadeM2: 26, glassShare: 0.36, openM2: 2.0, openHighM: 1.2, equipWm2: 5, alwaysWm2: 1.0, coolOnC: 25.5, meeting: true},
	{id: "L2.06", name: "Small office west", floor: 2, areaM2: 24, heightM: 3.2, people: 2, faces: "W", drive: manual,
		windows: one("F2-R06-W1"), plant: 1, facadeM2: 14, glassShare: 0.36, openM2: 1.0, openHighM: 1.2, equipWm2: 6.5, alwaysWm2: 1.0, coolOnC: 25.8},
	{id: "L3.01", name: "Library south", floor: 3, areaM2: 160, heightM: 3.4, people: 11, faces: "S", drive: automatic,
		windows: []windowSpec{{"F3-R01-V1", 1, true}},
		plant:   2, facadeM2: 82, glassShare: 0.36, roof: true, openM2: 7.0, openHighM: 1.4, equipWm2: 6, alwaysWm2: 0.8, coolOnC: 25.5, fanMS: 0.9},
	{id: "L3.02", name: "Reading room north", floor: 3, areaM2: 140, heightM: 3.4, people: 10, faces: "N", drive: automatic,
		windows: []windowSpec{{"F3-R02-V1", 1, true}},
		plant:   2, facadeM2: 76, glassShare: 0.36, roof: true, openM2: 5.8, openHighM: 1.4, equipWm2: 6, alwaysWm2: 0.8, coolOnC: 26.0},
	{id: "L3.03", name: "Archive core", floor: 3, areaM2: 50, heightM: 3.0, people: 3, core: true, drive: noWindows,
		plant: 2, roof: true, equipWm2: 6, alwaysWm2: 2.0, coolOnC: 25.5},
	{id: "L3.04", name: "West wing office A", floor: 3, areaM2: 55, heightM: 3.2, people: 5, faces: "W", drive: manual,
		windows: []windowSpec{{"F3-R04-W1", 0.5, false}, {"F3-R04-W2", 0.5, false}},
		plant:   3, facadeM2: 34, glassShare: 0.36, roof: true, openM2: 2.5, openHighM: 1.2, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 24.8},
	{id: "L3.05", name: "West wing office B", floor: 3, areaM2: 55, heightM: 3.2, people: 5, faces: "W", drive: manual,
		windows: []windowSpec{{"F3-R05-W1", 0.5, false}, {"F3-R05-W2", 0.5, false}},
		plant:   3, facadeM2: 34, glassShare: 0.36, roof: true, openM2: 2.5, openHighM: 1.2, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 24.8},
	{id: "L3.06", name: "West wing corner office", floor: 3, areaM2: 40, heightM: 3.2, people: 4, faces: "SW", drive: manual,
		windows: []windowSpec{{"F3-R06-W1", 0.5, false}, {"F3-R06-W2", 0.5, false}},
		plant:   4, facadeM2: 44, glassShare: 0.34, roof: true, openM2: 1.9, openHighM: 1.2, equipWm2: 5.5, alwaysWm2: 1.0, coolOnC: 24.8},
}

// link couples two zones: heat through a wall or floor and air through doors.
type link struct {
	a, b    string
	wallWK  float64 // W/K
	doorLs  float64 // L/s each way in occupied times
	alwaysL float64 // L/s each way at all times
}

var linkSpecs = []link{
	{"L1.01", "L1.03", 70, 22, 4}, {"L1.02", "L1.03", 70, 22, 4}, {"L1.01", "L1.04", 40, 30, 5}, {"L1.02", "L1.04", 35, 25, 5},
	{"L2.01", "L2.03", 60, 0, 10}, {"L2.02", "L2.03", 60, 20, 4}, {"L2.01", "L2.04", 35, 12, 3}, {"L2.02", "L2.05", 30, 10, 3}, {"L2.04", "L2.06", 30, 6, 1},
	{"L3.01", "L3.03", 60, 15, 4}, {"L3.02", "L3.03", 60, 15, 4}, {"L3.01", "L3.06", 25, 8, 2}, {"L3.04", "L3.05", 45, 10, 2}, {"L3.04", "L3.02", 25, 8, 2}, {"L3.05", "L3.06", 35, 8, 2},
	// Through the floors.
	{"L1.01", "L2.01", 110, 0, 0}, {"L1.02", "L2.02", 95, 0, 0}, {"L1.03", "L2.03", 40, 0, 0}, {"L1.04", "L2.05", 30, 0, 0},
	{"L2.01", "L3.01", 100, 0, 0}, {"L2.02", "L3.02", 90, 0, 0}, {"L2.03", "L3.03", 35, 0, 0}, {"L2.04", "L3.04", 35, 0, 0}, {"L2.06", "L3.05", 15, 0, 0},
}

// The place: a name of our own making. The coordinates are round numbers that
// give the sun a height; the time zone is used for its clock rules only.
const (
	siteName     = "Quenmarsh Hall (invented)"
	zoneName     = "Europe/Zurich"
	latitudeDeg  = 47.0
	longitudeDeg = 8.0
	elevationM   = 400.0
)

// azimuthDeg of the facade letters.
func azimuthDeg(letter byte) float64 {
	switch letter {
	case 'E':
		return 90
	case 'S':
		return 180
	case 'W':
		return 270
	}
	return 0
}
