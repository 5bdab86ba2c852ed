package folder

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"testing"
)

func TestEarlierOutputsStay(t *testing.T) {
	dir := t.TempDir()
	old := filepath.Join(dir, "report.html")
	if err := os.WriteFile(old, []byte("old"), 0o644); err != nil {
		t.Fatal(err)
	}
	f, err := Open(dir)
	if err != nil {
		t.Fatal(err)
	}
	fail := errors.New("the disk is full")
	write := func(text string, err error) func(io.Writer) error {
		return func(w io.Writer) error { io.WriteString(w, text); return err }
	}
	if err := f.Write("results.json", write("{}", nil)); err != nil {
		t.Fatal(err)
	}
	if err := f.Write("report.html", write("half", fail)); !errors.Is(err, fail) {
		t.Fatalf("error %v, want %v", err, fail)
	}
	f.Discard()
	entries, _ := os.ReadDir(dir)
	if len(entries) != 1 {
		t.Errorf("left behind: %v", entries)
	}
	if got, _ := os.ReadFile(old); string(got) != "old" {
		t.Errorf("the earlier report became %q", got)
	}

	f, _ = Open(dir)
	if err := f.Write("report.html", write("new", nil)); err != nil {
		t.Fatal(err)
	}
	if got, _ := os.ReadFile(old); string(got) != "old" {
		t.Errorf("before Commit the report is %q", got)
	}
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	f.Discard()
	if got, _ := os.ReadFile(old); string(got) != "new" {
		t.Errorf("after Commit the report is %q", got)
	}
}

func TestFolderCannotBeMade(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	os.WriteFile(file, nil, 0o644)
	if _, err := Open(filepath.Join(file, "sub")); err == nil {
		t.Error("a folder below a file was opened")
	}
}

// Where one output cannot take its name, none does, and earlier files stand.
func TestAllOrNone(t *testing.T) {
	dir := t.TempDir()
	for name, text := range map[string]string{"a.csv": "old a", "c.csv": "old c"} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.MkdirAll(filepath.Join(dir, "b.csv", "kept"), 0o755); err != nil {
		t.Fatal(err)
	}
	f, err := Open(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"a.csv", "new.csv", "b.csv", "c.csv"} {
		if err := f.Write(name, func(w io.Writer) error { _, err := io.WriteString(w, "new"); return err }); err != nil {
			t.Fatal(err)
		}
	}
	if err := f.Commit(); err == nil {
		t.Fatal("a folder was replaced by a file")
	}
	f.Discard()
	entries, _ := os.ReadDir(dir)
	if len(entries) != 3 {
		t.Errorf("left: %v, want a.csv, b.csv and c.csv", entries)
	}
	for name, want := range map[string]string{"a.csv": "old a", "c.csv": "old c"} {
		if got, _ := os.ReadFile(filepath.Join(dir, name)); string(got) != want {
			t.Errorf("%s became %q", name, got)
		}
	}
	if _, err := os.Stat(filepath.Join(dir, "b.csv", "kept")); err != nil {
		t.Error(err)
	}
}
