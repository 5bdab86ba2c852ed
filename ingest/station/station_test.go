package station

import (
	"bytes"
	"compress/gzip"
	"context"
	"fmt"
	"io"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

const excerpt = "../../testdata/real/weather-tmy3-isd/725300-94846-2018.gz"

type sink struct {
	n, rejects map[int]int
	sum        map[int]float64
	first      int64
	why        map[reading.Reason]int
}

func newSink() *sink {
	return &sink{n: map[int]int{}, rejects: map[int]int{}, sum: map[int]float64{}, why: map[reading.Reason]int{}}
}

func (s *sink) Reading(p int, at int64, v float64) {
	if len(s.n) == 0 {
		s.first = at
	}
	s.n[p]++
	s.sum[p] += v
}
func (s *sink) Reject(p int, r reading.Reason, _ reading.Where, _ string) {
	s.rejects[p]++
	s.why[r]++
}
func (s *sink) Issue(reading.Issue) {}

// points are one point per column of values.
func points() []site.Point {
	var ps []site.Point
	for i, q := range []site.Quantity{site.OutdoorTemp, site.OutdoorDewPoint, "", site.WindDirection, site.WindSpeed, "", site.Rain} {
		if q != "" {
			ps = append(ps, site.Point{Column: columns[i].name, Quantity: q, Unit: columns[i].unit, Conversion: site.Conversion{Factor: 1}})
		}
	}
	return ps
}

func read(t *testing.T, path string) (*sink, *File) {
	t.Helper()
	files, bad := logfile.Find(filepath.Dir(path), filepath.Base(path))
	if len(bad) > 0 || len(files) != 1 {
		t.Fatal(bad, files)
	}
	if !Recognise(files[0]) {
		t.Fatalf("%s is not recognised", path)
	}
	s := &site.Site{Location: time.UTC, Points: points()}
	f, err := Open(s, &site.Log{Name: "w"}, files[0], nil)
	if err != nil {
		t.Fatal(err)
	}
	var ms []tabular.Match
	for i, p := range s.Points {
		ms = append(ms, tabular.Match{Point: i, Column: f.Frame().Column(p.Column)})
	}
	f.SetMatches(ms)
	f.Settle("", "")
	k := newSink()
	if err := f.Read(context.Background(), k); err != nil {
		t.Fatal(err)
	}
	return k, f
}

// TestAgainstAWK: the station's hours are counted and summed a second time by
// awk, a general tool that knows nothing of this package.
func TestAgainstAWK(t *testing.T) {
	if _, err := exec.LookPath("awk"); err != nil {
		t.Skip("awk is not installed")
	}
	packed, err := os.ReadFile(excerpt)
	if err != nil {
		t.Fatal(err)
	}
	z, err := gzip.NewReader(bytes.NewReader(packed))
	if err != nil {
		t.Fatal(err)
	}
	text, err := io.ReadAll(z)
	if err != nil {
		t.Fatal(err)
	}
	k, f := read(t, excerpt)
	if want := time.Date(2018, 1, 1, 0, 0, 0, 0, time.UTC).Unix(); k.first != want {
		t.Errorf("the first hour is %d, want %d", k.first, want)
	}
	if f.Ledger.Rows != int64(bytes.Count(text, []byte("\n"))) || len(f.Ledger.SHA256) != 64 || f.Ledger.Bytes != int64(len(packed)) {
		t.Errorf("%+v", f.Ledger)
	}
	for i, field := range map[int]string{0: "5", 1: "6", 2: "8", 3: "9", 4: "11"} {
		scale := "10"
		if i == 2 {
			scale = "1"
		}
		cmd := exec.Command("awk", "$"+field+" != -9999 { n++; s += ($"+field+" == -1 && "+field+" == 11) ? 0.05 : $"+field+" / "+scale+" } END { printf \"%d %.6f\", n, s }")
		cmd.Stdin = bytes.NewReader(text)
		out, err := cmd.Output()
		if err != nil {
			t.Fatal(err)
		}
		var n int
		var sum float64
		if _, err := fmt.Sscan(string(out), &n, &sum); err != nil {
			t.Fatal(err)
		}
		if k.n[i] != n || math.Abs(k.sum[i]-sum) > 1e-6*math.Abs(sum)+1e-6 || n < 3000 {
			t.Errorf("%s: %d readings, sum %.6f; awk says %d and %.6f", columns[i].name, k.n[i], k.sum[i], n, sum)
		}
		if k.n[i]+k.rejects[i] != int(f.Ledger.Rows) {
			t.Errorf("%s: %d readings and %d rejects of %d rows", columns[i].name, k.n[i], k.rejects[i], f.Ledger.Rows)
		}
	}
	if len(k.why) != 1 || k.why[reading.Missing] == 0 {
		t.Errorf("reasons %v", k.why)
	}
}

func TestLines(t *testing.T) {
	for line, want := range map[string]string{
		"2018 01 01 00  -139  -206 10370   310    51     2 -9999 -9999": "2018-01-01T00:00:00Z|-13.9|-20.6|1037.0|310|5.1|2||",
		"2018 07 31 23   255 -9999 -9999     0     0 -9999    -1    25": "2018-07-31T23:00:00Z|25.5|||0|0.0||0.05|2.5",
		"2018 13 01 00  -139  -206 10370   310    51     2 -9999 -9999": "13 is no month",
		"2018 01 01 00  -139  -206 10370   310    51     2 -9999":       "11 fields",
		"2018 01 01 00  -139  -206 10370   3x0    51     2 -9999 -9999": "not a whole number",
		"2018,01,01,00,1,2,3,4,5,6,7,8":                                 "1 fields",
	} {
		cells, err := parse([]byte(line), nil)
		got := string(bytes.Join(cells, []byte("|")))
		if err != nil {
			got = err.Error()
		}
		if err == nil && got != want || err != nil && !strings.Contains(got, want) {
			t.Errorf("%q: %q, want %q", line, got, want)
		}
	}
}

// TestCutOff: lines that are no weather are rejected and counted, the others
// are kept.
func TestCutOff(t *testing.T) {
	dir := t.TempDir()
	var b strings.Builder
	for h := range 24 {
		b.WriteString(time.Date(2018, 3, 1, h, 0, 0, 0, time.UTC).Format("2006 01 02 15") + "  100    50 10100   200    30     2     0 -9999\n")
	}
	b.WriteString("2018 03 02 00  100    50 10")
	path := filepath.Join(dir, "station")
	if err := os.WriteFile(path, []byte(b.String()), 0o644); err != nil {
		t.Fatal(err)
	}
	k, _ := read(t, path)
	if k.n[0] != 24 || k.why[reading.BadTime] != len(points()) {
		t.Errorf("%d readings, %v", k.n[0], k.why)
	}
	if Is([]byte("Time,T1\n2025-01-01 00:00,20.5\n")) || Is(nil) || Is([]byte("1 2 3 4 5 6 7 8 9 10 11 12\n")) {
		t.Error("other text is taken for weather")
	}
}

func FuzzParse(f *testing.F) {
	f.Add([]byte("2018 01 01 00  -139  -206 10370   310    51     2 -9999 -9999"))
	f.Add([]byte("2018 01 01 00 -1 -1 -1 -1 -1 -1 -1 -1"))
	f.Fuzz(func(t *testing.T, line []byte) {
		cells, err := parse(line, nil)
		if err == nil && len(cells) != 1+len(columns) {
			t.Fatalf("%d cells", len(cells))
		}
		Is(line)
	})
}
