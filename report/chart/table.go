package chart

import (
	"fmt"
	"reflect"
	"strconv"
	"strings"
	"time"
)

// Table lays the data of a figure out as one table for other programs: a row
// for every innermost list entry, with the fields above it repeated and the
// list's name in the column "part". Captions and axis titles stay out.
func Table(data any) (header []string, rows [][]string) {
	t := &flat{column: map[string]int{"part": 0}, header: []string{"part"}}
	t.walk("", reflect.ValueOf(data), nil)
	for i := range t.rows {
		for len(t.rows[i]) < len(t.header) {
			t.rows[i] = append(t.rows[i], "")
		}
	}
	return t.header, t.rows
}

type flat struct {
	header []string
	column map[string]int
	rows   [][]string
}

type field struct{ name, value string }

// leaf reports whether a value is one cell.
func leaf(v reflect.Value) (string, bool) {
	switch x := v.Interface().(type) {
	case time.Time:
		return x.Format("2006-01-02T15:04:05"), true
	case time.Duration:
		return strconv.FormatFloat(x.Seconds(), 'f', -1, 64), true
	case Class:
		return x.Label(), true
	case fmt.Stringer:
		return x.String(), true
	}
	switch v.Kind() {
	case reflect.Float64, reflect.Float32:
		if f := v.Float(); f != f {
			return "", true
		}
		return strconv.FormatFloat(v.Float(), 'g', 9, 64), true
	case reflect.Int, reflect.Int8, reflect.Int16, reflect.Int32, reflect.Int64:
		return strconv.FormatInt(v.Int(), 10), true
	case reflect.Uint, reflect.Uint8, reflect.Uint16, reflect.Uint32, reflect.Uint64:
		return strconv.FormatUint(v.Uint(), 10), true
	case reflect.String:
		return v.String(), true
	case reflect.Bool:
		return strconv.FormatBool(v.Bool()), true
	}
	return "", false
}

func (t *flat) walk(part string, v reflect.Value, above []field) {
	if v.Kind() == reflect.Struct {
		own := above
		type list struct {
			name  string
			value reflect.Value
		}
		var lists []list
		for i := range v.NumField() {
			f := v.Type().Field(i)
			if !f.IsExported() || f.Type == reflect.TypeFor[Caption]() || strings.HasSuffix(f.Name, "Title") {
				continue
			}
			name := snake(f.Name)
			if s, ok := leaf(v.Field(i)); ok {
				own = append(own[:len(own):len(own)], field{join(part, name), s})
				continue
			}
			switch v.Field(i).Kind() {
			case reflect.Struct: // a value with its bounds, a point
				own = append(own[:len(own):len(own)], t.inner(join(part, name), v.Field(i))...)
			case reflect.Slice, reflect.Array, reflect.Map:
				lists = append(lists, list{name, v.Field(i)})
			}
		}
		if len(lists) == 0 {
			t.row(part, own)
			return
		}
		for _, l := range lists {
			t.list(join(part, l.name), l.value, own)
		}
		return
	}
	t.list(part, v, above)
}

// inner gives the cells of a struct within a struct.
func (t *flat) inner(part string, v reflect.Value) (out []field) {
	for i := range v.NumField() {
		if f := v.Type().Field(i); f.IsExported() {
			if s, ok := leaf(v.Field(i)); ok {
				out = append(out, field{join(part, snake(f.Name)), s})
			}
		}
	}
	return out
}

func (t *flat) list(part string, v reflect.Value, above []field) {
	if v.Kind() == reflect.Map {
		return // figures are drawn from ordered data
	}
	for i := range v.Len() {
		at := append(above[:len(above):len(above)], field{join(part, "no"), strconv.Itoa(i + 1)})
		e := v.Index(i)
		if s, ok := leaf(e); ok {
			t.row(part, append(at, field{join(part, "value"), s}))
			continue
		}
		t.walk(part, e, at)
	}
}

func (t *flat) row(part string, fields []field) {
	row := make([]string, len(t.header))
	row[0] = part
	for _, f := range fields {
		k, ok := t.column[f.name]
		if !ok {
			k = len(t.header)
			t.column[f.name] = k
			t.header = append(t.header, f.name)
		}
		for len(row) <= k {
			row = append(row, "")
		}
		row[k] = f.value
	}
	t.rows = append(t.rows, row)
}

func join(part, name string) string {
	if part == "" {
		return name
	}
	return part + "." + name
}

// snake writes a Go name with low lines: CO2PPM is co2ppm, TooWarm too_warm.
func snake(s string) string {
	var b strings.Builder
	for i, r := range s {
		upper := r >= 'A' && r <= 'Z'
		if upper && i > 0 && (s[i-1] < 'A' || s[i-1] > 'Z') {
			b.WriteByte('_')
		}
		if upper {
			r += 'a' - 'A'
		}
		b.WriteRune(r)
	}
	return b.String()
}
