package ingest_test

import (
	"bytes"
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	_ "time/tzdata"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/ingest"
	"sashlog/ingest/demo"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

func load(t testing.TB, dir string) *site.Site {
	t.Helper()
	l, err := configs.Load(filepath.Join(dir, "site.yaml"), func(string) string { return "" })
	if err != nil {
		t.Fatal(err)
	}
	return l.Site
}

func read(t testing.TB, s *site.Site, o ingest.Options) (*grid.Grid, *reading.Ledger) {
	t.Helper()
	g, l, err := ingest.Read(context.Background(), s, o)
	if err != nil {
		t.Fatal(err)
	}
	return g, l
}

func write(t testing.TB, o demo.Options) string {
	t.Helper()
	dir := t.TempDir()
	if _, err := demo.Write(dir, o); err != nil {
		t.Fatal(err)
	}
	return dir
}

// same compares two grids bit by bit and two ledgers, apart from what the
// files say of themselves.
func same(t *testing.T, a, b *grid.Grid, la, lb *reading.Ledger) {
	t.Helper()
	if a.StartUTC != b.StartUTC || a.N != b.N || a.PeriodFrom != b.PeriodFrom || a.PeriodTo != b.PeriodTo {
		t.Fatalf("grids span %d+%d and %d+%d", a.StartUTC, a.N, b.StartUTC, b.N)
	}
	for p := range a.Columns {
		x, y := a.Columns[p], b.Columns[p]
		if !slices.Equal(x.CoveredS, y.CoveredS) || !slices.EqualFunc(x.Mean, y.Mean, func(u, v float32) bool { return math.Float32bits(u) == math.Float32bits(v) }) {
			t.Errorf("point %d differs", p)
		}
	}
	ignoreChecks := cmpopts.IgnoreSliceElements(func(c reading.Check) bool { return c.Kind == reading.CheckOrder })
	if d := cmp.Diff(la, lb, cmpopts.EquateNaNs(), cmpopts.EquateEmpty(), ignoreChecks, cmpopts.IgnoreFields(reading.Ledger{}, "Files", "Clock", "Issues", "IssuesDropped"),
		cmpopts.IgnoreFields(reading.PointLedger{}, "Disordered", "Examples")); d != "" {
		t.Errorf("ledgers differ: %s", d)
	}
}

func balanced(t *testing.T, l *reading.Ledger) {
	t.Helper()
	var accepted int64
	for i, p := range l.Points {
		var sum int64
		for _, n := range p.Counts {
			sum += n
		}
		if sum != p.RowsRead {
			t.Errorf("point %d: %d counted of %d", i, sum, p.RowsRead)
		}
		accepted += p.Counts[reading.Accepted]
	}
	if accepted == 0 {
		t.Error("nothing was accepted")
	}
}

// lines of a log, shuffled below its header by a fixed seed.
func shuffle(t *testing.T, path string) {
	t.Helper()
	raw, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	lines := bytes.SplitAfter(raw, []byte("\n"))
	if len(lines[len(lines)-1]) == 0 {
		lines = lines[:len(lines)-1]
	}
	rows := lines[1:]
	rand.New(rand.NewPCG(7, 7)).Shuffle(len(rows), func(i, j int) { rows[i], rows[j] = rows[j], rows[i] })
	if err := os.WriteFile(path, bytes.Join(lines, nil), 0o600); err != nil {
		t.Fatal(err)
	}
}

// Rows in any order give the same outputs. The days
// hold no repeated local hour.
func TestShuffledRowsGiveTheSameGrid(t *testing.T) {
	o := demo.Options{Seed: 3, From: site.Date{Year: 2025, Month: 5, Day: 1}, Days: 40, Zones: 8, Faults: true}
	tidy, mixed := write(t, o), write(t, o)
	for _, f := range []string{"floor1.csv", "windows.csv", "plant_status.csv", "weather.csv", "plant_temps.csv"} {
		found := filepath.Join(mixed, "logs", f)
		if _, err := os.Stat(found); err == nil {
			shuffle(t, found)
		}
	}
	temp := t.TempDir()
	a, la := read(t, load(t, tidy), ingest.Options{})
	b, lb := read(t, load(t, mixed), ingest.Options{TempDir: temp})
	balanced(t, la)
	same(t, a, b, la, lb)
	disordered := 0
	for _, p := range lb.Points {
		if p.Disordered {
			disordered++
		}
	}
	if disordered < 10 {
		t.Errorf("%d points out of order, want those of the shuffled logs", disordered)
	}
	if left, _ := os.ReadDir(temp); len(left) != 0 {
		t.Errorf("left behind in the temporary folder: %v", left)
	}
}

func TestTwoRunsAreIdentical(t *testing.T) {
	dir := write(t, demo.Options{Seed: 1, Days: 20, Faults: true})
	s := load(t, dir)
	a, la := read(t, s, ingest.Options{})
	b, lb := read(t, s, ingest.Options{})
	balanced(t, la)
	same(t, a, b, la, lb)
	if d := cmp.Diff(la, lb, cmpopts.EquateNaNs()); d != "" {
		t.Error(d)
	}
	if a.Typical == nil || len(a.Typical.TempC) != 8760 {
		t.Error("no typical year")
	}
}

// small writes a site with one zone and one log.
func small(t testing.TB, logs map[string]string, more string) *site.Site {
	t.Helper()
	dir := t.TempDir()
	files := map[string]string{
		"site.yaml": `site: {name: Small, time_zone: Europe/Zurich}
zones:
  - {id: Z1, people: 4, openings: outdoors}
occupancy: {times: [{days: mon-fri, from: "08:00", to: "18:00"}]}
logs:
  - {name: log, path: "log*.csv", layout: wide, time_column: time, date_order: ymd, clock: utc}
points: points.csv
` + more,
		"points.csv": "source,column,belongs_to,quantity,unit\nlog,t,Z1,air_temp,degC\n",
	}
	for n, text := range logs {
		files[n] = text
	}
	for n, text := range files {
		if err := os.WriteFile(filepath.Join(dir, n), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	return load(t, dir)
}

func rows(day string, v string) string {
	var b strings.Builder
	for h := range 24 {
		b.WriteString(day + " " + string(rune('0'+h/10)) + string(rune('0'+h%10)) + ":00," + v + "\n")
	}
	return b.String()
}

func TestPeriod(t *testing.T) {
	log := "time,t\n" + rows("2024-01-31", "20.1") + rows("2024-02-01", "20.2") + rows("2024-02-02", "20.4")
	// From the readings: 31 January to 2 February local, since the last reading,
	// at local midnight, begins no day; 30 days before it.
	g, l := read(t, small(t, map[string]string{"log.csv": log}, ""), ingest.Options{})
	if got := g.Time(0).Format("2006-01-02 15:04"); got != "2024-01-01 00:00" {
		t.Errorf("grid begins %s", got)
	}
	if got := g.Time(g.PeriodFrom).Format("2006-01-02 15:04"); got != "2024-01-31 00:00" {
		t.Errorf("period begins %s", got)
	}
	if got := g.Time(g.PeriodTo).Format("2006-01-02 15:04"); got != "2024-02-03 00:00" || g.N != g.PeriodTo {
		t.Errorf("period ends %s", got)
	}
	if l.Points[0].Counts[reading.Accepted] != 71 || l.Points[0].Counts[reading.OutsidePeriod] != 1 {
		t.Errorf("%d accepted, %d outside", l.Points[0].Counts[reading.Accepted], l.Points[0].Counts[reading.OutsidePeriod])
	}
	// Options go before the site file.
	g, l = read(t, small(t, map[string]string{"log.csv": log}, "period: {from: 2024-01-31, to: 2024-02-02}\n"), ingest.Options{To: site.Date{Year: 2024, Month: 2, Day: 1}})
	if l.Points[0].Counts[reading.Accepted] != 47 || l.Points[0].Counts[reading.OutsidePeriod] != 25 {
		t.Errorf("%d accepted, %d outside", l.Points[0].Counts[reading.Accepted], l.Points[0].Counts[reading.OutsidePeriod])
	}
	if g.PeriodTo-g.PeriodFrom != 2*288 {
		t.Errorf("%d steps", g.PeriodTo-g.PeriodFrom)
	}
}

func TestFilesInAnyOrder(t *testing.T) {
	a, b, c := rows("2024-01-31", "20.1"), rows("2024-02-01", "20.2"), rows("2024-02-02", "20.4")
	one, l1 := read(t, small(t, map[string]string{"log.csv": "time,t\n" + a + b + c}, ""), ingest.Options{})
	split, l2 := read(t, small(t, map[string]string{"log1.csv": "time,t\n" + c, "log2.csv": "time,t\n" + a, "log3.csv": "time,t\n" + b}, ""), ingest.Options{})
	balanced(t, l1)
	same(t, one, split, l1, l2)
	if l2.Points[0].Disordered {
		t.Error("whole files in another order need no sorting")
	}
}

func TestSourceThatCannotBeRead(t *testing.T) {
	s := small(t, map[string]string{"log1.csv": "time,t\n" + rows("2024-01-31", "20.1"), "log2.csv.gz": "\x1f\x8b\x08\x00broken"}, "")
	s.Logs[0].Path = "log*"
	_, l, err := ingest.Read(context.Background(), s, ingest.Options{})
	var unread *ingest.UnreadError
	if !errors.As(err, &unread) || !strings.Contains(err.Error(), "log2.csv.gz") {
		t.Fatalf("error %v", err)
	}
	if l == nil || l.Points[0].RowsRead != 24 {
		t.Errorf("the other file was not counted")
	}
}

func TestNoUsableReadings(t *testing.T) {
	for _, c := range []struct{ name, log, more, want string }{
		{"no rows", "time,t\n", "", "no row belongs"},
		{"other period", "time,t\n" + rows("2024-01-31", "20.1"), "period: {from: 2020-01-01, to: 2020-02-01}\n", "24 outside the period"},
		{"all impossible", "time,t\n" + rows("2024-01-31", "700"), "", "24 out of range"},
		{"all missing", "time,t\n" + rows("2024-01-31", "NaN"), "", "24 missing"},
	} {
		_, _, err := ingest.Read(context.Background(), small(t, map[string]string{"log.csv": c.log}, c.more), ingest.Options{})
		if err == nil || !strings.Contains(err.Error(), c.want) || !strings.Contains(err.Error(), "no usable readings") {
			t.Errorf("%s: %v, want %q", c.name, err, c.want)
		}
	}
}

func TestInterrupted(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, _, err := ingest.Read(ctx, small(t, map[string]string{"log.csv": "time,t\n" + rows("2024-01-31", "20.1")}, ""), ingest.Options{}); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v", err)
	}
}
