package guess_test

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/demo"
	"sashlog/ingest/guess"
)

// export writes a wide file of one room with one row per step.
func export(layout, header string, from time.Time, rows int, step time.Duration) string {
	var b strings.Builder
	b.WriteString(header + "\n")
	for i := range rows {
		fmt.Fprintf(&b, "%s,%.1f,%d\n", from.Add(time.Duration(i)*step).Format(layout), 20+float64(i%17)/5, 430+10*(i%31))
	}
	return b.String()
}

// TestDateOrders: a number above 12 proves the order; without one, the order in
// which the rows follow each other does; within a single day nothing does.
func TestDateOrders(t *testing.T) {
	day := func(d int) time.Time { return time.Date(2025, 3, d, 0, 0, 0, 0, time.UTC) }
	for _, c := range []struct {
		name, layout string
		from         time.Time
		rows         int
		want         site.DateOrder
		proof        string
	}{
		{"a 13", "02/01/2006 15:04", day(10), 600, site.DMY, "a 13 stands where a month would"},
		{"a 13, month first", "01/02/2006 15:04", day(10), 600, site.MDY, "a 13 stands where a day must"},
		{"below 13", "02/01/2006 15:04", day(2), 900, site.DMY, "the rows would leap"},
		{"below 13, month first", "01/02/2006 15:04", day(2), 900, site.MDY, "the rows would leap"},
		{"one day", "02/01/2006 15:04", day(4), 90, "", "either order lets the rows follow each other"},
		{"points", "02.01.2006 15:04", day(4), 90, site.DMY, "common practice"},
		{"year first", "2006-01-02 15:04", day(4), 90, "", ""},
	} {
		dir := writeFiles(t, map[string]string{"a.csv": export(c.layout, "Time,Room 101 Temperature,Room 101 CO2", c.from, c.rows, 15*time.Minute)})
		p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{dir}, Into: dir})
		if err != nil || len(p.Logs) != 1 {
			t.Fatalf("%s: %v, %d logs", c.name, err, len(p.Logs))
		}
		l := p.Logs[0]
		if l.Setting.DateOrder != c.want || !strings.Contains(l.DateProof, c.proof) || l.DateOpen != (c.name == "one day") {
			t.Errorf("%s: order %q, open %v, proof %q", c.name, l.Setting.DateOrder, l.DateOpen, l.DateProof)
		}
	}
}

// TestDatesBeside: a log that proves nothing stays open, with a hint at the log
// beside it that does.
func TestDatesBeside(t *testing.T) {
	from := time.Date(2025, 3, 4, 0, 0, 0, 0, time.UTC)
	dir := writeFiles(t, map[string]string{
		"room 1.csv": export("02/01/2006 15:04", "Time,Room 1 Temperature,Room 1 CO2", from, 90, 15*time.Minute),
		"room 2.csv": export("02/01/2006 15:04", "Time,Room 2 Temperature,Room 2 CO2", from, 2000, 15*time.Minute)})
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{dir}, Into: dir})
	if err != nil || len(p.Logs) != 2 {
		t.Fatalf("%v, %d logs", err, len(p.Logs))
	}
	if l := p.Logs[0]; !l.DateOpen || l.Setting.DateOrder != "" || !strings.Contains(l.DateProof, "room 2 beside it is dmy") {
		t.Errorf("order %q, open %v, %q", l.Setting.DateOrder, l.DateOpen, l.DateProof)
	}
	if l := p.Logs[1]; l.DateOpen || l.Setting.DateOrder != site.DMY {
		t.Errorf("order %q, open %v, %q", l.Setting.DateOrder, l.DateOpen, l.DateProof)
	}
}

// TestSplitFiles: files of one thing split by date are one log; the same columns
// at the same time are different rooms.
func TestSplitFiles(t *testing.T) {
	files := map[string]string{}
	for _, room := range []int{101, 102, 203} {
		for m := range 3 {
			from := time.Date(2025, time.Month(1+m), 1, 0, 0, 0, 0, time.UTC)
			files[fmt.Sprintf("room %d 2025-%02d.csv", room, m+1)] = export("2006-01-02 15:04", "time,temperature,co2", from, 28*24, time.Hour)
		}
	}
	for d := range 5 {
		from := time.Date(2025, 1, 1+d, 0, 0, 0, 0, time.UTC)
		files[fmt.Sprintf("weather_202501%02d.csv", d+1)] = export("2006-01-02 15:04", "time,outdoor temperature,outdoor CO2", from, 24, time.Hour)
	}
	dir := writeFiles(t, files)
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{dir}, Into: dir})
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Logs) != 4 || len(p.Zones) != 3 || len(p.Tracks) != 8 {
		t.Errorf("%d logs, %d zones, %d columns; 4, 3 and 8 are there", len(p.Logs), len(p.Zones), len(p.Tracks))
		for _, l := range p.Logs {
			t.Log(l.Name, l.Setting.Path)
		}
	}
	loads(t, "split files", dir)
}

// TestHostileNames: whatever names hold, the proposal is valid and harmless.
func TestHostileNames(t *testing.T) {
	names := []string{`Room 101 "Temperature"`, "Room 102 Temperature <script>alert(1)</script>", "Room 103: Temp, {a: [b]} #c", "Room 104 Temp\u202e\u2066 x", "# Room 105 Temp", "=cmd()|Room 106 Temp", "Room 107 Temp\u2028end", "Room 108 'Temp' \\n \\x00", "null", "Room 109 Temp: yes"}
	var b strings.Builder
	b.WriteString("Time")
	for _, n := range names {
		b.WriteString(`;"` + strings.ReplaceAll(n, `"`, `""`) + `"`)
	}
	b.WriteString("\n")
	for i := range 300 {
		b.WriteString(time.Date(2025, 1, 1, 0, 15*i, 0, 0, time.UTC).Format("2006-01-02 15:04"))
		for k := range names {
			fmt.Fprintf(&b, ";%.1f", 20+float64(i*(k+2)%19)/5)
		}
		b.WriteString("\n")
	}
	loads(t, "hostile names", writeFiles(t, map[string]string{`#1 "odd" {x} [1].csv`: b.String()}))
}

// TestDamaged: files that are no logs are told, never fatal.
func TestDamaged(t *testing.T) {
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{"../../testdata/ingest/damaged", "../../testdata/ingest/wide", "no such folder"}, Into: t.TempDir()})
	if err != nil {
		t.Fatal(err)
	}
	told := map[string]bool{}
	for _, f := range p.Files {
		told[filepath.Base(f.Name)] = true
	}
	for _, name := range []string{"binary.csv", "bom.csv", "broken.xlsx", "broken.zip", "empty.csv", "old.xls", "prose.txt", "no such folder"} {
		if !told[name] {
			t.Errorf("%s is not told", name)
		}
	}
}

// TestWeatherFiles: a typical year is told apart from logs and its place
// proposed (Chicago O'Hare, 41.98 north, 87.92 west, 201 m, in the file's first
// line); a public station's hourly file is proposed as the site's weather.
func TestWeatherFiles(t *testing.T) {
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{"../../testdata/real/weather-tmy3-isd"}, Into: t.TempDir()})
	if err != nil || len(p.Logs) != 1 || p.Typical == nil {
		t.Fatalf("%v, %d logs, typical year %v", err, len(p.Logs), p.Typical)
	}
	if y := p.Typical; y.LatitudeDeg != 41.98 || y.LongitudeDeg != -87.92 || y.ElevationM != 201 {
		t.Errorf("place %+v", y)
	}
	found := map[site.Quantity]bool{}
	for _, tr := range p.Tracks {
		found[tr.Quantity] = true
	}
	for _, q := range []site.Quantity{site.OutdoorTemp, site.OutdoorDewPoint, site.WindSpeed, site.WindDirection, site.Rain} {
		if !found[q] {
			t.Errorf("%s is not proposed", q)
		}
	}
}

// TestReturnDuctShows takes the telling word out of the demo's return-duct
// sensor: its leaps at the fan's starts must raise the doubt, and no other
// room's sensor may.
func TestReturnDuctShows(t *testing.T) {
	for _, seed := range []uint64{1, 2} {
		dir := t.TempDir()
		o := demo.Defaults()
		o.Seed = seed
		if _, err := demo.Write(dir, o); err != nil {
			t.Fatal(err)
		}
		unpackRenamed(t, filepath.Join(dir, "logs", "floor3.csv.gz"), "_RTN_TMP", "_TMP")
		p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{filepath.Join(dir, "logs")}, Into: dir})
		if err != nil {
			t.Fatal(err)
		}
		served := false
		for _, u := range p.Plant {
			for _, z := range u.Serves {
				served = served || z == "F3_R02"
			}
		}
		for _, tr := range p.Tracks {
			suspected := strings.Contains(strings.Join(tr.Doubts, "; "), "return duct")
			switch duct := tr.Column == "F3_R02_TMP [°C]"; {
			case suspected && !duct:
				t.Errorf("seed %d: %s suspected: %v", seed, tr.Column, tr.Doubts)
			case duct && !suspected:
				t.Errorf("seed %d: the return-duct sensor was not noticed (its unit known: %v)", seed, served)
			}
		}
	}
}

func TestStamp(t *testing.T) {
	points := []byte("source,column\n")
	text := []byte("site:\n  name: \"\"\n")
	written := append(append([]byte{}, text...), guess.Stamp(text, points)...)
	if !guess.Untouched(written, points) {
		t.Error("a proposal as written counts as edited")
	}
	for _, edited := range [][2][]byte{
		{append([]byte("# mine\n"), written...), points},
		{written, append(points, 'x')},
		{text, points},
		{append(written, "period: {}\n"...), points},
	} {
		if guess.Untouched(edited[0], edited[1]) {
			t.Errorf("an edited file counts as untouched: %q", edited[0])
		}
	}
}

// TestSameProposal: the same exports give the same bytes.
func TestSameProposal(t *testing.T) {
	dir := t.TempDir()
	tuned()[1].write(t, dir, 5)
	var last string
	for range 3 {
		var b strings.Builder
		p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{dir}, Into: dir})
		if err != nil {
			t.Fatal(err)
		}
		if err := p.WriteSite(&b); err != nil {
			t.Fatal(err)
		}
		if err := p.WritePoints(&b); err != nil {
			t.Fatal(err)
		}
		if last != "" && b.String() != last {
			t.Fatal("two scans of the same exports differ")
		}
		last = b.String()
	}
	if !strings.Contains(last, "Raumtemperatur") {
		t.Error("the proposal does not name the exports' columns")
	}
}

func unpackRenamed(t *testing.T, path, from, to string) {
	t.Helper()
	text := gunzip(t, path)
	if !strings.Contains(text, from) {
		t.Fatalf("%s has no %s", path, from)
	}
	if err := os.Remove(path); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(strings.TrimSuffix(path, ".gz"), []byte(strings.Replace(text, from, to, 1)), 0o644); err != nil {
		t.Fatal(err)
	}
}
