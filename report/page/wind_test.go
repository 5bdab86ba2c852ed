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
	for _, want := range []string{"Which openings catch the wanted wind?", "Was this a normal year?", "Do the ways agree?", "What moving air would add", "Yes: each m/s more"} {
		if !strings.Contains(text, want) {
			t.Errorf("the report lacks %q", want)
		}
	}
	// Rates that were measured but not held against the wind are not denied.
	in.Results.Breeze.Drive = nil
	if text = check(t, write(t, in)); !strings.Contains(text, "are not held against the wind yet") {
		t.Error("measured rates are denied")
	}
}
