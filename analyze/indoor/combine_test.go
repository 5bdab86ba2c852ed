package indoor

import (
	"math"
	"strings"
	"testing"
	"time"

	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// logged makes a site of one zone with the columns given, one step each.
func logged(columns map[site.Quantity][]float32) (*site.Site, *grid.Grid) {
	s := &site.Site{Zones: []site.Zone{{ID: "a"}}}
	g := &grid.Grid{StepS: 900, Loc: time.UTC}
	for _, q := range site.Quantities() {
		values, ok := columns[q]
		if !ok {
			continue
		}
		g.N = len(values)
		s.Points = append(s.Points, site.Point{Owner: site.OwnerZone, Index: 0, Quantity: q, Placement: site.PlacementRoom})
		col := grid.Column{Mean: values, CoveredS: make([]uint16, len(values))}
		for i, v := range values {
			if !math.IsNaN(float64(v)) {
				col.CoveredS[i] = 900
			}
		}
		g.Columns = append(g.Columns, col)
	}
	g.PeriodTo = g.N
	return s, g
}

// What operative temperature is made of, in the order of preference. ISO 7726:
// a globe as warm as the air says that the surfaces are; a globe 2 K warmer in
// air at 0.1 m/s (h = 3.38 W/(m²K)) means surfaces at 27.17 °C and 25.58 °C operative, by hand.
func TestOperativeTemperature(t *testing.T) {
	nan := float32(math.NaN())
	still := criteria.Settings{AirSpeedMS: 0.1, StepCoverageMin: 0.5}
	all := map[site.Quantity][]float32{
		site.OperativeTemp: {21, 21, 21}, site.GlobeTemp: {24, 26, 26}, site.AirTemp: {24, 24, nan}, site.ThermostatTemp: {20, 20, 20},
	}
	for _, tt := range []struct {
		drop []site.Quantity
		note string
		want []float64
	}{
		{nil, "as logged", []float64{21, 21, 21}},
		{[]site.Quantity{site.OperativeTemp}, "globe and air temperature (a black globe of 150 mm; air at 0.1 m/s)", []float64{24, 25.583, 26}},
		{[]site.Quantity{site.OperativeTemp, site.AirTemp}, "globe temperature stands for", []float64{24, 26, 26}},
		{[]site.Quantity{site.OperativeTemp, site.GlobeTemp}, "as if surfaces were as warm", []float64{24, 24, math.NaN()}},
		{[]site.Quantity{site.OperativeTemp, site.GlobeTemp, site.AirTemp}, "thermostat's reading", []float64{20, 20, 20}},
	} {
		columns := map[site.Quantity][]float32{}
		for q, v := range all {
			columns[q] = v
		}
		for _, q := range tt.drop {
			delete(columns, q)
		}
		s, g := logged(columns)
		z := Combine(s, still, g)[0]
		if !strings.Contains(z.TempNote, tt.note) {
			t.Errorf("note %q, want %q", z.TempNote, tt.note)
		}
		for i, want := range tt.want {
			if got := float64(z.OperativeC[i]); !(math.Abs(got-want) < 0.01) && !(math.IsNaN(got) && math.IsNaN(want)) {
				t.Errorf("%s, step %d: %g, want %g", tt.note, i, got, want)
			}
		}
	}
	s, g := logged(map[site.Quantity][]float32{site.GlobeTemp: {26}, site.AirTemp: {24}, site.AirSpeed: {0.3}})
	z := Combine(s, still, g)[0]
	if !strings.Contains(z.TempNote, "air speed as logged, else 0.1 m/s") || z.RadiantC[0] <= 26 {
		t.Errorf("%q, radiant %g", z.TempNote, z.RadiantC[0])
	}
	if all[site.GlobeTemp][1] != 26 {
		t.Error("a column of the grid was written to")
	}
	s, g = logged(map[site.Quantity][]float32{site.CO2: {500}})
	if z := Combine(s, still, g)[0]; z.OperativeC != nil || z.TempNote != "" {
		t.Errorf("%+v", z)
	}
}
