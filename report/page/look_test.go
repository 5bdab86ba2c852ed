package page_test

import (
	"math"
	"os"
	"strconv"
	"strings"
	"sync"
	"testing"

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
	browser.Need(t, "chromium")
	one.Do(func() { one.Browser, one.err = browser.Start() })
	if one.err != nil {
		t.Fatal(one.err)
	}
	return one.Open(t, doc, width, height)
}

// quiet: the page logged nothing and asked for nothing.
func quiet(t *testing.T, p *browser.Page) {
	t.Helper()
	logged, asked := p.Noise()
	if len(logged)+len(asked) > 0 {
		t.Errorf("the page logged %.3s and asked for %.3s", logged, asked)
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
	p := opened(t, write(t, input(s)), 1280, 900)
	p.Until(t, `document.querySelector("#look-picture svg path")`)
	choose := func(id, value string) {
		p.Ask(t, `(() => { const e = document.getElementById("`+id+`"); e.value = "`+value+`"; e.dispatchEvent(new Event("change")); })()`, nil)
	}
	choose("look-zone", "2")
	choose("look-day", "2031-06-03")
	shown(t, p, "L1.03 Studio 3, Tuesday 3 June 2031", "CO2 up to")
	// What stands under the reading line is what the results hold.
	p.Ask(t, `(() => { const e = document.getElementById("look-time"); e.value = 40; e.dispatchEvent(new Event("input")); })()`, nil)
	step := 33*96 + 40
	var values string
	p.Ask(t, `document.getElementById("look-values").textContent`, &values)
	for _, want := range []string{"10:00: indoors ", words1(float64(s.Results.Indoor[2].OperativeC[step])) + "\u00a0°C", "outdoors " + words1(float64(s.Results.Outdoor.TempC[step]))} {
		if !strings.Contains(values, want) {
			t.Errorf("no %q under the reading line: %s", want, values)
		}
	}
	// A room for two is told by day, without a picture.
	choose("look-zone", "1")
	shown(t, p, "L1.02 Studio 2, Tuesday 3 June 2031: occupied")
	var hidden bool
	if p.Ask(t, `document.getElementById("look-reading").hidden && !document.querySelector("#look-picture svg") && document.getElementById("look-carpet-box").hidden`, &hidden); !hidden {
		t.Error("the room for two is drawn by steps")
	}
	choose("look-zone", "-1")
	shown(t, p, "All zones, Tuesday 3 June 2031", "1 of rooms for few people")
	quiet(t, p)
}

// words1 writes a number with one decimal, as the script does.
func words1(v float64) string { return strconv.FormatFloat(math.Round(v*10)/10, 'f', 1, 64) }
