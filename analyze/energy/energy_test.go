package energy

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

var nan = math.NaN()

// small is one unit that serves two zones for eight hours. Hours: 0 off; 1, 2
// cooling while one could be open; 3, 4 cooling while both could; 5 moving air
// while both could; 6 cooling, nothing missed, one window open; 7 unknown.
func small(ratedKW float64, metered []float32) Input {
	const n = 8
	g := &grid.Grid{StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC}
	s := &site.Site{Zones: []site.Zone{{ID: "a"}, {ID: "b"}}, Plant: []site.Plant{{ID: "unit", Serves: []string{"a", "b"}, RatedPowerKW: ratedKW}},
		Energy: site.Energy{PricePerKWh: 0.25, Currency: "EUR", CarbonKgPerKWh: nan}}
	cool, vent := uint8(site.PlantCool), uint8(site.PlantVent)
	states := []uint8{0, cool, cool, cool, cool, vent, cool, running.PlantUnknown}
	run := &running.Result{Units: [][]uint8{states}}
	rec := &hours.Record{}
	for z := range 2 {
		zone := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: states}
		class := make([]hours.Class, n)
		for i := range n {
			zone.State[i], zone.Occupied[i], class[i] = running.Mech, running.Occupied, hours.NotNeeded
		}
		for _, i := range []int{3, 4, 5} {
			class[i] = hours.MissedCool
		}
		if z == 0 {
			class[1], class[2] = hours.MissedCool, hours.MissedCool
			zone.State[6] = running.Both
		}
		run.Zones, rec.Class = append(run.Zones, zone), append(rec.Class, class)
	}
	if metered != nil {
		s.Points = []site.Point{{Owner: site.OwnerPlant, Index: 0, Quantity: site.ElectricPower}}
		g.Columns = []grid.Column{{Mean: metered, CoveredS: make([]uint16, n)}}
	}
	return Input{Site: s, Grid: g, Running: run, Record: rec}
}

func same(t *testing.T, what string, got, want Range) {
	t.Helper()
	if math.Abs(got.Value-want.Value) > 1e-9 || math.Abs(got.Low-want.Low) > 1e-9 || math.Abs(got.High-want.High) > 1e-9 {
		t.Errorf("%s: %+v, want %+v", what, got, want)
	}
}

// By hand: 10 kW metered throughout (6 while moving air, 1 standby). Two hours
// count half at most whole and at least nothing, two count whole; the meter may be
// off by 2 %.
func TestMetered(t *testing.T) {
	r := Assess(small(nan, []float32{1, 10, 10, 10, 10, 6, 10, float32(nan)}))
	u := r.Units[0]
	if u.Source != metered || u.RunH != 6 || u.KnownH != 6 || !r.AnythingMetered {
		t.Errorf("%+v", u)
	}
	same(t, "used", u.Used, Range{57, 55.86, 58.14})
	same(t, "missed while conditioning", u.MissedConditioned, Range{30, 19.6, 40.8})
	same(t, "missed while moving air", u.MissedVentilated, Range{6, 5.88, 6.12})
	same(t, "clash", u.Clash, Range{5, 0, 10.2})
	same(t, "money", *r.MissedMoney, Range{9, 6.37, 11.73})
	if r.MissedCarbonKg != nil {
		t.Error("carbon without a factor")
	}
}

// By hand: 20 kW rated is 10 (3 to 20) kW while cooling, 5 (1 to 10) while
// moving air; the hour of unknown state counts nowhere.
func TestRated(t *testing.T) {
	u := Assess(small(20, nil)).Units[0]
	same(t, "used", u.Used, Range{55, 16, 110})
	same(t, "missed while conditioning", u.MissedConditioned, Range{30, 6, 80})
	same(t, "missed while moving air", u.MissedVentilated, Range{5, 1, 10})
	same(t, "clash", u.Clash, Range{5, 0, 20})
}

func TestNotKnown(t *testing.T) {
	r := Assess(small(nan, nil))
	if len(r.Unknown) != 1 || r.Unknown[0] != "unit" || r.Units[0].Source != "" || r.Used.High != 0 {
		t.Errorf("%+v", r)
	}
}
