package clock

import (
	"fmt"

	"sashlog/configs/site"
)

// Prover finds the order of day and month from dates that allow only one: a
// number above 12 cannot be a month.
type Prover struct {
	// Needed is true once a date was met whose order is not plain.
	Needed bool
	// dashed is true once such a date had a mark other than points.
	dashed bool
	// dayFirst and monthFirst hold the first proof of each, 0 when none.
	dayFirst, monthFirst         int64 // the number that stands where a month would
	dayFirstLine, monthFirstLine int64

	// Dates with two-digit years could also begin with the year: then the
	// last number runs while the first stays.
	short                  bool
	minA, maxA, minC, maxC int64
}

// Add looks at one timestamp (or the date column's text).
func (p *Prover) Add(b []byte, line int64) {
	d, _, ok := cutDate(skipWeekday(trim(b)))
	if !ok || d.na == 4 || d.sep == 0 || d.sep == 'm' || d.nc == 1 {
		return
	}
	p.Needed = true
	p.dashed = p.dashed || d.sep != '.'
	if d.nc == 2 {
		if !p.short {
			p.short, p.minA, p.maxA, p.minC, p.maxC = true, d.a, d.a, d.c, d.c
		}
		p.minA, p.maxA = min(p.minA, d.a), max(p.maxA, d.a)
		p.minC, p.maxC = min(p.minC, d.c), max(p.maxC, d.c)
	}
	if d.a > 12 && d.a <= 31 && p.dayFirstLine == 0 {
		p.dayFirst, p.dayFirstLine = d.a, line
	}
	if d.b > 12 && d.b <= 31 && d.a <= 12 && p.monthFirstLine == 0 {
		p.monthFirst, p.monthFirstLine = d.b, line
	}
}

// Proven reports whether the dates met so far settle the order; proof says
// how, in words. Contradicting dates prove nothing.
func (p *Prover) Proven() (order site.DateOrder, proof string, ok bool) {
	switch {
	case p.dayFirstLine != 0 && p.monthFirstLine != 0:
		return "", "", false
	case p.dayFirstLine != 0 && p.short && p.maxA-p.minA < 2:
		if p.maxC-p.minC < 2 {
			return "", "", false
		}
		return site.YMD, fmt.Sprintf("year first (the first number stays at %d while the last runs from %d to %d)", p.maxA, p.minC, p.maxC), true
	case p.dayFirstLine != 0 && p.short && p.maxC-p.minC > 1:
		return "", "", false
	case p.dayFirstLine != 0:
		return site.DMY, fmt.Sprintf("day before month (a %d stands where a month would, line %d)", p.dayFirst, p.dayFirstLine), true
	case p.monthFirstLine != 0:
		return site.MDY, fmt.Sprintf("month before day (a %d stands where a day must, line %d)", p.monthFirst, p.monthFirstLine), true
	}
	return "", "", false
}

// Contradiction says, in words, that dates of both orders were met; empty when
// they were not.
func (p *Prover) Contradiction() string {
	if p.dayFirstLine == 0 || p.monthFirstLine == 0 {
		return ""
	}
	return fmt.Sprintf("dates of both orders: a %d comes first in line %d, a %d second in line %d",
		p.dayFirst, p.dayFirstLine, p.monthFirst, p.monthFirstLine)
}

// OnlyDotted reports whether every date that needs an order is written with
// points (30.03.2025), which are day first wherever they are used.
func (p *Prover) OnlyDotted() bool { return p.Needed && !p.dashed }
