package grid

import (
	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Readings takes several readings of one point, as Reading takes each.
func (b *Builder) Readings(point int, list []reading.At) {
	s := &b.series[point]
	for len(list) > 0 {
		if !b.second && s.common() {
			list = list[s.stretch(list, b.opt):]
			if len(list) == 0 {
				return
			}
		}
		if v := list[0].Value; v != v {
			b.gap(point, list[0].UnixS)
			list = list[1:]
			continue
		}
		b.Reading(point, list[0].UnixS, list[0].Value)
		list = list[1:]
	}
}

// common reports whether the stages of the series are in the state that
// stretch can go on from.
func (s *series) common() bool {
	return s.ready && !s.dropped && !s.silent && s.pending.q != gapQ && s.fix.Factor == 0 && s.rainS == 0 && s.acc.open && s.acc.kind <= site.Switch &&
		s.curT != noTime && (s.spike == 0 || s.cand.t != noTime) && s.pending.t != noTime && s.pending.said == 1 && !s.pending.conflict
}

// stretch takes readings through all stages at once as long as nothing special
// happens, and returns how many it took: Builder.Reading, take, join, accept
// and emit in one loop, with what changes from reading to reading at hand. A
// test holds it to the stages.
func (s *series) stretch(list []reading.At, o Options) int {
	least, most := int64(instantLeast), int64(instantMost)
	if o.ToUTC != 0 {
		least, most = max(least, o.FromUTC), min(most, o.ToUTC-1)
	}
	pendingT, pendingQ := s.pending.t, s.pending.q
	candT, candQ := s.cand.t, s.cand.q
	curT, curQ := s.curT, s.curQ
	lastT, sum := s.lastT, s.sum
	acc, hist := &s.acc, s.hist
	var taken int
	var n int64
	for taken < len(list) {
		t, v := list[taken].UnixS, list[taken].Value
		if t < lastT || t <= pendingT || t < least || t > most || !(v >= s.low && v <= s.high) {
			break
		}
		// The pending instant goes on; it leaves the stages as the value that
		// holds from now on, or as a candidate for a spike in its place.
		nextT, nextQ := pendingT-s.shiftS, pendingQ
		emitT, emitQ := nextT, nextQ
		if s.spike > 0 {
			if up := candQ - curQ; up > s.spike || up < -s.spike {
				break // perhaps a spike
			}
			emitT, emitQ = candT, candQ
		}
		d := emitT - curT
		if d > s.holdS {
			break // a gap
		}
		if hist != nil {
			hist.Counts[hist.Bins.index(v)]++
		}
		taken++
		lastT, pendingT, pendingQ = t, t, quantise(v)
		candT, candQ = nextT, nextQ
		if emitT <= acc.end {
			acc.sum += curQ * d
			acc.covered += d
		} else {
			acc.hold(curT, emitT, curQ)
		}
		if emitT >= acc.end {
			acc.at(emitT)
		}
		acc.readings++
		if c := emitQ - curQ; c != 0 {
			if c = abs(c); c < s.resolution || s.resolution == 0 {
				s.resolution = c
			}
			if emitQ < s.minQ {
				s.minQ = emitQ
			} else if emitQ > s.maxQ {
				s.maxQ = emitQ
			}
		}
		n++
		sum += emitQ
		curT, curQ = emitT, emitQ
		if s.frozenS > 0 {
			s.sameRun(emitT, emitQ)
		}
	}
	if taken == 0 {
		return 0
	}
	s.rows += int64(taken)
	s.n += n
	s.lastT, s.sum = lastT, sum
	s.pending.t, s.pending.q = pendingT, pendingQ
	if s.spike > 0 {
		s.cand = instant{t: candT, q: candQ, said: 1}
	}
	s.curT, s.curQ = curT, curQ
	return taken
}

// quantise rounds to the nearest 1e-4, halves away from zero.
func quantise(v float64) int64 {
	if v < 0 {
		return -int64(-v*unit + 0.5)
	}
	return int64(v*unit + 0.5)
}
