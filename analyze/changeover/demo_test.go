package changeover_test

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"testing"
	"time"

	"sashlog/analyze"
	"sashlog/analyze/changeover"
	"sashlog/configs"
	"sashlog/ingest"
	"sashlog/ingest/demo"
)

// audited reads and analyses a demo building.
func audited(t testing.TB, o demo.Options) (analyze.Input, *analyze.Results, *demo.Truth) {
	dir := t.TempDir()
	truth, err := demo.Write(dir, o)
	if err != nil {
		t.Fatal(err)
	}
	l, err := configs.Load(filepath.Join(dir, "site.yaml"), func(string) string { return "" })
	if err != nil {
		t.Fatal(err)
	}
	g, _, err := ingest.Read(context.Background(), l.Site, ingest.Options{})
	if err != nil {
		t.Fatal(err)
	}
	in := analyze.Input{Site: l.Site, Criteria: l.Criteria, Grid: g}
	return in, analyze.Run(in), &truth
}

func read(in analyze.Input, r *analyze.Results) *changeover.Result {
	return changeover.Read(changeover.Input{Site: in.Site, Grid: in.Grid, Calendar: r.Calendar, Outdoor: r.Outdoor, Indoor: r.Indoor,
		Running: r.Running, Potential: r.Potential, Lost: r.Lost, Seed: 1})
}

func zonesOf(in analyze.Input, r *analyze.Results, unit string) []string {
	for _, p := range in.Site.Plant {
		if p.ID == unit {
			return p.Serves
		}
	}
	return nil
}

func TestLook(t *testing.T) {
	if os.Getenv("LOOK") == "" {
		t.Skip()
	}
	o := demo.Defaults()
	fmt.Sscan(os.Getenv("LOOK"), &o.Seed)
	in, r, truth := audited(t, o)
	start := time.Now()
	c := read(in, r)
	t.Logf("%v, tried %d", time.Since(start), c.Tried)
	t.Logf("%+v missed %.0f", r.Leaders.Units, r.Leaders.MissedH)
	for _, l := range r.Leaders.Leaders {
		t.Logf("leader %s %+v", in.Site.Zones[l.Zone].ID, l)
	}
	t.Logf("%+v", r.Leaders.Explained)
	for _, u := range r.Lost.Units {
		for _, c := range u.Calls {
			t.Logf("lost: %s %s %+v", u.ID, in.Site.Zones[c.Zone].ID, c)
		}
	}
	for u := range truth.Plants {
		counts := map[string]int{}
		for i := 1; i < truth.N; i++ {
			if truth.Zones[0].Occupied[i] == 0 || truth.Plants[u].State[i] == 0 || truth.Plants[u].State[i-1] != 0 {
				continue
			}
			for _, z := range zonesOf(in, r, truth.Plants[u].ID) {
				zt := truth.Zone(z)
				if c := zt.CalledBy[i]; c >= 0 {
					counts[truth.Zones[c].ID]++
					break
				} else if zt.Reason[i] == demo.ReasonIndoorLimit {
					continue
				} else if zt.Reason[i] != demo.ReasonNoOpening {
					counts[zt.Reason[i].String()]++
					break
				}
			}
		}
		t.Log(truth.Plants[u].ID, counts)
	}
	for _, list := range [][]changeover.Subject{c.Units, c.Zones} {
		for _, s := range list {
			t.Logf("%s open %+v closed %+v switches %.2f max %.0f days %d toOpen %+v toClose %+v rel %+v", s.ID, s.Open, s.Closed, s.SwitchesPerDay, s.SwitchesMost, s.Days, s.ToOpen, s.ToClose, s.Released)
			t.Logf("   closing: free %.4f changes %d of %d %s; opening: free %.4f changes %d of %d %s", s.Closing.Free, s.Closing.Changes, s.Closing.Moments, s.Closing.Refused, s.Opening.Free, s.Opening.Changes, s.Opening.Moments, s.Opening.Refused)
			for _, l := range s.Limits() {
				who := "outdoors"
				if l.Zone >= 0 {
					who = in.Site.Zones[l.Zone].ID
				}
				t.Logf("   opening %v %s above %v: %.2f (%.2f-%.2f) blur %.2f, %.0f of %d %s", l.Opening, who, l.Above, l.LevelC, l.LowC, l.HighC, l.BlurK, l.Changes, l.All, l.Undetermined)
				if l.Shift != nil {
					t.Logf("      SHIFT %+v", *l.Shift)
				}
			}
			if s.Clock != nil {
				t.Logf("   CLOCK SHIFT %+v", *s.Clock)
			}
		}
	}
}
