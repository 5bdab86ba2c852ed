package page_test

import (
	"strings"
	"testing"

	"sashlog/report/internal/sample"
)

// The chapter says plainly when no wind is logged, and draws nothing then.
func TestWindMissing(t *testing.T) {
	text := check(t, write(t, input(sample.Make(sample.Options{Days: 14, Zones: 3, NoWeather: true}))))
	if !strings.Contains(text, "Wind is not logged: no rose can be drawn") || strings.Contains(text, "Which openings catch") {
		t.Error("a report without wind does not say so")
	}
	in := input(sample.Make(sample.Options{Days: 14, Zones: 3}))
	text = check(t, write(t, in))
	for _, want := range []string{"Which openings catch the wanted wind?", "Was this a normal year?", "Do the ways agree?", "What moving air would add", "Yes, the wind drives it: each m/s more", "Ventilation in open mode by sector"} {
		if !strings.Contains(text, want) {
			t.Errorf("the report lacks %q", want)
		}
	}
	in.Results.Breeze.Drive = nil
	if text = check(t, write(t, in)); !strings.Contains(text, "No air change rate was measured in open mode together with the wind") {
		t.Error("a report without rates in open mode does not say so")
	}
}
