package page

import (
	"fmt"
	"math"

	"sashlog/analyze/breeze"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// wind shows where the wind came from, also when it was wanted, and what it did.
func (b *builder) wind() section {
	w := b.in.Results.Breeze
	if w == nil {
		return section{}
	}
	s := section{ID: "wind", Title: "Wind at the openings"}
	if w.Missing != "" {
		s.Blocks = append(s.Blocks, note(words.Sentence(w.Missing)))
	}
	if !w.SpeedLogged {
		s.Blocks = append(s.Blocks, text("An anemometer with a vane on the roof, or the hourly file of a nearby station, would show which façade's openings catch the wind when a breeze is wanted."))
		return s
	}
	s.Blocks = append(s.Blocks, text(fmt.Sprintf("A breeze is wanted in occupied hours above %s outdoors (common practice, a setting): %s %s, of which %s suited open mode. Wind below %s counts as calm: in the total, but with no direction.",
		words.Unit(w.WantedAboveC, 0, "°C"), words.Hours(roseHours(&w.Wanted)*b.span.PerYear), b.span.Words, words.Hours(w.WantedSuitedH*b.span.PerYear), words.Unit(w.CalmMS, 1, "m/s"))))
	s.Blocks = append(s.Blocks, b.roses(w), b.roseTable(w))
	s.Blocks = append(s.Blocks, b.facings(w)...)
	s.Blocks = append(s.Blocks, heading("From the mast to the openings"), text(b.heightWords(&w.Speed)))
	s.Blocks = append(s.Blocks, b.driven(w)...)
	return s
}

// roseHours are all hours with a known speed.
func roseHours(r *breeze.Rose) float64 { return r.KnownH + r.NoDirectionH }

// namedRoses are the roses in the order shown.
func namedRoses(w *breeze.Result) []struct {
	name string
	rose *breeze.Rose
} {
	return []struct {
		name string
		rose *breeze.Rose
	}{{"all hours", &w.All}, {"occupied, weather suitable", &w.Suited}, {"breeze wanted", &w.Wanted}}
}

func (b *builder) roses(w *breeze.Result) block {
	d := chart.WindRosesData{Caption: chart.Caption{Title: "Wind roses: all hours, occupied suitable hours, hours when a breeze is wanted", Desc: "Share of the hours by the direction the wind came from and its speed."}}
	d.Bands = append(d.Bands, breeze.ClassNames[:]...)
	for _, n := range namedRoses(w) {
		r := n.rose
		one := chart.NamedRose{Name: n.name, Note: words.Hours(r.KnownH*b.span.PerYear) + ", mean " + words.Unit(r.MeanMS, 1, "m/s")}
		for s := range r.HoursH {
			var shares []float64
			for _, h := range r.HoursH[s] {
				if r.KnownH > 0 {
					h *= 100 / r.KnownH
				}
				shares = append(shares, h)
			}
			one.Sectors = append(one.Sectors, shares)
		}
		if r.KnownH > 0 {
			one.CalmShare = 100 * r.CalmH / r.KnownH
		}
		d.Roses = append(d.Roses, one)
	}
	for _, f := range w.Facings {
		d.FacesDeg = append(d.FacesDeg, f.FaceDeg)
	}
	return b.draw("wind-roses", "Where the wind came from: in all hours, in occupied hours with suitable weather, and when a breeze is wanted. Where the right rose points elsewhere than the left one, the usual wind is not the one that cools people.",
		"No hour has both a wind speed and a direction, so no rose can be drawn.", func(o chart.Options) (chart.SVG, error) { return chart.WindRoses(d, o) })
}

func (b *builder) roseTable(w *breeze.Result) block {
	k := b.span.PerYear
	t := table{ID: "wind-hours", Caption: "Wind by kind of hour", Small: true, Head: []column{col("Hours"), num("Known (h)"), num("Calm"), keep("Most often from"), num("Mean direction"), num("Steadiness"), num("Mean (m/s)"), num("No direction (h)"), num("Not known (h)")}}
	for _, n := range namedRoses(w) {
		r := n.rose
		from, calm, mean := words.Dash, words.Dash, words.Dash
		if s := r.Main(); s >= 0 {
			from = breeze.SectorNames[s]
		}
		if r.KnownH > 0 {
			calm = words.Share(r.CalmH / r.KnownH)
		}
		if !math.IsNaN(r.MeanDeg) {
			mean = words.Number(r.MeanDeg, 0) + "°"
		}
		t.Rows = append(t.Rows, row(trimmed(words.Sentence(n.name)), words.HoursNumber(r.KnownH*k), calm, from, mean, words.Number(r.Steadiness, 2), words.Number(r.MeanMS, 1), words.HoursNumber(r.NoDirectionH*k), words.HoursNumber(r.UnknownH*k)))
	}
	t.Foot = []string{"Hours " + b.span.Words + ", at the mast. Steadiness 1: always from one side; 0: from everywhere alike."}
	return b.table(t)
}

func (b *builder) facings(w *breeze.Result) []block {
	out := []block{heading("Which openings catch the wanted wind?")}
	if len(w.Facings) == 0 {
		return append(out, note("The site file gives no direction (faces) for any zone with openings, so no façade can be named."))
	}
	if !w.DirectionOK {
		return append(out, note("Without a wind direction no façade can be named."))
	}
	f := &w.Facings[0]
	if f.WindwardH > 0 {
		out = append(out, text(fmt.Sprintf("Openings facing %s catch most of it: %s of the wanted hours with a known wind, %s at the openings on average. Openings on two sides let air through; the table shows each side by itself.",
			breeze.FaceName(f.FaceDeg), words.Share(f.WindwardShare), words.Unit(f.MeanWindwardMS, 1, "m/s"))))
	}
	k := b.span.PerYear
	t := table{ID: "wind-facings", Caption: "Wanted wind on the openings by the direction they face", Small: true,
		Head: []column{col("Facing"), col("Zones"), num("Windward (h)"), num("Leeward (h)"), num("Calm (h)"), num("Windward"), num("Mean when windward (m/s)")}}
	for i := range w.Facings {
		f := &w.Facings[i]
		var names []string
		for _, z := range f.Zones {
			names = append(names, b.w.Zone(z))
		}
		t.Rows = append(t.Rows, row(fmt.Sprintf("%s (%g°)", breeze.FaceName(f.FaceDeg), f.FaceDeg), words.List(names, 6), words.HoursNumber(f.WindwardH*k), words.HoursNumber(f.LeewardH*k),
			words.HoursNumber(f.CalmH*k), words.Share(f.WindwardShare), words.Number(f.MeanWindwardMS, 1)))
	}
	t.Foot = []string{"Hours of the average occupant " + b.span.Words + ". Windward: wind from within 60° of the direction the opening faces (EN 16798-7); speed at the height of the openings. Sheltering by other buildings is not in it."}
	if n := len(w.FacesUnknown); n > 0 {
		t.Foot = append(t.Foot, words.Zones(n)+" with openings "+isAre(n)+" left out: no direction is given.")
	}
	return append(out, b.table(t))
}

func (b *builder) heightWords(s *breeze.Speed) string {
	return fmt.Sprintf("Speeds at the openings are those of the mast times %s: mast %g m high over %s, openings %g m over %s (ASHRAE Fundamentals ch. 24). The roughness of EN 16798-7 would give %s. Heights and terrain are settings; below the mean height of the obstacles about neither is reliable.",
		words.Number(s.Factor, 2), s.MastM, words.Clean(s.MastTerrain), s.OpeningM, words.Clean(s.OpeningTerrain), words.Number(s.ENFactor, 2))
}
