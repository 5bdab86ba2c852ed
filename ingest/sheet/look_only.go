package sheet

import (
	"context"

	"sashlog/ingest/logfile"
)

// Names lists the sheets of a workbook in its order.
func Names(f *logfile.File) ([]string, error) {
	x, err := openBook(f)
	if err != nil {
		return nil, err
	}
	defer x.Close()
	return x.GetSheetList(), nil
}

// Date1904 reports whether serial dates count from 1904.
func (b *Book) Date1904() bool { return b.date1904 }

// Sheet is the name of the sheet looked at.
func (b *Book) Sheet() string { return b.sheet }

// Rows calls fn with the number and the cells of every data row, as stored,
// until it returns false. The cells are valid during the call only.
func (b *Book) Rows(ctx context.Context, fn func(row int64, cells [][]byte) bool) error {
	return b.rows(ctx, func(no int64, cells [][]byte, _ []int) bool { return fn(no, cells) })
}
