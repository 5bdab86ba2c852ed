package freshair

import (
	"math"
	"strings"
	"testing"
	"time"

	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

const stepH = 1.0 / 12

// room is one zone of 200 m3 for ten people over some days, occupied from
// 09:00 to 17:00, vacant and mechanical else, at 420 ppm.
func room(days int) Input {
	n := days * 288
	z := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: make([]uint8, n), OpenShare: make([]float32, n)}
	co2 := make([]float32, n)
	for i := range co2 {
		co2[i] = 420
		z.State[i] = running.Mech
		z.Plant[i] = uint8(site.PlantVent)
		if h := i % 288; h >= 9*12 && h < 17*12 {
			z.Occupied[i] = running.Occupied
		}
	}
	return Input{
		Site:     &site.Site{Zones: []site.Zone{{ID: "A", AreaM2: 80, HeightM: 2.5, People: 10}}},
		Criteria: criteria.Settings{CO2AboveOutdoorPPM: 800, OutdoorCO2DoubtPPM: 30, CO2PerPersonLs: 0.0052, DecayStartAbovePPM: 200, MinDecayEvents: 3},
		Grid:     &grid.Grid{StepS: 300, N: n, PeriodTo: n, Loc: time.UTC},
		Outdoor:  &outdoor.Outdoor{CO2DefaultPPM: 420, CO2Source: "site file"},
		Indoor:   []indoor.Zone{{CO2PPM: co2}},
		Running:  &running.Result{Zones: []running.Zone{z}},
	}
}

// decay writes the fall of CO2 from 17:00 of a day, as means over the steps.
func decay(in Input, day int, startPPM, perH float64, s running.State) {
	for k := 0; k < 7*12; k++ {
		i := day*288 + 17*12 + k
		a := perH * stepH
		level := (startPPM - 420) * math.Exp(-a*float64(k)) * (1 - math.Exp(-a)) / a
		in.Indoor[0].CO2PPM[i] = float32(420 + level)
		in.Running.Zones[0].State[i] = s
	}
}

func TestRatesPerState(t *testing.T) {
	in := room(8)
	for day, perH := range []float64{1.0, 1.1, 1.2, 1.5} {
		decay(in, day, 1300, perH, running.Mech)
	}
	for day := 4; day < 6; day++ {
		decay(in, day, 1300, 4, running.Open)
	}
	z := Assess(in).Zones[0]
	m := z.AirChange[running.Mech]
	if m.Events != 4 || math.Abs(m.MedianPerH-1.15) > 1e-3 || math.Abs(m.FromPerH-1) > 1e-3 || math.Abs(m.ToPerH-1.5) > 1e-3 || m.Way != ByDecay {
		t.Errorf("mechanical: %+v", m)
	}
	// 1.15 per hour of 200 m3.
	if math.Abs(m.FlowLs-1.15*200/3.6) > 0.1 || math.Abs(m.FlowLsPerson-m.FlowLs/10) > 1e-9 {
		t.Errorf("flow %v L/s, %v per person", m.FlowLs, m.FlowLsPerson)
	}
	if m.MedianR2 < 0.999 || m.Points < 4*decayPointsMin {
		t.Errorf("fit: R2 %v, %d points", m.MedianR2, m.Points)
	}
	if !(m.OutdoorLowPerH < m.MedianPerH && m.MedianPerH < m.OutdoorHighPerH) {
		t.Errorf("doubt in the outdoor level: %v to %v", m.OutdoorLowPerH, m.OutdoorHighPerH)
	}
	o := z.AirChange[running.Open]
	if o.Events != 2 || !math.IsNaN(o.MedianPerH) || !strings.Contains(o.NotMeasurable, "2 usable decays, at least 3 needed") {
		t.Errorf("open: two decays are not enough: %+v", o)
	}
	if both := z.AirChange[running.Both]; both.NotMeasurable != "the room never emptied in this state" {
		t.Errorf("both: %q", both.NotMeasurable)
	}
}

func TestDecayEndsWithItsState(t *testing.T) {
	in := room(4)
	for day := 0; day < 4; day++ {
		decay(in, day, 1300, 1, running.Mech)
		// A window opens ten minutes after: two readings are no decay.
		for k := 2; k < 7*12; k++ {
			in.Running.Zones[0].State[day*288+17*12+k] = running.Both
		}
	}
	z := Assess(in).Zones[0]
	if a := z.AirChange[running.Mech]; a.Events != 0 || !strings.Contains(a.NotMeasurable, "too few readings") {
		t.Errorf("%+v", a)
	}
	if a := z.AirChange[running.Both]; a.Events != 4 {
		t.Errorf("the rest of the fall counts for the state it was in: %+v", a)
	}
}

func TestPeopleWhoStayLate(t *testing.T) {
	in := room(4)
	people := make([]float32, in.Grid.N)
	in.Indoor[0].People = people
	for day := 0; day < 4; day++ {
		decay(in, day, 1300, 1, running.Mech)
		for k := 0; k < 4*12; k++ { // ten people stay until 21:00
			people[day*288+17*12+k] = 10
		}
	}
	if a := Assess(in).Zones[0].AirChange[running.Mech]; a.Events != 0 {
		t.Errorf("the room was not empty: %+v", a)
	}
}

func TestLevelsAndBoundary(t *testing.T) {
	in := room(1)
	co2 := in.Indoor[0].CO2PPM
	for k := 0; k < 96; k++ {
		i := 9*12 + k
		in.Running.Zones[0].State[i] = running.Open
		switch {
		case k < 48:
			co2[i] = 970 // 550 above outdoors: still category I
		case k < 91:
			co2[i] = 970.01
		case k < 94:
			co2[i] = 2000
		default:
			co2[i] = float32(math.NaN())
		}
	}
	r := Assess(in)
	l := r.Zones[0].State[running.Open]
	if l != r.Zones[0].All {
		t.Errorf("one state only: %+v in it, %+v in all", l, r.Zones[0].All)
	}
	want := Levels{KnownH: 94 * stepH, UnknownH: 2 * stepH, AboveCatH: [4]float64{46 * stepH, 3 * stepH, 3 * stepH, 3 * stepH}, Category: "II"}
	if math.Abs(l.KnownH-want.KnownH) > 1e-9 || math.Abs(l.UnknownH-want.UnknownH) > 1e-9 || l.Category != want.Category {
		t.Errorf("got %+v", l)
	}
	for k := range want.AboveCatH {
		if math.Abs(l.AboveCatH[k]-want.AboveCatH[k]) > 1e-9 {
			t.Errorf("category %d: %v h above, want %v", k, l.AboveCatH[k], want.AboveCatH[k])
		}
	}
	for k, level := range r.CurvePPM {
		got := r.Zones[0].Curve[running.Open][k]
		w := 0.0
		switch {
		case level < 970:
			w = 1
		case level < 2000:
			w = 3.0 / 94
		}
		if math.Abs(got-w) > 1e-9 {
			t.Fatalf("above %v ppm: %v, want %v", level, got, w)
		}
	}
	if !math.IsNaN(r.Zones[0].Curve[running.Shut][0]) || r.Zones[0].State[running.Shut].Category != "" {
		t.Error("a state that never was has no figures")
	}
}

func TestFewPeople(t *testing.T) {
	in := room(1)
	if z := Assess(in).Zones[0]; !z.FewPeople || !math.IsNaN(z.PeopleMean) {
		t.Error("people not counted: caution")
	}
	people := make([]float32, in.Grid.N)
	in.Indoor[0].People = people
	for i := range people {
		people[i] = 5
	}
	if z := Assess(in).Zones[0]; z.FewPeople || z.PeopleMean != 5 {
		t.Errorf("half the usual number is not few: %+v", z.PeopleMean)
	}
	for i := range people {
		people[i] = 4
	}
	if z := Assess(in).Zones[0]; !z.FewPeople {
		t.Error("four of ten are few")
	}
}

func TestNothingLogged(t *testing.T) {
	in := room(2)
	in.Indoor[0].CO2PPM = nil
	z := Assess(in).Zones[0]
	if z.HasCO2 || z.All.KnownH != 0 || z.All.UnknownH != 16 || z.AirChange[running.Mech].NotMeasurable != "CO2 is not logged in this zone" {
		t.Errorf("%+v", z)
	}
}

// What is left of a room whose neighbour exchanges air with it: V dC/dt =
// Q (Co - C) + q (Cn - C). With the neighbour kept at a share s of the room's
// excess the room falls by Q/V + (1 - s) q/V, which is what a decay finds; each
// 10 L/s of q is stated with its part.
func TestNeighboursStated(t *testing.T) {
	const volume, ownLs, doorLs, share = 180.0, 30.0, 20.0, 0.4
	want := (ownLs + (1-share)*doorLs) * 3.6 / volume
	in := decaying(t, want, share)
	in.Site.Zones[0].AreaM2, in.Site.Zones[0].HeightM = 60, 3
	z := Assess(in).Zones[0]
	a := z.AirChange[running.Shut]
	near(t, "rate", a.MedianPerH, want, 0.01)
	near(t, "share", z.NeighbourShare[running.Shut], share, 0.01)
	near(t, "10 L/s", a.NeighbourPer10LsPerH, (1-share)*10*3.6/volume, 0.01)
	near(t, "own air", a.MedianPerH-a.NeighbourPer10LsPerH*doorLs/10, ownLs*3.6/volume, 0.02)
	if !math.IsNaN(z.NeighbourShare[running.Open]) || a.UpperOnly {
		t.Errorf("%+v", z.NeighbourShare)
	}
	in.Running.Zones[0].NoOpening = true
	if a := Assess(in).Zones[0].AirChange[running.Shut]; !a.UpperOnly {
		t.Error("a closed room without openings has no outdoor air of its own")
	}
}

// decaying is a room of 4 evenings in which CO2 falls at a rate, beside one
// that stays at a share of its excess.
func decaying(t *testing.T, perH, share float64) Input {
	t.Helper()
	const perDay, days = 288, 4
	n := perDay * days
	room, other := make([]float32, n), make([]float32, n)
	run := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: make([]uint8, n), OpenShare: make([]float32, n)}
	for i := range n {
		excess := 900.0
		if h := float64(i%perDay)/12 - 18; h >= 0 {
			excess *= math.Exp(-perH * h)
		} else {
			run.Occupied[i] = running.Occupied
		}
		room[i], other[i], run.State[i] = float32(425+excess), float32(425+share*excess), running.Shut
	}
	loc := time.FixedZone("standard", 3600)
	return Input{Site: &site.Site{Zones: []site.Zone{{ID: "A", Floor: "1", People: 5}, {ID: "B", Floor: "1"}}}, Criteria: demoSettings(),
		Grid:    &grid.Grid{StartUTC: time.Date(2025, 3, 3, 0, 0, 0, 0, loc).Unix(), StepS: 300, N: n, PeriodTo: n, Loc: loc},
		Outdoor: &outdoor.Outdoor{CO2DefaultPPM: 425}, Indoor: []indoor.Zone{{CO2PPM: room}, {CO2PPM: other}},
		Running: &running.Result{Zones: []running.Zone{run, run}}}
}
