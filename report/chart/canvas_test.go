package chart

import (
	"image"
	"image/color"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
)

func TestNumbersAreShort(t *testing.T) {
	for v, want := range map[float64]string{0: "0", -0.004: "0", 0.5: ".5", -0.25: "-.25", 12: "12", 3.10: "3.1", 99.995: "100", -7.05: "-7.05"} {
		if got := short(v); got != want {
			t.Errorf("%v: %q, want %q", v, got, want)
		}
	}
}

func line(pts ...float64) (p vg.Path) {
	for i := 0; i < len(pts); i += 2 {
		pt := vg.Point{X: vg.Length(pts[i]), Y: vg.Length(pts[i+1])}
		if i == 0 {
			p.Move(pt)
		} else {
			p.Line(pt)
		}
	}
	return p
}

// TestPaths holds the path data against the grammar of SVG 1.1, chapter 8:
// relative commands, and a first pair after m read as a move.
func TestPaths(t *testing.T) {
	cases := map[string]struct {
		draw func(cv *canvas)
		want string
	}{
		"y runs down": {func(cv *canvas) { cv.Stroke(line(10, 10, 20, 15)) },
			`<path stroke="#000000" stroke-width="1" d="M10 90l10-5"/>`},
		"equal style is one path": {func(cv *canvas) { cv.Stroke(line(0, 0, 0, 5)); cv.Stroke(line(1, 0, 1, 5)) },
			`<path stroke="#000000" stroke-width="1" d="M0 100v-5m1 5v-5"/>`},
		"rounding does not drift": {func(cv *canvas) { cv.Stroke(line(0, 0, 0.333, 0, 0.666, 0, 0.999, 0)) },
			`<path stroke="#000000" stroke-width="1" d="M0 100h.33 .34 .33"/>`},
		"a closed path starts the next": {func(cv *canvas) {
			cv.Fill(vg.Rectangle{Max: vg.Point{X: 2, Y: 1}}.Path())
			cv.Fill(vg.Rectangle{Min: vg.Point{X: 4}, Max: vg.Point{X: 5, Y: 1}}.Path())
		}, `<path fill="#000000" d="M0 100h2v-1h-2zm4 0h1v-1h-1z"/>`},
		"transforms": {func(cv *canvas) {
			cv.Push()
			cv.Translate(vg.Point{X: 10, Y: 20})
			cv.Rotate(math.Pi / 2)
			cv.Scale(2, 2)
			cv.Stroke(line(0, 0, 5, 0))
			cv.Pop()
		}, `<path stroke="#000000" stroke-width="2" d="M10 80v-10"/>`},
		"half opaque": {func(cv *canvas) {
			cv.SetColor(color.NRGBA{R: 255, A: 128})
			cv.Fill(vg.Rectangle{Max: vg.Point{X: 1, Y: 1}}.Path())
		}, `<path fill="#ff0000" fill-opacity=".5" d="M0 100h1v-1h-1z"/>`},
		"dashes": {func(cv *canvas) { cv.SetLineDash([]vg.Length{3, 1.5}, 1); cv.Stroke(line(0, 0, 9, 0)) },
			`<path stroke="#000000" stroke-width="1" stroke-dasharray="3 1.5" stroke-dashoffset="1" d="M0 100h9"/>`},
		"no width, no line": {func(cv *canvas) { cv.SetLineWidth(0); cv.Stroke(line(0, 0, 9, 0)) }, ``},
		"not a number":      {func(cv *canvas) { cv.Stroke(line(0, 0, math.NaN(), 0)) }, ``},
	}
	for name, tc := range cases {
		cv := newCanvas(100, 100)
		tc.draw(cv)
		got := strings.TrimSpace(cv.content())
		if got != tc.want {
			t.Errorf("%s:\ngot  %s\nwant %s", name, got, tc.want)
		}
	}
}

// TestCircleCloses: an SVG arc may not end where it began (SVG 1.1, 8.3.8), so
// a circle is several arcs, which together must come back to the start.
func TestCircleCloses(t *testing.T) {
	cv := newCanvas(100, 100)
	dot(cv, 50, 50, 3)
	arcs := regexp.MustCompile(`3 3 0 0 0 ?(-?[.\d]+) ?(-?[.\d]+)`).FindAllStringSubmatch(cv.content(), -1)
	var dx, dy float64
	for _, m := range arcs {
		x, _ := strconv.ParseFloat(m[1], 64)
		y, _ := strconv.ParseFloat(m[2], 64)
		if chord := math.Hypot(x, y); chord < 1 || chord > 6 {
			t.Errorf("arc of chord %v on radius 3", chord)
		}
		dx, dy = dx+x, dy+y
	}
	if len(arcs) < 2 || math.Hypot(dx, dy) > 0.011 {
		t.Errorf("%d arcs end %v, %v off: %s", len(arcs), dx, dy, cv.content())
	}
}

func TestTextIsText(t *testing.T) {
	cv := newCanvas(100, 100)
	face := plot.DefaultTextHandler.Cache().Lookup(sans(8, inkText).Font, 8)
	cv.FillString(face, vg.Point{X: 1, Y: 2}, "a < b & c")
	cv.FillString(face, vg.Point{X: 1, Y: 22}, "CO₂ (ppm)")
	cv.FillString(face, vg.Point{X: 1, Y: 12}, "next")
	cv.Rotate(math.Pi / 2)
	cv.FillString(face, vg.Point{X: 30, Y: -9}, "up")
	want := `<g fill="#000000" font-size="8">
<text x="1" y="98">a &lt; b &amp; c</text>
<text x="1" y="78">CO<tspan dy="1.2" font-size="5.44">2</tspan><tspan dy="-1.2"> (ppm)</tspan></text>
<text x="1" y="88">next</text>
<text transform="translate(9 70)rotate(-90)">up</text>
</g>
`
	if got := cv.content(); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

func TestImageFillsItsRectangle(t *testing.T) {
	cv := newCanvas(100, 100)
	img := image.NewPaletted(image.Rect(0, 0, 2, 1), color.Palette{color.Black, color.White})
	cv.DrawImage(vg.Rectangle{Min: vg.Point{X: 10, Y: 20}, Max: vg.Point{X: 60, Y: 50}}, img)
	want := `<image x="10" y="50" width="50" height="30" preserveAspectRatio="none" image-rendering="pixelated" href="data:image/png;base64,`
	if got := cv.content(); !strings.HasPrefix(got, want) {
		t.Errorf("got %.200s", got)
	}
}

// TestSwatch: the key in an HTML legend has the colours of the figures.
func TestSwatch(t *testing.T) {
	for c := None + 1; c < classCount; c++ {
		look, svg := c.Look(), string(Swatch(c))
		parse(t, SVG(svg))
		if !strings.Contains(svg, `fill="`+look.Hex()+`"`) || !strings.Contains(svg, `aria-hidden="true"`) {
			t.Errorf("%s: %s", look.Label, svg)
		}
		if hatched := strings.Contains(svg, `stroke="`+look.InkHex()+`"`); hatched != (look.Hatch != Solid) {
			t.Errorf("%s: hatch drawn %v", look.Label, hatched)
		}
	}
}
