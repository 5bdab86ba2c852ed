package chart

import (
	"encoding/xml"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"
)

// label is a text element as it stands in the document, measured with the
// metrics of Liberation Sans; the box is in view box units, y downwards.
type label struct {
	text           string
	x0, y0, x1, y1 float64
}

type element struct {
	name string
	attr map[string]string
	text string
}

// parsed is what the tests look at in a figure.
type parsed struct {
	w, h     float64
	root     map[string]string
	elements []element
	labels   []label
}

var turned = regexp.MustCompile(`^translate\(([-.\d]+) ([-.\d]+)\)rotate\(([-.\d]+)\)$`)

// parse reads a figure with a strict XML reader, so it also shows that the
// figure is well formed.
func parse(t *testing.T, svg SVG) parsed {
	t.Helper()
	var p parsed
	dec := xml.NewDecoder(strings.NewReader(string(svg)))
	dec.Strict = true
	var stack []element
	inherited := func(name string) string {
		for i := len(stack) - 1; i >= 0; i-- {
			if v := stack[i].attr[name]; v != "" {
				return v
			}
		}
		return ""
	}
	for {
		tok, err := dec.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Fatalf("not well formed: %v", err)
		}
		switch tok := tok.(type) {
		case xml.StartElement:
			e := element{name: tok.Name.Local, attr: map[string]string{}}
			for _, a := range tok.Attr {
				e.attr[a.Name.Local] = a.Value
			}
			stack = append(stack, e)
		case xml.CharData:
			if n := len(stack); n > 0 {
				stack[n-1].text += string(tok)
			}
		case xml.EndElement:
			e := stack[len(stack)-1]
			if e.name == "text" {
				p.labels = append(p.labels, measure(t, e, inherited("font-size"), inherited("font-weight")))
			}
			stack = stack[:len(stack)-1]
			if e.name == "tspan" {
				stack[len(stack)-1].text += e.text
			}
			p.elements = append(p.elements, e)
			if e.name == "svg" {
				p.root = e.attr
				box := strings.Fields(e.attr["viewBox"])
				p.w, _ = strconv.ParseFloat(box[2], 64)
				p.h, _ = strconv.ParseFloat(box[3], 64)
			}
		}
	}
	return p
}

func measure(t *testing.T, e element, size, weight string) label {
	t.Helper()
	pt, err := strconv.ParseFloat(size, 64)
	if err != nil {
		t.Fatalf("text %q has no font size", e.text)
	}
	sty := sans(vg.Length(pt), inkText)
	if weight == "bold" {
		sty = bold(sty)
	}
	w, ext := float64(sty.Width(e.text)), sty.FontExtents()
	// Digits and letters of one line: cap height above, a descender below.
	up, down := float64(ext.Ascent)*0.8, float64(ext.Descent)*0.8
	if m := turned.FindStringSubmatch(e.attr["transform"]); m != nil {
		x, _ := strconv.ParseFloat(m[1], 64)
		y, _ := strconv.ParseFloat(m[2], 64)
		if m[3] != "-90" {
			t.Fatalf("text %q turned by %s", e.text, m[3])
		}
		return label{e.text, x - up, y - w, x + down, y}
	}
	x, errX := strconv.ParseFloat(e.attr["x"], 64)
	y, errY := strconv.ParseFloat(e.attr["y"], 64)
	if errX != nil || errY != nil {
		t.Fatalf("text %q has no place: %v", e.text, e.attr)
	}
	return label{e.text, x, y - up, x + w, y + down}
}

func (a label) overlaps(b label) bool {
	const slack = 0.2
	return math.Min(a.x1, b.x1)-math.Max(a.x0, b.x0) > slack && math.Min(a.y1, b.y1)-math.Max(a.y0, b.y0) > slack
}
