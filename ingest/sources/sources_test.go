package sources

import (
	"context"
	"os"
	"path/filepath"
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

func TestSmoke(t *testing.T) {
	dir := t.TempDir()
	os.WriteFile(filepath.Join(dir, "w.csv"), []byte("Time,T1,W1\n2025-01-01 00:00,20.5,Open\n2025-01-01 00:05,,Closed\n"), 0o644)
	os.WriteFile(filepath.Join(dir, "l.csv"), []byte("ts;id;value\n17.01.2025 00:00;a;21,5\n17.01.2025 00:00;b;1\n"), 0o644)
	loc, _ := time.LoadLocation("Europe/Zurich")
	s := &site.Site{Location: loc, Dir: dir, Logs: []site.Log{{Path: "w.csv", Name: "w"}, {Path: "l.csv", Name: "l", Layout: site.Long, KeyColumns: []string{"id"}}},
		Points: []site.Point{{Source: "w", Column: "T1", Quantity: site.AirTemp, Unit: "degC", Conversion: site.Conversion{Factor: 1}},
			{Source: "w", Column: "W1", Quantity: site.Window}, {Source: "l", Column: "a", Quantity: site.AirTemp}}}
	set, err := Open(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("%+v", set.Problems)
	for _, src := range set.Sources {
		var k sink
		if err := src.Read(context.Background(), &k); err != nil {
			t.Fatal(err)
		}
		t.Logf("%s %+v %+v", src.Name(), k, src.(Source).Describe())
	}
}
