package advice

import (
	"math"
	"strings"
	"testing"
	"time"

	"sashlog/analyze/afterhours"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

const days, dayN = 20, 24 // hourly steps keep the cases small

// quiet is a building of three zones for 20, 5 and 2 people and one unit, in
// which nothing is lost: occupied from 08:00 to 18:00 every day, open
// throughout.
func quiet() Input {
	n := days * dayN
	in := Input{
		Site:       &site.Site{Plant: []site.Plant{{ID: "U1", Serves: []string{"A", "B", "C"}, Air: site.AirMixed, RatedPowerKW: 5}}},
		Criteria:   criteria.Settings{OutdoorLowC: 12.8, RiseK: 1, ReopenDelayMin: 30, FewRoomShare: 0.3, CO2AboveOutdoorPPM: 800},
		Grid:       &grid.Grid{StartUTC: time.Date(2031, 5, 5, 0, 0, 0, 0, time.UTC).Unix(), StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC},
		Outdoor:    &outdoor.Outdoor{CO2DefaultPPM: 420},
		Running:    &running.Result{},
		Exceedance: &exceedance.Result{Headline: "en16798-1"},
		Record:     &hours.Record{},
		Summary:    &hours.Summary{},
		FreshAir:   &freshair.Result{Zones: make([]freshair.Zone, 3)},
		AfterHours: &afterhours.Result{Zones: make([]afterhours.Zone, 3), Units: []afterhours.Unit{{ID: "U1", VacantH: 280}}},
		Lost: &lost.Result{ByCauseH: make([][lost.NumCauses]float64, 3), AloneH: make([][lost.NumCauses]float64, 3), AnyH: make([][lost.NumCauses]float64, 3),
			IndoorLimitH: make([]float64, 3), LedH: make([]map[int]float64, 3), Patterns: make([]lost.Pattern, 3), Units: []lost.UnitPattern{{ID: "U1"}}},
	}
	for d := 0; d < days; d++ {
		in.Outdoor.Days = append(in.Outdoor.Days, outdoor.Day{MeanC: 15 + float64(d%5)})
	}
	for z, people := range []float64{20, 5, 2} {
		in.Site.Zones = append(in.Site.Zones, site.Zone{ID: string(rune('A' + z)), People: people, Openings: site.Openings{Outdoors: true}})
		in.Site.Points = append(in.Site.Points, site.Point{Source: "log", Column: "temp " + string(rune('A'+z)), Owner: site.OwnerZone, Index: z, Quantity: site.AirTemp})
		in.Grid.Columns = append(in.Grid.Columns, grid.Column{Mean: make([]float32, n)})
		run := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: make([]uint8, n)}
		class := make([]hours.Class, n)
		co2, temp, high := make([]float32, n), make([]float32, n), make([]float32, n)
		for i := range class {
			run.State[i] = running.Shut
			co2[i], temp[i], high[i] = 600, 23, 26
			if h := i % dayN; h >= 8 && h < 18 {
				run.Occupied[i], run.State[i], class[i] = running.Occupied, running.Open, hours.AchievedOK
			}
		}
		in.Running.Zones = append(in.Running.Zones, run)
		in.Record.Class = append(in.Record.Class, class)
		in.Indoor = append(in.Indoor, indoor.Zone{CO2PPM: co2, OperativeC: temp})
		in.Exceedance.Zones = append(in.Exceedance.Zones, exceedance.Zone{Limits: exceedance.Limits{HighC: high},
			Criteria: []exceedance.Criterion{{ID: "en16798-1", AppliesH: 200}}})
		total := hours.Total{}
		total.H[hours.COccupied] = 200
		in.Summary.Zones = append(in.Summary.Zones, total)
		in.Lost.LedH[z] = map[int]float64{}
		in.Lost.Patterns[z].Limit = lost.LimitPattern{UpperC: math.NaN(), LowerC: math.NaN(), IndoorC: math.NaN(), MarginK: math.NaN()}
	}
	return in
}

// lose gives a zone missed hours of a cause, four a day from 09:00 on the days
// from first on.
func lose(in *Input, z int, c lost.Cause, h float64, first, led int) {
	in.Lost.ByCauseH[z][c] += h
	in.Lost.AloneH[z][c] += 0.8 * h
	in.Lost.AnyH[z][c] += 1.1 * h
	m := &in.Summary.Zones[z].Missed
	m.Value += h
	m.Low, m.High = m.Value, m.Value
	if led >= 0 {
		in.Lost.LedH[z][led] += h
	}
	for d := first; h > 0; d++ {
		part := math.Min(4, h)
		h -= part
		from := d*dayN + 9
		for i := from; i < from+4; i++ {
			in.Record.Class[z][i] = hours.MissedCool
		}
		in.Lost.Episodes = append(in.Lost.Episodes, lost.Episode{Zone: z, FromStep: from, ToStep: from + 4, Hours: part, Cause: c, Led: led, Evidence: "made up"})
	}
}

func filled(t *testing.T, f Finding) {
	t.Helper()
	for what, text := range map[string]string{"id": f.ID, "what": f.What, "confidence": f.Confidence, "figure": f.Evidence.Figure, "check": f.CheckOnSite,
		"do": f.DoNext, "who": f.Who, "undo": f.UndoIf, "caution": f.Caution} {
		if text == "" {
			t.Errorf("%s: no %s", f.ID, what)
		}
		if strings.Contains(text, "NaN") || strings.Contains(text, "%!") || strings.Contains(text, "  ") {
			t.Errorf("%s: %s %q", f.ID, what, text)
		}
	}
	if len(f.RivalExplanations) == 0 || len(f.Zones) == 0 {
		t.Errorf("%s: rivals %q, zones %q", f.ID, f.RivalExplanations, f.Zones)
	}
	if !(f.Low <= f.Hours && f.Hours <= f.High) {
		t.Errorf("%s: %v h between %v and %v", f.ID, f.Hours, f.Low, f.High)
	}
	if f.Evidence.TypicalDay != "" && f.Evidence.TypicalDay == f.Evidence.ContraryDay {
		t.Errorf("%s: the typical day %s is the contrary one too", f.ID, f.Evidence.TypicalDay)
	}
}

func TestNothingToGain(t *testing.T) {
	if f := Advise(quiet()); len(f) != 0 {
		t.Errorf("%+v", f)
	}
}

func TestFewRoom(t *testing.T) {
	in := quiet()
	lose(&in, 0, lost.FewRoom, 22, 4, 2)
	lose(&in, 1, lost.FewRoom, 10, 4, 2)
	// Four unjudged hours may have been missed as well.
	in.Summary.Zones[1].Missed.High += 4
	fs := Advise(in)
	if len(fs) != 1 {
		t.Fatalf("%d findings: %+v", len(fs), fs)
	}
	f := fs[0]
	filled(t, f)
	if f.ID != "few-room-C" || f.Hours != 32 || f.PersonH != 22*20+10*5 || math.Abs(f.Low-25.6) > 1e-9 || math.Abs(f.High-39.2) > 1e-9 {
		t.Errorf("%+v", f)
	}
	if strings.Join(f.Zones, "") != "AB" {
		t.Errorf("zones %q, most person-hours first", f.Zones)
	}
	for _, part := range []string{"The thermostat of zone C starts plant unit U1", "about 32 zone-hours (25 to 40)", "in the 20 days audited"} {
		if !strings.Contains(f.What, part) {
			t.Errorf("%q lacks %q", f.What, part)
		}
	}
	// From the fifth day (9 May) 8, 8, 6, 4, 4 and 2 h were lost: the upper
	// median is 6 h.
	if f.Evidence.TypicalDay != "2031-05-11" || f.Evidence.ContraryDay != "2031-05-05" {
		t.Errorf("days %q and %q", f.Evidence.TypicalDay, f.Evidence.ContraryDay)
	}
	if len(f.Evidence.Points) != 1 || f.Evidence.Points[0] != "log:temp C" {
		t.Errorf("points %q", f.Evidence.Points)
	}
}

func TestEveryCauseHasAFinding(t *testing.T) {
	in := quiet()
	for c := lost.Unexplained; c < lost.NumCauses; c++ {
		led := -1
		if c == lost.FewRoom {
			led = 2
		}
		zone := 0
		if c == lost.SlowToReopen {
			zone = 1
		}
		lose(&in, zone, c, 8, int(c), led)
	}
	in.Lost.Patterns[0].Clock = lost.ClockPattern{Found: true, Minutes: []int{390}, Share: 0.87, HoldMinute: 570}
	in.Lost.Patterns[1].Clock = in.Lost.Patterns[0].Clock
	in.Lost.Patterns[0].Limit.UpperC, in.Lost.Patterns[0].Limit.UpperN, in.Lost.Patterns[0].Limit.Unit = 21, 12, "U1"
	want := map[string]string{
		"never-used": "next to never opened", "not-interlocked": "while the plant runs", "clock-start": "Plant unit U1 starts at 06:30 by the clock, whatever the weather (on 87 % of working days)",
		"outdoor-limit-U1": "Plant unit U1 allows no open mode above about 21.0 °C outdoors", "slow-to-reopen": "Zone B goes back to open mode", "few-room-C": "thermostat of zone C",
		"not-opened": "windows shut and nothing mechanical running", "manual-override": "A manual override was on", "needless-lock": "Windows were locked with nothing mechanical running",
		"misleading-thermostat": "read warmer than its own room", "short-cycling": "Plant unit U1 starts and stops three times or more",
	}
	for _, f := range Advise(in) {
		filled(t, f)
		if part, ok := want[f.ID]; !ok || !strings.Contains(f.What, part) {
			t.Errorf("%s: %q", f.ID, f.What)
		}
		delete(want, f.ID)
	}
	for id := range want {
		t.Errorf("no finding %s", id)
	}
}

func TestIndoorLimit(t *testing.T) {
	in := quiet()
	lose(&in, 1, lost.LimitTooTight, 12, 0, -1)
	in.Lost.IndoorLimitH[1] = 12
	in.Lost.Units[0].Calls = []lost.Call{{Zone: 1, AboveC: 24.1, Passed: 30, Followed: 28, MarginK: 1.9}, {Zone: 0, AboveC: 25.5, Passed: 9, Followed: 8, MarginK: 0.5}}
	fs := Advise(in)
	if len(fs) != 1 || fs[0].ID != "indoor-limit" || !strings.Contains(fs[0].What, "at about 24.1 °C indoors, up to 1.9 K below the comfort limit") {
		t.Fatalf("%+v", fs)
	}
	filled(t, fs[0])
}

func TestStaleAir(t *testing.T) {
	in := quiet()
	for z := 1; z < 3; z++ {
		l := &in.FreshAir.Zones[z].State[running.Mech]
		l.KnownH, l.UnknownH, l.AboveCatH[3], l.AboveOutdoorMeanPPM = 50, 10, 10, 700
		for d := 0; d < 10; d++ {
			i := d*dayN + 10
			in.Running.Zones[z].State[i] = running.Mech
			in.Indoor[z].CO2PPM[i] = 1500
		}
	}
	in.FreshAir.Zones[1].State[running.Open].KnownH, in.FreshAir.Zones[1].State[running.Open].AboveOutdoorMeanPPM = 50, 180
	fs := Advise(in)
	if len(fs) != 1 || fs[0].ID != "stale-mechanical" || fs[0].Hours != 20 || fs[0].High != 24 || fs[0].PersonH != 70 {
		t.Fatalf("%+v", fs)
	}
	filled(t, fs[0])
	if !strings.Contains(fs[0].What, "700 ppm above outdoors on average, 180 ppm when open") || !strings.Contains(fs[0].Caution, "infection") {
		t.Errorf("%q, %q", fs[0].What, fs[0].Caution)
	}
	in.Site.Plant[0].Air = site.AirRecirculated
	fs = Advise(in)
	if len(fs) != 1 || fs[0].ID != "stale-recirculating" || !strings.Contains(fs[0].What, "Plant unit U1 brings no outdoor air") {
		t.Errorf("%+v", fs)
	}
	// Up to 5 % of the time is within what the categories allow.
	for z := 1; z < 3; z++ {
		in.FreshAir.Zones[z].State[running.Mech].KnownH = 300
	}
	if fs = Advise(in); len(fs) != 0 {
		t.Errorf("%+v", fs)
	}
}

func TestWarmNightAndUnknown(t *testing.T) {
	in := quiet()
	c := &in.Exceedance.Zones[0].Criteria[0]
	c.OverH, c.UnknownH = 20, 10
	for d := 3; d < 13; d++ {
		in.Indoor[0].OperativeC[d*dayN+14], in.Indoor[0].OperativeC[d*dayN+15] = 27, 27
	}
	in.AfterHours.Units[0].OnH, in.AfterHours.Units[0].WarmUpH, in.AfterHours.Units[0].NightsOn, in.AfterHours.Units[0].NightsKnown = 90, 10, 1, 19
	in.AfterHours.Units[0].EnergyKWh = 450
	in.AfterHours.Zones[0].PurgeAvailableH = 30
	in.Summary.Zones[2].H[hours.CUnjudged] = 50
	for i := 0; i < 5*dayN; i++ {
		if in.Record.Class[2][i] != hours.NotOccupied {
			in.Record.Class[2][i], in.Running.Zones[2].State[i] = hours.UnjudgedSuited, running.Unknown
		}
	}
	fs := Advise(in)
	var ids []string
	for _, f := range fs {
		filled(t, f)
		ids = append(ids, f.ID)
	}
	if got := strings.Join(ids, " "); got != "too-warm plant-after-hours night-purge unknown-hours" {
		t.Fatalf("order %q", got)
	}
	if fs[0].Hours != 20 || fs[0].High != 21 || !strings.Contains(fs[0].What, "(10 % of occupied hours)") {
		t.Errorf("%+v", fs[0])
	}
	if f := fs[1]; f.Hours != 80 || f.PersonH != 0 || !strings.Contains(f.What, "at most 400 kWh") || !strings.Contains(f.What, "left on in 1 night of 19 known") {
		t.Errorf("%+v", f)
	}
	if f := fs[3]; f.Hours != 50 || !strings.Contains(f.What, "8 % of occupied hours cannot be judged, most for missing window contacts") {
		t.Errorf("%+v", f)
	}
}

// Where the outdoor temperature is known but not that of the days before, the
// finding sends nobody to the outdoor sensor.
func TestUnknownForWantOfEarlierDays(t *testing.T) {
	for name, earlier := range map[string]bool{"days before": true, "missing weather": false} {
		in := quiet()
		n := days * dayN
		in.Outdoor.TempC, in.Outdoor.DayOf = make([]float32, n), make([]int32, n)
		for i := range n {
			in.Outdoor.DayOf[i] = int32(i / dayN)
			if !earlier {
				in.Outdoor.TempC[i] = float32(math.NaN())
			}
		}
		for d := range in.Outdoor.Days {
			in.Outdoor.Days[d].RunningMeanENC = math.NaN()
		}
		in.Summary.Zones[2].H[hours.CUnjudged] = 200
		for i := range in.Record.Class[2] {
			if in.Record.Class[2][i] != hours.NotOccupied {
				in.Record.Class[2][i] = hours.Unjudged
			}
		}
		fs := Advise(in)
		if len(fs) != 1 || !strings.Contains(fs[0].What, name) || strings.Contains(fs[0].CheckOnSite, "sensors log") == earlier {
			t.Errorf("%s: %+v", name, fs)
			continue
		}
		filled(t, fs[0])
	}
}

func TestRankAndCap(t *testing.T) {
	in := quiet()
	lose(&in, 2, lost.NotOpened, 30, 0, -1)      // 60 person-hours
	lose(&in, 0, lost.SlowToReopen, 5, 10, -1)   // 100 person-hours
	lose(&in, 1, lost.NotInterlocked, 1, 15, -1) // too little
	fs := Advise(in)
	if len(fs) != 2 || fs[0].ID != "slow-to-reopen" || fs[1].ID != "not-opened" {
		t.Fatalf("%+v", fs)
	}
	// Without people hours rank.
	for z := range in.Site.Zones {
		in.Site.Zones[z].People = math.NaN()
	}
	fs = Advise(in)
	if len(fs) != 2 || fs[0].ID != "not-opened" || !math.IsNaN(fs[0].PersonH) {
		t.Fatalf("%+v", fs)
	}
}

func TestWords(t *testing.T) {
	for _, c := range []struct {
		h, low, high float64
		want         string
	}{
		{217.3, 180, 260, "about 220 h (180 to 260 h)"},
		{51.9, 0, 206, "about 50 h (0 to 210 h)"},
		{61.5, 60.8, 66.8, "about 62 h (60 to 67 h)"},
		{1589, 1474, 1746, "about 1,600 h (1,400 to 1,800 h)"},
		{8760, 8760, 8760, "about 8,800 h"},
		{0.3, 0, 0.4, "under 1 h"},
		{6, 6, 6, "about 6 h"},
	} {
		if got := between(c.h, c.low, c.high, "h"); got != c.want {
			t.Errorf("%v (%v to %v): %q, want %q", c.h, c.low, c.high, got, c.want)
		}
	}
	for _, c := range []struct {
		names string
		want  string
	}{{"A", "A"}, {"A B", "A and B"}, {"A B C D", "A, B, C and D"}, {"A B C D E F", "A, B, C and 3 more"}} {
		if got := list(strings.Fields(c.names), 4); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
	if count(1, "night", "nights") != "1 night" || count(1200, "night", "nights") != "1,200 nights" {
		t.Error("counts")
	}
}
