// Package logfile finds the files of a log and opens them: plain, gzip, or
// members of a zip archive, told apart by their first bytes and not by their
// names. It keeps the checksum of what it read.
package logfile

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"sort"
	"strings"
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
