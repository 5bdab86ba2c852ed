package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// WhereHoursWentData follows the occupied hours down to those that were as
// good as they could be, naming each loss on the way.
type WhereHoursWentData struct {
	Caption
	// XTitle names the unit, such as "hours per year of the average occupant (h)".
	XTitle string
	// Steps run from the top: a total first, then losses and subtotals.
	Steps []HoursStep
}

// HoursStep is one row: a total that stands on the axis, or a loss taken off
// what remains.
type HoursStep struct {
	Label string
	Class Class // colour; for totals Occupied, Suited or AchievedOK
	Hours float64
	Total bool
	// Note follows the figure, such as "27 % of suited" (optional).
	Note string
}

// WhereHoursWent draws a horizontal waterfall: each loss is a bar hanging at
// the end of what remains. A total that does not equal what remains (to 0.5 %
// of the first) is an error: the figure would contradict itself.
func WhereHoursWent(d WhereHoursWentData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("where hours went", d.Caption, o)
	if err != nil {
		return "", err
	}
	ends, err := f.runningEnds(d.Steps)
	if err != nil {
		return "", err
	}
	const row = vg.Length(14)
	height := row*vg.Length(len(d.Steps)) + 27
	return f.render(height, func(cv *canvas, area draw.Canvas) {
		sty := align(sans(textSize, inkText), -1, -0.5)
		left, right := vg.Length(0), vg.Length(0)
		for _, s := range d.Steps {
			st := sty
			if s.Total {
				st = bold(sty)
			}
			left = max(left, st.Width(clean(s.Label)))
			right = max(right, bold(sty).Width(stepText(s)))
		}
		left = min(left, f.width*0.38)
		right = min(right, f.width*0.3)
		p := newPlot()
		p.X.Min, p.X.Max = 0, d.Steps[0].Hours
		p.Y.Scale = plot.InvertedScale{Normalizer: plot.LinearScale{}}
		p.Y.Min, p.Y.Max = 0, float64(len(d.Steps))
		p.HideY()
		p.X.Label.Text = clean(d.XTitle)
		if p.X.Label.Text == "" {
			p.X.Label.Text = "hours (h)"
		}
		p.X.Tick.Marker = ticksFor(f.width-left-right, 8)
		p.Add(grid(true, false), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			fx, fy := p.Transforms(&c)
			var bars []bar
			for i, s := range d.Steps {
				from, to := ends[i], ends[i]+s.Hours
				if s.Total {
					from, to = 0, s.Hours
				}
				bars = append(bars, bar{s.Class, rect(fx(from), fy(float64(i)+0.15), fx(to), fy(float64(i)+0.85)), clean(s.Label) + ": " + stepText(s)})
			}
			drawBars(cv, bars)
			for i := range d.Steps[1:] {
				// A thin line carries the remaining hours from row to row.
				x := fx(ends[i])
				if d.Steps[i].Total {
					x = fx(d.Steps[i].Hours)
				}
				c.StrokeLine2(hline(inkFaint, lineThin), x, fy(float64(i)+0.85), x, fy(float64(i)+1.15))
			}
			for i, s := range d.Steps {
				st, y := sty, fy(float64(i)+0.5)
				if s.Total {
					st = bold(sty)
				}
				put(cv, st, vg.Point{X: c.Min.X - 5, Y: y}, s.Label, left)
				put(cv, align(st, 0, -0.5), vg.Point{X: c.Max.X + 5, Y: y}, stepText(s), right)
			}
		}))
		p.Draw(draw.Crop(area, left+6, -right-6, 0, -2))
	}), nil
}

func stepText(s HoursStep) string {
	t := hoursText(s.Hours) + " h"
	if !s.Total {
		t = "\u2212" + t
		if s.Hours == 0 {
			t = "0 h"
		}
	}
	if n := clean(s.Note); n != "" {
		t += " (" + n + ")"
	}
	return t
}

// runningEnds returns, for each step, the hours that remain after it: for a
// loss the left end of its bar.
func (f frame) runningEnds(steps []HoursStep) ([]float64, error) {
	if len(steps) == 0 || !(steps[0].Hours > 0) {
		return nil, f.noData()
	}
	if len(steps) > 40 {
		return nil, f.errorf("%d steps: at most 40 fit a page", len(steps))
	}
	if !steps[0].Total {
		return nil, f.errorf("first step %q must be a total", steps[0].Label)
	}
	remain, slack := steps[0].Hours, steps[0].Hours*0.005
	ends := make([]float64, len(steps))
	for i, s := range steps {
		if outside(s.Hours) || !drawable(s.Hours) {
			return nil, f.errorf("step %q: %v hours: must be 0 to 1e9", s.Label, s.Hours)
		}
		if s.Total {
			if math.Abs(s.Hours-remain) > slack {
				return nil, f.errorf("total %q is %s h but %s h remain after the losses above it", s.Label, hoursText(s.Hours), hoursText(remain))
			}
			remain = s.Hours
		} else {
			remain -= s.Hours
			if remain < -slack {
				return nil, f.errorf("loss %q of %s h is more than remained", s.Label, hoursText(s.Hours))
			}
			remain = math.Max(0, remain)
		}
		ends[i] = remain
	}
	return ends, nil
}
