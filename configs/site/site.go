// Package site holds the description of a building and its points: types and
// the facts that follow from them, nothing else. Loading and checking is the
// business of package configs.
package site

import "time"

// Site is one building as its site file describes it.
type Site struct {
	Name string
	// Invented marks a demo building; every output says so.
	Invented bool
	TimeZone string
	Location *time.Location
	// LatitudeDeg (north positive), LongitudeDeg (east positive), ElevationM
	// above sea level: NaN when not given.
	LatitudeDeg, LongitudeDeg, ElevationM float64
	// Period is the audited period; zero dates mean from the first to the last
	// reading.
	Period    Period
	Occupancy Occupancy
	Zones     []Zone
	Plant     []Plant
	Logs      []Log
	Points    []Point
	Diary     []Event
	Votes     []Vote
	Energy    Energy
	// TypicalYear is the path of an EPW file, relative to Dir, or empty.
	TypicalYear string
	Privacy     Privacy
	// RejectedShareMax is the share of rejected readings above which the audit
	// ends with exit code 1.
	RejectedShareMax float64
	// StepS is the length of a grid step in seconds; divides 900.
	StepS int
	// OutdoorCO2PPM is the site's own outdoor level, NaN when not given.
	OutdoorCO2PPM float64
	// Dir is the folder of the site file; relative paths start there. File is
	// its base name.
	Dir, File string
}

// Period is a range of local days, both inclusive. A zero Date is open.
type Period struct{ From, To Date }

// Date is a local calendar day; the zero value means "not given".
type Date struct {
	Year  int
	Month time.Month
	Day   int
}

// IsZero reports whether the date is not given.
func (d Date) IsZero() bool { return d == Date{} }

// Start returns the instant the day begins at in loc.
func (d Date) Start(loc *time.Location) time.Time {
	return time.Date(d.Year, d.Month, d.Day, 0, 0, 0, 0, loc)
}

// Next returns the following day.
func (d Date) Next() Date { return DateOf(time.Date(d.Year, d.Month, d.Day+1, 12, 0, 0, 0, time.UTC)) }

// Before reports whether d is earlier than e.
func (d Date) Before(e Date) bool {
	if d.Year != e.Year {
		return d.Year < e.Year
	}
	if d.Month != e.Month {
		return d.Month < e.Month
	}
	return d.Day < e.Day
}

// DateOf returns the calendar day of t in t's own location.
func DateOf(t time.Time) Date { y, m, d := t.Date(); return Date{y, m, d} }

func (d Date) String() string {
	if d.IsZero() {
		return ""
	}
	return time.Date(d.Year, d.Month, d.Day, 0, 0, 0, 0, time.UTC).Format("2006-01-02")
}

// OccupancySource says how occupied time is established.
type OccupancySource string

// Sources of occupied time.
const (
	BySchedule OccupancySource = "schedule" // occupied times less holidays
	ByPresence OccupancySource = "presence" // a presence sensor or counter; unknown where it is silent
)

// Occupancy is the site's default; zones may override Times and Source.
type Occupancy struct {
	Source   OccupancySource
	Times    []Times
	Holidays []Date
}

// Times is a span of local clock time on some weekdays. FromMin and ToMin are
// minutes after local midnight, half-open; ToMin may be 1440.
type Times struct {
	Days           [7]bool // indexed by time.Weekday
	FromMin, ToMin int
}

// Place is where a zone lies on the plan.
type Place string

// Places.
const (
	Perimeter    Place = "perimeter"
	Core         Place = "core"
	PlaceUnknown Place = ""
)

// Openings says how a zone reaches outdoor air by itself.
type Openings struct {
	// Outdoors is true when the zone has openings of its own to outdoors.
	Outdoors bool
	// Through lists the ids of zones whose openings it uses.
	Through []string
}

// None reports whether the zone has no opening, its own or through another.
func (o Openings) None() bool { return !o.Outdoors && len(o.Through) == 0 }

// WindowDrive says who moves the windows.
type WindowDrive string

// Window drives.
const (
	ManualWindows    WindowDrive = "manual"
	AutomaticWindows WindowDrive = "automatic"
	MixedWindows     WindowDrive = "mixed"
)

// Scheme is how windows and plant are meant to work together.
type Scheme string

// Schemes.
const (
	Changeover Scheme = "changeover"
	Concurrent Scheme = "concurrent"
	Zoned      Scheme = "zoned"
)

// Zone is a space with its own readings. AreaM2, HeightM, People and
// FanSpeedMS are NaN when not given.
type Zone struct {
	ID, Name        string
	Floor           string
	AreaM2, HeightM float64
	// People is the usual number of people.
	People float64
	Place  Place
	// FacesDeg are the directions the openings face, degrees clockwise from
	// north; empty when unknown.
	FacesDeg []float64
	Openings Openings
	Windows  WindowDrive
	// FanSpeedMS is the air speed a fan the people can use gives, NaN without
	// a fan.
	FanSpeedMS float64
	Scheme     Scheme
	// Occupied overrides the site's times when not nil.
	Occupied []Times
	// OccupancySource overrides the site's source when not empty.
	OccupancySource OccupancySource
	// Category overrides the headline comfort category (I, II, III) when not
	// empty.
	Category string
	// Use is what the zone is for, where a method asks for it.
	Use Use
}

// Use is what a zone is for. Homes have overheating criteria of their own.
type Use string

// Uses.
const (
	UseOther   Use = "other"
	UseBedroom Use = "bedroom"
	UseLiving  Use = "living" // living room or kitchen
)

// AirKind is what air a plant unit brings.
type AirKind string

// Kinds of air.
const (
	AirOutdoor      AirKind = "outdoor"
	AirRecirculated AirKind = "recirculated"
	AirMixed        AirKind = "mixed"
	AirNone         AirKind = "none"
	AirUnknown      AirKind = ""
)

// Plant is one unit of mechanical plant.
type Plant struct {
	ID, Name string
	Serves   []string // zone ids
	Air      AirKind
	// RatedPowerKW is NaN when not given.
	RatedPowerKW float64
}

// Privacy says what may be shown of rooms for one to three people.
type Privacy struct {
	// Internal shows everything.
	Internal bool
	// Codes replaces the names of zones by codes.
	Codes bool
}

// Event is one note of the diary: local days or instants, zones (none = all),
// kind and note.
type Event struct {
	FromUTC, ToUTC int64 // unix seconds, half-open
	Zones          []string
	Kind           EventKind
	Note           string
	Line           int
}

// EventKind names what a diary note is about.
type EventKind string

// Kinds of diary note.
const (
	EventWorks      EventKind = "works"
	EventSmoke      EventKind = "smoke"
	EventSetting    EventKind = "setting"
	EventClosure    EventKind = "closure"     // counts as holiday for the zones named
	EventSensorSwap EventKind = "sensor_swap" // a sensor was changed; checks do not compare across it
	EventFault      EventKind = "fault"       // readings of the zones named are not to be used
	EventOther      EventKind = "other"
)

// ZoneIndex returns the index of the zone with the id, or -1.
func (s *Site) ZoneIndex(id string) int {
	for i := range s.Zones {
		if s.Zones[i].ID == id {
			return i
		}
	}
	return -1
}

// PlantIndex returns the index of the plant unit with the id, or -1.
func (s *Site) PlantIndex(id string) int {
	for i := range s.Plant {
		if s.Plant[i].ID == id {
			return i
		}
	}
	return -1
}

// Southern reports whether the site lies south of the equator; false when the
// latitude is unknown.
func (s *Site) Southern() bool { return s.LatitudeDeg < 0 }

// Energy is what electricity costs; NaN where not given.
type Energy struct {
	PricePerKWh    float64
	Currency       string
	CarbonKgPerKWh float64
}
