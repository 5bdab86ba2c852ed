package running

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/indoor"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

var nan = math.NaN()

// bench is a one-zone site with one step per case.
type bench struct {
	s *site.Site
	g *grid.Grid
}

func newBench(steps int, scheme site.Scheme) *bench {
	s := &site.Site{Location: time.UTC, Occupancy: site.Occupancy{Source: site.BySchedule}}
	s.Zones = []site.Zone{{ID: "z", AreaM2: 20, People: 2, FanSpeedMS: nan, Openings: site.Openings{Outdoors: true}, Scheme: scheme}}
	s.Plant = []site.Plant{{ID: "unit", Serves: []string{"z"}}}
	return &bench{s, &grid.Grid{StepS: 300, N: steps, PeriodTo: steps, Loc: time.UTC}}
}

func (b *bench) add(owner site.OwnerKind, q site.Quantity, share float64, values ...float64) {
	b.s.Points = append(b.s.Points, site.Point{Owner: owner, Quantity: q, Share: share})
	col := grid.Column{Mean: make([]float32, b.g.N), CoveredS: make([]uint16, b.g.N)}
	for i, v := range values {
		col.Mean[i] = float32(v)
		if !math.IsNaN(v) {
			col.CoveredS[i] = 300
		}
	}
	b.g.Columns = append(b.g.Columns, col)
}

func (b *bench) judge() Zone {
	c := criteria.Settings{OpenThreshold: 0.05, ValveOpenPct: 5, DamperOpenPct: 5, FlowOnM3hPerM2: 0.5, StepCoverageMin: 0.5}
	return Judge(b.s, c, b.g, calendar.Of(b.g), make([]indoor.Zone, 1)).Zones[0]
}

// TestRunningState states how window and plant combine; the definitions are
// the project's own words for the trade's running states.
func TestRunningState(t *testing.T) {
	off, on, vent, heat, cool := 0.0, 1.0, 2.0, 3.0, 4.0
	tests := []struct {
		name           string
		window, status float64
		scheme         site.Scheme
		want           State
	}{
		{"open, plant off", 1, off, site.Changeover, Open},
		{"shut, plant off", 0, off, site.Changeover, Shut},
		{"shut, cooling", 0, cool, site.Changeover, Mech},
		{"open, cooling", 1, cool, site.Changeover, Both},
		{"open, heating is never open", 1, heat, site.Concurrent, Both},
		{"open, fan, changeover", 1, vent, site.Changeover, Both},
		{"open, fan, concurrent", 1, vent, site.Concurrent, Open},
		{"open, running with unknown type", 1, on, site.Concurrent, Both},
		{"window unknown", nan, cool, site.Changeover, Unknown},
		{"plant unknown", 1, nan, site.Changeover, Unknown},
		{"open for under half the step", 0.4, off, site.Changeover, Shut},
		{"open for half the step", 0.5, off, site.Changeover, Open},
	}
	for _, tt := range tests {
		b := newBench(1, tt.scheme)
		b.add(site.OwnerZone, site.Window, nan, tt.window)
		b.add(site.OwnerPlant, site.PlantStatus, nan, tt.status)
		if got := b.judge().State[0]; got != tt.want {
			t.Errorf("%s: %v, want %v", tt.name, got, tt.want)
		}
	}
}

// TestPartialContacts: where only some openings have contacts, "all shut" is
// unknown, while one open contact is enough for open.
func TestPartialContacts(t *testing.T) {
	b := newBench(2, site.Changeover)
	b.add(site.OwnerZone, site.Window, 0.6, 0, 1)
	b.add(site.OwnerPlant, site.PlantStatus, nan, 0, 0)
	got := b.judge().State
	if got[0] != Unknown || got[1] != Open {
		t.Errorf("states %v, want [unknown open]", got)
	}
	whole := newBench(1, site.Changeover)
	whole.add(site.OwnerZone, site.Window, 0.6, 0)
	whole.add(site.OwnerZone, site.Window, nan, 0)
	whole.add(site.OwnerPlant, site.PlantStatus, nan, 0)
	if got := whole.judge().State[0]; got != Shut {
		t.Errorf("all contacts shut: %v, want shut", got)
	}
}

// TestPlantEvidence: evidence close to the zone outranks the unit.
func TestPlantEvidence(t *testing.T) {
	tests := []struct {
		name string
		q    site.Quantity
		v    float64
		unit float64
		want uint8
	}{
		{"no air arrives though the unit cools", site.ZoneAirflow, 0, 4, uint8(site.PlantOff)},
		{"air arrives and the unit cools", site.ZoneAirflow, 200, 4, uint8(site.PlantCool)},
		{"air arrives though the unit says off", site.ZoneAirflow, 200, 0, uint8(site.PlantOn)},
		{"damper shut", site.ZoneDamper, 2, 4, uint8(site.PlantOff)},
		{"cooling valve open, unit off", site.CoolingValve, 40, 0, uint8(site.PlantCool)},
		{"heating valve open, unit ventilates", site.HeatingValve, 40, 2, uint8(site.PlantHeat)},
		{"local unit cools, unit off", site.PlantStatus, 4, 0, uint8(site.PlantCool)},
		{"valve shut, unit unknown", site.CoolingValve, 0, nan, PlantUnknown},
		{"valve open, unit unknown", site.CoolingValve, 40, nan, uint8(site.PlantCool)},
	}
	for _, tt := range tests {
		b := newBench(1, site.Changeover)
		b.add(site.OwnerZone, tt.q, nan, tt.v)
		b.add(site.OwnerPlant, site.PlantStatus, nan, tt.unit)
		if got := b.judge().Plant[0]; got != tt.want {
			t.Errorf("%s: %d, want %d", tt.name, got, tt.want)
		}
	}
	none := newBench(1, site.Changeover)
	none.s.Plant = nil
	if z := none.judge(); z.Plant[0] != uint8(site.PlantOff) || z.ServedByPlant {
		t.Errorf("a zone served by no plant is never mechanical: plant %d", z.Plant[0])
	}
	silent := newBench(1, site.Changeover)
	if z := silent.judge(); z.Plant[0] != PlantUnknown {
		t.Errorf("a unit nobody logs is unknown, not off: plant %d", z.Plant[0])
	}
}

// What is not known of plant stays unknown; the definitions are the project's
// own.
func TestPlantNotKnown(t *testing.T) {
	// A unit without any log, and the zone's own valves and local unit off:
	// air may still be moved.
	b := newBench(1, site.Changeover)
	b.add(site.OwnerZone, site.Window, nan, 1)
	b.add(site.OwnerZone, site.CoolingValve, nan, 0)
	b.add(site.OwnerZone, site.PlantStatus, nan, 0)
	if got := b.judge().State[0]; got != Unknown {
		t.Errorf("a silent unit beside a shut valve: %v, want unknown", got)
	}
	// With its damper known to be shut nothing arrives.
	b.add(site.OwnerZone, site.ZoneDamper, nan, 0)
	if got := b.judge().State[0]; got != Open {
		t.Errorf("a silent unit behind a shut damper: %v, want open", got)
	}
	// A damper says nothing of a unit that brings no air.
	b = newBench(1, site.Changeover)
	b.s.Plant[0].Air = site.AirNone
	b.add(site.OwnerZone, site.Window, nan, 0)
	b.add(site.OwnerZone, site.ZoneDamper, nan, 0)
	b.add(site.OwnerPlant, site.PlantStatus, nan, 4)
	if got := b.judge().State[0]; got != Mech {
		t.Errorf("a ceiling that cools behind a shut damper: %v, want mechanical", got)
	}
	// A fan and a unit of unknown kind: it may be conditioning.
	b = newBench(1, site.Concurrent)
	b.s.Plant = append(b.s.Plant, site.Plant{ID: "second", Serves: []string{"z"}})
	b.add(site.OwnerZone, site.Window, nan, 1)
	b.add(site.OwnerPlant, site.PlantStatus, nan, 2)
	b.s.Points = append(b.s.Points, site.Point{Owner: site.OwnerPlant, Index: 1, Quantity: site.PlantStatus, Share: nan})
	b.g.Columns = append(b.g.Columns, grid.Column{Mean: []float32{1}, CoveredS: []uint16{300}})
	if got := b.judge().State[0]; got != Both {
		t.Errorf("a fan beside a unit of unknown kind: %v, want both", got)
	}
}

// A zone of whose occupancy nothing is ever known has no weight.
func TestNeverKnownHasNoWeight(t *testing.T) {
	s := &site.Site{Zones: []site.Zone{{ID: "a", People: 3, Openings: site.Openings{Outdoors: true}}, {ID: "b", People: 9, Openings: site.Openings{Outdoors: true}}}}
	w, _ := weigh(s, []Zone{{Occupied: []Occupancy{Occupied, OccupancyUnknown}}, {Occupied: []Occupancy{OccupancyUnknown, Vacant}}})
	if w[0] != 1 || w[1] != 0 {
		t.Errorf("weights %v", w)
	}
}
