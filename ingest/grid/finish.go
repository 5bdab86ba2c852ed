package grid

import (
	"cmp"
	"math"
	"slices"
	"strconv"
	"time"

	"sashlog/ingest/reading"
)

// Frame is the time a grid spans.
type Frame struct {
	// FromUTC is where the grid begins, PeriodFromUTC and ToUTC the audited
	// period, half-open; all are rounded down to whole steps.
	FromUTC, PeriodFromUTC, ToUTC int64
	Loc                           *time.Location
}

// Facts is what the builder learnt about one point that neither the column nor
// the ledger holds.
type Facts struct {
	Histogram *Histogram
	// Runs are the times of exactly the same value, see Rule.FrozenS.
	Runs []Run
	// Resolution is the least difference between two values in a row, 0 when
	// the point never changed.
	Resolution float64
	// ConflictsUTC are the first instants with different values.
	ConflictsUTC []int64
	// OutLow and OutHigh bound the values that were out of range.
	OutLow, OutHigh float64
	// Early counts readings that came after a later one.
	Early int64
}

// Built is what Finish returns.
type Built struct {
	Grid   *Grid
	Ledger *reading.Ledger
	Tally  *Tally
	Facts  []Facts
}

// Sort ends the second pass: what was out of order comes in order now.
func (b *Builder) Sort() error {
	if b.spill == nil {
		return nil
	}
	for i := range b.series {
		b.series[i].dropped = false
	}
	err := b.spill.replay(func(point int, t, q int64) { b.series[point].take(t, q) })
	if cerr := b.Close(); err == nil {
		err = cerr
	}
	b.spill = nil
	return err
}

// Flush lets every value that still holds run to its limit and brings the
// ledger's counts up to date. It comes once, after the last reading and before
// Span and Finish.
func (b *Builder) Flush() {
	for i := range b.series {
		s, l := &b.series[i], &b.ledger.Points[i]
		s.end()
		l.RowsRead += s.rows
		for r, c := range s.counts {
			l.Counts[r] += c
		}
		l.Counts[reading.Accepted] += s.n
	}
}

// farS parts readings into groups when the period is looked for: a year
// without any reading of the points asked for. Our choice.
const farS = 365 * 86400

// Span returns the first and last reading of the points for which of is true,
// in unix seconds to the step. Where readings lie in groups more than a year
// apart, as a logger with a dead clock writes them, the largest group counts
// and the readings of the others are returned as strays.
func (b *Builder) Span(of func(point int) bool) (first, last int64, strays int64, ok bool) {
	total := map[int64]int64{}
	for i := range b.series {
		if !of(i) {
			continue
		}
		for no, blk := range b.series[i].acc.blocks.byNumber {
			if blk.total > 0 {
				total[no] += blk.total
			}
		}
	}
	if len(total) == 0 {
		return 0, 0, 0, false
	}
	nos := make([]int64, 0, len(total))
	for no := range total {
		nos = append(nos, no)
	}
	slices.Sort(nos)
	type group struct {
		from, to int64
		n        int64
	}
	var groups []group
	for _, no := range nos {
		if g := len(groups) - 1; g >= 0 && (no-groups[g].to)*blockSteps*b.stepS <= farS {
			groups[g].to = no
			groups[g].n += total[no]
			continue
		}
		groups = append(groups, group{no, no, total[no]})
	}
	best := slices.MaxFunc(groups, func(x, y group) int { return cmp.Compare(x.n, y.n) })
	for _, g := range groups {
		if g != best {
			strays += g.n
		}
	}
	firstStep, lastStep := int64(math.MaxInt64), int64(math.MinInt64)
	for i := range b.series {
		if !of(i) {
			continue
		}
		blks := b.series[i].acc.blocks.byNumber
		for _, no := range [2]int64{best.from, best.to} {
			if blk := blks[no]; blk != nil {
				for k, n := range blk.readings {
					if n > 0 {
						at := no<<blockShift + int64(k)
						firstStep, lastStep = min(firstStep, at), max(lastStep, at)
					}
				}
			}
		}
	}
	return firstStep * b.stepS, lastStep * b.stepS, strays, true
}

// Finish joins the columns over the frame and completes the ledger. The
// builder is spent afterwards.
func (b *Builder) Finish(f Frame) *Built {
	first, step := floorDiv(f.FromUTC, b.stepS), b.stepS
	n := int(max(floorDiv(f.ToUTC, step)-first, 0))
	g := &Grid{StartUTC: first * step, StepS: step, N: n, Loc: f.Loc, Columns: make([]Column, len(b.series)),
		PeriodFrom: int(floorDiv(f.PeriodFromUTC, step) - first), PeriodTo: n}
	out := &Built{Grid: g, Ledger: b.ledger, Facts: make([]Facts, len(b.series)),
		Tally: &Tally{grid: g, ledger: b.ledger, Readings: make([][]uint16, len(b.series))}}
	for i := range b.series {
		s, l := &b.series[i], &b.ledger.Points[i]
		out.Facts[i] = Facts{Histogram: s.hist, Runs: s.runs, Resolution: float64(s.resolution) / unit, ConflictsUTC: s.conflicts, OutLow: s.outLow, OutHigh: s.outHigh, Early: s.early}
		l.IntervalS, l.HoldS, l.Gaps, l.LongestGapS = s.interval, s.holdS, s.gaps, s.longestS
		l.Min, l.Max, l.Mean = math.NaN(), math.NaN(), math.NaN()
		if s.n == 0 {
			continue
		}
		l.FirstUTC, l.LastUTC = s.fromT, s.curT
		l.Min, l.Max, l.Mean = float64(s.minQ)/unit, float64(s.maxQ)/unit, float64(s.sum)/float64(s.n)/unit
		col, readings, outside := s.acc.blocks.column(first, n)
		l.Counts[reading.Accepted] -= outside
		l.Counts[reading.OutsidePeriod] += outside
		if s.n > outside {
			g.Columns[i], out.Tally.Readings[i] = col, readings
		}
		if outside > 0 {
			out.Tally.touch(i)
		}
	}
	out.Tally.Settle()
	return out
}

func quote(text string) string {
	const most = 80
	if len(text) > most {
		text = text[:most]
	}
	return strconv.Quote(text)
}
