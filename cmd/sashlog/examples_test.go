package main

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// TestExamples runs the worked examples of docs/ on the hourly record of an
// audit: they must get the shares the report shows.
func TestExamples(t *testing.T) {
	out := auditTo(t, filepath.Join(smallDemo(t), "site.yaml"), exitDone)
	raw, err := os.ReadFile(filepath.Join(out, "results.json"))
	if err != nil {
		t.Fatal(err)
	}
	var results struct {
		Zones []struct {
			ID    string
			Share struct{ Value, Low, High *float64 } `json:"achieved_share"`
		}
	}
	if err := json.Unmarshal(raw, &results); err != nil {
		t.Fatal(err)
	}
	want := map[string][3]float64{}
	for _, z := range results.Zones {
		if z.Share.Value != nil {
			want[z.ID] = [3]float64{*z.Share.Value, *z.Share.Low, *z.Share.High}
		}
	}
	if len(want) < 3 {
		t.Fatalf("%d zones with a share: the example proves nothing", len(want))
	}
	docs, err := filepath.Abs(filepath.Join("..", "..", "docs"))
	if err != nil {
		t.Fatal(err)
	}
	for _, x := range []struct{ name, program, script, picture string }{{"pandas", "/usr/bin/python3", "league.py", "league.png"}, {"R", "Rscript", "league.R", "league.pdf"}} {
		t.Run(x.name, func(t *testing.T) {
			t.Parallel()
			if x.name == "pandas" && exec.Command(x.program, "-c", "import pandas, matplotlib").Run() != nil {
				lacking(t, "python3-pandas and python3-matplotlib are not installed for /usr/bin/python3")
			}
			if _, err := exec.LookPath(x.program); err != nil {
				lacking(t, x.program+" is not installed (Debian: apt-get install r-base-core)")
			}
			dir := t.TempDir()
			numbers, picture := filepath.Join(dir, "league.csv"), filepath.Join(dir, x.picture)
			if said, err := exec.Command(x.program, filepath.Join(docs, x.script), filepath.Join(out, "hours.csv"), numbers, picture).CombinedOutput(); err != nil {
				t.Fatalf("%v\n%s", err, said)
			}
			if info, err := os.Stat(picture); err != nil || info.Size() < 2000 {
				t.Errorf("no picture: %v", err)
			}
			text, err := os.ReadFile(numbers)
			if err != nil {
				t.Fatal(err)
			}
			rows, err := csv.NewReader(strings.NewReader(string(text))).ReadAll()
			if err != nil {
				t.Fatal(err)
			}
			if strings.Join(rows[0], ",") != "zone,share,low,high,possible_h" || len(rows)-1 != len(want) {
				t.Fatalf("columns %v, %d zones, want %d", rows[0], len(rows)-1, len(want))
			}
			for _, r := range rows[1:] {
				figures, ok := want[r[0]]
				if !ok {
					t.Errorf("zone %s has no share in the report", r[0])
				}
				for i, figure := range figures {
					// Hours are written with five decimals.
					if v, err := strconv.ParseFloat(r[1+i], 64); err != nil || math.Abs(v-figure) > 1e-4 {
						t.Errorf("zone %s: %s is %s, the report has %g", r[0], rows[0][1+i], r[1+i], figure)
					}
				}
			}
		})
	}
}

// lacking skips a test for want of a tool, or fails it where tools are required.
func lacking(t *testing.T, what string) {
	t.Helper()
	if os.Getenv("SASHLOG_REQUIRE_TOOLS") == "1" {
		t.Fatal(what + ", and SASHLOG_REQUIRE_TOOLS=1 asks for it")
	}
	t.Skip(what + ": the example is not tested")
}
