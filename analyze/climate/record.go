package climate

import (
	"math"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/comfort"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// record is weather with the occupied time it fell on: measured, or a typical
// year as an hourly grid of its own.
type record struct {
	name string
	g    *grid.Grid
	out  *outdoor.Outdoor
	// occ is the share of the average occupant's time that is occupied in each
	// step, 0 to 1, over zones with openings.
	occ []float32
	// wrap joins the end of the record to its beginning; offsetH is then its
	// standard time, hours from UTC.
	wrap    bool
	offsetH float64
}

// occupiedShare is the weighted share of zones with openings that is occupied
// in each step.
func occupiedShare(g *grid.Grid, run *running.Result) []float32 {
	occ := make([]float32, g.N)
	for z := range run.Zones {
		w := float32(run.Weights[z])
		if w == 0 || run.Zones[z].NoOpening {
			continue
		}
		for i, o := range run.Zones[z].Occupied {
			if o == running.Occupied {
				occ[i] += w
			}
		}
	}
	return occ
}

// hoursOfYear is the length of a typical year.
const hoursOfYear = 8760

// daysBefore are the days of a common year before each month.
var daysBefore = [...]int{0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334}

// hourOfYear gives the hour of a typical year, in its standard time, that an
// instant falls in; the 29th of February counts as the 28th.
func hourOfYear(unixS int64, offsetH float64) int {
	t := time.Unix(unixS+int64(offsetH*3600), 0).UTC()
	month, day := t.Month(), t.Day()
	if month == time.February && day == 29 {
		day = 28
	}
	return (daysBefore[month-1]+day-1)*24 + t.Hour()
}

// hoursOfYearByStep maps every step to its hour of the typical year.
func hoursOfYearByStep(g *grid.Grid, offsetH float64) []int16 {
	out := make([]int16, g.N)
	last, hour := int64(math.MinInt64), 0
	for i := range out {
		at := g.StartUTC + int64(i)*g.StepS
		// Offsets are multiples of a quarter of an hour.
		if q := at / 900; q != last {
			last, hour = q, hourOfYear(at, offsetH)
		}
		out[i] = int16(hour)
	}
	return out
}

// typicalRecord lays a typical year out as a grid, with the daily and running
// means that belong to it. Its occupied time is that of the measured period
// where the period covers the same hour of the year, else the site's times on
// the weekdays of the period's first year.
func typicalRecord(s *site.Site, c criteria.Settings, g *grid.Grid, cal *calendar.Calendar, occ []float32, tested *outdoor.Outdoor) *record {
	y := g.Typical
	if y == nil || len(y.TempC) != hoursOfYear || len(y.DewPointC) != hoursOfYear {
		return nil
	}
	year := g.Time(g.PeriodFrom).Year()
	for leap(year) {
		year++
	}
	start := time.Date(year, 1, 1, 0, 0, 0, 0, time.UTC).Unix() - int64(y.OffsetH*3600)
	zone := time.FixedZone("standard time", int(y.OffsetH*3600))
	r := &record{name: y.Name, wrap: true, offsetH: y.OffsetH,
		g: &grid.Grid{StartUTC: start, StepS: 3600, N: hoursOfYear, PeriodTo: hoursOfYear, Loc: zone}}
	r.out = &outdoor.Outdoor{TempC: y.TempC, Measured: true, DayOf: make([]int32, hoursOfYear), Days: typicalDays(c, y.TempC, year)}
	if tested.HumidityLogged {
		r.out.DewPointC, r.out.HumidityLogged = y.DewPointC, true
	}
	for k := range r.out.DayOf {
		r.out.DayOf[k] = int32(k / 24)
	}
	r.occ = make([]float32, hoursOfYear)
	n := make([]float32, hoursOfYear)
	at := hoursOfYearByStep(g, y.OffsetH)
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		r.occ[at[i]] += occ[i]
		n[at[i]]++
	}
	for k := range r.occ {
		if n[k] > 0 {
			r.occ[k] /= n[k]
			continue
		}
		local := time.Unix(start+int64(k)*3600+1800, 0).In(g.Loc)
		if scheduled(s, local) {
			r.occ[k] = 1
		}
	}
	return r
}

func leap(year int) bool { return year%4 == 0 && (year%100 != 0 || year%400 == 0) }

// scheduled reports whether the site's occupied times hold an instant.
func scheduled(s *site.Site, local time.Time) bool {
	minute := local.Hour()*60 + local.Minute()
	for _, day := range s.Occupancy.Holidays {
		if day == site.DateOf(local) {
			return false
		}
	}
	for _, t := range s.Occupancy.Times {
		if t.Days[local.Weekday()] && minute >= t.FromMin && minute < t.ToMin {
			return true
		}
	}
	return false
}

// typicalDays works out the means of the days of a typical year, whose first
// days follow on its last.
func typicalDays(c criteria.Settings, tempC []float32, year int) []outdoor.Day {
	const lead = grid.LeadDays
	days := make([]outdoor.Day, hoursOfYear/24)
	daily := make([]float64, len(days)+lead)
	for d := range days {
		sum, n := 0.0, 0
		for _, v := range tempC[d*24 : d*24+24] {
			if v == v {
				sum += float64(v)
				n++
			}
		}
		mean := math.NaN()
		if n >= 20 { // 80 % of the day, as for measured days
			mean = sum / float64(n)
		}
		date := site.DateOf(time.Date(year, 1, 1+d, 12, 0, 0, 0, time.UTC))
		days[d] = outdoor.Day{Date: date, FromStep: d * 24, ToStep: d*24 + 24, MeanC: mean, SixAMC: float64(tempC[d*24+6])}
		daily[d+lead] = mean
	}
	copy(daily, daily[len(days):])
	en := comfort.RunningMeanEN(daily)
	n := min(max(int(c.RunningMeanMinD), 7), 30)
	ashrae, err1 := comfort.PrevailingMean(daily, n)
	month, err2 := comfort.PrevailingMean(daily, 30)
	if err1 != nil || err2 != nil {
		panic("climate: days of the prevailing mean out of range") // the settings allow only the standard's range
	}
	for d := range days {
		days[d].RunningMeanENC, days[d].RunningMeanASHRAEC, days[d].Mean30DaysC = en[d+lead], ashrae[d+lead], month[d+lead]
	}
	return days
}
