package columnar

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/parquet-go/parquet-go"

	"sashlog/ingest/logfile"
)

// batch is how many values of a column are taken at a time.
const batch = 512

// opened is a file open for reading.
type opened struct {
	*parquet.File
	at *logfile.Random
}

// safely runs a step of the library; a file that makes it panic is a damaged
// file.
func safely(step func() error) (err error) {
	defer func() {
		if p := recover(); p != nil {
			err = fmt.Errorf("%v: %w", p, errCut)
		}
	}()
	return step()
}

func openParquet(f *logfile.File) (*opened, error) {
	at, err := f.Random()
	if err != nil {
		return nil, err
	}
	o := &opened{at: at}
	err = checkFooter(at, at.Size)
	if err == nil {
		err = safely(func() (err error) {
			o.File, err = parquet.OpenFile(at, at.Size, parquet.SkipPageIndex(true), parquet.SkipBloomFilters(true),
				parquet.FileReadMode(parquet.ReadModeSync), parquet.ReadBufferSize(64<<10))
			return err
		})
	}
	if err == nil {
		err = o.check()
	}
	if err != nil {
		at.Close()
		return nil, damaged(f, err)
	}
	return o, nil
}

// check looks at the counts the footer claims.
func (o *opened) check() error {
	m := o.Metadata()
	rows := int64(0)
	for i := range m.RowGroups {
		n := m.RowGroups[i].NumRows
		if n < 0 || n > o.at.Size*rowsPerByte-rows {
			return fmt.Errorf("row group %d claims %d rows in a file of %d bytes: %w", i+1, n, o.at.Size, errCut)
		}
		if len(m.RowGroups[i].Columns) != len(leafElements(m)) {
			return fmt.Errorf("row group %d has %d columns, the schema %d: %w", i+1, len(m.RowGroups[i].Columns), len(leafElements(m)), errCut)
		}
		for j := range m.RowGroups[i].Columns {
			if m.RowGroups[i].Columns[j].MetaData.Codec != m.RowGroups[0].Columns[j].MetaData.Codec {
				return fmt.Errorf("row group %d packs column %d in another way than the first: not read", i+1, j+1)
			}
		}
		rows += n
	}
	return nil
}

func damaged(f *logfile.File, err error) error {
	var fe logfile.Failure
	if errors.As(err, &fe) {
		return err
	}
	return logfile.Failure{Name: f.Name, Err: fmt.Errorf("%s: %w", "Parquet file", err)}
}

// cursor runs over the values of one column of a row group.
type cursor struct {
	col    *column
	cell   int // its place in a row
	pages  parquet.Pages
	page   parquet.Page
	values parquet.ValueReader
	buf    [batch]parquet.Value
	i, n   int
}

// next is the next value; it is valid until the one after it is asked for.
func (c *cursor) next() (parquet.Value, error) {
	if c.i == c.n {
		if err := safely(c.fill); err != nil {
			return parquet.Value{}, err
		}
	}
	c.i++
	return c.buf[c.i-1], nil
}

// fill takes values until there is one.
func (c *cursor) fill() error {
	c.i, c.n = 0, 0
	for c.n == 0 {
		if c.page == nil {
			p, err := c.pages.ReadPage()
			if err == io.EOF {
				return fmt.Errorf("it ends too early: %w", errCut)
			}
			if err != nil {
				return err
			}
			c.page, c.values = p, p.Values()
		}
		n, err := c.values.ReadValues(c.buf[:])
		c.n = n
		if n == 0 {
			parquet.Release(c.page)
			c.page = nil
			if err != nil && err != io.EOF {
				return err
			}
		} else if err != nil && err != io.EOF {
			return err
		}
	}
	return nil
}

func (c *cursor) close() {
	_ = safely(func() error {
		if c.page != nil {
			parquet.Release(c.page)
		}
		return c.pages.Close()
	})
}

// rows calls fn with every row as text, the columns that are wanted (nil: all)
// filled in, until it returns false. The names of the columns count as line 1.
// The cells are valid during the call only.
func (o *opened) rows(ctx context.Context, cols []column, wanted []bool, fn func(line int64, cells [][]byte) bool) error {
	line := int64(1)
	for g, group := range o.RowGroups() {
		more, err := o.group(ctx, g, group, cols, wanted, &line, fn)
		if err != nil || !more {
			return err
		}
	}
	return nil
}

func (o *opened) group(ctx context.Context, g int, group parquet.RowGroup, cols []column, wanted []bool, line *int64, fn func(int64, [][]byte) bool) (more bool, err error) {
	meta := &o.Metadata().RowGroups[g]
	if meta.NumRows == 0 {
		return true, nil
	}
	failed := func(name string, err error) (bool, error) {
		return false, fmt.Errorf("row group %d, column %q: %w", g+1, name, err)
	}
	var cursors []*cursor
	defer func() {
		for _, c := range cursors {
			c.close()
		}
	}()
	chunks := group.ColumnChunks()
	held := int64(0)
	for i := range cols {
		if wanted != nil && !wanted[i] {
			continue
		}
		largest, err := checkChunk(o.at, o.at.Size, meta.NumRows, &meta.Columns[cols[i].leaf].MetaData)
		if err != nil {
			return failed(cols[i].name, err)
		}
		if held += largest; held > openMost {
			return failed(cols[i].name, fmt.Errorf("reading the columns together takes more than %d MiB; hint: write it with smaller pages or row groups", openMost>>20))
		}
		c := &cursor{col: &cols[i], cell: i}
		if err := safely(func() error { c.pages = chunks[cols[i].leaf].Pages(); return nil }); err != nil {
			return failed(cols[i].name, err)
		}
		cursors = append(cursors, c)
	}
	cells := make([][]byte, len(cols))
	for n := int64(0); n < meta.NumRows; n++ {
		if n%1024 == 0 && ctx.Err() != nil {
			return false, ctx.Err()
		}
		for _, c := range cursors {
			v, err := c.next()
			if err != nil {
				return failed(c.col.name, err)
			}
			to := cells[c.cell][:0]
			if !v.IsNull() {
				to = c.col.write(to, v)
			}
			cells[c.cell] = to
		}
		*line++
		if !fn(*line, cells) {
			return false, nil
		}
	}
	return true, nil
}
