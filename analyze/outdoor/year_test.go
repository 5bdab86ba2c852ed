package outdoor

import (
	"math"
	"testing"
)

// Global annual means of marine surface air as published by a national
// weather service, from memory, to whole ppm: the line must stay within 2 ppm.
func TestCO2OfYear(t *testing.T) {
	for year, ppm := range map[int]float64{2015: 400, 2018: 407, 2020: 412, 2022: 417, 2024: 423} {
		if got := CO2OfYearPPM(year); math.Abs(got-ppm) > 2 {
			t.Errorf("%d: %v ppm, want about %v", year, got, ppm)
		}
	}
}
