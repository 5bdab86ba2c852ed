package chart

import (
	"image"
	"image/color"
	"math"
	"time"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// KnownCalendarData is how much of each day was known, by kind of reading.
type KnownCalendarData struct {
	Caption
	FirstDay time.Time
	Rows     []KnownRow
}

// KnownRow is one kind of reading: the share known per day, 0 to 1, NaN where
// nothing of the kind was expected.
type KnownRow struct {
	Name string
	Days []float64
}

// maxKnownRows is how many rows one figure takes.
const maxKnownRows = 24

// knownShades run from nothing known to all: the bounds are shares of a day.
var knownShades = []struct {
	most float64
	fill color.RGBA
	name string
}{
	{0.001, rgb(0xD55E00), "nothing known"},
	{0.5, rgb(0xF0B27A), "less than half"},
	{0.95, rgb(0x9CCBE6), "half to 95 %"},
	{math.Inf(1), rgb(0x00508A), "95 % and more"},
}

// KnownCalendar draws days from left to right and a row per kind of reading.
func KnownCalendar(d KnownCalendarData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("known calendar", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Rows) > maxKnownRows {
		return "", f.errorf("%d rows: at most %d fit one figure", len(d.Rows), maxKnownRows)
	}
	days, any := 0, false
	for _, r := range d.Rows {
		days = max(days, len(r.Days))
		for _, v := range r.Days {
			if v < -1e-9 || v > 1+1e-9 {
				return "", f.errorf("row %q: share %v: must be 0 to 1", r.Name, v)
			}
			any = any || drawable(v)
		}
	}
	if !any {
		return "", f.noData()
	}
	if days > maxCarpetDays {
		return "", f.errorf("%d days: at most %d fit a page", days, maxCarpetDays)
	}
	var entries []legendEntry
	for _, s := range knownShades {
		entries = append(entries, legendEntry{label: s.name, band: s.fill})
	}
	_, legendH := layLegend(entries, f.width)
	const rowH = 13
	sty := align(sans(textSize, inkText), -1, -0.5)
	left := vg.Length(0)
	for _, r := range d.Rows {
		left = max(left, sty.Width(clean(r.Name)))
	}
	left = min(left, f.width*0.3) + 5
	return f.render(legendH+rowH*vg.Length(len(d.Rows))+28, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		p := newPlot()
		p.HideY()
		p.X.Min, p.X.Max = 0, float64(days)
		p.Y.Min, p.Y.Max = 0, float64(len(d.Rows))
		p.X.Tick.Length = 0
		labels, borders := dayTicks(d.FirstDay, days, f.width-left)
		p.X.Tick.Marker = plot.ConstantTicks(labels)
		p.X.Label.Text = spanText(d.FirstDay, days)
		p.Add(plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			fx, fy := p.Transforms(&c)
			for i, r := range d.Rows {
				y1 := fy(float64(len(d.Rows)-i)) - 1
				y0 := fy(float64(len(d.Rows)-i-1)) + 2
				cv.DrawImage(rect(c.Min.X, y0, c.Max.X, y1), knownImage(r.Days, days))
				put(cv, sty, vg.Point{X: left - 5, Y: (y0 + y1) / 2}, r.Name, left-5)
			}
			for _, b := range borders {
				c.StrokeLine2(hline(inkFaint, 0.25, 1, 1.5), fx(b), c.Min.Y, fx(b), c.Max.Y)
			}
		}))
		box := area
		box.Min.X = left
		p.Draw(draw.Crop(box, 0, -2, 0, -legendH-2))
	}), nil
}

// knownImage paints a row, three pixels a day so that a viewer which smooths
// images blurs edges only.
func knownImage(shares []float64, days int) *image.Paletted {
	const wide, high = 3, 3
	pal := color.Palette{color.RGBA{255, 255, 255, 255}}
	for _, s := range knownShades {
		pal = append(pal, s.fill)
	}
	img := image.NewPaletted(image.Rect(0, 0, wide*days, high), pal)
	for i, v := range shares {
		if !drawable(v) {
			continue
		}
		k := 0
		for k < len(knownShades)-1 && v >= knownShades[k].most {
			k++
		}
		for x := range wide {
			for y := range high {
				img.Pix[y*img.Stride+i*wide+x] = uint8(k + 1)
			}
		}
	}
	return img
}
