package chart

import (
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// ChangeoverCurveData is how likely a plant unit or zone changes over within
// the hour, by outdoor temperature.
type ChangeoverCurveData struct {
	Caption
	// Closing and Opening are the observed shares, Y in %; Closed and Opened
	// the same by the fitted limits. Either may be empty.
	Closing, Opening, Closed, Opened []XY
	// Limits are observed outdoor limits; each is drawn over its interval.
	Limits []LimitBand
}

// LimitBand is a limit with its interval.
type LimitBand struct {
	Value, Low, High float64
	Label            string
	Opening          bool
}

// ChangeoverCurve draws the observed closing and opening curves as dots and
// the fitted ones as lines.
func ChangeoverCurve(d ChangeoverCurveData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("changeover curve", d.Caption, o)
	if err != nil {
		return "", err
	}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, list := range [][]XY{d.Closing, d.Opening} {
		for _, q := range list {
			if drawable(q.X) && drawable(q.Y) && math.Abs(q.X) < 1000 {
				lo, hi = math.Min(lo, q.X), math.Max(hi, q.X)
			}
		}
	}
	if hi < lo {
		return "", f.noData()
	}
	closeInk, closeDash := lineLook(Mech)
	openInk, openDash := lineLook(Open)
	closeSty, openSty := hline(closeInk, lineBold, closeDash...), hline(openInk, lineBold, openDash...)
	legend := []legendEntry{{label: "open mode ends within the hour (squares seen, line by the limits)", line: closeInk, width: lineBold, dash: closeDash},
		{label: "open mode begins within the hour (discs seen, line by the limits)", line: openInk, width: lineBold, dash: openDash}}
	_, legendH := layLegend(legend, f.width)
	return f.render(legendH+200, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, legend)
		drawYTitle(cv, 0, area.Max.Y-legendH, "chance within the hour (%)", f.width)
		p := newPlot()
		p.X.Min, p.X.Max = math.Floor(lo), math.Max(math.Ceil(hi), math.Floor(lo)+1)
		p.Y.Min, p.Y.Max = 0, 100
		p.X.Tick.Marker, p.Y.Tick.Marker = niceTicks{want: 10}, niceTicks{want: 5}
		p.X.Label.Text = "outdoor temperature (°C)"
		p.Add(grid(true, true), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			fx, fy := p.Transforms(&c)
			for _, l := range d.Limits {
				if !drawable(l.Value) || !c.ContainsX(fx(l.Value)) {
					continue
				}
				ink := closeInk
				if l.Opening {
					ink = openInk
				}
				a, b := fx(l.Value), fx(l.Value)
				if drawable(l.Low) && drawable(l.High) {
					a, b = clampLen(fx(l.Low), c.Min.X, c.Max.X), clampLen(fx(l.High), c.Min.X, c.Max.X)
				}
				cv.SetColor(color.NRGBA{R: ink.R, G: ink.G, B: ink.B, A: 40})
				cv.Fill(rect(a, c.Min.Y, max(b, a+0.5), c.Max.Y).Path())
				x := fx(l.Value)
				c.StrokeLine2(hline(ink, 0.8, 4, 2), x, c.Min.Y, x, c.Max.Y)
			}
			strokeCurve(c, p, d.Closed, closeSty)
			strokeCurve(c, p, d.Opened, openSty)
			sayCurves(cv, c, p, 20, []namedCurve{{"by the limits open mode ends", d.Closed}, {"begins", d.Opened}},
				func(x float64) string { return "outdoors " + number(x, 1) + " °C" }, 0, " %")
			dots := func(list []XY, square bool) {
				for _, q := range list {
					if !drawable(q.X) || !drawable(q.Y) || !c.Contains(vg.Point{X: fx(q.X), Y: fy(q.Y)}) {
						continue
					}
					x, y := fx(q.X), fy(q.Y)
					cv.say(rect(x-2.5, y-2.5, x+2.5, y+2.5), "outdoors "+number(q.X, 1)+" °C: seen to "+map[bool]string{true: "end ", false: "begin "}[square]+number(q.Y, 0)+" %")
					if square {
						cv.SetColor(closeInk)
						cv.Fill(rect(x-1.8, y-1.8, x+1.8, y+1.8).Path())
						continue
					}
					cv.SetColor(openInk)
					var disc vg.Path
					disc.Move(vg.Point{X: x + 2, Y: y})
					disc.Arc(vg.Point{X: x, Y: y}, 2, 0, 2*math.Pi)
					disc.Close()
					cv.Fill(disc)
				}
			}
			dots(d.Closing, true)
			dots(d.Opening, false)
			for i, l := range d.Limits {
				if !drawable(l.Value) || !c.ContainsX(fx(l.Value)) {
					continue
				}
				x := fx(l.Value)
				y := c.Max.Y - 2 - vg.Length(i%5)*10
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
