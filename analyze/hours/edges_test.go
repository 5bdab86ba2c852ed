package hours

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/ingest/grid"
)

// A short airing is an opening of up to 15 min, three steps; a fourth makes it
// an opening. Beside unknown steps it is not known to be short; the record's
// ends are as good as shut. The rule and its figure are settings.
func TestShortOpenings(t *testing.T) {
	code := map[byte]running.State{'o': running.Open, 'b': running.Both, 's': running.Shut, 'm': running.Mech, '?': running.Unknown}
	for _, tt := range []struct {
		states string
		min    float64
		want   string // x marks a short opening
	}{
		{"soooss", 15, ".xxx.."},
		{"soooos", 15, "......"},
		{"sobos", 15, ".xxx."},
		{"mobbos", 15, "......"},
		{"ooos", 15, "xxx."},
		{"sooo", 15, ".xxx"},
		{"?oos", 15, "...."},
		{"soo?", 15, "...."},
		{"soosoooos", 15, ".xx......"},
		{"sos", 5, ".x."},
		{"soos", 5, "...."},
		{"sos", 4.9, "..."},
		{"sos", 0, "..."},
	} {
		var states []running.State
		for i := range tt.states {
			states = append(states, code[tt.states[i]])
		}
		got := ""
		for _, short := range shortOpenings(&grid.Grid{StepS: 300, Loc: time.UTC}, states, tt.min) {
			got += map[bool]string{true: "x", false: "."}[short]
		}
		if got != tt.want {
			t.Errorf("%s, %g min: %s, want %s", tt.states, tt.min, got, tt.want)
		}
	}
}

// Warm, cool and stale begin beyond the limit, not at it; both sides are
// rounded to 0.001 first.
func TestFeelAtTheLimits(t *testing.T) {
	n := float32(math.NaN())
	for _, tt := range []struct {
		tempC, ppm, outdoorPPM float32
		want                   feel
	}{
		{26, 1225, 425, feel{tempKnown: true, co2Known: true}},
		{26.01, 1225.1, 425, feel{warm: true, stale: true, tempKnown: true, co2Known: true}},
		{20, 800, 425, feel{tempKnown: true, co2Known: true}},
		{19.99, 800, 425, feel{cool: true, tempKnown: true, co2Known: true}},
		{26.0004, 1250, 450, feel{tempKnown: true, co2Known: true}},
		{n, 1250.1, 450, feel{stale: true, co2Known: true}},
		{24, n, 450, feel{tempKnown: true}},
		{24, 1226, n, feel{stale: true, tempKnown: true, co2Known: true}}, // the default of 425 ppm stands in
	} {
		j := &judge{
			in:     &Input{Criteria: criteria.Settings{CO2AboveOutdoorPPM: 800}, Outdoor: &outdoor.Outdoor{CO2PPM: []float32{tt.outdoorPPM}, CO2DefaultPPM: 425}},
			room:   &indoor.Zone{OperativeC: []float32{tt.tempC}, CO2PPM: []float32{tt.ppm}},
			limits: &exceedance.Limits{Model: []exceedance.Model{exceedance.ENCooling}, LowC: []float32{20}, HighC: []float32{26}},
		}
		if got := j.feel(0); got != tt.want {
			t.Errorf("%g °C, %g ppm, %g outdoors: %+v, want %+v", tt.tempC, tt.ppm, tt.outdoorPPM, got, tt.want)
		}
	}
}
