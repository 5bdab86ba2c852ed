package chart

import (
	"image/color"
	"math"
	"strconv"
	"strings"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	xfont "golang.org/x/image/font"
)

// Sizes of the house style, in points.
const (
	textSize  = vg.Length(7.5)
	smallSize = vg.Length(7)
	lineThin  = vg.Length(0.4)
	lineAxis  = vg.Length(0.5)
	lineData  = vg.Length(1.1)
	lineBold  = vg.Length(1.5)
)

// sans is a text style in the house font. Liberation Sans has the widths of
// Arial, the next family in the list, so measured text fits in either.
func sans(size vg.Length, ink color.Color) text.Style {
	return text.Style{
		Color:   ink,
		Font:    font.Font{Typeface: "Liberation", Variant: "Sans", Size: size},
		XAlign:  draw.XLeft,
		YAlign:  draw.YBottom,
		Handler: plot.DefaultTextHandler,
	}
}

func bold(s text.Style) text.Style {
	s.Font.Weight = xfont.WeightBold
	return s
}

// align sets where text stands relative to its point.
func align(s text.Style, x text.XAlignment, y text.YAlignment) text.Style {
	s.XAlign, s.YAlign = x, y
	return s
}

// newPlot is a gonum plot in the house style: no background, thin grey axes,
// small sans text, titles at the axes.
func newPlot() *plot.Plot {
	p := plot.New()
	p.BackgroundColor = nil
	for _, a := range []*plot.Axis{&p.X, &p.Y} {
		a.Label.TextStyle.Font = sans(textSize, inkText).Font
		a.Label.TextStyle.Color = inkText
		a.Label.Padding = 2
		a.Tick.Label.Font = sans(textSize, inkText).Font
		a.Tick.Label.Color = inkText
		a.Tick.Length = 2.5
		a.Tick.LineStyle = draw.LineStyle{Color: inkAxis, Width: lineAxis}
		a.LineStyle = draw.LineStyle{Color: inkAxis, Width: lineAxis}
		a.Padding = 0
		a.Tick.Marker = niceTicks{want: 6}
	}
	return p
}

// niceTicks puts labelled ticks at steps of 1, 2 or 5 times a power of ten.
type niceTicks struct{ want int }

func (n niceTicks) Ticks(lo, hi float64) []plot.Tick {
	step := niceStep(lo, hi, n.want)
	if step <= 0 {
		return []plot.Tick{{Value: lo, Label: number(lo, 0)}}
	}
	var ticks []plot.Tick
	decimals := int(math.Max(0, -math.Floor(math.Log10(step)+1e-9)))
	for i := math.Ceil(lo/step - 1e-9); i*step <= hi+step*1e-9 && len(ticks) < 100; i++ {
		ticks = append(ticks, plot.Tick{Value: i * step, Label: number(i*step, decimals)})
	}
	return ticks
}

// ticksFor is the number of ticks that fit a width, at most most.
func ticksFor(width vg.Length, most int) niceTicks {
	return niceTicks{want: max(1, min(most, int(width/30)))}
}

// niceStep is the least step of 1, 2 or 5 times a power of ten that makes at
// most want steps; 0 when the span is too small or too great to label.
func niceStep(lo, hi float64, want int) float64 {
	span := hi - lo
	if !(span > 1e-6) || !drawable(span) || !drawable(lo) || want < 1 {
		return 0
	}
	raw := span / float64(want)
	unit := math.Pow(10, math.Floor(math.Log10(raw)))
	for _, m := range []float64{1, 2, 5, 10} {
		if raw <= m*unit*(1+1e-9) {
			return m * unit
		}
	}
	return 10 * unit
}

// ceilNice is the least whole number of steps that reaches hi, so that an axis
// ends on a labelled tick.
func ceilNice(hi float64, want int) float64 {
	step := niceStep(0, hi, want)
	if step == 0 {
		return 1
	}
	return math.Ceil(hi/step-1e-9) * step
}

// number writes a figure with a comma between thousands and a true minus sign.
func number(v float64, decimals int) string {
	if !drawable(v) {
		return "unknown"
	}
	s := strconv.FormatFloat(math.Abs(v), 'f', decimals, 64)
	whole, frac, _ := strings.Cut(s, ".")
	for i := len(whole) - 3; i > 0; i -= 3 {
		whole = whole[:i] + "," + whole[i:]
	}
	if frac != "" {
		whole += "." + frac
	}
	if v < 0 && strings.Trim(s, "0.") != "" {
		whole = "\u2212" + whole
	}
	return whole
}

// hoursText writes hours: whole from 10 on, one decimal below.
func hoursText(h float64) string {
	if math.Abs(h) < 9.95 && h != 0 {
		return number(h, 1)
	}
	return number(h, 0)
}

// fit shortens text with an ellipsis until it is no wider than max.
func fit(s string, sty text.Style, max vg.Length) string {
	s = strings.TrimSpace(clean(s))
	if sty.Width(s) <= max {
		return s
	}
	r := []rune(s)
	lo, hi := 0, len(r) // longest prefix that fits lies in [lo, hi)
	for lo+1 < hi {
		mid := (lo + hi) / 2
		if sty.Width(strings.TrimSpace(string(r[:mid]))+"…") <= max {
			lo = mid
		} else {
			hi = mid
		}
	}
	return strings.TrimSpace(string(r[:lo])) + "…"
}

// put draws text that may have been shortened, with the whole of it as a title.
func put(cv *canvas, sty text.Style, pt vg.Point, name string, max vg.Length) {
	cut := fit(name, sty, max)
	full := ""
	if cut != strings.TrimSpace(clean(name)) {
		full = name
	}
	ext := sty.FontExtents()
	pt.X += vg.Length(sty.XAlign) * sty.Width(cut)
	switch sty.YAlign {
	case draw.YCenter:
		pt.Y -= (ext.Ascent - ext.Descent) / 2
	case draw.YTop:
		pt.Y -= ext.Ascent
	default:
		pt.Y += ext.Descent
	}
	cv.SetColor(sty.Color)
	face := plot.DefaultTextHandler.Cache().Lookup(sty.Font, sty.Font.Size)
	cv.fillText(face, pt, cut, full)
}

// write draws text as it is.
func write(cv *canvas, sty text.Style, x, y vg.Length, s string) {
	put(cv, sty, vg.Point{X: x, Y: y}, s, vg.Length(math.Inf(1)))
}

// titleRow is the height kept for a title written above the vertical axis.
const titleRow = vg.Length(11)

// drawYTitle writes the title of the vertical axis level above it, where it
// can be read without turning the page.
func drawYTitle(cv *canvas, left, top vg.Length, title string, width vg.Length) {
	put(cv, sans(textSize, inkText), vg.Point{X: left, Y: top - titleRow + 2}, title, width)
}

func hline(ink color.Color, width vg.Length, dashes ...vg.Length) draw.LineStyle {
	return draw.LineStyle{Color: ink, Width: width, Dashes: dashes}
}

// plotterFunc lets a figure draw inside the data area of a plot.
type plotterFunc func(c draw.Canvas, p *plot.Plot)

func (f plotterFunc) Plot(c draw.Canvas, p *plot.Plot) { f(c, p) }

// grid draws light lines behind the data at the labelled ticks.
func grid(x, y bool) plot.Plotter {
	return plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		fx, fy := p.Transforms(&c)
		sty := hline(inkGrid, lineThin)
		if y {
			for _, t := range p.Y.Tick.Marker.Ticks(p.Y.Min, p.Y.Max) {
				if t.Value > p.Y.Min && t.Value <= p.Y.Max && t.Label != "" {
					c.StrokeLine2(sty, c.Min.X, fy(t.Value), c.Max.X, fy(t.Value))
				}
			}
		}
		if x {
			for _, t := range p.X.Tick.Marker.Ticks(p.X.Min, p.X.Max) {
				if t.Value > p.X.Min && t.Value <= p.X.Max && t.Label != "" {
					c.StrokeLine2(sty, fx(t.Value), c.Min.Y, fx(t.Value), c.Max.Y)
				}
			}
		}
	})
}

func rect(x0, y0, x1, y1 vg.Length) vg.Rectangle {
	return vg.Rectangle{Min: vg.Point{X: min(x0, x1), Y: min(y0, y1)}, Max: vg.Point{X: max(x0, x1), Y: max(y0, y1)}}
}

func clampLen(v, lo, hi vg.Length) vg.Length { return min(max(v, lo), hi) }

// halo draws text over data on a pale ground, so that it stays legible.
func halo(cv *canvas, sty text.Style, x, y vg.Length, s string) {
	s = clean(s)
	if s == "" {
		return
	}
	w, ext := sty.Width(s), sty.FontExtents()
	h := ext.Ascent + ext.Descent
	x0 := x + vg.Length(sty.XAlign)*w
	y0 := y + vg.Length(sty.YAlign)*h
	cv.SetColor(color.NRGBA{R: 255, G: 255, B: 255, A: 215})
	cv.Fill(rect(x0-1.5, y0-0.5, x0+w+1.5, y0+h+0.5).Path())
	put(cv, align(sty, 0, 0), vg.Point{X: x0, Y: y0}, s, vg.Length(math.Inf(1)))
}
