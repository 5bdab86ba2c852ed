package page

import (
	"path"
	"slices"
	"strings"
	"time"

	"sashlog/ingest/reading"
	"sashlog/report/words"
)

const (
	mostPoints = 40
	mostChecks = 60
	mostIssues = 15
)

func (b *builder) quality() section {
	s := section{ID: "data", Title: "How good the data are"}
	l := b.in.Ledger
	if l == nil {
		s.Blocks = append(s.Blocks, note("No ledger of readings was handed over."))
		return s
	}
	var read, accepted int64
	var reasons [reading.NumReasons]int64
	for i := range l.Points {
		read += l.Points[i].RowsRead
		accepted += l.Points[i].Counts[reading.Accepted]
		for r, n := range l.Points[i].Counts {
			reasons[r] += n
		}
	}
	total := words.Count(read) + " readings of " + words.Plural(len(l.Points), "point", "points") + " were read"
	if read > 0 {
		total += "; " + words.Count(accepted) + " (" + words.Share(float64(accepted)/float64(read)) + ") were accepted, " + words.Count(read-accepted) + " rejected, each with a reason"
	}
	s.Blocks = append(s.Blocks, text(total+". An hour without evidence is an unknown hour: never comfortable, never shut, never silently dropped. readings.csv has the account of every point."))
	t := table{ID: "rejected", Caption: "Rejected readings by reason", Small: true, Head: []column{col("Reason"), num("Readings"), num("Share of all")}}
	for r := reading.Accepted + 1; r < reading.NumReasons; r++ {
		if n := reasons[r]; n > 0 {
			t.Rows = append(t.Rows, row(r.String(), words.Count(n), words.Share(float64(n)/float64(read))))
		}
	}
	if len(t.Rows) > 0 {
		s.Blocks = append(s.Blocks, b.table(t))
	}
	s.Blocks = append(s.Blocks, b.checks()...)
	s.Blocks = append(s.Blocks, b.knownCalendar(), b.coverage())
	s.Blocks = append(s.Blocks, b.clockTable()...)
	s.Blocks = append(s.Blocks, b.clocks())
	s.Blocks = append(s.Blocks, b.issues()...)
	s.Blocks = append(s.Blocks, b.doubtParts()...)
	return s
}

// ofFile cleans a message about files; with codes it names no file.
func (b *builder) ofFile(s string) string {
	if b.rule.Coded() {
		for i, f := range b.in.Ledger.Files {
			s = strings.ReplaceAll(s, f.Path, b.rule.File(i, f.Path))
			s = strings.ReplaceAll(s, path.Base(f.Path), b.rule.File(i, f.Path))
		}
	}
	return b.w.Foreign(s)
}

// point names a point, through the privacy rule.
func (b *builder) point(i int) string {
	return b.w.Foreign(reading.Title(b.in.Site, i))
}

func (b *builder) checks() []block {
	l := b.in.Ledger
	if len(l.Checks) == 0 {
		return texts("No check on the readings found anything to remove or to warn about.")
	}
	t := table{ID: "checks", Caption: "What the checks on the readings found, and what to do",
		Head: []column{col("Check"), col("Points"), col("Time"), {Text: "Effect", Words: true}, col("Evidence"), col("What to do")}}
	for _, c := range l.Checks[:min(mostChecks, len(l.Checks))] {
		var names []string
		for _, p := range c.Points {
			names = append(names, b.point(p))
		}
		if len(names) == 0 && c.Zone >= 0 {
			names = []string{b.w.Zone(c.Zone)}
		}
		effect := string(c.Effect)
		if c.Readings > 0 {
			effect += ", " + words.Count(c.Readings) + " readings"
		}
		evidence := words.Sentence(b.ofFile(b.rule.Logs(logNames(l), c.Evidence)))
		if b.rule.Protected(c.Zone) && (c.Kind == reading.CheckHoliday || c.Kind == reading.CheckChatter) {
			evidence = "Not shown: a room for one to three people."
		}
		who := words.List(names, 4)
		if who == "" {
			who = "site"
		}
		t.Rows = append(t.Rows, row(string(c.Kind), who, b.utcSpan(c.FromUTC, c.ToUTC), effect, evidence, words.Sentence(b.w.Foreign(c.DoNext))))
	}
	t.Foot = []string{"Removed readings are counted above and leave unknown time; warned ones stay in use."}
	if n := len(l.Checks) - mostChecks; n > 0 {
		t.Foot = append(t.Foot, words.Count(int64(n))+" more are in results.json.")
	}
	return []block{b.table(t)}
}

func (b *builder) utcSpan(from, to int64) string {
	if from == 0 && to == 0 {
		return "whole record"
	}
	f, t := time.Unix(from, 0).In(b.in.Grid.Loc), time.Unix(to-1, 0).In(b.in.Grid.Loc)
	a, z := f.Format("2 Jan 2006"), t.Format("2 Jan 2006")
	if a == z {
		return a
	}
	return a + " to " + z
}

// coverage lists the points that are worst covered or rejected most.
func (b *builder) coverage() block {
	l := b.in.Ledger
	order := make([]int, len(l.Points))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(x, y int) int {
		a, c := l.Points[x].Coverage, l.Points[y].Coverage
		switch {
		case a < c:
			return -1
		case a > c:
			return 1
		}
		return 0
	})
	t := table{ID: "coverage", Caption: "Points with the poorest coverage",
		Head: []column{col("Point"), num("Coverage"), num("Readings read"), num("Rejected"), num("Gaps"), num("Longest gap"), num("Usual interval"), col("First and last reading")}}
	for _, i := range order[:min(mostPoints, len(order))] {
		p := l.Points[i]
		span, interval := "no reading", words.Dash
		if p.Counts[reading.Accepted] > 0 {
			span = b.utcSpan(p.FirstUTC, p.LastUTC+1)
		}
		if p.IntervalS > 0 {
			interval = words.Duration(float64(p.IntervalS) / 3600)
		}
		name := b.point(i)
		if p.Disordered {
			name += " (out of order, sorted)"
		}
		gap := words.Dash
		if p.LongestGapS > 0 {
			gap = words.Hours(float64(p.LongestGapS) / 3600)
		}
		t.Rows = append(t.Rows, row(name, words.Share(p.Coverage), words.Count(p.RowsRead), words.Count(p.Rejected()), words.Count(int64(p.Gaps)), gap, interval, span))
	}
	t.Foot = []string{"Coverage is the share of the period for which a reading holds. " + words.Dash + " none, or not known."}
	if n := len(order) - mostPoints; n > 0 {
		t.Foot = append(t.Foot, "The "+words.Count(mostPoints)+" poorest of "+words.Count(int64(len(order)))+" points; all are in readings.csv.")
	}
	return b.table(t)
}

func (b *builder) clocks() block {
	l := b.in.Ledger
	if len(l.Clock) == 0 {
		return text("Clocks: no skipped or repeated local hour was met.")
	}
	var list []string
	for i, c := range l.Clock {
		t := words.Clean(b.rule.File(b.fileIndex(c.File, i), c.File)) + ": " + b.ofFile(c.Text)
		list = append(list, strings.TrimSuffix(t, ".")+".")
		if len(list) == mostPoints {
			list = append(list, words.Count(int64(len(l.Clock)-mostPoints))+" more are in results.json.")
			break
		}
	}
	return block{Heading: "Clocks", List: list}
}

func (b *builder) fileIndex(path string, otherwise int) int {
	for i, f := range b.in.Ledger.Files {
		if f.Path == path {
			return i
		}
	}
	return otherwise
}

func (b *builder) issues() []block {
	l := b.in.Ledger
	var list []string
	for _, x := range l.Issues[:min(mostIssues, len(l.Issues))] {
		where := words.Clean(b.rule.File(b.fileIndex(x.Where.File, 0), x.Where.File))
		if x.Where.Line > 0 {
			where += ", line " + words.Count(x.Where.Line)
		}
		if x.Where.Col > 0 {
			where += ", byte " + words.Count(int64(x.Where.Col))
		}
		t := b.ofFile(x.Text)
		if x.Hint != "" {
			t += "; hint: " + b.ofFile(x.Hint)
		}
		if where != "" {
			t = where + ": " + t
		}
		list = append(list, t)
	}
	if n := int64(len(l.Issues)-len(list)) + l.IssuesDropped; n > 0 && len(list) > 0 {
		list = append(list, words.Count(n)+" more.")
	}
	var unmapped []string
	for name, n := range l.Unmapped {
		if b.rule.Coded() {
			name = "a column"
		}
		unmapped = append(unmapped, words.Clean(name)+" ("+words.Plural(int(n), "row", "rows")+")")
	}
	slices.Sort(unmapped)
	var out []block
	if len(list) > 0 {
		out = append(out, block{Heading: "Messages about the files", List: list})
	}
	if len(unmapped) > 0 {
		out = append(out, text("Logged but not mapped in points.csv, so not used: "+words.List(unmapped, 12)+"."))
	}
	return out
}
