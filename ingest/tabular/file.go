// Package tabular reads delimited text logs: one row per instant with a column
// per point (wide), one row per reading (long), or one file per point. It
// finds out how a file is written, cuts it into rows with its own loop (the
// rules are those of encoding/csv) and hands over readings and rejects in
// order. The steps, in the order of the files:
//
//  1. dialect.go: encoding, separator, decimal mark
//  2. frame.go, roles.go: header, time, key and value columns
//  3. split.go, plain.go: rows to cells
//  4. mapper.go: cells to readings (shared with the reader of workbooks)
package tabular

import (
	"bytes"
	"context"
	"fmt"
	"io"

	"sashlog/configs/site"
	"sashlog/ingest/clock"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
)

// File is one delimited text file as a source of readings.
type File struct {
	site    *site.Site
	log     *site.Log
	file    *logfile.File
	dialect Dialect
	matches []Match
	points  []int
	order   site.DateOrder
	proof   string
	prover  clock.Prover
	head    []HeadRow

	ledger reading.FileLedger
	notes  []reading.ClockNote
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
	t := &File{site: s, log: log, file: f, order: log.DateOrder}
	if t.dialect, t.head, err = Look(r, log, wanted); err != nil {
		if _, ok := err.(logfile.Failure); ok {
			return nil, err
		}
		return nil, logfile.Failure{Name: f.Name, Err: err}
	}
	fr := &t.dialect.Frame
	tc := max(fr.Time, fr.Date)
	for _, row := range t.head {
		if row.Line >= fr.DataLine && tc < len(row.Cells) {
			t.prover.Add([]byte(row.Cells[tc]), row.Line)
		}
	}
	return t, nil
}

// Frame is the frame found in the file's head.
func (t *File) Frame() *Frame { return &t.dialect.Frame }

// Head is the rows looked at.
func (t *File) Head() []HeadRow { return t.head }

// SetMatches names the points the file may yield.
func (t *File) SetMatches(ms []Match) {
	t.matches, t.points = ms, nil
	for _, m := range ms {
		t.points = append(t.points, m.Point)
	}
}

// Prover holds what the dates of the head prove about their order.
func (t *File) Prover() *clock.Prover { return &t.prover }

// SetOrder sets the order of day and month and how it was proven.
func (t *File) SetOrder(o site.DateOrder, proof string) { t.order, t.proof = o, proof }

// ScanOrder reads the time column of the whole file until its dates prove
// their order.
func (t *File) ScanOrder(ctx context.Context) error {
	fr := &t.dialect.Frame
	tc := max(fr.Time, fr.Date)
	var last []byte
	return t.rows(ctx, nil, func(line int64, cells [][]byte, _ []int) bool {
		if tc >= len(cells) || bytes.Equal(last, cells[tc]) {
			return true
		}
		last = append(last[:0], cells[tc]...)
		t.prover.Add(last, line)
		_, _, ok := t.prover.Proven()
		return !ok
	})
}

// Name implements reading.Source.
func (t *File) Name() string { return t.file.Name }

// Points implements reading.Source.
func (t *File) Points() []int { return t.points }

// Describe is the account of the last pass.
func (t *File) Describe() reading.FileLedger { return t.ledger }

// ClockNotes tells what the clock met in the last pass.
func (t *File) ClockNotes() []reading.ClockNote { return t.notes }

// Read implements reading.Source. It may be called again; every pass takes the
// points' conversions as they are then.
func (t *File) Read(ctx context.Context, to reading.Sink) error {
	m, err := NewMapper(Setup{Site: t.site, Log: t.log, File: t.file.Name, Frame: &t.dialect.Frame,
		Style: t.dialect.Style, Matches: t.matches, Order: t.order, Disordered: t.disordered()}, to)
	if err != nil {
		return logfile.Failure{Name: t.file.Name, Err: err}
	}
	t.ledger = reading.FileLedger{Path: t.file.Name}
	err = t.rows(ctx, m, nil)
	m.Finish()
	t.ledger.Rows = m.Rows
	t.ledger.Dialect = append(append([]string{}, t.dialect.Notes...), m.Words(t.proof)...)
	t.notes = m.ClockNotes()
	return err
}

// disordered reports whether the rows of the head are out of order of time.
func (t *File) disordered() bool {
	return Disordered(t.head, &t.dialect.Frame, t.log, t.site, t.order, false)
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
		t.ledger.Bytes, t.ledger.SHA256, err = r.Sum()
	}()
	s := splitter{sep: t.dialect.Sep}
	var p *plainer
	if m != nil {
		p = newPlainer(m, t.dialect.Sep, t.dialect.Style)
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
	first := t.dialect.Frame.DataLine
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
					p.line(*line, b[used:used+nl+1], end)
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

// Disordered reports whether rows are out of order of time, repeated hours
// aside; for long logs, those of any one name.
func Disordered(rows []HeadRow, f *Frame, log *site.Log, s *site.Site, order site.DateOrder, date1904 bool) bool {
	p, err := clock.NewParser(order, log.TimeFormat, date1904)
	if err != nil {
		return false
	}
	c, err := clock.NewResolver(log.Clock, s.Location)
	if err != nil {
		return false
	}
	type state struct {
		last int64
		dir  int
	}
	last := map[string]*state{}
	for _, r := range rows {
		if r.Line < f.DataLine || max(f.Time, max(f.Date, f.Clock)) >= len(r.Cells) {
			continue
		}
		var st clock.Stamp
		var fault clock.Fault
		if f.Time >= 0 {
			st, fault = p.Parse([]byte(r.Cells[f.Time]))
		} else {
			st, fault = p.ParseSplit([]byte(r.Cells[f.Date]), []byte(r.Cells[f.Clock]))
		}
		if fault != clock.Fine {
			continue
		}
		u, v := c.Resolve(st.WallS)
		if st.HasOffset {
			u, v = c.Written(st.WallS, st.OffsetS)
		}
		if v != clock.Sure {
			continue
		}
		key := ""
		for _, k := range f.Keys {
			if k < len(r.Cells) {
				key += "/" + r.Cells[k]
			}
		}
		was := last[key]
		if was == nil {
			last[key] = &state{u, 0}
			continue
		}
		dir := 0
		if u > was.last {
			dir = 1
		} else if u < was.last {
			dir = -1
		}
		if dir != 0 && was.dir != 0 && dir != was.dir {
			return true
		}
		if dir != 0 {
			was.dir = dir
		}
		was.last = u
	}
	return false
}
