package guess_test

import (
	"compress/gzip"
	"context"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"sashlog/configs"
	"sashlog/ingest/demo"
	"sashlog/ingest/guess"
)

// TestProposals holds what the data propose against what the demo building
// really is: which unit serves which zone (none may be wrong), when people come
// and go (within an hour), how many there usually are.
func TestProposals(t *testing.T) {
	found, zones := 0, 0
	for _, seed := range []uint64{1, 2, 3} {
		dir := t.TempDir()
		o := demo.Defaults()
		o.Seed = seed
		if _, err := demo.Write(dir, o); err != nil {
			t.Fatal(err)
		}
		truth, err := configs.Load(filepath.Join(dir, "site.yaml"), func(string) string { return "" })
		if err != nil {
			t.Fatal(err)
		}
		p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{filepath.Join(dir, "logs")}, Into: dir})
		if err != nil {
			t.Fatal(err)
		}
		serving := map[string]string{}
		for _, u := range truth.Site.Plant {
			for _, z := range u.Serves {
				serving[z] = u.ID
			}
		}
		zones += len(serving)
		for _, u := range p.Plant {
			for _, z := range u.Serves {
				found++
				if serving[demoZone(z)] != u.ID {
					t.Errorf("seed %d: %s proposed to serve %s, which %s does", seed, u.ID, z, serving[demoZone(z)])
				}
			}
		}
		if len(p.Occupied) != 1 {
			t.Fatalf("seed %d: occupied times %v", seed, p.Occupied)
		}
		got, want := p.Occupied[0], truth.Site.Occupancy.Times[0]
		if got.Days != want.Days || abs(got.FromMin-want.FromMin) > 60 || abs(got.ToMin-want.ToMin) > 60 {
			t.Errorf("seed %d: occupied %v, the site file says %v", seed, got, want)
		}
		for _, z := range p.Zones {
			// The site file gives the desks; fewer people come on an ordinary day.
			if demoZone(z.ID) == "L2.01" && (z.People < 8 || z.People > 15) {
				t.Errorf("seed %d: %d people usual in L2.01, which has 15 desks", seed, z.People)
			}
		}
	}
	if found*10 < zones*4 {
		t.Errorf("only %d of %d zones were given a unit", found, zones)
	}
	t.Logf("%d of %d zones given a unit, none wrong", found, zones)
}

// TestTimesFromCO2 takes presence and counts away: CO2 has to tell the hours.
func TestTimesFromCO2(t *testing.T) {
	dir := t.TempDir()
	o := demo.Defaults()
	o.Days = 150
	if _, err := demo.Write(dir, o); err != nil {
		t.Fatal(err)
	}
	if err := os.Remove(filepath.Join(dir, "logs", "presence.csv")); err != nil {
		t.Fatal(err)
	}
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{filepath.Join(dir, "logs", "floor1.csv"), filepath.Join(dir, "logs", "floor3.csv.gz")}, Into: dir})
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Occupied) != 1 || !strings.Contains(p.OccupiedWhy, "CO2") {
		t.Fatalf("times %v from %q", p.Occupied, p.OccupiedWhy)
	}
	// The demo's people come from 8 to 18, Monday to Friday.
	got := p.Occupied[0]
	if got.Days != [7]bool{false, true, true, true, true, true, false} || abs(got.FromMin-480) > 60 || abs(got.ToMin-1080) > 90 {
		t.Errorf("CO2 says %v", got)
	}
}

var demoName = regexp.MustCompile(`^F(\d)[_-]R(\d\d)$`)

// demoZone is the demo's own id of a zone as its columns name it.
func demoZone(id string) string {
	if m := demoName.FindStringSubmatch(id); m != nil {
		return "L" + m[1] + "." + m[2]
	}
	return id
}

func abs(x int) int { return max(x, -x) }

// writeFiles writes texts into a new folder.
func writeFiles(t *testing.T, files map[string]string) string {
	t.Helper()
	dir := t.TempDir()
	for name, text := range files {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return dir
}

func gunzip(t *testing.T, path string) string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	b, err := io.ReadAll(z)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}
