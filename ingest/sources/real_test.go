package sources

import (
	"context"
	"testing"

	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// readReal reads the logs of a site file under testdata/real.
func readReal(t *testing.T, name string) (*site.Site, *sink, []reading.FileLedger) {
	t.Helper()
	l, err := configs.Load("../../testdata/real/"+name+"/site.yaml", nil)
	if err != nil {
		t.Fatal(err)
	}
	set, err := Open(context.Background(), l.Site)
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range set.Problems {
		if p.Kind < NoPoint {
			t.Errorf("%s: %s", p.Where.File, p.Text)
		}
	}
	var k sink
	var files []reading.FileLedger
	for _, s := range set.Sources {
		if err := s.Read(context.Background(), &k); err != nil {
			t.Fatal(err)
		}
		files = append(files, s.(Source).Describe())
	}
	return l.Site, &k, files
}

// ASHRAE Global Occupant Behavior Database, study 8 (doi
// 10.1038/s41597-022-01475-3). The counts of rows, of missing ones (-999) and of
// open and closed contacts are those of SOURCE.md beside the data, counted
// there independently of this program.
func TestTorontoWindows(t *testing.T) {
	s, k, files := readReal(t, "toronto-windows")
	if files[0].Rows != 113424 || files[1].Rows != 9452 {
		t.Errorf("%d and %d rows", files[0].Rows, files[1].Rows)
	}
	open, shut := 0, 0
	for _, r := range k.readings {
		if s.Points[r.point].Quantity != site.Window {
			continue
		}
		if r.v == 1 {
			open++
		} else {
			shut++
		}
	}
	if open != 25285 || shut != 11807 {
		t.Errorf("%d open, %d shut", open, shut)
	}
	missing := 76332
	for i := range s.Points {
		if s.Points[i].Quantity != site.Window {
			missing += 434 // of every column of the weather file
		}
	}
	if k.rejects[reading.Missing] != missing || len(k.rejects) != 1 {
		t.Errorf("rejects %v, want %d missing", k.rejects, missing)
	}
}

// Brains4Buildings 2022: rows of the raw log of room 999169 and of the table, as
// counted in SOURCE.md beside the data; times carry their offset, so the change
// of the clock on 2022-10-30 loses nothing.
func TestBrains4Buildings(t *testing.T) {
	s, k, files := readReal(t, "brains4buildings")
	if files[0].Rows != 40163 || files[1].Rows != 7305 {
		t.Errorf("%d and %d rows", files[0].Rows, files[1].Rows)
	}
	if k.rejects[reading.BadTime]+k.rejects[reading.AmbiguousHour]+k.rejects[reading.SkippedHour]+k.rejects[reading.UnknownWord]+k.rejects[reading.NotNumber] != 0 {
		t.Errorf("rejects %v", k.rejects)
	}
	for _, r := range k.readings {
		if s.Points[r.point].Quantity == site.Humidity && (r.v < 5 || r.v > 100) && r.v != 0 {
			t.Fatalf("humidity %v: the fraction was not turned into per cent", r.v)
		}
	}
	if len(k.readings) < 40000 {
		t.Errorf("%d readings", len(k.readings))
	}
}
