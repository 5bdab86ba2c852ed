// Package columnartest writes Parquet files for tests.
package columnartest

import (
	"bytes"
	"fmt"
	"time"

	"github.com/parquet-go/parquet-go"
)

// Column is one column: its type, and values in order; nil is a null.
type Column struct {
	Name   string
	Node   parquet.Node
	Values []any
}

// Times makes the values of a timestamp column.
func Times(ts []time.Time, perS int64) []any {
	out := make([]any, len(ts))
	for i, t := range ts {
		out[i] = t.Unix()*perS + int64(t.Nanosecond())*perS/1e9
	}
	return out
}

// Write makes a file of the columns in row groups of a size.
func Write(cols []Column, group int, options ...parquet.WriterOption) ([]byte, error) {
	fields := parquet.Group{}
	for _, c := range cols {
		fields[c.Name] = c.Node
	}
	schema := parquet.NewSchema("log", fields)
	place := map[string]int{}
	for i, p := range schema.Columns() {
		place[p[0]] = i
	}
	var out bytes.Buffer
	w := parquet.NewWriter(&out, append(append([]parquet.WriterOption{schema}, options...), parquet.MaxRowsPerRowGroup(int64(group)))...)
	for n := range cols[0].Values {
		row := make(parquet.Row, len(cols))
		for _, c := range cols {
			at := place[c.Name]
			v := c.Values[n]
			defined := 0
			if c.Node.Optional() && v != nil {
				defined = 1
			}
			if v == nil && !c.Node.Optional() {
				return nil, fmt.Errorf("column %q: a null where none may stand", c.Name)
			}
			row[at] = parquet.ValueOf(v).Level(0, defined, at)
		}
		if _, err := w.WriteRows([]parquet.Row{row}); err != nil {
			return nil, err
		}
	}
	if err := w.Close(); err != nil {
		return nil, err
	}
	return out.Bytes(), nil
}
