package columnar

import (
	"encoding/binary"
	"errors"
	"fmt"
	"io"

	"github.com/parquet-go/parquet-go/encoding/thrift"
	"github.com/parquet-go/parquet-go/format"
)

// Bounds of what a file may ask for, so that a damaged or hostile one ends with
// a message and not with a full machine. Common writers make pages of about
// 1 MiB and row groups of up to a million rows.
const (
	footerMost = 64 << 20
	// pageMost bounds one expanded page, openMost the largest pages of all
	// columns read together, valuesMost the values of a page.
	pageMost   = 256 << 20
	openMost   = 1 << 30
	valuesMost = 16 << 20
	headerMost = 1 << 20
	depthMost  = 32
	// rowsPerByte bounds the rows that a file of a size may claim: regular
	// times pack well, but not without end.
	rowsPerByte = 10_000
)

var errCut = errors.New("the file is cut off or damaged; hint: copy or export it again")

// checkFooter looks at the frame of a file and at the sizes its footer claims
// before anything is taken from it.
func checkFooter(r io.ReaderAt, size int64) error {
	if size < 12 {
		return errCut
	}
	var tail [8]byte
	if _, err := r.ReadAt(tail[:], size-8); err != nil && err != io.EOF {
		return err
	}
	switch string(tail[4:]) {
	case "PAR1":
	case "PARE":
		return errors.New("the Parquet file is encrypted; hint: export it without")
	default:
		return fmt.Errorf("no footer at the end: %w", errCut)
	}
	n := int64(binary.LittleEndian.Uint32(tail[:4]))
	if n > size-12 {
		return fmt.Errorf("a footer of %d bytes in a file of %d: %w", n, size, errCut)
	}
	if n > footerMost {
		return fmt.Errorf("the footer is larger than %d MiB; hint: write it with fewer columns or larger row groups", footerMost>>20)
	}
	b := make([]byte, n)
	if _, err := r.ReadAt(b, size-8-n); err != nil && err != io.EOF {
		return err
	}
	if _, err := walk(b); err != nil {
		return fmt.Errorf("damaged footer: %w", err)
	}
	return nil
}

// walk runs over one structure of the thrift compact protocol (its published
// specification) and returns the bytes it takes. It refuses lists that claim
// more items than the bytes that follow could hold, which decoders would make
// room for.
func walk(b []byte) (int, error) {
	w := walker{b: b}
	if err := w.structure(0); err != nil {
		return 0, err
	}
	return w.at, nil
}

type walker struct {
	b  []byte
	at int
}

func (w *walker) octet() (byte, error) {
	if w.at >= len(w.b) {
		return 0, errCut
	}
	c := w.b[w.at]
	w.at++
	return c, nil
}

func (w *walker) varint() (uint64, error) {
	u, n := binary.Uvarint(w.b[w.at:])
	if n <= 0 {
		return 0, errCut
	}
	w.at += n
	return u, nil
}

func (w *walker) skip(n uint64) error {
	if n > uint64(len(w.b)-w.at) {
		return errCut
	}
	w.at += int(n)
	return nil
}

func (w *walker) structure(depth int) error {
	if depth > depthMost {
		return fmt.Errorf("nested more than %d levels: %w", depthMost, errCut)
	}
	for {
		h, err := w.octet()
		if err != nil || h == 0 {
			return err
		}
		if h>>4 == 0 { // the field's number follows
			if _, err := w.varint(); err != nil {
				return err
			}
		}
		if t := h & 15; t > 2 { // true and false stand in the header
			if err := w.value(t, depth); err != nil {
				return err
			}
		}
	}
}

func (w *walker) value(t byte, depth int) error {
	switch t {
	case 1, 2, 3:
		return w.skip(1)
	case 4, 5, 6:
		_, err := w.varint()
		return err
	case 7:
		return w.skip(8)
	case 8:
		n, err := w.varint()
		if err != nil {
			return err
		}
		return w.skip(n)
	case 9, 10:
		return w.list(depth)
	case 12:
		return w.structure(depth + 1)
	}
	return fmt.Errorf("a field of unknown type %d: %w", t, errCut) // maps are not used by the format
}

func (w *walker) list(depth int) error {
	h, err := w.octet()
	if err != nil {
		return err
	}
	n := uint64(h >> 4)
	if n == 15 {
		if n, err = w.varint(); err != nil {
			return err
		}
	}
	least := uint64(1)
	if h&15 == 12 {
		least = 3
	}
	if n > uint64(len(w.b)-w.at)/least {
		return fmt.Errorf("a list of %d items where %d bytes are left: %w", n, len(w.b)-w.at, errCut)
	}
	if depth++; depth > depthMost {
		return errCut
	}
	for ; n > 0; n-- {
		if err := w.value(h&15, depth); err != nil {
			return err
		}
	}
	return nil
}

// checkChunk looks at the headers of all pages of a column chunk before they
// are read. It returns the bytes its largest page and its dictionary expand to.
func checkChunk(r io.ReaderAt, size, rows int64, m *format.ColumnMetaData) (largest int64, err error) {
	at := m.DataPageOffset
	if d := m.DictionaryPageOffset; d != 0 {
		at = d
	}
	end := at + m.TotalCompressedSize
	if at < 4 || m.DataPageOffset < at || m.TotalCompressedSize < 0 || end > size-8 || end < at {
		return 0, fmt.Errorf("its pages lie outside the file: %w", errCut)
	}
	if m.NumValues != rows {
		return 0, fmt.Errorf("%d values in a group of %d rows: %w", m.NumValues, rows, errCut)
	}
	if err := checkCodec(m.Codec); err != nil {
		return 0, err
	}
	var protocol thrift.CompactProtocol
	var body bodies
	defer body.close()
	var dict, values int64
	buf := make([]byte, 512)
	for at < end && values < rows {
		h, n, err := pageHeader(r, at, end, &buf, &protocol)
		if err != nil {
			return 0, err
		}
		stored, expanded := int64(h.CompressedPageSize), int64(h.UncompressedPageSize)
		if stored < 0 || expanded < 0 || stored > end-at-n {
			return 0, fmt.Errorf("a page of %d bytes where %d are left: %w", stored, end-at-n, errCut)
		}
		if expanded > pageMost {
			return 0, fmt.Errorf("a page expands to %d MiB, more than %d; hint: write it with smaller pages", expanded>>20, pageMost>>20)
		}
		var count, plain int64 // plain: bytes of levels, which are not packed
		packed := true
		switch {
		case h.Type == format.DictionaryPage && h.DictionaryPageHeader.Valid:
			if count = int64(h.DictionaryPageHeader.V.NumValues); count > expanded {
				return 0, fmt.Errorf("a dictionary of %d values in %d bytes: %w", count, expanded, errCut)
			}
			dict = expanded + 4*count
		case h.Type == format.DataPage && h.DataPageHeader.Valid:
			count = int64(h.DataPageHeader.V.NumValues)
			values += count
		case h.Type == format.DataPageV2 && h.DataPageHeaderV2.Valid:
			v := &h.DataPageHeaderV2.V
			count = int64(v.NumValues)
			values += count
			plain = int64(v.RepetitionLevelsByteLength) + int64(v.DefinitionLevelsByteLength)
			if plain > min(stored, expanded) || v.RepetitionLevelsByteLength < 0 || v.DefinitionLevelsByteLength < 0 {
				return 0, fmt.Errorf("a page whose levels take more bytes than it has: %w", errCut)
			}
			packed = !v.IsCompressed.Valid || v.IsCompressed.V
		}
		if count < 0 || count > valuesMost || values > rows {
			return 0, fmt.Errorf("a page claims %d values in a group of %d rows (at most %d are read at once): %w", count, rows, valuesMost, errCut)
		}
		if codec := m.Codec; stored > plain {
			if !packed {
				codec = format.Uncompressed
			}
			if err := body.check(codec, r, at+n+plain, stored-plain, expanded-plain); err != nil {
				return 0, err
			}
		}
		largest = max(largest, expanded+9*count) // levels, and indexes or values
		at += n + stored
	}
	if values < rows {
		return 0, fmt.Errorf("its pages hold %d of %d values: %w", values, rows, errCut)
	}
	return largest + dict, nil
}

// pageHeader reads the header of the page at an offset and its length.
func pageHeader(r io.ReaderAt, at, end int64, buf *[]byte, p *thrift.CompactProtocol) (*format.PageHeader, int64, error) {
	for {
		b := *buf
		if int64(len(b)) > end-at {
			b = b[:end-at]
		}
		if n, err := r.ReadAt(b, at); n < len(b) {
			if err == nil || err == io.EOF {
				err = errCut
			}
			return nil, 0, err
		}
		n, err := walk(b)
		if err == nil {
			h := new(format.PageHeader)
			err = thrift.NewDecoder(p.NewReaderFromBytes(append([]byte(nil), b[:n]...))).Decode(h)
			return h, int64(n), err
		}
		if int64(len(b)) == end-at || len(*buf) >= headerMost {
			return nil, 0, fmt.Errorf("damaged page header: %w", err)
		}
		*buf = make([]byte, 4*len(*buf))
	}
}
