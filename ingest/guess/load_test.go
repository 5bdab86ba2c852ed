package guess_test

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	_ "time/tzdata"

	"sashlog/configs"
	"sashlog/ingest/demo"
	"sashlog/ingest/guess"
	"sashlog/ingest/reading"
	"sashlog/ingest/sources"
)

// propose scans dir into a folder beside its files and writes the proposal.
func propose(t *testing.T, dir string) (into string, p *guess.Proposal) {
	t.Helper()
	into = t.TempDir()
	p, err := guess.Scan(context.Background(), guess.Options{Paths: []string{dir}, Into: into})
	if err != nil {
		t.Fatal(err)
	}
	var s, points bytes.Buffer
	if err := p.WriteSite(&s); err != nil {
		t.Fatal(err)
	}
	if err := p.WritePoints(&points); err != nil {
		t.Fatal(err)
	}
	for name, b := range map[string][]byte{"site.yaml": s.Bytes(), "points.csv": points.Bytes()} {
		if err := os.WriteFile(filepath.Join(into, name), b, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return into, p
}

var blanks = regexp.MustCompile(`(?m)^( *)(name: ""|time_zone: ""|times: \[\]|serves: \[\]|# date_order: dmy) .*TO FILL IN.*$`)

// fill does what a person would: every blank that the loader needs gets a value.
func fill(t *testing.T, into string, p *guess.Proposal) {
	t.Helper()
	at := filepath.Join(into, "site.yaml")
	raw, err := os.ReadFile(at)
	if err != nil {
		t.Fatal(err)
	}
	var zones []string
	for _, z := range p.Zones {
		zones = append(zones, fmt.Sprintf("%q", z.ID))
	}
	text := blanks.ReplaceAllStringFunc(string(raw), func(line string) string {
		lead := line[:len(line)-len(strings.TrimLeft(line, " "))]
		switch body := strings.TrimSpace(line); {
		case strings.HasPrefix(body, "name:"):
			return lead + "name: Somewhere"
		case strings.HasPrefix(body, "time_zone:"):
			return lead + "time_zone: Europe/Zurich"
		case strings.HasPrefix(body, "times:"):
			return lead + `times: [{days: mon-fri, from: "08:00", to: "18:00"}]`
		case strings.HasPrefix(body, "serves:"):
			return lead + "serves: [" + strings.Join(zones, ", ") + "]"
		}
		return lead + "date_order: dmy"
	})
	if err := os.WriteFile(at, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

// tally counts accepted and rejected readings by point.
type tally struct{ accepted, rejected []int }

func (c *tally) Reading(p int, _ int64, _ float64) { c.accepted[p]++ }
func (c *tally) Reject(p int, r reading.Reason, _ reading.Where, _ string) {
	if p >= 0 && r != reading.Missing {
		c.rejected[p]++
	}
}
func (c *tally) Issue(reading.Issue) {}

// loads checks that a proposal loads once its blanks are filled in, that every
// log it names can be read, and that every mapped column yields readings and
// next to no rejects.
func loads(t *testing.T, name, dir string) {
	t.Helper()
	into, p := propose(t, dir)
	if mapped, _ := p.Counts(); len(p.Zones) == 0 || mapped == 0 { // nothing to audit: the loader rightly asks for more
		return
	}
	if _, err := configs.Load(filepath.Join(into, "site.yaml"), func(string) string { return "" }); err == nil {
		t.Errorf("%s: the proposal loads with its blanks", name)
	}
	fill(t, into, p)
	loaded, err := configs.Load(filepath.Join(into, "site.yaml"), func(string) string { return "" })
	if err != nil {
		raw, _ := os.ReadFile(filepath.Join(into, "site.yaml"))
		t.Fatalf("%s: %v\n%s", name, err, raw)
	}
	s := loaded.Site
	mapped, _ := p.Counts()
	if len(s.Points) != mapped {
		t.Errorf("%s: %d points loaded, %d mapped", name, len(s.Points), mapped)
	}
	set, err := sources.Open(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	for _, pr := range set.Problems {
		if pr.Kind <= sources.NoColumn {
			t.Errorf("%s: %s: %s (%s)", name, pr.Where.File, pr.Text, pr.Hint)
		}
	}
	c := &tally{make([]int, len(s.Points)), make([]int, len(s.Points))}
	for _, src := range set.Sources {
		if err := src.Read(context.Background(), c); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	for i := range s.Points {
		if pt := &s.Points[i]; c.accepted[i] == 0 || c.rejected[i]*50 > c.accepted[i] {
			t.Errorf("%s: %s (%s): %d readings accepted, %d rejected", name, pt.ID(), pt.Quantity, c.accepted[i], c.rejected[i])
		}
	}
}

// TestProposalsLoad runs the loader and the readers on what a scan proposes.
func TestProposalsLoad(t *testing.T) {
	roots, err := filepath.Glob("../../testdata/guess/*/answers.csv")
	if err != nil || len(roots) == 0 {
		t.Fatalf("no answers found: %v", err)
	}
	for _, r := range roots {
		name := filepath.Base(filepath.Dir(r))
		loads(t, name, "../../testdata/real/"+name)
	}
	dir := t.TempDir()
	o := demo.Defaults()
	o.Days = 40
	if _, err := demo.Write(dir, o); err != nil {
		t.Fatal(err)
	}
	loads(t, "demo", dir)
	for i, h := range append(append(append(tuned(), second()...), third()...), heldOut()...) {
		dir := t.TempDir()
		h.write(t, dir, uint64(i+1))
		loads(t, h.name, dir)
	}
	for seed := range uint64(chances / 4) {
		h := anyHabit(seed + 1)
		dir := t.TempDir()
		h.write(t, dir, seed)
		loads(t, h.name, dir)
	}
}
