package page

import (
	"html/template"

	"sashlog/report/chart"
)

// Exported is one figure of the report on its own.
type Exported struct {
	ID, Caption string
	Number      int
	SVG         []byte
	// Header and Rows are the data it is drawn from.
	Header []string
	Rows   [][]string
}

// Figures returns every figure of the report with the data behind it, in the
// order of the document.
func Figures(in Input) []Exported {
	b := newBuilder(in)
	b.exported = []Exported{}
	b.front()
	b.sections()
	return b.exported
}

// export keeps a figure when figures are wanted on their own.
func (b *builder) export(f *figure, data any) {
	if b.exported == nil || f.None != "" {
		return
	}
	e := Exported{ID: f.ID, Caption: f.Caption, Number: f.Number, SVG: []byte(f.SVG)}
	if data != nil {
		e.Header, e.Rows = chart.Table(data)
	}
	b.exported = append(b.exported, e)
}

func markup(svg chart.SVG) template.HTML { return template.HTML(svg) }
