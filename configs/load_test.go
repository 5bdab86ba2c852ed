package configs

import (
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"

	"sashlog/configs/criteria"
	"sashlog/configs/site"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"pgregory.net/rapid"
)

func load(t testing.TB, path string) *Loaded {
	t.Helper()
	l, err := Load(path, nil)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func TestSampleLoads(t *testing.T) {
	l := load(t, "sample/site.yaml")
	if len(l.Warnings) > 0 {
		t.Error(l.Warnings)
	}
	if len(l.Site.Points) != 11 || len(l.Site.Diary) != 4 || len(l.Files) != 3 {
		t.Errorf("points %d, diary %d, files %d", len(l.Site.Points), len(l.Site.Diary), len(l.Files))
	}
	for _, f := range []string{"site.yaml", "points.csv", "events.csv"} {
		shipped, err := fs.ReadFile(Sample(), f)
		disk, err2 := os.ReadFile(filepath.Join("sample", f))
		if err != nil || err2 != nil || string(shipped) != string(disk) {
			t.Errorf("%s: the embedded sample differs (%v, %v)", f, err, err2)
		}
	}
}

// Ids are values, not keys: full stops, leading zeros and ids that differ in
// case only survive the configuration library.
func TestIDsSurvive(t *testing.T) {
	l := load(t, filepath.Join(corpus, "ids.good.yaml"))
	var ids []string
	for _, z := range l.Site.Zones {
		ids = append(ids, z.ID)
	}
	want := []string{"L1.02", "l1.02", "010", `<script>"x`}
	if d := cmp.Diff(want, ids); d != "" {
		t.Error(d)
	}
	if l.Site.Name != "2024" || l.Site.Zones[2].Floor != "01" || l.Site.Zones[0].Floor != "1" || l.Site.Zones[3].Name != "two\nlines" {
		t.Errorf("name %q, floors %q %q, name %q", l.Site.Name, l.Site.Zones[2].Floor, l.Site.Zones[0].Floor, l.Site.Zones[3].Name)
	}
	for i, zone := range []int{0, 1, 2, 3} {
		if p := l.Site.Points[i]; p.Owner != site.OwnerZone || p.Index != zone {
			t.Errorf("point %d belongs to %d, want zone %d", i, p.Index, zone)
		}
	}
	if p := l.Site.Points[5]; p.Owner != site.OwnerPlant || p.Index != 1 {
		t.Errorf("AHU-1 resolved to %d", p.Index)
	}
}

func TestEverything(t *testing.T) {
	l := load(t, filepath.Join(corpus, "everything.good.yaml"))
	s := l.Site
	check := func(what string, got, want any) {
		t.Helper()
		if d := cmp.Diff(want, got); d != "" {
			t.Errorf("%s: %s", what, d)
		}
	}
	check("period", s.Period, site.Period{From: site.Date{Year: 2025, Month: 1, Day: 1}, To: site.Date{Year: 2025, Month: 12, Day: 31}})
	check("step", s.StepS, 900)
	check("holidays", len(s.Occupancy.Holidays), 9)
	check("times", s.Occupancy.Times, []site.Times{
		{Days: [7]bool{1: true, 2: true, 3: true, 4: true, 5: true}, FromMin: 0, ToMin: 720},
		{Days: [7]bool{1: true, 2: true}, FromMin: 720, ToMin: 1440},
		{Days: [7]bool{0: true, 6: true}, FromMin: 1080, ToMin: 1200}})
	check("faces", s.Zones[0].FacesDeg, []float64{180, 225, 337.5})
	check("occupied", s.Zones[0].Occupied, []site.Times{{Days: [7]bool{true, true, true, true, true, true, true}, FromMin: 480, ToMin: 570}})
	check("occupied source", s.Zones[0].OccupancySource, site.ByPresence)
	check("through", s.Zones[1].Openings, site.Openings{Through: []string{"A"}})
	check("privacy", s.Privacy, site.Privacy{Internal: true, Codes: true})
	check("separator", s.Logs[0].Separator, ';')
	check("decimal", s.Logs[0].Decimal, ',')
	check("missing", s.Logs[0].Missing, []string{"-999", "0"})
	check("value columns", s.Logs[1].ValueColumns, []string{"value"})
	check("clock", []any{s.Logs[1].Clock.Kind, s.Logs[1].Clock.OffsetS, s.Logs[1].Clock.OverruleOffset, s.Logs[1].Clock.ShiftS},
		[]any{site.ClockOffset, -12600, true, -150})
	check("shift", s.Logs[1].Clock.Shifts, []site.ClockShift{{From: site.Date{Year: 2025, Month: 2, Day: 1}, To: site.Date{Year: 2025, Month: 2, Day: 28}, ShiftS: 3600},
		{From: site.Date{Year: 2025, Month: 3, Day: 1}, To: site.Date{Year: 2025, Month: 8, Day: 31}, Grows: true, EndShiftS: -1470}})
	check("zone clock", s.Logs[2].Clock.Zone.String(), "America/St_Johns")
	check("tab", s.Logs[2].Separator, '\t')
	check("criteria", []any{l.Criteria.Headline, l.Criteria.ASHRAE55Percent, l.Criteria.OutdoorLowC, l.Criteria.ClothingClo, l.Criteria.CO2AboveOutdoorPPM},
		[]any{"ashrae55", 90, 14.0, 0.7, 1350.0})
	check("standing", l.Criteria.Notes["outdoor_low_c"].Standing, criteria.SiteFile)
	check("hold", []time.Duration{s.Points[0].Hold, s.Points[1].Hold}, []time.Duration{90 * time.Minute, 25 * time.Hour})
	check("column", s.Points[0].Column, "Raum ä")
	check("shares", []float64{s.Points[1].Share, s.Points[2].Share}, []float64{0.25, 0.5})
	check("values", s.Points[2].Values, map[string]string{"Open": "open", "Closed": "shut"})
	if c := s.Points[0].Conversion; math.Abs(c.Factor*212+c.Offset-100) > 1e-9 {
		t.Errorf("212 degF becomes %g degC", c.Factor*212+c.Offset)
	}
	// Days of the diary are whole local days, with the zone's own offset.
	loc := s.Location
	check("diary from", s.Diary[0].FromUTC, time.Date(2025, 1, 10, 0, 0, 0, 0, loc).Unix())
	check("diary to", s.Diary[0].ToUTC, time.Date(2025, 1, 13, 0, 0, 0, 0, loc).Unix())
	check("diary zones", s.Diary[0].Zones, []string{"A", "B"})
	check("diary moment", s.Diary[1].ToUTC-s.Diary[1].FromUTC, int64(5400))
	check("diary one day", s.Diary[2].ToUTC-s.Diary[2].FromUTC, int64(86400))
	check("files", []string{l.Files[0].Path, l.Files[1].Path, l.Files[3].Path},
		[]string{"everything.good.yaml", "points/everything.good.csv", "diary/everything.good.csv"})
}

// SHA-256 of "abc" is the example of FIPS 180-4 (published by NIST).
func TestSums(t *testing.T) {
	var b builder
	b.out = &Loaded{}
	b.sum("x", []byte("abc"))
	if got := b.out.Files[0].SHA256; got != "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad" {
		t.Error(got)
	}
}

func TestUnreadable(t *testing.T) {
	dir := t.TempDir()
	empty := filepath.Join(dir, "empty.yaml")
	write(t, empty, nil)
	for path, want := range map[string]string{
		filepath.Join(dir, "no.yaml"): "there is no such file", dir: "cannot be read", empty: "the site file is empty",
	} {
		_, err := Load(path, nil)
		var ps Problems
		if !errors.As(err, &ps) || len(ps) != 1 || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", path, err, want)
		}
	}
}

// All mistakes come at once, in the order of the lines.
func TestAllAtOnce(t *testing.T) {
	f := filepath.Join(t.TempDir(), "site.yaml")
	write(t, f, []byte("site: {name: X, time_zone: CET, latitude: 95, longitude: east}\nzones:\n  - {id: a, area_m2: 0, colour: red}\nlogs: [{path: a.csv}]\npoints: p.csv\n"))
	_, err := Load(f, nil)
	var ps Problems
	if !errors.As(err, &ps) {
		t.Fatal(err)
	}
	var got []string
	for _, p := range ps {
		got = append(got, fmt.Sprintf("%d:%d", p.Line, p.Col))
	}
	want := []string{"1:28", "1:43", "1:58", "3:5", "3:22", "3:25", "5:9"}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("%s\n%v", d, err)
	}
}

func TestEnvironment(t *testing.T) {
	env := func(m map[string]string) func(string) string { return func(k string) string { return m[k] } }
	l, err := Load("sample/site.yaml", env(map[string]string{"SASHLOG_STEP_MIN": "15", "SASHLOG_REJECTED_SHARE": "0.5", "SASHLOG_CRITERIA_PRESET": "ashrae55-80"}))
	if err != nil {
		t.Fatal(err)
	}
	if l.Site.StepS != 900 || l.Site.RejectedShareMax != 0.5 || l.Criteria.Headline != "ashrae55" {
		t.Errorf("step %d, share %g, headline %s", l.Site.StepS, l.Site.RejectedShareMax, l.Criteria.Headline)
	}
	if d := cmp.Diff([]string{"SASHLOG_STEP_MIN=15", "SASHLOG_REJECTED_SHARE=0.5", "SASHLOG_CRITERIA_PRESET=ashrae55-80"}, l.FromEnvironment); d != "" {
		t.Error(d)
	}
	for name, value := range map[string]string{"SASHLOG_STEP_MIN": "7", "SASHLOG_REJECTED_SHARE": "many", "SASHLOG_CRITERIA_PRESET": "none"} {
		if _, err := Load("sample/site.yaml", env(map[string]string{name: value})); err == nil || !strings.HasPrefix(err.Error(), "environment variable "+name+": ") {
			t.Errorf("%s=%s: %v", name, value, err)
		}
	}
}

// Re-encoded files mean the same.
func TestEncodings(t *testing.T) {
	text := strings.ReplaceAll(string(must(os.ReadFile("sample/site.yaml"))), "Open office", "Großraumbüro")
	points := strings.ReplaceAll(string(must(os.ReadFile("sample/points.csv"))), "left window", "linkes Fenster, größer")
	points = strings.ReplaceAll(points, "linkes Fenster, größer", `"linkes Fenster, größer"`)
	encode := map[string]func(string) []byte{
		"utf-8": func(s string) []byte { return []byte(s) },
		"bom":   func(s string) []byte { return []byte("\ufeff" + s) },
		"crlf":  func(s string) []byte { return []byte(strings.ReplaceAll(s, "\n", "\r\n")) },
		"1252":  func(s string) []byte { return must(charmap.Windows1252.NewEncoder().Bytes([]byte(s))) },
		"utf-16": func(s string) []byte {
			return must(unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewEncoder().Bytes([]byte(s)))
		},
	}
	var first *site.Site
	for _, name := range []string{"utf-8", "bom", "crlf", "1252", "utf-16"} {
		dir := t.TempDir()
		write(t, filepath.Join(dir, "site.yaml"), encode[name](text))
		write(t, filepath.Join(dir, "points.csv"), encode[name](points))
		write(t, filepath.Join(dir, "events.csv"), encode[name](string(must(os.ReadFile("sample/events.csv")))))
		s := load(t, filepath.Join(dir, "site.yaml")).Site
		s.Dir = ""
		if first == nil {
			first = s
			continue
		}
		opt := []cmp.Option{cmp.Comparer(func(a, b float64) bool { return a == b || math.IsNaN(a) && math.IsNaN(b) }),
			cmp.Comparer(func(a, b *time.Location) bool { return a.String() == b.String() })}
		if d := cmp.Diff(first, s, opt...); d != "" {
			t.Errorf("%s: %s", name, d)
		}
	}
	if first.Zones[0].Name != "Großraumbüro, south" || first.Points[4].Note != "linkes Fenster, größer" {
		t.Errorf("%q %q", first.Zones[0].Name, first.Points[4].Note)
	}
}

func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}

func TestWarnings(t *testing.T) {
	dir := t.TempDir()
	write(t, filepath.Join(dir, "site.yaml"), []byte(`site: {name: X, time_zone: UTC}
occupancy: {source: presence}
zones: [{id: a}, {id: b, openings: none}, {id: c, openings: none}]
plant: [{id: u, serves: a}, {id: v, serves: [b, c]}] # c's own air flow shows when v runs
logs: [{path: l.csv}]
points: p.csv
`))
	write(t, filepath.Join(dir, "p.csv"), []byte("source,column,belongs_to,quantity\nl.csv,t,a,air_temp\nl.csv,f,c,zone_airflow\n"))
	l := load(t, filepath.Join(dir, "site.yaml"))
	var got []string
	for _, w := range l.Warnings {
		got = append(got, fmt.Sprintf("%d:%d %s", w.Line, w.Col, w.Text))
	}
	want := []string{
		"2:12 occupied times follow presence, and no presence or people point belongs to a, b, c: nothing can be said of them",
		`3:9 zone "a" does not say whether it opens: taken as openings to outdoors`,
		`3:23 zone "b" has no points: nothing can be said about it`,
		`4:14 plant unit "u" has no points: when it ran stays unknown`,
		"6:9 no point is outdoor_temp: without measured weather no hour can be judged",
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
}

// A source is a log's name, a file's base name, or a pattern of either.
func TestSourceMeans(t *testing.T) {
	for _, c := range []struct {
		source, name, path string
		want               bool
	}{
		{"trend", "trend", "logs/t-*.csv", true}, {"t-2025.csv", "trend", "logs/t-*.csv", true}, {"t-*.csv", "trend", "logs/t-*.csv", true},
		{"tr*", "trend", "x.csv", true}, {"x.csv", "trend", "logs/x.csv.gz", true}, {"any.csv", "a", "folder/", true}, {"any.csv", "a", "all.zip", true},
		{"u-2025.csv", "trend", "logs/t-*.csv", false}, {"other", "trend", "x.csv", false}, {"Trend", "trend", "x.csv", false},
	} {
		if got := sourceMeans(c.source, &site.Log{Name: c.name, Path: c.path}); got != c.want {
			t.Errorf("%q for log %q of %q: %v", c.source, c.name, c.path, got)
		}
	}
}

// The raw types, the schema and the criteria name the same keys.
func TestSchemaKeys(t *testing.T) {
	raw := string(Schema())
	var walk func(reflect.Type)
	walk = func(as reflect.Type) {
		for as.Kind() == reflect.Slice || as.Kind() == reflect.Pointer {
			as = as.Elem()
		}
		if as.Kind() != reflect.Struct {
			return
		}
		for k, f := range keysOf(as, "") {
			if !strings.Contains(raw, fmt.Sprintf("%q: {", k)) {
				t.Errorf("the schema lacks %s", k)
			}
			walk(f)
		}
	}
	walk(reflect.TypeFor[rawSite]())
	for _, k := range criteria.Keys() {
		if !strings.Contains(raw, fmt.Sprintf("%q: {", k)) {
			t.Errorf("the schema lacks criterion %s", k)
		}
	}
	for _, p := range criteria.Presets() {
		if !strings.Contains(raw, fmt.Sprintf("%q", p)) {
			t.Errorf("the schema lacks preset %s", p)
		}
	}
}

// Times never overlap silently: two spans on a day are refused exactly when
// some minute lies in both.
func TestOverlapProperty(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		span := func(name string) site.Times {
			from := rapid.IntRange(0, 1438).Draw(t, name+" from")
			s := site.Times{FromMin: from, ToMin: rapid.IntRange(from+1, 1440).Draw(t, name+" to")}
			for d := range s.Days {
				s.Days[d] = rapid.Bool().Draw(t, name)
			}
			return s
		}
		a, b := span("a"), span("b")
		want := false
		for d := range a.Days {
			for m := 0; m < 1440 && a.Days[d] && b.Days[d]; m++ {
				want = want || m >= a.FromMin && m < a.ToMin && m >= b.FromMin && m < b.ToMin
			}
		}
		if got := overlap(a, b) >= 0; got != want {
			t.Fatalf("overlap %v, want %v", got, want)
		}
	})
}

// Votes in words and numbers, complaints, and what was not asked.
func TestVotes(t *testing.T) {
	dir := t.TempDir()
	for _, f := range []string{"table.yaml", "points/minimal.good.csv"} {
		raw, err := os.ReadFile(filepath.Join(corpus, f))
		if err != nil {
			t.Fatal(err)
		}
		name := "points.csv"
		if f == "table.yaml" {
			name, raw = "site.yaml", append(raw, "votes: votes.csv\n"...)
		}
		write(t, filepath.Join(dir, name), raw)
	}
	write(t, filepath.Join(dir, "votes.csv"), []byte("time;zone;sensation;acceptable;preference;complaint\n"+
		"2025-07-01 10:00;L1.02;Slightly warm;Yes;cooler;\n2025-07-01 10:05;L1.09;-1,5;no;;\n2025-07-01 10:06;L1.09;;;;Too warm\n"))
	l, err := Load(filepath.Join(dir, "site.yaml"), nil)
	if err != nil {
		t.Fatal(err)
	}
	v := l.Site.Votes
	if len(v) != 3 {
		t.Fatalf("%d votes", len(v))
	}
	if v[0].Sensation != 1 || v[0].Acceptable != 1 || v[0].Preference != -1 || v[0].Zone != 0 || v[0].Complaint != "" {
		t.Errorf("%+v", v[0])
	}
	if v[1].Sensation != -1.5 || v[1].Acceptable != 0 || v[1].Preference != site.NotAsked || v[1].Zone != 1 {
		t.Errorf("%+v", v[1])
	}
	if !math.IsNaN(v[2].Sensation) || v[2].Complaint != site.TooWarmComplaint || v[2].Acceptable != site.NotAsked {
		t.Errorf("%+v", v[2])
	}
}
