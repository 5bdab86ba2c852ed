// Package outdoor answers: what was it like outside, as measured on the site?
package outdoor

import "sashlog/configs/site"

// Outdoor holds the measured weather on the grid. Slices have one value per
// step, NaN where unknown, and are nil when the quantity was never logged:
// not logged means "not tested", never "calm and dry".
type Outdoor struct {
	TempC, DewPointC, RHPct  []float32
	WindMS, WindDirDeg       []float32
	RainMMH, SolarWm2        []float32
	CO2PPM, PM25             []float32
	Days                     []Day
	DayOf                    []int32 // step -> index into Days
	CO2Source                string  // "measured", "site file" or the preset's note
	CO2DefaultPPM            float64 // in force where not measured
	HumidityLogged, Measured bool
	dewLogged                bool
	prevailingDays           int
}

// Day is one local day. Means are NaN when less than 80 % of the day is
// covered (our assumption).
type Day struct {
	Date               site.Date
	FromStep, ToStep   int // half-open
	MeanC              float64
	RunningMeanENC     float64 // EN 16798-1, alpha 0.8
	RunningMeanASHRAEC float64 // ASHRAE 55 prevailing mean
	Mean30DaysC        float64 // of the 30 days before, as the Indian model asks
	SixAMC             float64 // outdoor temperature at 06:00, for clothing
}
