package chart

import (
	"image/color"
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// SpeedRoseData is how often the wind blew from each direction at each speed.
type SpeedRoseData struct {
	Caption
	// Bands name the speed classes from low to high, such as "1 to 2 m/s"; at most 7.
	Bands []string
	// Sectors run clockwise from north, the direction the wind comes from: 8,
	// 12, 16 or 36 rows, each with one share (%) per band.
	Sectors [][]float64
	// CalmShare is the share (%) of calm hours, drawn as the middle disc; NaN
	// or 0 leaves it out.
	CalmShare float64
}

// SpeedRose draws a wind rose: petals point to where the wind comes from,
// their length from the rim of the calm disc is the share of time.
func SpeedRose(d SpeedRoseData, o Options) (SVG, error) {
	o.record(d)
	f, err := newFrame("speed rose", d.Caption, o)
	if err != nil {
		return "", err
	}
	longest, err := f.longestPetal(d)
	if err != nil {
		return "", err
	}
	side := min(f.width, 250)
	colours := speedColours(len(d.Bands))
	step := niceStep(0, longest, 4)
	rim := math.Ceil(longest/step-1e-9) * step
	legendW := f.width - side - 14
	beside := legendW > 95
	var below vg.Length
	var entries []legendEntry
	for i, name := range d.Bands {
		entries = append(entries, legendEntry{label: name, band: colours[i]})
	}
	if !beside {
		_, below = layLegend(entries, f.width)
		below += 11
	}
	return f.render(side+below, func(cv *canvas, area draw.Canvas) {
		mid := vg.Point{X: side / 2, Y: below + side/2}
		calm := vg.Length(5)
		if d.CalmShare > 0 {
			calm = 13
		}
		outer := side/2 - 16
		radius := func(share float64) vg.Length { return calm + (outer-calm)*vg.Length(share/rim) }
		for s := step; s <= rim+step*1e-6; s += step {
			cv.SetColor(inkGrid)
			cv.SetLineWidth(lineAxis)
			cv.SetLineDash(nil, 0)
			cv.Stroke(ring(mid, radius(s)))
		}
		drawPetals(cv, d, mid, radius, colours)
		sayPetals(cv, d.Sectors, mid, radius)
		cv.SetColor(inkAxis)
		cv.SetLineWidth(lineAxis)
		cv.Stroke(ring(mid, calm))
		sty := align(sans(textSize, inkText), -0.5, -0.5)
		if d.CalmShare > 0 {
			write(cv, align(sans(smallSize, inkText), -0.5, -0.5), mid.X, mid.Y, number(d.CalmShare, 0)+" %")
		}
		for i, name := range []string{"N", "E", "S", "W"} {
			sin, cos := math.Sincos(float64(i) * math.Pi / 2)
			write(cv, bold(sty), mid.X+(outer+9)*vg.Length(sin), mid.Y+(outer+9)*vg.Length(cos), name)
		}
		a := emptiest(d.Sectors)
		for s := step; s <= rim+step*1e-6; s += step {
			r := radius(s)
			halo(cv, align(sans(smallSize, inkFaint), -0.5, -0.5), mid.X+r*vg.Length(math.Sin(a)), mid.Y+r*vg.Length(math.Cos(a)),
				number(s, decimalsOf(step))+" %")
		}
		note := "rings: share of the hours"
		if d.CalmShare > 0 {
			note += "; middle: calm"
		}
		if beside {
			top := area.Max.Y - side*0.3
			for i, e := range entries {
				drawLegend(cv, side+14, top-legendRow*vg.Length(i), legendW, []legendEntry{e})
			}
			put(cv, sans(smallSize, inkFaint), vg.Point{X: side + 14, Y: top - legendRow*vg.Length(len(entries)) - 12}, note, legendW)
		} else {
			drawLegend(cv, 0, below, f.width, entries)
			put(cv, sans(smallSize, inkFaint), vg.Point{X: 0, Y: 1}, note, f.width)
		}
	}), nil
}

func decimalsOf(step float64) int {
	return int(math.Max(0, -math.Floor(math.Log10(step)+1e-9)))
}

func (f frame) longestPetal(d SpeedRoseData) (float64, error) {
	if n := len(d.Sectors); n != 0 && (n < 4 || n > 72 || n%4 != 0) {
		return 0, f.errorf("%d sectors: must be a multiple of 4 from 4 to 72", n)
	}
	if len(d.Bands) > 7 {
		return 0, f.errorf("%d speed bands: at most 7 can be told apart", len(d.Bands))
	}
	longest := 0.0
	for i, row := range d.Sectors {
		if len(row) != len(d.Bands) {
			return 0, f.errorf("sector %d has %d shares for %d bands", i, len(row), len(d.Bands))
		}
		sum := 0.0
		for _, v := range row {
			if v < 0 || v > 100+1e-6 {
				return 0, f.errorf("sector %d: share %v %%: must be 0 to 100", i, v)
			}
			sum += known(v)
		}
		longest = math.Max(longest, sum)
	}
	if longest == 0 {
		return 0, f.noData()
	}
	return longest, nil
}

// speedColours runs from pale to dark blue, through the blues of the palette.
func speedColours(n int) []color.RGBA {
	anchors := [][3]float64{{0xD3, 0xEA, 0xF7}, {0x7F, 0xC2, 0xE8}, {0x00, 0x72, 0xB2}, {0x00, 0x2A, 0x4E}}
	out := make([]color.RGBA, n)
	for i := range out {
		t := 0.0
		if n > 1 {
			t = float64(i) / float64(n-1) * float64(len(anchors)-1)
		}
		k := min(int(t), len(anchors)-2)
		mix := func(ch int) uint8 {
			return uint8(math.Round(anchors[k][ch] + (t-float64(k))*(anchors[k+1][ch]-anchors[k][ch])))
		}
		out[i] = color.RGBA{mix(0), mix(1), mix(2), 255}
	}
	return out
}

// emptiest is the compass angle between two sectors whose petals are short,
// where the ring labels hide least.
func emptiest(sectors [][]float64) float64 {
	n := len(sectors)
	sum := func(i int) (s float64) {
		for _, v := range sectors[i%n] {
			s += known(v)
		}
		return s
	}
	best := 0
	for i := range n {
		if math.Max(sum(i), sum(i+1)) < math.Max(sum(best), sum(best+1)) {
			best = i
		}
	}
	return 2 * math.Pi * (float64(best) + 0.5) / float64(n)
}

// drawPetals draws band by band, so that each band is one path.
func drawPetals(cv *canvas, d SpeedRoseData, mid vg.Point, radius func(float64) vg.Length, colours []color.RGBA) {
	n := len(d.Sectors)
	half := math.Pi / float64(n) * 0.86
	for b := range d.Bands {
		cv.SetColor(colours[b])
		for i, row := range d.Sectors {
			from := 0.0
			for _, v := range row[:b] {
				from += known(v)
			}
			to := from + known(row[b])
			if to-from < 1e-6 {
				continue
			}
			// vg angles turn anticlockwise from east; the compass clockwise from north.
			middle := math.Pi/2 - 2*math.Pi*float64(i)/float64(n)
			cv.Fill(wedge(mid, radius(from), radius(to), middle-half, middle+half))
		}
	}
}

// sayPetals tells the share of each direction at a place in its petal.
func sayPetals(cv *canvas, sectors [][]float64, mid vg.Point, radius func(float64) vg.Length) {
	n := len(sectors)
	for i, row := range sectors {
		sum := 0.0
		for _, v := range row {
			sum += known(v)
		}
		if sum < 1e-6 {
			continue
		}
		// A square about the outer part of the petal, as wide as it is there.
		at := (radius(0) + 2*radius(sum)) / 3
		half := max(2, at*vg.Length(math.Sin(math.Pi/float64(n))))
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / float64(n))
		x, y := mid.X+at*vg.Length(sin), mid.Y+at*vg.Length(cos)
		cv.say(rect(x-half, y-half, x+half, y+half), "from "+number(360*float64(i)/float64(n), 0)+"°: "+number(sum, 1)+" % of the hours")
	}
}

func ring(mid vg.Point, r vg.Length) vg.Path {
	var p vg.Path
	p.Move(vg.Point{X: mid.X + r, Y: mid.Y})
	p.Arc(mid, r, 0, 2*math.Pi)
	p.Close()
	return p
}

func wedge(mid vg.Point, r0, r1 vg.Length, a0, a1 float64) vg.Path {
	sin, cos := math.Sincos(a0)
	var p vg.Path
	p.Move(vg.Point{X: mid.X + r0*vg.Length(cos), Y: mid.Y + r0*vg.Length(sin)})
	p.Arc(mid, r1, a0, a1-a0)
	p.Arc(mid, r0, a1, a0-a1)
	p.Close()
	return p
}
