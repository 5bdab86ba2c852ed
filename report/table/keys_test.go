package table

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"os"
	"regexp"
	"strings"
	"testing"

	"github.com/parquet-go/parquet-go"
)

// TestKeys: the dictionary knows the keys that results.json has, and what they
// mean.
func TestKeys(t *testing.T) {
	keys, err := Keys()
	if err != nil {
		t.Fatal(err)
	}
	known, worded := map[string]bool{}, 0
	for _, k := range keys {
		known[k.Path] = true
		if k.Words != "" {
			worded++
		}
	}
	// Others may come and be worded later; most must be.
	if len(keys) < 400 || worded < len(keys)*9/10 {
		t.Errorf("%d keys, %d of them with a meaning", len(keys), worded)
	}
	if testing.Verbose() {
		for _, k := range keys {
			if k.Words == "" {
				t.Logf("no meaning: %s", k.Path)
			}
		}
	}
	var got any
	if err := json.Unmarshal(written(t, WriteJSON, sampleInput(t)), &got); err != nil {
		t.Fatal(err)
	}
	var missing []string
	var walk func(v any, path string)
	walk = func(v any, path string) {
		switch v := v.(type) {
		case map[string]any:
			if _, ok := v["low"]; ok && len(v) <= 4 {
				return
			}
			for k, x := range v {
				p := strings.TrimPrefix(path+"."+k, ".")
				if !known[p] && !open(keys, path) {
					missing = append(missing, p)
					continue
				}
				walk(x, p)
			}
		case []any:
			for _, x := range v {
				walk(x, path+"[]")
			}
		}
	}
	walk(got, "")
	if len(missing) > 0 {
		t.Errorf("keys of results.json without a row: %.20q", missing)
	}
	for path, unit := range map[string]string{"building.achieved_share": "1", "zones[].occupied_h": "h", "zones[].comfort[].over_kh": "K h", "episodes[].outdoor_temp_c": "°C"} {
		found := false
		for _, k := range keys {
			found = found || k.Path == path && k.Unit == unit
		}
		if !found {
			t.Errorf("%s in %q is not in the dictionary", path, unit)
		}
	}
}

// open reports whether any name may stand below a path.
func open(keys []Key, path string) bool {
	for _, k := range keys {
		if k.Path == path {
			return !strings.HasPrefix(k.Type, "array")
		}
	}
	return false
}

// TestDictionaryTypes: a column is text, time or number in the dictionary as it
// is in the files.
func TestDictionaryTypes(t *testing.T) {
	in := sampleInput(t)
	raw := written(t, WriteHoursParquet, in)
	file, err := parquet.OpenFile(bytes.NewReader(raw), int64(len(raw)))
	if err != nil {
		t.Fatal(err)
	}
	kinds := map[string]string{}
	for _, f := range Dictionary() {
		if f.Table == "hours" {
			kinds[f.Column] = f.kind()
		}
	}
	for _, f := range file.Schema().Fields() {
		want := map[parquet.Kind][]string{parquet.Double: {"number"}, parquet.ByteArray: {"text", "date", "time"}, parquet.Int64: {"time"}}[f.Type().Kind()]
		if !strings.Contains(strings.Join(want, " "), kinds[f.Name()]) || kinds[f.Name()] == "" {
			t.Errorf("%s is %q in the dictionary, %v in the file", f.Name(), kinds[f.Name()], f.Type())
		}
	}
}

// TestDictionaryFile: the file is a table, every row says where it belongs, and
// the columns of all tables are in it.
func TestDictionaryFile(t *testing.T) {
	var b bytes.Buffer
	if err := WriteDictionary(&b); err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(strings.NewReader(strings.TrimPrefix(b.String(), bom))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	seen := map[string]bool{}
	for _, r := range rows[1:] {
		if r[0] == "" || r[1] == "" || r[2] == "" && r[0] != "results.json" {
			t.Errorf("a row without a place: %q", r)
		}
		if seen[r[0]+" "+r[1]] {
			t.Errorf("%s of %s stands twice", r[1], r[0])
		}
		seen[r[0]+" "+r[1]] = true
	}
	in := sampleInput(t)
	for name, head := range map[string]string{"hours.csv, hours.parquet": first(written(t, WriteHoursCSV, in)), "episodes.csv": first(written(t, WriteEpisodesCSV, in)), "readings.csv": first(written(t, WriteReadingsCSV, in))} {
		for _, column := range strings.Split(head, ",") {
			if !seen[name+" "+column] {
				t.Errorf("%s of %s is not in the dictionary", column, name)
			}
		}
	}
	if path := os.Getenv("DICTIONARY_SAMPLE"); path != "" {
		os.WriteFile(path, b.Bytes(), 0o644)
	}
}

func first(raw []byte) string {
	return regexp.MustCompile(`^(?:\x{feff})?([^\r\n]*)`).FindStringSubmatch(string(raw))[1]
}
