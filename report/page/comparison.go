package page

import (
	"bytes"
	"fmt"
	"html/template"
	"io"

	"sashlog/analyze/compare"
	"sashlog/report/words"
)

// sheet is a short document of its own: a question and its sections.
type sheet struct {
	Title, RunningHead, Paper, Building, Question, Policy string
	Invented                                              bool
	Style                                                 template.CSS
	Sections                                              []section
}

// write writes a sheet. Nothing is written when it cannot be made.
func (b *builder) write(w io.Writer, s sheet) error {
	style, err := files.ReadFile("templates/style.css")
	if err != nil {
		return fmt.Errorf("page: %w", err)
	}
	t, err := template.New("").Funcs(template.FuncMap{"main": mainPart, "bounds": boundsPart}).ParseFS(files, "templates/*.html")
	if err != nil {
		return fmt.Errorf("page: %w", err)
	}
	s.Style, s.Building, s.Invented = template.CSS(style), b.w.Building(), b.in.Site.Invented
	if s.Paper = b.in.Paper; s.Paper == "" {
		s.Paper = "A4"
	}
	s.Title, s.RunningHead = b.w.Building()+": "+s.Title, shorten(b.w.Marked(), 60)
	for i := range s.Sections {
		s.Sections[i].Number = i + 1
	}
	s.Policy = unsealed
	var buf bytes.Buffer
	if err := t.ExecuteTemplate(&buf, "comparison.html", s); err != nil {
		return fmt.Errorf("page: %w", err)
	}
	_, err = w.Write(seal(harmless(buf.Bytes())))
	return err
}

// WriteComparison writes whether a change worked.
func WriteComparison(w io.Writer, in Input, r *compare.Result) error {
	b := newBuilder(in)
	answer := section{ID: "answer", Title: "The answer", Blocks: texts(words.Compared(r)...)}
	if r.Unusable == "" {
		answer.Blocks = append(answer.Blocks, b.differences(r))
	}
	how := section{ID: "how", Title: "How it was compared", Blocks: b.howCompared(r)}
	return b.write(w, sheet{Title: "did the change work?",
		Question: fmt.Sprintf("Did the change work? %s to %s against %s to %s", words.Date(r.Before.From), words.Date(r.Before.To), words.Date(r.After.From), words.Date(r.After.To)),
		Sections: []section{answer, how, b.provenance(), b.cautions()}})
}

func (b *builder) differences(r *compare.Result) block {
	t := table{ID: "differences", Caption: "Before and after, as shares in per cent and differences in percentage points with 95 % intervals",
		Head: []column{col("Measure"), num("Before, as it was"), num("After, as it was"), num("Before, in weather like after"), num("After, days with a counterpart"), num("Difference"), num("Untouched zones"), num("Second opinion"), num("Chance of improvement")}}
	for m := compare.Measure(0); m < compare.NumMeasures; m++ {
		o := &r.Outcomes[m]
		untouched := words.Dash
		if len(r.Untouched) > 0 {
			untouched = words.Points(o.Untouched)
		}
		t.Rows = append(t.Rows, row(words.MeasureName(m), words.Share(o.Before), words.Share(o.After), words.Share(o.BeforeAdjusted), words.Share(o.AfterMatched),
			words.Points(o.Difference), untouched, words.Points(o.SecondOpinion), words.Share(o.ProbabilityBetter)))
	}
	t.Foot = []string{"Difference: after less before on days of like weather, and less the difference of the untouched zones where there are any. Second opinion: a regression of days on the weather. " +
		"More is better of open hours reached, less of everything else. " + words.Dash + " cannot be told, or no untouched zones were named."}
	return b.table(t)
}

func (b *builder) howCompared(r *compare.Result) []block {
	m := r.Matched
	var zones, untouched []string
	for _, z := range r.Zones {
		zones = append(zones, b.w.Zone(z))
	}
	for _, z := range r.Untouched {
		untouched = append(untouched, b.w.Zone(z))
	}
	out := texts(
		fmt.Sprintf("%s and %s occupied days with known weather were compared. The mean outdoor temperature of occupied hours was %s before and %s after; %s of the earlier and %s of the later days have counterparts of like outdoor temperature, and only those count.",
			words.Count(int64(m.BeforeDays)), words.Count(int64(m.AfterDays)), words.Unit(m.BeforeMeanC, 1, "°C"), words.Unit(m.AfterMeanC, 1, "°C"), words.Share(m.BeforeShare), words.Share(m.AfterShare)),
		"Comfort is held to one criterion in both periods: "+words.Clean(r.Criterion)+".",
		"Zones compared: "+words.List(zones, 30)+".")
	if len(untouched) > 0 {
		out = append(out, text("Untouched zones: "+words.List(untouched, 30)+". What changed in them too is not put down to the change."))
	} else {
		out = append(out, note("No untouched zones were named. Whatever else changed between the periods (people, holidays, other settings) is in the difference too; name zones the change did not reach with --untouched."))
	}
	return append(out, text(fmt.Sprintf("Intervals: blocks of %d occupied days of each period were drawn anew %d times, so that days in a row may be alike. A building in which nothing changed is called different in at most about one comparison of twenty.", compare.BlockDays, r.Draws)))
}
