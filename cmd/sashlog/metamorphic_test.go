package main

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"
	"unicode/utf16"

	"sashlog/configs/site"
	"sashlog/ingest/demo"
)

// smallDemo writes two weeks of six zones without faults.
func smallDemo(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	o := demo.Defaults()
	o.Faults, o.Zones, o.Days, o.From = false, 6, 14, site.Date{Year: 2025, Month: time.May, Day: 5}
	if _, err := demo.Write(dir, o); err != nil {
		t.Fatal(err)
	}
	return dir
}

// figures returns an audit's outputs that must not depend on how the logs were
// written down.
func figures(t *testing.T, dir string) map[string]string {
	t.Helper()
	out := auditTo(t, filepath.Join(dir, "site.yaml"), exitDone)
	got := map[string]string{}
	for _, name := range []string{"hours.csv", "episodes.csv"} {
		raw, err := os.ReadFile(filepath.Join(out, name))
		if err != nil {
			t.Fatal(err)
		}
		got[name] = string(raw)
	}
	return got
}

// edit rewrites a file of the demo.
func edit(t *testing.T, dir, name string, f func(string) string) {
	t.Helper()
	path := filepath.Join(dir, filepath.FromSlash(name))
	raw, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	changed := f(string(raw))
	if changed == string(raw) {
		t.Fatalf("%s did not change: the test shows nothing", name)
	}
	if err := os.WriteFile(path, []byte(changed), 0o644); err != nil {
		t.Fatal(err)
	}
}

func shuffled(text string) string {
	lines := strings.Split(strings.TrimRight(text, "\n"), "\n")
	rows := lines[1:]
	rand.New(rand.NewPCG(3, 5)).Shuffle(len(rows), func(i, j int) { rows[i], rows[j] = rows[j], rows[i] })
	return strings.Join(lines, "\n") + "\n"
}

func newestFirst(text string) string {
	lines := strings.Split(strings.TrimRight(text, "\n"), "\n")
	rows := lines[1:]
	for i, j := 0, len(rows)-1; i < j; i, j = i+1, j-1 {
		rows[i], rows[j] = rows[j], rows[i]
	}
	return strings.Join(lines, "\n") + "\n"
}

// utf16le encodes with a byte order mark, as spreadsheets save Unicode text.
func utf16le(text string) string {
	out := []byte{0xff, 0xfe}
	for _, u := range utf16.Encode([]rune(text)) {
		out = append(out, byte(u), byte(u>>8))
	}
	return string(out)
}

// shiftTimes adds an hour to every leading timestamp of the form in layout.
func shiftTimes(t *testing.T, text, layout, sep string) string {
	lines := strings.SplitAfter(text, "\n")
	for i, line := range lines[1:] {
		stamp, rest, ok := strings.Cut(line, sep)
		if !ok {
			continue
		}
		at, err := time.Parse(layout, stamp)
		if err != nil {
			t.Fatal(err)
		}
		lines[i+1] = at.Add(time.Hour).Format(layout) + sep + rest
	}
	return strings.Join(lines, "")
}

// TestWrittenDownOtherwise: the same readings in any order, split, encoded or
// compressed otherwise give the same outputs, and so does the same building
// with other zone names, in °F, or an hour later together with its zone.
func TestWrittenDownOtherwise(t *testing.T) {
	want := figures(t, smallDemo(t))
	if strings.Count(want["hours.csv"], "\n") < 6*14*24 || !strings.Contains(want["episodes.csv"], "L1.01") {
		t.Fatal("the tidy logs give no episodes or too few hours: the comparisons would prove nothing")
	}
	tests := []struct {
		name   string
		change func(t *testing.T, dir string)
		back   func(string) string // undoes what the change does to the outputs' wording
	}{
		{name: "rows in any order", change: func(t *testing.T, dir string) {
			for _, f := range []string{"logs/floor1.csv", "logs/windows.csv", "logs/weather.csv", "logs/plant_status.csv"} {
				edit(t, dir, f, shuffled)
			}
		}},
		{name: "newest first", change: func(t *testing.T, dir string) {
			edit(t, dir, "logs/floor2.csv", newestFirst)
			edit(t, dir, "logs/plant_temps.csv", newestFirst)
		}},
		{name: "a file split in two", change: func(t *testing.T, dir string) {
			path := filepath.Join(dir, "logs", "floor1.csv")
			raw, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			lines := strings.SplitAfter(string(raw), "\n")
			cut := len(lines) / 3
			os.WriteFile(path, []byte(lines[0]+strings.Join(lines[cut:], "")), 0o644)
			os.WriteFile(filepath.Join(dir, "logs", "floor1-older.csv"), []byte(strings.Join(lines[:cut], "")), 0o644)
			edit(t, dir, "site.yaml", func(s string) string { return strings.Replace(s, "logs/floor1.csv", `"logs/floor1*.csv"`, 1) })
		}},
		{name: "encoded otherwise", change: func(t *testing.T, dir string) {
			edit(t, dir, "logs/floor1.csv", utf16le)
			edit(t, dir, "logs/floor2.csv", func(s string) string { // Windows-1252
				return strings.ReplaceAll(s, "°", "\xb0")
			})
			edit(t, dir, "logs/windows.csv", func(s string) string { return "\xef\xbb\xbf" + strings.ReplaceAll(s, "\n", "\r\n") })
		}},
		{name: "°F declared", change: func(t *testing.T, dir string) {
			edit(t, dir, "logs/floor1.csv", fahrenheitColumns)
			edit(t, dir, "points.csv", func(s string) string {
				lines := strings.SplitAfter(s, "\n")
				for i, l := range lines {
					if strings.HasPrefix(l, "floor1,") && strings.Contains(l, ",air_temp,") {
						lines[i] = strings.Replace(l, ",degC,", ",degF,", 1)
					}
				}
				return strings.Join(lines, "")
			})
		}},
		{name: "zones renamed", change: func(t *testing.T, dir string) {
			rename := func(s string) string { return strings.ReplaceAll(s, "L1.01", "North-7") }
			edit(t, dir, "site.yaml", rename)
			edit(t, dir, "points.csv", rename)
		}, back: func(s string) string { return strings.ReplaceAll(s, "North-7", "L1.01") }},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			dir := smallDemo(t)
			tt.change(t, dir)
			got := figures(t, dir)
			for name := range want {
				text := got[name]
				if tt.back != nil {
					text = tt.back(text)
				}
				if text != want[name] {
					t.Errorf("%s differs: %s", name, firstDifference(want[name], text))
				}
			}
		})
	}
}

// fahrenheitColumns turns the temperatures of the demo's first floor into °F,
// exactly: a tenth of a kelvin is 0.18 °F.
func fahrenheitColumns(text string) string {
	lines := strings.Split(strings.TrimRight(text, "\n"), "\n")
	var temps []int
	for i, name := range strings.Split(lines[0], ";") {
		if strings.Contains(name, "TMP") {
			temps = append(temps, i)
		}
	}
	for r := 1; r < len(lines); r++ {
		cells := strings.Split(lines[r], ";")
		for _, i := range temps {
			if v, err := strconv.ParseFloat(strings.Replace(cells[i], ",", ".", 1), 64); err == nil {
				cells[i] = strings.Replace(fmt.Sprintf("%.2f", v*1.8+32), ".", ",", 1)
			}
		}
		lines[r] = strings.Join(cells, ";")
	}
	return strings.Join(lines, "\n") + "\n"
}

// TestAnHourLaterWithItsZone moves every instant an hour and the building with
// it into the zone an hour to the west: local clocks read the same, and no
// figure changes but the instants themselves.
func TestAnHourLaterWithItsZone(t *testing.T) {
	fixed := func(zone string) func(string) string {
		return func(s string) string { return strings.Replace(s, "Europe/Zurich", zone, 1) }
	}
	here := smallDemo(t)
	edit(t, here, "site.yaml", fixed("Etc/GMT-2"))
	later := smallDemo(t)
	edit(t, later, "site.yaml", fixed("Etc/GMT-1"))
	// The sun rises an hour later there too.
	edit(t, later, "site.yaml", func(s string) string { return strings.Replace(s, "longitude: 8", "longitude: -7", 1) })
	edit(t, later, "site.yaml", func(s string) string { return strings.Replace(s, `clock: "+01:00"`, `clock: "+00:00"`, 1) })
	edit(t, later, "logs/weather.csv", func(s string) string { return shiftTimes(t, s, "2006-01-02T15:04:05Z", ",") })
	want, got := withoutInstants(figures(t, here)["hours.csv"]), withoutInstants(figures(t, later)["hours.csv"])
	if want != got {
		t.Errorf("hours.csv differs: %s", firstDifference(want, got))
	}
}

// withoutInstants drops start_utc and the offset of start_local.
func withoutInstants(hours string) string {
	lines := strings.Split(strings.TrimPrefix(hours, "\xef\xbb\xbf"), "\n")
	for i, line := range lines {
		cells := strings.SplitN(line, ",", 3)
		if len(cells) == 3 {
			lines[i] = strings.TrimSuffix(strings.TrimSuffix(cells[1], "+02:00"), "+01:00") + "," + cells[2]
		}
	}
	return strings.Join(lines, "\n")
}

func firstDifference(want, got string) string {
	w, g := strings.Split(want, "\n"), strings.Split(got, "\n")
	for i := range w {
		if i >= len(g) || w[i] != g[i] {
			other := "(nothing)"
			if i < len(g) {
				other = g[i]
			}
			return fmt.Sprintf("line %d\nwant %.300s\ngot  %.300s", i+1, w[i], other)
		}
	}
	return fmt.Sprintf("%d lines want, %d got", len(w), len(g))
}

// TestHostileNames: names with markup, quotes, line ends and marks that turn
// the direction of writing come out harmless everywhere.
func TestHostileNames(t *testing.T) {
	dir := smallDemo(t)
	const name = `=cmd|'<script>alert(1)</script>\u202e\"x\ny`
	edit(t, dir, "site.yaml", func(s string) string {
		s = strings.ReplaceAll(s, "L1.02", `"@<img src=x>"`)
		return strings.Replace(s, `name: "Open office south"`, `name: "`+name+`"`, 1)
	})
	edit(t, dir, "points.csv", func(s string) string { return strings.ReplaceAll(s, "L1.02", "@<img src=x>") })
	out := filepath.Join(t.TempDir(), "out")
	var stdout, stderr bytes.Buffer
	if code := run([]string{"audit", filepath.Join(dir, "site.yaml"), "--into", out}, process{stdout: &stdout, stderr: &stderr, env: func(string) string { return "" }, now: time.Now}); code != exitDone {
		t.Fatalf("exit code %d\n%s", code, stderr.String())
	}
	for _, text := range []string{stdout.String(), stderr.String()} {
		if strings.ContainsAny(text, "\u202e\x1b") {
			t.Error("a mark that turns the direction of writing reached the terminal")
		}
	}
	page, err := os.ReadFile(filepath.Join(out, "report.html"))
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range []string{"<script>alert", "<img src=x>", "\u202e"} {
		if bytes.Contains(page, []byte(bad)) {
			t.Errorf("report.html holds %q", bad)
		}
	}
	for _, file := range []string{"hours.csv", "episodes.csv", "readings.csv"} {
		header, rows := readTable(t, filepath.Join(out, file))
		text := 0
		for _, row := range rows {
			for column, i := range header {
				if strings.IndexAny(row[i], "=@") == 0 {
					t.Fatalf("%s: cell %q of %s would run as a formula", file, row[i], column)
				}
				if strings.Contains(row[i], "img src") {
					text++
				}
			}
		}
		if text == 0 && file != "readings.csv" {
			t.Errorf("%s: the zone with the hostile id is missing", file)
		}
	}
}

// TestNamesOfLongLogs: a mapped name that no row of a long log carries is
// pointed out, and only such a name.
func TestNamesOfLongLogs(t *testing.T) {
	const message = "carries the name"
	page := func(dir string) string {
		raw, err := os.ReadFile(filepath.Join(auditTo(t, filepath.Join(dir, "site.yaml"), exitDone), "report.html"))
		if err != nil {
			t.Fatal(err)
		}
		return string(raw)
	}
	dir := smallDemo(t)
	if strings.Contains(page(dir), message) {
		t.Error("every name of the demo's long logs is met, yet one is reported as missing")
	}
	edit(t, dir, "points.csv", func(s string) string { return strings.Replace(s, "windows,F1-R01-W3,", "windows,F1-R01-W9,", 1) })
	if got := page(dir); strings.Count(got, message) != 1 || !strings.Contains(got, "F1-R01-W9") {
		t.Errorf("a name that no row carries: reported %d times", strings.Count(got, message))
	}
}
