package ingest_test

import (
	"context"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/ingest"
	"sashlog/ingest/demo"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

var (
	clockSeeds = flag.Uint64("clockseeds", 1, "seeds of the table of planted clock errors")
	clockOnly  = flag.String("clockonly", "", "plant only errors whose name holds this")
	clockLogs  = flag.String("clocklogs", "logger206,weather", "logs the errors are planted in, such as floor2,logger206,plant_status,windows,weather")
)

func verdictOf(l *reading.Ledger, log string) *reading.ClockVerdict {
	for i := range l.Clocks {
		if l.Clocks[i].Log == log {
			return &l.Clocks[i]
		}
	}
	return &reading.ClockVerdict{}
}

func wrong(v *reading.ClockVerdict) bool {
	return v.Verdict != reading.ClockFits && v.Verdict != reading.ClockUntold
}

func dayAt(s *site.Site, unixS int64) string {
	return time.Unix(unixS, 0).In(s.Location).Format(time.DateOnly)
}

// plant makes a log's clock wrong by reading it with a correction it does not
// need; what must be found is that correction.
func plant(s *site.Site, log string, c func(*site.Clock)) {
	for i := range s.Logs {
		if s.Logs[i].Name == log {
			c(&s.Logs[i].Clock)
		}
	}
}

func ymd(y, m, d int) site.Date { return site.Date{Year: y, Month: time.Month(m), Day: d} }

type plantedClock struct {
	name     string
	verdict  []reading.ClockFound
	shiftMin float64
	tolMin   float64
	from, to site.Date // of a span
	plant    func(*site.Clock)
}

func plantedClocks() []plantedClock {
	const year = 2025
	// Central European daylight saving 2025, Directive 2000/84/EC.
	summer := site.ClockShift{From: ymd(year, 3, 30), To: ymd(year, 10, 25)}
	out := []plantedClock{{name: "ignored daylight saving", verdict: []reading.ClockFound{reading.ClockIgnoredSaving, reading.ClockFollowedSaving, reading.ClockForATime},
		shiftMin: -60, tolMin: 5, plant: func(c *site.Clock) { s := summer; s.ShiftS = -3600; c.Shifts = append(c.Shifts, s) }}}
	for _, m := range []float64{-480, -300, -90, -60, 60, 210, 330} {
		out = append(out, plantedClock{name: fmt.Sprintf("zone %+.1f h", m/60), verdict: []reading.ClockFound{reading.ClockOtherZone, reading.ClockForATime}, shiftMin: m, tolMin: 5,
			plant: func(c *site.Clock) { c.ShiftS += int(m) * 60 }})
	}
	for _, perMonth := range []float64{2, 10} {
		grows := perMonth * 12
		out = append(out, plantedClock{name: fmt.Sprintf("drift %g min a month", perMonth), verdict: []reading.ClockFound{reading.ClockDrifted}, shiftMin: grows, tolMin: max(8, 0.15*grows),
			plant: func(c *site.Clock) {
				c.Shifts = append(c.Shifts, site.ClockShift{From: ymd(year, 1, 1), To: ymd(year, 12, 31), Grows: true, EndShiftS: int(grows) * 60})
			}})
	}
	span := site.ClockShift{From: ymd(year, 8, 12), To: ymd(year, 9, 10), ShiftS: 3600}
	out = append(out, plantedClock{name: "one hour for a month", verdict: []reading.ClockFound{reading.ClockForATime}, shiftMin: 60, tolMin: 5, from: span.From, to: span.To,
		plant: func(c *site.Clock) { c.Shifts = append(c.Shifts, span) }})
	return slices.DeleteFunc(out, func(p plantedClock) bool { return !strings.Contains(p.name, *clockOnly) })
}

// Errors of known size are planted in one sound log at a time. The table says
// how often each is found, as what, and how far the shift is off.
func TestPlantedClockErrors(t *testing.T) {
	if testing.Short() {
		t.Skip("a year per error")
	}
	logs := strings.Split(*clockLogs, ",")
	type cell struct {
		found, kind, sure, n, others int
		worst                        float64
		note                         string
	}
	table := map[string]map[string]*cell{}
	for seed := uint64(1); seed <= *clockSeeds; seed++ {
		dir := write(t, demo.Options{Seed: seed})
		for _, p := range plantedClocks() {
			if table[p.name] == nil {
				table[p.name] = map[string]*cell{}
			}
			for _, log := range logs {
				s := load(t, dir)
				plant(s, log, p.plant)
				_, l := read(t, s, ingest.Options{})
				c := table[p.name][log]
				if c == nil {
					c = &cell{}
					table[p.name][log] = c
				}
				c.n++
				v := verdictOf(l, log)
				got := v.EndShiftMin
				if wrong(v) && math.Abs(got-p.shiftMin) <= p.tolMin {
					c.found++
					c.worst = max(c.worst, math.Abs(got-p.shiftMin))
					if slices.Contains(p.verdict, v.Verdict) {
						c.kind++
					}
					if v.Sure {
						c.sure++
					}
				} else {
					c.note = fmt.Sprintf("%s %.0f to %.0f", v.Verdict, v.ShiftMin, v.EndShiftMin)
				}
				if !p.from.IsZero() && wrong(v) {
					c.note += fmt.Sprintf(" %s..%s", dayAt(s, v.FromUTC), dayAt(s, v.ToUTC-1))
				}
				for i := range l.Clocks {
					if o := &l.Clocks[i]; o.Log != log && wrong(o) {
						c.others++
						c.note += fmt.Sprintf(" [%s: %s %.0f]", o.Log, o.Verdict, o.EndShiftMin)
					}
				}
			}
		}
	}
	t.Logf("%-26s %-14s %6s %6s %5s %9s %7s", "planted", "log", "found", "named", "sure", "off by", "others")
	for _, p := range plantedClocks() {
		for _, log := range logs {
			c := table[p.name][log]
			t.Logf("%-26s %-14s %3d/%-2d %6d %5d %5.0f min %7d  %s", p.name, log, c.found, c.n, c.kind, c.sure, c.worst, c.others, c.note)
			// A drift of half an hour in a year may hide in one building of five.
			if least := map[bool]int{false: c.n, true: c.n - 1 - c.n/5}[strings.HasPrefix(p.name, "drift 2 ")]; c.found < least || c.kind < least || c.others > 0 {
				t.Errorf("%s in %s: found in %d of %d, called by its name in %d; sound logs accused: %d", p.name, log, c.found, c.n, c.kind, c.others)
			}
		}
	}
}

// The demo's own logger runs an hour ahead for a month: found with its dates,
// and gone once the site file says what the finding proposes.
func TestDemoClockError(t *testing.T) {
	for seed := uint64(1); seed <= 5; seed++ {
		dir := t.TempDir()
		truth, err := demo.Write(dir, demo.Options{Seed: seed, Faults: true})
		if err != nil {
			t.Fatal(err)
		}
		s := load(t, dir)
		_, l := read(t, s, ingest.Options{})
		var f demo.Fault
		for _, x := range truth.Faults {
			if x.Kind == demo.FaultClock {
				f = x
			}
		}
		v := verdictOf(l, "logger206")
		from, to := float64(v.FromUTC-f.FromUTC)/86400, float64(v.ToUTC-f.ToUTC)/86400
		t.Logf("seed %d: %s, %+.0f min, first day off by %+.0f, last by %+.0f, better on %d of %d days", seed, v.Verdict, v.ShiftMin, from, to, v.Better, v.Days)
		if v.Verdict != reading.ClockForATime || v.ShiftMin != 60 || math.Abs(from) > 2 || math.Abs(to) > 2 || !v.Sure {
			t.Errorf("seed %d: %+v", seed, v)
		}
		for i := range l.Clocks {
			if o := &l.Clocks[i]; o.Log != "logger206" && wrong(o) {
				t.Errorf("seed %d: %s", seed, o.Evidence)
			}
		}
	}
}

// What the finding proposes puts the log right: with it in the site file no
// clock is doubted any more, and the room's readings fit the truth again as
// well as those of a building whose logger was never wrong.
func TestCorrectedClockFitsTheTruth(t *testing.T) {
	dir := t.TempDir()
	truth, err := demo.Write(dir, demo.Options{Seed: 1, Faults: true})
	if err != nil {
		t.Fatal(err)
	}
	s := load(t, dir)
	g, l := read(t, s, ingest.Options{})
	v := verdictOf(l, "logger206")
	raw, err := os.ReadFile(filepath.Join(dir, "site.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	before, after, ok := strings.Cut(string(raw), "path: logs/logger206.csv")
	line, rest, _ := strings.Cut(after, "\n")
	fixed := strings.Replace(line, "clock: local", v.SiteFile, 1)
	if !ok || fixed == line {
		t.Fatalf("no place for %q in %q", v.SiteFile, line)
	}
	if err := os.WriteFile(filepath.Join(dir, "site.yaml"), []byte(before+"path: logs/logger206.csv"+fixed+"\n"+rest), 0o600); err != nil {
		t.Fatal(err)
	}
	s2 := load(t, dir)
	g2, l2 := read(t, s2, ingest.Options{})
	for i := range l2.Clocks {
		if o := &l2.Clocks[i]; wrong(o) {
			t.Errorf("still doubted: %s", o.Evidence)
		}
	}
	if w := verdictOf(l2, "logger206"); !strings.Contains(w.Declared, "-60 min from 2025-06-") {
		t.Errorf("the correction is not stated: %q", w.Declared)
	}
	// Root mean square difference of the logged and the true CO2, by month.
	off := func(s *site.Site, g *grid.Grid, month time.Month) (rms float64, n int) {
		z := truth.Zone("L2.06")
		for p := range s.Points {
			if s.Points[p].Source != "logger206" || s.Points[p].Quantity != site.CO2 {
				continue
			}
			for i := range truth.N {
				k := g.Index(truth.StartUTC + int64(i)*300)
				if k < 0 || k >= g.N || g.Columns[p].CoveredS[k] == 0 || g.Time(k).Month() != month {
					continue
				}
				d := float64(g.Columns[p].Mean[k]) - float64(z.CO2PPM[i])
				rms, n = rms+d*d, n+1
			}
		}
		return math.Sqrt(rms / float64(n)), n
	}
	may, _ := off(s, g, time.May)
	// The edges of the span may take a day or two too many, so the whole of
	// June is looked at, with what is still wrong in it.
	june, n := off(s2, g2, time.June)
	t.Logf("CO2 off the truth by %.1f ppm in May, by %.1f ppm in June once corrected (%d steps)", may, june, n)
	if n < 8000 || june > 1.5*may {
		t.Errorf("June is off by %.1f ppm, May by %.1f, n %d", june, may, n)
	}
}

// Errors planted in the clocks of real logs are found by the same means. The
// stations of one city (daylight saving of 2013 began on 10 March, Energy Policy
// Act of 2005), the sun over Toronto and over Zwolle (saving ended on 30 October
// 2022, Directive 2000/84/EC), the rooms of a flat. The irradiance of Zwolle is
// a weather service's hourly mean laid half an hour early: on 22 October 2022 it
// lies between 07:30 and 18:00, its middle 29 min before true noon, 13:14. Hence
// the wider tolerance there.
func TestPlantedInRealLogs(t *testing.T) {
	shift := func(min int) func(*site.Clock) { return func(c *site.Clock) { c.ShiftS += min * 60 } }
	ignoring := func(from, to site.Date) func(*site.Clock) {
		return func(c *site.Clock) { c.Shifts = append(c.Shifts, site.ClockShift{From: from, To: to, ShiftS: -3600}) }
	}
	whole := func(name string) func(*testing.T) *site.Site {
		return func(t *testing.T) *site.Site {
			l, err := configs.Load(filepath.Join("..", "testdata", "real", name, "site.yaml"), func(string) string { return "" })
			if err != nil {
				t.Fatal(err)
			}
			return l.Site
		}
	}
	made := func(f func(*testing.T) *realSite) func(*testing.T) *site.Site {
		return func(t *testing.T) *site.Site { return f(t).load(t) }
	}
	for _, c := range []struct {
		set   string
		site  func(*testing.T) *site.Site
		log   string
		what  string
		plant func(*site.Clock)
		min   float64
	}{
		{"nyc-weather", made(airports), "jfk", "-60 min from 10 March", ignoring(ymd(2013, 3, 10), ymd(2013, 11, 2)), -60},
		{"nyc-weather", made(airports), "jfk", "-300 min", shift(-300), -300},
		{"nyc-weather", made(airports), "lga", "+60 min", shift(60), 60},
		{"nyc-weather", made(airports), "ewr", "+330 min", shift(330), 330},
		{"toronto-windows", whole("toronto-windows"), "weather", "-60 min", shift(-60), -60},
		{"toronto-windows", whole("toronto-windows"), "weather", "+240 min", shift(240), 240},
		{"toronto-windows", whole("toronto-windows"), "weather", "+60 min in June", func(c *site.Clock) {
			c.Shifts = append(c.Shifts, site.ClockShift{From: ymd(2012, 6, 1), To: ymd(2012, 6, 30), ShiftS: 3600})
		}, 60},
		{"brains4buildings", whole("brains4buildings"), "table", "-60 min to 29 October", ignoring(ymd(2022, 10, 1), ymd(2022, 10, 29)), -60},
		{"brains4buildings", whole("brains4buildings"), "table", "+120 min", shift(120), 120},
		{"open-smart-home", made(flat), "Kitchen", "+60 min", shift(60), 60},
		{"open-smart-home", made(flat), "Room3", "-120 min", shift(-120), -120},
	} {
		s := c.site(t)
		plant(s, c.log, c.plant)
		_, l, _ := readAll(s)
		v := verdictOf(l, c.log)
		others := 0
		for i := range l.Clocks {
			if l.Clocks[i].Log != c.log && wrong(&l.Clocks[i]) {
				others++
			}
		}
		t.Logf("%-17s %-8s %-22s found: %s, %+.0f min, sure %v, better on %d of %d days, other logs accused %d", c.set, c.log, c.what, v.Verdict, v.EndShiftMin, v.Sure, v.Better, v.Days, others)
		if !wrong(v) || math.Abs(v.EndShiftMin-c.min) > map[bool]float64{false: 10, true: 35}[c.set == "brains4buildings"] || others > 0 {
			t.Errorf("%s %s %s: %+v", c.set, c.log, c.what, v)
		}
	}
}

// Every log of one system that stays on standard time, read as local: none
// contradicts another, but each moves by an hour when the clocks change.
func TestAllLogsIgnoreSaving(t *testing.T) {
	s := load(t, write(t, demo.Options{Seed: 3}))
	for i := range s.Logs {
		plant(s, s.Logs[i].Name, plantedClocks()[0].plant)
	}
	_, l := read(t, s, ingest.Options{})
	found := 0
	for i := range l.Clocks {
		v := &l.Clocks[i]
		t.Logf("%-14s %-26s %4.0f  %s", v.Log, v.Verdict, v.ShiftMin, v.Evidence)
		if wrong(v) && v.ShiftMin != -60 {
			t.Errorf("%s: %s", v.Log, v.Evidence)
		}
		if wrong(v) {
			found++
		}
	}
	if v := verdictOf(l, "weather"); !v.Sure || found < 5 {
		t.Errorf("%d of %d found", found, len(l.Clocks))
	}
}

// Sound clocks raise no alarm.
func TestSoundClocks(t *testing.T) {
	for seed := uint64(1); seed <= 10; seed++ {
		s := load(t, write(t, demo.Options{Seed: seed, From: ymd(2025, int(seed), 15), Days: 75}))
		_, l := read(t, s, ingest.Options{})
		soundClocks(t, fmt.Sprintf("demo, seed %d", seed), l)
	}
	for _, name := range []string{"toronto-windows", "brains4buildings"} {
		_, l := real(t, name)
		soundClocks(t, name, l)
	}
}

func soundClocks(t *testing.T, name string, l *reading.Ledger) {
	t.Helper()
	fits, untold := 0, 0
	for i := range l.Clocks {
		switch v := &l.Clocks[i]; v.Verdict {
		case reading.ClockFits:
			fits++
		case reading.ClockUntold:
			untold++
		default:
			t.Errorf("%s: %s", name, v.Evidence)
		}
	}
	t.Logf("%-22s %d logs: %d fit, %d cannot be told, %d false alarms", name, len(l.Clocks), fits, untold, len(l.Clocks)-fits-untold)
	if len(l.Clocks) == 0 {
		t.Errorf("%s: no verdict", name)
	}
}

// The weather file of this set calls its times UTC; they are the site's local
// times (SOURCE.md: the sun is up from 05 to 20 h). Read as labelled, that is
// found against the sun, with the line that corrects it.
func TestTorontoLabelledUTC(t *testing.T) {
	loaded, err := configs.Load(filepath.Join("..", "testdata", "real", "toronto-windows", "site.yaml"), func(string) string { return "" })
	if err != nil {
		t.Fatal(err)
	}
	s := loaded.Site
	plant(s, "weather", func(c *site.Clock) { *c = site.Clock{Kind: site.ClockUTC} })
	_, l, _ := readAll(s)
	v := verdictOf(l, "weather")
	t.Log(v.Evidence, v.SiteFile)
	if v.Verdict != reading.ClockOtherZone || v.EndShiftMin != -240 || !v.Sure || v.SiteFile != "clock: local" {
		t.Errorf("%+v", v)
	}
}

// readAll reads a site whose readings may all be taken out.
func readAll(s *site.Site) (any, *reading.Ledger, error) {
	return ingest.Read(context.Background(), s, ingest.Options{})
}
