package chart

import (
	"image/color"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// RunningMeanData is how many hours rooms were at a temperature, against the
// running mean of the outdoor temperature, with the band of an adaptive model.
type RunningMeanData struct {
	Caption
	// Hours are counted in fields StepC wide along both axes.
	StepC float64
	Hours []RunningMeanField
	// Bands are limits of comfort, the narrowest first.
	Bands []RunningMeanBand
}

// RunningMeanField is one field: its lower edges and its hours.
type RunningMeanField struct{ MeanC, IndoorC, Hours float64 }

// RunningMeanBand is a lower and an upper limit over the running mean.
type RunningMeanBand struct {
	Name       string
	Low, High  []XY
	Highlights bool // the one in force
}

// RunningMean draws the fields as shades, darker with more hours, under the
// limits as lines.
func RunningMean(d RunningMeanData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("running mean", d.Caption, o)
	if err != nil {
		return "", err
	}
	if !(d.StepC > 0) {
		return "", f.errorf("fields %v K wide: must be above 0", d.StepC)
	}
	x0, x1, y0, y1, most := math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1), 0.0
	for _, h := range d.Hours {
		if outside(h.Hours) || !drawable(h.MeanC) || !drawable(h.IndoorC) || math.Abs(h.MeanC) > 100 || math.Abs(h.IndoorC) > 100 {
			return "", f.errorf("field at %v and %v °C with %v h: temperatures within 100 °C, 0 to 1e9 h", h.MeanC, h.IndoorC, h.Hours)
		}
		if h.Hours == 0 {
			continue
		}
		most = math.Max(most, h.Hours)
		x0, x1 = math.Min(x0, h.MeanC), math.Max(x1, h.MeanC+d.StepC)
		y0, y1 = math.Min(y0, h.IndoorC), math.Max(y1, h.IndoorC+d.StepC)
	}
	if most == 0 {
		return "", f.noData()
	}
	// Shades by rounded bounds, each about twice the one before.
	bounds := shadeBounds(most)
	shades := speedColours(len(bounds))
	var entries []legendEntry
	low := 0.0
	for i, b := range bounds {
		name := bound(low) + " to " + bound(b)
		if i == 0 {
			name = "hours per field: under " + bound(b)
		}
		entries = append(entries, legendEntry{label: name, band: shades[i]})
		low = b
	}
	for i, b := range d.Bands {
		ink, width, dash := bandLine(i, b.Highlights)
		entries = append(entries, legendEntry{label: b.Name, line: ink, width: width, dash: dash})
	}
	for _, b := range d.Bands {
		for _, p := range append(append([]XY{}, b.Low...), b.High...) {
			if p.X >= x0 && p.X <= x1 {
				y0, y1 = math.Min(y0, p.Y-0.5), math.Max(y1, p.Y+0.5)
			}
		}
	}
	_, legendH := layLegend(entries, f.width)
	return f.render(legendH+titleRow+180, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		drawYTitle(cv, 0, area.Max.Y-legendH, "indoor operative temperature (°C)", f.width)
		p := newPlot()
		p.X.Min, p.X.Max, p.Y.Min, p.Y.Max = math.Floor(x0), math.Ceil(x1), math.Floor(y0), math.Ceil(y1)
		p.X.Label.Text = "running mean of the outdoor temperature (°C)"
		p.X.Tick.Marker, p.Y.Tick.Marker = niceTicks{want: 10}, niceTicks{want: 6}
		p.Add(grid(true, true), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			fx, fy := p.Transforms(&c)
			for k := range bounds {
				cv.SetColor(shades[k])
				for _, h := range d.Hours {
					if h.Hours > 0 && shadeOf(bounds, h.Hours) == k {
						cv.Fill(rect(fx(h.MeanC), fy(h.IndoorC), fx(h.MeanC+d.StepC), fy(h.IndoorC+d.StepC)).Path())
					}
				}
			}
			for i, b := range d.Bands {
				ink, width, dash := bandLine(i, b.Highlights)
				for _, line := range [][]XY{b.Low, b.High} {
					strokeCurve(c, p, line, hline(ink, width, dash...))
				}
			}
		}))
		p.Draw(draw.Crop(area, 0, -2, 1, -legendH-titleRow))
	}), nil
}

func bandLine(i int, inForce bool) (ink color.Color, width vg.Length, dash []vg.Length) {
	dashes := [][]vg.Length{{1, 1.5}, {4, 2}, {7, 2, 1, 2}, nil}
	if inForce {
		return inkIndoor, lineBold, nil
	}
	return inkText, 0.8, dashes[i%len(dashes)]
}

// shadeBounds are the upper bounds of at most five shades up to most.
func shadeBounds(most float64) []float64 {
	var out []float64
	b := ceilNice(most, 1)
	for len(out) < 5 && b >= 0.2 {
		out = append([]float64{b}, out...)
		b = niceBelow(b / 1.9)
	}
	if len(out) == 0 {
		return []float64{1}
	}
	return out
}

func bound(v float64) string {
	if v < 1 {
		return number(v, 1)
	}
	return number(v, 0)
}

// niceBelow is the greatest of 1, 2 or 5 times a power of ten not above v.
func niceBelow(v float64) float64 {
	unit := math.Pow(10, math.Floor(math.Log10(v)+1e-9))
	for _, m := range []float64{5, 2} {
		if m*unit <= v*(1+1e-9) {
			return m * unit
		}
	}
	return unit
}

func shadeOf(bounds []float64, v float64) int {
	for i, b := range bounds {
		if v <= b {
			return i
		}
	}
	return len(bounds) - 1
}
