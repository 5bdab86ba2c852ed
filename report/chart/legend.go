package chart

import (
	"image/color"

	"gonum.org/v1/plot/vg"
)

// legendEntry is one key above a plot: a swatch of a class, or a line sample.
type legendEntry struct {
	label string
	class Class
	line  color.Color // when not nil, a line instead of a swatch
	width vg.Length
	dash  []vg.Length
	band  color.Color // when not nil, a plain swatch in this colour
	dot   bool        // a round dot in the colour of the class
}

const (
	swatchW   = vg.Length(11)
	swatchH   = vg.Length(7)
	keyGap    = vg.Length(3.5)
	entryGap  = vg.Length(11)
	legendRow = vg.Length(11.5)
)

func classLegend(classes []Class) []legendEntry {
	var out []legendEntry
	for _, c := range classes {
		out = append(out, legendEntry{label: c.Label(), class: c})
	}
	return out
}

// legendPlace is where an entry goes: row from the top, and left edge.
type legendPlace struct {
	row int
	x   vg.Length
}

// layLegend breaks the entries into rows no wider than width.
func layLegend(entries []legendEntry, width vg.Length) (places []legendPlace, height vg.Length) {
	if len(entries) == 0 {
		return nil, 0
	}
	sty := sans(textSize, inkText)
	row, x := 0, vg.Length(0)
	for _, e := range entries {
		w := swatchW + keyGap + sty.Width(fit(e.label, sty, width-swatchW-keyGap))
		if x > 0 && x+w > width {
			row, x = row+1, 0
		}
		places = append(places, legendPlace{row, x})
		x += w + entryGap
	}
	return places, vg.Length(row+1)*legendRow + 3
}

// drawLegend draws the entries with their top left corner at (left, top).
func drawLegend(cv *canvas, left, top, width vg.Length, entries []legendEntry) {
	places, _ := layLegend(entries, width)
	sty := align(sans(textSize, inkText), 0, -0.5)
	mid := func(i int) vg.Length { return top - legendRow*vg.Length(places[i].row) - legendRow/2 }
	var bars []bar
	for i, e := range entries {
		x := left + places[i].x
		if e.line == nil && e.band == nil && !e.dot {
			bars = append(bars, bar{class: e.class, Rectangle: rect(x, mid(i)-swatchH/2, x+swatchW, mid(i)+swatchH/2)})
		}
	}
	drawBars(cv, bars)
	for i, e := range entries {
		x := left + places[i].x
		if e.band != nil {
			cv.SetColor(e.band)
			cv.Fill(rect(x, mid(i)-swatchH/2, x+swatchW, mid(i)+swatchH/2).Path())
		}
		if e.dot {
			cv.SetColor(e.class.Look().Fill)
			dot(cv, x+swatchW/2, mid(i), 2.6)
		}
		if e.line != nil {
			cv.SetColor(e.line)
			cv.SetLineWidth(e.width)
			cv.SetLineDash(e.dash, 0)
			segment(cv, x, mid(i), x+swatchW, mid(i))
		}
	}
	for i, e := range entries {
		put(cv, sty, vg.Point{X: left + places[i].x + swatchW + keyGap, Y: mid(i)}, e.label, width-swatchW-keyGap)
	}
}
