// Package sources makes the list of sources a site file asks for: it finds the
// files of every log, looks at each, matches its columns to the points table
// and says what does not match.
package sources

import (
	"context"
	"errors"
	"fmt"
	"path"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/columnar"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/sheet"
	"sashlog/ingest/station"
	"sashlog/ingest/tabular"
)

// Kind groups problems by what they mean for a run.
type Kind uint8

// Kinds of problem, gravest first.
const (
	// Unreadable: an input that cannot be opened or is no log.
	Unreadable Kind = iota
	// NoFile: a log's path matches nothing.
	NoFile
	// Undecided: the log needs a setting (date_order, time_column, ...).
	Undecided
	// NoSource: a point's source names no log and no file.
	NoSource
	// NoColumn: a point's column is in none of the files of its source.
	NoColumn
	// NoPoint: a file from which nothing is mapped; information.
	NoPoint
	// UnmappedColumns: columns that no point names; information.
	UnmappedColumns
	// PassedOver: a file of a folder or archive that is no log; information.
	PassedOver
)

// Fatal reports whether readings of the log cannot be had at all.
func (k Kind) Fatal() bool { return k <= Undecided }

// Problem is something about a site's logs that the user should know before
// they are read.
type Problem struct {
	Kind  Kind
	Where reading.Where // of the log file, or of points.csv or site file line
	Point int           // index into Site.Points, -1 when none
	Log   int           // index into Site.Logs, -1 when none
	Text  string
	Hint  string
	Count int   // columns or files concerned
	Err   error // the cause, when there is one
}

// Source is what every reader of files offers beyond reading.Source; the facts
// are valid after Read.
type Source interface {
	reading.Source
	Describe() reading.FileLedger
	ClockNotes() []reading.ClockNote
}

// Set is the sources of a site and what was found out on the way.
type Set struct {
	Sources  []reading.Source
	Problems []Problem
}

// looked is a source while it is being set up.
type looked interface {
	Source
	Frame() *tabular.Frame
	SetMatches([]tabular.Match)
	Prover() *clock.Prover
	Settle(site.DateOrder, string)
	ScanOrder(context.Context) error
}

// Open finds and looks at every file and database of the site's logs. It may
// change how points of databases log, so it wants a site of its own (Own). Only an ended context
// is an error; everything else is among the problems, so that all of them can
// be shown at once.
func Open(ctx context.Context, s *site.Site) (*Set, error) {
	o := opener{site: s, set: &Set{}, sourced: make([]bool, len(s.Points)), found: make([]bool, len(s.Points)), near: make([][]string, len(s.Points))}
	for i := range s.Logs {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		if err := o.log(ctx, i); err != nil {
			return nil, err
		}
	}
	o.unmet()
	sort.SliceStable(o.set.Problems, func(i, j int) bool { return o.set.Problems[i].Kind < o.set.Problems[j].Kind })
	return o.set, nil
}

type opener struct {
	site           *site.Site
	set            *Set
	sourced, found []bool
	names          []string   // of logs and files, for near misses
	near           [][]string // names of columns seen where a point was looked for
}

func (o *opener) problem(p Problem) { o.set.Problems = append(o.set.Problems, p) }

// log sets up the sources of one log.
func (o *opener) log(ctx context.Context, li int) error {
	log := &o.site.Logs[li]
	o.names = append(o.names, log.Name)
	if log.Influx != nil {
		return o.database(ctx, li)
	}
	_, err := clock.NewParser(log.DateOrder, log.TimeFormat, false)
	if err == nil {
		_, err = clock.NewResolver(log.Clock, o.site.Location)
	}
	if err != nil {
		o.problem(Problem{Kind: Undecided, Where: reading.Where{File: o.site.File, Line: int64(log.Line)}, Point: -1, Log: li, Text: err.Error(), Count: 1, Err: err})
		o.told(log)
		return nil
	}
	files, bad := logfile.Find(o.site.Dir, log.Path)
	for _, b := range bad {
		k, hint := Unreadable, ""
		if errors.Is(b.Err, logfile.ErrNoFile) {
			k, hint = NoFile, "the path is relative to the site file; it may hold * and ?, and may name a folder or an archive"
		}
		o.problem(Problem{Kind: k, Where: reading.Where{File: b.Name}, Point: -1, Log: li, Text: b.Err.Error(), Hint: hint, Count: 1, Err: b})
	}
	if len(files) == 0 {
		o.told(log)
	}
	var opened []looked
	unmapped := map[string]bool{}
	idle := 0
	for _, f := range files {
		if err := ctx.Err(); err != nil {
			return err
		}
		o.names = append(o.names, f.Base)
		points := o.pointsOf(log, f)
		if len(points) == 0 {
			idle++
			continue
		}
		if f.Kind == logfile.Foreign && len(files) > 1 {
			o.problem(Problem{Kind: PassedOver, Where: reading.Where{File: f.Name}, Point: -1, Log: li, Count: 1, Text: "passed over: " + f.What})
			continue
		}
		l, err := o.open(log, f, points)
		if errors.As(err, new(tabular.NoLog)) && len(files) > 1 && !o.named(f, points) {
			o.problem(Problem{Kind: PassedOver, Where: reading.Where{File: f.Name}, Point: -1, Log: li, Count: 1,
				Text: "passed over: it holds no times and none of the mapped columns"})
			continue
		}
		if err != nil {
			o.refused(li, f, err)
			continue
		}
		ms := o.match(log, f, l, points, unmapped)
		if len(ms) == 0 {
			idle++
			continue
		}
		l.SetMatches(ms)
		opened = append(opened, l)
	}
	if idle > 0 {
		o.problem(Problem{Kind: NoPoint, Where: reading.Where{File: log.Path}, Point: -1, Log: li, Count: idle,
			Text: fmt.Sprintf("%d of %s of log %q without a mapped point", idle, tabular.Count(int64(len(files)), "file", "files"), log.Name)})
	}
	if len(unmapped) > 0 {
		names := sorted(unmapped)
		o.problem(Problem{Kind: UnmappedColumns, Where: reading.Where{File: log.Path}, Point: -1, Log: li, Count: len(names),
			Text: fmt.Sprintf("%s of log %q not mapped: %s", tabular.Count(int64(len(names)), "column", "columns"), log.Name, few(names))})
	}
	return o.order(ctx, li, opened)
}

// named reports whether one of the points names the file itself, and not the
// log, folder or archive it lies in.
func (o *opener) named(f *logfile.File, points []int) bool {
	for _, i := range points {
		if p := &o.site.Points[i]; means(p.Source, f.Base) || means(p.Source, f.Unpacked()) || sameName(p.Column, f.Stem()) {
			return true
		}
	}
	return false
}

// told marks the points of a log whose failure is told already.
func (o *opener) told(log *site.Log) {
	for i := range o.site.Points {
		o.sourced[i] = o.sourced[i] || means(o.site.Points[i].Source, log.Name)
	}
}

func (o *opener) refused(li int, f *logfile.File, err error) {
	k := Unreadable
	var fe logfile.Failure
	if errors.As(err, &fe) {
		err = fe.Err
	}
	if errors.As(err, new(tabular.Unsettled)) {
		k = Undecided
	}
	o.problem(Problem{Kind: k, Where: reading.Where{File: f.Name}, Point: -1, Log: li, Text: err.Error(), Count: 1, Err: logfile.Failure{Name: f.Name, Err: err}})
}

// open looks at one file with the reader its kind asks for.
func (o *opener) open(log *site.Log, f *logfile.File, points []int) (looked, error) {
	var wanted []string
	for _, p := range points {
		wanted = append(wanted, o.site.Points[p].Column)
	}
	switch f.Kind {
	case logfile.Empty:
		return nil, errors.New("the file is empty")
	case logfile.Foreign:
		return nil, fmt.Errorf("not a log: %s", f.What)
	case logfile.Parquet:
		return columnar.Open(o.site, log, f, wanted)
	case logfile.Workbook:
		return sheet.Open(o.site, log, f, wanted)
	}
	if station.Recognise(f) {
		return station.Open(o.site, log, f, wanted)
	}
	return tabular.Open(o.site, log, f, wanted)
}

// pointsOf lists the points whose source means the log or the file.
func (o *opener) pointsOf(log *site.Log, f *logfile.File) []int {
	var ps []int
	for i := range o.site.Points {
		p := &o.site.Points[i]
		if !means(p.Source, log.Name) && !means(p.Source, f.Base) && (f.Archive() == "" || !means(p.Source, f.Archive())) && !means(p.Source, f.Unpacked()) {
			continue
		}
		o.sourced[i] = true
		if log.Layout == site.PerPoint && !sameName(p.Column, f.Stem()) {
			o.near[i] = append(o.near[i], f.Stem())
			continue
		}
		ps = append(ps, i)
	}
	return ps
}

// means reports whether a point's source names or matches a name.
func means(source, name string) bool {
	if source == name {
		return name != ""
	}
	if strings.ContainsAny(source, "*?") {
		ok, err := path.Match(source, name)
		return ok && err == nil
	}
	return false
}

func sameName(a, b string) bool { return a == b || cell.Fold(a) == cell.Fold(b) }

// match finds the column of every point in a file.
func (o *opener) match(log *site.Log, f *logfile.File, l looked, points []int, unmapped map[string]bool) []tabular.Match {
	fr := l.Frame()
	var ms []tabular.Match
	used := map[int]bool{fr.Time: true, fr.Date: true, fr.Clock: true}
	for _, i := range points {
		switch fr.Layout {
		case site.Long:
			ms = append(ms, tabular.Match{Point: i, Column: -1})
			o.found[i] = true // known only after reading
		case site.PerPoint:
			ms = append(ms, tabular.Match{Point: i, Column: fr.Values[0]})
			used[fr.Values[0]] = true
			o.found[i] = true
		default:
			c := fr.Column(o.site.Points[i].Column)
			if c < 0 {
				if len(o.near[i]) < 2000 {
					o.near[i] = append(o.near[i], fr.Names...)
				}
				continue
			}
			used[c] = true
			ms = append(ms, tabular.Match{Point: i, Column: c})
			o.found[i] = true
		}
	}
	if fr.Layout == site.Wide {
		for c, n := range fr.Names {
			if !used[c] && n != "" {
				unmapped[n] = true
			}
		}
	}
	return ms
}

// order settles the order of day and month for the files of a log: as given,
// or proven by any of them, since they were written the same way.
func (o *opener) order(ctx context.Context, li int, ls []looked) error {
	log := &o.site.Logs[li]
	add := func(l looked) { o.set.Sources = append(o.set.Sources, l) }
	needed := false
	var order site.DateOrder
	var proof, from string
	ask := func(l looked) bool {
		needed = needed || l.Prover().Needed
		if od, p, ok := l.Prover().Proven(); ok && order == "" {
			order, proof, from = od, p, l.Name()
		}
		return order != ""
	}
	if log.DateOrder == site.ProveOrder && log.TimeFormat == "" {
		for _, l := range ls {
			ask(l)
		}
		for i := 0; i < len(ls) && needed && order == ""; i++ {
			if err := ls[i].ScanOrder(ctx); err != nil {
				if ctx.Err() != nil {
					return ctx.Err()
				}
				continue // the error comes again, and is reported, when the file is read
			}
			ask(ls[i])
		}
	}
	for _, l := range ls {
		p := l.Prover()
		switch {
		case log.DateOrder != site.ProveOrder || log.TimeFormat != "":
			l.Settle(log.DateOrder, "")
		case !p.Needed:
			l.Settle("", "")
		case p.Contradiction() != "":
			o.problem(Problem{Kind: Undecided, Where: reading.Where{File: l.Name()}, Point: -1, Log: li, Count: 1,
				Text: p.Contradiction(), Hint: "set date_order of the log to dmy or mdy"})
			continue
		case order != "":
			said := proof
			if from != l.Name() {
				said = proof + " of " + from
			}
			l.Settle(order, said)
		case p.OnlyDotted():
			l.Settle(site.DMY, "dates with points are day first (common practice)")
		default:
			o.problem(Problem{Kind: Undecided, Where: reading.Where{File: l.Name()}, Point: -1, Log: li, Count: 1,
				Text: "the order of day and month cannot be told: no date has a number above 12 where only a day can stand",
				Hint: "set date_order of the log to dmy or mdy"})
			continue
		}
		add(l)
	}
	return nil
}

// unmet reports points without a source or a column.
func (o *opener) unmet() {
	for i := range o.site.Points {
		p := &o.site.Points[i]
		at := reading.Where{File: "points.csv", Line: int64(p.Line)}
		switch {
		case o.found[i]:
		case !o.sourced[i]:
			hint := "sources are names of logs or of their files: " + few(o.names)
			if n := tabular.Nearest(p.Source, o.names); n != "" {
				hint = fmt.Sprintf("did you mean %q", n)
			}
			o.problem(Problem{Kind: NoSource, Where: at, Point: i, Log: -1, Count: 1, Hint: hint,
				Text: fmt.Sprintf("source %q is neither a log nor a file of one", p.Source)})
		case len(o.near[i]) > 0:
			hint := "its columns are: " + few(o.near[i])
			if n := tabular.Nearest(p.Column, o.near[i]); n != "" {
				hint = fmt.Sprintf("did you mean %q", n)
			}
			o.problem(Problem{Kind: NoColumn, Where: at, Point: i, Log: -1, Count: 1, Hint: hint,
				Text: fmt.Sprintf("column %q is not in %q", p.Column, p.Source)})
		}
	}
}

func sorted(m map[string]bool) []string {
	var out []string
	for k := range m {
		out = append(out, k)
	}
	sort.Strings(out)
	return out
}

func few(names []string) string {
	var b strings.Builder
	for i, n := range names {
		if i == 8 {
			fmt.Fprintf(&b, " and %d more", len(names)-i)
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%q", n)
	}
	return b.String()
}
