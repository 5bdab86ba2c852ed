package chart

import (
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// AirChangeData is the air change rate of zones in their running states.
type AirChangeData struct {
	Caption
	Rows []AirChangeRow
}

// AirChangeRow is one zone in one state. Zone is empty where the row belongs to
// the zone above.
type AirChangeRow struct {
	Zone  string
	State Class
	// PerH is the rate in 1/h with its 95 % interval.
	PerH Bounded
	// Events are the decays or days behind it; UpperOnly marks a rate that may
	// be mostly air from neighbours.
	Events    int
	UpperOnly bool
}

// AirChange draws a dot per zone and state with a whisker for its interval. Rows
// keep their order; those without a rate are left out.
func AirChange(d AirChangeData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("air change", d.Caption, o)
	if err != nil {
		return "", err
	}
	var rows []AirChangeRow
	most, upper := 0.0, false
	var classes []Class
	name := ""
	for _, r := range d.Rows {
		if r.Zone != "" {
			name = r.Zone
		}
		for _, v := range []float64{r.PerH.Value, r.PerH.Low, r.PerH.High} {
			if v < 0 {
				return "", f.errorf("zone %q: air change %v: must not be negative", name, v)
			}
		}
		if !drawable(r.PerH.Value) {
			continue
		}
		r.Zone = name // again, since the row that named it may be left out
		rows = append(rows, r)
		upper = upper || r.UpperOnly
		if !slices.Contains(classes, r.State) {
			classes = append(classes, r.State)
		}
		most = math.Max(most, r.PerH.top())
	}
	if len(rows) == 0 {
		return "", f.noData()
	}
	z := zoneRows{xTitle: "air change rate (1/h)", lo: 0, hi: math.Max(most*1.04, 0.1), most: 6}
	for _, c := range classes {
		z.legend = append(z.legend, legendEntry{label: c.Label(), class: c, dot: true})
	}
	z.legend = append(z.legend, legendEntry{label: "holds 95 times in 100", line: inkText, width: 0.8})
	if upper {
		z.note = "* so slow that air from neighbouring rooms may be most of it: an upper value"
	}
	if len(rows) > maxZoneRows {
		z.extra = 0
		if z.note != "" {
			z.note += "; "
		}
		z.note += number(float64(len(rows)-maxZoneRows), 0) + " more rows are in the tables"
		rows = rows[:maxZoneRows]
	}
	sty := align(sans(textSize, inkFaint), 0, -0.5)
	for _, r := range rows {
		z.names = append(z.names, r.Zone)
		z.right = max(z.right, sty.Width(rateText(r))+8)
	}
	z.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		for i := from; i < to; i++ {
			if b := rows[i].PerH; b.hasBounds() {
				whisker(cv, c, fx(b.Low), fx(b.High), y(i), h*0.35, inkText)
			}
			cv.SetColor(rows[i].State.Look().Fill)
			dot(cv, fx(rows[i].PerH.Value), y(i), 2.6)
		}
		for i := from; i < to; i++ {
			put(cv, sty, vg.Point{X: c.Max.X + 5, Y: y(i)}, rateText(rows[i]), z.right)
		}
	}
	z.say = func(i int) string { return rateText(rows[i]) + rows[i].PerH.words(1, "") }
	return z.render(f), nil
}

func rateText(r AirChangeRow) string {
	t := number(r.PerH.Value, 1)
	if r.PerH.Value < 1 {
		t = number(r.PerH.Value, 2)
	}
	if r.UpperOnly {
		t += "\u00a0*"
	}
	return t + ", " + r.State.Label()
}
