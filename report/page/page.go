// Package page makes the report: one HTML file without network access that
// reads on a screen and prints to A4 and Letter. It shows figures of the
// analyses in the words of package words and the drawings of package chart, and
// computes none itself. A script of its own (look/) shows single days and zones
// from data packed inside the file; without it everything else still reads.
//
// The steps, in the order of the document:
//
//  1. page one: the answer, what the hours went to, worst zones, first actions
//  2. the year, the weather, the wind, the zones, comfort, fresh air
//  3. what was missed and why, the findings in full, out of hours
//  4. what the logs can answer, how good the data are, a sheet per zone
//  5. methods, provenance, cautions
package page

import (
	"bytes"
	"embed"
	"fmt"
	"html/template"
	"io"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"sashlog/analyze"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
	"sashlog/report/privacy"
	"sashlog/report/provenance"
	"sashlog/report/words"
)

// Input is everything a report is made from.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Ledger     *reading.Ledger
	Results    *analyze.Results
	Provenance provenance.Provenance
	// Paper is "A4" or "Letter"; empty means A4.
	Paper string
	// PrintOnly leaves out what only answers on a screen.
	PrintOnly bool
}

//go:embed templates/*.html templates/*.css
var files embed.FS

// document is what the outer template shows.
type document struct {
	Title, RunningHead, Paper string
	Style                     template.CSS
	Front                     front
	Sections                  []section
	Look                      look
	PrintOnly                 bool
	// Policy is the content security policy; see seal.
	Policy string
}

// Write writes the whole report. Nothing is written when it cannot be made.
func Write(w io.Writer, in Input) error {
	style, err := files.ReadFile("templates/style.css")
	if err != nil {
		return fmt.Errorf("page: %w", err)
	}
	if !in.PrintOnly {
		more, err := files.ReadFile("templates/look.css")
		if err != nil {
			return fmt.Errorf("page: %w", err)
		}
		style = append(style, more...)
	}
	t, err := template.New("").Funcs(template.FuncMap{"main": mainPart, "bounds": boundsPart}).ParseFS(files, "templates/*.html")
	if err != nil {
		return fmt.Errorf("page: %w", err)
	}
	paper := in.Paper
	switch paper {
	case "":
		paper = "A4"
	case "A4", "Letter":
	default:
		return fmt.Errorf("page: paper %q: must be A4 or Letter", paper)
	}
	b := newBuilder(in)
	doc := document{Title: b.w.Building() + ": open mode report", RunningHead: shorten(b.w.Marked(), 60),
		Paper: paper, Style: template.CSS(style), Front: b.front(), Sections: b.sections(), PrintOnly: in.PrintOnly, Policy: unsealed}
	if doc.Look, err = b.look(); err != nil {
		return err
	}
	var buf bytes.Buffer
	if err := t.ExecuteTemplate(&buf, "page.html", doc); err != nil {
		return fmt.Errorf("page: %w", err)
	}
	_, err = w.Write(seal(harmless(buf.Bytes())))
	return err
}

// unsealed stands where the policy will: the digests are known only when the
// document is.
const unsealed = "default-src 'none'"

// seal writes the content security policy of the finished document into its
// head.
func seal(doc []byte) []byte {
	between := func(open, end string) string {
		_, rest, ok := bytes.Cut(doc, []byte(open))
		text, _, _ := bytes.Cut(rest, []byte(end))
		if !ok {
			return ""
		}
		return string(text)
	}
	return bytes.Replace(doc, []byte(`content="`+template.HTMLEscapeString(unsealed)+`"`),
		[]byte(`content="`+policy(between("<style>", "</style>"), between("<script>", "</script>"))+`"`), 1)
}

// mainPart and boundsPart cut a figure from the bounds in brackets after it.
func mainPart(s string) string {
	main, _, _ := strings.Cut(s, " (")
	return main
}

func boundsPart(s string) string {
	_, rest, ok := strings.Cut(s, " (")
	if !ok {
		return ""
	}
	return "(" + rest
}

// harmless drops what no part of the report needs and foreign text may carry:
// marks that turn the writing direction, and control characters.
func harmless(html []byte) []byte {
	return bytes.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t':
			return r
		case words.Harmful(r) || unicode.IsControl(r):
			return -1
		}
		return r
	}, html)
}

func shorten(s string, most int) string {
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	return string([]rune(s)[:most-1]) + "…"
}

// builder makes the parts of the document in order, numbering figures and
// tables as it goes.
type builder struct {
	in      Input
	w       words.Input
	rule    privacy.Rule
	span    words.Span
	order   []int // zones by what matters
	figures int
	tables  int
	// places are the figures and tables by id, for links from findings.
	places map[string]place
	// carpets are the drawn carpets by the id of their figure.
	carpets map[string]lookCarpet
	// exported gathers figures on their own, when wanted.
	exported []Exported
}

func newBuilder(in Input) *builder {
	rule := privacy.For(in.Site)
	w := words.Input{Site: in.Site, Criteria: in.Criteria, Grid: in.Grid, Ledger: in.Ledger, Results: in.Results, Privacy: rule}
	return &builder{in: in, w: w, rule: rule, span: w.SpanOf(), order: words.Order(w), places: map[string]place{}, carpets: map[string]lookCarpet{}}
}

func (b *builder) sections() []section {
	list := []section{
		b.year(), b.weather(), b.wind(), b.zones(), b.comfort(), b.said(), b.air(), b.lost(), b.changeover(), b.findings(), b.outOfHours(),
		b.answerable(), b.quality(), b.sheets(), b.methods(), b.provenance(), b.cautions(),
	}
	list = slices.DeleteFunc(list, func(s section) bool { return s.ID == "" })
	for i := range list {
		list[i].Number = i + 1
		for _, x := range list[i].Blocks {
			if x.Finding != nil {
				x.Finding.Place = b.places[x.Finding.figure]
			}
		}
	}
	return list
}
