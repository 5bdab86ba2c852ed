// Package clock turns the times a log writes into instants: it reads the
// written forms of date and time, applies the log's clock (the site's zone,
// universal time, standard time all year, a fixed offset or another zone) and
// settles the local hours that daylight saving repeats or skips.
package clock

import (
	"fmt"
	"math"
	"sort"
	"time"

	"sashlog/configs/site"
)

// Verdict says whether a wall-clock time names one instant.
type Verdict uint8

// Verdicts.
const (
	Sure     Verdict = iota // exactly one instant
	Skipped                 // the clock never showed this time
	Repeated                // the clock showed this time twice
)

// Window is a span of wall-clock time that was shown twice. Both bounds are
// seconds on the log's written clock, half-open; the second showing came
// DeltaS seconds after the first.
type Window struct{ LoS, HiS, DeltaS int64 }

// Resolver turns wall-clock seconds of one log into unix seconds. Wall-clock
// seconds count from 1970-01-01 00:00 as written, as if the written clock ran
// without interruption. It keeps the segment used last, so rows in order cost
// two comparisons. It is not safe for concurrent use.
type Resolver struct {
	kind     site.ClockKind
	loc      *time.Location // for local, zone and standard
	overrule bool
	shifts   []shiftSpan

	lo, hi, add int64 // written wall in [lo, hi) means unix = wall + add
}

// shiftSpan is a constant clock correction over a span of written time.
type shiftSpan struct{ lo, hi, addS int64 }

const (
	farPast   = math.MinInt64 / 4
	farFuture = math.MaxInt64 / 4
)

// NewResolver returns a resolver for a log's clock at a site in loc.
func NewResolver(c site.Clock, loc *time.Location) (*Resolver, error) {
	r := &Resolver{kind: c.Kind, loc: loc, overrule: c.OverruleOffset}
	switch c.Kind {
	case "", site.ClockLocal:
		r.kind = site.ClockLocal
	case site.ClockStandard, site.ClockUTC, site.ClockOffset:
	case site.ClockZone:
		if c.Zone == nil {
			return nil, fmt.Errorf("the log's clock names no zone; hint: set the zone, for instance Europe/Zurich")
		}
		r.loc = c.Zone
	default:
		return nil, fmt.Errorf("unknown clock %q: local, utc, standard, offset or zone", string(c.Kind))
	}
	if r.loc == nil {
		r.loc = time.UTC
	}
	switch r.kind {
	case site.ClockUTC:
		r.loc = time.UTC
	case site.ClockOffset:
		r.loc = time.FixedZone("", c.OffsetS)
	}
	r.shifts = shiftSpans(c)
	return r, nil
}

// shiftSpans cuts written time where corrections begin and end; corrections
// that overlap add up. One that grows is cut into days: no clock in use drifts
// so fast that the step at midnight, seconds, would matter.
func shiftSpans(c site.Clock) []shiftSpan {
	c.Shifts = daily(c.Shifts)
	cuts := []int64{farPast, farFuture}
	for _, s := range c.Shifts {
		cuts = append(cuts, wallOf(s.From), wallOf(s.To.Next()))
	}
	sort.Slice(cuts, func(i, j int) bool { return cuts[i] < cuts[j] })
	var out []shiftSpan
	for i := 0; i+1 < len(cuts); i++ {
		if cuts[i] == cuts[i+1] {
			continue
		}
		sp := shiftSpan{cuts[i], cuts[i+1], int64(c.ShiftS)}
		for _, s := range c.Shifts {
			if wallOf(s.From) <= sp.lo && sp.hi <= wallOf(s.To.Next()) {
				sp.addS += int64(s.ShiftS)
			}
		}
		out = append(out, sp)
	}
	return out
}

// daily replaces corrections that grow by one for each of their days.
func daily(shifts []site.ClockShift) []site.ClockShift {
	var out []site.ClockShift
	for _, s := range shifts {
		days := (wallOf(s.To) - wallOf(s.From)) / 86400
		if !s.Grows || days < 1 {
			out = append(out, s)
			continue
		}
		for d, k := s.From, int64(0); k <= days; d, k = d.Next(), k+1 {
			share := float64(k) / float64(days)
			at := math.Round(float64(s.ShiftS) + share*float64(s.EndShiftS-s.ShiftS))
			out = append(out, site.ClockShift{From: d, To: d, ShiftS: int(at)})
		}
	}
	return out
}

func wallOf(d site.Date) int64 {
	return daysFromCivil(int64(d.Year), int64(d.Month), int64(d.Day)) * 86400
}

// Overrules reports whether offsets written in the timestamps are ignored.
func (r *Resolver) Overrules() bool { return r.overrule }

// Resolve returns the instant a written time means. For Repeated it is the
// first showing, and window says how far the second lies behind; for Skipped
// the instant is meaningless.
func (r *Resolver) Resolve(wallS int64) (unixS int64, v Verdict) {
	if wallS >= r.lo && wallS < r.hi {
		return wallS + r.add, Sure
	}
	return r.resolve(wallS)
}

func (r *Resolver) resolve(wallS int64) (int64, Verdict) {
	sp := r.shiftAt(wallS)
	t := wallS + sp.addS
	if r.kind == site.ClockStandard {
		y := time.Unix(t, 0).UTC().Year()
		off := standardOffset(r.loc, y)
		lo, hi := daysFromCivil(int64(y), 1, 1)*86400, daysFromCivil(int64(y)+1, 1, 1)*86400
		r.keep(sp, lo, hi, off)
		return t - off, Sure
	}
	zs := zonesAround(r.loc, t)
	var found []int
	for i, z := range zs {
		if u := t - z.off; u >= z.from && u < z.to {
			found = append(found, i)
		}
	}
	switch len(found) {
	case 0:
		return 0, Skipped
	case 1:
		z := zs[found[0]]
		lo, hi := z.from+z.off, z.to+z.off
		if i := found[0]; i > 0 {
			lo = max(lo, z.from+zs[i-1].off)
		} else {
			lo = max(lo, t-3600)
		}
		if i := found[0]; i+1 < len(zs) {
			hi = min(hi, z.to+zs[i+1].off)
		} else {
			hi = min(hi, t+3600)
		}
		r.keep(sp, lo, hi, z.off)
		return t - z.off, Sure
	}
	return t - zs[found[0]].off, Repeated
}

// keep remembers that true wall time in [lo, hi) lies off seconds ahead of
// universal time while the correction sp is in force.
func (r *Resolver) keep(sp shiftSpan, lo, hi, off int64) {
	r.lo, r.hi = max(sp.lo, lo-sp.addS), min(sp.hi, hi-sp.addS)
	r.add = sp.addS - off
}

// Window returns the repeated window that holds the written time.
func (r *Resolver) Window(wallS int64) Window {
	sp := r.shiftAt(wallS)
	t := wallS + sp.addS
	zs := zonesAround(r.loc, t)
	for i := 0; i+1 < len(zs); i++ {
		a, b := zs[i], zs[i+1]
		if lo, hi := b.from+b.off, a.to+a.off; lo <= t && t < hi {
			return Window{lo - sp.addS, hi - sp.addS, a.off - b.off}
		}
	}
	return Window{wallS, wallS + 1, 0}
}

// Written returns the instant of a time that carries its own offset, which is
// ignored when the log's clock overrules it.
func (r *Resolver) Written(wallS, offsetS int64) (unixS int64, v Verdict) {
	if r.overrule {
		return r.Resolve(wallS)
	}
	return wallS - offsetS + r.shiftAt(wallS).addS, Sure
}

func (r *Resolver) shiftAt(wallS int64) shiftSpan {
	if len(r.shifts) == 1 {
		return r.shifts[0]
	}
	i := sort.Search(len(r.shifts), func(i int) bool { return wallS < r.shifts[i].hi })
	return r.shifts[min(i, len(r.shifts)-1)]
}

// zone is a span of instants with one offset from universal time.
type zone struct{ from, to, off int64 }

// zonesAround lists the zones in force within 30 hours of a wall time, in
// order; more than any offset from universal time on either side.
func zonesAround(loc *time.Location, wallS int64) []zone {
	var zs []zone
	at := wallS - 30*3600
	for at < wallS+30*3600 {
		t := time.Unix(at, 0).In(loc)
		_, off := t.Zone()
		start, end := t.ZoneBounds()
		z := zone{farPast, farFuture, int64(off)}
		if !start.IsZero() {
			z.from = start.Unix()
		}
		if !end.IsZero() {
			z.to = end.Unix()
		}
		if n := len(zs); n > 0 && zs[n-1].off == z.off {
			zs[n-1].to = z.to // only the name changed
		} else {
			zs = append(zs, z)
		}
		at = z.to
	}
	return zs
}

// standardOffset is the offset of a zone's standard time in a year: the least
// in force, since daylight saving moves clocks forward.
func standardOffset(loc *time.Location, year int) int64 {
	t := time.Date(year, 1, 1, 0, 0, 0, 0, loc)
	end := time.Date(year+1, 1, 1, 0, 0, 0, 0, loc)
	least := int64(math.MaxInt64)
	for t.Before(end) {
		_, off := t.Zone()
		least = min(least, int64(off))
		_, next := t.ZoneBounds()
		if next.IsZero() {
			break
		}
		t = next
	}
	return least
}

// daysFromCivil counts days from 1970-01-01 in the proleptic Gregorian
// calendar.
func daysFromCivil(y, m, d int64) int64 {
	if m <= 2 {
		y--
	}
	era := y / 400
	if y < 0 {
		era = (y - 399) / 400
	}
	yoe := y - era*400
	mp := (m + 9) % 12
	doy := (153*mp+2)/5 + d - 1
	doe := yoe*365 + yoe/4 - yoe/100 + doy
	return era*146097 + doe - 719468
}
