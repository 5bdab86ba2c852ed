package running

import (
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/indoor"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// week is two weeks of 5 min steps from Monday, 2 June 2025.
func week() (*site.Site, *grid.Grid) {
	n := 14 * 288
	g := &grid.Grid{StartUTC: time.Date(2025, 6, 2, 0, 0, 0, 0, time.UTC).Unix(), StepS: 300, N: n, PeriodTo: n, Loc: time.UTC}
	s := &site.Site{Location: time.UTC, Zones: []site.Zone{{ID: "a"}, {ID: "b"}},
		Occupancy: site.Occupancy{Source: site.BySchedule, Times: []site.Times{{Days: [7]bool{false, true, true, true, true, true, false}, FromMin: 8 * 60, ToMin: 18 * 60}}}}
	return s, g
}

// occupiedTimes lists when occupied time begins and ends, in days and minutes
// after the start.
func occupiedTimes(s *site.Site, g *grid.Grid, z int) (list [][3]int) {
	occ := occupiedOf(s, g, calendar.Of(g), z, &indoor.Zone{})
	for i := range occ {
		before := Vacant
		if i > 0 {
			before = occ[i-1]
		}
		if occ[i] != before {
			list = append(list, [3]int{i / 288, i % 288 * 5, int(occ[i])})
		}
	}
	return list
}

func same(t *testing.T, what string, got, want [][3]int) {
	t.Helper()
	if len(got) != len(want) {
		t.Errorf("%s: %v, want %v", what, got, want)
		return
	}
	for i := range got {
		if got[i] != want[i] {
			t.Errorf("%s: %v, want %v", what, got, want)
			return
		}
	}
}

// workdays are the expected changes: occupied from a minute to another on the
// days named.
func workdays(fromMin, toMin int, days ...int) (list [][3]int) {
	for _, d := range days {
		list = append(list, [3]int{d, fromMin, int(Occupied)}, [3]int{d, toMin, int(Vacant)})
	}
	return list
}

// Occupied time runs from the first minute to the last, Monday to Friday, and
// neither on holidays nor at weekends; a zone's own times replace the site's.
// The clock and the weekdays are the calendar's: 2 June 2025 was a Monday.
func TestSchedule(t *testing.T) {
	s, g := week()
	same(t, "site's times", occupiedTimes(s, g, 0), workdays(480, 1080, 0, 1, 2, 3, 4, 7, 8, 9, 10, 11))

	s.Occupancy.Holidays = []site.Date{{Year: 2025, Month: 6, Day: 4}, {Year: 2025, Month: 6, Day: 9}, {Year: 2025, Month: 6, Day: 14}}
	same(t, "holidays", occupiedTimes(s, g, 0), workdays(480, 1080, 0, 1, 3, 4, 8, 9, 10, 11))

	s.Zones[1].Occupied = []site.Times{{Days: [7]bool{true}, FromMin: 0, ToMin: 1440}, {Days: [7]bool{false, true}, FromMin: 600, ToMin: 605}, {Days: [7]bool{false, true}, FromMin: 605, ToMin: 610}}
	same(t, "zone's own times", occupiedTimes(s, g, 1), [][3]int{{0, 600, 1}, {0, 610, 0}, {6, 0, 1}, {7, 0, 0}, {13, 0, 1}}) // 9 June is a holiday
	same(t, "the other zone", occupiedTimes(s, g, 0), workdays(480, 1080, 0, 1, 3, 4, 8, 9, 10, 11))
}

// A closure in the diary empties the zones it names, or all, from its first
// instant to its last; other notes do not.
func TestClosures(t *testing.T) {
	s, g := week()
	at := func(day, hour int) int64 { return g.StartUTC + int64(day*86400+hour*3600) }
	s.Diary = []site.Event{
		{FromUTC: at(1, 10), ToUTC: at(1, 12), Zones: []string{"b"}, Kind: site.EventClosure},
		{FromUTC: at(2, 0), ToUTC: at(3, 0), Kind: site.EventClosure},
		{FromUTC: at(3, 10), ToUTC: at(3, 12), Kind: site.EventWorks},
		{FromUTC: at(-3, 0), ToUTC: at(0, 9), Kind: site.EventClosure},
	}
	first := [][3]int{{0, 540, 1}, {0, 1080, 0}}
	rest := workdays(480, 1080, 3, 4, 7, 8, 9, 10, 11)
	same(t, "zone a", occupiedTimes(s, g, 0), append(append(first[:2:2], workdays(480, 1080, 1)...), rest...))
	same(t, "zone b", occupiedTimes(s, g, 1), append(append(first[:2:2], [][3]int{{1, 480, 1}, {1, 600, 0}, {1, 720, 1}, {1, 1080, 0}}...), rest...))
}

// Half a person or half the time is presence; silence is unknown, and one
// sensor is enough.
func TestPresence(t *testing.T) {
	s, g := week()
	g.N = 8
	s.Occupancy.Source = site.ByPresence
	n := float32(nan)
	in := &indoor.Zone{People: []float32{0.49, 0.5, n, n, 0, 2, n, 0}, Presence: []float32{n, n, 0.5, 0.49, 1, 0, n, n}}
	want := []Occupancy{Vacant, Occupied, Occupied, Vacant, Occupied, Occupied, OccupancyUnknown, Vacant}
	got := occupiedOf(s, g, calendar.Of(g), 0, in)
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("step %d: %v, want %v", i, got[i], want[i])
		}
	}
	// A zone may keep to the schedule where the site goes by presence.
	s.Zones[0].OccupancySource = site.BySchedule
	if got := occupiedOf(s, g, calendar.Of(g), 0, in); got[0] != Vacant || got[6] != Vacant {
		t.Errorf("at midnight %v", got)
	}
}

// A measured opening is open above the threshold, not at it; the shares of
// 25 and 50 % are reached at the figure itself. Limits are settings.
func TestOpenThreshold(t *testing.T) {
	b := newBench(6, site.Changeover)
	b.s.Occupancy.Times = []site.Times{{Days: [7]bool{true, true, true, true, true, true, true}, ToMin: 1440}}
	b.add(site.OwnerZone, site.WindowOpening, nan, 5, 5.1, 24.9, 25, 49.9, 50)
	b.add(site.OwnerPlant, site.PlantStatus, nan, 0, 0, 0, 0, 0, 0)
	z := b.judge()
	for i, want := range []State{Shut, Open, Open, Open, Open, Open} {
		if z.State[i] != want {
			t.Errorf("step %d: %v, want %v", i, z.State[i], want)
		}
	}
	h := 1.0 / 12
	if z.OpenHoursAny != 5*h || z.OpenHours25 != 3*h || z.OpenHours50 != 1*h {
		t.Errorf("open hours %g, %g, %g", z.OpenHoursAny/h, z.OpenHours25/h, z.OpenHours50/h)
	}
	c := criteria.Settings{OpenThreshold: 0.3, StepCoverageMin: 0.5}
	if got := Judge(b.s, c, b.g, calendar.Of(b.g), make([]indoor.Zone, 1)).Zones[0].State; got[3] != Shut || got[4] != Open {
		t.Errorf("threshold of 30 %%: %v", got)
	}
}

// Valves and dampers count above their threshold, not at it; air flow from the
// flow per floor area on.
func TestPlantThresholds(t *testing.T) {
	for _, tt := range []struct {
		q        site.Quantity
		at, over float64
		off, on  uint8
		unit     float64
	}{
		{site.CoolingValve, 5, 5.1, uint8(site.PlantOff), uint8(site.PlantCool), 0},
		{site.HeatingValve, 5, 5.1, uint8(site.PlantOff), uint8(site.PlantHeat), 0},
		{site.ZoneDamper, 5, 5.1, uint8(site.PlantOff), uint8(site.PlantCool), 4},
		{site.ZoneAirflow, 10, 10.1, uint8(site.PlantOff), uint8(site.PlantCool), 4}, // 0.5 m³/h m² on 20 m²
	} {
		b := newBench(2, site.Changeover)
		b.add(site.OwnerZone, tt.q, nan, tt.at, tt.over)
		b.add(site.OwnerPlant, site.PlantStatus, nan, tt.unit, tt.unit)
		if got := b.judge().Plant; got[0] != tt.off || got[1] != tt.on {
			t.Errorf("%s: %v at %g and %g, want %d and %d", tt.q, got, tt.at, tt.over, tt.off, tt.on)
		}
	}
}
