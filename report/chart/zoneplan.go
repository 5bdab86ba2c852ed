package chart

import (
	"image/color"
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// ZonePlanData is a share per zone, laid out by floor and place.
type ZonePlanData struct {
	Caption
	// Legend says what the share is, in a few words.
	Legend string
	Floors []PlanFloor // from the bottom up
}

// PlanFloor is one floor.
type PlanFloor struct {
	Name  string
	Zones []PlanZone
}

// PlanZone is one zone of a floor.
type PlanZone struct {
	Zone string
	Side Side
	// Share is 0 to 1, NaN where not known; NoOpening zones have none.
	Share     float64
	NoOpening bool
	Words     string // below the name, such as "48 % of 700 h"
}

// Side is where on its floor a zone lies.
type Side uint8

// Sides of a floor.
const (
	Middle Side = iota
	North
	East
	South
	West
)

// planSteps are the shades of the share: fifths.
const planSteps = 5

// ZonePlan draws every floor as a rectangle with the zones along the sides they
// face and the others in the middle. It is a scheme, not to scale.
func ZonePlan(d ZonePlanData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("zone plan", d.Caption, o)
	if err != nil {
		return "", err
	}
	shades := speedColours(planSteps)
	entries := []legendEntry{}
	for i, c := range shades {
		name := number(float64(i)*100/planSteps, 0) + " to " + number(float64(i+1)*100/planSteps, 0) + " %"
		if i == 0 {
			name = clean(d.Legend) + ": " + name
		}
		entries = append(entries, legendEntry{label: name, band: c})
	}
	total, unknown, closed := 0, false, false
	for _, fl := range d.Floors {
		for _, z := range fl.Zones {
			if z.Share < -1e-9 || z.Share > 1+1e-9 {
				return "", f.errorf("zone %q: share %v: must be 0 to 1", z.Zone, z.Share)
			}
			total++
			closed = closed || z.NoOpening
			unknown = unknown || !z.NoOpening && !drawable(z.Share)
		}
	}
	if total == 0 {
		return "", f.noData()
	}
	if closed {
		entries = append(entries, legendEntry{label: NoOpening.Label(), class: NoOpening})
	}
	if unknown {
		entries = append(entries, legendEntry{label: Unjudged.Label(), class: Unjudged})
	}
	const noteH, floorGap, labelW = 10, 7, 60
	floorH := vg.Length(math.Max(52, math.Min(108, 520/float64(len(d.Floors)))))
	_, legendH := layLegend(entries, f.width)
	height := legendH + (floorH+floorGap)*vg.Length(len(d.Floors)) + noteH
	return f.render(height, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, entries)
		put(cv, sans(smallSize, inkFaint), vg.Point{X: 0, Y: 1}, "A scheme, not to scale: north at the top; in the middle what faces no side.", f.width)
		for i, fl := range d.Floors {
			top := area.Max.Y - legendH - (floorH+floorGap)*vg.Length(len(d.Floors)-1-i)
			put(cv, align(sans(textSize, inkText), 0, -0.5), vg.Point{X: 0, Y: top - floorH/2}, fl.Name, labelW-6)
			drawFloor(cv, fl, rect(labelW, top-floorH, f.width, top), shades)
		}
	}), nil
}

func drawFloor(cv *canvas, fl PlanFloor, box vg.Rectangle, shades []color.RGBA) {
	var by [West + 1][]PlanZone
	for _, z := range fl.Zones {
		by[z.Side] = append(by[z.Side], z)
	}
	h, w := box.Max.Y-box.Min.Y, box.Max.X-box.Min.X
	strip := func(n int, part vg.Length, others ...int) vg.Length {
		if n == 0 {
			return 0
		}
		for _, k := range others {
			if k > 0 {
				return part
			}
		}
		return -1 // alone: takes what is there
	}
	across := len(by[West]) + len(by[East]) + len(by[Middle])
	n := strip(len(by[North]), h*0.32, across, len(by[South]))
	s := strip(len(by[South]), h*0.32, across, len(by[North]))
	switch {
	case n < 0:
		n, s = h, 0
	case s < 0:
		n, s = 0, h
	case across == 0 && n > 0 && s > 0:
		n, s = h/2, h/2
	}
	row(cv, by[North], rect(box.Min.X, box.Max.Y-n, box.Max.X, box.Max.Y), true, shades)
	row(cv, by[South], rect(box.Min.X, box.Min.Y, box.Max.X, box.Min.Y+s), true, shades)
	mid := rect(box.Min.X, box.Min.Y+s, box.Max.X, box.Max.Y-n)
	wide := w * 0.24
	west, east := vg.Length(0), vg.Length(0)
	if len(by[West]) > 0 {
		west = wide
	}
	if len(by[East]) > 0 {
		east = wide
	}
	if len(by[Middle]) == 0 {
		switch {
		case west > 0 && east > 0:
			west, east = w/2, w/2
		case west > 0:
			west = w
		case east > 0:
			east = w
		}
	}
	row(cv, by[West], rect(mid.Min.X, mid.Min.Y, mid.Min.X+west, mid.Max.Y), false, shades)
	row(cv, by[East], rect(mid.Max.X-east, mid.Min.Y, mid.Max.X, mid.Max.Y), false, shades)
	row(cv, by[Middle], rect(mid.Min.X+west, mid.Min.Y, mid.Max.X-east, mid.Max.Y), true, shades)
}

// row parts a rectangle equally among zones, side by side or one above the
// other.
func row(cv *canvas, zones []PlanZone, box vg.Rectangle, beside bool, shades []color.RGBA) {
	for i, z := range zones {
		r := box
		if n := vg.Length(len(zones)); beside {
			w := (box.Max.X - box.Min.X) / n
			r.Min.X, r.Max.X = box.Min.X+w*vg.Length(i), box.Min.X+w*vg.Length(i+1)
		} else {
			h := (box.Max.Y - box.Min.Y) / n
			r.Max.Y = box.Max.Y - h*vg.Length(i)
			r.Min.Y = r.Max.Y - h
		}
		r = rect(r.Min.X+0.8, r.Min.Y+0.8, r.Max.X-0.8, r.Max.Y-0.8)
		ink := inkText
		switch {
		case z.NoOpening:
			drawBars(cv, []bar{{class: NoOpening, Rectangle: r}})
		case !drawable(z.Share):
			drawBars(cv, []bar{{class: Unjudged, Rectangle: r}})
		default:
			k := min(planSteps-1, max(0, int(z.Share*planSteps)))
			if k >= planSteps-2 {
				ink = rgb(0xFFFFFF)
			}
			cv.SetColor(shades[k])
			cv.Fill(r.Path())
		}
		switch {
		case z.NoOpening:
			cv.say(r, z.Zone+": "+NoOpening.Label())
		case !drawable(z.Share):
			cv.say(r, z.Zone+": "+Unjudged.Label())
		default:
			words := z.Words
			if words == "" {
				words = number(z.Share*100, 0) + " %"
			}
			cv.say(r, z.Zone+": "+words)
		}
		w, h := r.Max.X-r.Min.X-5, r.Max.Y-r.Min.Y
		if w < 12 || h < 9 {
			continue
		}
		at := vg.Point{X: r.Min.X + 3, Y: r.Max.Y - 2}
		name := align(sans(smallSize, ink), 0, -1)
		if z.NoOpening || !drawable(z.Share) {
			halo(cv, name, at.X, at.Y, fit(z.Zone, name, w))
		} else {
			put(cv, name, at, z.Zone, w)
		}
		if z.Words != "" && h >= 18 {
			put(cv, name, vg.Point{X: at.X, Y: at.Y - 9}, z.Words, w)
		}
	}
}
