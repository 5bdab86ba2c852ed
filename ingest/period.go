package ingest

import (
	"compress/gzip"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
	"sashlog/ingest/weather"
)

// leadDays is how long before the period weather is read.
const leadDays = grid.LeadDays

// yearsMost is the longest period read at once.
const yearsMost = 25

// openFrom and openTo stand for "not given": the years 1900 and 2200.
const openFrom, openTo = -2208988800, 7258118400

// period is the audited period, as far as it is known.
type period struct {
	site             *site.Site
	loc              *time.Location
	from, to         site.Date
	keepFrom, keepTo int64
}

func newPeriod(s *site.Site, opt Options) (*period, error) {
	p := &period{site: s, loc: s.Location, from: s.Period.From, to: s.Period.To, keepFrom: openFrom, keepTo: openTo}
	if p.loc == nil {
		p.loc = time.UTC
	}
	if !opt.From.IsZero() {
		p.from = opt.From
	}
	if !opt.To.IsZero() {
		p.to = opt.To
	}
	if !p.from.IsZero() && !p.to.IsZero() && p.to.Before(p.from) {
		return nil, fmt.Errorf("the period ends on %v, before it begins on %v", p.to, p.from)
	}
	if !p.from.IsZero() {
		p.keepFrom = p.lead()
	}
	if !p.to.IsZero() {
		p.keepTo = p.to.Next().Start(p.loc).Unix()
	}
	return p, nil
}

// lead is the instant the grid begins at.
func (p *period) lead() int64 {
	return time.Date(p.from.Year, p.from.Month, p.from.Day-leadDays, 0, 0, 0, 0, p.loc).Unix()
}

// settle takes open ends from the readings: of the zones, else of the plant,
// else of anything.
func (p *period) settle(b *grid.Builder) (grid.Frame, error) {
	if p.from.IsZero() || p.to.IsZero() {
		found := false
		for _, owned := range []func(site.OwnerKind) bool{
			func(o site.OwnerKind) bool { return o == site.OwnerZone },
			func(o site.OwnerKind) bool { return o == site.OwnerPlant },
			func(site.OwnerKind) bool { return true },
		} {
			first, last, strays, ok := b.Span(func(i int) bool { return owned(p.site.Points[i].Owner) })
			if !ok {
				continue
			}
			found = true
			if p.from.IsZero() {
				p.from = site.DateOf(time.Unix(first, 0).In(p.loc))
			}
			if p.to.IsZero() {
				p.to = site.DateOf(time.Unix(last, 0).In(p.loc))
				if p.to.Start(p.loc).Unix() == last && p.from.Before(p.to) {
					// A single reading at midnight ends the day before.
					p.to = site.DateOf(time.Unix(last-1, 0).In(p.loc))
				}
			}
			if strays > 0 {
				b.Issue(strayIssue(strays, p))
			}
			break
		}
		if !found || p.to.Before(p.from) {
			return grid.Frame{}, ErrNoReadings
		}
	}
	if p.to.Year-p.from.Year > yearsMost {
		return grid.Frame{}, fmt.Errorf("the readings span %v to %v, more than %d years; give the period in the site file", p.from, p.to, yearsMost)
	}
	return grid.Frame{FromUTC: p.lead(), PeriodFromUTC: p.from.Start(p.loc).Unix(), ToUTC: p.to.Next().Start(p.loc).Unix(), Loc: p.loc}, nil
}

func strayIssue(n int64, p *period) reading.Issue {
	return reading.Issue{Point: -1, Text: fmt.Sprintf("%d readings lie more than a year from all others and are left out; the period is %v to %v", n, p.from, p.to),
		Hint: "a logger with a dead clock writes such dates; give the period in the site file if they are right"}
}

// typicalMost bounds what is read of a typical year's file.
const typicalMost = 64 << 20

// typical reads the site's typical year, nil when none is given.
func typical(s *site.Site) (*grid.TypicalYear, error) {
	if s.TypicalYear == "" {
		return nil, nil
	}
	f, err := os.Open(filepath.Join(s.Dir, filepath.FromSlash(s.TypicalYear)))
	if err != nil {
		return nil, &UnreadError{Causes: []string{fmt.Sprintf("the typical year: %v", err)}}
	}
	defer f.Close()
	var r io.Reader = f
	if strings.HasSuffix(strings.ToLower(s.TypicalYear), ".gz") {
		z, err := gzip.NewReader(f)
		if err != nil {
			return nil, &UnreadError{Causes: []string{fmt.Sprintf("the typical year %s: %v", s.TypicalYear, err)}}
		}
		r = z
	}
	y, err := weather.ReadEPW(io.LimitReader(r, typicalMost), s.TypicalYear)
	if err != nil {
		return nil, &UnreadError{Causes: []string{"the typical year " + err.Error()}}
	}
	return y, nil
}
