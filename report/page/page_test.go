package page_test

import (
	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"errors"
	"flag"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"golang.org/x/net/html"

	"sashlog/configs/site"
	"sashlog/report/internal/sample"
	"sashlog/report/page"
	"sashlog/report/provenance"
)

var update = flag.Bool("update", false, "rewrite the golden files")

func input(s sample.Sample) page.Input {
	return page.Input{Site: s.Site, Criteria: s.Criteria, Grid: s.Grid, Ledger: s.Ledger, Results: s.Results,
		Provenance: provenance.Provenance{Version: "test", Generated: "2031-06-01T00:00:00Z", Command: "sashlog audit site.yaml", CriteriaHash: "c0ffee"}}
}

func write(t testing.TB, in page.Input) string {
	t.Helper()
	var buf bytes.Buffer
	if err := page.Write(&buf, in); err != nil {
		t.Fatal(err)
	}
	return buf.String()
}

// visible returns the text a reader sees, SVG included, and the document's
// elements by name.
func visible(t testing.TB, doc string) (text string, elements map[string]int) {
	t.Helper()
	root, err := html.Parse(strings.NewReader(doc))
	if err != nil {
		t.Fatal(err)
	}
	elements = map[string]int{}
	var b strings.Builder
	var walk func(*html.Node)
	walk = func(n *html.Node) {
		if n.Type == html.ElementNode {
			elements[n.Data]++
			if n.Data == "style" || n.Data == "script" {
				return
			}
		}
		if n.Type == html.TextNode {
			b.WriteString(n.Data)
			b.WriteByte(' ')
		}
		for c := n.FirstChild; c != nil; c = c.NextSibling {
			walk(c)
		}
	}
	walk(root)
	return b.String(), elements
}

var broken = regexp.MustCompile(`\bNaN\b|[+-]?\bInf\b|%!|<nil>|could not be drawn|\b1 zones\b|\b1 people\b|\b1 days\b|  \(\)|\.\.`)

func check(t testing.TB, doc string) string {
	t.Helper()
	text, _ := visible(t, doc)
	if at := broken.FindStringIndex(text); at != nil {
		t.Errorf("broken wording: …%s…", text[max(0, at[0]-80):min(len(text), at[1]+80)])
	}
	return text
}

// scripted finds the script and its data.
var scripted = regexp.MustCompile(`(?s)<script[ >].*?</script>`)

func TestGolden(t *testing.T) {
	got := write(t, input(sample.Make(sample.Options{Days: 14, Zones: 3})))
	// Drawings have goldens of their own, and the methods document themselves.
	got = regexp.MustCompile(`(?s)<svg.*?</svg>\n?`).ReplaceAllString(got, "<svg></svg>")
	// The script and its packed data are tested in a browser.
	got = scripted.ReplaceAllString(got, "<script></script>")
	got = regexp.MustCompile(`'sha256-[^']*'`).ReplaceAllString(got, "'sha256-'")
	got = regexp.MustCompile(`(?s)<h3>Methods in use</h3>.*?</section>`).ReplaceAllString(got, "<h3>Methods in use</h3></section>")
	path := filepath.Join("testdata", "small.html")
	if *update {
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		a, b := strings.Split(got, "\n"), strings.Split(string(want), "\n")
		for i := range min(len(a), len(b)) {
			if a[i] != b[i] {
				t.Errorf("line %d differs (run with -update to accept)\n got %.300s\nwant %.300s", i+1, a[i], b[i])
				return
			}
		}
		t.Errorf("%d lines, want %d (run with -update to accept)", len(a), len(b))
	}
}

func TestCases(t *testing.T) {
	codes := func(s sample.Sample) { s.Site.Privacy.Codes = true }
	for _, c := range []struct {
		name   string
		o      sample.Options
		change func(sample.Sample)
		want   []string
	}{
		{"year", sample.Options{Days: 365, Zones: 12}, nil, []string{"per year", "Invented demo building", "could have been open"}},
		{"no contacts", sample.Options{Days: 30, Zones: 3, NoContacts: true}, func(s sample.Sample) {
			for z := range s.Results.Running.Zones {
				s.Results.Running.Zones[z].HasContacts = false
			}
		}, []string{"No window contact is logged", "no contacts"}},
		{"one zone", sample.Options{Days: 30, Zones: 1, People: []float64{9}}, nil, []string{"in these 30 days"}},
		{"never suited", sample.Options{Days: 30, Zones: 3, NeverSuited: true}, nil, []string{"the weather never suited open mode"}},
		{"two days", sample.Options{Days: 2, Zones: 2}, nil, []string{"in these 2 days"}},
		{"no CO2", sample.Options{Days: 30, Zones: 3, NoCO2: true}, nil, []string{"CO2 is not logged in any zone"}},
		{"no weather", sample.Options{Days: 30, Zones: 3, NoWeather: true}, nil, []string{"cannot be said from these logs"}},
		{"no people", sample.Options{Days: 30, Zones: 3, NoPeople: true}, nil, []string{"number of people not given", "neither people nor floor areas"}},
		{"many zones", sample.Options{Days: 5, Zones: 200}, nil, []string{"the other 140 are in results.json"}},
		{"no openings", sample.Options{Days: 10, Zones: 2}, func(s sample.Sample) {
			for z := range s.Results.Running.Zones {
				s.Results.Running.Zones[z].NoOpening = true
			}
		}, []string{"No zone of this site has an opening"}},
		{"codes", sample.Options{Days: 14, Zones: 3}, codes, []string{"Z01"}},
		{"no findings", sample.Options{Days: 14, Zones: 3}, func(s sample.Sample) { s.Results.Findings = nil }, []string{"These logs give no finding to act on"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := sample.Make(c.o)
			if c.change != nil {
				c.change(s)
			}
			doc := write(t, input(s))
			text := strings.ReplaceAll(check(t, doc), "\u00a0", " ")
			for _, w := range c.want {
				if !strings.Contains(text, w) {
					t.Errorf("no %q in the report", w)
				}
			}
			if dir := os.Getenv("PAGE_SAMPLES"); dir != "" {
				os.WriteFile(filepath.Join(dir, strings.ReplaceAll(c.name, " ", "-")+".html"), []byte(doc), 0o644)
			}
		})
	}
}

// TestUnknowns takes every figure away that can be unknown: the words must hold.
func TestUnknowns(t *testing.T) {
	s := sample.Make(sample.Options{Days: 10, Zones: 3})
	nan := math.NaN()
	for z := range s.Results.FreshAir.Zones {
		for st := range s.Results.FreshAir.Zones[z].State {
			l := &s.Results.FreshAir.Zones[z].State[st]
			l.MeanPPM, l.P95PPM, l.AboveOutdoorMeanPPM = nan, nan, nan
		}
	}
	for i := range s.Results.Lost.Episodes {
		e := &s.Results.Lost.Episodes[i]
		e.OutdoorTempC, e.IndoorTempC, e.ComfortHighC, e.CO2PPM, e.People, e.PersonH = nan, nan, nan, nan, nan, nan
	}
	for i := range s.Results.Findings {
		f := &s.Results.Findings[i]
		f.Hours, f.PersonH, f.Low, f.High = nan, nan, nan, nan
	}
	for z := range s.Results.Exceedance.Zones {
		for i := range s.Results.Exceedance.Zones[z].Criteria {
			c := &s.Results.Exceedance.Zones[z].Criteria[i]
			c.AppliesH, c.OverShare.Value, c.PersonOverH = 0, nan, nan
		}
	}
	for z := range s.Results.Summary.Zones {
		x := &s.Results.Summary.Zones[z]
		x.JudgedShare, x.AchievedShare.Value, x.MechFreeShare.Value = nan, nan, nan
	}
	s.Results.Summary.Building.JudgedShare = nan
	s.Results.Summary.Building.AchievedShare.Value = nan
	check(t, write(t, input(s)))
}

func TestHostileNames(t *testing.T) {
	names := []string{`<script>alert(1)</script>`, "two\nlines \"quoted\" 'single' & more", "\u202Eturned\u202C \u200Fmark \u0007bell", `</style><img src=x onerror=alert(1)>`}
	s := sample.Make(sample.Options{Days: 14, Zones: 4, Names: names, People: []float64{9, 9, 9, 9}})
	s.Site.Name = `Hall "A"</style><script>alert(2)</script>` + "\u202E\n\\"
	s.Ledger.Files[0].Path = `"><script>alert(3)</script>` + "\u2067.csv"
	s.Ledger.Issues[0].Text = `bad "<b onclick=alert(4)>"`
	s.Results.Findings[0].What = `javascript:alert(5) <iframe src="//x">`
	for i := range s.Site.Points {
		s.Site.Points[i].Column = names[i%4]
	}
	doc := write(t, input(s))
	_, elements := visible(t, doc)
	if elements["script"] != 2 {
		t.Errorf("%d script elements, want the data and the script", elements["script"])
	}
	for _, e := range []string{"img", "iframe", "b onclick", "object", "link", "base", "form"} {
		if elements[e] > 0 {
			t.Errorf("%d %s elements came out of names", elements[e], e)
		}
	}
	if elements["style"] != 1 {
		t.Errorf("%d style elements, want 1", elements["style"])
	}
	for _, r := range doc {
		if r >= 0x202A && r <= 0x202E || r >= 0x2066 && r <= 0x2069 || r == 0x200E || r == 0x200F || r < ' ' && r != '\n' && r != '\t' {
			t.Fatalf("character %U came through", r)
		}
	}
	if regexp.MustCompile(`\son[a-z]+="?alert`).MatchString(strings.ReplaceAll(doc, "&#34;", "")) && elements["img"] > 0 {
		t.Error("an event handler came through")
	}
}

var external = regexp.MustCompile(`(?i)(src|href|action|poster|srcset|data)\s*=\s*"?([^"#\s>]+)|url\(|@import`)

func TestOneFile(t *testing.T) {
	whole := write(t, input(sample.Make(sample.Options{Days: 14, Zones: 3})))
	doc := scripted.ReplaceAllString(whole, "")
	for _, m := range external.FindAllStringSubmatch(doc, -1) {
		if !strings.HasPrefix(m[2], "data:image/png;base64,") {
			t.Errorf("reaches outside the file: %.80s", m[0])
		}
	}
	for _, m := range regexp.MustCompile(`https?://[^"\s<]+`).FindAllString(doc, -1) {
		if m != "http://www.w3.org/2000/svg" { // the name of the SVG language, never fetched
			t.Errorf("names a network address: %s", m)
		}
	}
	checkPolicy(t, whole)
	_, e := visible(t, doc)
	if !strings.Contains(doc, `<html lang="en-GB">`) || e["main"] != 1 || e["header"] != 1 || e["nav"] != 1 || e["h1"] != 1 {
		t.Errorf("language or landmarks are missing: %v", e)
	}
	if e["figure"] != e["figcaption"] || e["figure"] < 8 {
		t.Errorf("%d figures with %d captions", e["figure"], e["figcaption"])
	}
	seen := map[string]bool{}
	for _, m := range regexp.MustCompile(`\sid="([^"]+)"`).FindAllStringSubmatch(doc, -1) {
		if seen[m[1]] {
			t.Errorf("id %q stands twice", m[1])
		}
		seen[m[1]] = true
	}
	for _, m := range regexp.MustCompile(`href="#([^"]+)"`).FindAllStringSubmatch(doc, -1) {
		if !seen[m[1]] {
			t.Errorf("link to %q leads nowhere", m[1])
		}
	}
}

// checkPolicy: nothing may run but the script that is there, nothing may style
// but the style that is there (digests as CSP level 3, W3C, section 2.3.1).
func checkPolicy(t *testing.T, doc string) {
	t.Helper()
	policies := regexp.MustCompile(`<meta http-equiv="Content-Security-Policy" content="([^"]*)">`).FindAllStringSubmatch(doc, -1)
	if len(policies) != 1 {
		t.Fatalf("%d policies", len(policies))
	}
	digest := func(element string) string {
		m := regexp.MustCompile(`(?s)<` + element + `>(.*?)</` + element + `>`).FindStringSubmatch(doc)
		if m == nil {
			return ""
		}
		sum := sha256.Sum256([]byte(m[1]))
		return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
	}
	want := "default-src 'none'; style-src " + digest("style") + "; img-src data:; script-src " + digest("script") + "; base-uri 'none'; form-action 'none'"
	if policies[0][1] != want {
		t.Errorf("policy %q\nwant   %q", policies[0][1], want)
	}
	if strings.Contains(scripted.ReplaceAllString(doc, ""), ` style="`) {
		t.Error("an element is styled by an attribute, which the policy forbids")
	}
}

// TestPrivacy: rooms for one to three people are shown by day only.
func TestPrivacy(t *testing.T) {
	o := sample.Options{Days: 14, Zones: 3, People: []float64{3, 4, 5}, Names: []string{"Snug", "Loft", "Barn"}}
	strip := regexp.MustCompile(`Missed episode in (\w+)`)
	zonesDrawn := func(p site.Privacy) string {
		s := sample.Make(o)
		s.Site.Privacy = p
		var out []string
		for _, m := range strip.FindAllStringSubmatch(write(t, input(s)), -1) {
			out = append(out, m[1])
		}
		return strings.Join(out, " ")
	}
	if got := zonesDrawn(site.Privacy{}); strings.Contains(got, "Snug") || !strings.Contains(got, "Barn") {
		t.Errorf("strips of %s: the room for three must not be drawn, others must", got)
	}
	if got := zonesDrawn(site.Privacy{Internal: true}); !strings.Contains(got, "Snug") {
		t.Errorf("strips of %s: privacy: internal shows all", got)
	}
	s := sample.Make(o)
	clock := regexp.MustCompile(`<th scope="row"><bdi>Snug</bdi></th><td class="w">\w+\x{a0}\d+\x{a0}\w+\x{a0}2031, \d\d:\d\d`)
	if clock.MatchString(write(t, input(s))) {
		t.Error("an episode of the room for three is listed with its time of day")
	}
	s.Site.Privacy.Internal = true
	if !clock.MatchString(write(t, input(s))) {
		t.Error("privacy: internal must list times of day, or this test proves nothing")
	}
	s.Site.Privacy = site.Privacy{Codes: true}
	doc := write(t, input(s))
	for _, name := range append(o.Names, "trends.csv") {
		if strings.Contains(doc, name) {
			t.Errorf("%s stands in a report with codes", name)
		}
	}
	alone := sample.Make(sample.Options{Days: 14, Zones: 1, People: []float64{1}})
	doc = write(t, input(alone))
	if strings.Contains(doc, `id="outcome-carpet-figure"`) || strings.Contains(doc, `id="outdoor-air-figure"`) || !strings.Contains(doc, "no more than three people") {
		t.Error("a building of one small room must have no pictures by hour, and say why")
	}
}

func TestErrors(t *testing.T) {
	in := input(sample.Make(sample.Options{Days: 2, Zones: 1}))
	in.Paper = "A0"
	if err := page.Write(&bytes.Buffer{}, in); err == nil {
		t.Error("paper A0 must be refused")
	}
	in.Paper = ""
	full := errors.New("disk full")
	if err := page.Write(failing{full}, in); !errors.Is(err, full) {
		t.Errorf("got %v, want the writer's error", err)
	}
}

type failing struct{ err error }

func (f failing) Write([]byte) (int, error) { return 0, f.err }

func TestSameBytes(t *testing.T) {
	o := sample.Options{Days: 14, Zones: 5}
	if a, b := write(t, input(sample.Make(o))), write(t, input(sample.Make(o))); a != b {
		t.Error("the same results gave two different reports")
	}
}

func BenchmarkWrite(b *testing.B) {
	in := input(sample.Make(sample.Options{Days: 365, Zones: 12}))
	var buf bytes.Buffer
	for b.Loop() {
		buf.Reset()
		if err := page.Write(&buf, in); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(buf.Len()), "bytes/report")
}
