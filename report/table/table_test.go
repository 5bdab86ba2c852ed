package table

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	"github.com/parquet-go/parquet-go"
	"github.com/santhosh-tekuri/jsonschema/v6"

	"sashlog/report/internal/sample"
	"sashlog/report/provenance"
)

func sampleInput(t *testing.T) Input {
	t.Helper()
	s := sample.Make(sample.Options{Days: 9, Zones: 4})
	return Input{Site: s.Site, Criteria: s.Criteria, Grid: s.Grid, Ledger: s.Ledger, Results: s.Results,
		Provenance: provenance.Provenance{Version: "0", Generated: "2031-01-01T00:00:00Z", Command: "sashlog audit site.yaml", CriteriaHash: "0"}}
}

func written(t *testing.T, write func(io.Writer, Input) error, in Input) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := write(&b, in); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func rowsOf(t *testing.T, raw []byte) (head []string, rows [][]string) {
	t.Helper()
	if !bytes.HasPrefix(raw, []byte(bom)) {
		t.Error("no byte order mark: spreadsheets would misread the degree sign")
	}
	all, err := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(raw, []byte(bom)))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return all[0], all[1:]
}

// contract are the columns of hours.* in the order other programs rely on.
const contract = `start_utc, start_local, local_date, zone, people, occupied_h, occupied_unknown_h,
open_h, mech_h, both_h, shut_h, unknown_h, both_cool_h, both_heat_h, both_vent_h, both_untyped_h, open_share,
suited_h, suited_fan_h, suited_raw_h, suited_unknown_h, too_cold_h, too_warm_h, too_humid_h, too_windy_h, rain_h, polluted_h, too_brief_h,
achieved_h, achieved_ok_h, achieved_warm_h, achieved_cool_h, achieved_stale_h, achieved_unassessed_h,
missed_h, missed_cool_h, missed_vent_h, missed_both_h, missed_shut_h, missed_untyped_h,
not_needed_h, ill_timed_h, closed_unsuited_h, closed_unsuited_stale_h, no_opening_h, unjudged_h, unjudged_suited_h,
all_open_h, all_mech_h, all_both_h, all_shut_h, all_unknown_h, purge_h, purge_available_h,
temp_c, rh_pct, co2_ppm, outdoor_temp_c, outdoor_rh_pct, running_mean_en_c, running_mean_ashrae_c,
comfort_model, comfort_low_c, comfort_high_c, over_h, under_h, over_kh, under_kh, people_h, person_h, person_over_h, person_under_h,
co2_limit_ppm, co2_over_h, coverage`

func TestHoursColumns(t *testing.T) {
	head, rows := rowsOf(t, written(t, WriteHoursCSV, sampleInput(t)))
	want := strings.FieldsFunc(contract, func(r rune) bool { return r == ',' || r == ' ' || r == '\n' })
	if got := head[:len(want)]; strings.Join(got, " ") != strings.Join(want, " ") {
		t.Errorf("columns\n%v\nwant\n%v", got, want)
	}
	if len(rows) == 0 {
		t.Error("no rows")
	}
	known := map[string]bool{}
	for _, f := range Dictionary() {
		if f.Table == "hours" {
			known[f.Column] = true
			if f.Words == "" {
				t.Errorf("dictionary: %s has no words", f.Column)
			}
		}
	}
	for _, name := range head {
		if !known[name] {
			t.Errorf("column %s is not in the dictionary", name)
		}
	}
}

// TestParquetEqualsCSV reads hours.parquet back with the library's reader and
// compares every number with hours.csv.
func TestParquetEqualsCSV(t *testing.T) {
	in := sampleInput(t)
	head, rows := rowsOf(t, written(t, WriteHoursCSV, in))
	raw := written(t, WriteHoursParquet, in)
	file, err := parquet.OpenFile(bytes.NewReader(raw), int64(len(raw)))
	if err != nil {
		t.Fatal(err)
	}
	place := map[string]int{}
	for i, path := range file.Schema().Columns() {
		place[path[0]] = i
	}
	if len(place) != len(head) {
		t.Errorf("%d columns in parquet, %d in CSV", len(place), len(head))
	}
	r := parquet.NewGenericReader[any](file)
	defer r.Close()
	buf := make([]parquet.Row, 1)
	compared, line := 0, 0
	for ; ; line++ {
		n, err := r.ReadRows(buf)
		if n == 0 {
			if err != io.EOF && err != nil {
				t.Fatal(err)
			}
			break
		}
		for i, name := range head {
			v := buf[0][place[name]]
			cell := rows[line][i]
			switch {
			case name == "start_utc" || cell == "" && v.IsNull():
			case v.Kind() == parquet.ByteArray:
				if v.String() != cell {
					t.Fatalf("row %d %s: %q in parquet, %q in CSV", line, name, v.String(), cell)
				}
			default:
				want, err := strconv.ParseFloat(cell, 64)
				if err != nil || v.IsNull() {
					t.Fatalf("row %d %s: CSV %q, parquet %v", line, name, cell, v)
				}
				if math.Abs(v.Double()-want) > 0.051 || (strings.HasSuffix(name, "_h") && math.Abs(v.Double()-want) > 1e-5) {
					t.Fatalf("row %d %s: %g in parquet, %s in CSV", line, name, v.Double(), cell)
				}
				compared++
			}
		}
	}
	if line != len(rows) || compared == 0 {
		t.Errorf("%d rows in parquet, %d in CSV, %d numbers compared", line, len(rows), compared)
	}
}

// TestSchema: results.json is what results.schema.json says, and the schema
// notices when something is missing.
func TestSchema(t *testing.T) {
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(Schema()))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource("results.schema.json", doc); err != nil {
		t.Fatal(err)
	}
	s, err := c.Compile("results.schema.json")
	if err != nil {
		t.Fatal(err)
	}
	raw := written(t, WriteJSON, sampleInput(t))
	results, err := jsonschema.UnmarshalJSON(bytes.NewReader(raw))
	if err != nil {
		t.Fatal(err)
	}
	if err := s.Validate(results); err != nil {
		t.Errorf("results.json does not meet its schema: %v", err)
	}
	top := results.(map[string]any)
	for _, key := range strings.Split("tool site period inputs criteria answerable building zones quality episodes fresh_air potential wind changeover votes energy out_of_hours uncertainty findings", " ") {
		value, there := top[key]
		if !there {
			t.Errorf("results.json has no %s", key)
			continue
		}
		delete(top, key)
		if s.Validate(results) == nil {
			t.Errorf("the schema does not miss %s", key)
		}
		top[key] = value
	}
	zone := top["zones"].([]any)[0].(map[string]any)
	delete(zone, "achieved_share")
	if s.Validate(results) == nil {
		t.Error("the schema does not miss a zone's achieved_share")
	}
}

func TestDeterministic(t *testing.T) {
	for name, write := range map[string]func(io.Writer, Input) error{"hours.csv": WriteHoursCSV, "hours.parquet": WriteHoursParquet,
		"comfort.parquet": WriteComfortParquet, "episodes.csv": WriteEpisodesCSV, "readings.csv": WriteReadingsCSV, "results.json": WriteJSON} {
		if !bytes.Equal(written(t, write, sampleInput(t)), written(t, write, sampleInput(t))) {
			t.Errorf("%s differs from one writing to the next", name)
		}
	}
}

// TestProtectedRooms: a room for one to three people stands by day, without
// counts and CO2; its hours of the day still add up.
func TestProtectedRooms(t *testing.T) {
	in := sampleInput(t)
	site := *in.Site
	site.Zones = append(site.Zones[:0:0], site.Zones...)
	site.Zones[0].People = 2
	site.Privacy.Internal = false
	in.Site = &site
	id := site.Zones[0].ID
	head, rows := rowsOf(t, written(t, WriteHoursCSV, in))
	at := map[string]int{}
	for i, name := range head {
		at[name] = i
	}
	days, occupied, classes := map[string]int{}, 0.0, 0.0
	for _, row := range rows {
		if row[at["zone"]] != id {
			continue
		}
		days[row[at["local_date"]]]++
		for _, name := range []string{"people_h", "co2_ppm", "open_share"} {
			if row[at[name]] != "" {
				t.Fatalf("%s of a protected room is shown: %q", name, row[at[name]])
			}
		}
		number := func(name string) float64 { v, _ := strconv.ParseFloat(row[at[name]], 64); return v }
		occupied += number("occupied_h")
		for _, name := range []string{"achieved_h", "missed_h", "not_needed_h", "ill_timed_h", "closed_unsuited_h", "no_opening_h", "unjudged_h"} {
			classes += number(name)
		}
	}
	for day, n := range days {
		if n != 1 {
			t.Errorf("%d rows on %s, want one", n, day)
		}
	}
	if occupied == 0 || math.Abs(occupied-classes) > 1e-3 {
		t.Errorf("%g occupied hours, classes sum to %g", occupied, classes)
	}
	_, episodes := rowsOf(t, written(t, WriteEpisodesCSV, in))
	for _, row := range episodes {
		if row[0] == id {
			t.Fatal("an episode of a protected room is listed")
		}
	}
}

func TestHarmless(t *testing.T) {
	for in, want := range map[string]string{
		"=1+1": "'=1+1", "+41": "'+41", "-x": "'-x", "@a": "'@a", "  =x": "'  =x", "\t=x": "' =x", "a\nb": "a b", "x\u202ey": "x y",
		"L1.02": "L1.02", "＝1": "'＝1", "": "",
	} {
		if got := Harmless(in); got != want {
			t.Errorf("%q: %q, want %q", in, got, want)
		}
	}
	for s, want := range map[uint32]string{0: "0.00000", 300: "0.08333", 3600: "1.00000", 3599: "0.99972", 1: "0.00028", 86400: "24.00000"} {
		if got := string(appendHours(nil, s)); got != want {
			t.Errorf("%d s: %s h, want %s", s, got, want)
		}
	}
	if got, _ := json.Marshal(num(math.NaN())); string(got) != "null" {
		t.Errorf("NaN is written as %s", got)
	}
}
