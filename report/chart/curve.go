package chart

import (
	"image/color"
	"math"
	"strings"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// lineLook is how a class is drawn as a line: dark enough for white paper, and
// with a dash of its own as the second channel.
func lineLook(c Class) (ink color.RGBA, dash []vg.Length) {
	switch c {
	case Open:
		return rgb(0x00508A), nil
	case Mech:
		return rgb(0xC77F00), []vg.Length{6, 2}
	case Both:
		return rgb(0xB0508A), []vg.Length{2, 1.5}
	case Shut:
		return rgb(0x6E6E6E), []vg.Length{7, 1.5, 1.5, 1.5}
	case Unknown, Unjudged:
		return rgb(0x8C8C8C), []vg.Length{0.8, 1.8}
	case None:
		return inkText, nil
	}
	return c.Look().Fill, nil
}

// strokeCurve draws points in data units, broken where a value is not known
// and cut off at the edges of the plot.
func strokeCurve(c draw.Canvas, p *plot.Plot, pts []XY, sty draw.LineStyle) {
	fx, fy := p.Transforms(&c)
	var run []vg.Point
	end := func() {
		if len(run) == 1 {
			// A lone known value between gaps is shown as a short dash.
			run = append(run, vg.Point{X: run[0].X + 0.8, Y: run[0].Y})
		}
		if len(run) > 1 {
			c.StrokeLines(sty, c.ClipLinesXY(thin(run, 0.12))...)
		}
		run = nil
	}
	for _, q := range pts {
		if !drawable(q.X) || !drawable(q.Y) {
			end()
			continue
		}
		run = append(run, vg.Point{X: fx(q.X), Y: fy(q.Y)})
	}
	end()
}

// thin leaves out points that lie within tolerance of the line drawn without
// them: Douglas and Peucker, "Algorithms for the reduction of the number of
// points required to represent a digitized line", Cartographica 10 (1973).
func thin(pts []vg.Point, tolerance float64) []vg.Point {
	keep := make([]bool, len(pts))
	keep[0], keep[len(pts)-1] = true, true
	todo := [][2]int{{0, len(pts) - 1}}
	for len(todo) > 0 {
		a, b := todo[len(todo)-1][0], todo[len(todo)-1][1]
		todo = todo[:len(todo)-1]
		far, at := tolerance, -1
		for i := a + 1; i < b; i++ {
			if d := offLine(pts[i], pts[a], pts[b]); d > far {
				far, at = d, i
			}
		}
		if at >= 0 {
			keep[at] = true
			todo = append(todo, [2]int{a, at}, [2]int{at, b})
		}
	}
	var out []vg.Point
	for i, p := range pts {
		if keep[i] {
			out = append(out, p)
		}
	}
	return out
}

// offLine is the distance of p from the segment between a and b.
func offLine(p, a, b vg.Point) float64 {
	dx, dy := float64(b.X-a.X), float64(b.Y-a.Y)
	px, py := float64(p.X-a.X), float64(p.Y-a.Y)
	if l := dx*dx + dy*dy; l > 0 {
		t := math.Min(1, math.Max(0, (px*dx+py*dy)/l))
		px, py = px-t*dx, py-t*dy
	}
	return math.Hypot(px, py)
}

// drawLevels draws level guide lines with their words at the right end, above
// the line; a word that would stand on the one before is left out of the
// drawing but its line stays.
func drawLevels(cv *canvas, c draw.Canvas, p *plot.Plot, limits []Limit) {
	_, fy := p.Transforms(&c)
	sty := align(sans(smallSize, inkFaint), -1, 0)
	for _, l := range limits {
		if y := fy(l.Value); c.ContainsY(y) {
			c.StrokeLine2(hline(inkFaint, 0.6, 1, 1.6), c.Min.X, y, c.Max.X, y)
		}
	}
	var taken []vg.Length
	for _, l := range limits {
		y := fy(l.Value)
		free := c.ContainsY(y) && y+9 < c.Max.Y
		for _, t := range taken {
			free = free && math.Abs(float64(t-y)) > 8.5
		}
		if free {
			taken = append(taken, y)
			halo(cv, sty, c.Max.X-2, y+0.8, fit(l.Label, sty, c.Max.X-c.Min.X-6))
		}
	}
}

// alignSides draws plots below each other so that their data areas begin and
// end at the same places.
func alignSides(plots []*plot.Plot, boxes []draw.Canvas) {
	for range 3 { // each pass moves the sides closer; labels shift a little with them
		left, right := vg.Length(math.Inf(-1)), vg.Length(math.Inf(1))
		for i, p := range plots {
			d := p.DataCanvas(boxes[i])
			left, right = max(left, d.Min.X), min(right, d.Max.X)
		}
		for i, p := range plots {
			d := p.DataCanvas(boxes[i])
			boxes[i].Min.X += left - d.Min.X
			boxes[i].Max.X -= d.Max.X - right
		}
	}
	for i, p := range plots {
		p.Draw(boxes[i])
	}
}

// namedCurve is a curve with the name it has in the legend.
type namedCurve struct {
	name string
	pts  []XY
}

// sayCurves tells, in so many slices along the plot, what each curve's value is
// in the middle of the slice.
func sayCurves(cv *canvas, c draw.Canvas, p *plot.Plot, slices int, curves []namedCurve, head func(x float64) string, decimals int, unit string) {
	fx, _ := p.Transforms(&c)
	wide := (p.X.Max - p.X.Min) / float64(slices)
	for k := range slices {
		x := p.X.Min + (float64(k)+0.5)*wide
		var parts []string
		for _, cu := range curves {
			if y, ok := valueAt(cu.pts, x); ok {
				parts = append(parts, clean(cu.name)+" "+number(y, decimals)+unit)
			}
		}
		if len(parts) > 0 {
			cv.say(rect(fx(x-wide/2), c.Min.Y, fx(x+wide/2), c.Max.Y), head(x)+": "+strings.Join(parts, "; "))
		}
	}
}

// valueAt is a curve's value between its two nearest points; X must not
// decrease.
func valueAt(pts []XY, x float64) (y float64, ok bool) {
	for i := 1; i < len(pts); i++ {
		a, b := pts[i-1], pts[i]
		if !(a.X <= x && x <= b.X) || !drawable(a.Y) || !drawable(b.Y) {
			continue
		}
		if b.X == a.X {
			return b.Y, true
		}
		return a.Y + (b.Y-a.Y)*(x-a.X)/(b.X-a.X), true
	}
	return 0, false
}
