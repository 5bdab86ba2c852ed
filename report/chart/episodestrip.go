package chart

import (
	"math"
	"time"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// EpisodeStripData is one or a few days of one zone. Every slice is either
// empty (not logged) or has one value per step, NaN for a gap.
type EpisodeStripData struct {
	Caption
	// Start is the first step on the clock that the axis shows.
	Start time.Time
	Step  time.Duration

	IndoorC, OutdoorC         []float64
	ComfortLowC, ComfortHighC []float64
	CO2PPM                    []float64
	CO2LimitPPM               float64 // 0 or NaN: no line
	Window                    []WindowMode
	Plant                     []PlantMode
	Missed                    []Span
}

// Span is a half-open range of steps, From <= step < To.
type Span struct{ From, To int }

// WindowMode is the window in one step.
type WindowMode uint8

// The windows of a zone in a step.
const (
	WindowUnknown WindowMode = iota
	WindowShut
	WindowOpen
)

// PlantMode is the plant of a zone in one step.
type PlantMode uint8

// What the plant did in a step; PlantOn is running without a known type.
const (
	PlantUnknown PlantMode = iota
	PlantOff
	PlantOn
	PlantVent
	PlantHeat
	PlantCool
)

// maxStripSteps is two weeks of five-minute steps.
const maxStripSteps = 14 * 288

// EpisodeStrip draws temperatures with the comfort band, window and plant as
// bars, and CO2 below; missed spans are shaded and gaps stay gaps.
func EpisodeStrip(d EpisodeStripData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("episode strip", d.Caption, o)
	if err != nil {
		return "", err
	}
	n, err := f.stripSteps(d)
	if err != nil {
		return "", err
	}
	s := strip{d: d, n: n, hours: float64(n) * d.Step.Hours()}
	legend := s.legend()
	_, legendH := layLegend(legend, f.width)
	const tempH, rowH, co2H, axisH = 118, 11, 74, 24
	rows := 0
	for _, have := range []bool{len(d.Window) > 0, len(d.Plant) > 0} {
		if have {
			rows++
		}
	}
	barsH := vg.Length(rows*rowH + 8)
	height := legendH + titleRow + tempH + barsH + axisH
	hasCO2 := anyFinite(d.CO2PPM)
	if hasCO2 {
		height += titleRow + 2 + co2H
	}
	return f.render(height, func(cv *canvas, area draw.Canvas) {
		drawLegend(cv, 0, area.Max.Y, f.width, legend)
		y := area.Max.Y - legendH
		drawYTitle(cv, 0, y, "temperature (°C)", f.width)
		y -= titleRow
		plots := []*plot.Plot{s.temperature(cv)}
		box := area
		box.Rectangle = rect(0, y-tempH, f.width-6, y)
		boxes := []draw.Canvas{box}
		y -= tempH
		bars := s.bars(cv)
		box.Rectangle = rect(0, y-barsH, f.width-6, y)
		if !hasCO2 {
			box.Min.Y -= axisH
		}
		plots, boxes = append(plots, bars), append(boxes, box)
		y -= barsH
		last := bars
		if hasCO2 {
			drawYTitle(cv, 0, y-2, "CO₂ (ppm)", f.width)
			y -= titleRow + 2
			last = s.co2(cv)
			box.Rectangle = rect(0, 0, f.width-6, y)
			plots, boxes = append(plots, last), append(boxes, box)
		}
		for _, p := range plots {
			p.X.Min, p.X.Max = 0, s.hours
			p.X.Tick.Marker = plot.ConstantTicks(nil) // only the lowest panel names the hours
			p.X.Tick.Length = 0
		}
		last.X.Tick.Marker = s.timeTicks()
		last.X.Tick.Length = 2.5
		alignSides(plots, boxes)
	}), nil
}

type strip struct {
	d     EpisodeStripData
	n     int
	hours float64
}

func (f frame) stripSteps(d EpisodeStripData) (int, error) {
	if d.Step <= 0 {
		return 0, f.errorf("step %v: must be above zero", d.Step)
	}
	n := 0
	lengths := map[string]int{"indoor": len(d.IndoorC), "outdoor": len(d.OutdoorC), "comfort low": len(d.ComfortLowC),
		"comfort high": len(d.ComfortHighC), "CO2": len(d.CO2PPM), "window": len(d.Window), "plant": len(d.Plant)}
	for _, l := range lengths {
		n = max(n, l)
	}
	for _, name := range []string{"indoor", "outdoor", "comfort low", "comfort high", "CO2", "window", "plant"} {
		if l := lengths[name]; l != 0 && l != n {
			return 0, f.errorf("%s has %d steps, others have %d", name, l, n)
		}
	}
	if n > maxStripSteps {
		return 0, f.errorf("%d steps: at most %d fit a page", n, maxStripSteps)
	}
	states := false
	for _, w := range d.Window {
		states = states || w != WindowUnknown
	}
	for _, p := range d.Plant {
		states = states || p != PlantUnknown
	}
	if !states && !anyFinite(d.IndoorC) && !anyFinite(d.OutdoorC) && !anyFinite(d.CO2PPM) {
		return 0, f.noData()
	}
	return n, nil
}

func anyFinite(v []float64) bool {
	for _, x := range v {
		if drawable(x) {
			return true
		}
	}
	return false
}

func (s strip) legend() []legendEntry {
	var out []legendEntry
	if anyFinite(s.d.IndoorC) {
		out = append(out, legendEntry{label: "indoors", line: inkIndoor, width: lineBold})
	}
	if anyFinite(s.d.OutdoorC) {
		out = append(out, legendEntry{label: "outdoors", line: inkOutdor, width: lineBold, dash: []vg.Length{5, 1.5}})
	}
	if anyFinite(s.d.ComfortHighC) || anyFinite(s.d.ComfortLowC) {
		out = append(out, legendEntry{label: "comfort band", band: inkBand})
	}
	if len(s.d.Missed) > 0 {
		out = append(out, legendEntry{label: Missed.Label(), band: inkShade})
	}
	return append(out, s.stateKeys()...)
}

// hour is the place of the start of a step on the axis.
func (s strip) hour(i int) float64 { return float64(i) * s.d.Step.Hours() }

func (s strip) series(v []float64) []XY {
	pts := make([]XY, len(v))
	for i, x := range v {
		pts[i] = XY{s.hour(i) + s.d.Step.Hours()/2, x}
	}
	return pts
}

// clock says the time of an hour on the axis.
func (s strip) clock(hour float64) string {
	return s.d.Start.Add(time.Duration(hour * float64(time.Hour))).Format("2 January 15:04")
}

// shade paints the missed spans over the height of a panel.
func (s strip) shade(cv *canvas) plot.Plotter {
	return plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		fx, _ := p.Transforms(&c)
		cv.SetColor(inkShade)
		for _, m := range s.d.Missed {
			from, to := max(m.From, 0), min(m.To, s.n)
			if from < to {
				cv.Fill(rect(fx(s.hour(from)), c.Min.Y, fx(s.hour(to)), c.Max.Y).Path())
			}
		}
	})
}

func (s strip) temperature(cv *canvas) *plot.Plot {
	p := newPlot()
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, v := range [][]float64{s.d.IndoorC, s.d.OutdoorC, s.d.ComfortLowC, s.d.ComfortHighC} {
		for _, x := range v {
			if drawable(x) && math.Abs(x) < 1000 {
				lo, hi = math.Min(lo, x), math.Max(hi, x)
			}
		}
	}
	if hi < lo {
		lo, hi = 0, 30
	}
	p.Y.Min, p.Y.Max = math.Floor(lo-0.5), math.Ceil(hi+0.5)
	p.Y.Tick.Marker = niceTicks{want: 6}
	p.Add(s.band(cv), s.shade(cv), grid(false, true), s.upright(), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		strokeCurve(c, p, s.series(s.d.OutdoorC), hline(inkOutdor, lineData, 5, 1.5))
		strokeCurve(c, p, s.series(s.d.IndoorC), hline(inkIndoor, lineData))
		sayCurves(cv, c, p, 24, []namedCurve{{"indoors", s.series(s.d.IndoorC)}, {"outdoors", s.series(s.d.OutdoorC)}, {"comfort from", s.series(s.d.ComfortLowC)}, {"to", s.series(s.d.ComfortHighC)}}, s.clock, 1, " °C")
	}))
	return p
}

// band fills the comfort band where both limits are known; one limit alone is
// drawn as a line.
func (s strip) band(cv *canvas) plot.Plotter {
	return plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		fx, fy := p.Transforms(&c)
		low, high := s.d.ComfortLowC, s.d.ComfortHighC
		if len(low) == 0 || len(high) == 0 {
			strokeCurve(c, p, s.series(append(low, high...)), hline(inkFaint, lineThin))
			return
		}
		cv.SetColor(inkBand)
		for i := 0; i < s.n; {
			if !drawable(low[i]) || !drawable(high[i]) {
				i++
				continue
			}
			j := i
			for j < s.n && low[j] == low[i] && high[j] == high[i] {
				j++
			}
			y0 := clampLen(fy(low[i]), c.Min.Y, c.Max.Y)
			y1 := clampLen(fy(high[i]), c.Min.Y, c.Max.Y)
			cv.Fill(rect(fx(s.hour(i)), y0, fx(s.hour(j)), y1).Path())
			i = j
		}
	})
}

// upright draws the grid lines of the time axis in every panel.
func (s strip) upright() plot.Plotter {
	return plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		fx, _ := p.Transforms(&c)
		for _, t := range s.timeTicks() {
			if t.Value > 0 {
				c.StrokeLine2(hline(inkGrid, lineThin), fx(t.Value), c.Min.Y, fx(t.Value), c.Max.Y)
			}
		}
	})
}

func (s strip) co2(cv *canvas) *plot.Plot {
	p := newPlot()
	lo, hi := 400.0, 800.0
	for _, x := range s.d.CO2PPM {
		if drawable(x) && math.Abs(x) < 1e6 {
			lo, hi = math.Min(lo, x), math.Max(hi, x)
		}
	}
	limit := s.d.CO2LimitPPM
	if limit > 0 && limit < 1e5 {
		hi = math.Max(hi, limit*1.15)
	}
	step := niceStep(lo, hi, 4)
	p.Y.Min, p.Y.Max = math.Floor(lo/step)*step, math.Ceil(hi/step)*step
	p.Y.Tick.Marker = niceTicks{want: 4}
	p.Add(s.shade(cv), grid(false, true), s.upright(), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		strokeCurve(c, p, s.series(s.d.CO2PPM), hline(inkText, lineData))
		sayCurves(cv, c, p, 24, []namedCurve{{"CO₂", s.series(s.d.CO2PPM)}}, s.clock, 0, " ppm")
		if limit > 0 && limit < 1e5 {
			drawLevels(cv, c, p, []Limit{{limit, "limit " + number(limit, 0) + " ppm"}})
		}
	}))
	return p
}
