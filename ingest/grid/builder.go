package grid

import (
	"math"
	"sync"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Options say what the builder needs beyond the site.
type Options struct {
	// Rule gives the streaming checks of a point.
	Rule func(*site.Point) Rule
	// FromUTC and ToUTC bound what is kept, unix seconds, half-open; both 0
	// when the period is not known yet.
	FromUTC, ToUTC int64
	// TempDir is where disordered readings are spilled; empty means the
	// system's.
	TempDir string
}

// Builder is a reading.Sink that turns readings into columns of
// time-weighted means. Its memory depends on the steps that hold readings, not
// on the number of readings, and its results on the readings alone, not on the
// order they come in.
//
// Readings of different points may come from different goroutines at once, and
// rejects beside them; readings of one point must not, nor rejects of one.
//
// Use: feed every source; Redo for points whose unit was mistaken; while Again
// names points, feed the sources that hold them once more; then Finish.
type Builder struct {
	site   *site.Site
	opt    Options
	stepS  int64
	series []series
	ledger *reading.Ledger

	mu     sync.Mutex // guards what points share: issues, unmapped rows
	spill  *spill
	second bool
	again  []bool
}

const (
	examplesMax = 3
	issuesMax   = 200
	// Instants beyond the years 1900 to 2200 are faults of a clock or a format.
	instantLeast = -2208988800
	instantMost  = 7258118400
)

// NewBuilder returns a builder for the site's points.
func NewBuilder(s *site.Site, opt Options) *Builder {
	b := &Builder{site: s, opt: opt, stepS: int64(s.StepS), series: make([]series, len(s.Points)),
		ledger: &reading.Ledger{Points: make([]reading.PointLedger, len(s.Points)), Unmapped: map[string]int64{}}}
	for i := range s.Points {
		sr, r := &b.series[i], opt.Rule(&s.Points[i])
		sr.ledger = &b.ledger.Points[i]
		if r.Bins != NoBins {
			sr.hist = &Histogram{Bins: r.Bins, Counts: make([]uint32, r.Bins.len())}
		}
		sr.reset(&s.Points[i], r, b.stepS)
	}
	return b
}

// Ledger is the account so far; Finish completes it.
func (b *Builder) Ledger() *reading.Ledger { return b.ledger }

// Reading implements reading.Sink.
func (b *Builder) Reading(point int, t int64, v float64) {
	s := &b.series[point]
	if b.second {
		if !b.again[point] {
			return
		}
	} else {
		s.rows++
		if s.hist != nil {
			s.hist.Counts[s.hist.Bins.index(v)]++
		}
		if t < s.lastT {
			s.early++
			if !s.dropped {
				s.dropped = true
				s.acc.blocks = blocks{} // built again from the sorted readings
			}
		} else {
			s.lastT = t
		}
		if s.dropped {
			return
		}
	}
	if s.fix.Factor != 0 {
		v = s.fix.Factor*v + s.fix.Offset
	}
	if !(v >= s.low && v <= s.high) && !s.within(v) {
		return
	}
	if t < instantLeast || t > instantMost {
		s.counts[reading.BadTime]++
		return
	}
	if b.opt.ToUTC != 0 && (t < b.opt.FromUTC || t >= b.opt.ToUTC) && !s.atBorder(t, b.opt) {
		s.counts[reading.OutsidePeriod]++
		return
	}
	q := quantise(v)
	if s.dropped {
		b.spill.put(point, t, q)
		return
	}
	s.take(t, q)
}

// gap notes that a point fell silent; the note has its place in the order of
// the point's readings.
func (b *Builder) gap(point int, t int64) {
	s := &b.series[point]
	if t < instantLeast || t > instantMost {
		return
	}
	if b.second {
		if !b.again[point] {
			return
		}
	} else {
		if t < s.lastT {
			if !s.dropped {
				s.dropped = true
				s.acc.blocks = blocks{}
			}
		} else {
			s.lastT = t
		}
		if s.dropped {
			return
		}
	}
	if b.opt.ToUTC != 0 && (t < b.opt.FromUTC || t >= b.opt.ToUTC) {
		return
	}
	if s.dropped {
		b.spill.put(point, t, gapQ)
		return
	}
	s.take(t, gapQ)
}

// within decides the rare cases: a hair outside the limits is rounding.
func (s *series) within(v float64) bool {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		s.counts[reading.NotNumber]++
		return false
	}
	if v > s.low-1e-3 && v < s.high+1e-3 {
		return true
	}
	if s.counts[reading.OutOfRange] == 0 {
		s.outLow, s.outHigh = v, v
	}
	s.outLow, s.outHigh = min(s.outLow, v), max(s.outHigh, v)
	s.counts[reading.OutOfRange]++
	return false
}

// atBorder keeps end-stamped values after the end: they may belong before it.
// Finish counts those that do not.
func (s *series) atBorder(t int64, o Options) bool {
	return s.point.Stamp == site.StampEnd && t >= o.FromUTC && t < o.ToUTC+holdMostS
}

// Reject implements reading.Sink.
func (b *Builder) Reject(point int, r reading.Reason, at reading.Where, text string) {
	if b.second {
		return
	}
	if point < 0 {
		b.mu.Lock()
		b.ledger.Unmapped[text]++
		b.mu.Unlock()
		return
	}
	l := &b.ledger.Points[point]
	l.RowsRead++
	l.Counts[r]++
	if r != reading.Missing && len(l.Examples) < examplesMax {
		l.Examples = append(l.Examples, reading.Issue{Where: at, Point: point, Text: r.String() + ": " + quote(text)})
	}
}

// Issue implements reading.Sink.
func (b *Builder) Issue(i reading.Issue) {
	if b.second {
		return
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	if len(b.ledger.Issues) < issuesMax {
		b.ledger.Issues = append(b.ledger.Issues, i)
		return
	}
	b.ledger.IssuesDropped++
}

// Histogram returns the readings of a point as they came, counted by value;
// nil when its rule asks for none.
func (b *Builder) Histogram(point int) *Histogram { return b.series[point].hist }

// Redo forgets what was built of a point and corrects its readings when they
// come again. Call it after the first pass.
func (b *Builder) Redo(point int, fix site.Conversion) {
	s := &b.series[point]
	dropped := s.dropped
	s.fix = fix
	b.forget(point)
	s.dropped = dropped
}

func (b *Builder) forget(point int) {
	p := &b.site.Points[point]
	b.series[point].reset(p, b.opt.Rule(p), b.stepS)
}

// Again ends the first pass and names the points whose sources must be read
// once more: those out of order and those given to Redo. The sources are then
// fed again, all of them or only those that hold such points; other points and
// rejects are passed over. Close removes what was spilled.
func (b *Builder) Again() (points []int, err error) {
	b.again = make([]bool, len(b.series))
	disorder := false
	for i := range b.series {
		s := &b.series[i]
		if s.dropped {
			b.forget(i)
			s.dropped, disorder = true, true
			s.ledger.Disordered = true
		}
		if s.dropped || s.fix.Factor != 0 {
			b.again[i] = true
			points = append(points, i)
		}
	}
	b.second = true
	if disorder {
		b.spill, err = newSpill(b.opt.TempDir)
	}
	return points, err
}

// Close removes temporary files. It may be called at any time, more than once.
func (b *Builder) Close() error {
	if b.spill == nil {
		return nil
	}
	return b.spill.close()
}

// Early returns how many readings of a point came after a later one.
func (b *Builder) Early(point int) int64 { return b.series[point].early }
