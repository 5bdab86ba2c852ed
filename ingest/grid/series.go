package grid

import (
	"math"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Limits of the hold of a sampled point and the readings its usual interval is
// taken from. Our choice: a value that is not repeated is doubted after three
// intervals, but never within 5 minutes nor beyond 3 hours.
const (
	intervalSample           = 101
	holdIntervals            = 3
	holdLeastS               = 5 * 60
	holdMostS                = 3 * 3600
	holdNumberS              = 3600
	holdStateS               = 25 * 3600
	spikeIntervalMostS       = 3600
	noTime             int64 = math.MinInt64
	// gapQ stands for the value of an instant at which a point fell silent.
	gapQ int64 = math.MinInt64
)

// instant is what one point said at one instant: a value, how often it was
// said, and whether anything else was said too.
type instant struct {
	t, q     int64
	said     int32
	conflict bool
}

// series is the way of one point's readings to its column: same instants are
// joined, the first ones wait until the usual interval is known, single spikes
// are taken out, and what is left holds until the next.
type series struct {
	point           *site.Point
	lastT           int64 // as it came, to see disorder
	low, high       float64
	fix             site.Conversion // corrects a mistaken unit; Factor 0: none
	hist            *Histogram
	ledger          *reading.PointLedger
	counts          [reading.NumReasons]int64
	conflicts       []int64 // the first few instants, for the evidence
	outLow, outHigh float64 // of values out of range
	rows            int64   // of the first pass
	early           int64   // readings that came before an earlier one
	dropped         bool    // disordered: the first pass only counts

	pending instant // t == noTime when empty
	first   []instant
	ready   bool

	shiftS   int64 // end-stamped values belong to the interval before
	holdS    int64
	interval int64
	rainS    int64 // amounts per interval become rates; 0 otherwise

	spike int64
	cand  instant // waits for its successor, t == noTime when empty

	curT, curQ int64 // the value that holds now
	silent     bool  // it held until the point fell silent
	acc        accumulator

	n, sum     int64
	minQ, maxQ int64
	fromT      int64
	gaps       int
	longestS   int64
	resolution int64 // least difference between two values in a row
	run        Run
	runs       []Run
	frozenS    int64
}

// Run is a time over which a point said exactly the same value.
type Run struct {
	FromUTC, ToUTC int64 // first and last reading
	Readings       int64
	Value          float64
	q              int64
}

func (s *series) reset(p *site.Point, r Rule, stepS int64) {
	t, _ := p.Quantity.Trait()
	*s = series{
		point: p, lastT: noTime, low: r.Low, high: r.High, fix: s.fix, hist: s.hist, ledger: s.ledger,
		early: s.early, rows: s.rows,
		pending: instant{t: noTime}, cand: instant{t: noTime}, curT: noTime,
		spike: quantise(r.Spike), frozenS: r.FrozenS,
		acc: accumulator{stepS: stepS, kind: t.Kind},
	}
	if t.Kind == site.Status || t.Kind == site.Angle {
		s.acc.more = new(moreSums)
	}
}

// take is the first stage: one reading as the source gave it.
func (s *series) take(t int64, q int64) {
	if t == s.pending.t {
		// A value at the same instant outweighs the silence.
		if q == gapQ {
			return
		}
		if s.pending.q == gapQ {
			s.pending = instant{t: t, q: q, said: 1}
			return
		}
		s.pending.said++
		if q != s.pending.q {
			s.pending.conflict = true
		}
		return
	}
	if s.pending.t != noTime {
		s.join()
	}
	s.pending = instant{t: t, q: q, said: 1}
}

// join lets the pending instant go on once no other reading can share it.
func (s *series) join() {
	in := s.pending
	if in.conflict {
		// All of them, in whatever order they came.
		s.counts[reading.Conflict] += int64(in.said)
		if len(s.conflicts) < 3 {
			s.conflicts = append(s.conflicts, in.t)
		}
		return
	}
	s.counts[reading.Duplicate] += int64(in.said - 1)
	if s.ready {
		s.accept(in)
		return
	}
	s.first = append(s.first, in)
	if len(s.first) == intervalSample {
		s.decide()
	}
}

// decide settles what depends on the usual interval and lets the first
// readings through.
func (s *series) decide() {
	s.ready = true
	s.interval = usualInterval(s.first)
	s.settle()
	for _, in := range s.first {
		s.accept(in)
	}
	s.first = nil
}

// settle sets the hold limit, the shift of end-stamped values and the interval
// of amounts.
func (s *series) settle() {
	p := s.point
	t, _ := p.Quantity.Trait()
	switch {
	case p.Hold > 0:
		s.holdS = int64(p.Hold.Seconds())
	case p.Logging == site.COV && (t.Kind == site.Switch || t.Kind == site.Status):
		s.holdS = holdStateS
	case p.Logging == site.COV:
		s.holdS = holdNumberS
	default:
		s.holdS = UsualHoldS(s.interval)
	}
	if p.Logging == site.COV {
		s.frozenS = 0 // silence is how such a point says "unchanged"
		return
	}
	if p.Stamp == site.StampEnd {
		s.shiftS = s.interval
	}
	if p.Quantity == site.Rain && site.RainPerInterval(p.Unit) {
		s.rainS = s.interval
	}
}

// UsualHoldS is how long a sampled value holds at most when its point does not
// say, for the usual interval between its readings, both in seconds.
func UsualHoldS(intervalS int64) int64 {
	return min(max(holdIntervals*intervalS, holdLeastS), holdMostS)
}

// IntervalSample is how many of the first readings the usual interval is taken
// from: it is the lower median of the differences between them.
const IntervalSample = intervalSample

// usualInterval is the median difference; of an even number the lower one.
func usualInterval(in []instant) int64 {
	var d []int64
	last := noTime
	for _, i := range in {
		if i.q == gapQ {
			continue
		}
		if last != noTime {
			d = append(d, i.t-last)
		}
		last = i.t
	}
	if len(d) == 0 {
		return 0
	}
	slices.Sort(d)
	return d[(len(d)-1)/2]
}

// accept takes single spikes out, which needs the successor.
func (s *series) accept(in instant) {
	in.t -= s.shiftS
	if in.q == gapQ {
		if s.cand.t != noTime {
			s.emit(s.cand.t, s.cand.q)
			s.cand.t = noTime
		}
		s.silence(in.t)
		return
	}
	if s.rainS > 0 {
		in.q = int64(math.Round(float64(in.q) * 3600 / float64(s.rainS)))
	}
	if s.spike == 0 {
		s.emit(in.t, in.q)
		return
	}
	if s.cand.t != noTime {
		if s.isSpike(in) {
			s.counts[reading.Spike]++
		} else {
			s.emit(s.cand.t, s.cand.q)
		}
	}
	s.cand = in
}

func (s *series) isSpike(next instant) bool {
	up, down := s.cand.q-s.curQ, s.cand.q-next.q
	if abs(up) <= s.spike || abs(down) <= s.spike || (up > 0) != (down > 0) {
		return false
	}
	return s.curT != noTime && abs(next.q-s.curQ) <= s.spike/4 &&
		s.cand.t-s.curT <= min(s.holdS, spikeIntervalMostS) && next.t-s.cand.t <= min(s.holdS, spikeIntervalMostS)
}

// emit is the last stage: the value that held until now ends, q begins.
func (s *series) emit(t, q int64) {
	if s.curT != noTime {
		d := t - s.curT
		if s.silent {
			s.silent = false
			if d > s.holdS {
				s.gaps++
				s.longestS = max(s.longestS, d)
			}
			s.endRun()
		} else if d > s.holdS {
			s.acc.hold(s.curT, s.curT+s.holdS, s.curQ)
			s.gaps++
			s.longestS = max(s.longestS, d)
			s.endRun()
		} else {
			s.acc.hold(s.curT, t, s.curQ)
		}
		if c := q - s.curQ; c != 0 {
			if c = abs(c); s.resolution == 0 || c < s.resolution {
				s.resolution = c
			}
			s.minQ, s.maxQ = min(s.minQ, q), max(s.maxQ, q)
		}
	} else {
		s.fromT, s.minQ, s.maxQ = t, q, q
	}
	s.acc.at(t)
	s.acc.readings++
	s.n++
	s.sum += q
	s.curT, s.curQ = t, q
	if s.frozenS > 0 {
		s.sameRun(t, q)
	}
}

// silence ends the value that holds, at its limit at the latest.
func (s *series) silence(t int64) {
	if s.curT == noTime || s.silent || t < s.curT {
		return
	}
	s.acc.hold(s.curT, min(t, s.curT+s.holdS), s.curQ)
	s.silent = true
}

// sameRun lengthens the run of exactly the same value, or begins another.
func (s *series) sameRun(t, q int64) {
	if s.run.Readings > 0 && s.run.q == q {
		s.run.Readings++
		s.run.ToUTC = t
		return
	}
	s.endRun()
	s.run = Run{FromUTC: t, ToUTC: t, Readings: 1, q: q}
}

func (s *series) endRun() {
	if s.run.Readings > 1 && s.run.ToUTC-s.run.FromUTC >= s.frozenS {
		s.run.Value = float64(s.run.q) / unit
		s.runs = append(s.runs, s.run)
	}
	s.run = Run{}
}

// end lets everything that waits through; the last value holds to its limit.
func (s *series) end() {
	if s.dropped {
		return
	}
	if s.pending.t != noTime {
		s.join()
		s.pending.t = noTime
	}
	if !s.ready {
		s.decide()
	}
	if s.cand.t != noTime {
		s.emit(s.cand.t, s.cand.q)
		s.cand.t = noTime
	}
	if s.curT != noTime && !s.silent {
		s.acc.hold(s.curT, s.curT+s.holdS, s.curQ)
	}
	s.endRun()
	s.acc.flush()
}
