package published

import (
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"sashlog/analyze"
	"sashlog/analyze/method"
	"sashlog/configs/criteria"
)

var update = flag.Bool("update", false, "write the table anew")

// How an expected value is known.
const (
	printed    = "printed"           // in the publication, as a public text gives it
	recomputed = "recomputed"        // from the published equations, by hand or with an independent library
	arithmetic = "arithmetic"        // on a published equation: it tests the program, not the method
	memory     = "from memory"       // to be checked against the publication
	reference  = "reference tool"    // a general library's answer to the same question
	misprint   = "printed, in doubt" // the publication contradicts itself
)

// check is one value held against the program's.
type check struct {
	what           string
	expected, ours float64
	within         float64
	known          string
}

// group is the checks of one source.
type group struct {
	area, source string
	checks       []check
}

func (g *group) add(known string, within, expected, ours float64, what string, a ...any) {
	g.checks = append(g.checks, check{fmt.Sprintf(what, a...), expected, ours, within, known})
}

func groups() []group {
	var out []group
	for _, f := range []func() []group{comfortChecks, adaptiveChecks, longTermChecks, moistAirChecks, freshAirChecks, climateChecks, openingChecks, windAndSunChecks, voteChecks} {
		out = append(out, f()...)
	}
	return out
}

const table = "../../docs/published-checks.md"

// Every value lies within its tolerance, and the table on disk says what the
// program says now.
func TestPublishedChecks(t *testing.T) {
	all := groups()
	n := 0
	for _, g := range all {
		for _, c := range g.checks {
			n++
			if !(math.Abs(c.ours-c.expected) <= c.within*(1+1e-9)) {
				t.Errorf("%s: %s is %g, expected %g within %g", g.source, c.what, c.ours, c.expected, c.within)
			}
		}
	}
	if n < 400 {
		t.Errorf("only %d checks", n)
	}
	text := write(all)
	if *update {
		if err := os.MkdirAll(filepath.Dir(table), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(table, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	disk, err := os.ReadFile(table)
	if err != nil {
		t.Fatal(err)
	}
	if got := strings.ReplaceAll(string(disk), "\r\n", "\n"); got != text {
		t.Errorf("%s does not say what the program says; go test ./analyze/published -update, then read the difference\n%s", table, firstDifference(got, text))
	}
}

func firstDifference(a, b string) string {
	x, y := strings.Split(a, "\n"), strings.Split(b, "\n")
	for i := range min(len(x), len(y)) {
		if x[i] != y[i] {
			return fmt.Sprintf("line %d\n  on disk: %s\n  now:     %s", i+1, x[i], y[i])
		}
	}
	return "one is longer"
}

func write(all []group) string {
	var b strings.Builder
	p := func(format string, a ...any) { fmt.Fprintf(&b, format, a...) }
	known := map[string]int{}
	n := 0
	for _, g := range all {
		for _, c := range g.checks {
			known[c.known]++
			n++
		}
	}
	p("# Published checks\n\n")
	p("%d values that publications, reference tools or hand calculation give, beside what the program gives. Written by\n`go test ./analyze/published -update`; the test fails when a value leaves its tolerance or this table is out of date.\n\n", n)
	p("No standard was checked against the purchased document: all are known from public texts.\n\n")
	p("| known | values | meaning |\n|---|---|---|\n")
	for _, k := range [][2]string{
		{printed, "in the publication, as public texts give it"},
		{misprint, "the publication contradicts itself here; the note says how"},
		{recomputed, "from the published equations, by hand or with an independent library"},
		{reference, "a general library's answer to the same question on the same data"},
		{arithmetic, "on a published equation: it tests the program, not the method"},
		{memory, "to be checked against the publication"},
	} {
		p("| %s | %d | %s |\n", k[0], known[k[0]], k[1])
	}
	area := ""
	for _, g := range all {
		if g.area != area {
			area = g.area
			p("\n## %s\n", area)
		}
		p("\n### %s\n\n| value | expected | ours | difference | within | known |\n|---|---:|---:|---:|---:|---|\n", g.source)
		for _, c := range g.checks {
			d := decimals(c)
			diff := fmt.Sprintf("%+.*f", d, c.ours-c.expected)
			if strings.Trim(diff, "+-0.") == "" {
				diff = "0"
			}
			p("| %s | %s | %.*f | %s | %s | %s |\n", c.what, short(c.expected), d, c.ours, diff, short(c.within), c.known)
		}
	}
	p("\n## What remains from memory\n\nSources the methods themselves declare, and numbers in force, that nobody has read in a public text for this program.\n\n")
	for _, m := range analyze.Methods() {
		for _, s := range m.Sources {
			if strings.Contains(s, "from memory") {
				p("- %s: %s\n", m.Title, strings.TrimSuffix(strings.TrimSuffix(s, method.Memory("")), " (from memory)"))
			}
		}
	}
	c, err := criteria.Preset(criteria.Default)
	if err != nil {
		panic(err)
	}
	for _, note := range c.Ordered() {
		if note.Standing == "from memory" {
			p("- %s = %s %s: %s\n", note.Key, note.Value, note.Unit, note.Source)
		}
	}
	return b.String()
}

// decimals shows one digit more than the tolerance, and all of what is
// expected.
func decimals(c check) int {
	d := 0
	if c.within > 0 {
		d = int(math.Ceil(-math.Log10(c.within)-1e-9)) + 1
	}
	if s := short(c.expected); strings.Contains(s, ".") {
		d = max(d, len(s)-strings.Index(s, ".")-1)
	}
	return max(0, min(d, 8))
}

func short(x float64) string { return strings.TrimSuffix(fmt.Sprintf("%.9g", x), ".0") }
