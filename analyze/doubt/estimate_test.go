package doubt

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"gonum.org/v1/gonum/stat/distuv"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

var nan = math.NaN()

func settings() criteria.Settings {
	return criteria.Settings{
		OutdoorLowC: 12.8, RiseK: 1, DewPointMaxC: 17, WindMaxMS: 10, MinSuitedRunMin: 0, OpenThreshold: 0.05, StepCoverageMin: 0.5,
		Headline: "en16798-1", Category: "II", AdaptiveAfterH: 1, FanSpeedMS: 0.9, MetabolicMet: 1.2, ClothingClo: 0.5, AirSpeedMS: 0.1,
		CO2AboveOutdoorPPM: 800, OutdoorCO2PPM: 425, OutdoorCO2DoubtPPM: 30,
		AccuracyOutdoorTempK: 0.5, AccuracyIndoorTempK: 0.5, AccuracyHumidityPct: 5, AccuracyCO2PPM: 50, AccuracyCO2Pct: 3,
	}
}

// readings are the true weather and rooms of a site with hourly steps; zones
// stand open by day and are shut with the plant off by night.
type readings struct {
	outdoor, humidity []float64
	rooms, co2        [][]float64
}

func site60(zones, days int) *readings {
	r := &readings{}
	for h := range days * 24 {
		hour, day := float64(h%24), float64(h/24)
		swing := math.Cos(2 * math.Pi * (hour - 15) / 24)
		r.outdoor = append(r.outdoor, 16+5*math.Sin(day/7)+4*swing)
		r.humidity = append(r.humidity, 70-12*swing+8*math.Sin(day/3))
	}
	for z := range zones {
		var room, co2 []float64
		for h, t := range r.outdoor {
			room = append(room, 23.5+0.5*(t-14)+0.3*float64(z)+0.3*math.Sin(float64(h)/5))
			co2 = append(co2, 800+300*math.Sin(float64(h)/9+float64(z))+200*math.Sin(float64(h)/50))
		}
		r.rooms, r.co2 = append(r.rooms, room), append(r.co2, co2)
	}
	return r
}

// input measures the truth with errors added and judges it.
func (r *readings) input(c criteria.Settings, tempErr, rhErr float64, roomErr, co2Err []float64, noise func() float64) Input {
	n := len(r.outdoor)
	g := &grid.Grid{StartUTC: time.Date(2025, 5, 1, 0, 0, 0, 0, time.UTC).Unix(), StepS: 3600, N: n, PeriodFrom: 24 * 8, PeriodTo: n, Loc: time.UTC}
	s := &site.Site{Location: time.UTC, LatitudeDeg: 47, OutdoorCO2PPM: nan, StepS: 3600}
	add := func(owner site.OwnerKind, index int, q site.Quantity, value func(i int) float64) {
		s.Points = append(s.Points, site.Point{Owner: owner, Index: index, Quantity: q, Share: nan})
		col := grid.Column{Mean: make([]float32, n), CoveredS: make([]uint16, n)}
		for i := range col.Mean {
			col.Mean[i], col.CoveredS[i] = float32(value(i)), 3600
		}
		g.Columns = append(g.Columns, col)
	}
	add(site.OwnerSite, 0, site.OutdoorTemp, func(i int) float64 { return r.outdoor[i] + tempErr + noise()*c.AccuracyOutdoorTempK/10 })
	add(site.OwnerSite, 0, site.OutdoorHumidity, func(i int) float64 { return r.humidity[i] + rhErr + noise()*c.AccuracyHumidityPct/10 })
	s.Plant = []site.Plant{{ID: "unit"}}
	for z := range r.rooms {
		id := fmt.Sprint("z", z)
		s.Zones = append(s.Zones, site.Zone{ID: id, People: 5, AreaM2: nan, HeightM: nan, FanSpeedMS: nan, Openings: site.Openings{Outdoors: true}})
		s.Plant[0].Serves = append(s.Plant[0].Serves, id)
		add(site.OwnerZone, z, site.AirTemp, func(i int) float64 { return r.rooms[z][i] + roomErr[z] + noise()*c.AccuracyIndoorTempK/10 })
		add(site.OwnerZone, z, site.CO2, func(i int) float64 { return r.co2[z][i] + co2Err[z] + noise()*c.AccuracyCO2PPM/10 })
		add(site.OwnerZone, z, site.Window, func(i int) float64 {
			if h := i % 24; h >= 9 && h < 19 {
				return 1
			}
			return 0
		})
	}
	add(site.OwnerPlant, 0, site.PlantStatus, func(int) float64 { return float64(site.PlantOff) })
	s.Occupancy = site.Occupancy{Source: site.BySchedule, Times: []site.Times{{FromMin: 0, ToMin: 1440, Days: [7]bool{true, true, true, true, true, true, true}}}}
	cal := calendar.Of(g)
	list, _ := hours.Clock(g, cal)
	in := Input{Calendar: cal, Seed: 1}
	in.Input = hours.Input{Site: s, Criteria: c, Grid: g, Calendar: cal, Hours: list}
	in.Outdoor = outdoor.Measure(s, c, g, cal)
	in.Indoor = indoor.Combine(s, c, g)
	in.Running = running.Judge(s, c, g, cal, in.Indoor)
	in.Exceedance = exceedance.Limit(s, c, g, in.Outdoor, in.Running)
	in.Potential = potential.Judge(s, c, g, cal, in.Outdoor, in.Running, in.Exceedance)
	in.Weights = in.Running.Weights
	return in
}

func none() float64 { return 0 }

// Without errors the counts are those of the hourly record.
func TestCountsAreTheRecords(t *testing.T) {
	in := site60(2, 60).input(settings(), 0, 0, []float64{0, 0}, []float64{0, 0}, none)
	in.Input.Calendar = in.Calendar
	rec := hours.Make(in.Input)
	sum := hours.Sum(rec, in.Grid, in.Calendar, in.Running)
	r := Estimate(in)
	for z := range sum.Zones {
		got, want := r.Zones[z], sum.Zones[z].H
		for _, c := range []struct {
			what string
			got  float64
			col  hours.Col
		}{{"suited", got.SuitedH.Value, hours.CSuited}, {"achieved", got.AchievedH.Value, hours.CAchieved}, {"ok", got.AchievedOKH.Value, hours.CAchievedOK},
			{"missed", got.MissedH.Value, hours.CMissed}, {"not needed", got.NotNeededH.Value, hours.CNotNeeded}} {
			if math.Abs(c.got-want[c.col]) > 1e-9 || want[hours.CSuited] == 0 {
				t.Errorf("zone %d %s: %g, the record says %g", z, c.what, c.got, want[c.col])
			}
		}
	}
}

// Outdoor air that warms by 0.01 K an hour from 5 to 20 °C is suited from
// 12.8 °C on: an error of b K moves the beginning by 100 b hours, so that the
// standard deviation of the suited hours is 100 times that of the error, half
// of 0.5 K. (Arithmetic on the rule, nothing else.)
func TestSpreadOfASlope(t *testing.T) {
	r := &readings{rooms: [][]float64{nil}, co2: [][]float64{nil}}
	for h := range 1500 {
		r.outdoor = append(r.outdoor, 5+0.01*float64(h))
		r.humidity = append(r.humidity, 40)
		r.rooms[0], r.co2[0] = append(r.rooms[0], 22), append(r.co2[0], 600)
	}
	got := Estimate(r.input(settings(), 0, 0, []float64{0}, []float64{0}, none)).Zones[0].SuitedH
	want := distuv.UnitNormal.Quantile(0.95) * 0.25 * 100
	if half := got.HalfWidth[OutdoorTemp]; math.Abs(half-want) > 0.05*want {
		t.Errorf("half width %g h, want %g", half, want)
	}
	if got.HalfWidth[IndoorTemp] != 0 || got.HalfWidth[CO2] != 0 {
		t.Errorf("sensors indoors moved the weather: %v", got.HalfWidth)
	}
}

// Sensors of like zones err independently: the mean of four has half the
// spread of one.
func TestZonesErrIndependently(t *testing.T) {
	r := site60(1, 60)
	for len(r.rooms) < 4 {
		r.rooms, r.co2 = append(r.rooms, r.rooms[0]), append(r.co2, r.co2[0])
	}
	zero := make([]float64, 4)
	e := Estimate(r.input(settings(), 0, 0, zero, zero, none))
	one, all := e.Zones[0].AchievedOKH.HalfWidth, e.Building.AchievedOKH.HalfWidth
	for _, p := range []Part{IndoorTemp, CO2} {
		if one[p] == 0 || math.Abs(all[p]/one[p]-0.5) > 0.1 {
			t.Errorf("%v: %g for one zone, %g for four", p, one[p], all[p])
		}
	}
	if math.Abs(all[OutdoorTemp]-one[OutdoorTemp]) > 0.1*one[OutdoorTemp] {
		t.Errorf("outdoors: %g for one zone, %g for four", one[OutdoorTemp], all[OutdoorTemp])
	}
}

// With sensors that err as assumed, the truth lies in the 90 % interval nine
// times in ten. The share over the seeds is shown with its own 95 % interval;
// it must not lie below 85 %.
func TestIntervalsHoldTheTruth(t *testing.T) {
	const sites = 120
	c := settings()
	truth := site60(2, 60)
	zero := []float64{0, 0}
	want := Estimate(truth.input(c, 0, 0, zero, zero, none))
	hit := map[string]int{}
	for seed := range uint64(sites) {
		rng := rand.New(rand.NewPCG(seed, 7))
		err := func(accuracy float64) float64 { return rng.NormFloat64() * accuracy / 2 }
		in := truth.input(c, err(c.AccuracyOutdoorTempK), err(c.AccuracyHumidityPct),
			[]float64{err(c.AccuracyIndoorTempK), err(c.AccuracyIndoorTempK)}, []float64{err(math.Hypot(80, 30)), err(math.Hypot(80, 30))}, rng.NormFloat64)
		in.Seed = seed
		got := Estimate(in)
		for what, pair := range map[string][2]Interval{
			"suited": {got.Zones[0].SuitedH, want.Zones[0].SuitedH}, "achieved": {got.Zones[0].AchievedH, want.Zones[0].AchievedH},
			"achieved and fine": {got.Building.AchievedOKH, want.Building.AchievedOKH}, "missed": {got.Building.MissedH, want.Building.MissedH},
		} {
			if v := pair[1].Value; v >= pair[0].Low && v <= pair[0].High {
				hit[what]++
			}
		}
	}
	for what, n := range hit {
		share := float64(n) / sites
		half := 1.96 * math.Sqrt(share*(1-share)/sites)
		t.Logf("%-18s %.1f %% (±%.1f) of %d sites inside the 90 %% interval", what, 100*share, 100*half, sites)
		if share < 0.85 {
			t.Errorf("%s: only %.1f %% inside", what, 100*share)
		}
	}
	if len(hit) != 4 {
		t.Fatal("nothing was compared")
	}
}

func TestSameSeedSameIntervals(t *testing.T) {
	in := site60(2, 40).input(settings(), 0, 0, []float64{0, 0}, []float64{0, 0}, none)
	if a, b := Estimate(in), Estimate(in); fmt.Sprint(a) != fmt.Sprint(b) {
		t.Error("the same seed gave other intervals")
	}
}
