package demo

import (
	"math"
	"time"

	"sashlog/configs/site"
)

// The site's occupied times: working days, 08:00 to 18:00 local.
const occupiedFromMin, occupiedToMin = 8 * 60, 18 * 60

// easter returns Easter Sunday: the anonymous Gregorian computus (Meeus,
// Astronomical Algorithms, ch. 8, from memory).
func easter(year int) time.Time {
	a, b, c := year%19, year/100, year%100
	d, e := b/4, b%4
	g := (8*b + 13) / 25
	h := (19*a + b - d - g + 15) % 30
	i, k := c/4, c%4
	l := (32 + 2*e + 2*i - h - k) % 7
	m := (a + 11*h + 19*l) / 433
	month := (h + l - 7*m + 90) / 25
	day := (h + l - 7*m + 33*month + 19) % 32
	return time.Date(year, time.Month(month), day, 0, 0, 0, 0, time.UTC)
}

// holidays returns the declared holidays of the days from..to, in order.
func holidays(from, to site.Date) []site.Date {
	var out []site.Date
	for y := from.Year; y <= to.Year; y++ {
		e := easter(y)
		days := []site.Date{{Year: y, Month: 1, Day: 1}, {Year: y, Month: 1, Day: 2},
			site.DateOf(e.AddDate(0, 0, -2)), site.DateOf(e.AddDate(0, 0, 1)),
			{Year: y, Month: 5, Day: 1}, site.DateOf(e.AddDate(0, 0, 39)), site.DateOf(e.AddDate(0, 0, 50)),
			{Year: y, Month: 8, Day: 15}, {Year: y, Month: 12, Day: 24}, {Year: y, Month: 12, Day: 25},
			{Year: y, Month: 12, Day: 26}, {Year: y, Month: 12, Day: 31}}
		for i := 1; i < len(days); i++ { // insertion sort; the list is nearly in order
			for j := i; j > 0 && days[j].Before(days[j-1]); j-- {
				days[j], days[j-1] = days[j-1], days[j]
			}
		}
		for k, d := range days {
			if !d.Before(from) && !to.Before(d) && (k == 0 || d != days[k-1]) {
				out = append(out, d)
			}
		}
	}
	return out
}

// bridgeDay is a working day on which the building stays empty without anybody
// having declared it: the Friday after Ascension.
func bridgeDay(year int) site.Date { return site.DateOf(easter(year).AddDate(0, 0, 40)) }

// day is one local day of the simulation.
type day struct {
	date    site.Date
	weekday time.Weekday
	start   int64 // unix seconds of local midnight
	steps   int   // 276, 288 or 300
	offsetS int64 // local time less UTC at the day's start
	working bool  // by the schedule: a weekday that is no declared holiday
	empty   bool  // nobody comes although it is a working day
	index   int
}

// calendarOf lists the local days from..to inclusive.
func calendarOf(from, to site.Date, loc *time.Location) []day {
	free := map[site.Date]bool{}
	for _, d := range holidays(from, to) {
		free[d] = true
	}
	var out []day
	for d := from; !to.Before(d); d = d.Next() {
		start := d.Start(loc)
		_, off := start.Zone()
		wd := start.Weekday()
		out = append(out, day{
			date: d, weekday: wd, start: start.Unix(), offsetS: int64(off),
			steps:   int((d.Next().Start(loc).Unix() - start.Unix()) / stepS),
			working: wd != time.Saturday && wd != time.Sunday && !free[d],
			empty:   d == bridgeDay(d.Year),
			index:   len(out),
		})
	}
	return out
}

// zoneClock turns instants into local clock time, quickly for instants in
// rising order.
type zoneClock struct {
	loc        *time.Location
	offsetS    int64
	validUntil int64
	known      bool
}

// offset returns local time less UTC in seconds.
func (c *zoneClock) offset(t int64) int64 {
	if !c.known || t >= c.validUntil {
		at := time.Unix(t, 0).In(c.loc)
		_, off := at.Zone()
		_, end := at.ZoneBounds()
		c.offsetS, c.validUntil, c.known = int64(off), math.MaxInt64, true
		if !end.IsZero() {
			c.validUntil = end.Unix()
		}
	}
	return c.offsetS
}

func (c *zoneClock) minuteOfDay(t int64) int {
	return int((t + c.offset(t)) % 86400 / 60)
}
