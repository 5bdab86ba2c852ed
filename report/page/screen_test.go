package page_test

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"sashlog/report/internal/browser"
	"sashlog/report/internal/sample"
)

// axeVersion is the version testdata/tools.sh installs.
const axeVersion = "4.14.1"

// axe returns the checks of accessibility that run in a page.
func axe(t *testing.T) string {
	t.Helper()
	cache := os.Getenv("SASHLOG_CACHE")
	if cache == "" {
		user, err := os.UserCacheDir()
		if err != nil {
			t.Fatal(err)
		}
		cache = filepath.Join(user, "sashlog")
	}
	raw, err := os.ReadFile(filepath.Join(cache, "axe-core-"+axeVersion, "node_modules", "axe-core", "axe.min.js"))
	if err != nil {
		browser.Missing(t, "axe-core "+axeVersion+" is not in the cache folder (make tools installs it)")
	}
	return string(raw)
}

// violations runs the checks: WCAG 2.2, levels A and AA, and good practice, as
// axe-core implements them, on a part of the page.
func violations(t *testing.T, p *browser.Page, part string) []string {
	t.Helper()
	var found []struct {
		ID, Help string
		Nodes    []struct {
			HTML           string
			FailureSummary string
		}
	}
	p.Ask(t, `axe.run(`+part+`, {resultTypes: ["violations"]}).then(r => r.violations.map(v => ({id: v.id, help: v.help, nodes: v.nodes.map(n => ({html: n.html.slice(0, 200), failureSummary: n.failureSummary}))})))`, &found)
	var out []string
	for _, v := range found {
		text, err := json.Marshal(v.Nodes[:min(3, len(v.Nodes))])
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, v.ID+": "+v.Help+": "+string(text))
	}
	return out
}

// laidOut lays out all chapters, also those out of sight.
const laidOut = `document.querySelectorAll(".chapter").forEach(c => c.style.contentVisibility = "visible")`

// TestAccessible: no violation in the whole report, the day browser at work in
// each of its forms; a planted button without a name is found.
func TestAccessible(t *testing.T) {
	checks := axe(t)
	s := lookSample()
	d := driver{t, opened(t, write(t, input(s)), 1280, 900)}
	d.p.Until(t, `document.querySelector("#look-picture svg path")`)
	d.p.Ask(t, checks+"; "+laidOut+"; 1", nil)
	// Of what repeats a few are enough.
	d.p.Ask(t, `document.querySelectorAll("tbody").forEach(b => [...b.rows].slice(4).forEach(r => r.remove()));
		document.querySelectorAll(".chapter").forEach(c => [...c.querySelectorAll(".finding")].slice(3).forEach(f => f.remove()))`, nil)
	d.p.Ask(t, `document.getElementById("look-table").open = true`, nil)
	d.p.Until(t, `document.querySelector("#look-hours tr")`)
	for _, v := range violations(t, d.p, "document") {
		t.Error(v)
	}
	const part = `document.getElementById("look")`
	for zone, words := range map[string]string{"-1": "All zones", "1": "L1.02 Studio 2"} {
		d.choose("look-zone", zone)
		shown(t, d.p, words)
		for _, v := range violations(t, d.p, part) {
			t.Errorf("zone %s: %s", zone, v)
		}
	}
	d.p.Ask(t, `document.querySelector("#look .pick").insertAdjacentHTML("beforeend", "<button></button>")`, nil)
	if found := violations(t, d.p, `document.querySelector("#look .pick")`); !strings.Contains(strings.Join(found, "\n"), "button-name: ") {
		t.Errorf("a button without a name is not found: %q", found)
	}
}

// TestNarrow asks the browser, at a phone's and a desk's width, for anything
// that makes the page wider than its window, for drawings without a title, and
// for noise.
func TestNarrow(t *testing.T) {
	long := strings.Repeat("Unbreakablenamewithoutanyspace", 8)
	for _, c := range []struct {
		name string
		o    sample.Options
	}{
		{"year", sample.Options{Days: 365, Zones: 12}},
		{"long names", sample.Options{Days: 14, Zones: 3, Names: []string{long, long + "2", "c"}, People: []float64{9, 9, 9}}},
		{"no CO2", sample.Options{Days: 2, Zones: 1, NoCO2: true, NoContacts: true, People: []float64{9}}},
	} {
		in := input(sample.Make(c.o))
		in.Provenance.Command = "sashlog audit /" + long + "/site.yaml"
		p := opened(t, write(t, in), 360, 800)
		for _, width := range []int{360, 1280} {
			p.Resize(t, width, 800)
			p.Ask(t, laidOut, nil)
			p.Until(t, `document.querySelector("#look-picture svg") && document.querySelector("#look-picture svg").getBoundingClientRect().width <= innerWidth`)
			var got struct {
				Width int
				Wide  []string
				Bare  int
			}
			p.Ask(t, `(() => {
				const wide = [];
				for (const x of document.body.querySelectorAll("*")) {
					if (x.closest(".scroll") && !x.matches(".scroll") || x.matches(".skip, option, noscript *") || x.parentElement.closest("svg")) continue;
					if (x.getBoundingClientRect().right > innerWidth + 0.5) wide.push(x.outerHTML.slice(0, 80));
				}
				const bare = [...document.querySelectorAll("svg[role=img]")].filter(s => !s.querySelector("title") && !s.getAttribute("aria-label")).length;
				return {width: document.documentElement.scrollWidth, wide: wide.slice(0, 5), bare};
			})()`, &got)
			if got.Width != width || len(got.Wide) > 0 || got.Bare > 0 {
				t.Errorf("%s at %d px: the page is %d px wide, %d drawings have no title, these stand out: %q", c.name, width, got.Width, got.Bare, got.Wide)
			}
		}
		quiet(t, p)
	}
}
