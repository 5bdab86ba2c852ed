package main

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"sashlog/ingest/demo"
)

// The demo replaces an earlier demo, all of it or nothing, and nothing else.
func TestDemoReplacesOnlyDemos(t *testing.T) {
	dir := t.TempDir()
	o := demo.Defaults()
	o.Days = 3
	write := func() error { return writeDemo(context.Background(), dir, o) }
	if err := write(); err != nil {
		t.Fatal(err)
	}
	first, err := os.ReadFile(filepath.Join(dir, "site.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	o.Seed = 2
	if err := write(); err != nil {
		t.Fatal(err)
	}
	second, err := os.ReadFile(filepath.Join(dir, "site.yaml"))
	if err != nil || string(first) == string(second) {
		t.Fatalf("the second demo did not replace the first: %v", err)
	}

	// Interrupted: the earlier one stays.
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	o.Seed = 3
	if err := writeDemo(ctx, dir, o); err == nil {
		t.Error("an interrupted demo is no error")
	}
	if now, _ := os.ReadFile(filepath.Join(dir, "site.yaml")); string(now) != string(second) {
		t.Error("an interrupted demo changed the earlier one")
	}

	// Somebody's own building stays.
	own := t.TempDir()
	if err := os.MkdirAll(filepath.Join(own, "logs"), 0o755); err != nil {
		t.Fatal(err)
	}
	mine := filepath.Join(own, "logs", "mine.csv")
	if err := os.WriteFile(mine, []byte("mine"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := writeDemo(context.Background(), own, o); err == nil || !strings.Contains(err.Error(), "not written by the demo") {
		t.Errorf("somebody's folder: %v", err)
	}
	if b, _ := os.ReadFile(mine); string(b) != "mine" {
		t.Error("somebody's log is gone")
	}
	left, _ := filepath.Glob(filepath.Join(own, ".demo*"))
	if more, _ := filepath.Glob(filepath.Join(dir, ".demo*")); len(left)+len(more) > 0 {
		t.Errorf("left over: %q %q", left, more)
	}
}
