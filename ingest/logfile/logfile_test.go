package logfile

import (
	"archive/zip"
	"bytes"
	"compress/gzip"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func put(t *testing.T, p string, b []byte) {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(p), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(p, b, 0o644); err != nil {
		t.Fatal(err)
	}
}

func gz(b []byte) []byte {
	var w bytes.Buffer
	z := gzip.NewWriter(&w)
	z.Write(b)
	z.Close()
	return w.Bytes()
}

func TestFindAndRead(t *testing.T) {
	dir := t.TempDir()
	text := []byte(strings.Repeat("time,a\n2025-01-01 00:00,1\n", 50000))
	put(t, filepath.Join(dir, "logs/a.csv"), text)
	put(t, filepath.Join(dir, "logs/b.csv"), gz(text)) // told by its bytes, not its name
	put(t, filepath.Join(dir, "logs/.hidden"), text)
	put(t, filepath.Join(dir, "logs/below/c.csv"), text)
	var zw bytes.Buffer
	z := zip.NewWriter(&zw)
	for _, n := range []string{"y/2.csv", "y/1.csv", "__MACOSX/1.csv"} {
		w, _ := z.Create(n)
		w.Write(text)
	}
	z.Close()
	put(t, filepath.Join(dir, "arc.zip"), zw.Bytes())

	for _, c := range []struct{ pattern, want string }{
		{"logs/a.csv", "logs/a.csv"},
		{"logs/*.csv", "logs/a.csv logs/b.csv"},
		{"logs/?.csv", "logs/a.csv logs/b.csv"},
		{"logs", "logs/a.csv logs/b.csv"},
		{"arc.zip", "arc.zip/y/1.csv arc.zip/y/2.csv"},
		{filepath.Join(dir, "logs", "a.csv"), "logs/a.csv"},
	} {
		files, bad := Find(dir, c.pattern)
		var names []string
		for _, f := range files {
			names = append(names, f.Name)
		}
		if got := strings.Join(names, " "); got != c.want || len(bad) > 0 {
			t.Errorf("%s: %s %v, want %s", c.pattern, got, bad, c.want)
		}
		for _, f := range files {
			r, err := f.Open(true)
			if err != nil {
				t.Fatal(err)
			}
			a := Ahead(context.Background(), r)
			got, err := io.ReadAll(a)
			a.Close()
			if err != nil || !bytes.Equal(got, text) {
				t.Errorf("%s: %d bytes, %v", f.Name, len(got), err)
			}
			n, sha, err := r.Sum()
			r.Close()
			raw, _ := os.ReadFile(f.Path())
			want := sha256.Sum256(raw)
			if err != nil || sha != hex.EncodeToString(want[:]) || n != int64(len(raw)) {
				t.Errorf("%s: sum %s of %d bytes, %v", f.Name, sha, n, err)
			}
		}
	}
}

// A pass that stops early still sums the whole file.
func TestSumOfAPassCutShort(t *testing.T) {
	dir := t.TempDir()
	raw := gz(bytes.Repeat([]byte("0123456789"), 100000))
	put(t, filepath.Join(dir, "a.gz"), raw)
	files, _ := Find(dir, "a.gz")
	r, err := files[0].Open(true)
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	io.ReadFull(r, make([]byte, 10))
	want := sha256.Sum256(raw)
	if n, sha, err := r.Sum(); err != nil || n != int64(len(raw)) || sha != hex.EncodeToString(want[:]) {
		t.Errorf("%d %s %v", n, sha, err)
	}
}

func TestFindRefuses(t *testing.T) {
	dir := t.TempDir()
	put(t, filepath.Join(dir, "empty/x"), nil)
	os.Remove(filepath.Join(dir, "empty/x"))
	for pattern, want := range map[string]string{"none.csv": "none.csv: no file matches", "n*.csv": "n*.csv: no file matches", "empty": "empty: no file matches"} {
		files, bad := Find(dir, pattern)
		if len(files) != 0 || len(bad) != 1 || bad[0].Error() != want || !errors.Is(bad[0], ErrNoFile) {
			t.Errorf("%s: %v %v", pattern, files, bad)
		}
	}
	if os.Getuid() == 0 {
		t.Skip("the super-user may read everything, so an unreadable folder cannot be made")
	}
	put(t, filepath.Join(dir, "shut/a.csv"), []byte("a,b\n"))
	os.Chmod(filepath.Join(dir, "shut"), 0)
	defer os.Chmod(filepath.Join(dir, "shut"), 0o755)
	if _, bad := Find(dir, "shut"); len(bad) != 1 || bad[0].Error() != "shut: permission denied" {
		t.Errorf("%v", bad)
	}
}

func TestKinds(t *testing.T) {
	dir := t.TempDir()
	for name, c := range map[string]struct {
		text string
		want Kind
	}{
		"a": {"time,a\n", Text}, "b": {"", Empty}, "c": {"PAR1xxxx", Parquet}, "d": {"%PDF-1.7", Foreign}, "e": {"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1", Foreign},
	} {
		put(t, filepath.Join(dir, name), []byte(c.text))
		if files, bad := Find(dir, name); len(bad) > 0 || files[0].Kind != c.want {
			t.Errorf("%s: %v %v", name, files, bad)
		}
	}
}

func TestStem(t *testing.T) {
	for base, want := range map[string]string{"Room_1.csv": "Room_1", "Room.1.csv.gz": "Room.1", "L1.02": "L1.02", "a.TXT": "a"} {
		if got := (&File{Base: base}).Stem(); got != want {
			t.Errorf("%s: %s, want %s", base, got, want)
		}
	}
}

func TestExpandedSizeIsBounded(t *testing.T) {
	l := &limited{r: strings.NewReader(strings.Repeat("x", 3<<10)), stored: func() int64 { return 1 << 40 }, most: 1 << 10, free: 1 << 30}
	if _, err := io.ReadAll(l); err == nil || !strings.Contains(err.Error(), "expands to more than 0 GiB") {
		t.Error(err)
	}
}
