package lost

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Hand-made buildings, one cause each. What is expected follows from how they
// were made.

func TestClockStart(t *testing.T) {
	b := newBuilding(21, 2)
	b.unit("U1")
	k := 0
	b.workdays(func(d int) {
		k++
		for z := 0; z < 2; z++ {
			b.set(z, d, at24(6, 30), at24(9, 30), running.Mech)
			b.set(z, d, at24(9, 30), at24(18, 0), running.Open)
		}
		// The weather differs from day to day.
		for i := d * dayN; i < (d+1)*dayN; i++ {
			b.Outdoor.TempC[i] = 13 + float32(k%7)
		}
	})
	r := b.find()
	if c := taken(r, 0); c != ClockStart {
		t.Fatalf("taken by %v: %+v", c, r.ByCauseH[0])
	}
	if got, want := r.ByCauseH[0][ClockStart], 15*1.5; math.Abs(got-want) > 1e-9 {
		t.Errorf("%v h, want %v h (08:00 to 09:30 of 15 days)", got, want)
	}
	p := r.Patterns[0].Clock
	if !p.Found || len(p.Minutes) != 1 || p.Minutes[0] != 390 || p.Share != 1 || p.ShareSuited != 1 || p.HoldMinute != 570 {
		t.Errorf("pattern %+v", p)
	}
	ep := r.Episodes[0]
	for _, part := range []string{"06:30", "100 % of working days", "°C outdoors"} {
		if !strings.Contains(ep.Evidence, part) {
			t.Errorf("evidence %q lacks %q", ep.Evidence, part)
		}
	}
	if ep.Running != "mech" || ep.People != 10 || math.Abs(ep.PersonH-15) > 1e-9 || ep.Led != -1 {
		t.Errorf("episode %+v", ep)
	}
}

// The plant starts at 08:00 sharp, but only on days when the weather does not
// suit then: the programme asks the weather, so the clock is not to blame.
func TestStartByWeatherAtAFixedTime(t *testing.T) {
	b := newBuilding(42, 1)
	b.workdays(func(d int) {
		if d%2 == 0 {
			b.set(0, d, at24(8, 0), at24(18, 0), running.Open)
			return
		}
		b.set(0, d, at24(8, 0), at24(18, 0), running.Mech)
		for i := d*dayN + at24(6, 0); i < d*dayN+at24(13, 0); i++ {
			b.Potential.Zones[0].Suit[i] = potential.TooCold
		}
	})
	r := b.find()
	if p := r.Patterns[0].Clock; p.Found {
		t.Errorf("pattern %+v", p)
	}
	if h := r.ByCauseH[0][ClockStart]; h != 0 {
		t.Errorf("%v h by the clock", h)
	}
}

func TestRoundTheClock(t *testing.T) {
	b := newBuilding(14, 1)
	for d := 0; d < 14; d++ {
		b.set(0, d, 0, dayN, running.Mech)
	}
	r := b.find()
	if r.ByCauseH[0][ClockStart] != 100 || !strings.Contains(r.Episodes[0].Evidence, "round the clock") {
		t.Errorf("%+v", r.ByCauseH[0])
	}
}

func TestOutdoorLimit(t *testing.T) {
	b := newBuilding(28, 2)
	b.unit("U1")
	// Outdoors rises through the day to another peak each day; above 21 °C the
	// unit takes over, although the weather suits up to 26 °C.
	k := 0
	b.workdays(func(d int) {
		k++
		peak := 19 + float64(k%6)
		for h := 0; h < dayN; h++ {
			b.Outdoor.TempC[d*dayN+h] = float32(peak - 6*math.Abs(float64(h-at24(16, 0)))/float64(at24(8, 0)))
		}
		for h := at24(8, 0); h < at24(18, 0); h++ {
			s := running.Open
			if b.Outdoor.TempC[d*dayN+h] > 21 {
				s = running.Mech
			}
			for z := 0; z < 2; z++ {
				b.set(z, d, h, h+1, s)
			}
		}
	})
	r := b.find()
	if c := taken(r, 1); c != LimitTooTight {
		t.Fatalf("taken by %v: %+v", c, r.ByCauseH[1])
	}
	p := r.Patterns[1].Limit
	if math.Abs(p.UpperC-21) > 0.25 || p.Unit != "U1" || !math.IsNaN(p.LowerC) || p.FreeShareAbove > 0.01 {
		t.Errorf("limit %+v", p)
	}
	if e := r.Episodes[0].Evidence; !strings.Contains(e, "U1 ends open mode at about 21.") || !strings.Contains(e, "suits up to 26.0 °C") {
		t.Errorf("evidence %q", e)
	}
	if r.IndoorLimitH[1] != 0 {
		t.Errorf("%v h by an indoor limit", r.IndoorLimitH[1])
	}
}

func TestSlowToReopen(t *testing.T) {
	b := newBuilding(21, 1)
	k := 0
	b.workdays(func(d int) {
		k++
		from := at24(9, 0) + k%12*3 // no fixed time of day
		for i := d*dayN + at24(0, 0); i < d*dayN+from; i++ {
			b.Potential.Zones[0].Suit[i] = potential.TooCold
		}
		b.set(0, d, at24(7, 0)+k%5*4, from+12, running.Mech)
		b.set(0, d, from+12, at24(18, 0), running.Open)
	})
	r := b.find()
	if c := taken(r, 0); c != SlowToReopen {
		t.Fatalf("taken by %v: %+v", c, r.ByCauseH[0])
	}
	if !strings.Contains(r.Episodes[0].Evidence, "60 min later") {
		t.Errorf("evidence %q", r.Episodes[0].Evidence)
	}
	// A delay that is allowed is not slow.
	b.Criteria.ReopenDelayMin = 60
	if h := b.find().ByCauseH[0][SlowToReopen]; h != 0 {
		t.Errorf("%v h slow at the allowed delay", h)
	}
}

// Four rooms and one unit; whenever the smallest passes 25 °C the unit starts
// for all of them, at another time every day.
func fewRoomBuilding(people float64) *building {
	b := newBuilding(28, 4)
	b.unit("U1")
	b.Site.Zones[3].People = people
	k := 0
	b.workdays(func(d int) {
		k++
		start := at24(9, 0) + k*7%40*2
		for z := 0; z < 4; z++ {
			b.set(z, d, at24(8, 0), start, running.Open)
			b.set(z, d, start, start+18, running.Mech)
			b.set(z, d, start+18, at24(18, 0), running.Open)
		}
		for h := 0; h < dayN; h++ {
			c := 24.4
			switch {
			case h >= start-20 && h < start+6:
				c = 25 + 0.05*float64(h-start)
			case h >= start+6 && h < start+18:
				c = 25.3 - 0.1*float64(h-start-6)
			}
			b.Indoor[3].OperativeC[d*dayN+h] = float32(c)
		}
	})
	return b
}

func TestFewRoomCalls(t *testing.T) {
	r := fewRoomBuilding(4).find()
	for z := 0; z < 3; z++ {
		if c := taken(r, z); c != FewRoom {
			t.Fatalf("zone %d taken by %v: %+v", z, c, r.ByCauseH[z])
		}
		if math.Abs(r.LedH[z][3]-r.ByCauseH[z][FewRoom]) > 1e-9 {
			t.Errorf("led by %v of %v h", r.LedH[z], r.ByCauseH[z][FewRoom])
		}
	}
	c := r.Units[0].Calls[3]
	if math.Abs(c.AboveC-25) > 0.1001 || c.Followed < 15 || c.Passed > c.Followed+2 {
		t.Errorf("call %+v", c)
	}
	for _, other := range r.Units[0].Calls[:3] {
		if !math.IsNaN(other.AboveC) {
			t.Errorf("zone %d does not call: %+v", other.Zone, other)
		}
	}
	if e := r.Episodes[0].Evidence; !strings.Contains(e, "U1 ran while 0 % of the people it serves were too warm; zone D led") {
		t.Errorf("evidence %q", e)
	}
}

// The same starts are no few-room changeover when the room that calls holds
// half of the people; its limit is then too tight, a kelvin below comfort.
func TestManyPeopleCall(t *testing.T) {
	r := fewRoomBuilding(30).find()
	if h := r.ByCauseH[0][FewRoom]; h != 0 {
		t.Errorf("%v h few-room", h)
	}
	if c := taken(r, 0); c != LimitTooTight || math.Abs(r.IndoorLimitH[0]-r.ByCauseH[0][LimitTooTight]) > 1e-9 {
		t.Errorf("taken by %v, %v h indoors", c, r.IndoorLimitH[0])
	}
}

func TestFewRoomTooWarm(t *testing.T) {
	b := newBuilding(7, 4)
	b.unit("U1")
	for z := 0; z < 4; z++ {
		b.set(z, 1, at24(8, 0), at24(11, 0), running.Open)
		b.set(z, 1, at24(11, 0), at24(13, 0), running.Mech)
		b.set(z, 1, at24(13, 0), at24(18, 0), running.Open)
	}
	for i := dayN + at24(10, 30); i < dayN+at24(13, 0); i++ {
		b.Indoor[2].OperativeC[i] = 27
	}
	r := b.find()
	if r.ByCauseH[0][FewRoom] != 2 || r.Episodes[0].Led != 2 || !strings.Contains(r.Episodes[0].Evidence, "25 % of the people") {
		t.Errorf("%+v, %+v", r.ByCauseH[0], r.Episodes[0])
	}
	// With a second room as warm, half of the people are: not few.
	for i := dayN + at24(10, 30); i < dayN+at24(13, 0); i++ {
		b.Indoor[1].OperativeC[i] = 27
	}
	if r := b.find(); r.ByCauseH[0][FewRoom] != 0 || r.ByCauseH[0][Unexplained] != 2 {
		t.Errorf("%+v", r.ByCauseH[0])
	} else if !strings.Contains(r.Episodes[0].Evidence, "50 % of the people its plant serves were too warm") {
		t.Errorf("evidence %q", r.Episodes[0].Evidence)
	}
}

func TestLoggedSetPoint(t *testing.T) {
	b := newBuilding(7, 4)
	b.unit("U1")
	b.Site.Points = append(b.Site.Points, site.Point{Owner: site.OwnerZone, Index: 3, Quantity: site.SetpointCool})
	b.Grid.Columns = append(b.Grid.Columns, gridColumn(constant(b.Grid.N, 24)))
	for z := 0; z < 4; z++ {
		b.set(z, 1, at24(8, 0), at24(11, 0), running.Open)
		b.set(z, 1, at24(11, 0), at24(13, 0), running.Mech)
	}
	for i := dayN + at24(10, 0); i < dayN+at24(13, 0); i++ {
		b.Indoor[3].OperativeC[i] = 24.5
	}
	r := b.find()
	if r.ByCauseH[0][FewRoom] != 2 || !strings.Contains(r.Episodes[0].Evidence, "cooling set-point 24.0 °C") {
		t.Errorf("%+v %+v", r.ByCauseH[0], r.Episodes)
	}
}

func TestNeverUsed(t *testing.T) {
	b := newBuilding(21, 2)
	b.workdays(func(d int) {
		b.set(0, d, at24(8, 0), at24(18, 0), running.Open)
		for i := d*dayN + at24(13, 0); i < d*dayN+at24(16, 0); i++ {
			b.Indoor[1].OperativeC[i] = 27
		}
	})
	r := b.find()
	if r.ByCauseH[1][NeverUsed] != 45 || !r.Patterns[1].Opening.NeverUsed || r.Patterns[0].Opening.NeverUsed {
		t.Errorf("%+v, %+v", r.ByCauseH[1], r.Patterns[1].Opening)
	}
}

func TestNotOpened(t *testing.T) {
	b := newBuilding(14, 1)
	b.Site.Zones[0].Windows = site.ManualWindows
	b.Running.Zones[0].PeopleCanOpen = true
	b.workdays(func(d int) {
		if d < 7 {
			b.set(0, d, at24(8, 0), at24(18, 0), running.Open)
			return
		}
		for i := d*dayN + at24(13, 0); i < d*dayN+at24(14, 0); i++ {
			b.Indoor[0].OperativeC[i] = 27
		}
	})
	if r := b.find(); r.ByCauseH[0][NotOpened] != 5 {
		t.Errorf("%+v", r.ByCauseH[0])
	}
	// Locked windows are not for people to open.
	b.Site.Points = append(b.Site.Points, site.Point{Owner: site.OwnerSite, Quantity: site.WindowEnable})
	b.Grid.Columns = append(b.Grid.Columns, gridColumn(constant(b.Grid.N, 0)))
	if r := b.find(); r.ByCauseH[0][NotOpened] != 0 || r.ByCauseH[0][LockedOut] != 5 {
		t.Errorf("locked: %+v", r.ByCauseH[0])
	}
}

func TestNotInterlocked(t *testing.T) {
	b := newBuilding(7, 1)
	b.set(0, 2, at24(9, 0), at24(9, 40), running.Both)
	b.set(0, 2, at24(9, 40), at24(10, 0), running.Mech)
	r := b.find()
	if r.ByCauseH[0][NotInterlocked] != 1 || len(r.Episodes) != 1 || r.Episodes[0].Running != "both" {
		t.Errorf("%+v %+v", r.ByCauseH[0], r.Episodes)
	}
}

func TestBridgesAndShortRuns(t *testing.T) {
	b := newBuilding(7, 1)
	b.set(0, 0, at24(9, 0), at24(9, 30), running.Mech)
	b.set(0, 0, at24(9, 30), at24(9, 45), running.Open) // 15 min: bridged
	b.set(0, 0, at24(9, 45), at24(10, 0), running.Mech)
	b.set(0, 0, at24(10, 0), at24(10, 20), running.Open) // 20 min: not
	b.set(0, 0, at24(10, 20), at24(10, 30), running.Mech)
	r := b.find()
	if len(r.Episodes) != 1 {
		t.Fatalf("%d episodes, want 1: ten minutes are not listed", len(r.Episodes))
	}
	ep := r.Episodes[0]
	if ep.FromStep != at24(9, 0) || ep.ToStep != at24(10, 0) || math.Abs(ep.Hours-0.75) > 1e-9 {
		t.Errorf("%+v", ep)
	}
	if r.ByCauseS[0][ShortCycling] != 55*60 { // three starts in an hour and a half
		t.Errorf("%+v: short runs count under their cause", r.ByCauseS[0])
	}
}

// Causes sum exactly to the missed hours, whatever the record; nothing panics
// on unknown readings.
func TestCausesSum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		zones := rapid.IntRange(1, 3).Draw(t, "zones")
		b := newBuilding(7, zones)
		if rapid.Bool().Draw(t, "unit") {
			b.unit("U1")
		}
		nan := float32(math.NaN())
		for z := 0; z < zones; z++ {
			b.Running.Zones[z].PeopleCanOpen = rapid.Bool().Draw(t, "manual")
			for k := rapid.IntRange(0, 40).Draw(t, "pieces"); k > 0; k-- {
				from := rapid.IntRange(0, b.Grid.N-1).Draw(t, "from")
				to := min(b.Grid.N, from+rapid.IntRange(1, 200).Draw(t, "length"))
				b.set(z, 0, from, to, running.State(rapid.IntRange(0, 4).Draw(t, "state")))
				for i := from; i < to; i++ {
					switch k % 4 {
					case 0:
						b.Indoor[z].OperativeC[i] = nan
					case 1:
						b.Indoor[z].OperativeC[i] = 27
					case 2:
						b.Potential.Zones[z].Suit[i] = potential.Rain
					case 3:
						b.Running.Zones[z].Plant[i] = running.PlantUnknown
						b.Outdoor.TempC[i] = nan
					}
				}
			}
		}
		r := b.find()
		for z := 0; z < zones; z++ {
			var missed, caused int64
			for _, c := range b.Record.Class[z] {
				if c.Missed() {
					missed += b.Grid.StepS
				}
			}
			for c, s := range r.ByCauseS[z] {
				caused += s
				if h := r.ByCauseH[z][c]; math.Abs(h*3600-float64(s)) > 1e-6 || r.AloneH[z][c] > h+1e-9 || r.AnyH[z][c] < h-1e-9 {
					t.Fatalf("zone %d %v: %v h between %v and %v", z, Cause(c), h, r.AloneH[z][c], r.AnyH[z][c])
				}
			}
			if missed != caused {
				t.Fatalf("zone %d: causes sum to %d s of %d s missed", z, caused, missed)
			}
		}
		for _, ep := range r.Episodes {
			if ep.Evidence == "" || ep.Hours <= 0 {
				t.Fatalf("%+v", ep)
			}
		}
	})
}

func TestCauseWords(t *testing.T) {
	seen := map[string]bool{}
	for c := Unexplained; c < NumCauses; c++ {
		if w := c.String(); w == "" || seen[w] {
			t.Errorf("cause %d: %q", c, w)
		}
		seen[c.String()] = true
	}
	rules := map[Cause]bool{}
	for _, x := range (newBuilding(1, 1)).find().Tests {
		rules[x.Cause] = rules[x.Cause] || (x.Rule != "" && x.Standing != "")
	}
	if len(rules) != int(NumCauses) {
		t.Errorf("%d causes have rules, want %d", len(rules), NumCauses)
	}
}
