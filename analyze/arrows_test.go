package analyze

import (
	"os/exec"
	"strings"
	"testing"
)

// TestArrows holds the direction of imports: a folder imports only folders to
// its left, and analyze sees of ingest nothing but the grid.
func TestArrows(t *testing.T) {
	order := []string{"sashlog/internal/physics", "sashlog/configs", "sashlog/ingest", "sashlog/analyze", "sashlog/report", "sashlog/cmd", "sashlog/bench"}
	rank := func(path string) int {
		for i, prefix := range order {
			if path == prefix || strings.HasPrefix(path, prefix+"/") {
				return i
			}
		}
		return -1
	}
	out, err := exec.Command("go", "list", "-f", "{{.ImportPath}} {{join .Imports \" \"}}", "sashlog/...").Output()
	if err != nil {
		t.Fatal(err)
	}
	packages := 0
	for line := range strings.Lines(string(out)) {
		fields := strings.Fields(line)
		from := fields[0]
		if rank(from) < 0 {
			t.Errorf("%s lies in no folder of the pipeline", from)
		}
		packages++
		for _, to := range fields[1:] {
			if !strings.HasPrefix(to, "sashlog/") {
				continue
			}
			if rank(to) > rank(from) {
				t.Errorf("%s imports %s, to its right", from, to)
			}
			if rank(from) == 3 && rank(to) == 2 && to != "sashlog/ingest/grid" {
				t.Errorf("%s imports %s; of ingest, analyze sees only the grid", from, to)
			}
			if rank(from) == 3 && to == "sashlog/configs" {
				t.Errorf("%s imports %s, which reads files; analyze takes the site and the criteria", from, to)
			}
		}
	}
	if packages < 20 {
		t.Errorf("only %d packages listed", packages)
	}
}
