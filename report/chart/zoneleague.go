package chart

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// ZoneLeagueData is the achieved share of each zone.
type ZoneLeagueData struct {
	Caption
	// XTitle names the share; empty means "achieved share of the hours that
	// could have been open (%)".
	XTitle string
	Zones  []ZoneShare
	// Building is drawn as a line through all rows; NaN leaves it out.
	Building float64
}

// ZoneShare is one zone: a share from 0 to 1 with its bounds.
type ZoneShare struct {
	Zone  string
	Share Bounded
	// Hours are the hours the share is of, written beside it; NaN leaves them out.
	Hours float64
}

// ZoneLeague draws a dot per zone with a whisker for its bounds, lowest share
// first. Zones without a share but with bounds show the whisker alone; zones
// with neither are counted in a note.
func ZoneLeague(d ZoneLeagueData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("zone league", d.Caption, o)
	if err != nil {
		return "", err
	}
	var zones []ZoneShare
	empty := 0
	for _, z := range d.Zones {
		for _, v := range []float64{z.Share.Value, z.Share.Low, z.Share.High} {
			if v < -1e-9 || v > 1+1e-9 {
				return "", f.errorf("zone %q: share %v: must be 0 to 1", z.Zone, v)
			}
		}
		if !drawable(z.Share.Value) && !z.Share.hasBounds() {
			empty++
			continue
		}
		zones = append(zones, z)
	}
	if len(zones) == 0 {
		return "", f.noData()
	}
	key := func(z ZoneShare) float64 {
		if drawable(z.Share.Value) {
			return z.Share.Value
		}
		return 2
	}
	slices.SortStableFunc(zones, func(a, b ZoneShare) int {
		return cmp.Compare(key(a), key(b))
	})
	rows := zoneRows{xTitle: d.XTitle, lo: 0, hi: 100, most: 5}
	if clean(rows.xTitle) == "" {
		rows.xTitle = "achieved share of the hours that could have been open (%)"
	}
	rows.legend = []legendEntry{{label: "achieved share", class: AchievedOK, dot: true}, {label: "least and greatest it could be", line: inkText, width: 0.8}}
	if drawable(d.Building) {
		rows.legend = append(rows.legend, legendEntry{label: "building " + number(d.Building*100, 0) + " %", line: inkFaint, width: 0.8, dash: []vg.Length{3, 2}})
	}
	if len(zones) > maxZoneRows {
		rows.extra = len(zones) - maxZoneRows
		zones = zones[:maxZoneRows]
	}
	switch {
	case empty == 1:
		rows.note = "1 zone without such hours left out"
	case empty > 1:
		rows.note = number(float64(empty), 0) + " zones without such hours left out"
	}
	sty := align(sans(textSize, inkFaint), 0, -0.5)
	for _, z := range zones {
		rows.names = append(rows.names, z.Zone)
		rows.right = max(rows.right, sty.Width(shareText(z))+6)
	}
	rows.right = max(rows.right, 8)
	rows.draw = func(cv *canvas, c draw.Canvas, p *plot.Plot, from, to int, y func(int) vg.Length, h vg.Length) {
		fx, _ := p.Transforms(&c)
		if drawable(d.Building) {
			x := fx(d.Building * 100)
			c.StrokeLine2(hline(inkFaint, 0.8, 3, 2), x, c.Min.Y, x, c.Max.Y)
		}
		for i := from; i < to; i++ {
			if b := zones[i].Share; b.hasBounds() {
				whisker(cv, c, fx(b.Low*100), fx(b.High*100), y(i), h*0.35, inkText)
			}
		}
		cv.SetColor(AchievedOK.Look().Fill)
		for i := from; i < to; i++ {
			if v := zones[i].Share.Value; drawable(v) {
				dot(cv, fx(v*100), y(i), 2.6)
			}
		}
		for i := from; i < to; i++ {
			put(cv, sty, vg.Point{X: c.Max.X + 5, Y: y(i)}, shareText(zones[i]), rows.right)
		}
	}
	rows.say = func(i int) string { return shareText(zones[i]) + zones[i].Share.words(100, " %") }
	return rows.render(f), nil
}

func shareText(z ZoneShare) string {
	t := "–"
	if drawable(z.Share.Value) {
		t = number(z.Share.Value*100, 0) + " %"
	}
	if drawable(z.Hours) {
		t += " of " + hoursText(z.Hours) + " h"
	}
	return t
}

func dot(cv *canvas, x, y, r vg.Length) {
	var p vg.Path
	p.Move(vg.Point{X: x + r, Y: y})
	p.Arc(vg.Point{X: x, Y: y}, r, 0, 2*math.Pi)
	p.Close()
	cv.Fill(p)
}
