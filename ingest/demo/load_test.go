package demo_test

import (
	"os"
	"path/filepath"
	"testing"

	"sashlog/configs"
	"sashlog/ingest/demo"
)

// The site file the demo writes is one the program accepts without a word,
// with the faults undeclared and declared, for a part of the building too.
func TestSiteFileLoads(t *testing.T) {
	for _, o := range []demo.Options{
		{Seed: 1, Days: 40, Faults: true},
		{Seed: 1, Days: 200, Faults: true, Declared: true},
		{Seed: 1, Days: 3, Zones: 1},
		{Seed: 1, Days: 3, Zones: 7},
	} {
		dir := t.TempDir()
		tr, err := demo.Write(dir, o)
		if err != nil {
			t.Fatal(err)
		}
		got, err := configs.Load(filepath.Join(dir, "site.yaml"), os.Getenv)
		if err != nil {
			t.Fatalf("%+v: %v", o, err)
		}
		if len(got.Site.Zones) != len(tr.Zones) || !got.Site.Invented || len(got.Site.Points) < 5 {
			t.Errorf("%+v: %d zones, %d points", o, len(got.Site.Zones), len(got.Site.Points))
		}
		for _, w := range got.Warnings {
			t.Logf("%+v: %v", o, w)
		}
		for i, z := range got.Site.Zones {
			if z.ID != tr.Zones[i].ID {
				t.Errorf("zone %d is %s in the site file and %s in the truth", i, z.ID, tr.Zones[i].ID)
			}
		}
	}
}
