package guess_test

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
)

// answer is what a column is: the quantity and the owner, or open where nobody
// could tell or there is no quantity for it.
type answer struct {
	source, column string // source empty: any
	quantities     []string
	owner          string // a label of the answers' own; the guesser's ids must fall into the same groups
	unit           string
}

// series is one column of an export.
type series struct {
	name, kind string
	unit       string // as written, empty when none
	values     []float64
	answer     answer
	zone       int // -1 for unit and weather
}

// write writes a habit's exports into dir and returns the answers.
func (h habit) write(t *testing.T, dir string, seed uint64) []answer {
	from := time.Date(2025, 3, 24, 0, 0, 0, 0, time.UTC)
	s := newSim(seed, h.zones, from)
	var all []series
	unitWords := map[string]string{"degC": "°C", "%": "%", "ppm": "ppm", "m/s": "m/s", "deg": "°", "mm/h": "mm/h", "W/m2": "W/m²", "kW": "kW", "m3/h": "m3/h"}
	add := func(name, kind, owner string, zone int, open bool, values []float64) {
		k := kinds[kind]
		a := answer{quantities: []string{string(k.q)}, owner: owner, unit: k.unit}
		unit := unitWords[k.unit]
		if open {
			a = answer{quantities: []string{"open"}}
			unit = ""
		}
		if h.degF && k.unit == "degC" && !open {
			a.unit, unit = "degF", "°F"
			f := make([]float64, len(values))
			for i, v := range values {
				f[i] = math.Round((v*1.8+32)*10) / 10
			}
			values = f
		}
		if h.fraction && kind == "rh" {
			a.unit, unit = "fraction", ""
			f := make([]float64, len(values))
			for i, v := range values {
				f[i] = math.Round(v) / 100
			}
			values = f
		}
		if kind == "sflow" || kind == "flow" { // the unit stands in the name or nowhere
			a.unit = ""
		}
		if kind == "rain" { // without a unit, rain per hour and per interval cannot be told apart
			a.unit = ""
		}
		if h.unitForm != "" && unit != "" {
			name += fmt.Sprintf(h.unitForm, unit)
		}
		a.column = name
		all = append(all, series{name, kind, unit, values, a, zone})
	}
	sorted := func(m map[string]string) []string {
		var out []string
		for k := range m {
			out = append(out, k)
		}
		sort.Strings(out)
		return out
	}
	fill := func(tmpl string, z int) string {
		floor, room := 1+z/2, 1+z%2
		return strings.NewReplacer("{f}", strconv.Itoa(floor), "{rr}", fmt.Sprintf("%02d", room), "{r}", strconv.Itoa(room), "{u}", "1", "{wing}", []string{"north", "south"}[z%2]).Replace(tmpl)
	}
	for z := range h.zones {
		for _, k := range sorted(h.zone) {
			values, spoilt := s.zones[z][k], false
			switch {
			case k == h.dead && z == 0:
				values, spoilt = make([]float64, len(values)), true
			case k == h.liar:
				values, spoilt = append([]float64(nil), s.zones[z]["co2"]...), true
			}
			add(fill(h.zone[k], z), k, fmt.Sprintf("zone%d", z), z, false, values)
			if spoilt {
				all[len(all)-1].answer.quantities = []string{"open"}
			}
		}
		for _, k := range sorted(h.open) {
			if v, ok := s.zones[z][k]; ok {
				add(fill(h.open[k], z), k, "", z, true, v)
			}
		}
	}
	for _, k := range sorted(h.unit) {
		add(fill(h.unit[k], 0), k, "unit", -1, false, s.unit[k])
	}
	for _, k := range sorted(h.open) {
		if v, ok := s.unit[k]; ok {
			add(fill(h.open[k], 0), k, "", -1, true, v)
		}
		if v, ok := s.out[k]; ok {
			add(fill(h.open[k], 0), k, "", -1, true, v)
		}
	}
	for _, k := range sorted(h.weather) {
		add(h.weather[k], k, "site", -1, false, s.out[k])
	}
	h.export(t, dir, s, all)
	var out []answer
	for _, x := range all {
		a := x.answer
		a.column = strings.ReplaceAll(a.column, "|", "/")
		if h.files == "per room" {
			a.source = h.roomFile(x.zone)
		}
		out = append(out, a)
	}
	return out
}

func (h habit) roomFile(z int) string {
	if h.owners != "" {
		return fmt.Sprintf(h.owners, z+1)
	}
	return fmt.Sprintf("logger room %d0%d", 1+z/2, 1+z%2)
}

// export writes the series in the habit's layout.
func (h habit) export(t *testing.T, dir string, s *sim, all []series) {
	write := func(name string, text string) {
		raw := []byte(text)
		switch h.charset {
		case "bom":
			raw = append([]byte("\xef\xbb\xbf"), raw...)
		case "windows-1252":
			b, err := charmap.Windows1252.NewEncoder().Bytes(raw)
			if err != nil {
				t.Fatal(err)
			}
			raw = b
		case "utf-16":
			b, err := unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewEncoder().Bytes(raw)
			if err != nil {
				t.Fatal(err)
			}
			raw = b
		}
		if err := os.WriteFile(filepath.Join(dir, name), raw, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	switch h.layout {
	case "long":
		var b strings.Builder
		names := strings.Split(strings.ReplaceAll(h.key, ",", h.sep), "|")
		fmt.Fprintln(&b, strings.Join(append([]string{h.header}, names...), h.sep))
		for i := range s.at {
			for k := range all {
				x := &all[k]
				if h.words[x.kind] != nil && i > 0 && x.values[i] == x.values[i-1] {
					continue // states on change
				}
				cells := []string{h.when(s.at[i]), strings.ReplaceAll(x.name, "|", h.sep), h.cell(x, i)}
				if len(names) > 2 {
					cells = append(cells, x.unit)
				}
				fmt.Fprintln(&b, strings.Join(cells, h.sep))
			}
		}
		write("trend.csv", b.String())
	case "per_point":
		for k := range all {
			var b strings.Builder
			if h.header != "" {
				fmt.Fprintln(&b, h.header+h.sep+h.key)
			}
			for i := range s.at {
				fmt.Fprintln(&b, h.when(s.at[i])+h.sep+h.cell(&all[k], i))
			}
			write(all[k].name+".csv", b.String())
		}
	case "sheet":
		h.workbook(t, dir, s, all)
	default:
		groups := map[string][]*series{}
		for k := range all {
			name := "export.csv"
			switch {
			case h.files == "per room" && all[k].zone >= 0:
				name = h.roomFile(all[k].zone) + ".csv"
			case h.files == "weather apart" && all[k].answer.owner == "site":
				name = "weather station.csv"
			}
			groups[name] = append(groups[name], &all[k])
		}
		for name, list := range groups {
			write(name, h.wide(s, list))
		}
	}
}

// wide writes one row per instant.
func (h habit) wide(s *sim, list []*series) string {
	var b strings.Builder
	for i := range h.title {
		fmt.Fprintf(&b, "Report line %d\r\n", i+1)
	}
	head := strings.Split(h.header, "|")
	for _, x := range list {
		head = append(head, x.name)
	}
	b.WriteString(strings.Join(head, h.sep) + "\r\n")
	if h.unitRow {
		row := make([]string, len(strings.Split(h.header, "|")))
		for _, x := range list {
			row = append(row, x.unit)
		}
		b.WriteString(strings.Join(row, h.sep) + "\r\n")
	}
	for i := range s.at {
		if h.gaps && i%700 > 640 {
			continue
		}
		row := strings.Split(h.when(s.at[i]), "|")
		for _, x := range list {
			row = append(row, h.cell(x, i))
		}
		b.WriteString(strings.Join(row, h.sep) + "\r\n")
	}
	return b.String()
}

func (h habit) when(at time.Time) string {
	if h.dates == "unix" {
		return strconv.FormatInt(at.Unix(), 10)
	}
	return strings.Replace(at.Format(h.dates), "@", "+02:00", 1)
}

func (h habit) cell(x *series, i int) string {
	if w := h.words[x.kind]; w != nil {
		return w[min(len(w)-1, int(x.values[i]))]
	}
	if h.missing != "" && (i+len(x.name))%37 == 5 {
		return h.missing
	}
	text := strconv.FormatFloat(x.values[i], 'f', -1, 64)
	if h.comma {
		text = strings.Replace(text, ".", ",", 1)
	}
	return text
}

// workbook writes a sheet per floor with dates as numbers.
func (h habit) workbook(t *testing.T, dir string, s *sim, all []series) {
	book := excelize.NewFile()
	defer book.Close()
	sheets := map[string][]*series{}
	var names []string
	for k := range all {
		name := fmt.Sprintf("Floor %d", 1+all[k].zone/2)
		if sheets[name] == nil {
			names = append(names, name)
		}
		sheets[name] = append(sheets[name], &all[k])
	}
	for _, n := range names {
		if _, err := book.NewSheet(n); err != nil {
			t.Fatal(err)
		}
		w, err := book.NewStreamWriter(n)
		if err != nil {
			t.Fatal(err)
		}
		row := []any{h.header}
		units := []any{""}
		for _, x := range sheets[n] {
			row, units = append(row, x.name), append(units, x.unit)
		}
		line := 1 + h.title
		for i := range h.title {
			if err := w.SetRow(fmt.Sprintf("A%d", i+1), []any{"Report of the building"}); err != nil {
				t.Fatal(err)
			}
		}
		put := func(r []any) {
			at, _ := excelize.CoordinatesToCellName(1, line)
			if err := w.SetRow(at, r); err != nil {
				t.Fatal(err)
			}
			line++
		}
		put(row)
		if h.unitRow {
			put(units)
		}
		for i := range s.at {
			cells := []any{float64(s.at[i].Unix())/86400 + 25569}
			for _, x := range sheets[n] {
				cells = append(cells, x.values[i])
			}
			put(cells)
		}
		if err := w.Flush(); err != nil {
			t.Fatal(err)
		}
	}
	if err := book.DeleteSheet("Sheet1"); err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	if _, err := book.WriteTo(&b); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(filepath.Join(dir, "trend.xlsx"), b.Bytes(), 0o644); err != nil {
		t.Fatal(err)
	}
}
