package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// HoursByWayData is one number of hours by several ways of counting.
type HoursByWayData struct {
	Caption
	// XTitle names the quantity and its unit.
	XTitle string
	Ways   []WayHours
	// Second names the value drawn as a mark beside the bar, such as "typical
	// year"; empty when there is none.
	Second string
}

// WayHours is one way of counting: hours with bounds, and the second value,
// NaN when there is none.
type WayHours struct {
	Way    string
	Hours  Bounded
	Second float64
}

// HoursByWay draws a bar per way in the given order, with a whisker for its
// bounds and an upright mark for the second value.
func HoursByWay(d HoursByWayData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("hours by way", d.Caption, o)
	if err != nil {
		return "", err
	}
	most, any := 0.0, false
	rows := zoneRows{xTitle: d.XTitle, most: 6, legend: []legendEntry{{label: "as measured", band: inkOutdor}, {label: "least and greatest it could be", line: inkText, width: 0.8}}}
	sty := align(sans(textSize, inkFaint), 0, -0.5)
	for _, w := range d.Ways {
		if outside(w.Hours.Value) || outside(w.Second) {
			return "", f.errorf("way %q: %v h, %v h: must be 0 to 1e9", w.Way, w.Hours.Value, w.Second)
		}
		any = any || drawable(w.Hours.Value) || drawable(w.Second)
		most = math.Max(most, math.Max(known(w.Hours.top()), known(w.Second)))
		rows.names = append(rows.names, w.Way)
		rows.right = max(rows.right, sty.Width(wayText(w))+6)
	}
	if !any {
		return "", f.noData()
	}
	if d.Second != "" {
		rows.legend = append(rows.legend, legendEntry{label: d.Second, line: inkIndoor, width: lineBold})
	}
	rows.hi = ceilNice(math.Max(most, 1e-9), 6)
	if len(rows.names) > maxZoneRows {
		return "", f.errorf("%d ways: at most %d", len(rows.names), maxZoneRows)
	}
	rows.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		cv.SetColor(inkOutdor)
		for i := from; i < to; i++ {
			if v := d.Ways[i].Hours.Value; v > 0 {
				cv.Fill(rect(fx(0), y(i)-h*0.3, fx(v), y(i)+h*0.3).Path())
			}
		}
		for i := from; i < to; i++ {
			if b := d.Ways[i].Hours; b.hasBounds() {
				whisker(cv, c, fx(b.Low), fx(b.High), y(i), h*0.35, inkText)
			}
		}
		for i := from; i < to; i++ {
			if v := d.Ways[i].Second; drawable(v) && d.Second != "" {
				cv.SetColor(inkIndoor)
				cv.SetLineWidth(lineBold)
				segment(cv, fx(v), y(i)-h*0.46, fx(v), y(i)+h*0.46)
			}
		}
		for i := from; i < to; i++ {
			put(cv, sty, vg.Point{X: c.Max.X + 5, Y: y(i)}, wayText(d.Ways[i]), rows.right)
		}
	}
	rows.say = func(i int) string {
		w := d.Ways[i]
		t := wayText(w) + w.Hours.words(1, " h")
		if drawable(w.Second) && d.Second != "" {
			t += "; " + clean(d.Second) + " " + hoursText(w.Second) + " h"
		}
		return t
	}
	return rows.render(f), nil
}

func wayText(w WayHours) string {
	if !drawable(w.Hours.Value) {
		return "–"
	}
	return hoursText(w.Hours.Value) + " h"
}
