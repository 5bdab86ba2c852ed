package chart

import (
	"math"

	"gonum.org/v1/plot/vg"
)

const (
	hatchPitch = vg.Length(3)
	hatchWidth = vg.Length(0.45)
)

// bar is a rectangle of one class, to be filled and hatched; say is what a
// browser shows under the pointer, if anything.
type bar struct {
	class Class
	vg.Rectangle
	say string
}

// drawBars fills the bars class by class, then hatches them class by class, so
// that each class costs two path elements. Bars must not overlap.
func drawBars(cv *canvas, bars []bar) {
	for c := None + 1; c < classCount; c++ {
		look := c.Look()
		cv.SetColor(look.Fill)
		for _, b := range bars {
			if b.class == c && b.Max.X > b.Min.X && b.Max.Y > b.Min.Y {
				cv.Fill(b.Path())
			}
		}
	}
	cv.SetLineWidth(hatchWidth)
	cv.SetLineDash(nil, 0)
	for c := None + 1; c < classCount; c++ {
		look := c.Look()
		if look.Hatch == Solid {
			continue
		}
		cv.SetColor(look.Ink)
		for _, b := range bars {
			if b.class == c && min(b.Max.X-b.Min.X, b.Max.Y-b.Min.Y) > 2 {
				hatch(cv, b.Rectangle, look.Hatch)
			}
		}
	}
	// A thin outline keeps pale and white classes visible on white paper.
	cv.SetColor(inkAxis)
	cv.SetLineWidth(0.3)
	for _, b := range bars {
		if b.class != None && paleFill(b.class) && b.Max.X-b.Min.X > 0.5 && b.Max.Y-b.Min.Y > 0.5 {
			cv.Stroke(b.Path())
		}
	}
	for _, b := range bars {
		if b.say != "" {
			cv.say(b.Rectangle, b.say)
		}
	}
}

func paleFill(c Class) bool { return luminance(c.Look().Fill) > 0.7 }

// hatch draws the lines of a hatch inside a rectangle. Lines lie on one lattice
// for the whole drawing, so that neighbouring bars join up.
func hatch(cv *canvas, r vg.Rectangle, h Hatch) {
	r = rect(clampLen(r.Min.X, 0, cv.w), clampLen(r.Min.Y, 0, cv.h), clampLen(r.Max.X, 0, cv.w), clampLen(r.Max.Y, 0, cv.h))
	switch h {
	case Rising:
		slant(cv, r, 1, hatchPitch)
	case Falling:
		slant(cv, r, -1, hatchPitch)
	case Crossed:
		slant(cv, r, 1, hatchPitch*1.4)
		slant(cv, r, -1, hatchPitch*1.4)
	case Level:
		for y := firstOn(r.Min.Y, hatchPitch); y < r.Max.Y; y += hatchPitch {
			segment(cv, r.Min.X, y, r.Max.X, y)
		}
	case Upright:
		for x := firstOn(r.Min.X, hatchPitch); x < r.Max.X; x += hatchPitch {
			segment(cv, x, r.Min.Y, x, r.Max.Y)
		}
	}
}

func firstOn(v, pitch vg.Length) vg.Length {
	return vg.Length(math.Ceil(float64(v/pitch))) * pitch
}

// slant draws the lines y = dir·x + k inside r, with k on multiples of pitch·√2.
func slant(cv *canvas, r vg.Rectangle, dir, pitch vg.Length) {
	pitch *= math.Sqrt2
	kMin, kMax := r.Min.Y-dir*r.Max.X, r.Max.Y-dir*r.Min.X
	if dir < 0 {
		kMin, kMax = r.Min.Y+r.Min.X, r.Max.Y+r.Max.X
	}
	for k := firstOn(kMin, pitch); k < kMax; k += pitch {
		x0, x1 := (r.Min.Y-k)/dir, (r.Max.Y-k)/dir
		if x0 > x1 {
			x0, x1 = x1, x0
		}
		x0, x1 = max(x0, r.Min.X), min(x1, r.Max.X)
		if x1-x0 > 0.05 {
			segment(cv, x0, dir*x0+k, x1, dir*x1+k)
		}
	}
}

func segment(cv *canvas, x0, y0, x1, y1 vg.Length) {
	cv.Stroke(vg.Path{
		{Type: vg.MoveComp, Pos: vg.Point{X: x0, Y: y0}},
		{Type: vg.LineComp, Pos: vg.Point{X: x1, Y: y1}},
	})
}
