package sources

import (
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"sort"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// sums reads a site's logs and returns its readings in order of point, time
// and value, and the count of rejects by reason.
func sums(t *testing.T, files map[string]string, log site.Log, points []site.Point) ([]got, map[reading.Reason]int) {
	t.Helper()
	dir := t.TempDir()
	for n, text := range files {
		if err := os.WriteFile(filepath.Join(dir, n), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	set, err := Open(context.Background(), &site.Site{Location: loc, Dir: dir, Logs: []site.Log{log}, Points: points})
	if err != nil || len(set.Problems) > 0 {
		t.Fatal(err, set.Problems)
	}
	var k sink
	for _, s := range set.Sources {
		if err := s.Read(context.Background(), &k); err != nil {
			t.Fatal(err)
		}
	}
	sort.Slice(k.readings, func(i, j int) bool {
		a, b := k.readings[i], k.readings[j]
		if a.point != b.point {
			return a.point < b.point
		}
		if a.at != b.at {
			return a.at < b.at
		}
		return a.v < b.v
	})
	return k.readings, k.rejects
}

// Rows in any order, and a file split in two, give the readings of the tidy
// file; only the repeated hour of an unordered file is rejected.
func TestOrderOfRowsAndFiles(t *testing.T) {
	loc, _ := time.LoadLocation("Europe/Zurich")
	points := []site.Point{{Source: "x", Column: "A", Quantity: site.AirTemp, Unit: "degC"}, {Source: "x", Column: "B", Quantity: site.CO2, Unit: "ppm"}}
	repeatedFrom := time.Date(2025, 10, 26, 0, 0, 0, 0, time.UTC).Unix()
	for _, long := range []bool{false, true} {
		log := site.Log{Path: "*.csv", Name: "x"}
		head := "time,A,B\n"
		if long {
			log.Layout, log.KeyColumns, head = site.Long, []string{"id"}, "time,id,value\n"
		}
		var rows []string
		n := 0
		for at := time.Date(2025, 10, 20, 0, 0, 0, 0, loc).Unix(); n < 1200; at += 900 {
			w := time.Unix(at, 0).In(loc).Format("2006-01-02 15:04:05")
			if long {
				rows = append(rows, fmt.Sprintf("%s,A,%d.5\n", w, n%30), fmt.Sprintf("%s,B,%d\n", w, 400+n))
			} else {
				rows = append(rows, fmt.Sprintf("%s,%d.5,%d\n", w, n%30, 400+n))
			}
			n++
		}
		tidy, bad := sums(t, map[string]string{"a.csv": head + strings.Join(rows, "")}, log, points)
		if len(tidy) != 2*n || len(bad) != 0 {
			t.Fatalf("long %v: the tidy file gives %d readings of %d, rejects %v", long, len(tidy), 2*n, bad)
		}
		for i, r := range tidy { // and each at its own instant
			if want := time.Date(2025, 10, 20, 0, 0, 0, 0, loc).Unix() + int64(i%n)*900; r.at != want {
				t.Fatalf("long %v: reading %d at %d, want %d", long, i, r.at, want)
			}
		}
		cut := len(rows) / 3
		for name, files := range map[string]map[string]string{
			"split":           {"a.csv": head + strings.Join(rows[:cut], ""), "b.csv": head + strings.Join(rows[cut:], "")},
			"split, reversed": {"b.csv": head + strings.Join(rows[:cut], ""), "a.csv": head + strings.Join(rows[cut:], "")},
			"joined wrongly":  {"a.csv": head + strings.Join(rows[cut:], "") + strings.Join(rows[:cut], "")},
			"newest first":    {"a.csv": head + strings.Join(reversed(rows), "")},
		} {
			if got, bad := sums(t, files, log, points); !reflect.DeepEqual(got, tidy) || len(bad) != 0 {
				t.Errorf("long %v, %s: %d readings of %d, rejects %v", long, name, len(got), len(tidy), bad)
			}
		}
		var sure []got
		for _, r := range tidy {
			if r.at < repeatedFrom || r.at >= repeatedFrom+7200 {
				sure = append(sure, r)
			}
		}
		for seed := uint64(0); seed < 20; seed++ {
			mixed := append([]string{}, rows...)
			rand.New(rand.NewPCG(seed, 7)).Shuffle(len(mixed), func(i, j int) { mixed[i], mixed[j] = mixed[j], mixed[i] })
			got, bad := sums(t, map[string]string{"a.csv": head + strings.Join(mixed, "")}, log, points)
			if !reflect.DeepEqual(got, sure) || bad[reading.AmbiguousHour] != len(tidy)-len(sure) || len(bad) != 1 {
				t.Errorf("long %v, seed %d: %d readings of %d, rejects %v", long, seed, len(got), len(sure), bad)
			}
		}
	}
}

func reversed(s []string) []string {
	out := make([]string, len(s))
	for i, x := range s {
		out[len(s)-1-i] = x
	}
	return out
}

func TestUnmet(t *testing.T) {
	s := &site.Site{Logs: []site.Log{{Name: "x", Layout: site.Long}}, Points: []site.Point{{Source: "x", Column: "B1.T", Line: 2}, {Source: "x", Column: "B2.T", Line: 3}}}
	l := &reading.Ledger{Points: make([]reading.PointLedger, 2), Unmapped: map[string]int64{"BLD1.T": 5, "B1_T": 3}}
	l.Points[1].RowsRead = 7
	p := Unmet(s, l)
	if len(p) != 1 || p[0].Point != 0 || p[0].Hint != `did you mean "B1_T"` {
		t.Errorf("%+v", p)
	}
}
