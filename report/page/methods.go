package page

import (
	"strings"

	"sashlog/analyze"
	"sashlog/analyze/method"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/report/words"
)

func (b *builder) methods() section {
	s := section{ID: "methods", Title: "Methods, numbers and sources"}
	s.Blocks = append(s.Blocks,
		text("How a step is judged. Readings are averaged over steps of "+words.Plural(b.in.Site.StepS/60, "minute", "minutes")+". A step is occupied "+b.schedule()+". Its running state comes from window contacts and plant evidence close to the zone; its weather is suitable or not for a stated reason; and it lands in exactly one outcome, so that the outcomes add up to the occupied hours. Bounds are the least and greatest a figure could be if every unknown hour went one way or the other. They do not cover the accuracy of the sensors."),
		text("Publications are named as they are known here: “published” means read in a public text, not checked against the purchased standard; “from memory” must be checked before it is relied on; “our assumption” has no publication; “common practice” is a fact of the trade without one."))
	if t := b.numbers(); len(t.Rows) > 0 {
		s.Blocks = append(s.Blocks, b.table(t))
	}
	s.Blocks = append(s.Blocks, heading("Methods in use"))
	for _, d := range analyze.Methods() {
		s.Blocks = append(s.Blocks, block{Finding: methodEntry(d)})
	}
	return s
}

func (b *builder) schedule() string {
	if t := b.w.Foreign(b.in.Results.Running.Schedule); t != "" {
		return "as given: " + strings.TrimSuffix(t, ".")
	}
	if b.in.Site.Occupancy.Source == site.ByPresence {
		return "when presence was measured"
	}
	return "by the site's occupied times less holidays"
}

// notes lists the notes on the numbers in the order of reports.
func notes(c criteria.Settings) []criteria.Note { return c.Ordered() }

func (b *builder) numbers() table {
	t := table{ID: "numbers", Caption: "Numbers in force", Small: true, Head: []column{col("Number"), num("Value"), col("Unit"), keep("Key in the site file"), col("Source"), keep("Standing")}}
	for _, n := range notes(b.in.Criteria) {
		t.Rows = append(t.Rows, row(words.Clean(n.Words), words.Clean(n.Value), words.Clean(n.Unit), words.Clean(n.Key), words.Clean(n.Source), words.Clean(n.Standing)))
	}
	t.Foot = []string{"Preset: " + words.Clean(b.in.Criteria.Preset) + ". The command “sashlog methods” prints the same."}
	return t
}

// methodEntry shows a method's own documentation like a finding.
func methodEntry(d method.Doc) *finding {
	f := &finding{What: words.Clean(d.Title), Size: words.Sentence(d.Question)}
	add := func(name, v string) {
		if v != "" {
			f.Fields = append(f.Fields, field{name, v})
		}
	}
	add("Formula", words.Clean(d.Formula))
	add("Limits", words.Sentence(strings.Join(d.Limits, "; ")))
	add("Sources", words.Sentence(strings.Join(d.Sources, "; ")))
	add("Standing", words.Sentence(d.Standing))
	return f
}

func (b *builder) provenance() section {
	s := section{ID: "provenance", Title: "Provenance"}
	p := b.in.Provenance
	t := table{ID: "made", Caption: "How this report was made", Small: true, Head: []column{col("Item"), col("Value")}}
	add := func(k, v string) {
		if v = words.Clean(v); v != "" {
			t.Rows = append(t.Rows, row(k, v))
		}
	}
	add("Version", p.Version)
	add("Made at", p.Generated)
	if !b.rule.Coded() {
		add("Command", p.Command)
		add("Site file", b.in.Site.File)
	}
	add("Time zone", b.in.Site.TimeZone)
	add("Period", b.span.Period()+", "+words.Plural(b.span.Days, "day", "days"))
	add("Criteria", b.in.Criteria.Preset)
	add("Criteria hash", p.CriteriaHash)
	for _, x := range p.Settings {
		add(words.Clean(x.Name), x.Value)
	}
	switch {
	case b.rule.Internal():
		add("Privacy", "internal: everything is shown")
	default:
		add("Privacy", "rooms for one to three people without presence, counts and votes, by day and week only")
	}
	if b.rule.Coded() {
		add("Names", "zones are shown by codes in the order of the site file; file names, command and site file are left out")
	}
	s.Blocks = append(s.Blocks, b.table(t))
	if c := p.ConfigFiles; len(c) > 0 {
		t := table{ID: "config-files", Caption: "Site file, points table and diary", Small: true, Head: []column{col("File"), num("Bytes"), col("SHA-256")}}
		for i, f := range c {
			name := words.Clean(f.Path)
			if b.rule.Coded() {
				name = "site description " + words.Count(int64(i+1))
			}
			t.Rows = append(t.Rows, row(name, words.Count(f.Bytes), f.SHA256))
		}
		s.Blocks = append(s.Blocks, b.table(t))
	}
	if b.in.Ledger == nil || len(b.in.Ledger.Files) == 0 {
		return s
	}
	files := table{ID: "inputs", Caption: "Inputs", Head: []column{col("File"), num("Rows"), num("Bytes"), col("Found out about it"), col("SHA-256")}}
	list := b.in.Ledger.Files
	for i, f := range list[:min(mostRows, len(list))] {
		files.Rows = append(files.Rows, row(words.Clean(b.rule.File(i, f.Path)), words.Count(f.Rows), words.Count(f.Bytes), words.Sentence(b.w.Foreign(strings.Join(f.Dialect, "; "))), f.SHA256))
	}
	if n := len(list) - mostRows; n > 0 {
		files.Foot = []string{words.Plural(n, "more file is", "more files are") + " listed in results.json."}
	}
	s.Blocks = append(s.Blocks, b.table(files))
	return s
}

func (b *builder) cautions() section {
	return section{ID: "cautions", Title: "Cautions", Blocks: []block{
		text("This report supports a judgement. It is not a certificate of compliance with any code, standard or contract, and it does not replace a survey of the building. Where a change could hurt someone, local codes and licensed practice decide."),
		{List: []string{
			"Falls: opening windows wider or in more places needs guards, restrictors and sill heights as the local code asks, above all where children or the public are present.",
			"Smoke and fire: windows, vents and dampers may be part of smoke control; do not change their control without the fire engineer and the authority in charge.",
			"Security: windows left open out of hours, at ground level or beside roofs need a decision of whoever answers for security and insurance.",
			"Rain, wind and frost: open windows need rain and wind sensing or somebody who shuts them; keep frost protection of coils and pipes in force.",
			"Heat: in hot weather open windows can heat a building; people at risk from heat need cooling, whatever an adaptive criterion allows.",
			"Infection: where ventilation is set by an infection control plan, CO2 limits for comfort do not replace it.",
			"Outdoor air: smoke from fires, traffic and pollen are reasons to stay shut that these logs may not show.",
			"Plant: changed limits and time programmes are to be set by those licensed to do so, noted in the diary, and undone if the stated sign appears.",
		}},
	}}
}
