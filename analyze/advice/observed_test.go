package advice

import (
	"math"
	"strings"
	"testing"

	"sashlog/analyze/changeover"
	"sashlog/analyze/leaders"
	"sashlog/analyze/lost"
)

// tightenedAt is a building whose unit ends open mode above 20 °C from day 10 on
// and above 24 °C before, with 8 h lost before and 12 h after that day, all at
// outC.
func tightenedAt(before, after float64, outC float32) Input {
	in := quiet()
	in.Outdoor.TempC = make([]float32, in.Grid.N)
	for i := range in.Outdoor.TempC {
		in.Outdoor.TempC[i] = outC
	}
	lose(&in, 0, lost.LimitTooTight, 8, 2, -1)
	lose(&in, 0, lost.LimitTooTight, 12, 12, -1)
	in.Changeover = &changeover.Result{Units: []changeover.Subject{{ID: "U1", Closing: changeover.Direction{Limits: []changeover.Limit{
		{Zone: -1, Above: true, LevelC: 21, Shift: &changeover.Shift{What: "limit", Day: 10, FromDay: 9, ToDay: 11, Before: before, After: after}}}}}}}
	return in
}

func finding(list []Finding, id string) *Finding {
	for k := range list {
		if strings.HasPrefix(list[k].ID, id) {
			return &list[k]
		}
	}
	return nil
}

// A limit that became tighter is sized by what is lost since then between the
// old level and the new one, and nothing else.
func TestTightenedLimit(t *testing.T) {
	f := finding(Advise(tightenedAt(24, 20, 22)), "limit-tightened")
	if f == nil {
		t.Fatal("no finding")
	}
	filled(t, *f)
	if math.Abs(f.Hours-12) > 1e-9 || math.Abs(f.PersonH-240) > 1e-9 || !strings.Contains(f.What, "2031-05-15") || f.Evidence.TypicalDay < "2031-05-15" {
		t.Errorf("%v h, %v person-hours, typical %s: %s", f.Hours, f.PersonH, f.Evidence.TypicalDay, f.What)
	}
	if f := finding(Advise(tightenedAt(20, 24, 22)), "limit-tightened"); f != nil {
		t.Errorf("a wider limit is no loss: %s", f.What)
	}
	if f := finding(Advise(tightenedAt(24, 20, 18)), "limit-tightened"); f != nil {
		t.Errorf("nothing was lost between the two levels: %s", f.What)
	}
}

// Starts by the clock that came within the period.
func TestMoreByClock(t *testing.T) {
	in := quiet()
	lose(&in, 0, lost.ClockStart, 16, 12, -1)
	in.Lost.Patterns[0].Clock = lost.ClockPattern{Found: true, Minutes: []int{480}, Share: 0.9, HoldMinute: -1}
	in.Changeover = &changeover.Result{Units: []changeover.Subject{{ID: "U1", Clock: &changeover.Shift{What: "start by the clock", Day: 12, FromDay: 12, ToDay: 12, Before: 0.1, After: 0.9}}}}
	f := finding(Advise(in), "clock-start-added")
	if f == nil {
		t.Fatal("no finding")
	}
	filled(t, *f)
	if math.Abs(f.Hours-16) > 1e-9 || !strings.Contains(f.What, "90 %") {
		t.Errorf("%v h: %s", f.Hours, f.What)
	}
}

// A room that starts the plant for all comes with what other rules would have
// freed and cost.
func TestFewRoomSaysWhatElse(t *testing.T) {
	in := quiet()
	lose(&in, 0, lost.FewRoom, 16, 4, 2)
	in.Leaders = &leaders.Result{Leaders: []leaders.Leader{{Zone: 2, Starts: 4,
		Ignored:  leaders.Instead{FreedH: 14, OwnWarmLowH: 3, OwnWarmHighH: 8.2, RunsAvoided: 4},
		Moved:    leaders.Instead{FreedH: 12, OwnWarmHighH: 2.5},
		TwoCalls: leaders.Instead{FreedH: 9}}}}
	f := finding(Advise(in), "few-room-C")
	if f == nil {
		t.Fatal("no finding")
	}
	filled(t, *f)
	for _, want := range []string{"4 runs", "up to 14 zone-hours freed", "3 to 9 h more too warm in zone C", "up to 12 zone-hours", "at most 3 h more", "up to 9 zone-hours", "no h more"} {
		if !strings.Contains(f.DoNext, want) {
			t.Errorf("%q not in: %s", want, f.DoNext)
		}
	}
}
