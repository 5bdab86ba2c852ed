package potential

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// A typical year that suits only in hour 7 of its standard time, for people who
// are there from 8 to 9 by the clock of Zurich: the clock stood an hour ahead on
// 217 days of 2023, from 26 March to 28 October (IANA time zone data base).
func TestTypicalYearByTheClock(t *testing.T) {
	zurich, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	g := &grid.Grid{StartUTC: time.Date(2023, 1, 1, 0, 0, 0, 0, zurich).Unix(), StepS: 3600, N: 8760, PeriodTo: 8760, Loc: zurich,
		Typical: &grid.TypicalYear{OffsetH: 1}}
	out := &outdoor.Outdoor{}
	for h := range g.N {
		temp := float32(0)
		if h%24 == 7 {
			temp = 20
		}
		g.Typical.TempC, g.Typical.DewPointC = append(g.Typical.TempC, temp), append(g.Typical.DewPointC, -5)
		out.TempC = append(out.TempC, 20)
	}
	s := &site.Site{}
	s.Occupancy.Times = []site.Times{{Days: [7]bool{true, true, true, true, true, true, true}, FromMin: 480, ToMin: 540}}
	y := typical(s, criteria.Settings{BandLowC: 16, BandHighC: 26, DewPointMaxC: 17}, g, calendar.Of(g), out)
	if y == nil || y.Months != 12 || math.Abs(y.TypicalH-217) > 1e-9 || math.Abs(y.MeasuredH-365) > 1e-9 {
		t.Errorf("%+v", y)
	}
}
