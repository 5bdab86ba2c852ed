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
		{"zone-plan", func(o Options) (SVG, error) { return ZonePlan(samplePlan(3, 6), o) }},
		{"zone-plan-200", func(o Options) (SVG, error) { return ZonePlan(samplePlan(5, 40), o) }},
		{"running-mean", func(o Options) (SVG, error) { return RunningMean(sampleRunningMean(), o) }},
		{"known-calendar", func(o Options) (SVG, error) { return KnownCalendar(sampleKnown(365), o) }},
		{"known-calendar-2", func(o Options) (SVG, error) { return KnownCalendar(sampleKnown(2), o) }},
		{"doubt-bars", func(o Options) (SVG, error) { return DoubtBars(sampleDoubt(), o) }},
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

func samplePlan(floors, zones int) ZonePlanData {
	r := sampleRandom()
	d := ZonePlanData{Caption: cap1("Share reached by floor and place"), Legend: "reached of the possible"}
	for i := range floors {
		fl := PlanFloor{Name: "Floor " + number(float64(i+1), 0)}
		for z := range zones {
			x := PlanZone{Zone: harmfulNames[z%len(harmfulNames)], Side: []Side{South, North, West, East, Middle, South}[(z+i)%6], Share: r.Float64(), Words: "48 % of 700 h"}
			switch {
			case x.Side == Middle && z%2 == 0:
				x.NoOpening, x.Share, x.Words = true, math.NaN(), ""
			case z == 1 && i == 1:
				x.Share, x.Words = math.NaN(), "not known"
			}
			fl.Zones = append(fl.Zones, x)
		}
		d.Floors = append(d.Floors, fl)
	}
	return d
}

func sampleRunningMean() RunningMeanData {
	d := RunningMeanData{Caption: cap1("Indoor temperature against the running mean"), StepC: 0.5}
	for x := 8.0; x < 26; x += 0.5 {
		for y := 19.0; y < 29; y += 0.5 {
			if h := 90*math.Exp(-math.Pow((y-21.5-0.25*(x-8))/1.4, 2)) - 3; h > 0 {
				d.Hours = append(d.Hours, RunningMeanField{x, y, h})
			}
		}
	}
	for i, k := range []float64{2, 3, 4} {
		b := RunningMeanBand{Name: "category " + []string{"I", "II", "III"}[i], Highlights: i == 1}
		for x := 10.0; x <= 30; x += 5 {
			b.Low, b.High = append(b.Low, XY{x, 0.33*x + 18.8 - k - 1}), append(b.High, XY{x, 0.33*x + 18.8 + k})
		}
		d.Bands = append(d.Bands, b)
	}
	return d
}

func sampleKnown(days int) KnownCalendarData {
	r := sampleRandom()
	d := KnownCalendarData{Caption: cap1("What was known on each day"), FirstDay: jan1()}
	for i, name := range []string{"outdoor temperature", "window contacts", "plant status", "indoor temperature", "CO₂", "people <i>"} {
		row := KnownRow{Name: name}
		for k := range days {
			v := 0.97 + 0.03*r.Float64()
			switch {
			case i == 1 && k > 200 && k < 215:
				v = 0
			case i == 4 && k%9 == 0:
				v = 0.3
			case i == 5 && k < 100:
				v = math.NaN()
			case i == 2 && k%31 == 0:
				v = 0.8
			}
			row.Days = append(row.Days, v)
		}
		d.Rows = append(d.Rows, row)
	}
	return d
}

func sampleDoubt() DoubtBarsData {
	return DoubtBarsData{Caption: cap1("What the doubt is made of"), XTitle: "missed hours (± h per year)", Parts: []DoubtPart{
		{"hours that cannot be judged", 44, true}, {"outdoor humidity", 21, false}, {"outdoor temperature", 9, false}, {"indoor temperature", 14.5, false}, {"CO₂ <x>", 0, false}}}
}
