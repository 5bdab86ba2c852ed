package tabular

import (
	"fmt"
	"strconv"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
)

// HeadRow is one of the first rows of a file or sheet.
type HeadRow struct {
	Line  int64
	Cells []string
}

// Frame says where things stand in the rows of a log: the names of its
// columns and which of them hold the time, the keys and the values. Column
// indexes are 0-based, -1 when there is none.
type Frame struct {
	// Names of the columns, trimmed, made unique; "1", "2", ... without a
	// header.
	Names []string
	// HeaderLine is the line of the header, 0 when there is none. DataLine is
	// the first line of data.
	HeaderLine, DataLine int64
	Layout               site.Layout
	// Time holds date and time, or Date and Clock hold one each.
	Time, Date, Clock int
	Keys, Values      []int
	// Notes say in words how it was found.
	Notes []string
}

// form is what a cell looks like.
type form uint8

const (
	formEmpty  form = iota
	formNumber      // a number, whatever its decimal mark
	formStamp       // date and time, or unix time
	formDate        // a date alone
	formClock       // a time of day alone
	formWord
)

func formOf(s string) form {
	b := []byte(strings.TrimSpace(s))
	if len(b) == 0 {
		return formEmpty
	}
	if looksNumber(b) {
		return formNumber
	}
	switch f := clock.FormOf(b); f {
	case clock.FormStamp:
		return formStamp
	case clock.FormDate:
		return formDate
	case clock.FormClock:
		return formClock
	}
	for _, st := range []cell.Style{{Mark: '.', Declared: true}, {Mark: ',', Declared: true}} {
		if _, rest, ok := st.Number(b); ok && len(rest) <= 6 {
			return formNumber
		}
	}
	return formWord
}

// looksNumber reports digits with at most one mark and a sign.
func looksNumber(b []byte) bool {
	if b[0] == '-' || b[0] == '+' {
		b = b[1:]
	}
	marks, digits := 0, 0
	for _, c := range b {
		switch {
		case c >= '0' && c <= '9':
			digits++
		case c == '.' || c == ',':
			marks++
		default:
			return false
		}
	}
	return digits > 0 && marks <= 1
}

// FrameOf finds the frame of a log from its first rows. wanted are the columns
// that the points table names for it.
func FrameOf(rows []HeadRow, log *site.Log, wanted []string) (Frame, error) {
	f := Frame{Time: -1, Date: -1, Clock: -1, Layout: log.Layout}
	if f.Layout == "" {
		f.Layout = site.Wide
		if len(log.KeyColumns) > 0 {
			f.Layout = site.Long
		}
	}
	if len(rows) == 0 {
		return f, fmt.Errorf("the file has no rows")
	}
	if f.Layout != site.Wide {
		wanted = nil // there they name rows or files, not columns
	}
	header, err := headerIn(rows, log, wanted)
	if err != nil {
		return f, err
	}
	data := rows
	width := 0
	for _, r := range rows[max(0, header):] {
		width = max(width, len(r.Cells))
	}
	if header >= 0 {
		f.HeaderLine = rows[header].Line
		f.Names = uniqueNames(rows[header].Cells, &f)
		data = rows[header+1:]
		if len(data) > 0 && unitRow(data[0].Cells) {
			f.Notes = append(f.Notes, fmt.Sprintf("line %d taken as a row of units", data[0].Line))
			data = data[1:]
		}
		f.Notes = append([]string{fmt.Sprintf("column names in line %d", f.HeaderLine)}, f.Notes...)
	} else {
		for i := 0; i < width; i++ {
			f.Names = append(f.Names, strconv.Itoa(i+1))
		}
		f.Notes = append(f.Notes, "no column names: columns are called 1, 2, ...")
	}
	if len(data) > 0 {
		f.DataLine = data[0].Line
	} else {
		f.DataLine = rows[len(rows)-1].Line + 1
	}
	if err := f.findTime(data, log); err != nil {
		return f, err
	}
	return f, f.findRoles(log)
}

// headerIn finds the row of column names: -1 when there is none.
func headerIn(rows []HeadRow, log *site.Log, wanted []string) (int, error) {
	if log.HeaderRow < 0 {
		return -1, nil
	}
	if log.HeaderRow > 0 {
		for i, r := range rows {
			if r.Line == int64(log.HeaderRow) {
				return i, nil
			}
		}
		return 0, fmt.Errorf("header_row %d is empty or not among the first %d rows", log.HeaderRow, len(rows))
	}
	names := map[string]bool{}
	for _, w := range append([]string{log.TimeColumn, log.DateColumn, log.ClockColumn}, append(wanted, append(log.KeyColumns, log.ValueColumns...)...)...) {
		if w != "" {
			names[cell.Fold(w)] = true
		}
	}
	best, bestHits := -1, 0
	for i, r := range rows[:min(len(rows), 60)] {
		hits := 0
		for _, c := range r.Cells {
			if _, err := strconv.ParseFloat(strings.TrimSpace(c), 64); err != nil && names[cell.Fold(c)] {
				hits++
			}
		}
		if hits > bestHits {
			best, bestHits = i, hits
		}
	}
	if best >= 0 {
		return best, nil
	}
	// Otherwise the row above the first one that holds a time.
	first := -1
	for i, r := range rows {
		if len(r.Cells) < 2 && len(rows) > 1 && width(rows) > 1 {
			continue
		}
		for _, c := range r.Cells {
			if fm := formOf(c); fm == formStamp || fm == formDate || fm == formNumber && unixLike(c) {
				first = i
			}
		}
		if first >= 0 {
			break
		}
	}
	if first < 0 { // no times at all: names if the first row is all words
		for _, c := range rows[0].Cells {
			if formOf(c) == formNumber {
				return -1, nil
			}
		}
		return 0, nil
	}
	h := first - 1
	if h > 0 && unitRow(rows[h].Cells) && len(rows[h-1].Cells) >= len(rows[h].Cells)-1 {
		h--
	}
	if h >= 0 && len(rows[h].Cells) < 2 && len(rows[first].Cells) > 2 {
		return -1, nil // a title line only
	}
	return h, nil
}

func width(rows []HeadRow) int {
	w := 0
	for _, r := range rows {
		w = max(w, len(r.Cells))
	}
	return w
}

// unixLike reports a number of ten or thirteen digits.
func unixLike(s string) bool {
	s = strings.TrimSpace(s)
	if i := strings.IndexAny(s, ".,"); i >= 0 {
		s = s[:i]
	}
	return (len(s) == 10 || len(s) == 13 || len(s) == 16 || len(s) == 19) && s[0] != '-' && s[0] != '+'
}

// serialLike reports a number that can be a spreadsheet date.
func serialLike(s string) bool {
	v, err := strconv.ParseFloat(strings.Replace(strings.TrimSpace(s), ",", ".", 1), 64)
	return err == nil && v >= 20000 && v < 80000
}

var unitWords = map[string]bool{"c": true, "f": true, "k": true, "degc": true, "degf": true, "°c": true, "°f": true, "%": true, "%rh": true, "ppm": true,
	"m/s": true, "km/h": true, "mph": true, "w/m2": true, "w/m²": true, "kw": true, "w": true, "l/s": true, "m3/h": true, "m³/h": true, "cfm": true,
	"mm": true, "mm/h": true, "deg": true, "°": true, "ug/m3": true, "µg/m3": true, "µg/m³": true, "pa": true, "hpa": true, "lux": true, "lx": true, "-": true, "0/1": true}

// unitRow reports whether a row holds units only, at least two of them.
func unitRow(cells []string) bool {
	n := 0
	for _, c := range cells {
		w := strings.Trim(strings.ToLower(strings.TrimSpace(c)), "[]()")
		switch {
		case w == "":
		case unitWords[w]:
			n++
		default:
			return false
		}
	}
	return n >= 2
}

func uniqueNames(cells []string, f *Frame) []string {
	names := make([]string, len(cells))
	seen := map[string]int{}
	for i, c := range cells {
		c = strings.TrimSpace(strings.ReplaceAll(strings.ReplaceAll(c, "\u00a0", " "), "\n", " "))
		seen[c]++
		if n := seen[c]; n > 1 && c != "" {
			c = fmt.Sprintf("%s (%d)", c, n)
			f.Notes = append(f.Notes, fmt.Sprintf("column %d has the same name as an earlier one and is called %q", i+1, c))
		}
		names[i] = c
	}
	return names
}

// Column finds a column by name: exactly, else without case, accents and
// spacing when only one fits; -1 when none does.
func (f *Frame) Column(name string) int {
	for i, n := range f.Names {
		if n == name {
			return i
		}
	}
	want, found := cell.Fold(name), -1
	if want == "" {
		return -1
	}
	for i, n := range f.Names {
		if cell.Fold(n) == want {
			if found >= 0 {
				return -1
			}
			found = i
		}
	}
	if found < 0 && f.HeaderLine == 0 {
		if k, err := strconv.Atoi(strings.TrimSpace(name)); err == nil && k >= 1 && k <= len(f.Names) {
			return k - 1
		}
	}
	return found
}
