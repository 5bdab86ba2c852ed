package lost

import (
	"math"
	"strings"
	"testing"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Hand-made buildings for the causes that a logged setting or a sensor tells.

func TestOverride(t *testing.T) {
	b := newBuilding(7, 2)
	b.unit("U1")
	for z := 0; z < 2; z++ {
		b.set(z, 1, at24(9, 0), at24(12, 0), running.Mech)
	}
	on := constant(b.Grid.N, 0)
	for i := dayN + at24(9, 0); i < dayN+at24(12, 0); i++ {
		on[i] = 1
	}
	b.Site.Points = append(b.Site.Points, site.Point{Owner: site.OwnerPlant, Index: 0, Quantity: site.ManualOverride})
	b.Grid.Columns = append(b.Grid.Columns, gridColumn(on))
	r := b.find()
	if r.ByCauseH[0][Overridden] != 3 || r.ByCauseH[1][Overridden] != 3 || !strings.Contains(r.Episodes[0].Evidence, "manual override was on for 3.0 h") {
		t.Errorf("%+v %q", r.ByCauseH, r.Episodes[0].Evidence)
	}
}

func TestLockOutJustified(t *testing.T) {
	for _, c := range []struct {
		rain bool
		want string
	}{{true, "rain shortly before"}, {false, "not justified by weather"}} {
		b := newBuilding(7, 1)
		for i := dayN + at24(9, 0); i < dayN+at24(10, 0); i++ {
			b.Indoor[0].OperativeC[i] = 27
		}
		b.Criteria.WindMaxMS, b.Criteria.DewPointMaxC = 10, 17
		b.Outdoor.RainMMH = constant(b.Grid.N, 0)
		if c.rain {
			b.Outdoor.RainMMH[dayN+at24(8, 50)] = 1
		}
		b.Site.Points = append(b.Site.Points, site.Point{Owner: site.OwnerZone, Index: 0, Quantity: site.WindowEnable})
		b.Grid.Columns = append(b.Grid.Columns, gridColumn(constant(b.Grid.N, 0)))
		r := b.find()
		if r.ByCauseH[0][LockedOut] != 1 || !strings.Contains(r.Episodes[0].Evidence, c.want) {
			t.Errorf("rain %v: %+v %q", c.rain, r.ByCauseH[0], r.Episodes[0].Evidence)
		}
	}
}

func TestMisleadingThermostat(t *testing.T) {
	b := newBuilding(7, 3)
	b.unit("U1")
	for z := 0; z < 3; z++ {
		b.set(z, 1, at24(8, 0), at24(9, 0), running.Open)
		b.set(z, 1, at24(9, 0), at24(11, 0), running.Mech)
	}
	b.Indoor[2].ThermostatC = constant(b.Grid.N, 23.2)
	for i := dayN + at24(9, 0); i < dayN+at24(11, 0); i++ {
		b.Indoor[2].ThermostatC[i] = 25.5 // the room stays at 23 °C
	}
	r := b.find()
	if r.ByCauseH[0][BadThermostat] != 2 || r.Episodes[0].Led != 2 || !strings.Contains(r.Episodes[0].Evidence, "zone C read 2.5 K above") {
		t.Errorf("%+v %+v", r.ByCauseH[0], r.Episodes[0])
	}
	// A room that is as warm as its thermostat says explains nothing that way.
	for i := range b.Indoor[2].OperativeC {
		b.Indoor[2].OperativeC[i] = b.Indoor[2].ThermostatC[i]
	}
	if r := b.find(); r.ByCauseH[0][BadThermostat] != 0 {
		t.Errorf("%+v", r.ByCauseH[0])
	}
}

func TestShortCycling(t *testing.T) {
	b := newBuilding(7, 1)
	for k := 0; k < 4; k++ {
		b.set(0, 1, at24(9, 0)+k*6, at24(9, 0)+k*6+3, running.Mech)
		b.set(0, 1, at24(9, 0)+k*6+3, at24(9, 0)+k*6+6, running.Open)
	}
	r := b.find()
	if r.ByCauseH[0][ShortCycling] != 1 {
		t.Errorf("%+v", r.ByCauseH[0])
	}
	// Two runs in a morning are not cycling.
	b = newBuilding(7, 1)
	b.set(0, 1, at24(9, 0), at24(9, 30), running.Mech)
	b.set(0, 1, at24(10, 30), at24(11, 0), running.Mech)
	if r := b.find(); r.ByCauseH[0][ShortCycling] != 0 {
		t.Errorf("%+v", r.ByCauseH[0])
	}
}

// The interval of an inferred limit holds the limit the building was made with.
func TestOutdoorLimitInterval(t *testing.T) {
	b := newBuilding(42, 1)
	b.unit("U1")
	k := 0
	b.workdays(func(d int) {
		k++
		peak := 19 + float64(k%7)
		for h := 0; h < dayN; h++ {
			b.Outdoor.TempC[d*dayN+h] = float32(peak - 6*math.Abs(float64(h-at24(16, 0)))/float64(at24(8, 0)))
		}
		for h := at24(8, 0); h < at24(18, 0); h++ {
			s := running.Open
			if b.Outdoor.TempC[d*dayN+h] > 21 {
				s = running.Mech
			}
			b.set(0, d, h, h+1, s)
		}
	})
	p := b.find().Patterns[0].Limit
	if !(p.UpperLowC <= 21 && p.UpperHighC >= 21 && p.UpperHighC-p.UpperLowC < 1) || !math.IsNaN(p.LowerLowC) {
		t.Errorf("%+v", p)
	}
}
