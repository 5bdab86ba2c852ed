package pdf

import (
	"bytes"
	"context"
	"errors"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

func chromium(t *testing.T) string {
	t.Helper()
	path, err := Find(func(string) string { return "" })
	if err != nil {
		if os.Getenv("SASHLOG_REQUIRE_TOOLS") == "1" {
			t.Fatal(err)
		}
		t.Skip("no browser is installed: printing is not tested (Debian: apt-get install chromium)")
	}
	return path
}

func TestPrint(t *testing.T) {
	browser := chromium(t)
	var b bytes.Buffer
	doc := func(w io.Writer) error {
		_, err := io.WriteString(w, "<!DOCTYPE html><html lang=en><title>T</title><h1>First</h1><p>one</p><h2>Second</h2><p>two</p>")
		return err
	}
	if err := Print(context.Background(), browser, doc, &b); err != nil {
		t.Fatal(err)
	}
	if !bytes.HasPrefix(b.Bytes(), []byte("%PDF-")) {
		t.Fatalf("no PDF: %.20q", b.String())
	}
	if _, err := exec.LookPath("pdfinfo"); err != nil {
		return
	}
	file := filepath.Join(t.TempDir(), "x.pdf")
	if err := os.WriteFile(file, b.Bytes(), 0o600); err != nil {
		t.Fatal(err)
	}
	info, err := exec.Command("pdfinfo", file).CombinedOutput()
	if err != nil || !strings.Contains(string(info), "Tagged:          yes") {
		t.Errorf("not tagged: %v %s", err, info)
	}
	if !bytes.Contains(b.Bytes(), []byte("/Outlines")) {
		t.Error("no outline")
	}
}

func TestNoBrowser(t *testing.T) {
	_, err := Find(func(string) string { return filepath.Join(t.TempDir(), "nothing") })
	if !errors.Is(err, ErrNoBrowser) || !strings.Contains(err.Error(), Variable) {
		t.Errorf("%v", err)
	}
}

// A browser that fails, or prints nothing, is an error that says so.
func TestBrowserFails(t *testing.T) {
	for _, name := range []string{"false", "true"} {
		path, err := exec.LookPath(name)
		if err != nil {
			t.Skip(err)
		}
		var b bytes.Buffer
		if err := Print(context.Background(), path, func(io.Writer) error { return nil }, &b); err == nil || b.Len() > 0 {
			t.Errorf("%s: %v, %d bytes", name, err, b.Len())
		}
	}
	boom := errors.New("boom")
	if err := Print(context.Background(), "true", func(io.Writer) error { return boom }, io.Discard); !errors.Is(err, boom) {
		t.Errorf("got %v", err)
	}
}
