package main

import (
	"archive/zip"
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"sashlog/configs"
)

// auditTo runs the audit command in this process and returns its outputs' folder.
func auditTo(t *testing.T, siteFile string, wantCode int) string {
	t.Helper()
	into := filepath.Join(t.TempDir(), "out")
	var stdout, stderr bytes.Buffer
	code := run([]string{"audit", siteFile, "--into", into}, process{stdout: &stdout, stderr: &stderr, env: func(string) string { return "" }, now: time.Now})
	if code != wantCode {
		t.Fatalf("exit code %d, want %d\n%s", code, wantCode, stderr.String())
	}
	if got := strings.TrimSpace(stdout.String()); !strings.HasSuffix(got, "report.html") {
		t.Errorf("standard output %q does not name the report", got)
	}
	return into
}

// table reads a CSV output by column name.
func readTable(t *testing.T, path string) (header map[string]int, rows [][]string) {
	t.Helper()
	raw, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(raw, []byte("\xef\xbb\xbf"))))
	all, err := r.ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", path, err)
	}
	header = map[string]int{}
	for i, name := range all[0] {
		header[name] = i
	}
	return header, all[1:]
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	if text == "" {
		return 0
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// holdIdentities checks the identities of the contract on every row of
// hours.csv and returns the sum of each column.
func holdIdentities(t *testing.T, dir string) map[string]float64 {
	t.Helper()
	header, rows := readTable(t, filepath.Join(dir, "hours.csv"))
	identities := []struct{ whole, parts string }{
		{"occupied_h", "open_h mech_h both_h shut_h unknown_h"},
		{"occupied_h", "achieved_h missed_h not_needed_h ill_timed_h closed_unsuited_h no_opening_h unjudged_h"},
		{"suited_h", "achieved_h missed_h not_needed_h unjudged_suited_h"},
		{"achieved_h", "achieved_ok_h achieved_warm_h achieved_cool_h achieved_stale_h achieved_unassessed_h"},
		{"missed_h", "missed_cool_h missed_vent_h missed_both_h missed_shut_h missed_untyped_h"},
		{"both_h", "both_cool_h both_heat_h both_vent_h both_untyped_h"},
		{"occupied_h", "suited_h suited_unknown_h too_cold_h too_warm_h too_humid_h too_windy_h rain_h polluted_h too_brief_h no_opening_h"},
	}
	sums := map[string]float64{}
	bad := 0
	for _, row := range rows {
		get := func(name string) float64 {
			i, ok := header[name]
			if !ok {
				t.Fatalf("hours.csv has no column %s", name)
			}
			return number(t, row[i])
		}
		for _, id := range identities {
			sum := 0.0
			for _, part := range strings.Fields(id.parts) {
				sum += get(part)
			}
			if math.Abs(sum-get(id.whole)) > 1e-4 && bad < 5 {
				bad++
				t.Errorf("%s %s: %s is %g, its parts sum to %g", get2(row, header, "zone"), get2(row, header, "start_local"), id.whole, get(id.whole), sum)
			}
		}
		for name := range header {
			if strings.HasSuffix(name, "_h") {
				sums[name] += get(name)
			}
		}
	}
	if len(rows) == 0 {
		t.Error("hours.csv has no rows")
	}
	return sums
}

func get2(row []string, header map[string]int, name string) string { return row[header[name]] }

// TestTorontoWindows audits real window contacts with measured weather
// (testdata/real/toronto-windows/SOURCE.md). The counts of rows are the
// source's: 113,424 contact rows of which 76,332 are marked missing.
func TestTorontoWindows(t *testing.T) {
	dir := auditTo(t, "../../testdata/real/toronto-windows/site.yaml", exitDone)
	sums := holdIdentities(t, dir)
	if sums["achieved_h"] == 0 || sums["suited_h"] == 0 || sums["unjudged_h"] == 0 {
		t.Errorf("achieved %.0f h of %.0f suited, %.0f unjudged: none should be zero", sums["achieved_h"], sums["suited_h"], sums["unjudged_h"])
	}
	if mech := sums["all_mech_h"] + sums["all_both_h"]; mech != 0 {
		t.Errorf("%g mechanical hours in homes without plant", mech)
	}
	header, rows := readTable(t, filepath.Join(dir, "readings.csv"))
	var read, missing float64
	suspicious := 0
	for _, row := range rows {
		if row[header["source"]] != "windows" {
			continue
		}
		read += number(t, row[header["rows_read"]])
		for _, part := range strings.Split(row[header["rejected_by_reason"]], ";") {
			if name, count, ok := strings.Cut(part, "="); ok && strings.TrimSpace(name) == "missing" {
				missing += number(t, strings.TrimSpace(count))
			}
		}
		if strings.Contains(row[header["checks"]], "suspiciously alike") {
			suspicious++
		}
	}
	if read != 113424 || missing != 76332 {
		t.Errorf("%.0f contact rows, %.0f missing; the source has 113424 and 76332", read, missing)
	}
	if suspicious < 5 {
		t.Errorf("%d contacts pointed out as suspiciously alike; seven share an open share of 0.890 to 0.900", suspicious)
	}
}

// TestBrains4Buildings audits a real room with several sources for one
// quantity and unknown windows (testdata/real/brains4buildings/SOURCE.md).
func TestBrains4Buildings(t *testing.T) {
	dir := auditTo(t, "../../testdata/real/brains4buildings/site.yaml", exitDone)
	sums := holdIdentities(t, dir)
	if sums["occupied_h"] == 0 || math.Abs(sums["unjudged_h"]-sums["occupied_h"]) > 1e-3 {
		t.Errorf("%g of %g occupied hours unjudged; without window contacts every hour is", sums["unjudged_h"], sums["occupied_h"])
	}
	if sums["people_h"] == 0 {
		t.Errorf("people %g person-hours", sums["people_h"])
	}
	// 24 days, one of them 25 hours long where the clock changed.
	if got := sums["all_unknown_h"] + sums["all_open_h"] + sums["all_mech_h"] + sums["all_both_h"] + sums["all_shut_h"]; math.Abs(got-(24*24+1)) > 1e-3 {
		t.Errorf("%g hours elapsed, want 577", got)
	}
}

// TestPersonHoursOU44: "In total occupants spent 5,713 hours in the monitored
// rooms" (Arendt et al., DATA'18, data descriptor page 2). The audit's
// people_h must sum to it. The set has no dates: each day gets one of its own
// here, with the right weekday.
func TestPersonHoursOU44(t *testing.T) {
	dir := t.TempDir()
	writeOU44(t, dir)
	out := auditTo(t, filepath.Join(dir, "site.yaml"), exitDone)
	raw, err := os.ReadFile(filepath.Join(out, "results.json"))
	if err != nil {
		t.Fatal(err)
	}
	var results struct {
		Zones []struct {
			PeopleH figure `json:"people_h"`
		}
	}
	if err := json.Unmarshal(raw, &results); err != nil {
		t.Fatal(err)
	}
	total := 0.0
	for _, z := range results.Zones {
		total += z.PeopleH.Value
	}
	if math.Abs(total-5713) > 1 {
		t.Errorf("people_h sums to %.2f person-hours, published 5,713", total)
	}
}

// writeOU44 turns the archive into a site: one wide file of the counts and one
// of the CO2, each anonymised day on a date with its weekday.
func writeOU44(t *testing.T, dir string) {
	archive, err := zip.OpenReader("../../testdata/real/sdu-ou44/rooms.zip")
	if err != nil {
		t.Fatal(err)
	}
	defer archive.Close()
	dates := map[string]string{} // DayId -> date
	taken := map[string]bool{}
	var points strings.Builder
	points.WriteString("source,column,belongs_to,quantity,unit,logging,stamp,hold,open_value,values,placement,share,note\n")
	for _, f := range archive.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(r).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		kind, room := f.Name[:3], strings.TrimSuffix(f.Name[len(f.Name)-5:], ".csv")
		var b strings.Builder
		fmt.Fprintln(&b, "time,value")
		for _, row := range rows[1:] {
			if dates[row[0]] == "" {
				dates[row[0]] = freeDate(t, row[2], taken)
			}
			fmt.Fprintf(&b, "%s %s,%s\n", dates[row[0]], row[1], row[4])
		}
		if err := os.WriteFile(filepath.Join(dir, f.Name), []byte(b.String()), 0o644); err != nil {
			t.Fatal(err)
		}
		quantity := map[string]string{"occ": "people", "co2": "co2", "vav": "zone_damper"}[kind]
		fmt.Fprintf(&points, "%s,value,R%s,%s,,sampled,start,1m,,,,,\n", f.Name, room, quantity)
	}
	site := `site: {name: Four rooms in Odense (open data with dates of our own), time_zone: UTC, latitude: 55.4, longitude: 10.4}
occupancy: {source: presence}
zones:
  - {id: R1, area_m2: 139, people: 84, openings: none}
  - {id: R2, area_m2: 125, people: 32, openings: none}
  - {id: R3, area_m2: 125, people: 32, openings: none}
  - {id: R4, area_m2: 139, people: 84, openings: none}
logs:
  - {name: rooms, path: "*_data_room_*.csv", layout: wide, time_column: time, date_order: ymd, clock: utc}
points: points.csv
`
	for name, text := range map[string]string{"site.yaml": site, "points.csv": points.String()} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// freeDate returns the next unused date from 2017-03-20, a Monday, with the
// weekday (0 = Monday).
func freeDate(t *testing.T, weekday string, taken map[string]bool) string {
	t.Helper()
	day, err := strconv.Atoi(weekday)
	if err != nil {
		t.Fatal(err)
	}
	for week := 0; ; week++ {
		date := time.Date(2017, 3, 20+day+7*week, 0, 0, 0, 0, time.UTC).Format("2006-01-02")
		if !taken[date] {
			taken[date] = true
			return date
		}
	}
}

// demoFacts reads from the demo's site file what the classification of the
// truth needs.
func demoFacts(t *testing.T, dir string) map[string]zoneFacts {
	t.Helper()
	loaded, err := configs.Load(filepath.Join(dir, "site.yaml"), func(string) string { return "" })
	if err != nil {
		t.Fatal(err)
	}
	facts := map[string]zoneFacts{}
	for _, z := range loaded.Site.Zones {
		f := zoneFacts{opens: !z.Openings.None(), peopleOpen: !z.Openings.None() && z.Windows != "automatic"}
		if z.FanSpeedMS >= 0.9 { // Table 5-13 of ASHRAE 55: 0.9 m/s gives 1.8 K
			f.fanK = 1.8
		}
		facts[z.ID] = f
	}
	return facts
}
