package configs

import (
	"bytes"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"
	"go.yaml.in/yaml/v3"
)

const corpus = "../testdata/config"

func files(t *testing.T, pattern string, least int) []string {
	t.Helper()
	list, err := filepath.Glob(filepath.Join(corpus, pattern))
	if err != nil || len(list) < least {
		t.Fatalf("%s: %d files, want at least %d (%v)", pattern, len(list), least, err)
	}
	return list
}

// wantOne holds the error against the one problem that is expected.
func wantOne(t *testing.T, err error, file, want string) {
	t.Helper()
	var ps Problems
	if !errors.As(err, &ps) {
		t.Fatalf("got %v, want a problem %q", err, want)
	}
	if len(ps) != 1 {
		t.Errorf("%d problems, want one mistake per file", len(ps))
	}
	for _, p := range ps {
		if !strings.HasPrefix(p.Error(), filepath.ToSlash(file)+want) {
			t.Errorf("got  %s\nwant %s%s", p.Error(), filepath.ToSlash(file), want)
		}
	}
}

func TestBadSiteFiles(t *testing.T) {
	for _, f := range files(t, "*.bad.yaml", 100) {
		t.Run(filepath.Base(f), func(t *testing.T) {
			raw, err := os.ReadFile(f)
			if err != nil {
				t.Fatal(err)
			}
			first, _, _ := strings.Cut(string(raw), "\n")
			want, ok := strings.CutPrefix(strings.TrimSuffix(first, "\r"), "# want ")
			if !ok {
				t.Fatal("the first line must be: # want :LINE:COL: message")
			}
			_, err = Load(f, nil)
			wantOne(t, err, f, want)
		})
	}
}

func TestBadTables(t *testing.T) {
	siteFile, err := os.ReadFile(filepath.Join(corpus, "table.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	good, err := os.ReadFile(filepath.Join(corpus, "points", "minimal.good.csv"))
	if err != nil {
		t.Fatal(err)
	}
	for kind, least := range map[string]int{"points": 40, "diary": 8, "votes": 7} {
		for _, f := range files(t, kind+"/*.bad.csv", least) {
			t.Run(kind+"/"+filepath.Base(f), func(t *testing.T) {
				want, err := os.ReadFile(strings.TrimSuffix(f, ".bad.csv") + ".want")
				if err != nil {
					t.Fatal(err)
				}
				raw, err := os.ReadFile(f)
				if err != nil {
					t.Fatal(err)
				}
				dir := t.TempDir()
				text, points, name := string(siteFile), raw, "points.csv"
				switch kind {
				case "diary":
					text, points, name = text+"diary: events.csv\n", good, "events.csv"
				case "votes":
					text, points, name = text+"votes: votes.csv\n", good, "votes.csv"
				}
				write(t, filepath.Join(dir, "site.yaml"), []byte(text))
				write(t, filepath.Join(dir, "points.csv"), points)
				if kind != "points" {
					write(t, filepath.Join(dir, name), raw)
				}
				_, err = Load(filepath.Join(dir, "site.yaml"), nil)
				wantOne(t, err, filepath.Join(dir, name), strings.TrimSpace(string(want)))
			})
		}
	}
}

func write(t testing.TB, path string, raw []byte) {
	t.Helper()
	if err := os.WriteFile(path, raw, 0o600); err != nil {
		t.Fatal(err)
	}
}

func TestGoodSiteFiles(t *testing.T) {
	for _, f := range files(t, "*.good.yaml", 3) {
		t.Run(filepath.Base(f), func(t *testing.T) {
			l, err := Load(f, nil)
			if err != nil {
				t.Fatal(err)
			}
			if len(l.Site.Points) == 0 || len(l.Files) < 2 {
				t.Errorf("%d points from %d files", len(l.Site.Points), len(l.Files))
			}
		})
	}
}

// The schema serves editors. It must accept what Load accepts, and it must
// find those mistakes that are visible without looking at other keys, at other
// files or at a list of time zones.
func TestSchema(t *testing.T) {
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(Schema()))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	c.DefaultDraft(jsonschema.Draft2020)
	if err := c.AddResource("schema.json", doc); err != nil {
		t.Fatal(err)
	}
	sch, err := c.Compile("schema.json")
	if err != nil {
		t.Fatal(err)
	}
	validate := func(f string) error {
		raw, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		var n yaml.Node
		if err := yaml.Unmarshal(raw, &n); err != nil {
			return err
		}
		return sch.Validate(plain(n.Content[0]))
	}
	for _, f := range append(files(t, "*.good.yaml", 3), filepath.Join(corpus, "table.yaml"), "sample/site.yaml") {
		if err := validate(f); err != nil {
			t.Errorf("%s: %v", f, err)
		}
	}
	beyond := map[string]bool{}
	for _, name := range beyondSchema {
		beyond[name] = true
	}
	for _, f := range files(t, "*.bad.yaml", 100) {
		name := strings.TrimSuffix(filepath.Base(f), ".bad.yaml")
		if err := validate(f); (err == nil) != beyond[name] {
			t.Errorf("%s: schema says %v, expected to be beyond it: %v", name, err, beyond[name])
		}
	}
}

// beyondSchema lists the mistakes only Load can see.
var beyondSchema = []string{
	"clock-drift-long",
	"clock-drift-one-day",
	"clock-shift-overlap",
	"clock-shift-reversed",
	"criteria-band",
	"criteria-co2",
	"criteria-outdoor-co2",
	"criteria-purge",
	"decimal-is-separator",
	"faces-twice",
	"faces-without-openings",
	"holiday-reversed",
	"holiday-too-long",
	"holiday",
	"id-plant-and-zone",
	"id-twice",
	"key-twice-case",
	"key-twice",
	"log-pattern",
	"log-twice",
	"missing-diary-file",
	"missing-occupied-times",
	"missing-points-file",
	"period-no-such-day",
	"period-reversed",
	"serves-case",
	"serves-unknown",
	"sheet-of-text",
	"syntax-two-documents",
	"through-closed",
	"through-itself",
	"through-unknown",
	"time-format-no-year",
	"time-format",
	"time-zone-unknown",
	"times-overlap-zone",
	"times-overlap",
	"times-reversed",
}
