package chart

import (
	"encoding/base64"
	"fmt"
	"html"
	"image"
	"image/color"
	"image/png"
	"math"
	"strings"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"

	xfont "golang.org/x/image/font"
)

// canvas is a vg.Canvas that writes SVG for inlining in HTML. Transforms are
// applied to coordinates, so there are no nested groups; consecutive paths of
// equal style become one path element, consecutive texts of equal style one
// group. One point of vg is one unit of the view box, y downwards.
type canvas struct {
	w, h  vg.Length
	body  strings.Builder
	stack []drawState

	style string   // attributes of the pending path
	path  pathData // pending path
	text  string   // attributes of the open text group, "" when none is open
	said  strings.Builder
}

type drawState struct {
	m     matrix
	width vg.Length
	dash  []vg.Length
	shift vg.Length
	color color.Color
}

// matrix maps (x, y) to (a·x + c·y + e, b·x + d·y + f).
type matrix struct{ a, b, c, d, e, f float64 }

func (m matrix) times(n matrix) matrix {
	return matrix{
		a: m.a*n.a + m.c*n.b, b: m.b*n.a + m.d*n.b,
		c: m.a*n.c + m.c*n.d, d: m.b*n.c + m.d*n.d,
		e: m.a*n.e + m.c*n.f + m.e, f: m.b*n.e + m.d*n.f + m.f,
	}
}

func (m matrix) apply(p vg.Point) (x, y float64) {
	px, py := float64(p.X), float64(p.Y)
	return m.a*px + m.c*py + m.e, m.b*px + m.d*py + m.f
}

func (m matrix) scale() float64 { return math.Sqrt(math.Abs(m.a*m.d - m.b*m.c)) }

var _ vg.CanvasSizer = (*canvas)(nil)

func newCanvas(w, h vg.Length) *canvas {
	c := &canvas{w: w, h: h, stack: []drawState{{m: matrix{a: 1, d: -1, f: float64(h)}}}}
	vg.Initialize(c)
	return c
}

func (c *canvas) Size() (x, y vg.Length) { return c.w, c.h }

func (c *canvas) top() *drawState { return &c.stack[len(c.stack)-1] }

func (c *canvas) SetLineWidth(w vg.Length) { c.top().width = w }

func (c *canvas) SetLineDash(pattern []vg.Length, offset vg.Length) {
	c.top().dash, c.top().shift = pattern, offset
}

func (c *canvas) SetColor(col color.Color) {
	if col == nil {
		col = color.Black
	}
	c.top().color = col
}

func (c *canvas) Rotate(rad float64) {
	sin, cos := math.Sincos(rad)
	c.top().m = c.top().m.times(matrix{a: cos, b: sin, c: -sin, d: cos})
}

func (c *canvas) Translate(pt vg.Point) {
	c.top().m = c.top().m.times(matrix{a: 1, d: 1, e: float64(pt.X), f: float64(pt.Y)})
}

func (c *canvas) Scale(x, y float64) { c.top().m = c.top().m.times(matrix{a: x, d: y}) }

func (c *canvas) Push() { c.stack = append(c.stack, *c.top()) }

func (c *canvas) Pop() {
	if len(c.stack) > 1 {
		c.stack = c.stack[:len(c.stack)-1]
	}
}

// paint gives the value and opacity attributes of a colour for fill or stroke.
func paint(attr string, col color.Color) string {
	n := color.NRGBAModel.Convert(col).(color.NRGBA)
	s := fmt.Sprintf(`%s="%s"`, attr, hex(color.RGBA{R: n.R, G: n.G, B: n.B}))
	if n.A < 255 {
		s += fmt.Sprintf(` %s-opacity="%s"`, attr, short(float64(n.A)/255))
	}
	return s
}

func short(v float64) string { return string(appendHundredths(nil, hundredths(v))) }

func (c *canvas) Stroke(p vg.Path) {
	st := c.top()
	w := float64(st.width) * st.m.scale()
	if hundredths(w) <= 0 {
		return
	}
	style := paint("stroke", st.color) + ` stroke-width="` + short(w) + `"`
	if len(st.dash) > 0 {
		var parts []string
		for _, d := range st.dash {
			parts = append(parts, short(float64(d)*st.m.scale()))
		}
		style += ` stroke-dasharray="` + strings.Join(parts, " ") + `"`
		if hundredths(float64(st.shift)) != 0 {
			style += ` stroke-dashoffset="` + short(float64(st.shift)*st.m.scale()) + `"`
		}
	}
	c.add(style, p)
}

func (c *canvas) Fill(p vg.Path) { c.add(paint("fill", c.top().color), p) }

// add appends a path to the pending one when the style is the same. A path
// with a coordinate that is not a number is left out: it has no place.
func (c *canvas) add(style string, p vg.Path) {
	for _, s := range p {
		if !drawable(float64(s.Pos.X)) || !drawable(float64(s.Pos.Y)) {
			return
		}
	}
	c.endText()
	if style != c.style {
		c.flush()
		c.style = style
	}
	m := c.top().m
	for _, s := range p {
		x, y := m.apply(s.Pos)
		switch s.Type {
		case vg.MoveComp:
			c.path.move(x, y)
		case vg.LineComp:
			c.path.line(x, y)
		case vg.ArcComp:
			c.addArc(s, m)
		case vg.CurveComp:
			var pts []vg.Point
			for _, q := range append(append([]vg.Point(nil), s.Control...), s.Pos) {
				qx, qy := m.apply(q)
				pts = append(pts, vg.Point{X: vg.Length(qx), Y: vg.Length(qy)})
			}
			c.path.curve(map[int]byte{2: 'q', 3: 'c'}[len(pts)], pts...)
		case vg.CloseComp:
			c.path.close()
		}
	}
}

// addArc draws an arc in steps of at most half a turn, since an SVG arc may
// not end where it began.
func (c *canvas) addArc(s vg.PathComp, m matrix) {
	at := func(angle float64) (x, y float64) {
		sin, cos := math.Sincos(angle)
		return m.apply(vg.Point{X: s.Pos.X + s.Radius*vg.Length(cos), Y: s.Pos.Y + s.Radius*vg.Length(sin)})
	}
	x, y := at(s.Start)
	if !c.path.begun {
		c.path.move(x, y)
	} else {
		c.path.line(x, y)
	}
	sweep := (s.Angle > 0) == (m.a*m.d-m.b*m.c > 0)
	steps := int(math.Max(1, math.Ceil(math.Abs(s.Angle)/(math.Pi*0.999))))
	for i := 1; i <= steps; i++ {
		x, y = at(s.Start + s.Angle*float64(i)/float64(steps))
		c.path.arc(float64(s.Radius)*m.scale(), false, sweep, x, y)
	}
}

func (c *canvas) flush() {
	if len(c.path.buf) > 0 {
		fmt.Fprintf(&c.body, "<path %s d=\"%s\"/>\n", c.style, c.path.buf)
	}
	c.path, c.style = pathData{}, ""
}

func (c *canvas) endText() {
	if c.text != "" {
		c.body.WriteString("</g>\n")
		c.text = ""
	}
}

func (c *canvas) FillString(f font.Face, pt vg.Point, text string) {
	c.fillText(f, pt, text, "")
}

// fillText draws text and, when full is not empty, gives the reader's tool the
// whole of a shortened name.
func (c *canvas) fillText(f font.Face, pt vg.Point, text, full string) {
	text = clean(text)
	if strings.TrimSpace(text) == "" || f.Font.Size <= 0 || !drawable(float64(pt.X)) || !drawable(float64(pt.Y)) {
		return
	}
	c.flush()
	st := c.top()
	style := paint("fill", st.color) + ` font-size="` + short(float64(f.Font.Size)*st.m.scale()) + `"`
	if f.Font.Weight >= xfont.WeightSemiBold {
		style += ` font-weight="bold"`
	}
	if style != c.text {
		c.endText()
		c.body.WriteString("<g " + style + ">\n")
		c.text = style
	}
	x, y := st.m.apply(pt)
	// The frame has y downwards: an upright text has b = 0 and d < 0.
	turn := math.Atan2(st.m.b, st.m.a) * 180 / math.Pi
	place := fmt.Sprintf(`x="%s" y="%s"`, short(x), short(y))
	if hundredths(turn) != 0 {
		place = fmt.Sprintf(`transform="translate(%s %s)rotate(%s)"`, short(x), short(y), short(turn))
	}
	if full = clean(full); full != "" {
		full = "<title>" + html.EscapeString(full) + "</title>"
	}
	fmt.Fprintf(&c.body, "<text %s>%s%s</text>\n", place, full, lowered(text, float64(f.Font.Size)*st.m.scale()))
}

// lowered escapes text and sets a subscript two as a small lowered digit: older
// releases of Liberation Sans have no glyph for it, and a browser would take
// that one character from another font.
func lowered(text string, size float64) string {
	parts := strings.Split(html.EscapeString(text), "₂")
	s, drop := parts[0], short(size*0.15)
	for _, rest := range parts[1:] {
		s += fmt.Sprintf(`<tspan dy="%s" font-size="%s">2</tspan>`, drop, short(size*0.68))
		if rest != "" {
			s += fmt.Sprintf(`<tspan dy="-%s">%s</tspan>`, drop, rest)
		}
	}
	return s
}

// DrawImage places an image stretched over the rectangle, each pixel a sharp
// cell. PNG keeps a palette as a palette, so pass *image.Paletted.
func (c *canvas) DrawImage(rect vg.Rectangle, img image.Image) {
	var buf strings.Builder
	b64 := base64.NewEncoder(base64.StdEncoding, &buf)
	enc := png.Encoder{CompressionLevel: png.BestCompression}
	if err := enc.Encode(b64, img); err != nil {
		return // writing to memory: only an image without pixels fails, and that has nothing to show
	}
	b64.Close()
	c.endText()
	c.flush()
	x0, y0 := c.top().m.apply(rect.Min)
	x1, y1 := c.top().m.apply(rect.Max)
	fmt.Fprintf(&c.body, `<image x="%s" y="%s" width="%s" height="%s" preserveAspectRatio="none" image-rendering="pixelated" href="data:image/png;base64,%s"/>`+"\n",
		short(math.Min(x0, x1)), short(math.Min(y0, y1)), short(math.Abs(x1-x0)), short(math.Abs(y1-y0)), buf.String())
}

// say gives a place of the drawing the words a browser shows under the pointer.
func (c *canvas) say(at vg.Rectangle, text string) {
	x0, y0 := c.top().m.apply(at.Min)
	x1, y1 := c.top().m.apply(at.Max)
	if text = clean(text); text == "" || !drawable(x0) || !drawable(y0) || !drawable(x1) || !drawable(y1) {
		return
	}
	fmt.Fprintf(&c.said, `<rect x="%s" y="%s" width="%s" height="%s"><title>%s</title></rect>`+"\n",
		short(math.Min(x0, x1)), short(math.Min(y0, y1)), short(math.Abs(x1-x0)), short(math.Abs(y1-y0)), html.EscapeString(text))
}

// content ends the drawing and returns what stands between the svg tags; the
// places that say something lie unseen over the rest.
func (c *canvas) content() string {
	c.endText()
	c.flush()
	if c.said.Len() > 0 {
		c.body.WriteString("<g pointer-events=\"all\">\n" + c.said.String() + "</g>\n")
	}
	return c.body.String()
}

// drawable tells whether a number has a place on paper: it is a number, and
// not beyond a thousand million either way, where no quantity of a building lies.
func drawable(v float64) bool { return math.Abs(v) <= 1e9 }
