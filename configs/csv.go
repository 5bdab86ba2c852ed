package configs

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"
)

// table is a small table written by people: points or diary. Cells keep the
// place they were written at.
type table struct {
	file string
	doc  decoded
	// lines holds the start of each line of the decoded text.
	lines    [][]byte
	columns  map[string]int
	problems *Problems
	r        *csv.Reader
}

// row is one record with the byte column of each field.
type row struct {
	t     *table
	line  int
	cells []string
	cols  []int
	lines []int
}

// openTable finds the separator from the header and reads the header. known
// are the columns there may be, the first needed of them are required.
func openTable(file string, raw []byte, known []string, needed int, ps *Problems) *table {
	t := &table{file: file, doc: toUTF8(raw), columns: map[string]int{}, problems: ps}
	t.lines = bytes.SplitAfter(t.doc.text, []byte("\n"))
	if len(bytes.TrimSpace(t.doc.text)) == 0 {
		t.add(1, 1, "the table is empty", "its first line holds the names of the columns: "+list(known))
		return nil
	}
	if bytes.IndexByte(t.doc.text, 0) >= 0 {
		t.add(1, 1, "not a text file", "save the table as CSV")
		return nil
	}
	t.r = csv.NewReader(bytes.NewReader(t.doc.text))
	t.r.Comma = headerSeparator(t.lines)
	t.r.FieldsPerRecord = -1
	head, ok := t.next()
	if !ok {
		return nil
	}
	for i, name := range head.cells {
		key := strings.ToLower(strings.TrimSpace(name))
		_, twice := t.columns[key]
		switch {
		case key == "":
		case !contains(known, key):
			head.add(i, didYouMean(key, known), "unknown column %q", name)
		case twice:
			head.add(i, "keep one of them", "column %q stands twice in the header", name)
		default:
			t.columns[key] = i
		}
	}
	for _, k := range known[:needed] {
		if _, ok := t.columns[k]; !ok {
			t.add(head.line, 1, fmt.Sprintf("column %q is missing from the header", k), "the columns are "+list(known))
		}
	}
	return t
}

// headerSeparator is the one that occurs most often in the header.
func headerSeparator(lines [][]byte) rune {
	best, most := ',', 0
	for _, l := range lines {
		if len(bytes.TrimSpace(l)) == 0 {
			continue
		}
		for _, c := range ",;\t" {
			if n := bytes.Count(l, []byte(string(c))); n > most {
				best, most = c, n
			}
		}
		break
	}
	return best
}

func contains(words []string, w string) bool {
	for _, k := range words {
		if k == w {
			return true
		}
	}
	return false
}

// next returns the next row that is neither blank nor a remark (its first cell
// begins with #); ok is false at the end. A row that cannot be read is a
// problem and skipped.
func (t *table) next() (row, bool) {
	for {
		rec, err := t.r.Read()
		if errors.Is(err, io.EOF) {
			return row{}, false
		}
		var pe *csv.ParseError
		if errors.As(err, &pe) {
			t.add(pe.Line, pe.Column, "the row cannot be read: "+pe.Err.Error(),
				`a cell with a quotation mark is written in quotes with the mark doubled: "2"" pipe"`)
			continue
		}
		if err != nil {
			t.add(0, 0, "the table cannot be read: "+err.Error(), "")
			return row{}, false
		}
		out := row{t: t, cells: rec}
		blank := true
		for i, c := range rec {
			line, col := t.r.FieldPos(i)
			out.lines, out.cols = append(out.lines, line), append(out.cols, col)
			blank = blank && strings.TrimSpace(c) == ""
		}
		if blank || strings.HasPrefix(strings.TrimSpace(rec[0]), "#") {
			continue
		}
		out.line = out.lines[0]
		return out, true
	}
}

// add reports a problem at a byte column of the decoded text, converted to
// the column in the file's own encoding.
func (t *table) add(line, col int, text, hint string) {
	if col > 1 && line >= 1 && line <= len(t.lines) {
		before := t.lines[line-1][:min(col-1, len(t.lines[line-1]))]
		if t.doc.single {
			col = 1 + utf8.RuneCount(before)
		}
	}
	*t.problems = append(*t.problems, Problem{t.file, line, col, text, hint})
}

// add reports a problem at the i-th field.
func (r *row) add(i int, hint, format string, args ...any) {
	line, col := r.line, 1
	if i >= 0 && i < len(r.cols) {
		line, col = r.lines[i], r.cols[i]
	}
	r.t.add(line, col, fmt.Sprintf(format, args...), hint)
}

// cell returns a column's text without spaces around it, "" when the row is
// short or the column is not there.
func (r *row) cell(column string) string {
	i, ok := r.t.columns[column]
	if !ok || i >= len(r.cells) {
		return ""
	}
	return strings.TrimSpace(r.cells[i])
}

// at reports a problem at a column's field.
func (r *row) at(column, hint, format string, args ...any) {
	i, ok := r.t.columns[column]
	if !ok {
		i = -1
	}
	r.add(i, hint, format, args...)
}

// tooLong reports cells beyond the header.
func (r *row) tooLong(width int) {
	for i := width; i < len(r.cells); i++ {
		if strings.TrimSpace(r.cells[i]) != "" {
			r.add(i, "a cell that holds the separator is written in quotes", "the row has more cells than the header")
			return
		}
	}
}
