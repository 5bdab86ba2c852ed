package chart

import (
	"image/color"
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// WindRosesData is several wind roses side by side on one scale.
type WindRosesData struct {
	Caption
	// Bands name the speed classes from low to high; at most 7.
	Bands []string
	Roses []NamedRose // at most 3
	// FacesDeg are the directions openings face, drawn as ticks on each rim.
	FacesDeg []float64
}

// NamedRose is one rose; see [SpeedRoseData] for Sectors and CalmShare.
type NamedRose struct {
	Name string
	// Note is written under the name, such as the hours it is made of.
	Note      string
	Sectors   [][]float64
	CalmShare float64
}

// WindRoses draws the roses next to each other with the same rings, so that
// petals can be compared across them. A rose without any share shows its calm
// disc alone.
func WindRoses(d WindRosesData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("wind roses", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Roses) > 3 {
		return "", f.errorf("%d roses: at most 3 fit side by side", len(d.Roses))
	}
	longest := 0.0
	for _, r := range d.Roses {
		if outside(r.CalmShare) || r.CalmShare > 100+1e-6 {
			return "", f.errorf("rose %q: calm %v %%: must be 0 to 100", r.Name, r.CalmShare)
		}
		if len(r.Sectors) == 0 {
			continue
		}
		one, err := f.longestPetal(SpeedRoseData{Bands: d.Bands, Sectors: r.Sectors})
		if err != nil && longestNone(r.Sectors) {
			continue
		}
		if err != nil {
			return "", err
		}
		longest = math.Max(longest, one)
	}
	if longest == 0 {
		return "", f.noData()
	}
	colours := speedColours(len(d.Bands))
	var entries []legendEntry
	for i, name := range d.Bands {
		entries = append(entries, legendEntry{label: name, band: colours[i]})
	}
	if len(d.FacesDeg) > 0 {
		entries = append(entries, legendEntry{label: "direction that openings face", line: inkIndoor, width: lineBold})
	}
	_, legendH := layLegend(entries, f.width)
	n := vg.Length(len(d.Roses))
	side := min(f.width/n, 190)
	const headH, noteH = 22, 11
	// Rings stand far enough apart for their labels.
	step := niceStep(0, longest, max(1, min(4, int((side/2-30)/14))))
	rim := math.Ceil(longest/step-1e-9) * step
	return f.render(legendH+headH+side+noteH, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		for i, r := range d.Roses {
			left := f.width/n*vg.Length(i) + (f.width/n-side)/2
			top := area.Max.Y - legendH
			put(cv, align(bold(sans(textSize, inkText)), -0.5, -1), vg.Point{X: left + side/2, Y: top}, r.Name, f.width/n-4)
			put(cv, align(sans(smallSize, inkFaint), -0.5, -1), vg.Point{X: left + side/2, Y: top - 10}, r.Note, f.width/n-4)
			drawRose(cv, vg.Point{X: left + side/2, Y: noteH + side/2}, side, d, r, rim, step, colours)
		}
		put(cv, sans(smallSize, inkFaint), vg.Point{X: 0, Y: 1}, "petals point to where the wind comes from; rings: share of the hours; middle: calm", f.width)
	}), nil
}

// longestNone tells of a rose whose shares are all nothing.
func longestNone(sectors [][]float64) bool {
	for _, row := range sectors {
		for _, v := range row {
			if v != 0 {
				return false
			}
		}
	}
	return true
}

// drawRose draws one rose about mid.
func drawRose(cv *canvas, mid vg.Point, side vg.Length, d WindRosesData, r NamedRose, rim, step float64, colours []color.RGBA) {
	calm := vg.Length(5)
	if r.CalmShare > 0 {
		calm = 13
	}
	outer := side/2 - 17
	radius := func(share float64) vg.Length { return calm + (outer-calm)*vg.Length(share/rim) }
	cv.SetColor(inkGrid)
	cv.SetLineWidth(lineAxis)
	cv.SetLineDash(nil, 0)
	for s := step; s <= rim+step*1e-6; s += step {
		cv.Stroke(ring(mid, radius(s)))
	}
	if len(r.Sectors) > 0 {
		drawPetals(cv, SpeedRoseData{Bands: d.Bands, Sectors: r.Sectors}, mid, radius, colours)
		sayPetals(cv, r.Sectors, mid, radius)
	}
	cv.SetColor(inkAxis)
	cv.SetLineWidth(lineAxis)
	cv.Stroke(ring(mid, calm))
	cv.SetColor(inkIndoor)
	cv.SetLineWidth(lineBold)
	for _, deg := range d.FacesDeg {
		if !drawable(deg) {
			continue
		}
		sin, cos := math.Sincos(deg * math.Pi / 180)
		a, b := outer-1, outer+4
		segment(cv, mid.X+a*vg.Length(sin), mid.Y+a*vg.Length(cos), mid.X+b*vg.Length(sin), mid.Y+b*vg.Length(cos))
	}
	sty := align(sans(textSize, inkText), -0.5, -0.5)
	if r.CalmShare > 0 {
		write(cv, align(sans(smallSize, inkText), -0.5, -0.5), mid.X, mid.Y, number(r.CalmShare, 0)+" %")
	}
	for i, name := range []string{"N", "E", "S", "W"} {
		sin, cos := math.Sincos(float64(i) * math.Pi / 2)
		write(cv, bold(sty), mid.X+(outer+11)*vg.Length(sin), mid.Y+(outer+11)*vg.Length(cos), name)
	}
	a := math.Pi / 4
	if len(r.Sectors) > 0 {
		a = emptiest(r.Sectors)
	}
	for s := step; s <= rim+step*1e-6; s += step {
		at := radius(s)
		halo(cv, align(sans(smallSize, inkFaint), -0.5, -0.5), mid.X+at*vg.Length(math.Sin(a)), mid.Y+at*vg.Length(math.Cos(a)),
			number(s, decimalsOf(step))+" %")
	}
}
