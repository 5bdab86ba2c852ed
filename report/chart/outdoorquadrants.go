package chart

import (
	"cmp"
	"image/color"
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// Humidity says which measure of moisture a figure uses.
type Humidity uint8

// The measures of moisture.
const (
	DewPointC  Humidity = iota // dew point, °C
	RelativePC                 // relative humidity, %
)

// OutdoorQuadrantsData is the outdoor air of the occupied hours, and what was
// made of them.
type OutdoorQuadrantsData struct {
	Caption
	Humidity Humidity
	Points   []OutdoorPoint
	// TempLimits stand upright, such as the lowest suited temperature; at most
	// two. HumidityLimits lie level; at most one.
	TempLimits     []Limit
	HumidityLimits []Limit
	// LimitCurve is a limit that is neither, such as a dew point limit over
	// relative humidity: x in °C, y in the unit of Humidity (optional).
	LimitCurve []XY
	CurveLabel string
	// Hours are the hours of each field between the limits: one row per
	// humidity field from the bottom, one value per temperature field from the
	// left. Empty leaves the figures out.
	Hours [][]float64
}

// OutdoorPoint is one occupied hour outdoors; points with a value that is not
// a number are left out.
type OutdoorPoint struct {
	TempC    float64
	Humidity float64
	Class    Class
}

// Limit is a guide line with its words, such as {17, "dew point 17 °C"}.
type Limit struct {
	Value float64
	Label string
}

// XY is a point of a curve.
type XY struct{ X, Y float64 }

// maxDots is the number of hours drawn one by one; more are gathered in bins.
const maxDots = 3000

// OutdoorQuadrants draws outdoor temperature against humidity, one dot per
// hour, or above 3,000 hours one square per bin in the colour of its most
// frequent class and with an area that grows with its hours.
func OutdoorQuadrants(d OutdoorQuadrantsData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("outdoor quadrants", d.Caption, o)
	if err != nil {
		return "", err
	}
	pts, err := f.outdoorPoints(d)
	if err != nil {
		return "", err
	}
	var seen [classCount]bool
	for _, q := range pts {
		seen[q.Class] = true
	}
	var classes []Class
	for _, c := range append(Outcomes(), RunningStates()...) {
		if seen[c] {
			classes = append(classes, c)
		}
	}
	binned := len(pts) > maxDots
	entries := classLegend(classes)
	for i, c := range classes {
		if !binned && c.Look().Fill != dotColour(c) {
			entries[i].band = dotColour(c)
		}
	}
	_, legendH := layLegend(entries, f.width)
	yTitle := "outdoor dew point (°C)"
	if d.Humidity == RelativePC {
		yTitle = "outdoor relative humidity (%)"
	}
	note := vg.Length(0)
	if binned {
		note = 10
	}
	return f.render(legendH+235+note, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		drawYTitle(cv, 0, area.Max.Y-legendH, yTitle, f.width)
		p := newPlot()
		p.X.Label.Text = "outdoor temperature (°C)"
		outdoorRange(p, pts, d)
		p.Add(grid(true, true), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			if binned {
				drawBins(cv, c, p, pts)
			} else {
				drawDots(cv, c, p, pts)
			}
			drawOutdoorLimits(cv, c, p, d)
		}))
		if binned {
			write(cv, sans(smallSize, inkFaint), 0, 1, "each square gathers hours of like weather: colour by the most frequent outcome, area by the number of hours")
		}
		p.Draw(draw.Crop(area, 0, -4, note, -legendH-titleRow))
	}), nil
}

func (f frame) outdoorPoints(d OutdoorQuadrantsData) ([]OutdoorPoint, error) {
	if len(d.TempLimits) > 2 || len(d.HumidityLimits) > 1 {
		return nil, f.errorf("%d temperature and %d humidity limits: at most 2 and 1", len(d.TempLimits), len(d.HumidityLimits))
	}
	if len(d.Hours) > 0 {
		if len(d.Hours) != len(d.HumidityLimits)+1 {
			return nil, f.errorf("hours have %d rows, limits make %d", len(d.Hours), len(d.HumidityLimits)+1)
		}
		for _, row := range d.Hours {
			if len(row) != len(d.TempLimits)+1 {
				return nil, f.errorf("hours have %d columns, limits make %d", len(row), len(d.TempLimits)+1)
			}
		}
	}
	var pts []OutdoorPoint
	for _, q := range d.Points {
		if q.Class >= classCount {
			return nil, f.errorf("class %d is not known", q.Class)
		}
		if math.Abs(q.TempC) < 200 && math.Abs(q.Humidity) < 1000 && q.Class != None && q.Class != Unoccupied {
			pts = append(pts, q)
		}
	}
	if len(pts) == 0 {
		return nil, f.noData()
	}
	return pts, nil
}

func outdoorRange(p *plot.Plot, pts []OutdoorPoint, d OutdoorQuadrantsData) {
	x0, x1, y0, y1 := math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1)
	grow := func(x, y float64) {
		if math.Abs(x) < 200 {
			x0, x1 = math.Min(x0, x), math.Max(x1, x)
		}
		if math.Abs(y) < 1000 {
			y0, y1 = math.Min(y0, y), math.Max(y1, y)
		}
	}
	for _, q := range pts {
		grow(q.TempC, q.Humidity)
	}
	for _, l := range d.TempLimits {
		grow(l.Value, math.NaN())
	}
	for _, l := range d.HumidityLimits {
		grow(math.NaN(), l.Value)
	}
	// A margin of a few kelvin on each side holds the words in the corners.
	p.X.Min, p.X.Max = math.Floor(x0-2), math.Ceil(x1+2)
	p.Y.Min, p.Y.Max = math.Floor(y0-2), math.Ceil(y1+2)
	if d.Humidity == RelativePC {
		p.Y.Min, p.Y.Max = 0, math.Max(100, p.Y.Max-2)
	}
	p.X.Tick.Marker, p.Y.Tick.Marker = niceTicks{want: 10}, niceTicks{want: 7}
}

// dotColour is the fill of a class, or its ink where the fill is white.
func dotColour(c Class) color.RGBA {
	if l := c.Look(); luminance(l.Fill) > 0.95 {
		return l.Ink
	}
	return c.Look().Fill
}

// dotRank is the order in which classes are drawn, the last on top: what needs
// attention must not be hidden by what does not.
func dotRank(c Class) int {
	order := []Class{ClosedUnsuited, NoOpening, Unjudged, NotNeeded, AchievedUnassessed,
		AchievedOK, AchievedCool, AchievedWarm, AchievedStale, IllTimed, Missed}
	return slices.Index(order, c)
}

// drawDots draws square dots class by class; sorted by place, so that the
// steps between them are short numbers.
func drawDots(cv *canvas, c draw.Canvas, p *plot.Plot, pts []OutdoorPoint) {
	size := vg.Length(1.8)
	if len(pts) < 300 {
		size = 3
	}
	fx, fy := p.Transforms(&c)
	sorted := slices.Clone(pts)
	slices.SortStableFunc(sorted, func(a, b OutdoorPoint) int {
		return cmp.Or(cmp.Compare(dotRank(a.Class), dotRank(b.Class)), cmp.Compare(a.Class, b.Class),
			cmp.Compare(a.TempC, b.TempC), cmp.Compare(a.Humidity, b.Humidity))
	})
	cv.SetLineWidth(size)
	cv.SetLineDash(nil, 0)
	for _, q := range sorted {
		cv.SetColor(dotColour(q.Class))
		// A tenth of a point is finer than print shows, and shorter to write.
		x := vg.Length(math.Round(float64(fx(q.TempC))*10) / 10)
		y := vg.Length(math.Round(float64(fy(q.Humidity))*10) / 10)
		segment(cv, x-size/2, y, x+size/2, y)
	}
}

// drawBins gathers the points in square bins of about 7 pt.
func drawBins(cv *canvas, c draw.Canvas, p *plot.Plot, pts []OutdoorPoint) {
	const pitch = 7.0
	fx, fy := p.Transforms(&c)
	nx, ny := max(1, int(float64(c.Size().X)/pitch)), max(1, int(float64(c.Size().Y)/pitch))
	// Bins are a little wider than the pitch so that they fill the plot.
	px, py := float64(c.Size().X)/float64(nx), float64(c.Size().Y)/float64(ny)
	type bin struct {
		count [classCount]int
		total int
	}
	bins := map[int]*bin{}
	most := 0
	for _, q := range pts {
		i := min(nx-1, max(0, int(float64(fx(q.TempC)-c.Min.X)/px)))
		j := min(ny-1, max(0, int(float64(fy(q.Humidity)-c.Min.Y)/py)))
		b := bins[j*nx+i]
		if b == nil {
			b = &bin{}
			bins[j*nx+i] = b
		}
		b.count[q.Class]++
		b.total++
		most = max(most, b.total)
	}
	keys := make([]int, 0, len(bins))
	for k := range bins {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	var bars []bar
	for _, k := range keys {
		b := bins[k]
		class := None
		for cl := range classCount {
			if b.count[cl] > b.count[class] {
				class = cl
			}
		}
		x := c.Min.X + vg.Length((float64(k%nx)+0.5)*px)
		y := c.Min.Y + vg.Length((float64(k/nx)+0.5)*py)
		half := vg.Length(math.Max(0.5, (pitch-0.6)/2*math.Sqrt(float64(b.total)/float64(most))))
		bars = append(bars, bar{class: class, Rectangle: rect(x-half, y-half, x+half, y+half)})
	}
	drawBars(cv, bars)
}

func drawOutdoorLimits(cv *canvas, c draw.Canvas, p *plot.Plot, d OutdoorQuadrantsData) {
	fx, fy := p.Transforms(&c)
	line := hline(inkText, 0.8, 4, 2)
	xs, ys := []vg.Length{c.Min.X}, []vg.Length{c.Min.Y}
	for _, l := range d.TempLimits {
		x := fx(l.Value)
		xs = append(xs, x)
		c.StrokeLine2(line, x, c.Min.Y, x, c.Max.Y)
	}
	for _, l := range d.HumidityLimits {
		y := fy(l.Value)
		ys = append(ys, y)
		c.StrokeLine2(line, c.Min.X, y, c.Max.X, y)
	}
	var curve []vg.Point
	for _, q := range d.LimitCurve {
		if drawable(q.X) && drawable(q.Y) {
			curve = append(curve, vg.Point{X: fx(q.X), Y: fy(q.Y)})
		}
	}
	for _, part := range c.ClipLinesXY(curve) {
		c.StrokeLines(line, part)
	}
	slices.Sort(xs)
	xs, ys = append(xs, c.Max.X), append(ys, c.Max.Y)
	sty := sans(textSize, inkText)
	// Names of the limits: upright ones at the top, beside their line; level
	// ones at the right end, below it, clear of the hours of the field above.
	for i, l := range d.TempLimits {
		x := fx(l.Value)
		w := sty.Width(clean(l.Label))
		if i == 0 && len(d.TempLimits) == 2 && x-w-3 > c.Min.X || x+w+3 > c.Max.X {
			halo(cv, align(sty, -1, -1), x-3, c.Max.Y-2, l.Label)
		} else {
			halo(cv, align(sty, 0, -1), x+3, c.Max.Y-2, l.Label)
		}
	}
	for _, l := range d.HumidityLimits {
		halo(cv, align(sty, -1, -1), c.Max.X-3, fy(l.Value)-2, l.Label)
	}
	nameCurve(cv, c, curve, d.CurveLabel)
	strong := bold(sty)
	for j, row := range d.Hours {
		for i, h := range row {
			if !drawable(h) {
				continue
			}
			text := hoursText(h) + " h"
			w := strong.Width(text)
			if xs[i+1]-xs[i] < w+6 || ys[j+1]-ys[j] < 24 {
				continue // no room for the words in so narrow a field
			}
			halo(cv, strong, xs[i]+4, ys[j]+3, text)
		}
	}
}

// nameCurve writes the words of a limit curve beside its right part, on the
// side the curve leaves free: above a falling one, below a rising one.
func nameCurve(cv *canvas, c draw.Canvas, curve []vg.Point, label string) {
	sty := sans(textSize, inkText)
	w := sty.Width(clean(label))
	for i := len(curve) - 1; i > 0; i-- {
		at := curve[i]
		if !c.Contains(at) || at.X+w+8 > c.Max.X || at.Y+14 > c.Max.Y {
			continue
		}
		if curve[i-1].Y > at.Y {
			halo(cv, align(sty, 0, 0), at.X+5, at.Y+3, label)
		} else {
			halo(cv, align(sty, 0, -1), at.X+5, at.Y-3, label)
		}
		return
	}
}
