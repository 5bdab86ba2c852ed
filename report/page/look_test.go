package page_test

import (
	"math"
	"os"
	"regexp"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"

	"sashlog/analyze/hours"
	"sashlog/report/internal/browser"
	"sashlog/report/internal/sample"
)

// one is the browser that all tests share.
var one struct {
	sync.Once
	*browser.Browser
	err error
}

func TestMain(m *testing.M) {
	code := m.Run()
	if one.Browser != nil {
		one.Close()
	}
	os.Exit(code)
}

// opened opens a document in the shared browser.
func opened(t *testing.T, doc string, width, height int) *browser.Page {
	t.Helper()
	return openedWith(t, doc, width, height, nil)
}

// openedWith prepares the window before the document is opened in it.
func openedWith(t *testing.T, doc string, width, height int, before func(*browser.Page)) *browser.Page {
	t.Helper()
	browser.Need(t, "chromium")
	one.Do(func() { one.Browser, one.err = browser.Start() })
	if one.err != nil {
		t.Fatal(one.err)
	}
	return one.Open(t, doc, width, height, before)
}

// quiet: the page logged nothing and asked for nothing.
func quiet(t *testing.T, p *browser.Page) {
	t.Helper()
	logged, asked := p.Noise()
	if len(logged)+len(asked) > 0 {
		t.Errorf("the page logged %q and asked for %q", logged, asked)
	}
}

func shown(t *testing.T, p *browser.Page, words ...string) {
	t.Helper()
	for _, w := range words {
		p.Until(t, `document.getElementById("look-said").textContent.includes(`+"`"+w+"`"+`)`)
	}
}

// lookSample has a room for two, with times that must not be shown.
func lookSample() sample.Sample {
	return sample.Make(sample.Options{Days: 40, Zones: 4, StepS: 900, People: []float64{9, 2, 9, 9}})
}

// TestDayBrowser drives the day browser as a person does.
func TestDayBrowser(t *testing.T) {
	s := lookSample()
	d := driver{t, opened(t, write(t, input(s)), 1280, 900)}
	p := d.p
	p.Until(t, `document.querySelector("#look-picture svg path")`)
	d.choose("look-zone", "2")
	d.choose("look-day", "2031-06-03")
	shown(t, p, "L1.03 Studio 3, Tuesday 3 June 2031", "CO2 up to")
	// What stands under the reading line is what the results hold.
	p.Ask(t, `(() => { const e = document.getElementById("look-time"); e.value = 40; e.dispatchEvent(new Event("input")); })()`, nil)
	step := 33*96 + 40
	var values string
	p.Ask(t, `document.getElementById("look-values").textContent`, &values)
	for _, want := range []string{"10:00: indoors ", oneDecimal(float64(s.Results.Indoor[2].OperativeC[step])) + "\u00a0°C", "outdoors " + oneDecimal(float64(s.Results.Outdoor.TempC[step]))} {
		if !strings.Contains(values, want) {
			t.Errorf("no %q under the reading line: %s", want, values)
		}
	}
	// A room for two is told by day, without a picture.
	d.choose("look-zone", "1")
	shown(t, p, "L1.02 Studio 2, Tuesday 3 June 2031: occupied")
	var hidden bool
	if p.Ask(t, `document.getElementById("look-reading").hidden && !document.querySelector("#look-picture svg") && document.getElementById("look-carpet-box").hidden`, &hidden); !hidden {
		t.Error("the room for two is drawn by steps")
	}
	d.choose("look-zone", "-1")
	shown(t, p, "All zones, Tuesday 3 June 2031", "1 of rooms for few people")
	quiet(t, p)
}

// oneDecimal writes a number as the script does.
func oneDecimal(v float64) string { return strconv.FormatFloat(math.Round(v*10)/10, 'f', 1, 64) }

func (d driver) choose(id, value string) {
	d.t.Helper()
	d.p.Ask(d.t, `(() => { const e = document.getElementById("`+id+`"); e.value = "`+value+`"; e.dispatchEvent(new Event("change")); })()`, nil)
}

// TestSmallRoomsOnly: nothing by step of a room for few people is in the file,
// also when there is no other room.
func TestSmallRoomsOnly(t *testing.T) {
	doc := write(t, input(sample.Make(sample.Options{Days: 14, Zones: 1, People: []float64{1}})))
	if strings.Contains(doc, `"blocks"`) || strings.Contains(doc, `"hours":`) {
		t.Error("steps or hours of the only room, for one person, are in the file")
	}
	p := opened(t, doc, 800, 900)
	shown(t, p, "L1.01 Studio 1, Thursday 1 May 2031: occupied")
	p.Ask(t, `document.getElementById("look-after").click()`, nil)
	shown(t, p, "L1.01 Studio 1, Friday 2 May 2031: occupied")
	quiet(t, p)
}

// TestPicker: hours of a zone and of a range of months are those of the
// summary, and the tables of the report follow the zone.
func TestPicker(t *testing.T) {
	s := lookSample()
	d := driver{t, opened(t, write(t, input(s)), 1280, 900)}
	cell := func(row string) (v string) {
		d.p.Ask(t, `[...document.querySelectorAll("#look-totals tr")].find(r => r.cells[0].textContent.trim() === "`+row+`").cells[1].textContent`, &v)
		return v
	}
	hoursOf := func(h float64) string {
		if h < 100 {
			return oneDecimal(h)
		}
		return strconv.FormatFloat(math.Round(h), 'f', 0, 64)
	}
	d.p.Until(t, `document.querySelector("#look-totals tr")`)
	d.choose("look-zone", "-1")
	if got, want := cell("could have been open"), hoursOf(s.Results.Summary.Building.Missed.Value); got != want {
		t.Errorf("the average occupant could have been open for %s h, want %s", got, want)
	}
	if got := cell("above the CO2 limit, where known"); got == "–" {
		t.Error("CO2 is logged, but its hours are not known")
	}
	d.choose("look-zone", "3")
	d.choose("look-from", "1")
	d.p.Until(t, `document.getElementById("look-period-title").textContent === "L1.04 Studio 4, June 2031"`)
	june := s.Results.Summary.Months[1].Zones[3]
	for row, want := range map[string]float64{"could have been open": june.H[hours.CMissed], "occupied": june.H[hours.COccupied], "weather suitable": june.H[hours.CSuited]} {
		if got := cell(row); got != hoursOf(want) {
			t.Errorf("%s: %s h, want %s", row, got, hoursOf(want))
		}
	}
	// From after To pulls the other end along.
	d.choose("look-to", "0")
	d.p.Until(t, `document.getElementById("look-period-title").textContent === "L1.04 Studio 4, May 2031"`)

	rows := func() (n int) {
		d.p.Ask(t, `[...document.querySelectorAll("#zone-table ~ .scroll tbody tr")].filter(r => r.offsetHeight > 0).length`, &n)
		return n
	}
	if n := rows(); n != 4 {
		t.Fatalf("%d zones in the table, want all 4", n)
	}
	d.p.Ask(t, `document.getElementById("look-only").click()`, nil)
	if n := rows(); n != 1 {
		t.Errorf("%d zones in the table, want the one chosen", n)
	}
	d.p.Call(t, "Emulation.setEmulatedMedia", map[string]any{"media": "print"}, nil)
	if n := rows(); n != 4 {
		t.Errorf("%d zones in the printed table, want all 4", n)
	}
	var printed bool
	if d.p.Ask(t, `document.getElementById("look").checkVisibility()`, &printed); printed {
		t.Error("the day browser is printed")
	}
	d.p.Call(t, "Emulation.setEmulatedMedia", map[string]any{"media": "screen"}, nil)
	d.p.Ask(t, `document.getElementById("look-only").click()`, nil)
	if n := rows(); n != 4 {
		t.Errorf("%d zones in the table, want all 4 again", n)
	}

	// A click on a carpet of the report, and on the zone's own, chooses the day.
	for _, c := range []struct {
		picture     string
		left, right float64
	}{{"#outcome-carpet-figure image", 0, 0}, {"#look-carpet", 44, 8}} {
		d.choose("look-day", "2031-05-01")
		var at struct{ X, Y float64 }
		d.p.Ask(t, `(() => { const e = document.querySelector("`+c.picture+`"); e.scrollIntoView({block: "center"}); const r = e.getBoundingClientRect(); return {x: r.left, y: r.top + r.height / 2, w: r.width}; })()`, &at)
		var width float64
		d.p.Ask(t, `document.querySelector("`+c.picture+`").getBoundingClientRect().width`, &width)
		days := 40.0
		if c.left > 0 {
			days = 31 // May only
		}
		d.p.Click(t, at.X+c.left+(width-c.left-c.right)*(19.5/days), at.Y)
		d.p.Until(t, `document.getElementById("look-day").value === "2031-05-20"`)
		if c.left == 0 {
			d.p.Until(t, `/^Tuesday 20 May 2031, 1[12]:00: [a-z]/.test(document.querySelector("`+c.picture+` title").textContent)`)
		}
	}
	quiet(t, d.p)
}

// driver is a page with its test.
type driver struct {
	t *testing.T
	p *browser.Page
}

// TestUnknownTotals: what nothing was logged for is not nought.
func TestUnknownTotals(t *testing.T) {
	s := sample.Make(sample.Options{Days: 14, Zones: 1, People: []float64{9}})
	s.Results.Indoor[0].CO2PPM = nil
	p := opened(t, write(t, input(s)), 800, 900)
	p.Until(t, `[...document.querySelectorAll("#look-totals tr")].some(r => r.textContent.startsWith("above the CO2 limit, where known––"))`)
	quiet(t, p)
}

// TestKeyboard: the tabulator reaches every control in turn, and the keys work
// them.
func TestKeyboard(t *testing.T) {
	d := driver{t, opened(t, write(t, input(lookSample())), 1280, 900)}
	d.p.Until(t, `document.querySelector("#look-picture svg path")`)
	d.p.Ask(t, `window.reached = new Set(); document.addEventListener("focusin", e => reached.add(e.target)); 1`, nil)
	var controls int
	const all = `[...document.querySelectorAll("a[href], button:not(:disabled), input, select, summary, [tabindex='0']")].filter(e => e.checkVisibility())`
	d.p.Ask(t, all+".length", &controls)
	for range controls + 12 { // the parts of a date are stops of their own
		d.p.Press(t, "Tab")
	}
	var missed []string
	d.p.Ask(t, all+`.filter(e => !reached.has(e)).map(e => e.outerHTML.slice(0, 100))`, &missed)
	if controls < 40 || len(missed) > 0 {
		t.Errorf("of %d controls the keyboard does not reach %d: %q", controls, len(missed), missed)
	}
	var bare []string
	d.p.Ask(t, `[...document.querySelectorAll("#look select, #look button, #look input")].filter(e => { e.focus(); return !e.disabled && e.matches(":focus-visible") && getComputedStyle(e).outlineStyle === "none"; }).map(e => e.id)`, &bare)
	if len(bare) > 0 {
		t.Errorf("focus cannot be seen on %v", bare)
	}
	at := func(id string) { d.p.Ask(t, `document.getElementById("`+id+`").focus()`, nil) }
	d.choose("look-day", "2031-05-07")
	at("look-after")
	d.p.Press(t, "Enter")
	d.p.Until(t, `document.getElementById("look-day").value === "2031-05-08"`)
	at("look-before")
	d.p.Press(t, "Space")
	d.p.Until(t, `document.getElementById("look-day").value === "2031-05-07"`)
	at("look-zone")
	d.p.Press(t, "End")
	d.p.Until(t, `document.getElementById("look-zone").value === "3" && document.getElementById("look-said").textContent.includes("L1.04")`)
	at("look-time")
	d.p.Press(t, "Home")
	d.p.Press(t, "ArrowRight")
	d.p.Until(t, `document.getElementById("look-time").getAttribute("aria-valuetext").startsWith("00:15: indoors")`)
	at("look-only")
	d.p.Press(t, "Space")
	d.p.Until(t, `document.querySelectorAll("#zone-table ~ .scroll tbody tr:not(.other)").length === 1`)
	d.p.Ask(t, `document.querySelector("#look-table summary").focus()`, nil)
	d.p.Press(t, "Enter")
	d.p.Until(t, `document.querySelectorAll("#look-hours tbody tr").length === 24`)
	quiet(t, d.p)
}

// TestWithoutJavaScript: the report reads, and says what it lacks.
func TestWithoutJavaScript(t *testing.T) {
	p := openedWith(t, write(t, input(lookSample())), 1280, 900, func(p *browser.Page) {
		p.Call(t, "Emulation.setScriptExecutionDisabled", map[string]any{"value": true}, nil)
	})
	var seen struct{ Look, Said, Chapters bool }
	p.Ask(t, `({look: document.getElementById("look").getClientRects().length > 0, said: document.querySelector("noscript").textContent.includes("lacks two things") && document.querySelector("noscript p").getClientRects().length > 0, chapters: document.querySelectorAll(".chapter svg").length > 5})`, &seen)
	if seen.Look || !seen.Said || !seen.Chapters {
		t.Errorf("without JavaScript: controls shown %v, said %v, chapters there %v", seen.Look, seen.Said, seen.Chapters)
	}
}

// TestDaylightSaving: the days of 23 and 25 hours have their hours.
func TestDaylightSaving(t *testing.T) {
	s := sample.Make(sample.Options{Days: 365, Zones: 1, StepS: 3600, People: []float64{9}})
	zurich, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	s.Grid.Loc = zurich
	d := driver{t, opened(t, write(t, input(s)), 800, 900)}
	d.p.Until(t, `document.querySelector("#look-picture svg path")`)
	d.p.Ask(t, `document.getElementById("look-table").open = true`, nil)
	for day, hours := range map[string]string{"2031-03-30": "23", "2031-10-26": "25", "2031-10-27": "24"} {
		d.choose("look-day", day)
		d.p.Until(t, `document.querySelectorAll("#look-hours tbody tr").length === `+hours+` && document.querySelector("#look-hours tbody th").textContent === "00:00"`)
	}
	quiet(t, d.p)
}

// TestPlanted: what the checks of this file look for is found when it is there.
func TestPlanted(t *testing.T) {
	doc := write(t, input(sample.Make(sample.Options{Days: 2, Zones: 1})))
	image := strings.Replace(doc, "<main>", `<main><img alt="" src="https://example.invalid/pixel.png">`, 1)
	p := opened(t, image, 800, 600)
	p.Until(t, `document.readyState === "complete"`)
	if logged, _ := p.Noise(); len(logged) == 0 || !strings.Contains(logged[0], "Content Security Policy") {
		t.Errorf("a picture from elsewhere is not refused by the policy: %v", logged)
	}
	lax := regexp.MustCompile(`<meta http-equiv="Content-Security-Policy"[^>]*>`).ReplaceAllString(image, "")
	p = opened(t, lax, 800, 600)
	if _, asked := p.Noise(); len(asked) != 1 || asked[0] != "https://example.invalid/pixel.png" {
		t.Errorf("a request without the policy is not noticed: %v", asked)
	}
	p = opened(t, strings.Replace(doc, "'use strict';", "'use strict'; console.log(1);", 1), 800, 600)
	if logged, _ := p.Noise(); len(logged) == 0 {
		t.Error("a changed script runs, or nothing is logged when it does not")
	}
}
