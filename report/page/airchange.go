package page

import (
	"fmt"
	"math"

	"sashlog/analyze/freshair"
	"sashlog/analyze/running"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// airChangeChart draws the rates with their intervals.
func (b *builder) airChangeChart() block {
	d := chart.AirChangeData{Caption: chart.Caption{Title: "Air change rate by zone and running state", Desc: "A dot per zone and running state with a whisker for its interval."}}
	zones, _ := b.capped(b.order)
	for _, z := range zones {
		if z >= len(b.in.Results.FreshAir.Zones) {
			continue
		}
		for _, st := range statesShown {
			a := &b.in.Results.FreshAir.Zones[z].AirChange[st]
			d.Rows = append(d.Rows, chart.AirChangeRow{Zone: b.w.Zone(z), State: stateLook[st], Events: a.Events, UpperOnly: a.UpperOnly,
				PerH: chart.Bounded{Value: a.MedianPerH, Low: a.LowPerH, High: a.HighPerH}})
		}
	}
	return b.draw("air-change-rates", "Air change rate by zone and running state, with 95 % intervals. States of one zone compare well with each other, since sensor and outdoor level are the same.",
		"There is no air change rate to draw.", func(o chart.Options) (chart.SVG, error) { return chart.AirChange(d, o) })
}

// offsets says how far the zones' lowest CO2 lay from outdoors, and what was
// done about it.
func (b *builder) offsets() string {
	low, high, n, corrected := math.Inf(1), math.Inf(-1), 0, 0
	var far []string
	for z := range b.in.Results.FreshAir.Zones {
		o := &b.in.Results.FreshAir.Zones[z].Baseline
		if o.Weeks == 0 || math.IsNaN(o.OffsetPPM) {
			continue
		}
		n++
		low, high = math.Min(low, o.OffsetPPM), math.Max(high, o.OffsetPPM)
		if o.Corrected {
			corrected++
		}
		if math.Abs(o.OffsetPPM) > o.ExplainedPPM {
			far = append(far, fmt.Sprintf("%s (%s ppm)", b.w.Zone(z), words.Number(o.OffsetPPM, 0)))
		}
	}
	if n == 0 {
		return ""
	}
	s := fmt.Sprintf("At its lowest, in the middle week, CO2 lay between %s and %s ppm above the outdoor level in %s; a sensor that is right, in a room aired out once a week, comes to 0. ", words.Number(low, 0), words.Number(high, 0), words.Zones(n))
	if corrected > 0 {
		s += "This was taken off as the sensor's offset in " + words.Zones(corrected) + ", as the settings ask."
	} else {
		s += "Nothing was taken off (a setting, co2_baseline)."
	}
	if len(far) > 0 {
		s += " More than sensor and outdoor level explain: " + words.List(far, 6) + ". These rooms may never be aired out, or their sensors are off; a check outdoors tells."
	}
	return s
}

// openUnmeasured says in how many zones that ran open no rate could be had, and
// why in the first of them.
func (b *builder) openUnmeasured() string {
	ran, none, example := 0, 0, ""
	for _, z := range b.order {
		if z >= len(b.in.Results.FreshAir.Zones) {
			continue
		}
		x := &b.in.Results.FreshAir.Zones[z]
		if !x.HasCO2 || !(x.State[running.Open].KnownH > 0) {
			continue
		}
		ran++
		if why := x.AirChange[running.Open].NotMeasurable; why != "" {
			none++
			if example == "" {
				example = b.w.Zone(z) + ": " + b.w.Foreign(why)
			}
		}
	}
	if none == 0 {
		return ""
	}
	return fmt.Sprintf("Open mode is not measurable in %d of %s that ran open. For example %s.", none, words.Zones(ran), example)
}

// airBeside are the figures beside the rates: what is asked for, what plant
// adds, and air breathed before.
func (b *builder) airBeside() []block {
	var out []block
	if t := b.airNeeds(); len(t.Rows) > 0 {
		out = append(out, heading("Against what is asked for"), b.table(t))
	}
	if t := b.plantAir(); len(t.Rows) > 0 {
		out = append(out, heading("Does the plant bring outdoor air?"),
			text("Air change with windows shut and plant running, less that with everything off, both after the room emptied. A unit that only cools the room's own air adds next to nothing."), b.table(t))
	}
	if t := b.rebreathed(); len(t.Rows) > 0 {
		out = append(out, heading("Air breathed before"), note(words.Sentence(b.in.Results.FreshAir.RebreathedCaution)), b.table(t))
	}
	return out
}

func (b *builder) airNeeds() table {
	fa := b.in.Results.FreshAir
	t := table{ID: "air-needs", Caption: "Outdoor air measured against what rules ask for at the usual number of people",
		Head: []column{col("Zone"), col("Asked by"), num("L/s per person"), num("L/s")}}
	for _, st := range statesShown {
		t.Head = append(t.Head, keep(stateWords[st]))
	}
	zones, foot := b.capped(b.order)
	for _, z := range zones {
		if z >= len(fa.Zones) || !fa.Zones[z].HasCO2 {
			continue
		}
		name := b.w.Zone(z)
		for k, r := range fa.Zones[z].Required {
			cells := []string{name, words.Clean(r.Name), words.Number(r.LsPerson, 1), words.Number(r.Ls, 0)}
			for _, st := range statesShown {
				cells = append(cells, string(fa.Zones[z].Verdicts[st][k]))
			}
			t.Rows = append(t.Rows, row(cells...))
			name = ""
		}
	}
	t.Foot = []string{"“Unproven”: not measured, or the interval holds the amount asked for. Asked of new buildings as a rule; whether it applies here is for the code in force and whoever answers for it. These figures certify nothing."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return t
}

func (b *builder) plantAir() table {
	t := table{ID: "plant-air", Caption: "What running plant adds to the air change",
		Head: []column{col("Plant"), keep("Declared"), col("Zone"), num("Running (per h)"), num("Off (per h)"), num("Added (per h)"), num("95 % interval"), num("L/s per person"), col("Together")}}
	for _, p := range b.in.Results.FreshAir.Plants {
		name, declared, finding := b.w.Foreign(b.in.Site.Plant[p.Plant].ID), string(p.Declared), string(p.Finding)
		if declared == "" {
			declared = words.Dash
		}
		for _, g := range p.Zones {
			t.Rows = append(t.Rows, row(name, declared, b.w.Zone(g.Zone), rate(g.MechPerH), rate(g.ShutPerH), words.Number(g.PerH, 2),
				words.Number(g.LowPerH, 2)+" to "+words.Number(g.HighPerH, 2), words.Number(g.LsPerson, 1), finding))
			name, declared, finding = "", "", ""
		}
	}
	t.Foot = []string{"“No outdoor air worth mentioning” is less than a quarter of the 7 L/s per person of EN 16798-1 category II in every zone measured; doors that stand open by day alone can bring about so much. Units without both rates measured are left out."}
	return t
}

func (b *builder) rebreathed() table {
	fa := b.in.Results.FreshAir
	t := table{ID: "rebreathed", Caption: "Share of the air breathed in that somebody had breathed out before, in occupied time", Head: []column{col("Zone"), num("All (%)")}}
	for _, st := range statesShown {
		t.Head = append(t.Head, num(stateWords[st]+" (%)"))
	}
	zones, foot := b.capped(b.co2Worst())
	for _, z := range zones {
		x := &fa.Zones[z]
		cells := []string{b.w.Zone(z), rebreathedPct(x.Rebreathed[running.NumStates])}
		for _, st := range statesShown {
			cells = append(cells, rebreathedPct(x.Rebreathed[st]))
		}
		t.Rows = append(t.Rows, row(cells...))
	}
	limit := freshair.RebreathedFraction(b.in.Criteria.CO2AboveOutdoorPPM, 0)
	t.Foot = []string{"CO2 above outdoors over that of breath, 3.8 % (Rudnick & Milton 2003, from memory). At the CO2 limit in force it is " + rebreathedPct(limit) + " %."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return t
}

func rebreathedPct(share float64) string {
	if math.IsNaN(share) {
		return words.Dash
	}
	return words.Number(100*share, 1)
}
