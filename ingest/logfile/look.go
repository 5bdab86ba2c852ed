package logfile

import (
	"archive/tar"
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"path"
	"path/filepath"
	"sort"
	"strings"
)

const (
	// headSize is how much of a file is looked at; the mark of a tar archive
	// stands at byte 257.
	headSize = 512
	// layersMost bounds how deep files may be packed in one another.
	layersMost = 6
	// MembersMost bounds the members of one archive.
	MembersMost = 50_000
)

// open looks at one file on disk and lists what is in it.
func open(dir, p string) ([]*File, []Failure) {
	f := &File{Name: rel(dir, p), Base: filepath.Base(p), disk: p}
	st, err := os.Stat(p)
	if err == nil && !st.Mode().IsRegular() {
		err = errors.New("not a regular file")
	}
	if err == nil {
		var fh *os.File
		if fh, err = os.Open(p); err == nil {
			fh.Close()
		}
	}
	if err != nil {
		return nil, []Failure{{f.Name, plainErr(err)}}
	}
	return f.look()
}

// look says what a file is, and lists the members of an archive.
func (f *File) look() ([]*File, []Failure) {
	r, err := f.Open(false)
	if err != nil { // comes again when it is read, and is told then
		return []*File{f}, nil
	}
	head := make([]byte, headSize)
	n, err := io.ReadFull(r, head)
	r.Close()
	if err != nil && err != io.EOF && err != io.ErrUnexpectedEOF {
		return []*File{f}, nil
	}
	return f.lookAt(head[:n])
}

// lookAt is look with the first bytes at hand.
func (f *File) lookAt(head []byte) ([]*File, []Failure) {
	how, packed := packing(head)
	if !packed {
		f.Kind, f.What = sniff(head)
		return []*File{f}, nil
	}
	if len(f.layers) == layersMost {
		return nil, []Failure{{f.Name, fmt.Errorf("packed more than %d times over; hint: unpack it", layersMost)}}
	}
	switch how {
	case inZip:
		return f.zipped()
	case inTar:
		return f.tarred()
	}
	g := *f
	g.layers = append(append([]layer{}, f.layers...), layer{how: how})
	return g.look()
}

// packing tells packed files and archives by their first bytes.
func packing(b []byte) (how packed, ok bool) {
	switch {
	case bytes.HasPrefix(b, []byte("\x1f\x8b")):
		return gzipped, true
	case bytes.HasPrefix(b, []byte("\x28\xb5\x2f\xfd")), len(b) >= 8 && b[0]&0xf0 == 0x50 && bytes.Equal(b[1:4], []byte("\x2a\x4d\x18")):
		return zstandard, true
	case bytes.HasPrefix(b, []byte("PK\x03\x04")), bytes.HasPrefix(b, []byte("PK\x05\x06")):
		return inZip, true
	case len(b) >= 262 && string(b[257:262]) == "ustar":
		return inTar, true
	}
	return 0, false
}

// sniff tells kinds of file by their first bytes.
func sniff(b []byte) (Kind, string) {
	for _, m := range []struct{ magic, what string }{
		{"%PDF", "a PDF document"}, {"\x89PNG", "an image"}, {"\xff\xd8\xff", "an image"}, {"GIF8", "an image"},
		{"\xd0\xcf\x11\xe0", "an old XLS workbook or one with a password; save it as XLSX without a password, or as CSV"},
		{"BZh", "a bzip2 archive; unpack it first"}, {"7z\xbc\xaf", "a 7z archive; unpack it first"},
		{"\xfd7zXZ", "an xz archive; unpack it first"}, {"Rar!", "a RAR archive; unpack it first"},
		{"SQLite f", "a SQLite database"}, {"PARE", "an encrypted Parquet file"},
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

// member makes the file of an archive's member.
func (f *File) member(l layer, sum *archiveSum) *File {
	return &File{Name: f.Name + "/" + l.name, Base: path.Base(strings.ReplaceAll(l.name, `\`, "/")), disk: f.disk,
		layers: append(append([]layer{}, f.layers...), l), sum: sum}
}

// sumOfAll is the checksum that the members of an archive share.
func (f *File) sumOfAll() *archiveSum {
	if f.sum != nil {
		return f.sum // of the archive around it
	}
	return &archiveSum{path: f.disk}
}

// noLog reports members that file systems add for themselves.
func noLog(name string) bool {
	base := path.Base(strings.ReplaceAll(name, `\`, "/"))
	return strings.HasPrefix(base, ".") || strings.HasPrefix(name, "__MACOSX/")
}

// zipped lists the members of a zip archive; a workbook is one too.
func (f *File) zipped() (files []*File, bad []Failure) {
	failed := func(err error) ([]*File, []Failure) { return nil, []Failure{{f.Name, err}} }
	at, err := f.Random()
	if err != nil {
		return failed(cause(err))
	}
	defer at.Close()
	z, err := zip.NewReader(at, at.Size)
	if err != nil {
		return failed(fmt.Errorf("damaged zip archive: %w", err))
	}
	if len(z.File) > MembersMost {
		return failed(fmt.Errorf("the archive holds %d members, more than %d; hint: unpack it", len(z.File), MembersMost))
	}
	for _, m := range z.File {
		if m.Name == "[Content_Types].xml" || m.Name == "xl/workbook.xml" {
			f.Kind = Workbook
			return []*File{f}, nil
		}
	}
	sum := f.sumOfAll()
	for i, m := range z.File {
		if m.FileInfo().IsDir() || noLog(m.Name) {
			continue
		}
		g := f.member(layer{inZip, m.Name, i}, sum)
		if m.Flags&1 != 0 {
			bad = append(bad, Failure{g.Name, errors.New("the member is encrypted; hint: unpack it with its password")})
			continue
		}
		var head []byte
		if r, err := m.Open(); err == nil {
			head = make([]byte, headSize)
			n, _ := io.ReadFull(r, head)
			head = head[:n]
			r.Close()
		}
		if len(head) == 0 && m.UncompressedSize64 > 0 { // damaged: told when it is read
			files = append(files, g)
			continue
		}
		fs, fb := g.lookAt(head)
		files, bad = append(files, fs...), append(bad, fb...)
	}
	sort.Slice(files, func(i, j int) bool { return files[i].Name < files[j].Name })
	return files, bad
}

// tarred lists the members of a tar archive.
func (f *File) tarred() (files []*File, bad []Failure) {
	r, err := f.Open(false)
	if err != nil {
		return nil, []Failure{{f.Name, cause(err)}}
	}
	defer r.Close()
	t := tar.NewReader(r)
	sum := f.sumOfAll()
	for i := 0; ; i++ {
		h, err := t.Next()
		if err == io.EOF {
			break
		}
		if err == nil && i >= MembersMost {
			err = fmt.Errorf("the archive holds more than %d members; hint: unpack it", MembersMost)
		} else if err != nil {
			err = fmt.Errorf("damaged tar archive: %w", cause(err))
		}
		if err != nil {
			bad = append(bad, Failure{f.Name, err})
			break
		}
		if h.Typeflag != tar.TypeReg || noLog(h.Name) {
			continue
		}
		g := f.member(layer{inTar, h.Name, i}, sum)
		head := make([]byte, headSize)
		n, _ := io.ReadFull(t, head)
		fs, fb := g.lookAt(head[:n])
		files, bad = append(files, fs...), append(bad, fb...)
	}
	sort.Slice(files, func(i, j int) bool { return files[i].Name < files[j].Name })
	return files, bad
}

// cause is the error below a Failure.
func cause(err error) error {
	var f Failure
	if errors.As(err, &f) {
		return f.Err
	}
	return err
}
