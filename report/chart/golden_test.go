package chart

import (
	"flag"
	"os"
	"path/filepath"
	"testing"
)

var update = flag.Bool("update", false, "write the golden figures anew")

// TestGolden holds the bytes of small figures. After an intended change run
//
//	go test ./report/chart -run Golden -update
//
// and look at the figures before committing them.
func TestGolden(t *testing.T) {
	small := map[string]bool{"carpet-2days": true, "monthly-stack-1": true, "where-hours-went": true, "outdoor-few": true,
		"exceedance-9": true, "league-12": true, "co2-1": true, "strip-1": true, "exceedance-curve": true, "rose": true, "changeover-curve": true,
		"hours-by-way": true, "added-hours": true, "group-rates": true, "wind-roses": true, "comfort-fields": true, "air-change": true,
		"zone-plan": true, "running-mean": true, "known-calendar-2": true, "doubt-bars": true}
	for _, f := range figures() {
		if !small[f.name] {
			continue
		}
		t.Run(f.name, func(t *testing.T) {
			got, err := f.draw(Options{ID: f.name})
			if err != nil {
				t.Fatal(err)
			}
			path := filepath.Join("testdata", f.name+".svg")
			if *update {
				if err := os.MkdirAll("testdata", 0o755); err != nil {
					t.Fatal(err)
				}
				if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
					t.Fatal(err)
				}
				return
			}
			want, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			if string(want) != string(got) {
				at := 0
				for at < len(want) && at < len(got) && want[at] == got[at] {
					at++
				}
				t.Errorf("differs from %s at byte %d:\nwant …%.120q\ngot  …%.120q", path, at, want[max(0, at-20):], got[max(0, at-20):])
			}
		})
	}
}

func TestSameDataSameBytes(t *testing.T) {
	for _, f := range figures() {
		a, errA := f.draw(Options{ID: "x"})
		b, errB := f.draw(Options{ID: "x"})
		if errA != nil || errB != nil || a != b {
			t.Errorf("%s: two drawings differ (errors %v, %v)", f.name, errA, errB)
		}
	}
}
