package logfile

import (
	"archive/tar"
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"

	"github.com/klauspost/compress/gzip"
	"github.com/klauspost/compress/zstd"
)

// Bounds of what packed inputs may expand to, so that a damaged or hostile file
// ends with a message and not with a full machine. Trend logs pack 5 to 30
// times, nearly empty ones a hundred times.
const (
	// MaxExpanded bounds one member.
	MaxExpanded = 64 << 30
	// MaxRatio bounds how many times its stored size a member may expand to,
	// beyond the first FreeExpanded bytes.
	MaxRatio     = 500
	FreeExpanded = 64 << 20
	// MaxSpilled bounds what is written to the temporary folder for a packed
	// workbook, Parquet file or inner archive.
	MaxSpilled = 8 << 30
	// heldMost is what is kept in memory instead.
	heldMost = 32 << 20
	// windowMost bounds the memory a Zstandard frame may ask for.
	windowMost = 128 << 20
)

// packed is one way of being packed.
type packed uint8

const (
	gzipped packed = iota + 1
	zstandard
	inZip
	inTar
)

// layer is one step from stored bytes to expanded ones.
type layer struct {
	how  packed
	name string // of the member
	nth  int    // its place in the archive
}

// limited ends with an error, not silently, when too much has been read.
type limited struct {
	r      io.Reader
	stored func() int64 // stored bytes read so far
	n      int64
	most   int64
	free   int64
}

func (l *limited) Read(p []byte) (int, error) {
	n, err := l.r.Read(p)
	l.n += int64(n)
	switch {
	case l.n > l.most:
		return 0, fmt.Errorf("expands to more than %d GiB, the most that is read of one packed file; hint: unpack and look at it", l.most>>30)
	case l.n > l.free && l.n-l.free > MaxRatio*l.stored():
		return 0, fmt.Errorf("expands to more than %d times its stored size, which no log does; hint: unpack and look at it", MaxRatio)
	}
	return n, err
}

// expand opens what the layers hold. fh is the file on disk, src the same bytes
// with a count.
func (r *Reader) expand(fh *os.File, src *counter, layers []layer) (io.Reader, error) {
	st, err := fh.Stat()
	if err != nil {
		return nil, plainErr(err)
	}
	var cur io.Reader = src
	var at io.ReaderAt = fh // nil when only a stream is at hand
	size := st.Size()
	var stored func() int64 // of the outermost packed bytes
	for _, l := range layers {
		var next io.Reader
		switch l.how {
		case gzipped:
			z, err := gzip.NewReader(cur)
			if err != nil {
				return nil, fmt.Errorf("damaged gzip data: %w", cause(err))
			}
			next = z
		case zstandard:
			z, err := zstd.NewReader(cur, zstd.WithDecoderConcurrency(1), zstd.WithDecoderLowmem(true), zstd.WithDecoderMaxWindow(windowMost))
			if err != nil {
				return nil, fmt.Errorf("damaged Zstandard data: %w", cause(err))
			}
			r.close = append(r.close, z.IOReadCloser())
			next = z
		case inTar:
			t := tar.NewReader(cur)
			for i := 0; i <= l.nth; i++ {
				h, err := t.Next()
				if err != nil {
					return nil, fmt.Errorf("damaged tar archive: %w", cause(err))
				}
				if i == l.nth && h.Name != l.name {
					return nil, errors.New("the archive has changed: the member is gone")
				}
			}
			cur, at = t, nil
			continue
		case inZip:
			if at == nil {
				s, err := spill(cur)
				if err != nil {
					return nil, cause(err)
				}
				r.close = append(r.close, s)
				at, size = s, s.Size
			}
			z, err := zip.NewReader(at, size)
			if err != nil {
				return nil, fmt.Errorf("damaged zip archive: %w", err)
			}
			if l.nth >= len(z.File) || z.File[l.nth].Name != l.name {
				return nil, errors.New("the archive has changed: the member is gone")
			}
			m, err := z.File[l.nth].Open()
			if err != nil {
				return nil, fmt.Errorf("damaged zip archive: %w", err)
			}
			r.close = append(r.close, m)
			next = m
			if stored == nil {
				n := int64(z.File[l.nth].CompressedSize64)
				stored = func() int64 { return n }
			}
		}
		if stored == nil {
			c := src
			stored = func() int64 { return c.n }
		}
		cur, at = &limited{r: next, stored: stored, most: MaxExpanded, free: FreeExpanded}, nil
	}
	return cur, nil
}

// Random is a file whose expanded bytes can be read at any place.
type Random struct {
	io.ReaderAt
	Size  int64
	close func() error
}

// Close closes the file; a temporary copy is removed.
func (r *Random) Close() error { return r.close() }

// Random opens the file for reading at any place. A packed one is expanded
// into memory, or into a temporary file when it is large. Every call does so
// anew.
func (f *File) Random() (*Random, error) {
	if len(f.layers) == 0 {
		fh, err := os.Open(f.disk)
		if err != nil {
			return nil, Failure{f.Name, plainErr(err)}
		}
		st, err := fh.Stat()
		if err != nil {
			fh.Close()
			return nil, Failure{f.Name, plainErr(err)}
		}
		return &Random{fh, st.Size(), fh.Close}, nil
	}
	r, err := f.Open(false)
	if err != nil {
		return nil, err
	}
	defer r.Close()
	s, err := spill(r)
	if err != nil {
		return nil, Failure{f.Name, cause(err)}
	}
	return s, nil
}

// spill reads everything and keeps it for reading at any place.
func spill(r io.Reader) (*Random, error) {
	var held bytes.Buffer
	n, err := io.CopyN(&held, r, heldMost)
	if err == io.EOF {
		b := held.Bytes()
		return &Random{bytes.NewReader(b), int64(len(b)), func() error { return nil }}, nil
	}
	if err != nil {
		return nil, err
	}
	fh, err := os.CreateTemp("", "sashlog-*")
	if err != nil {
		return nil, plainErr(err)
	}
	remove := func() error {
		fh.Close()
		return os.Remove(fh.Name())
	}
	more := int64(0)
	if _, err = fh.Write(held.Bytes()); err == nil {
		more, err = io.CopyN(fh, r, MaxSpilled-n)
	}
	switch err {
	case io.EOF:
		return &Random{fh, n + more, remove}, nil
	case nil:
		err = fmt.Errorf("expands to more than %d GiB, the most that is kept on disk of one packed file; hint: unpack it", MaxSpilled>>30)
	}
	remove()
	return nil, plainErr(err)
}
