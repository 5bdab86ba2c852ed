package hours

import (
	"math"
	"testing"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Every class, and what a step of another state, weather or reading lands in;
// the definitions are the project's own (DEVELOPERS, "How a step is judged").
// Limits: 20 to 26 °C, CO2 800 ppm above 425.
func TestClassOfAStep(t *testing.T) {
	const (
		o, m, b, s, u          = running.Open, running.Mech, running.Both, running.Shut, running.Unknown
		suited, cold, warm, un = potential.Suited, potential.TooCold, potential.TooWarm, potential.SuitUnknown
	)
	n := math.NaN()
	for _, tt := range []struct {
		name      string
		suit      potential.Suit
		state     running.State
		plant     site.PlantState
		temp, ppm float64
		outdoorC  float64
		want      Class
	}{
		{"open and fine", suited, o, 0, 24, 700, 18, AchievedOK},
		{"open and warm", suited, o, 0, 26.1, 700, 18, AchievedWarm},
		{"open and cool", suited, o, 0, 19.9, 1300, 18, AchievedCool},
		{"open and stale", suited, o, 0, 24, 1226, 18, AchievedStale},
		{"open, CO2 not known", suited, o, 0, 24, n, 18, AchievedUnassessed},
		{"open, temperature not known", suited, o, 0, n, 700, 18, AchievedUnassessed},
		{"windows open with plant", suited, b, site.PlantCool, 24, 700, 18, MissedBoth},
		{"cooling", suited, m, site.PlantCool, 24, 700, 18, MissedCool},
		{"ventilating", suited, m, site.PlantVent, 24, 700, 18, MissedVent},
		{"heating", suited, m, site.PlantHeat, 24, 700, 18, NotNeeded},
		{"plant of unknown kind, comfortable", suited, m, site.PlantOn, 24, 700, 18, MissedUntyped},
		{"plant of unknown kind, warm", suited, m, site.PlantOn, 27, 700, 18, MissedUntyped},
		{"plant of unknown kind, cool: heating", suited, m, site.PlantOn, 19, 700, 18, NotNeeded},
		{"plant of unknown kind, temperature not known", suited, m, site.PlantOn, n, 700, 18, UnjudgedSuited},
		{"shut and warm", suited, s, 0, 26.1, 700, 18, MissedShut},
		{"shut and stale", suited, s, 0, 24, 1226, 18, MissedShut},
		{"shut and stale, temperature not known", suited, s, 0, n, 1226, 18, MissedShut},
		{"shut and fine", suited, s, 0, 24, 700, 18, NotNeeded},
		{"shut, CO2 not known", suited, s, 0, 24, n, 18, UnjudgedSuited},
		{"shut, temperature not known", suited, s, 0, n, 700, 18, UnjudgedSuited},
		{"state not known", suited, u, 0, 24, 700, 18, UnjudgedSuited},
		{"cold, state not known", cold, u, 0, 24, 700, 5, Unjudged},
		{"weather not known", un, o, 0, 24, 700, n, Unjudged},
		{"open in the cold", cold, o, 0, 24, 700, 5, IllTimed},
		{"open with plant in the cold", cold, b, site.PlantHeat, 24, 700, 5, IllTimed},
		{"shut in the cold", cold, s, 0, 24, 700, 5, ClosedUnsuitedFresh},
		{"shut and stale in the cold", cold, s, 0, 24, 1226, 5, ClosedUnsuitedStale},
		{"cooling in the heat", warm, m, site.PlantCool, 24, 700, 30, ClosedUnsuitedFresh},
		{"open while outdoors is warmer than indoors", warm, o, 0, 27, 700, 27.1, IllTimed},
		{"open while outdoors is as warm", warm, o, 0, 27, 700, 27, ClosedUnsuitedFresh},
		{"open while it cools", warm, o, 0, 29, 700, 27, ClosedUnsuitedFresh},
		{"open in the heat, indoors not known", warm, o, 0, n, 700, 27, Unjudged},
	} {
		j := &judge{
			in:     &Input{Criteria: criteria.Settings{CO2AboveOutdoorPPM: 800}, Outdoor: &outdoor.Outdoor{TempC: []float32{float32(tt.outdoorC)}, CO2DefaultPPM: 425}},
			run:    &running.Zone{Occupied: []running.Occupancy{running.Occupied}, State: []running.State{tt.state}, Plant: []uint8{uint8(tt.plant)}},
			room:   &indoor.Zone{OperativeC: []float32{float32(tt.temp)}, CO2PPM: []float32{float32(tt.ppm)}},
			limits: &exceedance.Limits{Model: []exceedance.Model{exceedance.ENCooling}, LowC: []float32{20}, HighC: []float32{26}},
			suit:   []potential.Suit{tt.suit}, airing: []bool{false},
		}
		if got := j.class(0); got != tt.want {
			t.Errorf("%s: class %d, want %d", tt.name, got, tt.want)
		}
		if tt.want == IllTimed {
			j.airing[0] = true
			if got := j.class(0); got != ClosedUnsuitedFresh {
				t.Errorf("%s, a short airing: class %d", tt.name, got)
			}
		}
		j.run.NoOpening = true
		if got := j.class(0); got != NoOpening {
			t.Errorf("%s, no opening: class %d", tt.name, got)
		}
		j.run.Occupied[0] = running.Vacant
		if got := j.class(0); got != NotOccupied {
			t.Errorf("%s, vacant: class %d", tt.name, got)
		}
	}
	// A zone that logs no CO2 is judged by its temperature, and the other way
	// round; with neither nothing is known.
	for _, tt := range []struct {
		room indoor.Zone
		want Class
	}{
		{indoor.Zone{OperativeC: []float32{24}}, NotNeeded}, {indoor.Zone{CO2PPM: []float32{700}}, NotNeeded}, {indoor.Zone{}, UnjudgedSuited},
	} {
		j := &judge{in: &Input{Criteria: criteria.Settings{CO2AboveOutdoorPPM: 800}, Outdoor: &outdoor.Outdoor{CO2DefaultPPM: 425}}, room: &tt.room,
			run:    &running.Zone{Occupied: []running.Occupancy{running.Occupied}, State: []running.State{s}, Plant: []uint8{0}},
			limits: &exceedance.Limits{Model: []exceedance.Model{exceedance.ENCooling}, LowC: []float32{20}, HighC: []float32{26}},
			suit:   []potential.Suit{suited}, airing: []bool{false}}
		if got := j.class(0); got != tt.want {
			t.Errorf("%+v: class %d, want %d", tt.room, got, tt.want)
		}
	}
}

// Night purge: from 22:00 to 07:00 outside occupied time, indoors at least 23
// °C, outdoors at least 10 °C and at least 2 K cooler (settings of the test).
func TestNightPurge(t *testing.T) {
	n := math.NaN()
	c := criteria.Settings{PurgeFromH: 22, PurgeToH: 7, PurgeIndoorMinC: 23, PurgeDifferenceK: 2, PurgeOutdoorMinC: 10}
	for _, tt := range []struct {
		name         string
		minute       int
		indoor, outC float64
		occupied     running.Occupancy
		state        running.State
		plant        site.PlantState
		want         purgeUse
	}{
		{"first minute", 22 * 60, 24, 15, running.Vacant, running.Shut, 0, purgeOffered},
		{"before it", 22*60 - 5, 24, 15, running.Vacant, running.Shut, 0, purgeNone},
		{"last step", 7*60 - 5, 24, 15, running.Vacant, running.Shut, 0, purgeOffered},
		{"after it", 7 * 60, 24, 15, running.Vacant, running.Shut, 0, purgeNone},
		{"just warm enough", 0, 23, 15, running.Vacant, running.Shut, 0, purgeOffered},
		{"not warm enough", 0, 22.9, 15, running.Vacant, running.Shut, 0, purgeNone},
		{"just not too cold", 0, 24, 10, running.Vacant, running.Shut, 0, purgeOffered},
		{"too cold", 0, 24, 9.9, running.Vacant, running.Shut, 0, purgeNone},
		{"2 K cooler", 0, 24, 22, running.Vacant, running.Shut, 0, purgeOffered},
		{"hardly cooler", 0, 24, 22.1, running.Vacant, running.Shut, 0, purgeNone},
		{"somebody there", 0, 24, 15, running.Occupied, running.Open, 0, purgeNone},
		{"nobody knows whether", 0, 24, 15, running.OccupancyUnknown, running.Open, 0, purgeNone},
		{"windows open", 0, 24, 15, running.Vacant, running.Open, 0, purgeUsed},
		{"fans run", 0, 24, 15, running.Vacant, running.Mech, site.PlantVent, purgeUsed},
		{"windows and fans", 0, 24, 15, running.Vacant, running.Both, site.PlantVent, purgeUsed},
		{"cooling is no purge", 0, 24, 15, running.Vacant, running.Mech, site.PlantCool, purgeOffered},
		{"state not known", 0, 24, 15, running.Vacant, running.Unknown, 0, purgeUnknown},
		{"indoors not known", 0, n, 15, running.Vacant, running.Open, 0, purgeUnknown},
		{"outdoors not known", 0, 24, n, running.Vacant, running.Open, 0, purgeUnknown},
		{"outdoors not known, indoors cool", 0, 20, n, running.Vacant, running.Open, 0, purgeNone},
	} {
		in := &Input{Criteria: c, Grid: &grid.Grid{StepS: 300, N: 1}, Outdoor: &outdoor.Outdoor{TempC: []float32{float32(tt.outC)}},
			Indoor:   []indoor.Zone{{OperativeC: []float32{float32(tt.indoor)}}},
			Running:  &running.Result{Zones: []running.Zone{{Occupied: []running.Occupancy{tt.occupied}, State: []running.State{tt.state}, Plant: []uint8{uint8(tt.plant)}}}},
			Calendar: &calendar.Calendar{MinuteOfDay: []int16{int16(tt.minute)}}}
		if got := newPurge(in, 0).at(0); got != tt.want {
			t.Errorf("%s: %d, want %d", tt.name, got, tt.want)
		}
		// Hours that do not run over midnight.
		in.Criteria.PurgeFromH, in.Criteria.PurgeToH = 1, 5
		if got := newPurge(in, 0).at(0); tt.minute >= 60 && got != purgeNone {
			t.Errorf("%s, 1 to 5: %d", tt.name, got)
		}
	}
}
