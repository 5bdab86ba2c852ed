package configs

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"sashlog/configs/site"
)

// Whatever a person writes, Load answers with a site or with problems that
// point into the file; it never panics.
func FuzzSiteFile(f *testing.F) {
	for _, p := range []string{"*.good.yaml", "*.bad.yaml"} {
		list, err := filepath.Glob(filepath.Join(corpus, p))
		if err != nil {
			f.Fatal(err)
		}
		for _, name := range list {
			f.Add(must(os.ReadFile(name)))
		}
	}
	f.Add(must(os.ReadFile("sample/site.yaml")))
	f.Fuzz(func(t *testing.T, raw []byte) {
		text := toUTF8(raw).text
		tr, p := parse("site.yaml", text)
		if p != nil {
			checkPlaces(t, Problems{*p}, text)
			return
		}
		b := build(tr, text, nil)
		checkPlaces(t, b.problems(), text)
		if len(b.tree.problems) == 0 {
			checkSite(t, b.out.Site)
		}
	})
}

func FuzzTables(f *testing.F) {
	for _, p := range []string{"points/*.csv", "diary/*.csv"} {
		list, err := filepath.Glob(filepath.Join(corpus, p))
		if err != nil {
			f.Fatal(err)
		}
		for _, name := range list {
			f.Add(must(os.ReadFile(name)))
		}
	}
	text := must(os.ReadFile(filepath.Join(corpus, "table.yaml")))
	f.Fuzz(func(t *testing.T, raw []byte) {
		tr, p := parse("site.yaml", text)
		if p != nil {
			t.Fatal(p)
		}
		b := build(tr, text, nil)
		b.readPoints("points.csv", raw)
		b.readDiary("events.csv", raw)
		checkPlaces(t, b.problems(), toUTF8(raw).text)
		b.coverage()
		for i := range b.out.Site.Points {
			pt := &b.out.Site.Points[i]
			if len(b.tables) == 0 && (pt.Index < 0 || pt.Conversion.Factor == 0 || pt.Line < 2) {
				t.Errorf("accepted point without owner, conversion or line: %+v", pt)
			}
		}
	})
}

func checkPlaces(t *testing.T, ps Problems, text []byte) {
	t.Helper()
	lines := 2
	for _, c := range string(text) {
		if strings.ContainsRune("\n\r\u0085\u2028\u2029", c) { // what YAML takes for line ends
			lines++
		}
	}
	for _, p := range ps {
		if p.Text == "" || p.Line < 0 || p.Col < 0 || p.Line > lines {
			t.Errorf("%d lines: %+v", lines, p)
		}
	}
}

func checkSite(t *testing.T, s *site.Site) {
	t.Helper()
	ids := map[string]bool{}
	for i := range s.Zones {
		if s.Zones[i].ID == "" || ids[s.Zones[i].ID] {
			t.Errorf("accepted zone id %q", s.Zones[i].ID)
		}
		ids[s.Zones[i].ID] = true
	}
	if len(s.Zones) == 0 || s.StepS <= 0 || 900%s.StepS != 0 || s.Location == nil || s.Name == "" {
		t.Errorf("accepted %+v", s)
	}
}
