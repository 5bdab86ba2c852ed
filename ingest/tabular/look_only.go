package tabular

import "context"

// Dialect says how the file is written.
func (t *File) Dialect() *Dialect { return &t.dialect }

// Charset is the encoding in words.
func (d *Dialect) Charset() string { return d.charset.String() }

// Rows calls fn with the line and the cells of every data row, as written,
// until it returns false. The cells are valid during the call only.
func (t *File) Rows(ctx context.Context, fn func(line int64, cells [][]byte) bool) error {
	return t.rows(ctx, nil, func(line int64, cells [][]byte, _ []int) bool { return fn(line, cells) })
}
