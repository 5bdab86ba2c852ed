// Package tabular reads delimited text logs: one row per instant with a column
// per point (wide), one row per reading (long), or one file per point. It
// finds out how a file is written, cuts it into rows with its own loop (the
// rules are those of encoding/csv) and hands over readings and rejects in
// order. The steps, in the order of the files:
//
//  1. dialect.go: encoding, separator, decimal mark
//  2. frame.go, roles.go: header, time, key and value columns
//  3. split.go, plain.go: rows to cells
//  4. mapper.go, long.go: cells to readings (shared with the reader of workbooks)
package tabular

import (
	"bytes"
	"context"
	"fmt"
	"io"

	"sashlog/configs/site"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
)

// File is one delimited text file as a source of readings.
type File struct {
	Looked
	dialect Dialect
	// general takes every row the way of rows that are not plain; a test holds
	// the two to each other.
	general bool
}

// maxRow bounds one row of text.
const maxRow = 64 << 20

// Open looks at the head of a file. wanted are the columns that the points
// table names for it.
func Open(s *site.Site, log *site.Log, f *logfile.File, wanted []string) (*File, error) {
	r, err := f.Open(false)
	if err != nil {
		return nil, err
	}
	defer r.Close()
	d, head, err := Look(r, log, wanted)
	if err != nil {
		if _, ok := err.(logfile.Failure); ok {
			return nil, err
		}
		return nil, logfile.Failure{Name: f.Name, Err: err}
	}
	return &File{Looked: NewLooked(s, log, f, d.Frame, d.Style, head, false), dialect: d}, nil
}

// ScanOrder reads the time column of the whole file until its dates prove
// their order.
func (t *File) ScanOrder(ctx context.Context) error {
	return t.rows(ctx, nil, t.Prove())
}

// Read implements reading.Source. It may be called again; every pass takes the
// points' conversions as they are then.
func (t *File) Read(ctx context.Context, to reading.Sink) error {
	m, err := t.Begin(to)
	if err != nil {
		return err
	}
	for _, d := range t.dialect.Doubts {
		to.Issue(reading.Issue{Where: reading.Where{File: t.file.Name}, Point: -1, Text: d.Text, Hint: d.Hint})
	}
	err = t.rows(ctx, m, nil)
	t.End(m, t.dialect.Notes)
	return err
}

// rows runs over the data rows of the file, into the mapper or to fn (until it
// returns false).
func (t *File) rows(ctx context.Context, m *Mapper, fn func(line int64, cells [][]byte, starts []int) bool) (err error) {
	r, err := t.file.Open(m != nil)
	if err != nil {
		return err
	}
	defer r.Close()
	ahead := logfile.Ahead(ctx, t.dialect.charset.reader(r, t.dialect.bareCR))
	stopped := false
	defer func() {
		ahead.Close()
		if err != nil || stopped || m == nil {
			return
		}
		t.Ledger.Bytes, t.Ledger.SHA256, err = r.Sum()
	}()
	s := splitter{sep: t.dialect.Sep}
	var p *plainer
	if m != nil {
		if !t.general {
			p = newPlainer(m, t.dialect.Sep, t.dialect.Style)
		}
		fn = func(line int64, cells [][]byte, starts []int) bool {
			m.Row(line, cells, starts, false)
			return true
		}
		defer func() { m.stray, m.multi = s.stray, s.multi }()
	}
	buf := make([]byte, 0, 1<<20)
	line := int64(0)
	final := false
	for !final {
		if len(buf) == cap(buf) {
			if cap(buf) >= maxRow {
				return logfile.Failure{Name: t.file.Name, Err: fmt.Errorf("line %d is longer than %d MB; hint: this is no log of rows, or a quote is not closed", line+1, maxRow>>20)}
			}
			buf = append(make([]byte, 0, 2*cap(buf)), buf...)
		}
		n, err := io.ReadFull(ahead, buf[len(buf):cap(buf)])
		buf = buf[:len(buf)+n]
		switch err {
		case nil:
		case io.EOF, io.ErrUnexpectedEOF:
			final = true
		default:
			return err
		}
		if err := ctx.Err(); err != nil {
			return err
		}
		used, ok := t.block(buf, final, &line, &s, p, fn)
		if !ok {
			stopped = true
			return nil
		}
		buf = buf[:copy(buf, buf[used:])]
	}
	return nil
}

// block runs over the whole rows of b and returns the bytes taken.
func (t *File) block(b []byte, final bool, line *int64, s *splitter, p *plainer, fn func(int64, [][]byte, []int) bool) (used int, ok bool) {
	first := t.frame.DataLine
	quote := -2 // the next quote in b: -2 unknown, -1 none
	for used < len(b) {
		if p != nil && *line+1 >= first {
			nl := bytes.IndexByte(b[used:], '\n')
			if quote == -2 || quote >= 0 && quote < used {
				if quote = bytes.IndexByte(b[used:], '"'); quote >= 0 {
					quote += used
				}
			}
			if nl >= 0 && (quote < 0 || quote > used+nl) {
				*line++
				end := nl
				if end > 0 && b[used+end-1] == '\r' {
					end--
				}
				if end > 0 {
					p.line(*line, b[used:], end)
				}
				used += nl + 1
				continue
			}
		}
		n, row := s.next(b[used:], final)
		if n == 0 {
			return used, true
		}
		used += n
		*line += int64(s.lines)
		if row && *line >= first && !fn(*line, s.fields, s.starts) {
			return used, false
		}
	}
	return used, true
}
