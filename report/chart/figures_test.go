package chart

import (
	"math"
	"os"
	"path/filepath"
	"testing"
	"time"
)

// figure is one sample drawing by name.
type figure struct {
	name string
	draw func(Options) (SVG, error)
}

func jan1() time.Time { return time.Date(2025, 1, 1, 0, 0, 0, 0, time.UTC) }

func figures() []figure {
	return []figure{
		{"carpet", func(o Options) (SVG, error) { return Carpet(sampleCarpet(jan1(), 365), o) }},
		{"carpet-2days", func(o Options) (SVG, error) { return Carpet(sampleCarpet(jan1().AddDate(0, 7, 6), 2), o) }},
		{"carpet-400days", func(o Options) (SVG, error) { return Carpet(sampleCarpet(jan1().AddDate(0, 2, 14), 400), o) }},
		{"monthly-stack", func(o Options) (SVG, error) { return MonthlyStack(sampleMonths(12), o) }},
		{"monthly-stack-1", func(o Options) (SVG, error) { return MonthlyStack(sampleMonths(1), o) }},
		{"monthly-stack-40", func(o Options) (SVG, error) { return MonthlyStack(sampleMonths(40), o) }},
		{"where-hours-went", func(o Options) (SVG, error) { return WhereHoursWent(sampleWaterfall(), o) }},
		{"outdoor-dots", func(o Options) (SVG, error) { return OutdoorQuadrants(sampleOutdoor(2900, DewPointC), o) }},
		{"outdoor-bins", func(o Options) (SVG, error) { return OutdoorQuadrants(sampleOutdoor(8700, RelativePC), o) }},
		{"outdoor-few", func(o Options) (SVG, error) { return OutdoorQuadrants(sampleOutdoor(12, DewPointC), o) }},
		{"exceedance-9", func(o Options) (SVG, error) { return Exceedance(sampleExceedance(9), o) }},
		{"exceedance-200", func(o Options) (SVG, error) { return Exceedance(sampleExceedance(200), o) }},
		{"exceedance-1", func(o Options) (SVG, error) { return Exceedance(sampleExceedance(1), o) }},
		{"league-12", func(o Options) (SVG, error) { return ZoneLeague(sampleLeague(12), o) }},
		{"league-60", func(o Options) (SVG, error) { return ZoneLeague(sampleLeague(60), o) }},
		{"co2-1", func(o Options) (SVG, error) { return CO2Duration(sampleCO2(1), o) }},
		{"co2-12", func(o Options) (SVG, error) { return CO2Duration(sampleCO2(12), o) }},
		{"strip-1", func(o Options) (SVG, error) { return EpisodeStrip(sampleStrip(1), o) }},
		{"strip-3", func(o Options) (SVG, error) { return EpisodeStrip(sampleStrip(3), o) }},
		{"exceedance-curve", func(o Options) (SVG, error) { return ExceedanceCurve(sampleCurve(), o) }},
		{"changeover-curve", func(o Options) (SVG, error) { return ChangeoverCurve(sampleChangeover(), o) }},
		{"hours-by-way", func(o Options) (SVG, error) { return HoursByWay(sampleWays(), o) }},
		{"added-hours", func(o Options) (SVG, error) { return AddedHours(sampleAdded(12), o) }},
		{"added-hours-70", func(o Options) (SVG, error) { return AddedHours(sampleAdded(70), o) }},
		{"group-rates", func(o Options) (SVG, error) { return GroupRates(sampleRates(), o) }},
		{"wind-roses", func(o Options) (SVG, error) { return WindRoses(sampleRoses(3), o) }},
		{"wind-roses-1", func(o Options) (SVG, error) { return WindRoses(sampleRoses(1), o) }},
		{"comfort-fields", func(o Options) (SVG, error) { return ComfortFields(sampleFields(), o) }},
		{"air-change", func(o Options) (SVG, error) { return AirChange(sampleAirChange(), o) }},
		{"rose", func(o Options) (SVG, error) { return SpeedRose(sampleRose(), o) }},
	}
}

func sampleAirChange() AirChangeData {
	return AirChangeData{Caption: cap1("Air change rate by zone and running state"), Rows: []AirChangeRow{
		{"L1.01 <South>", Open, Bounded{2.6, 1.7, 4.2}, 12, false}, {"", Mech, Bounded{1.05, 0.8, 1.4}, 30, false}, {"", Shut, Bounded{0.14, 0.08, 0.2}, 9, true},
		{"L2.01", Open, Bounded{math.NaN(), math.NaN(), math.NaN()}, 0, false}, {"", Mech, Bounded{0.2, 0.15, 0.3}, 5, true},
	}}
}

// TestWriteSamples writes the sample figures to the folder named by
// CHART_SAMPLES, to be looked at.
func TestWriteSamples(t *testing.T) {
	dir := os.Getenv("CHART_SAMPLES")
	if dir == "" {
		t.Skip("CHART_SAMPLES names no folder to write sample figures to")
	}
	for _, f := range figures() {
		svg, err := f.draw(Options{ID: f.name})
		if err != nil {
			t.Fatalf("%s: %v", f.name, err)
		}
		if err := os.WriteFile(filepath.Join(dir, f.name+".svg"), []byte(svg), 0o644); err != nil {
			t.Fatal(err)
		}
		t.Logf("%-20s %6d bytes", f.name, len(svg))
	}
}
