package guess_test

import (
	"context"
	"os"
	"path/filepath"
	"testing"
	"time"

	"github.com/parquet-go/parquet-go"

	"sashlog/configs/site"
	"sashlog/ingest/columnar/columnartest"
	"sashlog/ingest/guess"
)

// TestParquet: a Parquet file is proposed like the same text, its unit taken
// from the file's metadata and its clock from the flag of universal time.
func TestParquet(t *testing.T) {
	var times []time.Time
	var temp, co2 []any
	for i := range 2000 {
		times = append(times, time.Date(2025, 3, 1, 0, 15*i, 0, 0, time.UTC))
		temp, co2 = append(temp, 68+float64(i%17)/5), append(co2, int64(430+10*(i%31)))
	}
	b, err := columnartest.Write([]columnartest.Column{
		{Name: "when", Node: parquet.Timestamp(parquet.Millisecond), Values: columnartest.Times(times, 1000)},
		{Name: "Room 101 Temperature", Node: parquet.Leaf(parquet.DoubleType), Values: temp},
		{Name: "Room 101 CO2", Node: parquet.Int(64), Values: co2},
	}, 700, parquet.KeyValueMetadata("Room 101 Temperature.unit", "degF"))
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "rooms.parquet"), b, 0o644); err != nil {
		t.Fatal(err)
	}
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{dir}, Into: dir})
	if err != nil || len(p.Logs) != 1 || len(p.Tracks) != 2 {
		t.Fatalf("%v: %d logs, %d columns, %+v", err, len(p.Logs), len(p.Tracks), p.Files)
	}
	if l := p.Logs[0]; l.Setting.TimeColumn != "when" || l.DateOpen {
		t.Errorf("%+v", l.Setting)
	}
	for _, tr := range p.Tracks {
		if tr.Column == "Room 101 Temperature" && (tr.Quantity != site.AirTemp || tr.Unit != "degF") {
			t.Errorf("%s: %s in %q", tr.Column, tr.Quantity, tr.Unit)
		}
	}
	loads(t, "Parquet", dir)
}
