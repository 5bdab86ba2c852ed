package logfile

import (
	"archive/zip"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"hash"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"sync"

	"github.com/klauspost/compress/gzip"
	"github.com/klauspost/compress/zstd"
)

// Reader reads the expanded bytes of a file and sums the bytes as stored.
type Reader struct {
	io.Reader
	close []io.Closer
	count *counter
	file  *File
}

// counter hashes and counts what passes through.
type counter struct {
	r io.Reader
	h hash.Hash
	n int64
}

func (c *counter) Read(p []byte) (int, error) {
	n, err := c.r.Read(p)
	c.n += int64(n)
	if c.h != nil {
		c.h.Write(p[:n])
	}
	return n, err
}

// Open opens the file for reading, expanding it when it is packed. sum asks
// for the checksum of the stored bytes.
func (f *File) Open(sum bool) (*Reader, error) {
	fh, err := os.Open(f.disk)
	if err != nil {
		return nil, Failure{f.Name, plainErr(err)}
	}
	r := &Reader{close: []io.Closer{fh}, file: f, count: &counter{r: fh}}
	if sum && f.sum == nil {
		r.count.h = sha256.New()
	}
	src, err := r.expand(fh, r.count, f.layers)
	if err != nil {
		r.Close()
		return nil, Failure{f.Name, plainWords(err)}
	}
	r.Reader = &named{src, f.Name}
	return r, nil
}

// Close closes the file.
func (r *Reader) Close() error {
	var err error
	for i := len(r.close) - 1; i >= 0; i-- {
		if e := r.close[i].Close(); e != nil && err == nil {
			err = e
		}
	}
	return err
}

// Bytes is the number of stored bytes read so far.
func (r *Reader) Bytes() int64 { return r.count.n }

// Sum finishes the stored bytes and returns their number and SHA-256 in
// hexadecimal. For a member of an archive both are the archive's.
func (r *Reader) Sum() (n int64, sha string, err error) {
	if r.file.sum != nil {
		return r.file.sum.get()
	}
	if r.count.h == nil {
		return r.count.n, "", nil
	}
	if _, err := io.Copy(io.Discard, r.count); err != nil {
		return 0, "", err
	}
	return r.count.n, hex.EncodeToString(r.count.h.Sum(nil)), nil
}

// Path is where the file lies on disk (the archive, for a member).
func (f *File) Path() string { return f.disk }

// archiveSum is the checksum of an archive, made once for all its members.
type archiveSum struct {
	path string
	once sync.Once
	n    int64
	sha  string
	err  error
}

func (a *archiveSum) get() (int64, string, error) {
	a.once.Do(func() { a.n, a.sha, a.err = SumFile(a.path) })
	return a.n, a.sha, a.err
}

// Sum returns the size and SHA-256 of the file as stored; for a member of an
// archive they are the archive's.
func (f *File) Sum() (n int64, sha string, err error) {
	if f.sum != nil {
		return f.sum.get()
	}
	return SumFile(f.disk)
}

// SumFile returns the size and SHA-256 of a file on disk.
func SumFile(p string) (int64, string, error) {
	fh, err := os.Open(p)
	if err != nil {
		return 0, "", plainErr(err)
	}
	defer fh.Close()
	h := sha256.New()
	n, err := io.Copy(h, fh)
	return n, hex.EncodeToString(h.Sum(nil)), err
}

// named adds the file's name to errors and plain words to the usual ones.
type named struct {
	r    io.Reader
	name string
}

func (r *named) Read(p []byte) (int, error) {
	n, err := r.r.Read(p)
	if err == nil || err == io.EOF {
		return n, err
	}
	return n, Failure{r.name, plainErr(plainWords(cause(err)))}
}

// plainWords says what damaged packed data mean.
func plainWords(err error) error {
	switch {
	case errors.Is(err, io.ErrUnexpectedEOF):
		return fmt.Errorf("the compressed data end too early (%w); hint: the file was cut off, copy it again", err)
	case errors.Is(err, gzip.ErrChecksum), errors.Is(err, zip.ErrChecksum), errors.Is(err, zstd.ErrCRCMismatch),
		errors.Is(err, zstd.ErrReservedBlockType), errors.Is(err, zstd.ErrMagicMismatch):
		return fmt.Errorf("the compressed data are damaged (%w); hint: copy the file again", err)
	case errors.Is(err, zstd.ErrWindowSizeExceeded), errors.Is(err, zstd.ErrDecoderSizeExceeded):
		return fmt.Errorf("the Zstandard data ask for more than %d MiB of memory; hint: pack it without a long window", windowMost>>20)
	}
	return err
}

// plainErr drops the path of this machine from an error of the file system.
func plainErr(err error) error {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err
	}
	return err
}

func rel(dir, p string) string {
	if r, err := filepath.Rel(dir, p); err == nil {
		return filepath.ToSlash(r)
	}
	return filepath.ToSlash(p)
}
