// Package chart draws the figures of the report as SVG text for inlining in
// HTML and for print on A4.
//
// Each figure is one function of plain data and Options, in a file of its own:
//
//	svg, err := chart.Carpet(chart.CarpetData{...}, chart.Options{ID: "carpet"})
//
// A figure computes nothing: curves, bins and sums come from the analysis. The
// only reductions made here serve the drawing itself (points that would lie on
// top of each other are gathered, names that do not fit are shortened).
// Figures with nothing to show return ErrNoData, so that the page can say so
// in words. All text is escaped; the same data gives the same bytes.
package chart

import (
	"errors"
	"fmt"
	"html"
	"regexp"
	"strings"
	"unicode"
	"unicode/utf8"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// SVG is a whole svg element as text. It is made only by this package, with
// all foreign text escaped, and so is safe to inline in HTML.
type SVG string

// Options belong to the place of a figure in its document.
type Options struct {
	// ID is unique in the document; title and desc take their ids from it. A
	// letter, then letters, digits, '-' or '_'.
	ID string
	// WidthMM is the width on paper, 60 to 400 mm; 0 means 170 mm, the text
	// width of an A4 page.
	WidthMM float64
	// Record, when not nil, is told what the figure is drawn from; see Table.
	Record func(data any)
}

func (o Options) record(data any) {
	if o.Record != nil {
		o.Record(data)
	}
}

// Caption is the accessible text of a figure, read out in its place. Title
// says what is shown and is required; Desc says what it tells.
type Caption struct {
	Title string
	Desc  string
}

// ErrNoData says that a figure has nothing to show: no rows, or no known value
// among them.
var ErrNoData = errors.New("nothing to show")

const ptPerMM = 72 / 25.4

var idForm = regexp.MustCompile(`^[A-Za-z][A-Za-z0-9_-]*$`)

// frame is a figure under way: its name for messages, its caption and place.
type frame struct {
	name  string
	cap   Caption
	opt   Options
	width vg.Length
}

func newFrame(name string, c Caption, o Options) (frame, error) {
	f := frame{name: name, cap: c, opt: o}
	if !idForm.MatchString(o.ID) {
		return f, f.errorf("id %q: must be a letter followed by letters, digits, '-' or '_'", o.ID)
	}
	if strings.TrimSpace(clean(c.Title)) == "" {
		return f, f.errorf("title is empty: a figure needs one to be read out")
	}
	if o.WidthMM == 0 {
		f.opt.WidthMM = 170
	}
	if w := f.opt.WidthMM; !(w >= 60 && w <= 400) {
		return f, f.errorf("width %v mm: must be 60 to 400", w)
	}
	f.width = vg.Length(f.opt.WidthMM * ptPerMM)
	return f, nil
}

func (f frame) errorf(format string, args ...any) error {
	return fmt.Errorf("chart: %s: %w", f.name, fmt.Errorf(format, args...))
}

func (f frame) noData() error { return f.errorf("%w", ErrNoData) }

// render draws a figure of the given height and wraps it into its svg element.
func (f frame) render(height vg.Length, paint func(cv *canvas, area draw.Canvas)) SVG {
	cv := newCanvas(f.width, height)
	paint(cv, draw.New(cv))
	id := f.opt.ID
	var b strings.Builder
	fmt.Fprintf(&b, `<svg xmlns="http://www.w3.org/2000/svg" width="%smm" height="%smm" viewBox="0 0 %s %s" role="img" aria-labelledby="%s-title %s-desc" font-family="'Liberation Sans', Arial, Helvetica, sans-serif" fill="none">`+"\n",
		short(f.opt.WidthMM), short(float64(height)/ptPerMM), short(float64(f.width)), short(float64(height)), id, id)
	fmt.Fprintf(&b, "<title id=\"%s-title\">%s</title>\n", id, html.EscapeString(clean(f.cap.Title)))
	fmt.Fprintf(&b, "<desc id=\"%s-desc\">%s</desc>\n", id, html.EscapeString(clean(f.cap.Desc)))
	b.WriteString(cv.content())
	b.WriteString("</svg>\n")
	return SVG(b.String())
}

// clean makes foreign text harmless on one line: control characters and line
// breaks become spaces, marks that turn the writing direction and characters
// XML forbids are dropped.
func clean(s string) string {
	plain := true
	for i := 0; i < len(s); i++ {
		if s[i] < ' ' || s[i] >= 0x7f {
			plain = false
			break
		}
	}
	if plain {
		return s
	}
	var b strings.Builder
	for _, r := range s {
		switch {
		case r == utf8.RuneError || r == 0xFFFE || r == 0xFFFF || r == 0xFEFF:
		case r >= 0x202A && r <= 0x202E, r >= 0x2066 && r <= 0x2069, r == 0x200E, r == 0x200F, r == 0x061C:
		case unicode.IsControl(r), r == 0x2028, r == 0x2029:
			b.WriteByte(' ')
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}
