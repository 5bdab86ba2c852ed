// Package sheet reads logs from XLSX workbooks. It takes raw cell values, so
// that dates are serial numbers and not text in some order of day and month,
// and shares everything from the row on with package tabular.
package sheet

import (
	"context"
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

// Book is one sheet of a workbook as a source of readings.
type Book struct {
	tabular.Looked
	file     *logfile.File
	sheet    string
	date1904 bool
	comma    bool // text cells are written with a decimal comma
	notes    []string
}

// maxXML bounds what one part of a workbook may expand to.
const maxXML = 4 << 30

func openBook(f *logfile.File) (*excelize.File, error) {
	r, err := f.Open(false)
	if err != nil {
		return nil, err
	}
	defer r.Close()
	x, err := excelize.OpenReader(r, excelize.Options{RawCellValue: true, UnzipSizeLimit: 2 * maxXML})
	if err != nil {
		if _, ok := err.(logfile.Failure); ok {
			return nil, err
		}
		return nil, logfile.Failure{Name: f.Name, Err: fmt.Errorf("damaged or protected workbook: %w", err)}
	}
	return x, nil
}

// headRows is how many rows are looked at.
const headRows = 1000

// Open looks at the head of a workbook's sheet: the log's, else the first.
func Open(s *site.Site, log *site.Log, f *logfile.File, wanted []string) (*Book, error) {
	x, err := openBook(f)
	if err != nil {
		return nil, err
	}
	defer x.Close()
	b := &Book{file: f}
	names := x.GetSheetList()
	if len(names) == 0 {
		return nil, logfile.Failure{Name: f.Name, Err: fmt.Errorf("the workbook has no sheet")}
	}
	b.sheet = names[0]
	if log.Sheet != "" {
		b.sheet = ""
		for _, n := range names {
			if n == log.Sheet || b.sheet == "" && strings.EqualFold(strings.TrimSpace(n), strings.TrimSpace(log.Sheet)) {
				b.sheet = n
			}
		}
		if b.sheet == "" {
			return nil, logfile.Failure{Name: f.Name, Err: tabular.NotSettled("sheet %q is not in the workbook, which has %q", log.Sheet, names)}
		}
	}
	if p, err := x.GetWorkbookProps(); err == nil && p.Date1904 != nil {
		b.date1904 = *p.Date1904
	}
	var head []tabular.HeadRow
	err = eachRow(context.Background(), x, b.sheet, func(no int64, cells []string) bool {
		if len(cells) > 0 {
			head = append(head, tabular.HeadRow{Line: no, Cells: cells})
		}
		return len(head) < headRows
	})
	if err != nil {
		return nil, logfile.Failure{Name: f.Name, Err: err}
	}
	if len(head) == 0 {
		return nil, logfile.Failure{Name: f.Name, Err: fmt.Errorf("sheet %q is empty", b.sheet)}
	}
	fr, err := tabular.FrameOf(head, log, wanted)
	if err != nil {
		return nil, logfile.Failure{Name: f.Name, Err: tabular.Unsettled{Cause: err}}
	}
	// Numbers in a workbook are stored with a point; a comma is met in text
	// cells only.
	b.comma = log.Decimal == ','
	b.notes = append(b.notes, fmt.Sprintf("workbook, sheet %q", b.sheet))
	if b.date1904 {
		b.notes = append(b.notes, "dates count from 1904")
	}
	b.notes = append(b.notes, fr.Notes...)
	style := cell.Style{Mark: '.', Declared: log.Decimal == '.'}
	b.Looked = tabular.NewLooked(s, log, f, fr, style, head, b.date1904)
	return b, nil
}

// rowsMost is how many rows a sheet has at most.
const rowsMost = 1 << 20

// eachRow calls fn with every row of a sheet, 1-based, until it returns false.
func eachRow(ctx context.Context, x *excelize.File, sheet string, fn func(no int64, cells []string) bool) error {
	rows, err := x.Rows(sheet)
	if err != nil {
		return fmt.Errorf("sheet %q: %w", sheet, err)
	}
	defer rows.Close()
	for no := int64(1); rows.Next(); no++ {
		if no > rowsMost {
			return fmt.Errorf("sheet %q: a row beyond %d, the most a workbook holds; hint: the workbook is damaged: save it again", sheet, rowsMost)
		}
		if no%1024 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		cells, err := rows.Columns()
		if err != nil {
			return fmt.Errorf("sheet %q, row %d: %w", sheet, no, err)
		}
		if !fn(no, cells) {
			return nil
		}
	}
	if err := rows.Error(); err != nil {
		return fmt.Errorf("sheet %q: %w", sheet, err)
	}
	return nil
}

// rows calls fn with the cells of every data row as bytes.
func (b *Book) rows(ctx context.Context, fn func(no int64, cells [][]byte, starts []int) bool) error {
	x, err := openBook(b.file)
	if err != nil {
		return err
	}
	defer x.Close()
	var text []byte
	var cells [][]byte
	err = eachRow(ctx, x, b.sheet, func(no int64, row []string) bool {
		if no < b.Frame().DataLine || len(row) == 0 {
			return true
		}
		n := 0
		for _, c := range row {
			n += len(c)
		}
		if cap(text) < n { // cells point into text, so it must not move
			text = make([]byte, 0, 2*n)
		}
		text, cells = text[:0], cells[:0]
		for _, c := range row {
			from := len(text)
			text = append(text, c...)
			if b.comma {
				toPoint(text[from:])
			}
			cells = append(cells, text[from:len(text):len(text)])
		}
		return fn(no, cells, nil)
	})
	if err != nil && ctx.Err() == nil {
		return logfile.Failure{Name: b.file.Name, Err: err}
	}
	return err
}

// toPoint turns "21,5" into "21.5" where the cell is a number with one comma.
func toPoint(c []byte) {
	at := -1
	for i, ch := range c {
		switch {
		case ch == ',' && at < 0:
			at = i
		case ch >= '0' && ch <= '9', i == 0 && (ch == '-' || ch == '+'):
		default:
			return
		}
	}
	if at > 0 {
		c[at] = '.'
	}
}

// ScanOrder reads the sheet until its dates prove their order.
func (b *Book) ScanOrder(ctx context.Context) error { return b.rows(ctx, b.Prove()) }

// Read implements reading.Source. It may be called again.
func (b *Book) Read(ctx context.Context, to reading.Sink) error {
	m, err := b.Begin(to)
	if err != nil {
		return err
	}
	err = b.rows(ctx, func(no int64, cells [][]byte, _ []int) bool {
		m.Row(no, cells, nil, true)
		return true
	})
	b.End(m, b.notes)
	if err == nil {
		b.Ledger.Bytes, b.Ledger.SHA256, err = b.file.Sum()
	}
	return err
}
