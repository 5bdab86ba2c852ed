// Package calendar answers: which local day and which time of day is each step
// of the grid in?
package calendar

import (
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Calendar is the local calendar of a grid.
type Calendar struct {
	Days  []Day
	DayOf []int32 // step -> index into Days
	// MinuteOfDay is the local clock minute at which a step begins, 0..1439.
	MinuteOfDay []int16
}

// Day is one local calendar day on the grid; the first and the last may be
// cut short. Steps [FromStep, ToStep).
type Day struct {
	Date             site.Date
	Weekday          time.Weekday
	FromStep, ToStep int
}

// Of builds the calendar of a grid. A day has 23 or 25 hours where the clock
// changes.
func Of(g *grid.Grid) *Calendar {
	c := &Calendar{DayOf: make([]int32, g.N), MinuteOfDay: make([]int16, g.N)}
	for i := 0; i < g.N; i++ {
		t := g.Time(i)
		d := site.DateOf(t)
		if n := len(c.Days); n == 0 || c.Days[n-1].Date != d {
			if n > 0 {
				c.Days[n-1].ToStep = i
			}
			c.Days = append(c.Days, Day{Date: d, Weekday: t.Weekday(), FromStep: i, ToStep: g.N})
		}
		c.DayOf[i] = int32(len(c.Days) - 1)
		c.MinuteOfDay[i] = int16(t.Hour()*60 + t.Minute())
	}
	return c
}
