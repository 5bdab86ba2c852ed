package lag

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
)

// Kind is what is wrong with a clock.
type Kind uint8

// Kinds of finding.
const (
	Unknown  Kind = iota // no witness
	Right                // fits without a shift
	Constant             // shifted throughout
	Seasonal             // shifted while daylight saving is in force, beside a constant
	ForATime             // shifted for a span of days
	Drift                // a shift that grows
)

// The limits are our assumption, chosen on series whose clocks are known; the
// tables of the tests say what they find and that they raise no false alarm.
const (
	sureDays    = 4.0  // evidence an explanation must gather beyond a right clock, days
	sureT       = 4.0  // Student's t of the daily gain
	fitLeast    = 0.18 // correlation along the explanation
	marginLeast = 0.08 // better than without
	daysLeast   = 8    // days with evidence in a span
	extra       = 1.0  // what a span or a drift must bring beyond simpler explanations, days
	driftLeast  = 12.0 // minutes a clock must drift in all
	usable      = 0.15 // least correlation of a witness at its best lag
)

// Frame is what all witnesses of a site share.
type Frame struct {
	Days   []Span
	BinMin float64
	// MostH is the largest shift looked for, hours.
	MostH float64
	// Seasonal is, per day, what the log's shift would be if it differed from
	// its stated clock in daylight saving alone, minutes; nil without.
	Seasonal []float64
	// Likely says of a constant beside Seasonal that such a clock is common
	// (the site's own); it decides where the record cannot, because daylight
	// saving is in force all of it or none.
	Likely func(shiftMin float64) bool
}

// Finding is the best explanation for a log.
type Finding struct {
	Kind Kind
	// ShiftMin is how far the log runs ahead of the truth: throughout; beside
	// Seasonal; for the span; or at its beginning, growing to EndShiftMin.
	ShiftMin, EndShiftMin float64
	From, To              int // days
	// Gain is the evidence beyond a right clock, days; T its Student's t.
	Gain, T float64
	// Better of Days days with evidence fit better with the shift.
	Better, Days int
	// Agree and Against are the witnesses that say so, or speak against it.
	Agree, Against []*Witness
	// Fit and FitWithout are the correlations of the best of them.
	Fit, FitWithout float64
	// RestFits says that outside the span the log fits without a shift.
	RestFits bool
	// Usable are the witnesses that resemble the log at all.
	Usable []*Witness
	path   []float64 // minutes per day
}

// PathMin is the shift of each day, minutes; nil for a right clock.
func (f *Finding) PathMin() []float64 { return f.path }

// Coarse reports whether only coarse witnesses speak.
func (f *Finding) Coarse() bool {
	return !slices.ContainsFunc(f.Agree, func(w *Witness) bool { return w.Class != Coarse })
}

// Best reports the best class among the witnesses that agree.
func (f *Finding) Best() Class {
	best := Coarse
	for _, w := range f.Agree {
		best = min(best, w.Class)
	}
	return best
}

// search is one log under test.
type search struct {
	*Frame
	most  int
	ws    []*Witness
	total [][]float64 // evidence per day and lag
	sum   []float64   // over all days
	base  float64     // the lag that is natural to the log, at most a bin
}

// Find weighs the explanations for a log.
func Find(fr *Frame, witnesses []*Witness) *Finding {
	s := &search{Frame: fr, most: int(math.Round(fr.MostH * 60 / fr.BinMin))}
	for _, w := range witnesses {
		if w.plane == nil {
			w.measure(fr.Days, s.most)
		}
		if w.plane.days >= daysLeast && w.best() >= usable {
			s.ws = append(s.ws, w)
		}
	}
	f := &Finding{Usable: s.ws}
	if len(s.ws) == 0 {
		return f
	}
	f.Kind = Right
	s.add()
	tries := []*Finding{s.constant(), s.span(), s.drift()}
	if fr.Seasonal != nil {
		tries = append(tries, s.seasonal())
	}
	slices.SortStableFunc(tries, func(a, b *Finding) int { return cmp.Compare(b.Gain, a.Gain) })
	if k := slices.IndexFunc(tries, func(t *Finding) bool { return t.Kind == Seasonal }); k > 0 && fr.Likely != nil &&
		tries[k].Gain > 0.98*tries[0].Gain && fr.Likely(tries[k].ShiftMin) {
		tries[0], tries[k] = tries[k], tries[0]
	} else if k > 0 && tries[0].Kind == ForATime && tries[k].Gain > 0.9*tries[0].Gain {
		tries[0], tries[k] = tries[k], tries[0] // the dates of the law need no luck
	}
	for _, t := range tries {
		if t.Gain < sureDays {
			break
		}
		if s.judge(t) {
			t.Usable = s.ws
			return t
		}
	}
	f.Fit = 0
	for _, w := range s.ws {
		r, _ := w.plane.fit(0, len(s.Days), func(int) float64 { return s.base })
		f.Fit = max(f.Fit, r)
	}
	if f.Fit < usable {
		return &Finding{Usable: s.ws}
	}
	f.ShiftMin = s.base * s.BinMin
	return f
}

// FindSeasonal weighs one explanation alone: that the log differs from its
// stated clock in daylight saving; nil when it does not stand.
func FindSeasonal(fr *Frame, witnesses []*Witness) *Finding {
	s := &search{Frame: fr, most: int(math.Round(2 * 60 / fr.BinMin))}
	for _, w := range witnesses {
		if w.measure(fr.Days, s.most); w.plane.days >= daysLeast {
			s.ws = append(s.ws, w)
		}
	}
	if len(s.ws) == 0 {
		return nil
	}
	s.add()
	s.base = 0
	f := &Finding{Kind: Seasonal, To: len(fr.Days), path: slices.Clone(fr.Seasonal), Usable: s.ws}
	if f.Gain = s.score(f.path); f.Gain < sureDays || !s.judge(f) {
		return nil
	}
	return f
}

// best is the greatest correlation of a witness at any lag, over the record or
// a third as much better over two months of it (a drift blurs the whole).
func (w *Witness) best() float64 {
	p := w.plane
	all, part := make([]float64, 2*p.most+1), make([]float64, 2*p.most+1)
	best := 0.0
	const months = 60
	for d, row := range p.at {
		for i, v := range row {
			part[i] += v
		}
		if (d+1)%months == 0 || d+1 == len(p.at) {
			var xx, yy float64
			for k := d - d%months; k <= d; k++ {
				xx, yy = xx+p.xx[k], yy+p.yy[k]
			}
			if xx > 0 && d%months+1 >= months/2 {
				best = max(best, 0.75*slices.Max(part)/math.Sqrt(xx*yy))
			}
			for i, v := range part {
				all[i] += v
			}
			clear(part)
		}
	}
	return max(best, slices.Max(all)*p.scale/float64(p.days))
}

func (s *search) add() {
	n := 2*s.most + 1
	s.total, s.sum = make([][]float64, len(s.Days)), make([]float64, n)
	for d := range s.total {
		row := make([]float64, n)
		for _, w := range s.ws {
			for i, v := range w.plane.at[d] {
				row[i] += v * w.plane.scale
			}
		}
		for i, v := range row {
			s.sum[i] += v
		}
		s.total[d] = row
	}
	s.base, _ = peak(s.sum, float64(s.most), 1)
	s.base -= float64(s.most)
}

// along is the evidence of a day at a shift in minutes.
func (s *search) along(d int, shiftMin float64) float64 {
	return at(s.total[d], shiftMin/s.BinMin+float64(s.most))
}

// score gathers the evidence of a path beyond a right clock.
func (s *search) score(path []float64) (gain float64) {
	for d := range path {
		gain += s.along(d, path[d]) - s.along(d, s.base*s.BinMin)
	}
	return gain
}

// whole rounds a shift to half hours where it is near one, else to 5 min:
// clocks are set wrong by whole or half hours.
func whole(m float64) float64 {
	if h := 30 * math.Round(m/30); math.Abs(m-h) <= 10 {
		return h
	}
	return 5 * math.Round(m/5)
}

// leastMin is the smallest constant shift that is told from a slow room.
const leastMin = 30

func (s *search) constant() *Finding {
	f := &Finding{Kind: Constant, To: len(s.Days)}
	best := 0
	for i, v := range s.sum {
		if v > s.sum[best] {
			best = i
		}
	}
	x, _ := peak(s.sum, float64(best), 1)
	f.ShiftMin = whole((x - float64(s.most)) * s.BinMin)
	f.EndShiftMin = f.ShiftMin
	if math.Abs(f.ShiftMin) < leastMin {
		return f
	}
	f.path = s.flat(0, len(s.Days), f.ShiftMin)
	f.Gain = s.score(f.path)
	return f
}

func (s *search) flat(from, to int, shiftMin float64) []float64 {
	p := make([]float64, len(s.Days))
	for d := range p {
		p[d] = s.base * s.BinMin
		if d >= from && d < to {
			p[d] = shiftMin
		}
	}
	return p
}

// seasonal tries every constant beside the seasonal shift.
func (s *search) seasonal() *Finding {
	f := &Finding{Kind: Seasonal, To: len(s.Days)}
	for k := -s.MostH * 60; k <= s.MostH*60; k += 30 {
		p := make([]float64, len(s.Days))
		biggest := 0.0
		for d := range p {
			if p[d] = k + s.Seasonal[d]; p[d] == 0 {
				p[d] = s.base * s.BinMin // right, as nature has it
			}
			biggest = max(biggest, math.Abs(p[d]))
		}
		if biggest < leastMin {
			continue
		}
		if g := s.score(p); g > f.Gain {
			f.Gain, f.ShiftMin, f.EndShiftMin, f.path = g, k, k, p
		}
	}
	return f
}

// judge asks the witnesses one by one and fills in the rest of a finding; ok
// is false where it does not stand.
func (s *search) judge(f *Finding) bool {
	var gains []float64
	for d := f.From; d < f.To; d++ {
		if f.path[d] == s.base*s.BinMin {
			continue
		}
		g := s.along(d, f.path[d]) - s.along(d, s.base*s.BinMin)
		if g == 0 {
			continue
		}
		gains = append(gains, g)
		if g > 0 {
			f.Better++
		}
	}
	f.Days = len(gains)
	if f.Days < daysLeast {
		return false
	}
	mean, sd := stat.MeanStdDev(gains, nil)
	f.T = mean / sd * math.Sqrt(float64(f.Days))
	if !(f.T >= sureT) {
		return false
	}
	path := func(d int) float64 { return f.path[d] / s.BinMin }
	flat := func(int) float64 { return s.base }
	f.RestFits = true
	outside := 0
	for _, w := range s.ws {
		if f.Kind == Drift {
			s.judgeDrift(f, w)
			continue
		}
		r, r0 := w.shifted(f, path), w.shifted(f, flat)
		switch {
		case r >= fitLeast && r-r0 >= marginLeast:
			f.Agree = append(f.Agree, w)
			if r > f.Fit {
				f.Fit, f.FitWithout = r, r0
			}
		case r0-r >= marginLeast:
			f.Against = append(f.Against, w)
		}
		if f.Kind == ForATime {
			a, n := w.outside(f, flat)
			b, _ := w.outside(f, func(int) float64 { return f.ShiftMin / s.BinMin })
			outside = max(outside, n)
			if n >= daysLeast && a <= b {
				f.RestFits = false
			}
		}
	}
	if f.Kind == ForATime && outside < daysLeast {
		f.RestFits = false
	}
	if f.Coarse() && len(f.Agree) > 0 && math.Abs(f.ShiftMin) < coarseMin {
		return false
	}
	return len(f.Agree) > 0 && len(f.Against) == 0
}

// coarseMin is the least shift coarse witnesses can tell.
const coarseMin = 180

// shifted is the correlation over the days a finding concerns.
func (w *Witness) shifted(f *Finding, path func(int) float64) float64 {
	r, _ := w.plane.fit(f.From, f.To, path)
	return r
}

func (w *Witness) outside(f *Finding, path func(int) float64) (float64, int) {
	a, n := w.plane.fit(0, f.From, path)
	b, m := w.plane.fit(f.To, len(w.plane.at), path)
	if n+m == 0 {
		return 0, 0
	}
	return (a*float64(n) + b*float64(m)) / float64(n+m), n + m
}
