package demo

import (
	"bytes"
	"compress/gzip"
	"encoding/csv"
	"io"
	"io/fs"
	"maps"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"

	"github.com/xuri/excelize/v2"
	"go.yaml.in/yaml/v3"

	"sashlog/configs/site"
)

var (
	yearOnce  sync.Once
	yearDir   string
	yearTruth Truth
	yearErr   error
)

func TestMain(m *testing.M) {
	code := m.Run()
	if yearDir != "" {
		os.RemoveAll(yearDir)
	}
	os.Exit(code)
}

// wholeYear is the default demo, written once for all tests.
func wholeYear(t testing.TB) (string, *Truth) {
	t.Helper()
	yearOnce.Do(func() {
		if yearDir, yearErr = os.MkdirTemp("", "demo"); yearErr == nil {
			yearTruth, yearErr = Write(yearDir, Defaults())
		}
	})
	if yearErr != nil {
		t.Fatal(yearErr)
	}
	return yearDir, &yearTruth
}

// table reads a delimited log of the demo by the plainest means.
func table(t testing.TB, dir, name string, comma rune) (head map[string]int, rows [][]string) {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join(dir, name))
	if err != nil {
		t.Fatal(err)
	}
	var in io.Reader = bytes.NewReader(raw)
	if strings.HasSuffix(name, ".gz") {
		if in, err = gzip.NewReader(in); err != nil {
			t.Fatal(err)
		}
	}
	r := csv.NewReader(in)
	r.Comma = comma
	all, err := r.ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	head = map[string]int{}
	for i, c := range all[0] {
		head[c] = i
	}
	return head, all[1:]
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	if s == "---" {
		return math.NaN()
	}
	x, err := strconv.ParseFloat(strings.Replace(s, ",", ".", 1), 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

func contents(t *testing.T, dir string) map[string]string {
	t.Helper()
	out := map[string]string{}
	err := filepath.WalkDir(dir, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		b, err := os.ReadFile(path)
		rel, _ := filepath.Rel(dir, path)
		out[filepath.ToSlash(rel)] = string(b)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func TestSameSeedSameBytes(t *testing.T) {
	o := Defaults()
	o.From, o.Days, o.WriteTruth = site.Date{Year: 2025, Month: 3, Day: 24}, 10, true
	write := func(o Options) map[string]string {
		dir := t.TempDir()
		if _, err := Write(dir, o); err != nil {
			t.Fatal(err)
		}
		return contents(t, dir)
	}
	a, b := write(o), write(o)
	for name := range a {
		if a[name] != b[name] {
			t.Errorf("%s differs between two runs of one seed", name)
		}
	}
	o.Seed = 2
	c := write(o)
	if len(a) != len(c) {
		t.Errorf("another seed writes %d files, want %d", len(c), len(a))
	}
	for _, name := range []string{"logs/weather.csv", "logs/floor1.csv", "logs/windows.csv", "logs/plant_status.csv", "typical.epw", "truth.csv.gz"} {
		if a[name] == "" || a[name] == c[name] {
			t.Errorf("%s is empty or the same for another seed", name)
		}
	}
}

func TestOptions(t *testing.T) {
	for _, o := range []Options{{Days: -1}, {Zones: 17}, {Zones: -1}, {Days: 5000}, {From: site.Date{Year: 1800, Month: 1, Day: 1}}} {
		if _, err := Simulate(o); err == nil {
			t.Errorf("%+v was accepted", o)
		}
	}
	for zones := 1; zones <= len(zoneSpecs); zones += 5 {
		tr, err := Write(t.TempDir(), Options{Seed: 3, Days: 2, Zones: zones, Faults: true})
		if err != nil {
			t.Fatal(err)
		}
		if len(tr.Zones) != zones || tr.N != 2*288 || tr.Zone("L1.01") == nil || tr.Zone("nowhere") != nil {
			t.Errorf("%d zones: got %d zones, %d steps", zones, len(tr.Zones), tr.N)
		}
	}
}

// Periods across the turn of the year and over a leap day keep their calendar.
func TestOddPeriods(t *testing.T) {
	tr, err := Simulate(Options{Seed: 5, From: site.Date{Year: 2023, Month: 12, Day: 20}, Days: 75, Zones: 2, Faults: true})
	if err != nil {
		t.Fatal(err)
	}
	occupied := 0
	for _, o := range tr.Zones[0].Occupied {
		occupied += int(o)
	}
	// 2023-12-20 to 2024-03-03: 53 weekdays less 25, 26 December, 1, 2 January.
	if tr.N != 75*288 || occupied != 49*120 {
		t.Errorf("%d steps, %d occupied, want %d and %d", tr.N, occupied, 75*288, 49*120)
	}
	if tr.Outdoor.Lead != 30*288 || len(tr.Outdoor.TempC) != tr.N+tr.Outdoor.Lead {
		t.Errorf("lead-in of %d steps", tr.Outdoor.Lead)
	}
}

// A folder that cannot be made is an error, not a panic.
func TestUnwritableFolder(t *testing.T) {
	path := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(path, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := Write(path, Options{Days: 1, Zones: 1}); err == nil {
		t.Error("wrote into a file")
	}
}

// Declared faults change the description of the site, never its logs.
func TestDeclaredFaults(t *testing.T) {
	o := Defaults()
	o.From, o.Days = site.Date{Year: 2025, Month: 5, Day: 1}, 75
	plain, told := t.TempDir(), t.TempDir()
	if _, err := Write(plain, o); err != nil {
		t.Fatal(err)
	}
	o.Declared = true
	if _, err := Write(told, o); err != nil {
		t.Fatal(err)
	}
	a, b := contents(t, plain), contents(t, told)
	for name := range a {
		if strings.HasPrefix(name, "logs/") && a[name] != b[name] {
			t.Errorf("%s differs", name)
		}
	}
	for name, text := range map[string]string{
		"points.csv": "F1_R01_TMP [°C],L1.01,air_temp,degF", "site.yaml": "shifts: [{from: 2025-06-10, to: 2025-07-09, shift_min: -60}]",
		"events.csv": "2025-05-12,2025-06-07,L1.02,fault,",
	} {
		if strings.Contains(a[name], text) || !strings.Contains(b[name], text) {
			t.Errorf("%s: %q should stand only in the declared folder", name, text)
		}
	}
	if !strings.Contains(b["points.csv"], "F2-R05-W1,L2.05,window,,cov,,25h,,Open=shut;Closed=open") {
		t.Error("the inverted contact is not declared")
	}
	for _, line := range strings.Split(strings.TrimSpace(b["events.csv"]), "\n")[1:] {
		kind := site.EventKind(strings.Split(line, ",")[3])
		switch kind {
		case site.EventWorks, site.EventSetting, site.EventSensorSwap, site.EventFault, site.EventOther:
		default:
			t.Errorf("events.csv: unknown kind %q", kind)
		}
	}
}

// The site file says what the logs hold: every log exists, every point's
// column is there, every quantity and zone is known.
func TestFolderFitsTogether(t *testing.T) {
	dir, _ := wholeYear(t)
	raw, err := os.ReadFile(filepath.Join(dir, "site.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	var s map[string]any
	if err := yaml.Unmarshal(raw, &s); err != nil {
		t.Fatal(err)
	}
	keys := slices.Sorted(maps.Keys(s))
	want := []string{"criteria", "diary", "logs", "occupancy", "period", "plant", "points", "privacy", "site", "step_min", "tolerance", "weather", "zones"}
	if !slices.Equal(keys, want) {
		t.Errorf("site.yaml has %v, want %v", keys, want)
	}
	known := map[string]bool{"site": true}
	for _, z := range s["zones"].([]any) {
		known[z.(map[string]any)["id"].(string)] = true
	}
	if len(known) != 17 {
		t.Errorf("%d zones, want 16", len(known)-1)
	}
	for _, p := range s["plant"].([]any) {
		m := p.(map[string]any)
		known[m["id"].(string)] = true
		for _, z := range m["serves"].([]any) {
			if !known[z.(string)] {
				t.Errorf("%v serves unknown zone %v", m["id"], z)
			}
		}
	}
	columns := map[string]map[string]bool{}
	for _, l := range s["logs"].([]any) {
		m := l.(map[string]any)
		has := map[string]bool{}
		columns[m["name"].(string)] = has
		path := m["path"].(string)
		if strings.HasSuffix(path, ".xlsx") {
			book, err := excelize.OpenFile(filepath.Join(dir, path))
			if err != nil {
				t.Fatal(err)
			}
			rows, err := book.GetRows(m["sheet"].(string))
			if err != nil || len(rows) != 8761 {
				t.Fatalf("%s: %d rows, %v", path, len(rows), err)
			}
			for _, c := range rows[0] {
				has[c] = true
			}
			book.Close()
			continue
		}
		comma, _ := m["separator"].(string)
		head, rows := table(t, dir, path, rune(comma[0]))
		if m["layout"] == "long" {
			k := head[m["key_columns"].([]any)[0].(string)]
			for _, r := range rows {
				has[r[k]] = true
			}
		} else {
			for c := range head {
				has[c] = true
			}
		}
		for _, key := range []string{"time_column", "date_column", "clock_column"} {
			if c, ok := m[key].(string); ok {
				if _, there := head[c]; !there {
					t.Errorf("%s has no column %q", path, c)
				}
			}
		}
	}
	head, rows := table(t, dir, "points.csv", ',')
	for _, r := range rows {
		source, column := r[head["source"]], r[head["column"]]
		if !columns[source][column] {
			t.Errorf("points.csv: %s has no column %q", source, column)
		}
		if q := site.Quantity(r[head["quantity"]]); true {
			if _, ok := q.Trait(); !ok {
				t.Errorf("points.csv: unknown quantity %q", q)
			}
		}
		if !known[r[head["belongs_to"]]] {
			t.Errorf("points.csv: %q belongs to nothing", r[head["belongs_to"]])
		}
	}
	if len(rows) < 80 {
		t.Errorf("points.csv has %d points", len(rows))
	}
	readme, _ := os.ReadFile(filepath.Join(dir, "README.txt"))
	if !bytes.Contains(readme, []byte("does not exist")) || s["site"].(map[string]any)["invented"] != true {
		t.Error("the folder does not say that the building is invented")
	}
	epw, _ := os.ReadFile(filepath.Join(dir, "typical.epw"))
	lines := strings.Split(strings.TrimSpace(string(epw)), "\r\n")
	if len(lines) != 8768 {
		t.Fatalf("typical.epw has %d lines, want 8 and 8760", len(lines))
	}
	for _, l := range lines[8:] {
		if n := strings.Count(l, ","); n != 34 {
			t.Fatalf("typical.epw: %d fields, want 35: %s", n+1, l)
		}
	}
}

func BenchmarkWriteYear(b *testing.B) {
	for b.Loop() {
		if _, err := Write(b.TempDir(), Defaults()); err != nil {
			b.Fatal(err)
		}
	}
}
