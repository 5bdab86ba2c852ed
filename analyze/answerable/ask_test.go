package answerable

import (
	"math"
	"strings"
	"testing"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// logged builds a site of two zones with openings and one core zone, with
// points of the owners and quantities given, all with readings.
type logged struct {
	s *site.Site
	g *grid.Grid
}

func newLogged() *logged {
	nan := math.NaN()
	zone := func(id string, out bool) site.Zone {
		return site.Zone{ID: id, AreaM2: nan, HeightM: nan, People: nan, Openings: site.Openings{Outdoors: out}}
	}
	return &logged{
		s: &site.Site{Zones: []site.Zone{zone("A", true), zone("B", true), zone("C", false)}, Plant: []site.Plant{{ID: "U", Serves: []string{"A", "B", "C"}, RatedPowerKW: nan}}},
		g: &grid.Grid{StepS: 300, N: 100, PeriodTo: 100},
	}
}

func (l *logged) add(owner site.OwnerKind, index int, q site.Quantity, share float64, known int) *logged {
	l.s.Points = append(l.s.Points, site.Point{Owner: owner, Index: index, Quantity: q, Share: share})
	mean := make([]float32, 100)
	for i := range mean {
		if i >= known {
			mean[i] = float32(math.NaN())
		}
	}
	l.g.Columns = append(l.g.Columns, grid.Column{Mean: mean})
	return l
}

func (l *logged) ask(t *testing.T, id string) Question {
	t.Helper()
	for _, q := range Ask(l.s, l.g) {
		if q.ID == id {
			return q
		}
	}
	t.Fatalf("no question %q", id)
	return Question{}
}

var equal = math.NaN()

func TestNothingLogged(t *testing.T) {
	l := newLogged()
	for _, q := range Ask(l.s, l.g) {
		if q.Answer != No || q.ZonesYes != 0 || len(q.Missing) == 0 || q.Cheapest == "" || len(q.Have) != 0 {
			t.Errorf("%s: %+v", q.ID, q)
		}
	}
}

func TestWeatherAndPlantAlone(t *testing.T) {
	l := newLogged().add(site.OwnerSite, 0, site.OutdoorTemp, equal, 100).add(site.OwnerPlant, 0, site.PlantStatus, equal, 100)
	if q := l.ask(t, "mech_free"); q.Answer != Yes || q.ZonesYes != 2 || q.ZonesTotal != 2 || q.Cheapest != "" {
		t.Errorf("%+v", q)
	}
	q := l.ask(t, "suited")
	if q.Answer != Partly || strings.Join(q.Missing, ", ") != "outdoor humidity or dew point, wind speed, rain" {
		t.Errorf("humidity, wind and rain are not tested: %+v", q)
	}
	// The weather station is named once, not three times.
	if n := strings.Count(q.Cheapest, "nearest weather station"); n != 2 {
		t.Errorf("cheapest way %q", q.Cheapest)
	}
	if q := l.ask(t, "achieved"); q.Answer != No || !strings.Contains(q.Cheapest, "battery window contact") {
		t.Errorf("%+v", q)
	}
}

func TestSomeZones(t *testing.T) {
	l := newLogged().add(site.OwnerPlant, 0, site.PlantStatus, equal, 100).add(site.OwnerZone, 0, site.Window, equal, 100)
	q := l.ask(t, "running")
	// The core zone has no window to know of.
	if q.Answer != Partly || q.ZonesYes != 2 || q.ZonesTotal != 3 {
		t.Errorf("%+v", q)
	}
	if strings.Join(q.Missing, ", ") != "window contacts or positions in 1 of 2 zones" {
		t.Errorf("missing %q", q.Missing)
	}
}

func TestPartOfTheOpenings(t *testing.T) {
	l := newLogged().add(site.OwnerPlant, 0, site.PlantStatus, equal, 100).
		add(site.OwnerZone, 0, site.Window, 0.6, 100).add(site.OwnerZone, 0, site.Window, 0.4, 0).
		add(site.OwnerZone, 1, site.Window, 1, 100)
	q := l.ask(t, "running")
	if q.Answer != Partly || q.ZonesYes != 2 || !strings.Contains(strings.Join(q.Have, ", "), "in part in 1 of 2 zones") {
		t.Errorf("%+v", q)
	}
}

// A point whose readings were all rejected is not there.
func TestPointsWithoutReadings(t *testing.T) {
	l := newLogged().add(site.OwnerZone, 0, site.CO2, equal, 100).add(site.OwnerZone, 1, site.CO2, equal, 0).add(site.OwnerZone, 2, site.CO2, equal, 1)
	if q := l.ask(t, "fresh_air"); q.Answer != Partly || q.ZonesYes != 2 || q.ZonesTotal != 3 {
		t.Errorf("%+v", q)
	}
	l.g.Columns[0].Mean = nil
	if q := l.ask(t, "fresh_air"); q.ZonesYes != 1 {
		t.Errorf("%+v", q)
	}
}

func TestBonusDoesNotLower(t *testing.T) {
	l := newLogged().add(site.OwnerZone, 0, site.CO2, equal, 100).add(site.OwnerZone, 1, site.CO2, equal, 100).add(site.OwnerZone, 2, site.CO2, equal, 100)
	if q := l.ask(t, "fresh_air"); q.Answer != Yes || len(q.Missing) != 0 || q.Cheapest != "" || !strings.Contains(q.Needs, "better with outdoor CO2") {
		t.Errorf("%+v", q)
	}
}

func TestServedByNoPlant(t *testing.T) {
	l := newLogged().add(site.OwnerZone, 0, site.Window, equal, 100).add(site.OwnerZone, 1, site.Window, equal, 100)
	l.s.Plant = nil
	if q := l.ask(t, "running"); q.Answer != Yes {
		t.Errorf("without plant nothing about it is unknown: %+v", q)
	}
}

// Every question's needs are defined, and its id is its own.
func TestQuestionsAreWhole(t *testing.T) {
	known, ids := needs(), map[string]bool{}
	for _, q := range questions() {
		if ids[q.id] || q.question == "" || len(q.needs) == 0 {
			t.Errorf("%+v", q)
		}
		ids[q.id] = true
		for _, n := range q.needs {
			if known[strings.TrimLeft(n, "+~")].met == nil {
				t.Errorf("%s: nothing is known of %q", q.id, n)
			}
		}
	}
}
