// Package station reads hourly weather of a public station in fixed columns,
// the lite form of the Integrated Surface Database: year, month, day, hour in
// universal time, air temperature, dew point, sea level pressure, wind
// direction, wind speed, sky condition, rain of one hour and of six, whole
// numbers of tenths where said below, -9999 missing. Rows become the rows of a
// wide log with named columns, so that everything from there on is shared with
// package tabular.
package station

import (
	"bufio"
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

// column is one column of values: its name, unit, and by what whole numbers are
// divided. After "Federal Climate Complex Integrated Surface Data Lite", NOAA
// National Centers for Environmental Information, format document (read at
// second hand; scales agree with plausible weather of four stations).
type column struct {
	name, unit string
	tenths     bool
	rain       bool
}

// columns are those behind the four of the time.
var columns = []column{
	{name: "outdoor_temp", unit: "degC", tenths: true},
	{name: "outdoor_dew_point", unit: "degC", tenths: true},
	{name: "sea_level_pressure", unit: "hPa", tenths: true},
	{name: "wind_direction", unit: "deg"},
	{name: "wind_speed", unit: "m/s", tenths: true},
	{name: "sky_condition"},
	{name: "rain", unit: "mm", tenths: true, rain: true},
	{name: "rain_6h", unit: "mm", tenths: true, rain: true},
}

const (
	timeFields = 4
	fields     = 12
	missing    = -9999
	// A trace of rain, too little to measure, is written as -1. It is read as
	// half the least amount written; our assumption, so that it counts as rain.
	trace       = -1
	traceText   = "0.05"
	lineMost    = 4096
	headLines   = 1000
	recognising = 20
)

// Recognise reports whether a file holds hourly weather in fixed columns.
func Recognise(f *logfile.File) bool {
	if f.Kind != logfile.Text {
		return false
	}
	r, err := f.Open(false)
	if err != nil {
		return false
	}
	defer r.Close()
	head := make([]byte, 4096)
	n, err := io.ReadFull(r, head)
	return (err == nil || err == io.EOF || err == io.ErrUnexpectedEOF) && Is(head[:n])
}

// Is reports whether a file begins with hourly weather in fixed columns. The
// last line of head may be cut off.
func Is(head []byte) bool {
	s := bufio.NewScanner(bytes.NewReader(head))
	good := 0
	for n := 0; s.Scan() && n < recognising; n++ {
		if _, err := parse(s.Bytes(), nil); err != nil {
			// The cut-off last line does not speak against the others.
			return good >= 10
		}
		good++
	}
	return good > 0
}

// parse takes a line apart into cells, which it appends to: the time and the
// values as text.
func parse(line []byte, cells [][]byte) ([][]byte, error) {
	f := bytes.Fields(line)
	if len(f) != fields || bytes.ContainsAny(line, ",;\t|") {
		return nil, fmt.Errorf("%d fields, want %d set apart by spaces", len(f), fields)
	}
	var v [fields]int
	for i := range f {
		n, err := strconv.Atoi(string(f[i]))
		if err != nil {
			return nil, fmt.Errorf("%q is not a whole number", shorten(f[i]))
		}
		v[i] = n
	}
	for i, lim := range [timeFields][2]int{{1900, 2200}, {1, 12}, {1, 31}, {0, 23}} {
		if v[i] < lim[0] || v[i] > lim[1] {
			return nil, fmt.Errorf("%d is no %s", v[i], []string{"year", "month", "day", "hour"}[i])
		}
	}
	cells = append(cells, fmt.Appendf(nil, "%04d-%02d-%02dT%02d:00:00Z", v[0], v[1], v[2], v[3]))
	for i, c := range columns {
		n := v[timeFields+i]
		switch {
		case n == missing:
			cells = append(cells, nil)
		case c.rain && n == trace:
			cells = append(cells, []byte(traceText))
		case c.tenths:
			cells = append(cells, strconv.AppendFloat(nil, float64(n)/10, 'f', 1, 64))
		default:
			cells = append(cells, strconv.AppendInt(nil, int64(n), 10))
		}
	}
	return cells, nil
}

func shorten(b []byte) []byte { return b[:min(len(b), 20)] }

// File is one file as a source of readings.
type File struct {
	tabular.Looked
	file *logfile.File
}

// Names are the columns a points table may name.
func Names() []string {
	names := []string{"time"}
	for _, c := range columns {
		names = append(names, c.name)
	}
	return names
}

// Open looks at the head of a file.
func Open(s *site.Site, log *site.Log, f *logfile.File, _ []string) (*File, error) {
	w := &File{file: f}
	head := []tabular.HeadRow{{Line: 1, Cells: Names()}}
	err := w.rows(context.Background(), func(line int64, cells [][]byte) bool {
		row := tabular.HeadRow{Line: line}
		for _, c := range cells {
			row.Cells = append(row.Cells, string(c))
		}
		head = append(head, row)
		return len(head) <= headLines
	})
	if err != nil {
		return nil, err
	}
	if len(head) == 1 {
		return nil, logfile.Failure{Name: f.Name, Err: errors.New("the file holds no rows")}
	}
	fr := tabular.Frame{Names: Names(), Layout: site.Wide, Time: 0, Date: -1, Clock: -1, HeaderLine: 1}
	w.Looked = tabular.NewLooked(s, log, f, fr, cell.Style{Mark: '.', Declared: true}, head, false)
	return w, nil
}

// Units are the units of the columns.
func (w *File) Units() map[string]string {
	units := map[string]string{}
	for _, c := range columns {
		if c.unit != "" {
			units[c.name] = c.unit
		}
	}
	return units
}

// StampedAtEnd reports whether a column holds amounts of the hours before its
// times.
func (w *File) StampedAtEnd(name string) bool { return strings.HasPrefix(name, "rain") }

// rows calls fn with every line of weather as cells until it returns false.
func (w *File) rows(ctx context.Context, fn func(line int64, cells [][]byte) bool) error {
	r, err := w.file.Open(false)
	if err != nil {
		return err
	}
	defer r.Close()
	return w.scan(ctx, r, fn)
}

func (w *File) scan(ctx context.Context, r *logfile.Reader, fn func(int64, [][]byte) bool) error {
	s := bufio.NewScanner(r)
	s.Buffer(make([]byte, 0, lineMost), lineMost)
	line := int64(0)
	var cells [][]byte
	for s.Scan() {
		line++
		if line%1024 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		if len(bytes.TrimSpace(s.Bytes())) == 0 {
			continue
		}
		row, err := parse(s.Bytes(), cells[:0])
		if err != nil {
			// Its time cannot be read, so that every value of it is rejected.
			row = append(cells[:0], shorten(bytes.TrimSpace(s.Bytes())))
			for range columns {
				row = append(row, nil)
			}
		}
		if cells = row; !fn(line, cells) {
			return nil
		}
	}
	if err := s.Err(); err != nil {
		var f logfile.Failure
		if errors.As(err, &f) {
			return f
		}
		return logfile.Failure{Name: w.file.Name, Err: fmt.Errorf("line %d: %w", line+1, err)}
	}
	return nil
}

// Rows calls fn with the line and the cells of every row until it returns
// false. The cells are valid during the call only.
func (w *File) Rows(ctx context.Context, fn func(line int64, cells [][]byte) bool) error {
	return w.rows(ctx, fn)
}

// ScanOrder has nothing to prove: the year comes first.
func (w *File) ScanOrder(context.Context) error { return nil }

// Read implements reading.Source. It may be called again.
func (w *File) Read(ctx context.Context, to reading.Sink) error {
	m, err := w.Begin(to)
	if err != nil {
		return err
	}
	r, err := w.file.Open(true)
	if err != nil {
		return err
	}
	defer r.Close()
	err = w.scan(ctx, r, func(line int64, cells [][]byte) bool {
		m.Row(line, cells, nil, false)
		return true
	})
	w.End(m, []string{"hourly weather of a public station in fixed columns: " + strings.Join(Names()[1:], ", "), "universal time"})
	if err == nil {
		w.Ledger.Bytes, w.Ledger.SHA256, err = r.Sum()
	}
	return err
}
