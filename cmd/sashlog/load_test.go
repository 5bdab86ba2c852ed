package main

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/demo"
	"sashlog/ingest/influx/influxtest"
)

// storeEnv is the environment of a user with a token.
func storeEnv(token string) func(string) string {
	return func(name string) string {
		if name == "STORE_TOKEN" {
			return token
		}
		return ""
	}
}

func sashlog(env func(string) string, args ...string) (code int, stdout, stderr string) {
	var out, say bytes.Buffer
	code = run(args, process{stdout: &out, stderr: &say, env: env, now: func() time.Time { return time.Date(2026, 1, 2, 3, 4, 5, 0, time.UTC) }})
	return code, out.String(), say.String()
}

// faultyDemo writes three weeks of the whole building, with faults, whose site
// file also names a database.
func faultyDemo(t *testing.T, address, bucket, read string, stepMin int) string {
	t.Helper()
	dir := t.TempDir()
	o := demo.Defaults()
	o.Days, o.From = 21, site.Date{Year: 2025, Month: time.October, Day: 13} // the clocks go back on the 26th
	if _, err := demo.Write(dir, o); err != nil {
		t.Fatal(err)
	}
	edit(t, dir, "site.yaml", func(text string) string {
		text = strings.Replace(text, "step_min: 5", fmt.Sprintf("step_min: %d  # minutes", stepMin), 1)
		text = strings.Replace(text, "rejected_share: 0.05", "rejected_share: 1", 1)
		return strings.Replace(text, "\nlogs:\n", fmt.Sprintf("\nlogs:\n  - {name: store, influx: {address: %q, bucket: %s, token_env: STORE_TOKEN, read: %s}}\n", address, bucket, read), 1)
	})
	return dir
}

// auditOf audits a folder and returns its hourly record.
func auditOf(t *testing.T, dir string, env func(string) string) string {
	t.Helper()
	code, out, say := sashlog(env, "audit", filepath.Join(dir, "site.yaml"))
	if code != exitDone {
		t.Fatalf("exit code %d: %s", code, say)
	}
	raw, err := os.ReadFile(filepath.Join(filepath.Dir(strings.TrimSpace(out)), "hours.csv"))
	if err != nil {
		t.Fatal(err)
	}
	return string(raw)
}

// The same building from its files and from the database: as logged, the
// hourly record is the same to the byte; as means of the server every figure
// is within 2e-4 (readings are rounded to 1e-4 of their unit).
func TestLoadedBuilding(t *testing.T) {
	server := &influxtest.Server{Auth: true}
	address := server.Address(t)
	t.Cleanup(server.Stop)
	env := storeEnv(influxtest.Token)
	for _, c := range []struct {
		read    string
		stepMin int
	}{{"raw", 5}, {"means", 5}, {"means", 15}} {
		t.Run(fmt.Sprint(c.read, c.stepMin), func(t *testing.T) {
			bucket := fmt.Sprint(c.read, c.stepMin)
			server.Database(t, bucket)
			dir := faultyDemo(t, address, bucket, c.read, c.stepMin)
			want := auditOf(t, dir, env)
			siteFile := filepath.Join(dir, "site.yaml")
			for range 2 { // again changes nothing
				code, out, say := sashlog(env, "load", siteFile)
				if table := filepath.Join(dir, "points-store.csv"); code != exitDone || strings.TrimSpace(out) != table {
					t.Fatalf("exit code %d, %q: %s", code, out, say)
				}
				if !strings.Contains(say, "are in "+address+"/"+bucket+" (counted there)") || !strings.Contains(say, "write into site.yaml: points: points-store.csv") {
					t.Errorf("it says %s", say)
				}
			}
			edit(t, dir, "site.yaml", func(text string) string {
				return strings.Replace(text, "points: points.csv", "points: points-store.csv", 1)
			})
			if err := os.RemoveAll(filepath.Join(dir, "logs")); err != nil {
				t.Fatal(err)
			}
			edit(t, dir, "site.yaml", withoutFiles)
			got := auditOf(t, dir, env)
			if c.read == "raw" && got != want {
				t.Errorf("the hourly record is not the same to the byte")
			}
			sameRecord(t, got, want, 2e-4)
			for _, name := range []string{"results.json", "report.html", "readings.csv"} {
				raw, err := os.ReadFile(filepath.Join(dir, "sashlog-report", name))
				if err != nil || strings.Contains(string(raw), "open-sesame") {
					t.Errorf("%s: %v, or the token shows in it", name, err)
				}
				if name == "results.json" && !strings.Contains(string(raw), "influx://") {
					t.Error("the database is not among the inputs")
				}
			}
			if code, _, say := sashlog(env, "load", siteFile); code != exitUsage || !strings.Contains(say, "no file log of the site has a mapped point") {
				t.Errorf("exit code %d: %s", code, say)
			}
		})
	}
}

// withoutFiles drops the file logs from a demo's site file.
func withoutFiles(text string) string {
	var out []string
	for _, line := range strings.Split(text, "\n") {
		if !strings.HasPrefix(line, "  - {name: ") || strings.Contains(line, "influx:") {
			out = append(out, line)
		}
	}
	return strings.Join(out, "\n")
}

// sameRecord compares two hourly records cell by cell.
func sameRecord(t *testing.T, got, want string, tolerance float64) {
	t.Helper()
	g, err1 := csv.NewReader(strings.NewReader(got)).ReadAll()
	w, err2 := csv.NewReader(strings.NewReader(want)).ReadAll()
	if err1 != nil || err2 != nil || len(g) != len(w) || len(w) < 1000 {
		t.Fatalf("%v %v, %d and %d rows", err1, err2, len(g), len(w))
	}
	bad, filled, worst := 0, 0, 0.0
	for r := range w {
		for c := range w[r] {
			x, err := strconv.ParseFloat(w[r][c], 64)
			if err != nil {
				if g[r][c] != w[r][c] {
					bad++
				}
				continue
			}
			filled++
			y, err := strconv.ParseFloat(g[r][c], 64)
			if err != nil || !(math.Abs(x-y) <= tolerance) {
				if bad++; bad < 5 {
					t.Errorf("row %d, %s: got %s, want %s", r, w[0][c], g[r][c], w[r][c])
				}
				continue
			}
			worst = max(worst, math.Abs(x-y))
		}
	}
	if bad > 0 || filled < 10000 {
		t.Errorf("%d cells of %d differ", bad, filled)
	}
	t.Logf("%d numbers, greatest difference %.2g", filled, worst)
}

// What goes wrong ends with its exit code and a hint, and never shows a token.
func TestLoadFailures(t *testing.T) {
	server := &influxtest.Server{Auth: true}
	address := server.Address(t)
	t.Cleanup(server.Stop)
	dir := smallDemo(t)
	siteFile := filepath.Join(dir, "site.yaml")
	fails := func(token string, code int, want string, args ...string) {
		t.Helper()
		got, out, say := sashlog(storeEnv(token), append(args, siteFile)...)
		if got != code || !strings.Contains(say, want) || out != "" {
			t.Errorf("exit code %d, want %d with %q: %s%s", got, code, want, say, out)
		}
		if token != "" && strings.Contains(say+out, token) {
			t.Error("the token shows")
		}
	}
	fails("", exitUsage, "the site file names no InfluxDB", "load")
	edit(t, dir, "site.yaml", func(text string) string {
		return strings.Replace(text, "\nlogs:\n", fmt.Sprintf("\nlogs:\n  - {name: store, influx: {address: %q, bucket: nowhere, token_env: STORE_TOKEN}}\n", address), 1)
	})
	fails("", exitWrite, "the server asks for a token; hint: the variable STORE_TOKEN is not set", "load")
	fails("keeper:wrong-one", exitWrite, "the server refuses the token in STORE_TOKEN", "load")
	fails(influxtest.Token, exitWrite, `there is no bucket "nowhere"`, "load")
	fails(influxtest.Token, exitUsage, `no log called "stores" is an InfluxDB`, "load", "--into-log", "stores")
	if left, _ := filepath.Glob(filepath.Join(dir, "*points-*")); len(left) > 0 {
		t.Errorf("left behind: %v", left)
	}

	// An audit from a database that cannot be read is no audit.
	edit(t, dir, "points.csv", func(text string) string { return strings.Replace(text, "floor1,", "store,", 1) })
	fails(influxtest.Token, exitSource, `there is no bucket "nowhere"`, "audit")
	fails("keeper:wrong-one", exitSource, "the server refuses the token in STORE_TOKEN", "audit")
	server.Database(t, "nowhere")
	if err := os.Remove(filepath.Join(dir, "logs", "windows.csv")); err != nil {
		t.Fatal(err)
	}
	fails(influxtest.Token, exitSource, "windows.csv", "load")
}
