package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// DoubtBarsData is how far each source of doubt alone moves a figure.
type DoubtBarsData struct {
	Caption
	XTitle string
	Parts  []DoubtPart
}

// DoubtPart is one source of doubt with its half width; Unknown marks what
// unknown hours leave, which are bounds and not an interval.
type DoubtPart struct {
	Name    string
	Half    float64
	Unknown bool
}

// DoubtBars draws a bar per source, in the order given.
func DoubtBars(d DoubtBarsData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("doubt bars", d.Caption, o)
	if err != nil {
		return "", err
	}
	rows := zoneRows{xTitle: d.XTitle, most: 6, right: 34}
	var parts []DoubtPart
	bounds := false
	for _, x := range d.Parts {
		if outside(x.Half) {
			return "", f.errorf("part %q: half width %v: must be 0 to 1e9", x.Name, x.Half)
		}
		if !drawable(x.Half) {
			continue
		}
		parts = append(parts, x)
		rows.names = append(rows.names, x.Name)
		rows.hi = math.Max(rows.hi, x.Half)
		bounds = bounds || x.Unknown
	}
	if rows.hi == 0 || len(parts) > maxZoneRows {
		return "", f.noData()
	}
	rows.hi = ceilNice(rows.hi, 6)
	rows.legend = []legendEntry{{label: "accuracy of sensors: interval that holds nine times in ten", class: Open}}
	if bounds {
		rows.legend = append(rows.legend, legendEntry{label: "unknown hours: bounds that always hold", class: Unjudged})
	}
	rows.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		var bars []bar
		for i := from; i < to; i++ {
			class := Open
			if parts[i].Unknown {
				class = Unjudged
			}
			bars = append(bars, bar{class: class, Rectangle: rect(fx(0), y(i)-h*0.32, fx(parts[i].Half), y(i)+h*0.32)})
		}
		drawBars(cv, bars)
		sty := align(sans(textSize, inkFaint), 0, -0.5)
		for i := from; i < to; i++ {
			put(cv, sty, vg.Point{X: fx(parts[i].Half) + 4, Y: y(i)}, "± "+hoursText(parts[i].Half), 40)
		}
	}
	rows.say = func(i int) string { return "± " + hoursText(parts[i].Half) }
	return rows.render(f), nil
}
