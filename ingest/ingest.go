// Package ingest turns the logs of a site into a grid and a ledger. Read does
// it in these steps, and nothing else:
//
//  1. Open the sources (package sources).
//  2. First pass: every reading streams into the builder of the grid, which
//     counts, averages and notes what came out of order (packages grid,
//     quality.Rule).
//  3. Units: those that were mistaken (quality.Units).
//  4. Second pass, only of sources that hold points out of order or with a
//     corrected unit.
//  5. The period, and the grid over it with 30 days before it.
//  6. Checks that may void readings (quality.Run).
//  7. The typical year (package weather).
//
// The results depend on the readings alone, not on the order of rows or files.
package ingest

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/quality"
	"sashlog/ingest/reading"
	"sashlog/ingest/sources"
)

// Options say how to read.
type Options struct {
	// Progress is told about the bytes read, roughly; nil is fine. Calls never
	// overlap.
	Progress func(done, total int64)
	// TempDir is where readings that are out of order are sorted; empty means
	// the system's folder.
	TempDir string
	// From and To replace the site's period where given.
	From, To site.Date
}

// UnreadError says which sources could not be read; the ledger returned with
// it counts what the others held.
type UnreadError struct{ Causes []string }

func (e *UnreadError) Error() string {
	return "cannot read " + strings.Join(e.Causes, "; cannot read ")
}

// ErrNoReadings is returned when the logs hold no reading that can be used.
var ErrNoReadings = errors.New("no usable readings")

// Read reads every log of the site. A source that cannot be read is an
// UnreadError, a log that needs a setting a configs.Problems; both come after
// everything else was counted, with the ledger and without a grid.
func Read(ctx context.Context, s *site.Site, opt Options) (*grid.Grid, *reading.Ledger, error) {
	// 1. Open the sources, for the period asked for.
	p, err := newPeriod(s, opt)
	if err != nil {
		return nil, nil, err
	}
	s = sources.Own(s)
	s.Period = site.Period{From: p.from, To: p.to}
	set, err := sources.Open(ctx, s)
	if err != nil {
		return nil, nil, err
	}
	b := grid.NewBuilder(s, grid.Options{Rule: quality.Rule, FromUTC: p.keepFrom, ToUTC: p.keepTo, TempDir: opt.TempDir})
	defer b.Close()
	r := &reader{site: s, builder: b, set: set}
	r.plan(ctx, opt.Progress)

	// 2. First pass.
	r.pass(ctx, nil)
	r.account()
	if err := errors.Join(ctx.Err(), r.failure()); err != nil {
		b.Flush()
		return nil, b.Ledger(), err
	}

	// 3. Units.
	fixes, checks := quality.Units(s, b.Histogram)
	for _, f := range fixes {
		b.Redo(f.Point, f.Conversion)
		checks = append(checks, f.Check)
	}

	// 4. Second pass.
	again, err := b.Again()
	if err != nil {
		return nil, b.Ledger(), err
	}
	if len(again) > 0 {
		r.pass(ctx, again)
		if err := errors.Join(ctx.Err(), r.failure()); err != nil {
			return nil, b.Ledger(), err
		}
	}
	if err := b.Sort(); err != nil {
		return nil, b.Ledger(), err
	}
	b.Flush()
	r.unmet()

	// 5. The period and the grid.
	f, err := p.settle(b)
	if err != nil {
		return nil, b.Ledger(), fmt.Errorf("%w: %s", err, why(b.Ledger(), set))
	}
	built := b.Finish(f)
	if accepted(built.Ledger) == 0 {
		return nil, built.Ledger, fmt.Errorf("%w between %s and %s: %s", ErrNoReadings, p.from, p.to, why(built.Ledger, set))
	}

	// 6. Checks.
	quality.Run(s, built, checks)

	// 7. The typical year.
	if built.Grid.Typical, err = typical(s); err != nil {
		return nil, built.Ledger, err
	}
	return built.Grid, built.Ledger, ctx.Err()
}

func accepted(l *reading.Ledger) (n int64) {
	for i := range l.Points {
		n += l.Points[i].Counts[reading.Accepted]
	}
	return n
}

// why says what became of the rows when none can be used.
func why(l *reading.Ledger, set *sources.Set) string {
	var counts [reading.NumReasons]int64
	var rows int64
	for i := range l.Points {
		rows += l.Points[i].RowsRead
		for r, n := range l.Points[i].Counts {
			counts[r] += n
		}
	}
	var parts []string
	for r, n := range counts {
		if n > 0 && reading.Reason(r) != reading.Accepted {
			parts = append(parts, fmt.Sprintf("%d %s", n, reading.Reason(r)))
		}
	}
	if rows > 0 {
		if len(parts) == 0 {
			return fmt.Sprintf("%d cells of mapped points were read, none in time", rows)
		}
		return fmt.Sprintf("%d cells of mapped points were read: %s", rows, strings.Join(parts, ", "))
	}
	for _, p := range set.Problems {
		if p.Kind <= sources.NoColumn {
			return "no row belongs to a mapped point; " + p.Text + hinted(p.Hint)
		}
	}
	return "no row belongs to a mapped point; compare points.csv with the logs"
}

func hinted(h string) string {
	if h == "" {
		return ""
	}
	return "; hint: " + h
}

// failures sorts what could not be read into what the site file must settle
// and what failed.
func failures(s *site.Site, set *sources.Set, read []error, names []string) error {
	var unsettled configs.Problems
	var unread UnreadError
	for _, p := range set.Problems {
		switch {
		case p.Kind == sources.Undecided:
			line := 0
			if p.Log >= 0 {
				line = s.Logs[p.Log].Line
			}
			unsettled = append(unsettled, configs.Problem{File: s.File, Line: line, Text: p.Where.File + ": " + p.Text, Hint: p.Hint})
		case p.Kind.Fatal():
			unread.Causes = append(unread.Causes, p.Where.File+": "+p.Text+hinted(p.Hint))
		}
	}
	for i, err := range read {
		if err != nil {
			text := err.Error()
			if !strings.Contains(text, names[i]) {
				text = names[i] + ": " + text
			}
			unread.Causes = append(unread.Causes, text)
		}
	}
	// What cannot be read outweighs what is not settled.
	if len(unread.Causes) > 0 {
		for _, p := range unsettled {
			unread.Causes = append(unread.Causes, p.Error())
		}
		return &unread
	}
	if len(unsettled) > 0 {
		return unsettled
	}
	return nil
}
