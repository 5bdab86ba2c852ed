package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// ExceedanceCurveData is the share of occupied time above each temperature.
type ExceedanceCurveData struct {
	Caption
	// XTitle names the temperature; empty means "indoor temperature (°C)".
	XTitle string
	// Curves, at most 6: X in °C, Y in % of the occupied time.
	Curves []NamedCurve
	// Limits stand upright, such as {26, "26 °C"}.
	Limits []Limit
}

// NamedCurve is a line with its words. Class gives it the look of a running
// state; None draws it in black and the dash of its place.
type NamedCurve struct {
	Name   string
	Class  Class
	Points []XY
}

// ExceedanceCurve draws how much of the occupied time lay above a temperature.
func ExceedanceCurve(d ExceedanceCurveData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("exceedance curve", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Curves) > 6 {
		return "", f.errorf("%d curves: at most 6 can be told apart", len(d.Curves))
	}
	dashes := [][]vg.Length{nil, {6, 2}, {2, 1.5}, {7, 1.5, 1.5, 1.5}, {0.8, 1.8}, {3, 3}}
	lo, hi, top := math.Inf(1), math.Inf(-1), 0.0
	var legend []legendEntry
	styles := make([]draw.LineStyle, len(d.Curves))
	for i, c := range d.Curves {
		if c.Class >= classCount {
			return "", f.errorf("curve %q: class %d is not known", c.Name, c.Class)
		}
		ink, dash := lineLook(c.Class)
		if c.Class == None {
			dash = dashes[i]
		}
		styles[i] = hline(ink, lineBold, dash...)
		legend = append(legend, legendEntry{label: c.Name, line: ink, width: lineBold, dash: dash})
		for _, q := range c.Points {
			if drawable(q.X) && drawable(q.Y) && math.Abs(q.X) < 1000 {
				lo, hi, top = math.Min(lo, q.X), math.Max(hi, q.X), math.Max(top, q.Y)
			}
		}
	}
	if hi < lo {
		return "", f.noData()
	}
	_, legendH := layLegend(legend, f.width)
	return f.render(legendH+200, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, legend)
		drawYTitle(cv, 0, area.Max.Y-legendH, "share of the occupied time above (%)", f.width)
		p := newPlot()
		p.X.Min, p.X.Max = math.Floor(lo), math.Max(math.Ceil(hi), math.Floor(lo)+1)
		p.Y.Min, p.Y.Max = 0, math.Min(100, ceilNice(top, 5))
		p.X.Tick.Marker, p.Y.Tick.Marker = niceTicks{want: 10}, niceTicks{want: 5}
		p.X.Label.Text = clean(d.XTitle)
		if p.X.Label.Text == "" {
			p.X.Label.Text = "indoor temperature (°C)"
		}
		p.Add(grid(true, true), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			fx, _ := p.Transforms(&c)
			for i, cu := range d.Curves {
				strokeCurve(c, p, cu.Points, styles[i])
			}
			named := make([]namedCurve, len(d.Curves))
			for i, cu := range d.Curves {
				named[i] = namedCurve{cu.Name, cu.Points}
			}
			sayCurves(cv, c, p, 20, named, func(x float64) string { return "above " + number(x, 1) + " °C" }, 0, " %")
			for i, l := range d.Limits {
				x := fx(l.Value)
				if !c.ContainsX(x) {
					continue
				}
				c.StrokeLine2(hline(inkText, 0.8, 4, 2), x, c.Min.Y, x, c.Max.Y)
				y := c.Max.Y - 2 - vg.Length(i%4)*10
				if x+3+sans(textSize, inkText).Width(clean(l.Label)) > c.Max.X {
					halo(cv, align(sans(textSize, inkText), -1, -1), x-3, y, l.Label)
				} else {
					halo(cv, align(sans(textSize, inkText), 0, -1), x+3, y, l.Label)
				}
			}
		}))
		p.Draw(draw.Crop(area, 0, -4, 0, -legendH-titleRow))
	}), nil
}
