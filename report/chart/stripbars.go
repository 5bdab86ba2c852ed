package chart

import (
	"slices"
	"time"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// barRow is one row of states under the temperatures: runs of equal state,
// each with a colour and, where there is room, a word.
type barRow struct {
	name  string
	state func(i int) (Class, string)
}

// windowBar and plantBar give the class whose look a state borrows, and its word.
func windowBar(w WindowMode) (Class, string) {
	switch w {
	case WindowOpen:
		return Open, "open"
	case WindowShut:
		return None, "shut"
	}
	return Unknown, "unknown"
}

func plantBar(p PlantMode) (Class, string) {
	switch p {
	case PlantOff:
		return None, "off"
	case PlantOn:
		return Mech, "on"
	case PlantVent:
		return Shut, "ventilating"
	case PlantHeat:
		return TooWarm, "heating"
	case PlantCool:
		return TooCool, "cooling"
	}
	return Unknown, "unknown"
}

// stateKeys explains the coloured bars that occur, for those too short to hold
// a word.
func (s strip) stateKeys() []legendEntry {
	var out []legendEntry
	if slices.Contains(s.d.Window, WindowOpen) {
		out = append(out, legendEntry{label: "window open", class: Open})
	}
	for _, p := range []PlantMode{PlantOn, PlantVent, PlantHeat, PlantCool} {
		if slices.Contains(s.d.Plant, p) {
			class, word := plantBar(p)
			out = append(out, legendEntry{label: "plant " + word, class: class})
		}
	}
	if slices.Contains(s.d.Window, WindowUnknown) || slices.Contains(s.d.Plant, PlantUnknown) {
		out = append(out, legendEntry{label: Unknown.Label(), class: Unknown})
	}
	return out
}

func (s strip) bars(cv *canvas) *plot.Plot {
	var rows []barRow
	if len(s.d.Window) > 0 {
		rows = append(rows, barRow{"window", func(i int) (Class, string) { return windowBar(s.d.Window[i]) }})
	}
	if len(s.d.Plant) > 0 {
		rows = append(rows, barRow{"plant", func(i int) (Class, string) { return plantBar(s.d.Plant[i]) }})
	}
	p := newPlot()
	p.Y.Min, p.Y.Max = 0, float64(max(len(rows), 1))
	p.Y.Tick.Length = 0
	var names plot.ConstantTicks
	for k, r := range rows {
		names = append(names, plot.Tick{Value: float64(len(rows)-k) - 0.5, Label: r.name})
	}
	p.Y.Tick.Marker = names
	p.Add(s.shade(cv), s.upright(), plotterFunc(func(c draw.Canvas, p *plot.Plot) {
		fx, fy := p.Transforms(&c)
		var bars []bar
		type word struct {
			text string
			at   vg.Rectangle
			on   Class
		}
		var words []word
		for k, r := range rows {
			y0, y1 := fy(float64(len(rows)-k)-0.88), fy(float64(len(rows)-k)-0.12)
			for i := 0; i < s.n; {
				class, text := r.state(i)
				j := i
				for j < s.n {
					if c2, t2 := r.state(j); c2 != class || t2 != text {
						break
					}
					j++
				}
				at := rect(fx(s.hour(i)), y0, fx(s.hour(j)), y1)
				bars = append(bars, bar{class: class, Rectangle: at})
				words = append(words, word{text, at, class})
				i = j
			}
		}
		drawBars(cv, bars)
		for _, w := range words {
			sty := align(sans(smallSize, inkText), -0.5, -0.5)
			if w.on == None {
				sty.Color = inkFaint
			} else if luminance(w.on.Look().Fill) < 0.3 {
				sty.Color = rgb(0xFFFFFF)
			}
			mid := (w.at.Min.Y + w.at.Max.Y) / 2
			if sty.Width(w.text)+6 > w.at.Max.X-w.at.Min.X {
				continue
			}
			if w.on == Unknown {
				halo(cv, sty, (w.at.Min.X+w.at.Max.X)/2, mid, w.text)
				continue
			}
			write(cv, sty, (w.at.Min.X+w.at.Max.X)/2, mid, w.text)
		}
	}))
	return p
}

// timeTicks labels whole hours of the clock and, under the first and each
// midnight, the day.
func (s strip) timeTicks() plot.ConstantTicks {
	every := 24
	for _, h := range []int{1, 2, 3, 6, 12} {
		if s.hours/float64(h) <= 12 {
			every = h
			break
		}
	}
	var ticks plot.ConstantTicks
	first := true
	whole := time.Date(s.d.Start.Year(), s.d.Start.Month(), s.d.Start.Day(), 0, 0, 0, 0, s.d.Start.Location())
	for h := 0; ; h++ {
		at := whole.Add(time.Duration(h) * time.Hour)
		x := at.Sub(s.d.Start).Hours()
		if x > s.hours+1e-9 || h > 24*20 {
			return ticks
		}
		if x < -1e-9 || at.Hour()%every != 0 {
			continue
		}
		label := at.Format("15:04")
		if (first || at.Hour() == 0) && x < s.hours-1e-9 {
			label += at.Format("\n2 January")
		}
		first = false
		ticks = append(ticks, plot.Tick{Value: x, Label: label})
	}
}
