package chart

import (
	"fmt"
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Bounded is a value with the least and greatest it could be. Low and High may
// be NaN (not known); Value NaN means that there is no value.
type Bounded struct{ Value, Low, High float64 }

func (b Bounded) hasBounds() bool {
	return drawable(b.Low) && drawable(b.High) && b.High-b.Low > 1e-9
}

func (b Bounded) top() float64 {
	if b.hasBounds() {
		return math.Max(b.Value, b.High)
	}
	return b.Value
}

// words are the bounds in brackets, where there are any.
func (b Bounded) words(scale float64, unit string) string {
	if !b.hasBounds() {
		return ""
	}
	return " (" + number(b.Low*scale, 1) + " to " + number(b.High*scale, 1) + unit + ")"
}

// maxZoneRows is the most zones one figure shows; the rest are counted in a note.
const maxZoneRows = 60

// zoneRows lays out a chart with one row per zone, in two columns above 30
// zones, names on the left of each.
type zoneRows struct {
	names  []string
	extra  int // zones left out
	xTitle string
	lo, hi float64
	most   int  // ticks along a row, as far as they fit
	sided  bool // both sides of zero are labelled without a sign
	legend []legendEntry
	// right is the room kept on the right of each row for words.
	right vg.Length
	// note is a line below, such as what was left out and why.
	note string
	// say gives the words a browser shows under the pointer on row i.
	say func(i int) string
	// draw draws rows from..to; row i lies at height y(i), h high.
	draw func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(i int) vg.Length, h vg.Length)
}

func (z zoneRows) render(f frame) SVG {
	n := len(z.names)
	columns := 1
	if n > 30 {
		columns = 2
	}
	perColumn := (n + columns - 1) / columns
	rowH := vg.Length(11.5)
	if perColumn > 20 {
		rowH = 10
	}
	_, legendH := layLegend(z.legend, f.width)
	note := z.note
	if z.extra > 0 {
		if note != "" {
			note += "; "
		}
		note += fmt.Sprintf("%d more zones are in the tables", z.extra)
	}
	noteH := vg.Length(0)
	if note != "" {
		noteH = 11
	}
	const axisH = 24
	return f.render(legendH+rowH*vg.Length(perColumn)+axisH+noteH+3, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, z.legend)
		if note != "" {
			put(cv, sans(smallSize, inkFaint), vg.Point{X: 0, Y: 1}, note, f.width)
		}
		titleH := vg.Length(0)
		if columns > 1 {
			// One title for both columns, so that it may be as wide as the figure.
			put(cv, align(sans(textSize, inkText), -0.5, 0), vg.Point{X: f.width / 2, Y: noteH + 1}, z.xTitle, f.width)
			titleH = 11
		}
		sty := align(sans(textSize, inkText), -1, -0.5)
		gap := vg.Length(16)
		colW := (f.width - gap*vg.Length(columns-1)) / vg.Length(columns)
		left := vg.Length(0)
		for _, name := range z.names {
			left = max(left, sty.Width(clean(name)))
		}
		left = min(left, colW*0.4)
		for col := range columns {
			from, to := col*perColumn, min(n, (col+1)*perColumn)
			x0 := vg.Length(col) * (colW + gap)
			p := newPlot()
			p.X.Min, p.X.Max = z.lo, z.hi
			p.Y.Min, p.Y.Max = 0, float64(perColumn)
			p.HideY()
			p.X.Tick.Marker = ticksFor(colW-left-z.right-5, z.most)
			if z.sided {
				p.X.Tick.Marker = absoluteTicks{p.X.Tick.Marker}
			}
			if columns == 1 {
				p.X.Label.Text = fit(z.xTitle, sans(textSize, inkText), colW-left-z.right)
			}
			p.Add(grid(true, false), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
				_, fy := p.Transforms(&c)
				y := func(i int) vg.Length { return fy(float64(perColumn-(i-from)) - 0.5) }
				z.draw(cv, c, p, from, to, y, rowH)
				for i := from; i < to; i++ {
					put(cv, sty, vg.Point{X: x0 + left, Y: y(i)}, z.names[i], left)
					if z.say != nil {
						cv.say(rect(x0, y(i)-rowH/2, x0+colW, y(i)+rowH/2), z.names[i]+": "+z.say(i))
					}
				}
			}))
			box := area
			box.Min.X, box.Max.X = x0+left+5, x0+colW-z.right
			p.Draw(draw.Crop(box, 0, 0, noteH+titleH, -legendH-3))
		}
	})
}

// whisker draws the bounds of a value as a line with end marks, cut off at the
// edges of the plot.
func whisker(cv *canvas, c draw.Canvas, x0, x1, y, h vg.Length, ink color.Color) {
	cv.SetColor(ink)
	cv.SetLineWidth(0.8)
	cv.SetLineDash(nil, 0)
	a, b := clampLen(x0, c.Min.X, c.Max.X), clampLen(x1, c.Min.X, c.Max.X)
	segment(cv, a, y, b, y)
	segment(cv, a, y-h/2, a, y+h/2)
	segment(cv, b, y-h/2, b, y+h/2)
}
