package page

import (
	"errors"
	"html/template"

	"sashlog/report/chart"
	"sashlog/report/words"
)

// section is one numbered chapter.
type section struct {
	ID, Title string
	Number    int
	Blocks    []block
}

// block is one piece of a section; exactly one field is set.
type block struct {
	Heading, Text, Note string
	List                []string
	Table               *table
	Figure              *figure
	Finding             *finding
}

// figure is a drawing with its number and a caption that says what to see.
type figure struct {
	ID, Caption string
	Number      int
	SVG         template.HTML
	// None says in words why there is no drawing.
	None string
}

// table is a table with its number; the first column holds row headings.
type table struct {
	ID, Caption string
	Number      int
	Head        []column
	Rows        [][]cell
	// Foot explains dashes and how the rows are sorted or cut.
	Foot []string
	// Wide tables scroll in their own box on narrow screens.
	Small bool
}

// column is a column's heading; Num columns hold numbers, Keep columns do not
// break their text, Words columns only between words.
type column struct {
	Text             string
	Num, Keep, Words bool
}

type cell struct {
	Text   string
	Swatch template.HTML
	Strong bool
}

// col and num make column heads of text and of numbers.
func col(s string) column { return column{Text: s} }
func num(s string) column { return column{Text: s, Num: true} }

// keep makes the head of a column whose text stays on one line in print.
func keep(s string) column { return column{Text: s, Keep: true} }

// row makes cells of texts.
func row(texts ...string) []cell {
	out := make([]cell, len(texts))
	for i, t := range texts {
		out[i].Text = t
	}
	return out
}

func text(s string) block    { return block{Text: s} }
func note(s string) block    { return block{Note: s} }
func heading(s string) block { return block{Heading: s} }

// texts is one paragraph per non-empty sentence.
func texts(list ...string) []block {
	var out []block
	for _, s := range list {
		if s != "" {
			out = append(out, text(s))
		}
	}
	return out
}

// draw numbers a figure and places its drawing, or says why there is none.
func (b *builder) draw(id, caption, none string, make func(chart.Options) (chart.SVG, error)) block {
	var data any
	svg, err := make(chart.Options{ID: id, Record: func(d any) { data = d }})
	if errors.Is(err, chart.ErrNoData) {
		return note(none)
	}
	b.figures++
	b.places[id] = place{"Figure " + words.Count(int64(b.figures)), id + "-figure"}
	f := &figure{ID: id, Caption: caption, Number: b.figures, SVG: markup(svg)}
	if err != nil {
		f.None = "This figure could not be drawn: " + words.Clean(err.Error()) + "."
	}
	b.export(f, data)
	return block{Figure: f}
}

// table numbers a table.
func (b *builder) table(t table) block {
	b.tables++
	t.Number = b.tables
	b.places[t.ID] = place{"Table " + words.Count(int64(b.tables)), t.ID}
	return block{Table: &t}
}

// place is where a figure or table stands, for links.
type place struct{ Label, Anchor string }

// swatch is a legend key of a class, to stand beside its words.
func swatch(c chart.Class) template.HTML { return template.HTML(chart.Swatch(c)) }
