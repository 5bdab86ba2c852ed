package climate

import (
	"math"
	"time"

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

// typicalRecord lays a typical year out as a grid in its standard time, with
// days, and the daily and running means that belong to them, by the site's own
// clock with its daylight saving. Its occupied time is that of the measured
// period where the period holds the same day and clock hour, else the site's
// times on the weekdays of the period's first common year.
func typicalRecord(s *site.Site, c criteria.Settings, g *grid.Grid, occ []float32, tested *outdoor.Outdoor) *record {
	y := g.Typical
	if y == nil || len(y.TempC) != hoursOfYear || len(y.DewPointC) != hoursOfYear {
		return nil
	}
	year := g.Time(g.PeriodFrom).Year()
	for leap(year) {
		year++
	}
	start := time.Date(year, 1, 1, 0, 0, 0, 0, time.UTC).Unix() - int64(y.OffsetH*3600)
	r := &record{name: y.Name, wrap: true, offsetH: y.OffsetH,
		g: &grid.Grid{StartUTC: start, StepS: 3600, N: hoursOfYear, PeriodTo: hoursOfYear, Loc: g.Loc}}
	local := localHours(r.g, year)
	r.out = &outdoor.Outdoor{TempC: y.TempC, Measured: true}
	r.out.Days, r.out.DayOf = typicalDays(c, y.TempC, local, year)
	if tested.HumidityLogged {
		r.out.DewPointC, r.out.HumidityLogged = y.DewPointC, true
	}
	sum, n := make([]float32, hoursOfYear), make([]float32, hoursOfYear)
	at := clockHourByStep(g)
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		sum[at[i]] += occ[i]
		n[at[i]]++
	}
	r.occ = make([]float32, hoursOfYear)
	for k, clock := range local {
		switch {
		case n[clock] > 0:
			r.occ[k] = sum[clock] / n[clock]
		case scheduled(s, time.Unix(start+int64(k)*3600+1800, 0).In(g.Loc)):
			r.occ[k] = 1
		}
	}
	return r
}

// localHours gives, for each hour of a typical year, the day of the year and
// clock hour in local time, as day*24 + hour. Hours that the local clock puts
// into another year stay on the first or last day, so that days follow each
// other.
func localHours(g *grid.Grid, year int) []int16 {
	out := make([]int16, g.N)
	for k := range out {
		t := time.Unix(g.StartUTC+int64(k)*g.StepS+g.StepS/2, 0).In(g.Loc)
		day := daysBefore[t.Month()-1] + t.Day() - 1
		switch {
		case t.Year() < year:
			day = 0
		case t.Year() > year:
			day = hoursOfYear/24 - 1
		}
		out[k] = int16(day*24 + t.Hour())
	}
	return out
}

// clockHourByStep maps every step to the day of a common year and the clock
// hour, local time with its daylight saving, that it falls in.
func clockHourByStep(g *grid.Grid) []int16 {
	out := make([]int16, g.N)
	last, hour := int64(math.MinInt64), 0
	for i := range out {
		at := g.StartUTC + int64(i)*g.StepS
		if q := at / 900; q != last { // offsets are multiples of a quarter of an hour
			t := time.Unix(at, 0).In(g.Loc)
			_, offsetS := t.Zone()
			last, hour = q, hourOfYear(at, float64(offsetS)/3600)
		}
		out[i] = int16(hour)
	}
	return out
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

// typicalDays works out the days of a typical year by the local clock, whose
// first days follow on its last, and the day of each hour.
func typicalDays(c criteria.Settings, tempC []float32, local []int16, year int) (days []outdoor.Day, dayOf []int32) {
	const lead = grid.LeadDays
	days, dayOf = make([]outdoor.Day, hoursOfYear/24), make([]int32, hoursOfYear)
	for d := range days {
		days[d] = outdoor.Day{Date: site.DateOf(time.Date(year, 1, 1+d, 12, 0, 0, 0, time.UTC)), FromStep: -1, SixAMC: math.NaN()}
	}
	sum, n := make([]float64, len(days)), make([]float64, len(days))
	for k, clock := range local {
		d := &days[clock/24]
		dayOf[k] = int32(clock / 24)
		if d.FromStep < 0 {
			d.FromStep = k
		}
		d.ToStep = k + 1
		if v := float64(tempC[k]); !math.IsNaN(v) {
			sum[clock/24] += v
			n[clock/24]++
		}
		if clock%24 == 6 {
			d.SixAMC = float64(tempC[k])
		}
	}
	daily := make([]float64, len(days)+lead)
	for d := range days {
		days[d].MeanC = math.NaN()
		if n[d] >= 0.8*float64(days[d].ToStep-days[d].FromStep) { // as for measured days
			days[d].MeanC = sum[d] / n[d]
		}
		daily[d+lead] = days[d].MeanC
	}
	copy(daily, daily[len(days):])
	en := comfort.RunningMeanEN(daily)
	least := min(max(int(c.RunningMeanMinD), 7), 30)
	ashrae, err1 := comfort.PrevailingMean(daily, least)
	month, err2 := comfort.PrevailingMean(daily, 30)
	if err1 != nil || err2 != nil {
		panic("climate: days of the prevailing mean out of range") // the settings allow only the standard's range
	}
	for d := range days {
		days[d].RunningMeanENC, days[d].RunningMeanASHRAEC, days[d].Mean30DaysC = en[d+lead], ashrae[d+lead], month[d+lead]
	}
	return days, dayOf
}
