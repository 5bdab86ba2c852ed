package freshair

import (
	"math"
	"slices"

	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
	"sashlog/ingest/grid"
)

// Baseline is how far a zone's CO2 lies from outdoors when it is lowest. A room
// that is aired out every week should come down to outdoors; what is left then
// is the sensor's offset. Rooms that are never aired out stay above, and
// sensors that adjust themselves to the lowest reading hide that.
type Baseline struct {
	OffsetPPM float64 // median over weeks, NaN with fewer than 2
	SpreadPPM float64 // half the range over weeks
	Weeks     int
	// ExplainedPPM is how far sensor and outdoor level may be off by themselves;
	// an offset beyond it has another cause.
	ExplainedPPM float64
	// Corrected: the offset was taken off. Why says why not, where it was asked.
	Corrected bool
	Why       string
}

const (
	baselineShare    = 0.02 // of a week: about 3.4 h, beyond the reach of noise
	baselineWeeksMin = 2
	weekCoverageMin  = 0.5
	weekH            = 168.0
)

// BaselineOf finds the offset of a zone's CO2 (nil: none).
func BaselineOf(co2 []float32, o *outdoor.Outdoor, g *grid.Grid) Baseline {
	b := Baseline{OffsetPPM: math.NaN(), SpreadPPM: math.NaN()}
	if co2 == nil {
		return b
	}
	week := max(1, int(math.Round(weekH/g.StepH())))
	var lows, above []float64
	for from := g.PeriodFrom; from+week <= g.PeriodTo; from += week {
		above = above[:0]
		for i := from; i < from+week; i++ {
			if c := float64(co2[i]); !math.IsNaN(c) {
				above = append(above, c-o.OutdoorCO2(i))
			}
		}
		if float64(len(above)) < weekCoverageMin*float64(week) {
			continue
		}
		slices.Sort(above)
		lows = append(lows, quantile(above, baselineShare))
	}
	b.Weeks = len(lows)
	if b.Weeks >= baselineWeeksMin {
		b.OffsetPPM, b.SpreadPPM = median(lows), (slices.Max(lows)-slices.Min(lows))/2
	}
	return b
}

// Baselines states the offset of every zone and, where the settings ask for
// it, takes it off. A zone's CO2 is replaced, never written to.
func Baselines(c criteria.Settings, rooms []indoor.Zone, o *outdoor.Outdoor, g *grid.Grid) []Baseline {
	out := make([]Baseline, len(rooms))
	for z := range rooms {
		b := BaselineOf(rooms[z].CO2PPM, o, g)
		// What the sensor and the outdoor level may be off by explains so much.
		b.ExplainedPPM = math.Hypot(c.AccuracyCO2PPM+c.AccuracyCO2Pct/100*o.CO2DefaultPPM, c.OutdoorCO2DoubtPPM)
		switch {
		case c.CO2Baseline != "corrected" || rooms[z].CO2PPM == nil:
		case math.IsNaN(b.OffsetPPM):
			b.Why = "fewer than two weeks of CO2"
		case math.Abs(b.OffsetPPM) > b.ExplainedPPM:
			b.Why = "the offset is more than sensor and outdoor level explain: the room may never be aired out, or the sensor may be broken"
		default:
			b.Corrected = true
			corrected := make([]float32, len(rooms[z].CO2PPM))
			for i, v := range rooms[z].CO2PPM {
				corrected[i] = v - float32(b.OffsetPPM)
			}
			rooms[z].CO2PPM = corrected
		}
		out[z] = b
	}
	return out
}
