package main

import (
	"io"
	"os"
	"path/filepath"
	"testing"
	"time"

	"sashlog/ingest/demo"
)

// BenchmarkAudit audits the demo building's year, or the site file that
// SASHLOG_BENCH_SITE names: read, check, analyse, write every output.
func BenchmarkAudit(b *testing.B) {
	dir := b.TempDir()
	file := os.Getenv("SASHLOG_BENCH_SITE")
	if file == "" {
		file = filepath.Join(dir, "site.yaml")
		if _, err := demo.Write(dir, demo.Defaults()); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportAllocs()
	for b.Loop() {
		code := run([]string{"audit", file, "--into", filepath.Join(dir, "out"), "--quiet"},
			process{stdout: io.Discard, stderr: io.Discard, env: func(string) string { return "" }, now: time.Now})
		if code != exitDone {
			b.Fatalf("exit code %d", code)
		}
	}
}
