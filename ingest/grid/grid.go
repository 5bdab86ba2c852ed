// Package grid holds the only hand-over between ingest and analyze: one column
// per point on a common time grid.
package grid

import (
	"time"
)

// LeadDays is how long before the period a grid begins, so that running means
// exist.
const LeadDays = 30

// Grid is a regular time grid with one column per point (same index as
// Site.Points). Step i covers [StartUTC + i*StepS, StartUTC + (i+1)*StepS).
// It begins 30 days before the audited period where logs reach back so far,
// so that running means exist; the period is [PeriodFrom, PeriodTo).
type Grid struct {
	StartUTC             int64 // unix seconds, a multiple of StepS
	StepS                int64
	N                    int
	PeriodFrom, PeriodTo int // step indexes
	Loc                  *time.Location
	Columns              []Column
	// Hourly weather of a typical year, nil when none was given. It never
	// stands in for measured weather.
	Typical *TypicalYear
}

// Column is one point on the grid. Mean holds the time-weighted mean over the
// covered part of each step in the canonical unit (Switch: share of covered
// time on; Status: code of the state that lasted longest; Angle: degrees),
// NaN where nothing is covered. CoveredS counts covered seconds per step.
// Both are nil for a point without any reading; otherwise len N.
type Column struct {
	Mean     []float32
	CoveredS []uint16
}

// TypicalYear is hourly weather of a typical year in local standard time, all
// slices of one length (8760), NaN where missing.
type TypicalYear struct {
	Name, Source       string
	OffsetH            float64
	TempC, DewPointC   []float32
	RHPct              []float32
	WindMS, WindDirDeg []float32
	GlobalWm2          []float32
}

// Time returns the instant step i begins at, in the site's zone.
func (g *Grid) Time(i int) time.Time {
	return time.Unix(g.StartUTC+int64(i)*g.StepS, 0).In(g.Loc)
}

// Index returns the step that holds the instant, which may be out of range.
func (g *Grid) Index(unixS int64) int {
	d := unixS - g.StartUTC
	if d < 0 {
		return int((d - g.StepS + 1) / g.StepS)
	}
	return int(d / g.StepS)
}

// StepH is the length of a step in hours.
func (g *Grid) StepH() float64 { return float64(g.StepS) / 3600 }
