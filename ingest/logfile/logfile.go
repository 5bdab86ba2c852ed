// Package logfile finds the files of a log and opens them: plain, gzip, or
// members of a zip archive, told apart by their first bytes and not by their
// names. It keeps the checksum of what it read.
package logfile

import (
	"archive/zip"
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"hash"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"sort"
	"strings"
	"sync"

	"github.com/klauspost/compress/gzip"
)

// MaxExpanded bounds what one compressed input may expand to, so that a
// damaged or hostile archive ends with a message and not with a full machine.
const MaxExpanded = 64 << 30

// Kind is what the first bytes say a file is.
type Kind uint8

// Kinds of file.
const (
	Text     Kind = iota // anything not recognised: delimited text, for all we know
	Workbook             // an XLSX workbook
	Parquet
	Empty
	Foreign // a known form that is no log: an image, a PDF, an old XLS workbook
)

// File is one input: a file on disk or a member of a zip archive.
type File struct {
	// Name is shown in messages: relative to the site file, with slashes; a
	// member follows its archive's name.
	Name string
	// Base is the base name a points table may use.
	Base string
	Kind Kind
	// What a foreign file is, in words.
	What string

	disk   string
	member string
	sum    *archiveSum // of the archive, for members
}

// Stem is the base name without its endings (.csv, .csv.gz, .txt).
func (f *File) Stem() string {
	s := f.Base
	for {
		switch ext := strings.ToLower(path.Ext(s)); ext {
		case ".gz", ".csv", ".txt", ".tsv", ".dat", ".log", ".xlsx", ".zip":
			s = s[:len(s)-len(ext)]
		default:
			return s
		}
	}
}

// Archive is the base name of the archive a member lies in, else empty.
func (f *File) Archive() string {
	if f.member == "" {
		return ""
	}
	return filepath.Base(f.disk)
}

// Failure is an input that could not be found or read.
type Failure struct {
	Name string
	Err  error
}

func (f Failure) Error() string { return f.Name + ": " + f.Err.Error() }

// Unwrap returns the cause.
func (f Failure) Unwrap() error { return f.Err }

// ErrNoFile says that a path or pattern matches nothing.
var ErrNoFile = errors.New("no file matches")

// Find lists the files a log's path names, in order of name: a file, a
// pattern with * and ?, a folder (its files, not those of folders below), or
// an archive (its members). Files that cannot be opened are failures beside
// the others.
func Find(dir, pattern string) ([]*File, []Failure) {
	full := filepath.FromSlash(pattern)
	if !filepath.IsAbs(full) {
		full = filepath.Join(dir, full)
	}
	var paths []string
	if _, err := os.Lstat(full); err == nil {
		paths = []string{full}
	} else if strings.ContainsAny(pattern, "*?[") {
		paths, _ = filepath.Glob(full)
	} else if !errors.Is(err, fs.ErrNotExist) {
		return nil, []Failure{{pattern, plainErr(err)}}
	}
	if len(paths) == 0 {
		return nil, []Failure{{pattern, ErrNoFile}}
	}
	sort.Strings(paths)
	var files []*File
	var bad []Failure
	for _, p := range paths {
		st, err := os.Stat(p)
		if err == nil && st.IsDir() {
			fs, fb := folder(dir, p)
			files, bad = append(files, fs...), append(bad, fb...)
			continue
		}
		fs, err := open(dir, p)
		if err != nil {
			bad = append(bad, Failure{rel(dir, p), plainErr(err)})
			continue
		}
		files = append(files, fs...)
	}
	if len(files) == 0 && len(bad) == 0 {
		bad = append(bad, Failure{pattern, ErrNoFile})
	}
	return files, bad
}

func folder(dir, p string) (files []*File, bad []Failure) {
	list, err := os.ReadDir(p)
	if err != nil {
		return nil, []Failure{{rel(dir, p), plainErr(err)}}
	}
	for _, e := range list {
		if e.IsDir() || strings.HasPrefix(e.Name(), ".") {
			continue
		}
		q := filepath.Join(p, e.Name())
		fs, err := open(dir, q)
		if err != nil {
			bad = append(bad, Failure{rel(dir, q), plainErr(err)})
			continue
		}
		files = append(files, fs...)
	}
	return files, bad
}

// open looks at one file on disk and lists what is in it.
func open(dir, p string) ([]*File, error) {
	st, err := os.Stat(p)
	if err != nil {
		return nil, err
	}
	if !st.Mode().IsRegular() {
		return nil, errors.New("not a regular file")
	}
	fh, err := os.Open(p)
	if err != nil {
		return nil, err
	}
	defer fh.Close()
	head := make([]byte, 8)
	n, err := io.ReadFull(fh, head)
	if err != nil && err != io.EOF && err != io.ErrUnexpectedEOF {
		return nil, err
	}
	f := &File{Name: rel(dir, p), Base: filepath.Base(p), disk: p}
	f.Kind, f.What = sniff(head[:n])
	if !bytes.HasPrefix(head[:n], []byte("PK\x03\x04")) {
		return []*File{f}, nil
	}
	z, err := zip.OpenReader(p)
	if err != nil {
		return nil, fmt.Errorf("damaged zip archive: %w", err)
	}
	defer z.Close()
	var members []*File
	sum := &archiveSum{path: p}
	for _, m := range z.File {
		if m.Name == "[Content_Types].xml" || m.Name == "xl/workbook.xml" {
			f.Kind = Workbook
			return []*File{f}, nil
		}
		base := path.Base(strings.ReplaceAll(m.Name, `\`, "/"))
		if m.FileInfo().IsDir() || strings.HasPrefix(base, ".") || strings.HasPrefix(m.Name, "__MACOSX/") {
			continue
		}
		g := &File{Name: f.Name + "/" + m.Name, Base: base, disk: p, member: m.Name, sum: sum}
		if m.UncompressedSize64 == 0 {
			g.Kind = Empty
		} else if r, err := m.Open(); err == nil {
			n, _ := io.ReadFull(r, head)
			r.Close()
			g.Kind, g.What = sniff(head[:n])
			if bytes.HasPrefix(head[:n], []byte("PK\x03\x04")) {
				g.Kind, g.What = Foreign, "an archive or workbook inside an archive; unpack it first"
			}
		}
		members = append(members, g)
	}
	sort.Slice(members, func(i, j int) bool { return members[i].Name < members[j].Name })
	return members, nil
}

// sniff tells kinds of file by their first bytes.
func sniff(b []byte) (Kind, string) {
	for _, m := range []struct{ magic, what string }{
		{"%PDF", "a PDF document"}, {"\x89PNG", "an image"}, {"\xff\xd8\xff", "an image"}, {"GIF8", "an image"},
		{"\xd0\xcf\x11\xe0", "an old XLS workbook; save it as XLSX or CSV"},
		{"\x28\xb5\x2f\xfd", "a Zstandard archive; unpack it first"},
		{"BZh", "a bzip2 archive; unpack it first"}, {"7z\xbc\xaf", "a 7z archive; unpack it first"},
		{"\xfd7zXZ", "an xz archive; unpack it first"}, {"Rar!", "a RAR archive; unpack it first"},
		{"SQLite f", "a SQLite database"},
	} {
		if bytes.HasPrefix(b, []byte(m.magic)) {
			return Foreign, m.what
		}
	}
	switch {
	case len(b) == 0:
		return Empty, ""
	case bytes.HasPrefix(b, []byte("PAR1")):
		return Parquet, ""
	}
	return Text, ""
}

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

// Open opens the file for reading, expanding it when it is compressed. sum
// asks for the checksum of the stored bytes.
func (f *File) Open(sum bool) (*Reader, error) {
	fh, err := os.Open(f.disk)
	if err != nil {
		return nil, Failure{f.Name, plainErr(err)}
	}
	r := &Reader{close: []io.Closer{fh}, file: f}
	var src io.Reader = fh
	capped := false
	if f.member != "" {
		st, err := fh.Stat()
		var z *zip.Reader
		if err == nil {
			z, err = zip.NewReader(fh, st.Size())
		}
		if err != nil {
			fh.Close()
			return nil, Failure{f.Name, fmt.Errorf("damaged zip archive: %w", err)}
		}
		m, err := member(z, f.member)
		if err != nil {
			fh.Close()
			return nil, Failure{f.Name, fmt.Errorf("damaged zip archive: %w", err)}
		}
		r.close = append(r.close, m)
		src, capped = m, true
	}
	r.count = &counter{r: src}
	if sum && f.member == "" {
		r.count.h = sha256.New()
	}
	src = r.count
	head := make([]byte, 2)
	n, err := io.ReadFull(src, head)
	if err != nil && err != io.EOF && err != io.ErrUnexpectedEOF {
		r.Close()
		return nil, Failure{f.Name, plainErr(err)}
	}
	src = io.MultiReader(bytes.NewReader(head[:n]), src)
	if n == 2 && head[0] == 0x1f && head[1] == 0x8b {
		z, err := gzip.NewReader(src)
		if err != nil {
			r.Close()
			return nil, Failure{f.Name, fmt.Errorf("damaged gzip data: %w", err)}
		}
		src, capped = z, true
	}
	if capped {
		src = &limited{src, MaxExpanded}
	}
	r.Reader = &named{src, f.Name}
	return r, nil
}

// member opens an archive's member by its exact name.
func member(z *zip.Reader, name string) (io.ReadCloser, error) {
	for _, m := range z.File {
		if m.Name == name {
			return m.Open()
		}
	}
	return nil, errors.New("the member is gone")
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

// limited ends with an error, not silently, when too much has been read.
type limited struct {
	r    io.Reader
	left int64
}

func (l *limited) Read(p []byte) (int, error) {
	if l.left <= 0 {
		return 0, fmt.Errorf("expands to more than %d GiB; hint: unpack and look at it", MaxExpanded>>30)
	}
	n, err := l.r.Read(p)
	l.left -= int64(n)
	return n, err
}

// named adds the file's name to errors and plain words to the usual ones.
type named struct {
	r    io.Reader
	name string
}

func (r *named) Read(p []byte) (int, error) {
	n, err := r.r.Read(p)
	switch {
	case err == nil || err == io.EOF:
		return n, err
	case errors.Is(err, io.ErrUnexpectedEOF):
		err = fmt.Errorf("the compressed data end too early (%w); hint: the file was cut off, copy it again", err)
	case errors.Is(err, gzip.ErrChecksum), errors.Is(err, zip.ErrChecksum):
		err = fmt.Errorf("the compressed data are damaged (%w); hint: copy the file again", err)
	}
	return n, Failure{r.name, plainErr(err)}
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
