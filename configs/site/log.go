package site

import (
	"fmt"
	"time"
)

// Layout is how a log file arranges its points.
type Layout string

// Layouts.
const (
	// Wide: one row per instant, one column per point.
	Wide Layout = "wide"
	// Long: one row per reading; key columns name the point. With one value
	// column the point's column is the key (several keys joined by "/"); with
	// several value columns it is key + "/" + value column.
	Long Layout = "long"
	// PerPoint: one file per point, an instant and a value per row. The
	// point's column is the file's name without folder and endings.
	PerPoint Layout = "per_point"
)

// DateOrder is the order of day, month and year in written dates.
type DateOrder string

// Date orders. ProveOrder means: prove it from the data or refuse.
const (
	YMD        DateOrder = "ymd"
	DMY        DateOrder = "dmy"
	MDY        DateOrder = "mdy"
	ProveOrder DateOrder = ""
)

// Log is one group of log files that were written the same way.
type Log struct {
	// Path is relative to the site file; it may hold * and ? and may name a
	// folder or a zip, gzip or xlsx file. Points refer to it by Name.
	Path string
	// Name is what the source column of points.csv says: the log's name, or
	// one file's base name, or a glob of either.
	Name   string
	Layout Layout
	// Sheet of a workbook; empty means the first.
	Sheet string
	// HeaderRow is the 1-based row that holds the column names; 0 means found
	// by looking, -1 means there is none (columns are then called 1, 2, ...).
	HeaderRow int
	// TimeColumn, or DateColumn and ClockColumn together; empty means found
	// by looking.
	TimeColumn, DateColumn, ClockColumn string
	// KeyColumns and ValueColumns serve the long layout.
	KeyColumns, ValueColumns []string
	// Separator 0 means found by looking. Decimal is '.' or ',' or 0.
	Separator, Decimal rune
	// Encoding: utf-8, utf-16, windows-1252 or empty (found by looking).
	Encoding  string
	DateOrder DateOrder
	// TimeFormat is a reference-time layout for unusual timestamps; empty
	// means the known forms.
	TimeFormat string
	Clock      Clock
	// Missing lists further markers of a missing value.
	Missing []string
	// Influx is set when the log is kept in a database: Path and what
	// describes files are then empty.
	Influx *Influx
	Line   int
}

// ClockKind says what the written times of a log mean.
type ClockKind string

// Clock kinds.
const (
	ClockLocal    ClockKind = "local"    // the site's zone with daylight saving
	ClockUTC      ClockKind = "utc"      // universal time
	ClockStandard ClockKind = "standard" // the site's standard time all year
	ClockOffset   ClockKind = "offset"   // a fixed offset, see OffsetS
	ClockZone     ClockKind = "zone"     // another named zone, see Zone
)

// Clock says how written times become instants.
type Clock struct {
	Kind    ClockKind
	OffsetS int
	Zone    *time.Location
	// OverruleOffset ignores an offset written in the timestamps and applies
	// Kind to the wall-clock part.
	OverruleOffset bool
	// ShiftS is added to every instant: a known clock error.
	ShiftS int
	// Shifts are corrections for part of the time (a logger that ran an hour
	// off for a month); half-open in the log's own written time.
	Shifts []ClockShift
}

// ClockShift is a correction of a log's clock between two written local days.
type ClockShift struct {
	From, To Date // inclusive
	ShiftS   int
	// Grows says that the correction changes evenly, day by day, from ShiftS on
	// the day From to EndShiftS on the day To: a clock that drifted.
	Grows     bool
	EndShiftS int
}

// MostS is the largest correction of the clock either way, seconds.
func (c *Clock) MostS() int {
	most := max(c.ShiftS, -c.ShiftS)
	for _, s := range c.Shifts {
		most = max(most, s.ShiftS, -s.ShiftS)
		if s.Grows {
			most = max(most, s.EndShiftS, -s.EndShiftS)
		}
	}
	return most
}

// Words says what the clock is taken to be, with every correction, for
// example "standard time all year; -60 min from 2025-06-10 to 2025-07-09".
func (c *Clock) Words() string {
	var s string
	switch c.Kind {
	case ClockUTC:
		s = "universal time"
	case ClockStandard:
		s = "standard time all year"
	case ClockOffset:
		s = "offset " + OffsetWords(c.OffsetS)
	case ClockZone:
		s = "zone " + c.Zone.String()
	default:
		s = "local time"
	}
	if c.OverruleOffset {
		s += ", written offsets ignored"
	}
	if c.ShiftS != 0 {
		s += fmt.Sprintf("; %+g min throughout", float64(c.ShiftS)/60)
	}
	for _, sh := range c.Shifts {
		s += fmt.Sprintf("; %+g", float64(sh.ShiftS)/60)
		if sh.Grows {
			s += fmt.Sprintf(" growing to %+g", float64(sh.EndShiftS)/60)
		}
		s += fmt.Sprintf(" min from %v to %v", sh.From, sh.To)
	}
	return s
}

// OffsetWords writes an offset from universal time as the site file does, for
// example "+05:30".
func OffsetWords(offsetS int) string {
	sign := '+'
	if offsetS < 0 {
		sign, offsetS = '-', -offsetS
	}
	return fmt.Sprintf("%c%02d:%02d", sign, offsetS/3600, offsetS/60%60)
}

// Logging says how a point logs.
type Logging string

// Ways of logging.
const (
	Sampled Logging = "sampled"
	COV     Logging = "cov"
)

// Stamp says which instant of its interval a sampled value is stamped with.
type Stamp string

// Stamps.
const (
	StampInstant Stamp = "instant"
	StampStart   Stamp = "start"
	StampEnd     Stamp = "end"
)

// Placement says where a sensor hangs.
type Placement string

// Placements.
const (
	PlacementUnknown Placement = ""
	PlacementRoom    Placement = "room"
	PlacementReturn  Placement = "return_duct"
	PlacementWindow  Placement = "by_window"
)

// OwnerKind says what a point belongs to.
type OwnerKind uint8

// Owners.
const (
	OwnerSite OwnerKind = iota
	OwnerZone
	OwnerPlant
)

// Point is one row of points.csv: a logged column mapped to a quantity.
type Point struct {
	Source, Column string
	// BelongsTo is the id as written; Owner and Index resolve it (Index into
	// Site.Zones or Site.Plant).
	BelongsTo string
	Owner     OwnerKind
	Index     int
	Quantity  Quantity
	// Unit as written; Conversion turns logged numbers into the canonical one.
	Unit       string
	Conversion Conversion
	Logging    Logging
	Stamp      Stamp
	// Hold is how long a value holds at most; 0 means the default (sampled:
	// three times the usual interval; change of value: 1 h for numbers, 25 h
	// for states).
	Hold time.Duration
	// OpenValue is the text that means open (or on) for a Switch quantity;
	// every other known word means shut.
	OpenValue string
	// Values maps status text (as written, compared without case) to
	// off, on, vent, heat, cool (plant) or open, shut, on, off.
	Values    map[string]string
	Placement Placement
	// Share is the share of the zone's opening area this window stands for;
	// NaN means equal shares.
	Share float64
	Note  string
	Line  int
}

// ID names a point in messages and tables.
func (p *Point) ID() string { return p.Source + ":" + p.Column }
