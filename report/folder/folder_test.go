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
