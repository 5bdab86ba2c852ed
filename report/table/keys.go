package table

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"slices"
	"strings"
)

// Key is one key of results.json: its place, with [] for each of a list and *
// for any name, and what stands there.
type Key struct{ Path, Type, Unit, Words string }

// units are told by the end of a name; the longest that fits counts.
var units = [][2]string{{"_per_1000_person_h", "1 per 1000 person h"}, {"_w_m2_per_air_change", "W/m2 per 1/h"}, {"_kh_per_night", "K h"}, {"_l_s_person", "L/s per person"}, {"_w_m2_k", "W/(m2 K)"},
	{"_slope_per_m_s", "1/h per m/s"}, {"_percent_h", "% h"}, {"_w_m2", "W/m2"}, {"_per_h", "1/h"}, {"_l_s", "L/s"}, {"_m_s", "m/s"}, {"_percent", "%"}, {"_share", "1"}, {"_kwh", "kWh"}, {"_ppm", "ppm"}, {"_deg", "°"}, {"_min", "min"},
	{"_kg", "kg"}, {"_m2", "m2"}, {"_kh", "K h"}, {"_h", "h"}, {"_c", "°C"}, {"_k", "K"}, {"_m", "m"}, {"_s", "s"}}

func unitOf(name string) string {
	if strings.HasPrefix(name, "slope_per") {
		return map[string]string{"slope_per_m_s": "1/h per m/s", "slope_per_k": "1/K"}[name]
	}
	for _, u := range units {
		if strings.HasSuffix(name, u[0]) {
			return u[1]
		}
	}
	return ""
}

// node is what is looked at in the schema.
type node struct {
	Ref         string           `json:"$ref"`
	Description string           `json:"description"`
	Type        any              `json:"type"`
	Properties  map[string]*node `json:"properties"`
	Items       *node            `json:"items"`
	AnyOf       []*node          `json:"anyOf"`
	Additional  json.RawMessage  `json:"additionalProperties"`
	Defs        map[string]*node `json:"$defs"`
}

// Keys describes every key of results.json, from its schema.
func Keys() ([]Key, error) {
	var root node
	if err := json.Unmarshal(schema, &root); err != nil {
		return nil, fmt.Errorf("table: schema: %w", err)
	}
	columns := map[string]string{}
	for _, f := range Dictionary() {
		if _, ok := columns[f.Column]; !ok {
			columns[f.Column] = f.Words
		}
	}
	w := walker{defs: root.Defs, columns: columns}
	w.walk(&root, "", "", "", 0)
	return w.keys, nil
}

type walker struct {
	defs    map[string]*node
	columns map[string]string
	keys    []Key
}

// deepest bounds the walk; a schema that refers to itself would never end.
const deepest = 12

// walk adds the keys below a node that stands at path under a name.
func (w *walker) walk(n *node, path, name, words string, depth int) {
	if n == nil || depth > deepest {
		return
	}
	if n.Description != "" {
		words = n.Description
	}
	kind := typeOf(n.Type)
	if ref := strings.TrimPrefix(n.Ref, "#/$defs/"); ref != n.Ref {
		if w.defs[ref] == nil {
			return
		}
		n = w.defs[ref]
		kind = typeOf(n.Type)
	}
	for _, alternative := range n.AnyOf { // null, or the thing itself
		if typeOf(alternative.Type) != "null" {
			w.walk(alternative, path, name, words, depth+1)
			return
		}
	}
	bounded := n.Properties["value"] != nil && n.Properties["low"] != nil && len(n.Properties) <= 4
	if bounded {
		kind = "figure: value, low, high"
	}
	if path != "" && name != "" {
		if words == "" {
			words = keyWords[name]
		}
		if words == "" {
			words = w.columns[name]
		}
		w.keys = append(w.keys, Key{path, kind, unitOf(name), words})
	}
	if bounded {
		return
	}
	names := make([]string, 0, len(n.Properties))
	for k := range n.Properties {
		names = append(names, k)
	}
	slices.Sort(names)
	for _, k := range names {
		w.walk(n.Properties[k], strings.TrimPrefix(path+"."+k, "."), k, "", depth+1)
	}
	if n.Items != nil {
		w.walk(n.Items, path+"[]", "", "", depth+1)
	}
	var additional node
	if json.Unmarshal(n.Additional, &additional) == nil && (additional.Type != nil || additional.Ref != "" || additional.AnyOf != nil) {
		w.walk(&additional, path+".*", "", "", depth+1)
	}
}

// typeOf names the types of a node without null.
func typeOf(v any) string {
	switch v := v.(type) {
	case string:
		return v
	case []any:
		var out []string
		for _, t := range v {
			if s, ok := t.(string); ok && s != "null" {
				out = append(out, s)
			}
		}
		return strings.Join(out, " or ")
	}
	return ""
}

// wordColumns are the columns of the tables that hold words; those ending _utc and
// _local hold times, all others numbers.
var wordColumns = map[string]bool{"zone": true, "comfort_model": true, "criterion": true, "model": true, "running": true, "cause": true, "contributing": true, "evidence": true, "source": true,
	"column": true, "point": true, "rejected_by_reason": true, "checks": true, "clock": true}

func (f Field) kind() string {
	switch {
	case f.Column == "local_date":
		return "date"
	case strings.HasSuffix(f.Column, "_utc") || strings.HasSuffix(f.Column, "_local"):
		return "time"
	case wordColumns[f.Column]:
		return "text"
	}
	return "number"
}

// files are the outputs a table of the dictionary stands in.
var files = map[string]string{"hours": "hours.csv, hours.parquet", "comfort": "comfort.parquet", "episodes": "episodes.csv", "readings": "readings.csv"}

// WriteDictionary writes what every column and key of the outputs means, as
// CSV: output, name, type, unit, meaning. An empty cell or null is unknown.
func WriteDictionary(w io.Writer) error {
	keys, err := Keys()
	if err != nil {
		return err
	}
	if _, err := io.WriteString(w, bom); err != nil {
		return err
	}
	out := csv.NewWriter(w)
	rows := [][]string{{"output", "name", "type", "unit", "meaning"}}
	for _, f := range Dictionary() {
		rows = append(rows, []string{files[f.Table], f.Column, f.kind(), f.Unit, f.Words})
	}
	for _, k := range keys {
		rows = append(rows, []string{"results.json", k.Path, k.Type, k.Unit, k.Words})
	}
	for _, r := range rows {
		for i := range r {
			r[i] = Harmless(r[i])
		}
	}
	return out.WriteAll(rows)
}
