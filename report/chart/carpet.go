package chart

import (
	"image"
	"image/color"
	"math"
	"strconv"
	"time"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// CarpetData is one class per day and hour.
type CarpetData struct {
	Caption
	// FirstDay is the first day; only its year, month and day count.
	FirstDay time.Time
	// Days holds one row per day, in order, of the 24 hours of local standard
	// time. None leaves the cell empty.
	Days [][24]Class
	// Legend lists the classes to explain, in order. Empty means those that
	// occur, in the order of Class.
	Legend []Class
	// Low carpets are two thirds as high, for pages that hold several.
	Low bool
}

// maxCarpetDays bounds the picture: beyond it days are thinner than print can show.
const maxCarpetDays = 1500

// Carpet draws days from left to right and the hours of the day upwards, one
// coloured cell each, as one image layer under vector axes.
func Carpet(d CarpetData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("carpet", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Days) > maxCarpetDays {
		return "", f.errorf("%d days: at most %d fit a page", len(d.Days), maxCarpetDays)
	}
	classes, err := f.carpetClasses(d)
	if err != nil {
		return "", err
	}
	entries := classLegend(classes)
	_, legendH := layLegend(entries, f.width)
	height := vg.Length(172)
	if d.Low {
		height = 112
	}
	return f.render(legendH+height, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		p := newPlot()
		p.X.Min, p.X.Max = 0, float64(len(d.Days))
		p.Y.Min, p.Y.Max = 0, 24
		drawYTitle(cv, 0, area.Max.Y-legendH, "hour of day (local standard time)", f.width)
		p.Y.Tick.Marker = hourTicks()
		p.X.Tick.Length = 0
		labels, borders := dayTicks(d.FirstDay, len(d.Days), f.width-40)
		p.X.Tick.Marker = plot.ConstantTicks(labels)
		p.X.Label.Text = spanText(d.FirstDay, len(d.Days))
		p.Add(plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			cv.DrawImage(c.Rectangle, carpetImage(d.Days, c.Size()))
			fx, fy := p.Transforms(&c)
			for _, b := range borders {
				x := fx(b)
				c.StrokeLine2(hline(inkAxis, lineThin), x, c.Min.Y-3, x, c.Min.Y)
				c.StrokeLine2(hline(inkFaint, 0.25, 1, 1.5), x, c.Min.Y, x, c.Max.Y)
			}
			for h := 6.0; h < 24; h += 6 {
				c.StrokeLine2(hline(inkFaint, 0.25, 1, 1.5), c.Min.X, fy(h), c.Max.X, fy(h))
			}
			c.StrokeLines(hline(inkAxis, lineAxis), []vg.Point{{X: c.Min.X, Y: c.Max.Y}, c.Max, {X: c.Max.X, Y: c.Min.Y}})
		}))
		p.Draw(draw.Crop(area, 0, -1, 0, -legendH-titleRow))
	}), nil
}

// carpetClasses returns the classes to explain and checks the codes.
func (f frame) carpetClasses(d CarpetData) ([]Class, error) {
	var seen [classCount]bool
	any := false
	for i, day := range d.Days {
		for h, c := range day {
			if c >= classCount {
				return nil, f.errorf("day %d hour %d: class %d is not known", i, h, c)
			}
			seen[c] = true
			any = any || c != None
		}
	}
	if !any {
		return nil, f.noData()
	}
	if len(d.Legend) > 0 {
		return d.Legend, nil
	}
	var out []Class
	for c := None + 1; c < classCount; c++ {
		if seen[c] && c != Unoccupied {
			out = append(out, c)
		}
	}
	if seen[Unoccupied] {
		out = append(out, Unoccupied)
	}
	return out, nil
}

// carpetImage paints the cells with about a third of a point per pixel, fine
// enough that a viewer which smooths images blurs edges only, and hatches the
// classes that stand for missing knowledge.
func carpetImage(days [][24]Class, size vg.Point) *image.Paletted {
	per := func(length vg.Length, cells int) int {
		return int(math.Max(1, math.Round(float64(length)*3/float64(cells))))
	}
	kx, ky := per(size.X, len(days)), per(size.Y, 24)
	pal := color.Palette{color.RGBA{255, 255, 255, 255}}
	fill, ink := [classCount]uint8{}, [classCount]uint8{}
	index := func(c color.RGBA) uint8 {
		for i, have := range pal {
			if have == c {
				return uint8(i)
			}
		}
		pal = append(pal, c)
		return uint8(len(pal) - 1)
	}
	for _, day := range days {
		for _, c := range day {
			if c == None {
				continue
			}
			fill[c] = index(c.Look().Fill)
			ink[c] = fill[c]
			if c == Unjudged || c == Unknown || c == NoOpening {
				ink[c] = index(c.Look().Ink)
			}
		}
	}
	img := image.NewPaletted(image.Rect(0, 0, kx*len(days), ky*24), pal)
	for x := range kx * len(days) {
		for y := range ky * 24 {
			c := days[x/kx][23-y/ky]
			v := fill[c]
			if ink[c] != v && hatchedPixel(c.Look().Hatch, x, y) {
				v = ink[c]
			}
			img.Pix[y*img.Stride+x] = v
		}
	}
	return img
}

// hatchedPixel tells whether a slanting line crosses the pixel; y runs down.
func hatchedPixel(h Hatch, x, y int) bool {
	const pitch = 8
	if h == Falling {
		y = -y
	}
	return ((x+y)%pitch+pitch)%pitch < 2
}

func hourTicks() plot.ConstantTicks {
	var t plot.ConstantTicks
	for h := 0; h <= 24; h += 6 {
		t = append(t, plot.Tick{Value: float64(h), Label: strconv.Itoa(h)})
	}
	return t
}

func civil(t time.Time) time.Time {
	y, m, d := t.Date()
	return time.Date(y, m, d, 0, 0, 0, 0, time.UTC)
}

func spanText(first time.Time, days int) string {
	a := civil(first)
	b := a.AddDate(0, 0, days-1)
	switch {
	case days == 1:
		return a.Format("2 January 2006")
	case a.Year() == b.Year() && a.YearDay() == 1 && b.Month() == 12 && b.Day() == 31:
		return a.Format("2006")
	}
	return a.Format("2 January 2006") + " to " + b.Format("2 January 2006")
}

// dayTicks names days, or months under their middle, whichever fits the width,
// and gives the borders between them in days from the first.
func dayTicks(first time.Time, days int, width vg.Length) (labels []plot.Tick, borders []float64) {
	sty := sans(textSize, inkText)
	start := civil(first)
	perDay := width / vg.Length(days)
	if days <= 62 {
		every := 1
		for perDay*vg.Length(every) < sty.Width("28 Sep")+4 {
			every++
		}
		for i := range days {
			if i > 0 && i%every == 0 {
				borders = append(borders, float64(i))
			}
			if i%every == 0 {
				labels = append(labels, plot.Tick{Value: float64(i) + 0.5, Label: start.AddDate(0, 0, i).Format("2 Jan")})
			}
		}
		return labels, borders
	}
	year := -1
	for i := 0; i < days; {
		at := start.AddDate(0, 0, i)
		next := time.Date(at.Year(), at.Month()+1, 1, 0, 0, 0, 0, time.UTC)
		end := int(math.Min(float64(days), math.Round(next.Sub(start).Hours()/24)))
		if i > 0 {
			borders = append(borders, float64(i))
		}
		room := perDay * vg.Length(end-i)
		name := at.Format("Jan")
		if at.Year() != year && days > 366 {
			if long := name + " " + at.Format("06"); sty.Width(long)+3 <= room {
				name = long
			}
			year = at.Year()
		}
		if sty.Width(name)+2 > room {
			name = at.Format("Jan")[:1]
		}
		if sty.Width(name)+2 <= room {
			labels = append(labels, plot.Tick{Value: float64(i+end) / 2, Label: name})
		}
		i = end
	}
	return labels, borders
}
