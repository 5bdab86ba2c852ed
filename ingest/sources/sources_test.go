package sources

import (
	"context"
	"os"
	"path/filepath"
	"reflect"
	"testing"
	"time"
	_ "time/tzdata"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

type got struct {
	point int
	at    int64
	v     float64
}

type sink struct {
	readings []got
	rejects  map[reading.Reason]int
	issues   []reading.Issue
}

func (s *sink) Reading(p int, at int64, v float64) { s.readings = append(s.readings, got{p, at, v}) }
func (s *sink) Reject(p int, r reading.Reason, at reading.Where, text string) {
	if s.rejects == nil {
		s.rejects = map[reading.Reason]int{}
	}
	s.rejects[r]++
}
func (s *sink) Issue(i reading.Issue) { s.issues = append(s.issues, i) }

// One log may be wide and another long, and every source describes itself.
func TestOpen(t *testing.T) {
	dir := t.TempDir()
	for name, text := range map[string]string{
		"w.csv": "Time,T1,W1\n2025-01-01 00:00,20.5,Open\n2025-01-01 00:05,,Closed\n",
		"l.csv": "ts;id;value\n17.01.2025 00:00;a;21,5\n17.01.2025 00:00;b;1\n",
	} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	s := &site.Site{Location: loc, Dir: dir, Logs: []site.Log{{Path: "w.csv", Name: "w"}, {Path: "l.csv", Name: "l", Layout: site.Long, KeyColumns: []string{"id"}}},
		Points: []site.Point{{Source: "w", Column: "T1", Quantity: site.AirTemp, Unit: "degC", Conversion: site.Conversion{Factor: 1}},
			{Source: "w", Column: "W1", Quantity: site.Window}, {Source: "l", Column: "a", Quantity: site.AirTemp}}}
	set, err := Open(context.Background(), s)
	if err != nil || len(set.Problems) > 0 || len(set.Sources) != 2 {
		t.Fatal(err, set)
	}
	var k sink
	for _, src := range set.Sources {
		if err := src.Read(context.Background(), &k); err != nil {
			t.Fatal(err)
		}
		if l := src.(Source).Describe(); l.Path != src.Name() || l.Rows != 2 || len(l.SHA256) != 64 || len(l.Dialect) < 4 {
			t.Errorf("%+v", l)
		}
	}
	want := []got{{0, 1735686000, 20.5}, {1, 1735686000, 1}, {1, 1735686300, 0}, {2, 1737068400, 21.5}}
	if !reflect.DeepEqual(k.readings, want) || k.rejects[reading.Missing] != 1 || k.rejects[reading.Unmapped] != 1 || len(k.rejects) != 2 {
		t.Errorf("%+v", k)
	}
	s.Logs[0].TimeFormat = "2006-01-02 15:04 MST"
	if set, _ := Open(context.Background(), s); len(set.Sources) != 1 || len(set.Problems) == 0 || set.Problems[0].Kind != Undecided {
		t.Errorf("%+v", set)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Open(ctx, s); err != context.Canceled {
		t.Errorf("got %v", err)
	}
}
