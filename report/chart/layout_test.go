package chart

import (
	"regexp"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/plot"

	"golang.org/x/image/font/sfnt"
)

// TestLabelsStayInPlace measures every label: none may leave the view box and
// no two may stand on each other.
func TestLabelsStayInPlace(t *testing.T) {
	for _, width := range []float64{170, 120} {
		for _, f := range figures() {
			svg, err := f.draw(Options{ID: "x", WidthMM: width})
			if err != nil {
				t.Fatalf("%s: %v", f.name, err)
			}
			p := parse(t, svg)
			if len(p.labels) < 4 {
				t.Errorf("%s: only %d labels", f.name, len(p.labels))
			}
			for i, a := range p.labels {
				if a.x0 < -0.3 || a.y0 < -0.3 || a.x1 > p.w+0.3 || a.y1 > p.h+0.3 {
					t.Errorf("%s at %v mm: %q (%.1f %.1f to %.1f %.1f) leaves %v x %v", f.name, width, a.text, a.x0, a.y0, a.x1, a.y1, p.w, p.h)
				}
				for _, b := range p.labels[:i] {
					if a.overlaps(b) {
						t.Errorf("%s at %v mm: %q stands on %q", f.name, width, a.text, b.text)
					}
				}
			}
		}
	}
}

// TestGlyphs: a missing glyph still has a width, so layout does not reveal it.
func TestGlyphs(t *testing.T) {
	face := plot.DefaultTextHandler.Cache().Lookup(sans(8, inkText).Font, 8)
	has := func(r rune) bool {
		var buf sfnt.Buffer
		i, err := face.Face.GlyphIndex(&buf, r)
		return err == nil && i != 0
	}
	if has('✓') || has('漢') {
		t.Fatal("the check finds glyphs that Liberation Sans does not have")
	}
	texts := map[string]string{}
	for c := None; c < classCount; c++ {
		texts[c.Label()] = "class"
	}
	for _, f := range figures() {
		svg, err := f.draw(Options{ID: "x"})
		if err != nil {
			t.Fatal(err)
		}
		for _, l := range parse(t, svg).labels {
			texts[l.text] = f.name
		}
	}
	for text, where := range texts {
		for _, r := range text {
			if !has(r) {
				t.Errorf("%s: %q has no glyph for %q", where, text, r)
			}
		}
	}
}

var longNumber = regexp.MustCompile(`\.\d{3}`)

// TestDocument checks what the page relies on in every figure.
func TestDocument(t *testing.T) {
	for _, f := range figures() {
		svg, err := f.draw(Options{ID: "fig-1"})
		if err != nil {
			t.Fatal(err)
		}
		p := parse(t, svg)
		if p.root["role"] != "img" || p.root["aria-labelledby"] != "fig-1-title fig-1-desc" || p.root["width"] != "170mm" {
			t.Errorf("%s: root %v", f.name, p.root)
		}
		if !strings.HasPrefix(p.root["font-family"], "'Liberation Sans', Arial") {
			t.Errorf("%s: font family %q", f.name, p.root["font-family"])
		}
		ids := map[string]int{}
		for i, e := range p.elements {
			if id := e.attr["id"]; id != "" {
				ids[id]++
			}
			switch e.name {
			case "svg", "title", "desc", "path", "g", "text", "tspan", "image":
			case "rect": // a place with words for the pointer
				at := func(k string) float64 { v, _ := strconv.ParseFloat(e.attr[k], 64); return v }
				if says := p.elements[i-1]; says.name != "title" || strings.Contains(says.text, "NaN") || !strings.Contains(says.text, ": ") ||
					at("x") < -0.1 || at("y") < -0.1 || at("x")+at("width") > p.w+0.1 || at("y")+at("height") > p.h+0.1 {
					t.Errorf("%s: a place says %q at %v", f.name, says.text, e.attr)
				}
			default:
				t.Errorf("%s: element %q", f.name, e.name)
			}
			for k, v := range e.attr {
				if strings.HasPrefix(k, "on") || k == "style" {
					t.Errorf("%s: attribute %s=%q", f.name, k, v)
				}
				if k != "href" && (strings.Contains(v, "NaN") || strings.Contains(v, "Inf") || longNumber.MatchString(v)) {
					t.Errorf("%s: %s has attribute %s=%.80q", f.name, e.name, k, v)
				}
			}
		}
		if len(ids) != 2 || ids["fig-1-title"] != 1 || ids["fig-1-desc"] != 1 {
			t.Errorf("%s: ids %v", f.name, ids)
		}
		if len(svg) > 75_000 {
			t.Errorf("%s: %d bytes, more than 75 kB", f.name, len(svg))
		}
	}
}
