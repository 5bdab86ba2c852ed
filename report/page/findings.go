package page

import (
	"strings"
	"time"

	"sashlog/analyze/advice"
	"sashlog/analyze/afterhours"
	"sashlog/analyze/answerable"
	"sashlog/report/words"
)

// finding is one finding in full.
type finding struct {
	ID, What, Size, Confidence, Zones string
	Fields                            []field
	Caution                           string
	// Place is the figure or table that shows it, empty when there is none.
	Place  place
	figure string
}

type field struct{ Name, Text string }

func (b *builder) findings() section {
	s := section{ID: "findings", Title: "Findings in full"}
	list := b.in.Results.Findings
	if len(list) == 0 {
		s.Blocks = append(s.Blocks, text("Nothing was found that calls for a change, or the logs do not allow a finding (see What these logs can answer)."))
		return s
	}
	s.Blocks = append(s.Blocks, text("Every finding says what it rests on, what else could explain it, what to check on the site before anything is changed, and when to undo the change. Hours are lost hours "+b.span.Words+", summed over the zones named, with bounds."))
	for i, f := range list {
		s.Blocks = append(s.Blocks, block{Finding: b.finding(i+1, f)})
	}
	return s
}

func (b *builder) finding(n int, f advice.Finding) *finding {
	zones := make([]string, len(f.Zones))
	for i, id := range b.rule.IDs(f.Zones) {
		zones[i] = words.Clean(id)
	}
	out := &finding{ID: "finding-" + words.Count(int64(n)), What: words.Sentence(b.w.Foreign(f.What)), Size: words.FindingSize(b.w, f), Confidence: words.Clean(f.Confidence),
		Zones: words.List(zones, 12), Caution: words.Sentence(b.w.Foreign(f.Caution)), figure: f.Evidence.Figure}
	add := func(name, v string) {
		if v = words.Sentence(b.w.Foreign(v)); v != "" {
			out.Fields = append(out.Fields, field{name, v})
		}
	}
	add("Do next", f.DoNext)
	add("Who", f.Who)
	add("Check on site first", f.CheckOnSite)
	add("Undo if", f.UndoIf)
	add("Other explanations", strings.Join(f.RivalExplanations, "; "))
	if len(f.Evidence.Points) > 0 && !b.rule.Coded() { // columns often name rooms
		out.Fields = append(out.Fields, field{"Points it rests on", words.Clean(strings.Join(f.Evidence.Points, ", "))})
	}
	var days []string
	if d := isoDay(f.Evidence.TypicalDay); d != "" {
		days = append(days, "typical "+d)
	}
	if d := isoDay(f.Evidence.ContraryDay); d != "" {
		days = append(days, "contrary "+d)
	}
	add("Days to look at", strings.Join(days, "; "))
	return out
}

// isoDay writes an ISO day in words; other text as it is.
func isoDay(s string) string {
	t, err := time.Parse("2006-01-02", s)
	if err != nil {
		return s
	}
	return t.Format("Monday 2 January 2006")
}

func (b *builder) outOfHours() section {
	s := section{ID: "out-of-hours", Title: "Out of hours"}
	r := b.in.Results.AfterHours
	x, k := r.Building, b.span.PerYear
	s.Blocks = append(s.Blocks, text("What ran or stood open while nobody was meant to be there, for the average occupant's zone. A night purge cools the building with night air through open windows while plant is off; it is available when the night is cool enough and the rooms are warm."))
	t := table{ID: "out-of-hours-table", Caption: "Outside occupied time, hours " + b.span.Words,
		Head: []column{col("Zone"), num("Plant on (h)"), num("of it heating or cooling (h)"), num("Warm-up (h)"), num("Plant unknown (h)"), num("Nights plant left on"),
			num("Windows open (h)"), num("Windows unknown (h)"), num("Nights left open"), num("Night purge used (h)"), num("available (h)"), num("not known (h)")}}
	line := func(name string, z afterhours.Zone) []cell {
		// Of nothing known nothing is said, not zero.
		nights := func(n, known int) string {
			if known == 0 {
				return words.Dash
			}
			return words.Count(int64(n)) + " of " + words.Count(int64(known))
		}
		hours := func(h, unknown float64) string {
			if h == 0 && unknown > 0 {
				return words.Dash
			}
			return words.HoursNumber(h * k)
		}
		return row(name, hours(z.PlantOnH, z.PlantUnknownH), hours(z.PlantConditioningH, z.PlantUnknownH), hours(z.WarmUpH, z.PlantUnknownH), words.HoursNumber(z.PlantUnknownH*k),
			nights(z.NightsPlantOn, z.NightsPlantKnown), hours(z.WindowsOpenH, z.WindowsUnknownH), words.HoursNumber(z.WindowsUnknownH*k),
			nights(z.NightsWindowsOpen, z.NightsWindowsKnown), hours(z.PurgeH, z.PurgeUnknownH), hours(z.PurgeAvailableH, z.PurgeUnknownH), words.HoursNumber(z.PurgeUnknownH*k))
	}
	all := line("building (average occupant)", x)
	for i := range all {
		all[i].Strong = true
	}
	t.Rows = append(t.Rows, all)
	zones, foot := b.capped(b.order)
	for _, z := range zones {
		if z < len(r.Zones) {
			t.Rows = append(t.Rows, line(b.w.Zone(z), r.Zones[z]))
		}
	}
	t.Foot = []string{words.Dash + " none seen, while some hours or all are not known. Nights are those of which at least half is known.", "Windows left open overnight: think of security, rain and frost before calling it a night purge."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	s.Blocks = append(s.Blocks, b.table(t))
	if len(r.Notes) > 0 {
		s.Blocks = append(s.Blocks, block{List: b.foreign(r.Notes)})
	}
	return s
}

func (b *builder) answerable() section {
	s := section{ID: "answerable", Title: "What these logs can answer"}
	t := table{ID: "answerable-table", Caption: "Questions, the points they need, and the cheapest way to get what is missing",
		Head: []column{col("Question"), col("Answer"), num("Zones"), col("Needs"), col("There"), col("Missing, and the cheapest way to get it")}}
	sign := map[answerable.Status]string{answerable.Yes: "yes", answerable.Partly: "partly", answerable.No: "no"}
	for _, q := range b.in.Results.Answerable {
		missing := words.List(b.cleaned(q.Missing), 6)
		if q.Cheapest != "" {
			if missing != "" {
				missing += ". "
			}
			missing += "Cheapest: " + b.w.Foreign(q.Cheapest)
		}
		if missing == "" {
			missing = "nothing"
		}
		there := words.List(b.cleaned(q.Have), 6)
		if there == "" {
			there = "nothing"
		}
		zones := words.Dash
		if q.ZonesTotal > 0 {
			zones = words.Count(int64(q.ZonesYes)) + " of " + words.Count(int64(q.ZonesTotal))
		}
		cells := row(b.w.Foreign(q.Question), sign[q.Answer], zones, b.w.Foreign(q.Needs), there, words.Sentence(missing))
		cells[1].Strong = true
		t.Rows = append(t.Rows, cells)
	}
	if len(t.Rows) == 0 {
		s.Blocks = append(s.Blocks, note("No question was tested against these logs."))
		return s
	}
	s.Blocks = append(s.Blocks, b.table(t))
	return s
}

func (b *builder) cleaned(list []string) []string {
	out := make([]string, 0, len(list))
	for _, x := range list {
		if x = b.w.Foreign(x); x != "" {
			out = append(out, x)
		}
	}
	return out
}
