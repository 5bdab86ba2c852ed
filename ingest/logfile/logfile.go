// Package logfile finds the files of a log and opens them: plain, packed with
// gzip or Zstandard, members of zip and tar archives, and these in one another,
// told apart by their first bytes and not by their names. What they expand to
// is bounded. It keeps the checksum of what it read.
package logfile

import (
	"errors"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"sort"
	"strings"
)

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

// File is one input: a file on disk or a member of an archive.
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
	layers []layer     // from the bytes on disk to these
	sum    *archiveSum // of the archive on disk, for members
}

// Unpacked is the base name without the endings of packed files (.gz, .zst).
func (f *File) Unpacked() string {
	s := f.Base
	for {
		switch ext := strings.ToLower(path.Ext(s)); ext {
		case ".gz", ".zst":
			s = s[:len(s)-len(ext)]
		default:
			return s
		}
	}
}

// Stem is the base name without its endings (.csv, .csv.gz, .txt).
func (f *File) Stem() string {
	s := f.Base
	for {
		switch ext := strings.ToLower(path.Ext(s)); ext {
		case ".gz", ".zst", ".csv", ".txt", ".tsv", ".dat", ".log", ".xlsx", ".zip", ".tar", ".tgz", ".parquet":
			s = s[:len(s)-len(ext)]
		default:
			return s
		}
	}
}

// Archive is the base name of the archive a member lies in, else empty.
func (f *File) Archive() string {
	if f.sum == nil {
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
		fs, fb := open(dir, p)
		files, bad = append(files, fs...), append(bad, fb...)
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
		fs, fb := open(dir, q)
		files, bad = append(files, fs...), append(bad, fb...)
	}
	return files, bad
}
