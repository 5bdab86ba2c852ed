package demo

import (
	"slices"
	"testing"
	"time"

	"sashlog/configs/site"
)

// A change of settings leaves everything before its day as it was and opens
// the building more often after it.
func TestChangeOfSettings(t *testing.T) {
	o := Options{Seed: 3, From: site.Date{Year: 2025, Month: 5, Day: 1}, Days: 40, Zones: 4}
	before, err := Simulate(o)
	if err != nil {
		t.Fatal(err)
	}
	high := 26.0
	day := site.Date{Year: 2025, Month: 5, Day: 21}
	o.Changes = []Change{{From: day, Unit: "AHU-1", OpenHighC: &high, CoolOnK: 1, NoClockStart: true, IgnoreCallsOf: []string{"L1.03"}}}
	after, err := Simulate(o)
	if err != nil {
		t.Fatal(err)
	}
	loc, err := time.LoadLocation(zoneName)
	if err != nil {
		t.Fatal(err)
	}
	at := int((day.Start(loc).Unix() - before.StartUTC) / before.StepS)
	a, b := before.Plants[0].State, after.Plants[0].State
	if !slices.Equal(a[:at], b[:at]) || !slices.Equal(before.Zones[0].AirC[:at], after.Zones[0].AirC[:at]) {
		t.Error("the days before the change differ")
	}
	off := func(state []uint8) (n int) {
		for _, s := range state[at:] {
			if s == codeOff {
				n++
			}
		}
		return n
	}
	if x, y := off(a), off(b); y < x+200 {
		t.Errorf("%d steps with the unit off before, %d after the change", x, y)
	}
	o.Changes[0].Unit = "AHU-9"
	if _, err := Simulate(o); err == nil {
		t.Error("a unit that is not there was changed")
	}
}
