package page

import (
	"sashlog/analyze/hours"
	"sashlog/report/chart"
	"sashlog/report/words"
)

func (b *builder) weather() section {
	s := section{ID: "weather", Title: "What the weather offered"}
	p := b.in.Results.Potential
	if !b.in.Results.Outdoor.Measured {
		s.Blocks = append(s.Blocks, note("No measured outdoor temperature covers the period, so no hour can be called suitable. A sensor on the site, or the hourly file of a nearby station, closes this gap; a typical year may not stand in for it."))
	}
	s.Blocks = append(s.Blocks, text("“Weather suitable” counts occupied hours in which outdoor air could keep a zone within its limits. There is more than one defensible way of counting; where the ways differ much, the answer depends on the setting and not on the building."))
	t := table{ID: "suitable-hours", Caption: "Suitable hours of the average occupant by way of counting", Small: true,
		Head: []column{col("Way of counting"), num("Suitable per working day"), num("Suitable hours " + b.span.Words), num("Weather unknown"), col("Rule and source")}}
	for _, m := range p.Methods {
		low, high := m.SuitedH*b.span.PerYear, (m.SuitedH+m.UnknownH)*b.span.PerYear
		name := m.Name
		rule := words.Sentence(m.Words)
		if m.Source != "" {
			rule += " Source: " + words.Clean(m.Source) + "."
		}
		t.Rows = append(t.Rows, row(words.Clean(name), words.Duration(b.span.PerDay(m.SuitedH)), words.HoursBetween(low, low, high), words.Hours(m.UnknownH*b.span.PerYear), rule))
	}
	if len(t.Rows) > 0 {
		t.Foot = []string{"Brackets: from no unknown hour suitable to all of them."}
		s.Blocks = append(s.Blocks, b.table(t))
	}
	// The typical year has a part of its own where the climate was worked out.
	if y := p.Typical; y != nil && b.in.Results.Climate == nil {
		s.Blocks = append(s.Blocks, text("Against a typical year ("+words.Clean(y.Name)+", plain band with humidity limit, "+words.Plural(y.Months, "month", "months")+" compared): "+
			words.Hours(y.MeasuredH)+" were in the band as measured, "+words.Hours(y.TypicalH)+" in the typical year. Mean outdoor temperature "+
			words.Unit(y.MeasuredMeanC, 1, "°C")+" as measured, "+words.Unit(y.TypicalMeanC, 1, "°C")+" in the typical year. The typical year only says whether the logged weather was normal; it never stands in for measured weather."))
	}
	if len(p.Tested) > 0 {
		s.Blocks = append(s.Blocks, text("Which tests the logs allowed (not logged means not tested, never calm or dry):"), block{List: b.foreign(p.Tested)})
	}
	s.Blocks = append(s.Blocks, b.outdoorAir())
	s.Blocks = append(s.Blocks, b.climate()...)
	return s
}

func (b *builder) foreign(list []string) []string {
	out := make([]string, len(list))
	for i, x := range list {
		out[i] = words.Sentence(b.w.Foreign(x))
	}
	return out
}

// outdoorAir draws one point per occupied hour: the step in its middle.
func (b *builder) outdoorAir() block {
	out, class, from := b.in.Results.Outdoor, b.in.Results.Summary.CarpetClass, b.in.Grid.PeriodFrom
	d := chart.OutdoorQuadrantsData{Caption: chart.Caption{Title: "Outdoor air of the occupied hours by outcome", Desc: "One point per occupied hour: outdoor temperature across, dew point upwards."},
		Humidity: chart.DewPointC}
	none := "Outdoor humidity is not logged, so outdoor temperature cannot be drawn against it."
	if b.withheldTogether() {
		return note(privacyNote + " The picture of single hours against the outdoor air is left out, since all zones together are usually used by no more than three people.")
	}
	if out.TempC != nil && out.DewPointC != nil {
		for _, h := range b.in.Results.Hours.Hours {
			i := (h.FromStep + h.ToStep) / 2
			if k := i - from; k < 0 || k >= len(class) || i >= len(out.TempC) || class[k] == hours.NotOccupied {
				continue
			}
			d.Points = append(d.Points, chart.OutdoorPoint{TempC: float64(out.TempC[i]), Humidity: float64(out.DewPointC[i]), Class: classLook[class[i-from]]})
		}
		if c := b.in.Criteria; c.OutdoorLowC > 0 {
			d.TempLimits = []chart.Limit{{Value: c.OutdoorLowC, Label: "coldest that suits"}}
		}
		if c := b.in.Criteria; c.DewPointMaxC > 0 {
			d.HumidityLimits = []chart.Limit{{Value: c.DewPointMaxC, Label: "most humid that suits"}}
		}
	}
	return b.draw("outdoor-air", "Outdoor air in the occupied hours, coloured by the outcome of most people. Orange between the limits is what could have been open; where orange and blue lie on the same spot, the same weather was treated differently.",
		none, func(o chart.Options) (chart.SVG, error) { return chart.OutdoorQuadrants(d, o) })
}
