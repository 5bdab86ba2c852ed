package grid

import (
	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Readings takes several readings of one point, as Reading takes each: unixS
// and values are equally long; NaN says that the point fell silent,
// reading.Nothing is passed over.
func (b *Builder) Readings(point int, unixS []int64, values []float64) {
	s := &b.series[point]
	for at := 0; at < len(unixS); at++ {
		if !b.second && s.common() {
			if at += s.stretch(unixS[at:], values[at:], b.opt); at == len(unixS) {
				return
			}
		}
		switch v := values[at]; {
		case v != v:
			b.gap(point, unixS[at])
		case v != reading.Nothing:
			b.Reading(point, unixS[at], v)
		}
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
func (s *series) stretch(unixS []int64, values []float64, o Options) int {
	most := int64(instantMost)
	floor := max(s.lastT-1, s.pending.t, instantLeast-1) // instants go on above it
	if o.ToUTC != 0 {
		floor, most = max(floor, o.FromUTC-1), min(most, o.ToUTC-1)
	}
	low, high, spike, holdS, shiftS, frozenS := s.low, s.high, s.spike, s.holdS, s.shiftS, s.frozenS
	pendingT, pendingQ := s.pending.t, s.pending.q
	candT, candQ := s.cand.t, s.cand.q
	curT, curQ := s.curT, s.curQ
	acc, hist := &s.acc, s.hist
	resolution, minQ, maxQ, sum := s.resolution, s.minQ, s.maxQ, s.sum
	accEnd, accSum, covered, readings := acc.end, acc.sum, acc.covered, acc.readings
	taken := 0
	values = values[:len(unixS)]
	for i, t := range unixS {
		v := values[i]
		if t <= floor || t > most || !(v >= low && v <= high) {
			break
		}
		// The pending instant goes on; it leaves the stages as the value that
		// holds from now on, or as a candidate for a spike in its place.
		nextT, nextQ := pendingT-shiftS, pendingQ
		emitT, emitQ := nextT, nextQ
		if spike > 0 {
			if up := candQ - curQ; up > spike || up < -spike {
				break // perhaps a spike
			}
			emitT, emitQ = candT, candQ
		}
		d := emitT - curT
		if d > holdS {
			break // a gap
		}
		if hist != nil {
			hist.Counts[hist.Bins.index(v)]++
		}
		taken++
		floor, pendingT, pendingQ = t, t, quantise(v)
		candT, candQ = nextT, nextQ
		if emitT < accEnd {
			accSum += curQ * d
			covered += d
		} else {
			acc.sum, acc.covered, acc.readings = accSum, covered, readings
			acc.hold(curT, emitT, curQ)
			acc.at(emitT)
			accEnd, accSum, covered, readings = acc.end, acc.sum, acc.covered, acc.readings
		}
		readings++
		if c := emitQ - curQ; c != 0 {
			if c = abs(c); c < resolution || resolution == 0 {
				resolution = c
			}
			minQ, maxQ = min(minQ, emitQ), max(maxQ, emitQ)
		}
		sum += emitQ
		curT, curQ = emitT, emitQ
		if frozenS > 0 {
			s.sameRun(emitT, emitQ)
		}
	}
	if taken == 0 {
		return 0
	}
	s.rows += int64(taken)
	s.n += int64(taken)
	s.lastT, s.sum = pendingT, sum
	s.resolution, s.minQ, s.maxQ = resolution, minQ, maxQ
	acc.sum, acc.covered, acc.readings = accSum, covered, readings
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
