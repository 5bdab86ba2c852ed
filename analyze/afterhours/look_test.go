package afterhours

import (
	"math"
	"strings"
	"testing"
	"time"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// week is one zone with one unit from Monday to Sunday at 5 minutes, occupied
// from 08:00 to 18:00 on working days, everything off and shut.
func week(loc *time.Location, start time.Time, days int) Input {
	n := int(start.AddDate(0, 0, days).Sub(start) / (5 * time.Minute))
	g := &grid.Grid{StartUTC: start.Unix(), StepS: 300, N: n, PeriodTo: n, Loc: loc}
	z := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: make([]uint8, n), OpenShare: make([]float32, n)}
	for i := range z.State {
		z.State[i] = running.Shut
		at := g.Time(i)
		if d := at.Weekday(); d >= time.Monday && d <= time.Friday && at.Hour() >= 8 && at.Hour() < 18 {
			z.Occupied[i] = running.Occupied
		}
	}
	rec := &hours.Record{Hours: make([]hours.Hour, 2), ZoneIDs: []string{"A"}}
	for c := range rec.Seconds {
		rec.Seconds[c] = make([]uint16, 2)
	}
	rec.Seconds[hours.CPurge][1], rec.Seconds[hours.CPurgeAvailable][0], rec.Seconds[hours.CPurgeAvailable][1] = 1800, 3600, 1800
	return Input{
		Site:     &site.Site{Zones: []site.Zone{{ID: "A"}}, Plant: []site.Plant{{ID: "U1", Serves: []string{"A"}, RatedPowerKW: 4}}},
		Criteria: criteria.Settings{PurgeFromH: 22, PurgeToH: 7, PlantOvernightMinH: 2, OpenThreshold: 0.05},
		Grid:     g, Running: &running.Result{Zones: []running.Zone{z}}, Record: rec, Summary: &hours.Summary{Weights: []float64{1}},
	}
}

var monday = time.Date(2031, 3, 3, 0, 0, 0, 0, time.UTC)

// on sets plant and state over a span of local time, hours from the start.
func on(in Input, fromH, toH float64, state running.State, plant site.PlantState) {
	z := &in.Running.Zones[0]
	for i := int(fromH * 12); i < int(toH*12); i++ {
		z.State[i], z.Plant[i] = state, uint8(plant)
		if state == running.Open || state == running.Both {
			z.OpenShare[i] = 1
		}
	}
}

func near(t *testing.T, what string, got, want float64) {
	t.Helper()
	if math.Abs(got-want) > 1e-9 {
		t.Errorf("%s: %v, want %v", what, got, want)
	}
}

func TestAfterHours(t *testing.T) {
	in := week(time.UTC, monday, 7)
	on(in, 17, 19, running.Mech, site.PlantCool)     // one vacant hour on Monday evening
	on(in, 23, 25.5, running.Mech, site.PlantVent)   // 2.5 h of Monday night
	on(in, 46, 55, running.Open, site.PlantOff)      // all of Tuesday night
	on(in, 77.5, 80.5, running.Mech, site.PlantHeat) // Thursday from 05:30: warm-up
	on(in, 130, 131, running.Mech, site.PlantHeat)   // Saturday 10:00: no warm-up
	on(in, 150, 152, running.Unknown, site.PlantOff)
	for i := 150 * 12; i < 152*12; i++ {
		in.Running.Zones[0].Plant[i], in.Running.Zones[0].OpenShare[i] = running.PlantUnknown, float32(math.NaN())
	}
	r := Look(in)
	z := r.Zones[0]
	near(t, "vacant", z.VacantH, 168-50)
	near(t, "plant on", z.PlantOnH, 1+2.5+2.5+1)
	near(t, "conditioning", z.PlantConditioningH, 1+2.5+1)
	near(t, "plant unknown", z.PlantUnknownH, 2)
	near(t, "windows open", z.WindowsOpenH, 9)
	near(t, "windows unknown", z.WindowsUnknownH, 2)
	near(t, "warm-up", z.WarmUpH, 2.5)
	near(t, "purge", z.PurgeH, 0.5)
	near(t, "purge available", z.PurgeAvailableH, 1.5)
	if z.Nights != 6 || z.NightsPlantOn != 1 || z.NightsWindowsOpen != 1 || z.NightsPlantKnown != 6 {
		t.Errorf("nights %d, plant on %d of %d, windows open %d", z.Nights, z.NightsPlantOn, z.NightsPlantKnown, z.NightsWindowsOpen)
	}
	if r.Building != z {
		t.Errorf("one zone is the building: %+v", r.Building)
	}
	u := r.Units[0]
	near(t, "unit on", u.OnH, 7)
	near(t, "unit at rated power", u.EnergyKWh, 28)
	near(t, "unit warm-up", u.WarmUpH, 2.5)
	near(t, "unit on free days", u.WeekendOrHolidayOnH, 1)
	if u.NightsOn != 1 || u.NightsKnown != 6 || u.OvernightH != 2.5 {
		t.Errorf("unit nights %+v", u)
	}
}

// The unit's own log outranks the zones', and it is after hours only while all
// of its zones are vacant.
func TestUnitOwnLog(t *testing.T) {
	in := week(time.UTC, monday, 7)
	own := make([]uint8, in.Grid.N)
	for i := 12 * 12; i < 20*12; i++ {
		own[i] = uint8(site.PlantOn)
	}
	in.Running.Units = [][]uint8{own}
	u := Look(in).Units[0]
	near(t, "on", u.OnH, 2)
	near(t, "conditioning", u.ConditioningH, 0)
}

// A night holds eight hours when the clocks go forward (2031-03-30 in central
// Europe) and is still a night; one hour more when they go back.
func TestNightsAcrossClockChange(t *testing.T) {
	loc, err := time.LoadLocation("Europe/Berlin")
	if err != nil {
		t.Skip("no time zones on this machine: ", err)
	}
	for _, c := range []struct {
		start time.Time
		want  float64
	}{
		{time.Date(2031, 3, 29, 0, 0, 0, 0, loc), 8},
		{time.Date(2031, 10, 25, 0, 0, 0, 0, loc), 10},
	} {
		in := week(loc, c.start, 2)
		on(in, 0, float64(in.Grid.N)/12, running.Mech, site.PlantVent)
		r := Look(in)
		if r.Zones[0].Nights != 1 || r.Zones[0].NightsPlantOn != 1 {
			t.Errorf("%v: %+v", c.start, r.Zones[0])
		}
		near(t, "hours of the night", r.Units[0].OvernightH, c.want)
	}
}

func TestUnknownOccupancyIsLeftOut(t *testing.T) {
	in := week(time.UTC, monday, 2)
	for i := range in.Running.Zones[0].Occupied {
		in.Running.Zones[0].Occupied[i] = running.OccupancyUnknown
	}
	on(in, 0, 48, running.Mech, site.PlantCool)
	r := Look(in)
	near(t, "plant on", r.Zones[0].PlantOnH, 0)
	near(t, "unknown", r.Zones[0].OccupancyUnknownH, 48)
	if !strings.Contains(strings.Join(r.Notes, "\n"), "unknown occupancy is left out: 48 h") {
		t.Errorf("notes %q", r.Notes)
	}
}
