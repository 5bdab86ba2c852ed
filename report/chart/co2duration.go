package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// CO2DurationData is, per zone and running state, for how much of the occupied
// time CO2 lay above a value.
type CO2DurationData struct {
	Caption
	// Zones are drawn as panels in this order, at most 12.
	Zones []CO2Zone
	// Limits are level lines in all panels, such as {1350, "category II"}, ppm.
	Limits []Limit
}

// CO2Zone is one panel.
type CO2Zone struct {
	Zone   string
	Curves []CO2Curve
}

// CO2Curve is one running state: X is the share of that state's occupied time
// (%) during which CO2 was above Y (ppm). X must not decrease.
type CO2Curve struct {
	State  Class
	Points []XY
}

const maxCO2Panels = 12

// CO2Duration draws duration curves per running state, one panel per zone.
func CO2Duration(d CO2DurationData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("CO2 duration", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Zones) > maxCO2Panels {
		return "", f.errorf("%d zones: at most %d panels in one figure", len(d.Zones), maxCO2Panels)
	}
	var seen [classCount]bool
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, z := range d.Zones {
		for _, c := range z.Curves {
			if c.State >= classCount {
				return "", f.errorf("zone %q: class %d is not known", z.Zone, c.State)
			}
			for _, q := range c.Points {
				if drawable(q.X) && drawable(q.Y) && math.Abs(q.Y) < 1e6 {
					seen[c.State] = true
					lo, hi = math.Min(lo, q.Y), math.Max(hi, q.Y)
				}
			}
		}
	}
	if hi < lo {
		return "", f.noData()
	}
	for _, l := range d.Limits {
		if drawable(l.Value) && l.Value < hi*2 {
			hi = math.Max(hi, l.Value)
		}
	}
	var legend []legendEntry
	for c := None + 1; c < classCount; c++ {
		if seen[c] {
			ink, dash := lineLook(c)
			legend = append(legend, legendEntry{label: c.Label(), line: ink, width: lineBold, dash: dash})
		}
	}
	step := niceStep(math.Min(lo, 400), hi, 5)
	if step == 0 {
		step = 100
	}
	bottom := math.Floor(math.Min(lo, 400)/step) * step
	top := math.Max(math.Ceil(hi/step)*step, bottom+step)
	columns := map[bool]int{true: 1, false: 3}[len(d.Zones) == 1]
	if n := len(d.Zones); n == 2 || n == 4 {
		columns = 2
	}
	rows := (len(d.Zones) + columns - 1) / columns
	panelH := vg.Length(map[int]int{1: 190, 2: 145, 3: 118}[columns])
	_, legendH := layLegend(legend, f.width)
	const xTitleH = 11
	height := legendH + titleRow + panelH*vg.Length(rows) + xTitleH
	return f.render(height, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, legend)
		drawYTitle(cv, 0, area.Max.Y-legendH, "CO₂ (ppm)", f.width)
		write(cv, align(sans(textSize, inkText), -0.5, 0), f.width/2, 1, "share of the occupied time in that state during which CO₂ was higher (%)")
		gap := vg.Length(12)
		w := (f.width - gap*vg.Length(columns-1)) / vg.Length(columns)
		for i, z := range d.Zones {
			x0 := vg.Length(i%columns) * (w + gap)
			y1 := area.Max.Y - legendH - titleRow - panelH*vg.Length(i/columns)
			box := area
			box.Rectangle = rect(x0, y1-panelH, x0+w, y1)
			name := vg.Length(0)
			if len(d.Zones) > 1 || clean(z.Zone) != "" {
				put(cv, bold(sans(textSize, inkText)), vg.Point{X: x0, Y: y1 - 10}, z.Zone, w)
				name = 12
			}
			p := newPlot()
			p.X.Min, p.X.Max, p.Y.Min, p.Y.Max = 0, 100, bottom, top
			p.X.Tick.Marker = niceTicks{want: map[bool]int{true: 10, false: 4}[columns == 1]}
			p.Y.Tick.Marker = niceTicks{want: 5}
			p.Add(grid(true, true), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
				for _, cu := range z.Curves {
					ink, dash := lineLook(cu.State)
					strokeCurve(c, p, cu.Points, hline(ink, lineBold, dash...))
				}
				named := make([]namedCurve, len(z.Curves))
				for i, cu := range z.Curves {
					named[i] = namedCurve{cu.State.Label(), cu.Points}
				}
				sayCurves(cv, c, p, map[int]int{1: 20, 2: 12, 3: 8}[columns], named, func(x float64) string { return clean(z.Zone) + ", exceeded " + number(x, 0) + " % of the time" }, 0, " ppm")
				if anyKnown(z.Curves) {
					drawLevels(cv, c, p, d.Limits)
				} else {
					halo(cv, align(sans(textSize, inkFaint), -0.5, -0.5), c.Center().X, c.Center().Y, "no CO₂ readings")
				}
			}))
			p.Draw(draw.Crop(box, 0, -2, 3, -name))
		}
	}), nil
}

func anyKnown(curves []CO2Curve) bool {
	for _, c := range curves {
		for _, q := range c.Points {
			if drawable(q.X) && drawable(q.Y) {
				return true
			}
		}
	}
	return false
}
