package columnar

import (
	"bufio"
	"encoding/binary"
	"errors"
	"fmt"
	"io"

	"github.com/andybalholm/brotli"
	"github.com/klauspost/compress/gzip"
	"github.com/klauspost/compress/zstd"
	"github.com/parquet-go/parquet-go/format"
)

// checkCodec refuses kinds of compression that are not read.
func checkCodec(c format.CompressionCodec) error {
	switch c {
	case format.Uncompressed, format.Snappy, format.Gzip, format.Brotli, format.Zstd:
		return nil
	case format.Lz4Raw:
		// The library in use reads some pages packed so as zeros (v0.32.0), and
		// damaged ones without bound.
		return errors.New("it is packed with LZ4, which is not read; hint: write it with Snappy or Zstandard")
	}
	return fmt.Errorf("it is packed with %s, which is not read; hint: write it with Snappy or Zstandard", c)
}

// bodies checks that pages expand to what their headers say, no more: the
// library makes room for whatever comes out.
type bodies struct {
	gz *gzip.Reader
	zs *zstd.Decoder
	br *brotli.Reader
}

func (b *bodies) close() {
	if b.zs != nil {
		b.zs.Close()
	}
}

// check runs over the stored bytes of a page.
func (b *bodies) check(c format.CompressionCodec, r io.ReaderAt, at, stored, expanded int64) error {
	if c == format.Uncompressed {
		if stored != expanded {
			return fmt.Errorf("an unpacked page of %d bytes says it has %d: %w", stored, expanded, errCut)
		}
		return nil
	}
	src := bufio.NewReader(io.NewSectionReader(r, at, stored))
	if c == format.Snappy {
		if n, err := binary.ReadUvarint(src); err != nil || int64(n) != expanded {
			return fmt.Errorf("a page says it expands to %d bytes and to %d: %w", expanded, n, errCut)
		}
		return nil
	}
	z, err := b.reader(c, src)
	if err != nil {
		return fmt.Errorf("damaged page: %w", err)
	}
	n, err := io.Copy(io.Discard, io.LimitReader(z, expanded+1))
	switch {
	case err != nil:
		return fmt.Errorf("damaged page: %w", err)
	case n != expanded:
		return fmt.Errorf("a page does not expand to the %d bytes its header says: %w", expanded, errCut)
	}
	return nil
}

// windowMost bounds the memory that unpacking a page may ask for.
const windowMost = 128 << 20

func (b *bodies) reader(c format.CompressionCodec, src io.Reader) (z io.Reader, err error) {
	switch c {
	case format.Gzip:
		if b.gz == nil {
			b.gz, err = gzip.NewReader(src)
			return b.gz, err
		}
		return b.gz, b.gz.Reset(src)
	case format.Zstd:
		if b.zs == nil {
			b.zs, err = zstd.NewReader(src, zstd.WithDecoderConcurrency(1), zstd.WithDecoderLowmem(true), zstd.WithDecoderMaxWindow(windowMost))
			return b.zs, err
		}
		return b.zs, b.zs.Reset(src)
	}
	if b.br == nil {
		b.br = brotli.NewReader(src)
		return b.br, nil
	}
	return b.br, b.br.Reset(src)
}
