package leaders

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// hall is a hand-made building: three rooms and one unit, which starts whenever
// room C passes 25 °C and runs for an hour. What is expected follows from that.
func hall(seed uint64) Input {
	const days, perDay = 56, 288
	n := days * perDay
	rng := rand.New(rand.NewPCG(seed, 1))
	start := time.Date(2031, 3, 3, 0, 0, 0, 0, time.UTC)
	g := &grid.Grid{StartUTC: start.Unix(), StepS: 300, N: n, PeriodTo: n, Loc: time.UTC}
	in := Input{Site: &site.Site{Plant: []site.Plant{{ID: "U", Serves: []string{"A", "B", "C"}}}}, Grid: g, Calendar: calendar.Of(g),
		Outdoor: &outdoor.Outdoor{TempC: make([]float32, n)}, Running: &running.Result{}, Exceedance: &exceedance.Result{},
		Record: &hours.Record{}, Lost: &lost.Result{Patterns: make([]lost.Pattern, 3)}, Seed: 1}
	plant := make([]uint8, n)
	temps := [3][]float32{make([]float32, n), make([]float32, n), make([]float32, n)}
	occ := make([]running.Occupancy, n)
	for d := range days {
		if d%7 >= 5 {
			continue
		}
		begin := 120 + rng.IntN(60) // room C passes 25 °C at another time every day, on two days of three
		warm := d%3 != 0
		for m := range perDay {
			i := d*perDay + m
			in.Outdoor.TempC[i] = 18
			if m >= 96 && m < 216 {
				occ[i] = running.Occupied
			}
			temps[0][i], temps[1][i], temps[2][i] = 23, 23.2, 23.6
			if !warm {
				continue
			}
			switch {
			case m >= begin-12 && m < begin:
				temps[2][i] = 25 + 0.1*float32(m-begin)
			case m >= begin && m < begin+12:
				temps[2][i] = 25
				plant[i] = uint8(site.PlantCool)
			}
		}
	}
	for z, id := range []string{"A", "B", "C"} {
		in.Site.Zones = append(in.Site.Zones, site.Zone{ID: id, People: float64(10 * (z + 1))})
		in.Indoor = append(in.Indoor, indoor.Zone{OperativeC: temps[z]})
		limit := make([]float32, n)
		class := make([]hours.Class, n)
		for i := range limit {
			limit[i] = 26
			if occ[i] == running.Occupied && plant[i] != 0 {
				class[i] = hours.MissedCool
			}
		}
		in.Exceedance.Zones = append(in.Exceedance.Zones, exceedance.Zone{Limits: exceedance.Limits{HighC: limit, UpperOfDayC: limit}})
		in.Running.Zones = append(in.Running.Zones, running.Zone{Occupied: occ, Plant: plant})
		in.Record.Class = append(in.Record.Class, class)
	}
	in.Running.Units = [][]uint8{plant}
	in.Changeover = &changeover.Result{Units: []changeover.Subject{{ID: "U", Closing: changeover.Direction{Limits: []changeover.Limit{{Zone: 2, Above: true, LevelC: 25}}}}}}
	return in
}

func TestOneRoomCloses(t *testing.T) {
	r := Find(hall(1))
	if len(r.Leaders) != 1 || r.Leaders[0].Zone != 2 {
		t.Fatalf("%+v", r.Leaders)
	}
	l := r.Leaders[0]
	starts := len(r.Starts)
	if l.Starts != starts || starts < 25 || r.Units[0].Led != starts {
		t.Errorf("%d of %d starts led", l.Starts, starts)
	}
	// An hour of each of two other rooms per start, with 10 and 20 people.
	if want := 2 * float64(starts); math.Abs(l.LostH-want) > 1e-6 || math.Abs(l.AloneH-want) > 1e-6 || math.Abs(l.LostPersonH-30*float64(starts)) > 1e-6 {
		t.Errorf("lost %v h, alone %v h, %v person-hours of %d starts", l.LostH, l.AloneH, l.LostPersonH, starts)
	}
	// 24.9 °C just before against 23.6 °C at other moments; the others never move.
	if e := l.ExcessK; math.Abs(e.Value-1.3) > 0.15 || e.Low > e.Value || e.High < e.Value || math.Abs(l.OthersExcessK.Value) > 1e-4 {
		t.Errorf("excess %+v, others %+v", e, l.OthersExcessK)
	}
	// Others lost two of the three missed hours of a start.
	if e := r.Explained[0]; math.Abs(e.Share.Value-2.0/3) > 1e-9 || e.Share.Low > 2.0/3+1e-9 || e.Share.High < 2.0/3-1e-9 {
		t.Errorf("explained %+v", e)
	}
	for name, x := range map[string]Instead{"ignored": l.Ignored, "moved": l.Moved, "two calls": l.TwoCalls} {
		if x.RunsAvoided != starts || math.Abs(x.FreedH-l.LostH) > 1e-6 {
			t.Errorf("%s: %+v", name, x)
		}
	}
	// It would have gone on warming by up to 1.2 K in the hour: beyond 26 °C for a
	// short while at most, and not if it stayed at 25 °C.
	if l.Ignored.OwnWarmLowH != 0 || l.Ignored.OwnWarmHighH <= 0 || l.Ignored.OwnWarmHighH > float64(starts) {
		t.Errorf("own warm %v to %v h", l.Ignored.OwnWarmLowH, l.Ignored.OwnWarmHighH)
	}
}

// With a second room that calls at the same time nothing is gained by ignoring
// the first, nor by asking for two calls; outdoors beyond a limit leads to
// nobody.
func TestOtherReasons(t *testing.T) {
	in := hall(2)
	copy(in.Indoor[1].OperativeC, in.Indoor[2].OperativeC)
	in.Changeover.Units[0].Closing.Limits = append(in.Changeover.Units[0].Closing.Limits, changeover.Limit{Zone: 1, Above: true, LevelC: 25})
	for _, l := range Find(in).Leaders {
		if l.AloneH != 0 || l.Ignored.FreedH != 0 || l.TwoCalls.FreedH != 0 {
			t.Errorf("two rooms call: %+v", l)
		}
	}
	in = hall(3)
	in.Changeover.Units[0].Closing.Limits = []changeover.Limit{{Zone: -1, Above: true, LevelC: 17}}
	r := Find(in)
	if len(r.Leaders) != 0 || r.Units[0].ByOutdoors != len(r.Starts) {
		t.Errorf("outdoors: %+v", r.Units)
	}
}

// Unknown temperatures and people stay unknown.
func TestUnknown(t *testing.T) {
	in := hall(4)
	in.Site.Zones[0].People = math.NaN()
	for i := range in.Indoor[1].OperativeC {
		in.Indoor[1].OperativeC[i] = float32(math.NaN())
	}
	l := Find(in).Leaders[0]
	if !math.IsNaN(l.LostPersonH) || math.IsNaN(l.LostH) {
		t.Errorf("%+v", l)
	}
}
