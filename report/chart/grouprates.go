package chart

import (
	"fmt"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// GroupRatesData is a measured rate by group, such as the sector the wind came
// from.
type GroupRatesData struct {
	Caption
	// XTitle names the rate and its unit.
	XTitle string
	Groups []GroupRate
	// Usual is drawn as a line through all rows; NaN leaves it out. UsualLabel
	// names it.
	Usual      float64
	UsualLabel string
	// Counted names what is counted, such as "decays".
	Counted string
}

// GroupRate is one group: median and its 95 % interval, NaN when the group
// cannot be judged.
type GroupRate struct {
	Group string
	Rate  Bounded
	Count int
}

// GroupRates draws a dot for the median of each group with a whisker for its
// interval, in the given order. Groups that cannot be judged show their count.
func GroupRates(d GroupRatesData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("group rates", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Groups) > maxZoneRows {
		return "", f.errorf("%d groups: at most %d", len(d.Groups), maxZoneRows)
	}
	rows := zoneRows{xTitle: d.XTitle, most: 6, legend: []legendEntry{{label: "median", class: AchievedOK, dot: true}, {label: "holds 95 times in 100", line: inkText, width: 0.8}}}
	most := 0.0
	sty := align(sans(textSize, inkFaint), 0, -0.5)
	text := func(g GroupRate) string {
		t := fmt.Sprintf("%s %s", number(float64(g.Count), 0), clean(d.Counted))
		if !drawable(g.Rate.Value) && g.Count > 0 {
			t += ", not judged"
		}
		return t
	}
	for _, g := range d.Groups {
		for _, v := range []float64{g.Rate.Value, g.Rate.Low, g.Rate.High} {
			if outside(v) {
				return "", f.errorf("group %q: %v: must be 0 to 1e9", g.Group, v)
			}
		}
		most = math.Max(most, known(g.Rate.top()))
		rows.names = append(rows.names, g.Group)
		rows.right = max(rows.right, sty.Width(text(g))+6)
	}
	if most == 0 {
		return "", f.noData()
	}
	if drawable(d.Usual) {
		most = math.Max(most, d.Usual)
		rows.legend = append(rows.legend, legendEntry{label: d.UsualLabel, line: inkFaint, width: 0.8, dash: []vg.Length{3, 2}})
	}
	rows.hi = ceilNice(most, 6)
	rows.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		if drawable(d.Usual) {
			c.StrokeLine2(hline(inkFaint, 0.8, 3, 2), fx(d.Usual), c.Min.Y, fx(d.Usual), c.Max.Y)
		}
		for i := from; i < to; i++ {
			if b := d.Groups[i].Rate; drawable(b.Value) && b.hasBounds() {
				whisker(cv, c, fx(b.Low), fx(b.High), y(i), h*0.35, inkText)
			}
		}
		cv.SetColor(AchievedOK.Look().Fill)
		for i := from; i < to; i++ {
			if v := d.Groups[i].Rate.Value; drawable(v) {
				dot(cv, fx(v), y(i), 2.6)
			}
		}
		for i := from; i < to; i++ {
			put(cv, sty, vg.Point{X: c.Max.X + 5, Y: y(i)}, text(d.Groups[i]), rows.right)
		}
	}
	rows.say = func(i int) string {
		g := d.Groups[i]
		if !drawable(g.Rate.Value) {
			return text(g)
		}
		return number(g.Rate.Value, 2) + g.Rate.words(1, "") + ", " + text(g)
	}
	return rows.render(f), nil
}
