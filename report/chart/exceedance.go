package chart

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// ExceedanceData is the occupied time outside a comfort criterion, per zone.
type ExceedanceData struct {
	Caption
	// XTitle names the quantity and its unit, such as "occupied hours outside
	// EN 16798-1 category II (h)".
	XTitle string
	Zones  []ZoneExceedance
}

// ZoneExceedance is one zone: hours or shares too warm and too cool, 0 or more.
type ZoneExceedance struct {
	Zone    string
	TooWarm Bounded
	TooCool Bounded
}

// Exceedance draws too cool to the left and too warm to the right of a middle
// axis, zones with most first; whiskers show the bounds. At most 60 zones are
// drawn and the rest counted.
func Exceedance(d ExceedanceData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("exceedance", d.Caption, o)
	if err != nil {
		return "", err
	}
	zones, unknown := []ZoneExceedance{}, 0
	warmMost, coolMost := 0.0, 0.0
	for _, z := range d.Zones {
		if outside(z.TooWarm.Value) || outside(z.TooCool.Value) {
			return "", f.errorf("zone %q: %v too warm, %v too cool: must be 0 to 1e9", z.Zone, z.TooWarm.Value, z.TooCool.Value)
		}
		if !drawable(z.TooWarm.Value) && !drawable(z.TooCool.Value) {
			unknown++
			continue
		}
		zones = append(zones, z)
	}
	if len(zones) == 0 {
		return "", f.noData()
	}
	sum := func(z ZoneExceedance) float64 { return known(z.TooWarm.Value) + known(z.TooCool.Value) }
	slices.SortStableFunc(zones, func(a, b ZoneExceedance) int { return cmp.Compare(sum(b), sum(a)) })
	rows := zoneRows{xTitle: d.XTitle, legend: []legendEntry{
		{label: TooCool.Label(), class: TooCool}, {label: TooWarm.Label(), class: TooWarm},
		{label: "least and greatest it could be", line: inkText, width: 0.8},
	}}
	if len(zones) > maxZoneRows {
		rows.extra = len(zones) - maxZoneRows
		zones = zones[:maxZoneRows]
	}
	if unknown > 0 {
		rows.note = number(float64(unknown), 0) + " zones without a known value left out"
		if unknown == 1 {
			rows.note = "1 zone without a known value left out"
		}
	}
	for _, z := range zones {
		rows.names = append(rows.names, z.Zone)
		warmMost = math.Max(warmMost, known(z.TooWarm.top()))
		coolMost = math.Max(coolMost, known(z.TooCool.top()))
	}
	span := math.Max(warmMost+coolMost, 1e-9)
	step := math.Max(niceStep(0, span, 6), 1e-9)
	rows.lo, rows.hi = -math.Ceil(coolMost/step)*step, math.Ceil(warmMost/step)*step
	if warmMost+coolMost == 0 {
		rows.lo, rows.hi = 0, 1
	}
	rows.most, rows.sided = 6, true
	rows.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		var bars []bar
		for i := from; i < to; i++ {
			if v := zones[i].TooWarm.Value; v > 0 {
				bars = append(bars, bar{class: TooWarm, Rectangle: rect(fx(0), y(i)-h*0.32, fx(v), y(i)+h*0.32)})
			}
			if v := zones[i].TooCool.Value; v > 0 {
				bars = append(bars, bar{class: TooCool, Rectangle: rect(fx(-v), y(i)-h*0.32, fx(0), y(i)+h*0.32)})
			}
		}
		drawBars(cv, bars)
		c.StrokeLine2(hline(inkText, lineAxis), fx(0), c.Min.Y, fx(0), c.Max.Y)
		for i := from; i < to; i++ {
			if b := zones[i].TooWarm; b.hasBounds() && drawable(b.Value) {
				whisker(cv, c, fx(b.Low), fx(b.High), y(i), h*0.35, inkText)
			}
			if b := zones[i].TooCool; b.hasBounds() && drawable(b.Value) {
				whisker(cv, c, fx(-b.High), fx(-b.Low), y(i), h*0.35, inkText)
			}
		}
	}
	rows.say = func(i int) string {
		z := zones[i]
		return "too warm " + number(z.TooWarm.Value, 1) + z.TooWarm.words(1, "") + ", too cool " + number(z.TooCool.Value, 1) + z.TooCool.words(1, "")
	}
	return rows.render(f), nil
}

// outside tells of a known value that no zone can have.
func outside(v float64) bool { return v < 0 || v > 1e9 }

func known(v float64) float64 {
	if !drawable(v) {
		return 0
	}
	return v
}

// absoluteTicks labels both sides of zero without a sign.
type absoluteTicks struct{ of plot.Ticker }

func (a absoluteTicks) Ticks(lo, hi float64) []plot.Tick {
	ticks := a.of.Ticks(lo, hi)
	for i := range ticks {
		if r := []rune(ticks[i].Label); len(r) > 1 && r[0] == '\u2212' {
			ticks[i].Label = string(r[1:])
		}
	}
	return ticks
}
