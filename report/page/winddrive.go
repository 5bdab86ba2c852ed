package page

import (
	"fmt"
	"math"

	"sashlog/analyze/breeze"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// driven shows the air change measured in open mode against the wind.
func (b *builder) driven(w *breeze.Result) []block {
	out := []block{heading("Ventilation in open mode against the wind")}
	d := w.Drive
	if d == nil || len(d.Points) == 0 {
		return append(out, note("No air change rate was measured in open mode together with the wind, so this cannot be said. It takes rooms that empty with their windows open and CO2 well above outdoors, or a counter of people in a room whose windows open."))
	}
	out = append(out, text(b.drivenWords(d)))
	usual := "air change, times what is usual in the zone when open"
	one := func(id, title, caption, none string, groups []breeze.Group) block {
		data := chart.GroupRatesData{Caption: chart.Caption{Title: title, Desc: "Median of measured air change rates with its interval, as multiples of what is usual in the zone."},
			XTitle: usual, Usual: 1, UsualLabel: "usual in the zone", Counted: "rates"}
		for _, g := range groups {
			data.Groups = append(data.Groups, chart.GroupRate{Group: trimmed(words.Sentence(g.Name)), Rate: chart.Bounded{Value: g.Median, Low: g.Low, High: g.High}, Count: g.Rates()})
		}
		return b.draw(id, caption, none, func(o chart.Options) (chart.SVG, error) { return chart.GroupRates(data, o) })
	}
	speeds := d.Speeds
	for _, g := range d.Sides {
		if g.Rates() > 0 {
			speeds = append(speeds[:len(speeds):len(speeds)], g)
		}
	}
	out = append(out,
		one("air-change-speeds", "Ventilation in open mode by wind speed and side", "Ventilation in open mode by the wind at the openings: by its speed, and by whether it blew onto the openings (windward) or came from behind. Dots to the right of the line: more air than usual.",
			"No class of wind has enough measured air change rates to be drawn.", speeds),
		one("air-change-sectors", "Ventilation in open mode by sector", "Ventilation in open mode by the sector the wind came from. Where intervals overlap, the sectors may not differ.",
			"No sector has enough measured air change rates to be drawn: "+sectorCounts(d)+".", d.Sectors))
	return append(out, b.table(b.driveTable(d)))
}

// drivenWords answers in words, with what the answer rests on.
func (b *builder) drivenWords(d *breeze.Drive) string {
	var names []string
	for _, z := range d.Zones {
		names = append(names, b.w.Zone(z))
	}
	rests := fmt.Sprintf("%s measured in open mode, on %s", words.Plural(len(d.Points)-d.Alone, "air change rate", "air change rates"), words.Plural(d.Days, "day", "days"))
	if len(names) > 0 {
		rests += ", in " + words.List(names, 6)
	}
	switch {
	case math.IsNaN(d.SlopePerMS):
		return "Too little was measured to say whether the wind drives the air change: " + rests + "."
	case d.Driven:
		return fmt.Sprintf("Yes, the wind drives it: each m/s more at the openings came with %s of a zone's usual air change more (95 times in 100 between %s and %s). It rests on %s.", words.Share(d.SlopePerMS), words.Share(d.SlopeLow), words.Share(d.SlopeHigh), rests)
	case d.SlopeHigh < 0:
		return fmt.Sprintf("No: with more wind the air change was smaller, by %s to %s of a zone's usual air change per m/s at the openings; windows may be opened less far then. It rests on %s.", words.Share(-d.SlopeHigh), words.Share(-d.SlopeLow), rests)
	}
	return fmt.Sprintf("Not shown that the wind drives it: per m/s at the openings the air change moved by between %s and %s times what is usual in a zone, which includes nothing. It rests on %s.", words.Number(d.SlopeLow, 2), words.Number(d.SlopeHigh, 2), rests)
}

// sectorCounts lists how many rates each sector has.
func sectorCounts(d *breeze.Drive) string {
	var list []string
	for _, g := range d.Sectors {
		if n := g.Rates(); n > 0 {
			list = append(list, fmt.Sprintf("%s %d", g.Name, n))
		}
	}
	if len(list) == 0 {
		return "none has any"
	}
	return words.List(list, len(list))
}

func (b *builder) driveTable(d *breeze.Drive) table {
	t := table{ID: "air-change-wind", Caption: "Air change in open mode against the wind at the openings", Small: true,
		Head: []column{col("Wind"), num("Decays"), num("Counted days"), num("Zones"), num("Median (per h)"), num("Times what is usual"), num("95 % interval")}}
	for _, list := range [][]breeze.Group{d.Speeds, d.Sides, d.Sectors} {
		for _, g := range list {
			interval := words.Dash
			if !math.IsNaN(g.Low) {
				interval = words.Number(g.Low, 2) + " to " + words.Number(g.High, 2)
			}
			t.Rows = append(t.Rows, row(trimmed(words.Sentence(g.Name)), words.Count(int64(g.Decays)), words.Count(int64(g.Days)), words.Count(int64(g.Zones)),
				words.Number(g.MedianPerH, 1), words.Number(g.Median, 2), interval))
		}
	}
	t.Foot = []string{fmt.Sprintf("Each rate over the median of its zone by the same way of measuring. Groups of fewer than %d rates, or with an interval of more than ten times, are not judged. Decays happen when rooms empty, mostly in the evening; temperature and how far windows stand open vary too.", d.Least)}
	if d.NoWind > 0 {
		t.Foot = append(t.Foot, words.Plural(d.NoWind, "rate", "rates")+" without a known wind left out.")
	}
	if d.Alone > 0 {
		t.Foot = append(t.Foot, words.Plural(d.Alone, "rate", "rates")+" left out, with no other of the same zone to compare with.")
	}
	return t
}
