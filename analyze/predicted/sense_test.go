package predicted

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/comfort"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

var nan = float32(math.NaN())

// room makes a site of one room with hourly steps, occupied throughout.
func room(n int, met, clo, stillMS float64, fanMS float64) Input {
	g := &grid.Grid{StartUTC: time.Date(2025, 7, 1, 0, 0, 0, 0, time.UTC).Unix(), StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC}
	cal := calendar.Of(g)
	in := Input{Grid: g, Criteria: criteria.Settings{MetabolicMet: met, ClothingClo: clo, AirSpeedMS: stillMS},
		Site:    &site.Site{ElevationM: math.NaN(), Zones: []site.Zone{{ID: "a", FanSpeedMS: fanMS}}},
		Outdoor: &outdoor.Outdoor{DayOf: cal.DayOf, Days: make([]outdoor.Day, len(cal.Days))},
		Running: &running.Result{Zones: []running.Zone{{Occupied: make([]running.Occupancy, n)}}}, Indoor: make([]indoor.Zone, 1)}
	for i := range n {
		in.Running.Zones[0].Occupied[i] = running.Occupied
	}
	return in
}

func near(t *testing.T, what string, got, want, within float64) {
	t.Helper()
	if !(math.Abs(got-want) <= within) {
		t.Errorf("%s: %g, want %g", what, got, want)
	}
}

// ISO 7730:2005 Table D.1 rows 1, 2 and 4 (at 1.2 met the tables give relative
// air speed; 0.06 m/s of it is the person's own) and row 4's radiant
// temperature apart from the air's.
func TestTableD1ThroughTheGrid(t *testing.T) {
	in := room(3, 1.2, 0.5/(0.6+0.4/1.2), 0.1-0.3*0.2, math.NaN())
	in.Indoor[0] = indoor.Zone{
		OperativeC: []float32{22, 27, 24.5}, RHPct: []float32{60, 60, 60},
		AirTempC: []float32{22, 27, 23.5}, RadiantC: []float32{nan, nan, 25.5},
	}
	r := Sense(in)
	z := r.Zones[0]
	for i, want := range []float64{-0.75, 0.77, -0.01} {
		near(t, "vote", float64(z.Vote[i]), want, 0.02)
	}
	if s := z.Summary; s.KnownH != 3 || s.AssumedRadiantH != 2 || s.AssumedHumidityH != 0 || s.AssumedSpeedH != 3 || s.MovingH != 0 {
		t.Errorf("%+v", s)
	}
	near(t, "mean", z.Summary.MeanVote, (-0.75+0.77-0.01)/3, 0.02)
}

// The worked example of moving air (ASHRAE 55-2023 Appendix D, recomputed):
// 30 °C, 50 %, 1.1 met, 0.5 clo at 1.2 m/s: cooling effect 3.93 K, vote 0.22
// instead of 1.00. Here a fan gives it while it is on; off it is still; a
// logged air speed counts before the fan.
func TestFanCools(t *testing.T) {
	// Relative speed 1.2 of which 0.03 m/s is the person's own.
	in := room(4, 1.1, 0.5, 0.1, 1.17)
	in.Indoor[0] = indoor.Zone{
		OperativeC: []float32{30, 30, 30, 30}, RHPct: []float32{50, 50, 50, nan},
		FanOn: []float32{1, 0, 1, 0.4}, AirSpeedMS: []float32{nan, nan, 0.2, nan},
	}
	z := Sense(in).Zones[0]
	s := z.Summary
	if s.OutsideH != 1 || s.OutsideOf["air speed"] != 1 || !z.Outside[0] {
		t.Errorf("1.2 m/s is beyond ISO 7730: %+v", s)
	}
	near(t, "vote with the fan", float64(z.Elevated[0]), 0.22, 0.04) // seated; the example stands
	near(t, "plain vote with the fan", float64(z.Vote[0]), 0.997, 0.01)
	atLogged := comfort.Conditions{AirC: 30, RadiantC: 30, AirSpeedMS: 0.23, RHPct: 50, Met: 1.1, Clo: 0.5}
	exact := comfort.PMVElevated(atLogged, options)
	ce, _ := comfort.CoolingEffectK(atLogged, options)
	near(t, "vote at the logged speed", float64(z.Elevated[2]), exact, comfort.TablePMVWithin)
	if !(z.Elevated[1] > z.Elevated[2] && z.Elevated[2] > z.Elevated[0]) {
		t.Errorf("faster air must lower the vote: %v", z.Elevated)
	}
	if z.Elevated[1] != z.Elevated[3] {
		t.Error("a fan that is off is still air, and humidity that is not known counts as 50 %")
	}
	if s.MovingH != 1 || s.AssumedSpeedH != 2 || s.AssumedHumidityH != 1 || s.LimitedH != 0 {
		t.Errorf("%+v", s)
	}
	near(t, "cooling effect", s.MeanCoolingK, ce, comfort.TableCoolingWithinK)
}

// Without a fan of their own people cannot choose the air speed: at 24 °C only
// 0.318 m/s counts (ASHRAE 55-2017 5.3.3, from memory).
func TestAirSpeedWithoutControl(t *testing.T) {
	vote := func(fanMS, speedMS float64) (float64, Summary) {
		in := room(1, 1.0, 0.6, 0.1, fanMS)
		in.Indoor[0] = indoor.Zone{OperativeC: []float32{24}, RHPct: []float32{50}, AirSpeedMS: []float32{float32(speedMS)}}
		z := Sense(in).Zones[0]
		return float64(z.Elevated[0]), z.Summary
	}
	fast, s := vote(math.NaN(), 0.7)
	limit, _ := vote(math.NaN(), comfort.AirSpeedLimitMS(24))
	own, o := vote(0.9, 0.7)
	near(t, "vote", fast, limit, 1e-4)
	if s.LimitedH != 1 || o.LimitedH != 0 || !(own < fast-0.1) {
		t.Errorf("without a fan %g %+v, with %g %+v", fast, s, own, o)
	}
}

// Draught rates of ISO 7730 eq. 6 at 40 % turbulence, recomputed: 22 °C and
// 0.15 m/s 15.4 %, 23 °C and 0.20 m/s 20.7 %; beyond 26 °C or at 0.5 m/s the
// method says nothing.
func TestDraught(t *testing.T) {
	in := room(7, 1.2, 0.7, 0.1, math.NaN())
	in.Indoor[0] = indoor.Zone{
		OperativeC: []float32{22, 23, 22, 27, 22, 22, nan},
		AirSpeedMS: []float32{0.15, 0.20, 0.05, 0.2, 0.5, nan, 0.1},
	}
	d := Sense(in).Zones[0].Summary.Draught
	near(t, "mean", d.MeanPct, (15.429+20.697+0)/3, 0.001)
	if d.JudgedH != 3 || d.OutsideH != 2 || d.UnknownH != 2 || d.AboveH != [3]float64{2, 1, 0} {
		t.Errorf("%+v", d)
	}
	in.Indoor[0].AirSpeedMS = nil
	if d := Sense(in).Zones[0].Summary.Draught; d.JudgedH != 0 || d.UnknownH != 0 || !math.IsNaN(d.MeanPct) {
		t.Errorf("without air speed: %+v", d)
	}
}

// SET Table D-1 of ASHRAE 55-2023: 25 °C, 50 %, 0.15 m/s, 1.0 met, 0.5 clo give
// 23.8 °C (standing; seated 0.1 K more at most).
func TestSET(t *testing.T) {
	in := room(20, 1.0, 0.5, 0.15, math.NaN())
	for i := range 20 {
		in.Indoor[0].OperativeC = append(in.Indoor[0].OperativeC, 25)
		in.Indoor[0].RHPct = append(in.Indoor[0].RHPct, 50)
		if i == 19 {
			in.Indoor[0].OperativeC[i] = 30
		}
	}
	s := Sense(in).Zones[0].Summary
	near(t, "5th percentile", s.SET5C, 23.8, 0.15)
	near(t, "95th percentile", s.SET95C, 23.8, 0.15)
	near(t, "mean", s.SETMeanC, 23.8+5.0/20, 0.2)
}

// What is not known gives no figure.
func TestUnknown(t *testing.T) {
	in := room(3, 1.2, math.NaN(), 0.1, math.NaN())
	for d := range in.Outdoor.Days {
		in.Outdoor.Days[d].SixAMC = math.NaN() // so clothing is not known either
	}
	in.Indoor[0].OperativeC = []float32{24, nan, 24}
	in.Running.Zones[0].Occupied[2] = running.Vacant
	z := Sense(in).Zones[0]
	if s := z.Summary; s.KnownH != 0 || s.UnknownH != 2 || !math.IsNaN(s.MeanVote) || !math.IsNaN(s.SETMeanC) {
		t.Errorf("%+v", s)
	}
	in.Indoor[0].OperativeC = nil
	z = Sense(in).Zones[0]
	if s := z.Summary; s.UnknownH != 2 || !math.IsNaN(z.VoteAt(0)) || !z.AssumedHumidity(0) {
		t.Errorf("%+v", s)
	}
}
