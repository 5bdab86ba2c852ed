// Package columnar reads logs from Parquet files: wide, long, or one file per
// point. The column of times is told by its type; the file's own flag says
// whether its times are universal time, unless the site file overrules it. Rows
// are taken group by group and page by page, so memory does not grow with the
// file, and everything from the row on is shared with package tabular.
package columnar

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

// File is one Parquet file as a source of readings.
type File struct {
	tabular.Looked
	site    *site.Site
	file    *logfile.File
	columns []column
	matches []tabular.Match
	notes   []string
}

// headRows is how many rows are looked at.
const headRows = 1000

// Open looks at a file's schema and first rows. wanted are the columns that
// the points table names for it.
func Open(s *site.Site, log *site.Log, f *logfile.File, wanted []string) (*File, error) {
	o, err := openParquet(f)
	if err != nil {
		return nil, err
	}
	defer o.at.Close()
	c := &File{site: s, file: f}
	var left []string
	if err := safely(func() error { c.columns, left = columnsOf(o.File); return nil }); err != nil {
		return nil, damaged(f, err)
	}
	if len(c.columns) == 0 {
		return nil, logfile.Failure{Name: f.Name, Err: errors.New("no column of the Parquet file holds one value per row; hint: export a table without lists or groups")}
	}
	names := make([]string, len(c.columns))
	for i := range c.columns {
		names[i] = c.columns[i].name
	}
	head := []tabular.HeadRow{{Line: 1, Cells: names}}
	err = o.rows(context.Background(), c.columns, nil, func(line int64, cells [][]byte) bool {
		row := tabular.HeadRow{Line: line}
		for _, b := range cells {
			row.Cells = append(row.Cells, string(b))
		}
		head = append(head, row)
		return len(head) <= headRows
	})
	if err != nil {
		return nil, damaged(f, err)
	}
	if len(head) == 1 {
		return nil, logfile.Failure{Name: f.Name, Err: errors.New("the Parquet file holds no rows")}
	}
	how := *log
	how.HeaderRow = 1
	said := ""
	if how.TimeColumn == "" && how.DateColumn == "" {
		if t := c.timeColumn(); t != nil {
			how.TimeColumn = t.name
			said = fmt.Sprintf("time in column %q (by its type)", t.name)
		}
	}
	fr, err := tabular.FrameOf(head, &how, wanted)
	if err != nil {
		if len(left) > 0 {
			err = fmt.Errorf("%w; columns with several values per row are not read: %s", err, strings.Join(left, ", "))
		}
		return nil, logfile.Failure{Name: f.Name, Err: tabular.Unsettled{Cause: err}}
	}
	fr.DataLine = 2
	c.notes = append(c.notes, "Parquet file")
	if said != "" {
		c.notes = append(c.notes, said)
	}
	if fr.Time >= 0 {
		switch t := &c.columns[fr.Time]; {
		case t.flagged && log.Clock.OverruleOffset:
			c.notes = append(c.notes, "times are "+t.what+" flagged as universal time, which the site file overrules")
		case t.flagged:
			c.notes = append(c.notes, "times are "+t.what+" of universal time, by the file's flag")
		case t.when:
			c.notes = append(c.notes, "times are "+t.what+" without the flag of universal time: the log's clock decides")
		}
	}
	if len(left) > 0 {
		c.notes = append(c.notes, "columns with several values per row, or none, left out: "+strings.Join(left, ", "))
	}
	for _, n := range fr.Notes {
		if !strings.HasPrefix(n, "column names in line") && !strings.Contains(n, "row of units") {
			c.notes = append(c.notes, n)
		}
	}
	style := cell.Style{Mark: '.', Declared: true}
	c.Looked = tabular.NewLooked(s, log, f, fr, style, head, false)
	return c, nil
}

// timeColumn is the column whose type says that it holds times: of several the
// one whose name speaks of time, else the first.
func (c *File) timeColumn() *column {
	var first *column
	for i := range c.columns {
		t := &c.columns[i]
		if !t.when || t.what == "dates" {
			continue
		}
		if first == nil {
			first = t
		}
		n := cell.Fold(t.name)
		for _, w := range []string{"time", "stamp", "zeit", "heure", "horodat", "fecha", "index"} {
			if strings.Contains(n, w) {
				return t
			}
		}
	}
	return first
}

// Units are the units that the file's metadata name, by column.
func (c *File) Units() map[string]string {
	units := map[string]string{}
	for i, n := range c.Frame().Names {
		if u := c.columns[i].unit; u != "" {
			units[n] = u
		}
	}
	return units
}

// SetMatches names the points the file may yield.
func (c *File) SetMatches(ms []tabular.Match) {
	c.matches = ms
	c.Looked.SetMatches(ms)
}

// wanted are the columns that the points need.
func (c *File) wanted() []bool {
	fr := c.Frame()
	want := make([]bool, len(c.columns))
	mark := func(cols ...int) {
		for _, i := range cols {
			if i >= 0 {
				want[i] = true
			}
		}
	}
	mark(fr.Time, fr.Date, fr.Clock)
	mark(fr.Keys...)
	mark(fr.Values...)
	for _, m := range c.matches {
		mark(m.Column)
	}
	return want
}

// rows runs over the rows of the file.
func (c *File) rows(ctx context.Context, wanted []bool, fn func(line int64, cells [][]byte) bool) error {
	o, err := openParquet(c.file)
	if err != nil {
		return err
	}
	defer o.at.Close()
	if err := o.rows(ctx, c.columns, wanted, fn); err != nil {
		if ctx.Err() != nil {
			return ctx.Err()
		}
		return damaged(c.file, err)
	}
	return nil
}

// Rows calls fn with the line and the cells of every row until it returns
// false. The cells are valid during the call only.
func (c *File) Rows(ctx context.Context, fn func(line int64, cells [][]byte) bool) error {
	return c.rows(ctx, nil, fn)
}

// ScanOrder reads the column of times until its dates prove their order.
func (c *File) ScanOrder(ctx context.Context) error {
	prove := c.Prove()
	fr := c.Frame()
	want := make([]bool, len(c.columns))
	for _, i := range []int{fr.Time, fr.Date, fr.Clock} {
		if i >= 0 {
			want[i] = true
		}
	}
	return c.rows(ctx, want, func(line int64, cells [][]byte) bool { return prove(line, cells, nil) })
}

// Read implements reading.Source. It may be called again.
func (c *File) Read(ctx context.Context, to reading.Sink) error {
	m, err := c.Begin(to)
	if err != nil {
		return err
	}
	c.sayUnits(to)
	err = c.rows(ctx, c.wanted(), func(line int64, cells [][]byte) bool {
		m.Row(line, cells, nil, false)
		return true
	})
	c.End(m, c.notes)
	if err == nil {
		c.Ledger.Bytes, c.Ledger.SHA256, err = c.file.Sum()
	}
	return err
}

// sayUnits reports columns whose metadata name another unit than the points
// table.
func (c *File) sayUnits(to reading.Sink) {
	for _, mt := range c.matches {
		if mt.Column < 0 {
			continue
		}
		p, u := &c.site.Points[mt.Point], c.columns[mt.Column].unit
		if u == "" || p.Unit == "" || cell.SameUnit(u, p.Unit) {
			continue
		}
		to.Issue(reading.Issue{Where: reading.Where{File: c.file.Name}, Point: mt.Point,
			Text: fmt.Sprintf("column %q is in %q by the file's metadata, the points table says %q", p.Column, u, p.Unit),
			Hint: "the points table was followed; correct its unit if the file is right"})
	}
}
