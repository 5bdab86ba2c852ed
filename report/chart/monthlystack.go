package chart

import (
	"fmt"
	"strings"
	"time"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// MonthlyStackData is hours per month, split by class.
type MonthlyStackData struct {
	Caption
	// YTitle names the quantity and its unit, such as "occupied hours of the
	// average occupant (h per month)"; empty means "hours (h per month)".
	YTitle string
	// Classes gives the order of the stack from the bottom.
	Classes []Class
	// Months follow each other in time.
	Months []MonthHours
}

// MonthHours is one column of the stack.
type MonthHours struct {
	Year  int
	Month time.Month
	// Hours are parallel to MonthlyStackData.Classes; NaN counts as nothing to draw.
	Hours []float64
	// Partial marks a month that is not wholly inside the period.
	Partial bool
}

// MonthlyStack draws one stacked column per month.
func MonthlyStack(d MonthlyStackData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("monthly stack", d.Caption, o)
	if err != nil {
		return "", err
	}
	tallest, used, partial, err := f.checkMonths(d)
	if err != nil {
		return "", err
	}
	entries := classLegend(used)
	_, legendH := layLegend(entries, f.width)
	note := vg.Length(0)
	if partial {
		note = 10
	}
	return f.render(legendH+172+note, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		if partial {
			write(cv, sans(smallSize, inkFaint), 0, 1, "* month only partly inside the period")
		}
		p := newPlot()
		p.X.Min, p.X.Max = 0, float64(len(d.Months))
		p.Y.Min, p.Y.Max = 0, ceilNice(tallest, 6)
		p.Y.Tick.Marker = niceTicks{want: 6}
		title := d.YTitle
		if clean(title) == "" {
			title = "hours (h per month)"
		}
		drawYTitle(cv, 0, area.Max.Y-legendH, title, f.width)
		p.X.Tick.Length = 0
		p.X.Tick.Marker = monthNames(d.Months, (f.width-25)/vg.Length(len(d.Months)))
		p.Add(grid(false, true), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
			fx, fy := p.Transforms(&c)
			var bars []bar
			half := min((fx(1)-fx(0))*0.36, 25)
			for i, m := range d.Months {
				sum, said := 0.0, []string(nil)
				for k, h := range m.Hours {
					if h > 0 {
						said = append(said, d.Classes[k].Label()+" "+hoursText(h)+" h")
						b := bar{class: d.Classes[k], Rectangle: rect(fx(float64(i)+0.5)-half, fy(sum), fx(float64(i)+0.5)+half, fy(sum+h))}
						if len(d.Months) <= 24 && b.Size().Y > 1.5 { // else nobody can point at it
							b.say = fmt.Sprintf("%s %d: %s, %s h", m.Month, m.Year, d.Classes[k].Label(), hoursText(h))
						}
						bars = append(bars, b)
						sum += h
					}
				}
				if len(d.Months) > 24 && sum > 0 {
					cv.say(rect(fx(float64(i)+0.5)-half, fy(0), fx(float64(i)+0.5)+half, fy(sum)), fmt.Sprintf("%s %d: %s", m.Month, m.Year, strings.Join(said, ", ")))
				}
			}
			drawBars(cv, bars)
		}))
		p.Draw(draw.Crop(area, 0, -1, note, -legendH-titleRow))
	}), nil
}

func (f frame) checkMonths(d MonthlyStackData) (tallest float64, used []Class, partial bool, err error) {
	if len(d.Months) > 120 {
		return 0, nil, false, f.errorf("%d months: at most 120 fit a page", len(d.Months))
	}
	seen := make([]bool, len(d.Classes))
	for _, m := range d.Months {
		if len(m.Hours) != len(d.Classes) {
			return 0, nil, false, f.errorf("%s %d: %d values for %d classes", m.Month, m.Year, len(m.Hours), len(d.Classes))
		}
		partial = partial || m.Partial
		sum := 0.0
		for k, h := range m.Hours {
			if outside(h) {
				return 0, nil, false, f.errorf("%s %d: %v hours of %q: must be 0 to 1e9", m.Month, m.Year, h, d.Classes[k].Label())
			}
			if h > 0 {
				seen[k] = true
				sum += h
			}
		}
		tallest = max(tallest, sum)
	}
	if tallest == 0 {
		return 0, nil, false, f.noData()
	}
	for k, c := range d.Classes {
		if seen[k] {
			used = append(used, c)
		}
	}
	return tallest, used, partial, nil
}

// monthNames names each column as far as it is wide enough: "Jan", then "J",
// then every third "J". The year stands under the first and under each January.
func monthNames(months []MonthHours, room vg.Length) plot.ConstantTicks {
	sty := sans(textSize, inkText)
	var ticks plot.ConstantTicks
	long := sty.Width("Mar*")+2 <= room
	for i, m := range months {
		at := time.Date(m.Year, m.Month, 1, 0, 0, 0, 0, time.UTC)
		name := at.Format("Jan")
		if !long {
			name = name[:1]
		}
		if m.Partial {
			name += "*"
		}
		if sty.Width(name) > room && i%3 != 0 {
			name = " "
		}
		near := sty.Width("2000")+4 > room*vg.Length(len(months)-i) && i > 0
		crowded := i > 0 && m.Month == time.January && sty.Width("2000")+4 > room*vg.Length(i)
		if (i == 0 || m.Month == time.January) && !near && !crowded {
			name += at.Format("\n2006")
		}
		ticks = append(ticks, plot.Tick{Value: float64(i) + 0.5, Label: name})
	}
	return ticks
}
