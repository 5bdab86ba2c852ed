package logfile

import (
	"archive/tar"
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/klauspost/compress/zstd"
)

func zst(b []byte) []byte {
	var w bytes.Buffer
	z, _ := zstd.NewWriter(&w)
	z.Write(b)
	z.Close()
	return w.Bytes()
}

// member is a name and its bytes, in order.
type member struct {
	name string
	b    []byte
}

func zipOf(ms ...member) []byte {
	var w bytes.Buffer
	z := zip.NewWriter(&w)
	for _, m := range ms {
		f, _ := z.Create(m.name)
		f.Write(m.b)
	}
	z.Close()
	return w.Bytes()
}

func tarOf(ms ...member) []byte {
	var w bytes.Buffer
	z := tar.NewWriter(&w)
	z.WriteHeader(&tar.Header{Name: "logs/", Typeflag: tar.TypeDir, Mode: 0o755})
	for _, m := range ms {
		z.WriteHeader(&tar.Header{Name: m.name, Size: int64(len(m.b)), Mode: 0o644, Typeflag: tar.TypeReg})
		z.Write(m.b)
	}
	z.Close()
	return w.Bytes()
}

var text = []byte(strings.Repeat("time,a\n2025-01-01 00:00,1\n", 3000))

// Files packed in any way and in one another hold the same bytes.
func TestPacked(t *testing.T) {
	dir := t.TempDir()
	skippable := append([]byte("\x50\x2a\x4d\x18\x04\x00\x00\x00note"), zst(text)...)
	put(t, filepath.Join(dir, "heap/a.csv.gz"), gz(text))
	put(t, filepath.Join(dir, "heap/b.csv.zst"), zst(text))
	put(t, filepath.Join(dir, "heap/c.zip"), zipOf(member{"x/1.csv.gz", gz(text)}, member{"2.csv.zst", zst(text)},
		member{"inner.zip", zipOf(member{"3.csv", text}, member{"4.csv.gz", gz(text)})}, member{"5.tar", tarOf(member{"6.csv", text})}))
	put(t, filepath.Join(dir, "heap/d.tar.gz"), gz(tarOf(member{"logs/7.csv", text}, member{"logs/.DS_Store", nil}, member{"logs/8.csv.gz", gz(text)})))
	put(t, filepath.Join(dir, "heap/e.tar.zst"), zst(tarOf(member{"9.csv", text})))
	put(t, filepath.Join(dir, "heap/f.tar"), tarOf(member{"10.csv", text}))
	put(t, filepath.Join(dir, "heap/g.zst"), skippable)
	put(t, filepath.Join(dir, "heap/h.gz"), gz(gz(text)))
	files, bad := Find(dir, "heap")
	var names []string
	for _, f := range files {
		names = append(names, f.Name)
		for name, read := range map[string]func() ([]byte, error){
			"stream": func() ([]byte, error) {
				r, err := f.Open(true)
				if err != nil {
					return nil, err
				}
				defer r.Close()
				b, err := io.ReadAll(r)
				if n, sha, e := r.Sum(); e != nil || n == 0 || len(sha) != 64 {
					t.Errorf("%s: sum %q of %d bytes, %v", f.Name, sha, n, e)
				}
				return b, err
			},
			"random": func() ([]byte, error) {
				r, err := f.Random()
				if err != nil {
					return nil, err
				}
				defer r.Close()
				return io.ReadAll(io.NewSectionReader(r, 0, r.Size))
			},
		} {
			if got, err := read(); err != nil || !bytes.Equal(got, text) {
				t.Errorf("%s as a %s: %d bytes, %v", f.Name, name, len(got), err)
			}
		}
	}
	want := "heap/a.csv.gz heap/b.csv.zst heap/c.zip/2.csv.zst heap/c.zip/5.tar/6.csv heap/c.zip/inner.zip/3.csv heap/c.zip/inner.zip/4.csv.gz heap/c.zip/x/1.csv.gz " +
		"heap/d.tar.gz/logs/7.csv heap/d.tar.gz/logs/8.csv.gz heap/e.tar.zst/9.csv heap/f.tar/10.csv heap/g.zst heap/h.gz"
	if got := strings.Join(names, " "); got != want || len(bad) > 0 {
		t.Errorf("%s\nwant %s\n%v", got, want, bad)
	}
	for _, f := range files {
		stem, archive := "", ""
		switch f.Base {
		case "a.csv.gz":
			stem = "a"
		case "2.csv.zst":
			stem, archive = "2", "c.zip"
		case "3.csv":
			stem, archive = "3", "c.zip"
		case "9.csv":
			stem, archive = "9", "e.tar.zst"
		default:
			continue
		}
		if f.Stem() != stem || f.Archive() != archive {
			t.Errorf("%s: stem %q, archive %q", f.Name, f.Stem(), f.Archive())
		}
	}
}

// What is too large for memory goes into a temporary file, which is removed.
func TestSpilled(t *testing.T) {
	tmp := t.TempDir()
	t.Setenv("TMPDIR", tmp)
	r, err := spill(&zeros{heldMost + 5})
	if err != nil {
		t.Fatal(err)
	}
	if left, _ := os.ReadDir(tmp); r.Size != heldMost+5 || len(left) != 1 {
		t.Errorf("%d bytes, %d files", r.Size, len(left))
	}
	if n, err := r.ReadAt(make([]byte, 10), heldMost); n != 5 || err != io.EOF {
		t.Errorf("%d %v", n, err)
	}
	if err := r.Close(); err != nil {
		t.Error(err)
	}
	if left, _ := os.ReadDir(tmp); len(left) != 0 {
		t.Error("a temporary file is left")
	}
}

// zeros is a log of nothing, for what expands beyond all measure.
type zeros struct{ left int64 }

func (z *zeros) Read(p []byte) (int, error) {
	if z.left <= 0 {
		return 0, io.EOF
	}
	n := int64(len(p))
	if n > z.left {
		n = z.left
	}
	clear(p[:n])
	z.left -= n
	return int(n), nil
}

// What expands without end is stopped with the name of file and member.
func TestBombs(t *testing.T) {
	dir := t.TempDir()
	var w bytes.Buffer
	z, _ := zstd.NewWriter(&w)
	if _, err := io.Copy(z, &zeros{200 << 20}); err != nil {
		t.Fatal(err)
	}
	z.Close()
	bomb := w.Bytes()
	put(t, filepath.Join(dir, "a.csv.zst"), bomb)
	put(t, filepath.Join(dir, "b.zip"), zipOf(member{"in/c.csv.zst", bomb}))
	put(t, filepath.Join(dir, "d.gz"), gz(bomb))
	for pattern, name := range map[string]string{"a.csv.zst": "a.csv.zst", "b.zip": "b.zip/in/c.csv.zst", "d.gz": "d.gz"} {
		files, bad := Find(dir, pattern)
		if len(files) != 1 || len(bad) > 0 {
			t.Fatalf("%s: %v %v", pattern, files, bad)
		}
		r, err := files[0].Open(false)
		if err != nil {
			t.Fatal(err)
		}
		n, err := io.Copy(io.Discard, r)
		r.Close()
		want := name + ": expands to more than 500 times its stored size"
		if err == nil || !strings.HasPrefix(err.Error(), want) || n > FreeExpanded+MaxRatio*int64(len(bomb))+1<<20 {
			t.Errorf("%s: %d bytes, %v", pattern, n, err)
		}
		if _, err := files[0].Random(); err == nil || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("%s: %v", pattern, err)
		}
	}
	deep := text
	for range layersMost + 1 {
		deep = gz(deep)
	}
	put(t, filepath.Join(dir, "deep.gz"), deep)
	if files, bad := Find(dir, "deep.gz"); len(files) != 0 || len(bad) != 1 || bad[0].Error() != fmt.Sprintf("deep.gz: packed more than %d times over; hint: unpack it", layersMost) {
		t.Errorf("%v %v", files, bad)
	}
}

// Damaged data are told with file and member, and never end the program.
func TestDamaged(t *testing.T) {
	dir := t.TempDir()
	cut := func(b []byte) []byte { return b[:len(b)*2/3] }
	put(t, filepath.Join(dir, "a.zst"), cut(zst(text)))
	put(t, filepath.Join(dir, "b.zip"), zipOf(member{"m.gz", cut(gz(text))}))
	flipped := zst(text)
	flipped[len(flipped)-1] ^= 0xff
	put(t, filepath.Join(dir, "c.zst"), flipped)
	for pattern, want := range map[string]string{
		"a.zst": "a.zst: the compressed data end too early", "b.zip": "b.zip/m.gz: the compressed data end too early", "c.zst": "c.zst: the compressed data are damaged"} {
		files, bad := Find(dir, pattern)
		if len(files) != 1 || len(bad) > 0 {
			t.Fatalf("%s: %v %v", pattern, files, bad)
		}
		r, err := files[0].Open(false)
		if err == nil {
			_, err = io.Copy(io.Discard, r)
			r.Close()
		}
		if err == nil || !strings.HasPrefix(err.Error(), want) {
			t.Errorf("%s: %v", pattern, err)
		}
	}
	put(t, filepath.Join(dir, "t.tar"), tarOf(member{"a.csv", text})[:2000])
	if files, bad := Find(dir, "t.tar"); len(files) != 1 || len(bad) != 1 || !strings.HasPrefix(bad[0].Error(), "t.tar: damaged tar archive") {
		t.Errorf("%v %v", files, bad)
	}
}

// FuzzLook packs and unpacks anything: no panic, no boundless reading.
func FuzzLook(f *testing.F) {
	small := []byte("time,a\n2025-01-01 00:00,1\n")
	for _, b := range [][]byte{small, gz(small), zst(small), zipOf(member{"a.csv", small}, member{"b.gz", gz(small)}),
		tarOf(member{"a.csv", small}), gz(tarOf(member{"a", zst(small)})), zipOf(member{"i.zip", zipOf(member{"a", small})})} {
		f.Add(b)
	}
	dir := f.TempDir()
	f.Fuzz(func(t *testing.T, b []byte) {
		p := filepath.Join(dir, "x")
		if err := os.WriteFile(p, b, 0o644); err != nil {
			t.Fatal(err)
		}
		files, bad := Find(dir, "x")
		if len(files)+len(bad) == 0 && !bytes.HasPrefix(b, []byte("PK")) && !(len(b) >= 262 && string(b[257:262]) == "ustar") {
			if _, packed := packing(b); !packed {
				t.Error("neither a file nor a failure")
			}
		}
		for _, file := range files {
			r, err := file.Open(true)
			if err != nil {
				continue
			}
			n, _ := io.Copy(io.Discard, io.LimitReader(r, 256<<20))
			r.Close()
			if n > FreeExpanded+MaxRatio*int64(len(b))+1<<20 {
				t.Errorf("%d bytes of %d", n, len(b))
			}
		}
	})
}
