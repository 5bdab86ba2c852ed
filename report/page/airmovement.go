package page

import (
	"math"

	"sashlog/analyze/climate"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// airMovement shows what moving air would add to the suitable hours, and
// relieve indoors.
func (b *builder) airMovement(c *climate.Result) []block {
	a := c.AirSpeed
	if a == nil {
		return nil
	}
	k := b.span.PerYear
	d := chart.AddedHoursData{Caption: chart.Caption{Title: "Suitable hours that each step of air movement would add", Desc: "One bar per zone, one part per step of air speed, by the cooling effect of moving air."},
		XTitle: "suitable hours added to still air " + b.span.Words + " (h)"}
	t := table{ID: "air-movement", Caption: "Hours that moving air would add, per zone",
		Head: []column{col("Zone"), num("Suitable, still air (h)"), num("0.6 m/s"), num("0.9 m/s"), num("1.2 m/s"), num("by SET 0.3 m/s"), num("0.6"), num("0.9"), num("1.2"), num("Too warm indoors (h)"), num("of it relieved at 0.9 m/s, by SET")}}
	rooms := chart.AddedHoursData{Caption: chart.Caption{Title: "Hours too warm indoors that each step of air movement would relieve", Desc: "One bar per zone, one part per step of air speed, by the cooling effect of moving air."},
		XTitle: "hours too warm indoors that would be within the limit " + b.span.Words + " (h)"}
	for _, v := range climate.SpeedsMS {
		d.Steps = append(d.Steps, words.Unit(v, 1, "m/s"))
	}
	rooms.Steps = d.Steps
	line := func(name string, s *climate.SpeedSteps) {
		h := func(v float64) string { return words.HoursNumber(v * k) }
		t.Rows = append(t.Rows, row(name, h(s.SuitedH), h(s.AddedIncrementH[1]), h(s.AddedIncrementH[2]), h(s.AddedIncrementH[3]),
			h(s.AddedEffectH[0]), h(s.AddedEffectH[1]), h(s.AddedEffectH[2]), h(s.AddedEffectH[3]), h(s.WarmH), h(s.RelievedSETH[2])))
	}
	line("average occupant", &a.Building)
	zones, foot := b.capped(b.order)
	for _, z := range zones {
		s := &a.Zones[z]
		if !s.Openings {
			continue
		}
		line(b.w.Zone(z), s)
		bar := chart.ZoneAdded{Zone: b.w.Zone(z), Added: stepsOf(s.AddedEffectH, k)}
		if s.WarmH > 0 {
			rooms.Zones = append(rooms.Zones, chart.ZoneAdded{Zone: bar.Zone, Added: stepsOf(s.RelievedSETH, k), Note: "of " + words.Hours(s.WarmH*k) + " too warm"})
		}
		if !math.IsNaN(s.InstalledMS) {
			bar.Note = "has a fan, " + words.Unit(s.InstalledMS, 1, "m/s")
		}
		d.Zones = append(d.Zones, bar)
	}
	t.Foot = []string{"Totals at each speed, " + b.span.Words + ", beyond still air and without the fans that are there. By increments (ASHRAE 55, EN 16798-1) 0.3 m/s is the base and adds nothing; by SET the cooling effect is counted from still air at 50 % humidity. " +
		"People must be able to control the air movement. Zones without openings are left out. " + words.Dash + " no indoor temperature."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return []block{heading("What moving air would add"),
		b.draw("air-movement-steps", "Suitable hours that each step of air movement would add to still air, by the cooling effect of moving air (SET). Steps to the right add little once the weather is too warm anyway.",
			"Moving air would add no suitable hour.", func(o chart.Options) (chart.SVG, error) { return chart.AddedHours(d, o) }),
		b.draw("air-movement-relief", "Occupied hours too warm indoors that each step of air movement would bring within the limit, by the cooling effect of moving air (SET), whatever runs. Zones with long bars gain most from a fan that people control.",
			"No zone was too warm indoors, or none logs its temperature.", func(o chart.Options) (chart.SVG, error) { return chart.AddedHours(rooms, o) }),
		b.table(t)}
}

// stepsOf are the hours each step of air speed adds to the one before it.
func stepsOf(totalH [4]float64, perYear float64) []float64 {
	var out []float64
	last := 0.0
	for _, v := range totalH {
		out = append(out, math.Max(0, v-last)*perYear)
		last = math.Max(last, v)
	}
	return out
}
