package longterm

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/comfort"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

var nan = math.NaN()

// hourly makes a site of occupied hours from a day on: one temperature list
// and limits per zone.
func hourly(from time.Time, runningMeanC float64, people []float64, low, high float32, temps ...[]float32) Input {
	n := len(temps[0])
	g := &grid.Grid{StartUTC: from.Unix(), StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC}
	cal := calendar.Of(g)
	in := Input{Site: &site.Site{Location: time.UTC, LatitudeDeg: 47}, Grid: g, Calendar: cal, Outdoor: &outdoor.Outdoor{DayOf: cal.DayOf},
		Criteria: criteria.Settings{Category: "II", MetabolicMet: 1.2, ClothingClo: 0.5, AirSpeedMS: 0.1},
		Running:  &running.Result{}, Exceedance: &exceedance.Result{}}
	for _, d := range cal.Days {
		in.Outdoor.Days = append(in.Outdoor.Days, outdoor.Day{Date: d.Date, RunningMeanENC: runningMeanC, SixAMC: 15})
	}
	for z, list := range temps {
		in.Site.Zones = append(in.Site.Zones, site.Zone{ID: string(rune('A' + z)), People: people[z], AreaM2: 10})
		occ := make([]running.Occupancy, n)
		lim := exceedance.Limits{LowC: make([]float32, n), HighC: make([]float32, n)}
		for i := range occ {
			occ[i], lim.LowC[i], lim.HighC[i] = running.Occupied, low, high
		}
		in.Running.Zones = append(in.Running.Zones, running.Zone{Occupied: occ})
		in.Exceedance.Zones = append(in.Exceedance.Zones, exceedance.Zone{Limits: lim})
		in.Indoor = append(in.Indoor, indoor.Zone{OperativeC: list})
	}
	in.sense()
	return in
}

// sense works out what people would be predicted to feel.
func (in *Input) sense() {
	in.Predicted = predicted.Sense(predicted.Input{Site: in.Site, Criteria: in.Criteria, Grid: in.Grid, Outdoor: in.Outdoor, Indoor: in.Indoor, Running: in.Running})
}

func near(t *testing.T, what string, got, want, within float64) {
	t.Helper()
	if !(math.Abs(got-want) <= within) {
		t.Errorf("%s: %g, want %g", what, got, want)
	}
}

// CIBSE TM52:2013 section 6.1.2, worked by hand at a running mean of 16 °C
// (T_max 27.08 °C): six hours with a rounded excess of 1 K or more, daily
// weighted exceedance 13, greatest excess 4 K.
func TestTM52Day(t *testing.T) {
	r := Assess(hourly(time.Date(2025, 7, 1, 9, 0, 0, 0, time.UTC), 16, []float64{1}, 20, 27,
		[]float32{26.2, 27.0, 27.6, 28.3, 29.4, 30.6, 29.9, 28.6, 27.4}))
	tm := r.Zones[0].TM52
	near(t, "H_e", tm.ExceededH, 6, 1e-9)
	near(t, "W_e", tm.WorstDayKh, 13, 1e-9)
	near(t, "greatest excess", tm.MaxExcessK, 4, 1e-9)
	if tm.Fails != [3]bool{true, true, false} || !tm.Overheats {
		t.Errorf("criteria %v, overheats %v; want the first two to fail", tm.Fails, tm.Overheats)
	}
	if got := r.Zones[0].TM52Date; got != (site.Date{Year: 2025, Month: 7, Day: 1}) {
		t.Errorf("worst day %v", got)
	}
}

// ISO 7730:2005 Annex H, method B, limit 26 °C and optimum 24.5 °C (so limits
// 23 to 26): hourly 25.5, 26.0, 26.5, 27.0, 28.0 weigh 1.3333, 1.6667 and
// 2.3333 beyond the limit, 5.3333 together; method A counts three hours.
// Methods D and E: the mean and the sum of PPD over the same hours.
func TestISO7730AnnexH(t *testing.T) {
	temps := []float32{25.5, 26.0, 26.5, 27.0, 28.0}
	z := Assess(hourly(time.Date(2025, 7, 1, 9, 0, 0, 0, time.UTC), 20, []float64{1}, 23, 26, temps)).Zones[0]
	near(t, "A", z.OutsideH.Warm, 3, 1e-9)
	near(t, "B", z.WeightedH.Warm, 5.3333, 1e-4)
	if z.OutsideH.Cool != 0 || z.WeightedH.Cool != 0 {
		t.Errorf("cool side %+v %+v", z.OutsideH, z.WeightedH)
	}
	var sum, weighted float64
	for _, x := range temps {
		v := comfort.PMV(comfort.Conditions{AirC: float64(x), RadiantC: float64(x), AirSpeedMS: comfort.RelativeAirSpeedMS(0.1, 1.2), RHPct: 50, Met: 1.2, Clo: comfort.DynamicClo(0.5, 1.2)})
		sum += comfort.PPD(v)
		if v > 0.5 {
			weighted += comfort.PPD(v) / comfort.PPD(0.5)
		}
	}
	near(t, "C", z.PPDWeightedH.Warm, weighted, 1e-6)
	near(t, "D", z.MeanPPDPct, sum/5, 1e-6)
	near(t, "E", z.SumPPDPctH, sum, 1e-6)
	near(t, "hours with a vote", z.VoteH, 5, 0)
}

// Two days of 24 h, the second a Monday: one warm hour in the first (4.2 %),
// two in the second (8.3 %), and one hour without a reading.
func TestDeviationPerSpan(t *testing.T) {
	temps := make([]float32, 48)
	for i := range temps {
		temps[i] = 24
	}
	temps[3], temps[30], temps[31], temps[40] = 27, 27, 27, float32(nan)
	z := Assess(hourly(time.Date(2025, 6, 1, 0, 0, 0, 0, time.UTC), 20, []float64{1}, 20, 26, temps)).Zones[0]
	near(t, "unknown", z.UnknownH, 1, 0)
	for i, want := range []Deviation{
		{Span: Day, Spans: 2, WorstShare: 2. / 23, WorstFrom: site.Date{Year: 2025, Month: 6, Day: 2}, Over3: 2, Over5: 1},
		{Span: Week, Spans: 2, WorstShare: 2. / 23, WorstFrom: site.Date{Year: 2025, Month: 6, Day: 2}, Over3: 2, Over5: 1},
		{Span: Month, Spans: 1, WorstShare: 3. / 47, WorstFrom: site.Date{Year: 2025, Month: 6, Day: 1}, Over3: 1, Over5: 1},
		{Span: Period, Spans: 1, WorstShare: 3. / 47, WorstFrom: site.Date{Year: 2025, Month: 6, Day: 1}, Over3: 1, Over5: 1},
	} {
		got := z.Deviations[i]
		if math.Abs(got.WorstShare-want.WorstShare) > 1e-12 {
			t.Errorf("%v: worst share %g, want %g", want.Span, got.WorstShare, want.WorstShare)
		}
		got.WorstShare = want.WorstShare
		if got != want {
			t.Errorf("got %+v, want %+v", got, want)
		}
	}
}

// Four people at 28 °C beside sixteen at 23: the mean of 24 °C is inside 20 to
// 26, one in five is not. With three people it is less than one in five.
func TestAverageHidesAFew(t *testing.T) {
	day := time.Date(2025, 7, 1, 9, 0, 0, 0, time.UTC)
	for _, tt := range []struct {
		few    float64
		hidden float64
	}{{4, 2}, {3, 0}} {
		s := Assess(hourly(day, 20, []float64{20 - tt.few, tt.few}, 20, 26, []float32{23, 23, float32(nan)}, []float32{28, 28, 24})).Spread
		near(t, "average inside", s.AverageInsideH, 3, 0)
		near(t, "hidden", s.HiddenH, tt.hidden, 0)
		near(t, "share outside", s.PersonOutsideShare.Value, 2*tt.few/(40+tt.few), 1e-12)
		near(t, "at least", s.PersonOutsideShare.Low, 2*tt.few/60, 1e-12)
		near(t, "at most", s.PersonOutsideShare.High, (2*tt.few+20-tt.few)/60, 1e-12)
		if tt.hidden > 0 && (len(s.Hidden) != 1 || s.Hidden[0].Zone != 1 || s.Hidden[0].WarmH != 2 || s.Hidden[0].PersonH != 8) {
			t.Errorf("hidden zones %+v", s.Hidden)
		}
	}
}

// EN 15251's lines end at a running mean of 10 and 30 °C: such days enter no
// criterion of TM52 and are counted. A southern season is November to March.
func TestTM52OutsideItsLines(t *testing.T) {
	for _, mean := range []float64{10, 30, 9, 33} {
		z := Assess(hourly(time.Date(2025, 7, 1, 9, 0, 0, 0, time.UTC), mean, []float64{1}, 20, 27, []float32{40, 40})).Zones[0]
		if z.TM52OutsideH != 2 || z.TM52.AnythingJudged || z.TM52.UnknownH != 0 {
			t.Errorf("running mean %g: %+v, outside %g h", mean, z.TM52, z.TM52OutsideH)
		}
	}
	for month, want := range map[time.Month]float64{time.July: 0, time.January: 2, time.October: 0, time.November: 2, time.March: 2} {
		in := hourly(time.Date(2025, month, 1, 9, 0, 0, 0, time.UTC), 20, []float64{1}, 20, 27, []float32{26, 26})
		in.Site.LatitudeDeg = -33
		if r := Assess(in); r.Zones[0].TM52.SeasonH != want || !r.Southern {
			t.Errorf("%s in the south: %g h in season, want %g", month, r.Zones[0].TM52.SeasonH, want)
		}
	}
}

// CIBSE TM59:2017: 3285 night hours a year allow 32 hours above 26 °C in a
// bedroom and not 33; day hours count for neither. A living room has only
// criterion a; a room without an opening is held to 3 % of its
// occupied hours; an office to nothing.
func TestHomes(t *testing.T) {
	year := func(hot int, use site.Use, canOpen bool) Home {
		temps := make([]float32, 365*24)
		nights := 0
		for i := range temps {
			temps[i] = 24
			if h := i % 24; (h >= 22 || h < 7) && nights < hot {
				temps[i] = 26.1
				nights++
			} else if h == 12 && i < 24*100 {
				temps[i] = 26.5
			}
		}
		in := hourly(time.Date(2025, 1, 1, 0, 0, 0, 0, time.UTC), 20, []float64{1}, 20, 27, temps)
		in.Site.Zones[0].Use = use
		in.Running.Zones[0].NoOpening = !canOpen
		return Assess(in).Zones[0].Home
	}
	if o := year(32, site.UseBedroom, true); o.NightH != 3285 || o.NightOver26H != 32 || !o.Known || !o.Passes {
		t.Errorf("32 h: %+v", o)
	}
	if o := year(33, site.UseBedroom, true); o.NightOver26H != 33 || !o.Known || o.Passes {
		t.Errorf("33 h: %+v", o)
	}
	if o := year(33, site.UseLiving, true); o.NightH != 0 || !o.Passes {
		t.Errorf("living room: %+v", o)
	}
	// 100 hours by day and 162 or 163 by night, of 8760: 3 % are 262.8.
	if o := year(162, site.UseBedroom, false); !o.Mechanical || o.Over26H != 262 || !o.Passes {
		t.Errorf("262 h: %+v", o)
	}
	if o := year(163, site.UseLiving, false); o.Passes {
		t.Errorf("263 h: %+v", o)
	}
	for _, use := range []site.Use{"", site.UseOther} {
		if o := year(400, use, true); o.NotApplicable == "" || o.Known || o.Passes {
			t.Errorf("office: %+v", o)
		}
	}
}

// Nothing known is no index, and nothing divides by it.
func TestNothingKnown(t *testing.T) {
	in := hourly(time.Date(2025, 7, 1, 9, 0, 0, 0, time.UTC), nan, []float64{nan}, float32(nan), float32(nan), []float32{24, 24})
	in.Indoor[0].OperativeC = nil
	in.sense()
	r := Assess(in)
	z := r.Zones[0]
	if z.KnownH != 0 || z.UnknownH != 2 || !math.IsNaN(z.MeanPPDPct) || z.TM52.AnythingJudged || z.Deviations[Period].Spans != 0 {
		t.Errorf("%+v", z)
	}
	if r.Spread.KnownH != 0 || !math.IsNaN(r.Spread.PersonOutsideShare.Value) || !math.IsNaN(r.RoomsWithin3) {
		t.Errorf("%+v", r.Spread)
	}
}
