package page

import (
	"strings"

	"sashlog/analyze/doubt"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// doubtParts shows what the doubt of the building's figures is made of, and
// what would shrink it.
func (b *builder) doubtParts() []block {
	d := b.in.Results.Doubt
	if d == nil || b.w.CanSay() != words.Full {
		return nil
	}
	k := b.span.PerYear
	out := []block{heading("What the doubt is made of"),
		text("Two kinds of doubt stand beside each other and are not added up. Hours that cannot be judged leave bounds: the true figure lies between them whatever happened. Sensors have errors of their own, which give an interval: if the sensors are as accurate as assumed here, the true figure lies within it nine times in ten.")}
	t := table{ID: "doubt-parts", Caption: "How far each source of doubt alone could move the figures of the average occupant",
		Head: []column{col("Source"), col("Assumed"), num("Suited (± h)"), num("Achieved (± h)"), num("of it comfortable and fresh (± h)"), num("Missed (± h)"), num("Share reached (± points)"), col("What would shrink it")}}
	half := words.HoursNumber(d.UnknownHalfH * k)
	t.Rows = append(t.Rows, row("Suited hours nobody can judge (half the bounds)", words.Dash, words.Dash, half, words.Dash, half, words.Dash, "the missing window contacts, plant status or readings: see what these logs can answer"))
	total := &d.Building
	for p := doubt.Part(0); p < doubt.NumParts; p++ {
		if !d.Logged[p] {
			continue
		}
		half := func(i doubt.Interval, scale float64) string { return words.HoursNumber(i.HalfWidth[p] * scale) }
		t.Rows = append(t.Rows, row(strings.TrimSuffix(words.Sentence(words.DoubtPart(p)), "."), d.Assumed[p], half(total.SuitedH, k), half(total.AchievedH, k), half(total.AchievedOKH, k),
			half(total.MissedH, k), words.Number(total.AchievedShare.HalfWidth[p]*100, 1), shrinks(p)))
	}
	t.Foot = []string{"Hours " + b.span.Words + ", half widths of 90 % intervals. The accuracies are settings of the site file; the headline criterion and what counts as open are taken as they stand.",
		"Together the sensors leave: suited " + words.HoursBetween(total.SuitedH.Value*k, total.SuitedH.Low*k, total.SuitedH.High*k) + ", achieved " +
			words.HoursBetween(total.AchievedH.Value*k, total.AchievedH.Low*k, total.AchievedH.High*k) + ", missed " +
			words.HoursBetween(total.MissedH.Value*k, total.MissedH.Low*k, total.MissedH.High*k) + "."}
	if w := b.gains(d); w != "" {
		out = append(out, text(w))
	}
	bars := chart.DoubtBarsData{Caption: chart.Caption{Title: "What the doubt in the missed hours is made of", Desc: "A bar per source of doubt."}, XTitle: "missed hours of the average occupant (± h " + b.span.Words + ")",
		Parts: []chart.DoubtPart{{Name: "hours that cannot be judged", Half: d.UnknownHalfH * k, Unknown: true}}}
	for p := doubt.Part(0); p < doubt.NumParts; p++ {
		if d.Logged[p] {
			bars.Parts = append(bars.Parts, chart.DoubtPart{Name: p.String(), Half: total.MissedH.HalfWidth[p] * k})
		}
	}
	return append(out, b.draw("doubt-bars", "How far each source of doubt alone could move the hours missed. The longest bar is the one worth shortening first; the table says how.",
		"No source of doubt moves the missed hours.", func(o chart.Options) (chart.SVG, error) { return chart.DoubtBars(bars, o) }), b.table(t))
}

// gains says which measurement would take most off the doubt of the missed
// hours, and which sensor if that is not one.
func (b *builder) gains(d *doubt.Result) string {
	k := b.span.PerYear
	var said []string
	for _, g := range d.Gains() {
		from, to := words.HoursNumber(g.FromH*k), words.HoursNumber(g.ToH*k)
		switch {
		case g.Unknown && len(said) == 0:
			said = append(said, "Most would be gained by judging the hours that now cannot be judged (see what these logs can answer): the bounds of the missed hours, ±"+from+" h "+b.span.Words+", would close.")
			continue
		case g.Unknown:
			continue
		case len(said) == 0:
			said = append(said, "Most would be gained at "+words.DoubtPart(g.Part)+": twice as accurate, the interval of the missed hours would shrink from ±"+from+" to ±"+to+" h "+b.span.Words+" ("+shrinks(g.Part)+").")
		default:
			said = append(said, "Among the sensors most would be gained at "+words.DoubtPart(g.Part)+": twice as accurate, their interval would shrink from ±"+from+" to ±"+to+" h ("+shrinks(g.Part)+").")
		}
		break
	}
	return strings.Join(said, " ")
}

func shrinks(p doubt.Part) string {
	switch p {
	case doubt.OutdoorTemp:
		return "a ventilated, shaded outdoor sensor, compared with a nearby station"
	case doubt.OutdoorHumidity:
		return "an outdoor humidity sensor calibrated within a year"
	case doubt.IndoorTemp:
		return "room sensors compared with a reference for a day"
	}
	return "CO2 sensors compared outdoors, and outdoor CO2 logged"
}
