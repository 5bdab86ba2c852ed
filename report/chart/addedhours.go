package chart

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// AddedHoursData is what each step of a measure would add, per zone.
type AddedHoursData struct {
	Caption
	// XTitle names the quantity and its unit.
	XTitle string
	// Steps name the steps from the first to the last; at most 7.
	Steps []string
	Zones []ZoneAdded
}

// ZoneAdded is one zone: the hours each step adds to the one before it, as
// long as Steps, 0 or more. Note is written behind the zone's total.
type ZoneAdded struct {
	Zone  string
	Added []float64
	Note  string
}

// AddedHours draws a bar per zone, step upon step, in the given order.
func AddedHours(d AddedHoursData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("added hours", d.Caption, o)
	if err != nil {
		return "", err
	}
	if len(d.Steps) > 7 {
		return "", f.errorf("%d steps: at most 7 can be told apart", len(d.Steps))
	}
	rows := zoneRows{xTitle: d.XTitle, most: 6}
	colours := speedColours(len(d.Steps))
	for k, name := range d.Steps {
		rows.legend = append(rows.legend, legendEntry{label: name, band: colours[k]})
	}
	zones := d.Zones
	if len(zones) > maxZoneRows {
		rows.extra, zones = len(zones)-maxZoneRows, zones[:maxZoneRows]
	}
	most := 0.0
	sty := align(sans(textSize, inkFaint), 0, -0.5)
	for _, z := range zones {
		if len(z.Added) != len(d.Steps) {
			return "", f.errorf("zone %q: %d values for %d steps", z.Zone, len(z.Added), len(d.Steps))
		}
		for _, v := range z.Added {
			if outside(v) {
				return "", f.errorf("zone %q: %v h: must be 0 to 1e9", z.Zone, v)
			}
		}
		most = math.Max(most, z.total())
		rows.names = append(rows.names, z.Zone)
		rows.right = max(rows.right, sty.Width(addedText(z))+6)
	}
	if most == 0 {
		return "", f.noData()
	}
	rows.hi = ceilNice(most, 6)
	rows.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		for k := range d.Steps {
			cv.SetColor(colours[k])
			for i := from; i < to; i++ {
				start := 0.0
				for _, v := range zones[i].Added[:k] {
					start += known(v)
				}
				if v := known(zones[i].Added[k]); v > 0 {
					cv.Fill(rect(fx(start), y(i)-h*0.32, fx(start+v), y(i)+h*0.32).Path())
				}
			}
		}
		for i := from; i < to; i++ {
			put(cv, sty, vg.Point{X: c.Max.X + 5, Y: y(i)}, addedText(zones[i]), rows.right)
		}
	}
	rows.say = func(i int) string { return addedText(zones[i]) }
	return rows.render(f), nil
}

func (z ZoneAdded) total() float64 {
	sum := 0.0
	for _, v := range z.Added {
		sum += known(v)
	}
	return sum
}

func addedText(z ZoneAdded) string {
	t := hoursText(z.total()) + " h"
	if n := clean(z.Note); n != "" {
		t += ", " + n
	}
	return t
}
