package lost

import (
	"math"
	"time"

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

// building is a small building on a 5-minute grid that begins on a Monday,
// occupied from 08:00 to 18:00 on working days. Every zone starts with its
// windows shut and plant off, 18 °C outdoors and 23 °C in, limits of 26 °C,
// and weather that suits.
type building struct{ Input }

const dayN = 288

func newBuilding(days, zones int) *building {
	n := days * dayN
	// 2031-03-03 is a Monday.
	start := time.Date(2031, 3, 3, 0, 0, 0, 0, time.UTC)
	b := &building{Input{
		Site: &site.Site{},
		Criteria: criteria.Settings{OutdoorLowC: 12.8, RiseK: 1, InterruptionMin: 15, EpisodeMin: 15, FewRoomShare: 0.3, ReopenDelayMin: 30,
			OpenThreshold: 0.05},
		Grid:       &grid.Grid{StartUTC: start.Unix(), StepS: 300, N: n, PeriodTo: n, Loc: time.UTC},
		Outdoor:    &outdoor.Outdoor{TempC: constant(n, 18), CO2DefaultPPM: 420},
		Running:    &running.Result{},
		Exceedance: &exceedance.Result{},
		Potential:  &potential.Result{},
		Record:     &hours.Record{Class: make([][]hours.Class, zones)},
		Summary:    &hours.Summary{},
	}}
	for z := 0; z < zones; z++ {
		b.Site.Zones = append(b.Site.Zones, site.Zone{ID: string(rune('A' + z)), People: 10, Openings: site.Openings{Outdoors: true}, Windows: site.AutomaticWindows})
		run := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: make([]uint8, n), OpenShare: constant(n, 0),
			HasContacts: true, HasPlantEvidence: true, ServedByPlant: true}
		for i := range run.State {
			run.State[i] = running.Shut
			if h := i % dayN; i/dayN%7 < 5 && h >= at24(8, 0) && h < at24(18, 0) {
				run.Occupied[i] = running.Occupied
			}
		}
		b.Running.Zones = append(b.Running.Zones, run)
		b.Indoor = append(b.Indoor, indoor.Zone{OperativeC: constant(n, 23)})
		b.Exceedance.Zones = append(b.Exceedance.Zones, exceedance.Zone{Limits: exceedance.Limits{HighC: constant(n, 26), UpperOfDayC: constant(n, 27)}})
		suit := make([]potential.Suit, n)
		b.Potential.Zones = append(b.Potential.Zones, potential.Zone{Suit: suit, Raw: suit})
		b.Summary.Weights = append(b.Summary.Weights, 1/float64(zones))
	}
	return b
}

// unit adds a plant unit that serves all zones.
func (b *building) unit(id string) {
	p := site.Plant{ID: id}
	for z := range b.Site.Zones {
		p.Serves = append(p.Serves, b.Site.Zones[z].ID)
	}
	b.Site.Plant = append(b.Site.Plant, p)
}

// set puts a zone into a state between two times of a day; plant cools in mech
// and both.
func (b *building) set(z, day, from, to int, s running.State) {
	run := &b.Running.Zones[z]
	for i := day*dayN + from; i < day*dayN+to; i++ {
		run.State[i] = s
		run.Plant[i], run.OpenShare[i] = uint8(site.PlantOff), 0
		if s == running.Mech || s == running.Both {
			run.Plant[i] = uint8(site.PlantCool)
		}
		if s == running.Open || s == running.Both {
			run.OpenShare[i] = 1
		}
	}
}

// classify fills the classes by the plain rule; a shut zone wants air when it
// is above its limit.
func (b *building) classify() {
	for z := range b.Running.Zones {
		run := &b.Running.Zones[z]
		class := make([]hours.Class, b.Grid.N)
		for i := range class {
			switch {
			case run.Occupied[i] != running.Occupied:
			case b.Potential.Zones[z].Suit[i] != potential.Suited:
				class[i] = hours.ClosedUnsuitedFresh
			case run.State[i] == running.Open:
				class[i] = hours.AchievedOK
			case run.State[i] == running.Mech:
				class[i] = hours.MissedCool
			case run.State[i] == running.Both:
				class[i] = hours.MissedBoth
			case run.State[i] == running.Shut && b.Indoor[z].OperativeC[i] > b.Exceedance.Zones[z].Limits.HighC[i]:
				class[i] = hours.MissedShut
			case run.State[i] == running.Shut:
				class[i] = hours.NotNeeded
			default:
				class[i] = hours.UnjudgedSuited
			}
		}
		b.Record.Class[z] = class
	}
}

// at24 is the step of a time of day.
func at24(hour, minute int) int { return hour*12 + minute/5 }

func constant(n int, v float32) []float32 {
	out := make([]float32, n)
	for i := range out {
		out[i] = v
	}
	return out
}

// workdays calls f for every working day of the building.
func (b *building) workdays(f func(day int)) {
	for d := 0; d < b.Grid.N/dayN; d++ {
		if d%7 < 5 {
			f(d)
		}
	}
}

func (b *building) find() *Result {
	b.classify()
	return Find(b.Input)
}

// taken is the cause with most hours of a zone.
func taken(r *Result, z int) Cause {
	best := Unexplained
	for c, h := range r.ByCauseH[z] {
		if h > r.ByCauseH[z][best] || math.IsNaN(h) {
			best = Cause(c)
		}
	}
	return best
}

func gridColumn(mean []float32) grid.Column { return grid.Column{Mean: mean} }
