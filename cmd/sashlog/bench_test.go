package main

import (
	"io"
	"path/filepath"
	"testing"
	"time"

	"sashlog/ingest/demo"
)

// BenchmarkAudit audits the demo building's year: read, check, analyse, write
// every output.
func BenchmarkAudit(b *testing.B) {
	dir := b.TempDir()
	if _, err := demo.Write(dir, demo.Defaults()); err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		code := run([]string{"audit", filepath.Join(dir, "site.yaml"), "--into", filepath.Join(dir, "out"), "--quiet"},
			process{stdout: io.Discard, stderr: io.Discard, env: func(string) string { return "" }, now: time.Now})
		if code != exitDone {
			b.Fatalf("exit code %d", code)
		}
	}
}
