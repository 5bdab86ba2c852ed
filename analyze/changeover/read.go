package changeover

import (
	"hash/fnv"
	"math"
	"math/rand/v2"

	"sashlog/analyze/calendar"
	"sashlog/analyze/cores"
	"sashlog/analyze/indoor"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the changeover is read from.
type Input struct {
	Site      *site.Site
	Grid      *grid.Grid
	Calendar  *calendar.Calendar
	Outdoor   *outdoor.Outdoor
	Indoor    []indoor.Zone
	Running   *running.Result
	Potential *potential.Result
	// Lost tells which starts the clock explains; nil when not known.
	Lost *lost.Result
	// Seed of the resampling.
	Seed uint64
}

const (
	changesMin = 6 // a limit must explain
	heldOffMin = 20
	widestK    = 3.0 // interval of a determined limit
	bluntestK  = 1.5 // blur of a determined limit
	// A limit that ends open mode at once is hardly ever passed while open.
	beyondK = 0.5
	joined  = 1 << 20
	// openBeyondMax is the greatest share of time open well beyond a limit that
	// ends open mode.
	openBeyondMax = 0.2
)

// Read reads the changeover of every plant unit and every zone with an opening.
func Read(in Input) *Result {
	r := &Result{}
	var subjects []*subject
	for u := range in.Site.Plant {
		if s := in.unitSubject(u, in.Calendar); s != nil {
			subjects = append(subjects, s)
		}
	}
	units := len(subjects)
	for z := range in.Site.Zones {
		if s := in.zoneSubject(z, in.Calendar); s != nil {
			subjects = append(subjects, s)
		}
	}
	out := make([]Subject, len(subjects))
	found := make([][]*fitted, len(subjects))
	cores.Each(len(subjects), func(k int) { out[k], found[k] = in.describe(subjects[k], k >= units) })
	clocks := make([]*surface, len(subjects))
	for k := range subjects {
		if k < units {
			clocks[k] = in.clockSurface(subjects[k])
		}
		if clocks[k] != nil {
			r.Tried++
		}
		for _, f := range found[k] {
			if k < units && f.shiftable() {
				r.Tried++
			}
		}
	}
	drifts := in.drifts()
	cores.Each(len(subjects), func(k int) {
		rng := in.stream(subjects[k].seed + "/shift")
		for _, f := range found[k] {
			// A zone's people change their habits; settings belong to the plant.
			if k >= units || !f.shiftable() {
				continue
			}
			if sh, ok := f.surface.shift(rng, r.Tried, drifts); ok && math.Abs(sh.After-sh.Before) >= shiftLeastK {
				sh.What = "limit"
				f.limit.Shift = &sh
			}
		}
		if s := clocks[k]; s != nil {
			if sh, ok := s.shift(rng, r.Tried, drifts); ok && math.Abs(sh.After-sh.Before) >= shiftLeastShare {
				sh.What = "start by the clock"
				out[k].Clock = &sh
			}
		}
		for _, f := range found[k] {
			d := &out[k].Closing
			if f.limit.Opening {
				d = &out[k].Opening
			}
			d.Limits = append(d.Limits, f.limit)
		}
	})
	r.Units, r.Zones = out[:units:units], out[units:]
	return r
}

// drifts are the date and the outdoor temperature of every day.
func (in *Input) drifts() [][]float64 {
	date, outC := make([]float64, len(in.Calendar.Days)), make([]float64, len(in.Calendar.Days))
	last := 0.0
	for d, day := range in.Calendar.Days {
		date[d] = float64(d)
		sum, n := 0.0, 0.0
		for i := day.FromStep; i < day.ToStep && i < len(in.Outdoor.TempC); i++ {
			if v := float64(in.Outdoor.TempC[i]); !math.IsNaN(v) {
				sum, n = sum+v, n+1
			}
		}
		if n > 0 {
			last = sum / n
		}
		outC[d] = last // a day without weather stands for the one before
	}
	return [][]float64{date, outC}
}

// fitted is a limit with its surface.
type fitted struct {
	limit   Limit
	surface *surface
}

// shiftable reports whether the date of a change is looked for: a limit may
// look blurred, or none, just because it changed; but it must explain enough.
func (f *fitted) shiftable() bool {
	return f.limit.Changes >= changesMin || f.limit.HeldOff >= heldOffMin
}

// stream keys randomness by the subject, so that no other's days shift it.
func (in *Input) stream(key string) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(key))
	return rand.New(rand.NewPCG(in.Seed, h.Sum64()))
}

func (in *Input) describe(s *subject, zone bool) (Subject, []*fitted) {
	out := Subject{ID: s.id, Index: s.index}
	s.rhythm(&out, in.Calendar, in.Grid.StepS)
	if zone {
		in.delays(s.index, s, &out)
	}
	var all []*fitted
	for _, opening := range []bool{false, true} {
		d := &out.Closing
		armed := 0
		if opening {
			d = &out.Opening
			if !zone && out.Closed.N >= eventsMin { // a unit's shortest run
				minutes, _ := s.spells(0, in.Grid.StepS)
				armed = int(quantile(sortedCopy(minutes), 0.1)*60) / int(in.Grid.StepS)
			}
		}
		if len(s.reasons) == 0 || s.reasons[0].zone >= 0 {
			d.Refused = "the outdoor temperature is not logged"
			continue
		}
		rows := s.rows(opening, armed, joined, in.Calendar, in.Grid.StepS)
		d.Changes = rows.events()
		for k := range rows.steps {
			d.Moments += int(rows.steps[k] * rows.weight[k])
		}
		if d.Changes < eventsMin {
			d.Refused = "fewer than 12 changes seen"
			continue
		}
		m := choose(rows, s.reasons)
		d.Free = m.free
		d.Curve = m.curve(s.rows(opening, armed, 1, in.Calendar, in.Grid.StepS), s, opening)
		rng := in.stream(s.seed)
		for j := range m.edges {
			all = append(all, m.limit(rows, s, j, opening, rng))
		}
	}
	return out, all
}

// limit sums edge j up.
func (m *model) limit(rows *moments, s0 *subject, j int, opening bool, rng *rand.Rand) *fitted {
	reasons := s0.reasons
	e := m.edges[j]
	r := &reasons[e.reason]
	l := Limit{Opening: opening, Zone: r.zone, Above: r.above, LevelC: e.levelC, BlurK: e.blurK, All: rows.events()}
	l.Changes = m.explained(rows, reasons, j, opening)
	if opening {
		sign := r.sign()
		for i, q := range m.openOdds(rows, reasons) {
			p := holds(sign, float64(rows.x[e.reason][i]), e.levelC, e.blurK)
			l.HeldOff += rows.weight[i] * q * p / math.Max(least, 1-p)
		}
	}
	if l.Changes < changesMin && l.HeldOff < heldOffMin { // never used: not worth a surface
		l.LowC, l.HighC, l.Undetermined = math.NaN(), math.NaN(), "explains fewer than six changes"
		return &fitted{l, nil}
	}
	s := m.surfaceOf(rows, reasons, j)
	l.LowC, l.HighC = s.interval(0, len(s.days), rng)
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, x := range rows.x[e.reason] {
		if v := float64(x); !math.IsNaN(v) {
			lo, hi = math.Min(lo, v), math.Max(hi, v)
		}
	}
	switch {
	case !(e.levelC >= lo-beyondK && e.levelC <= hi+beyondK):
		l.Undetermined = "lies beyond the temperatures seen"
	case !(l.HighC-l.LowC <= widestK):
		l.Undetermined = "its interval is wider than 3 K"
	case !opening && s0.openBeyond(r, e) > openBeyondMax:
		l.Undetermined = "it also ran open beyond it"
	case e.blurK > bluntestK:
		l.Undetermined = "a gradual tendency, no limit"
	}
	return &fitted{l, s}
}

// openBeyond is the share of the known time well beyond an edge that was open,
// 0 where there is hardly any such time.
func (s *subject) openBeyond(r *reason, e edge) float64 {
	open, known := 0.0, 0.0
	beyond := e.levelC + r.sign()*math.Max(0.5, 2*e.blurK)
	for i, use := range s.use {
		if x := float64(r.tempC[i]); use && s.state[i] >= 0 && (x-beyond)*r.sign() > 0 {
			known++
			open += float64(s.state[i])
		}
	}
	if known < 6 {
		return 0
	}
	return open / known
}

// explained is the number of changes that edge j accounts for. A closing is
// shared among what held at that moment by -log(1-p), as independent hazards
// share an event; an opening counts for a limit that had held half an hour
// before and no longer does.
func (m *model) explained(rows *moments, reasons []reason, j int, opening bool) float64 {
	e := m.edges[j]
	r := &reasons[e.reason]
	n := 0.0
	for i, closed := range rows.closed {
		if closed == opening {
			continue
		}
		x := float64(rows.x[e.reason][i])
		if opening {
			before := math.NaN()
			if k := int(rows.step[i]) - 6; k >= 0 {
				before = float64(r.tempC[k])
			}
			n += math.Max(0, holds(r.sign(), before, e.levelC, e.blurK)-holds(r.sign(), x, e.levelC, e.blurK))
			continue
		}
		held := func(f edge) float64 {
			return -math.Log(math.Max(least, rows.freeOf(f.reason, reasons[f.reason].sign(), i, f.levelC, f.blurK)))
		}
		total := -math.Log(m.free)
		for _, f := range m.edges {
			total += held(f)
		}
		if total > 0 {
			n += held(e) / total
		}
	}
	return n
}

const curveBinK = 1.0

// curve counts changes by outdoor temperature.
func (m *model) curve(rows *moments, s *subject, opening bool) []CurvePoint {
	reasons := s.reasons
	bins := map[int]*CurvePoint{}
	low, high := math.MaxInt, math.MinInt
	weight := map[int]float64{}
	q := m.openOdds(rows, reasons)
	for i := range q {
		x := reasons[0].tempC[rows.step[i]]
		if math.IsNaN(float64(x)) {
			continue
		}
		b := int(math.Floor(float64(x) / curveBinK))
		p := bins[b]
		if p == nil {
			p = &CurvePoint{FromC: float64(b) * curveBinK, ToC: float64(b+1) * curveBinK}
			bins[b] = p
			low, high = min(low, b), max(high, b)
		}
		w := rows.weight[i]
		weight[b] += w
		p.Moments += int(w)
		if rows.closed[i] != opening {
			p.Changed++
		}
		if opening {
			p.Fitted += w * q[i]
		} else {
			p.Fitted += w * (1 - q[i])
		}
	}
	var out []CurvePoint
	for b := low; b <= high; b++ {
		if p := bins[b]; p != nil {
			p.Fitted /= weight[b]
			out = append(out, *p)
		}
	}
	return out
}

// clockSurface is the surface of "it was started by the clock" over the working
// days, for the date at which a time programme changed; nil without a pattern.
func (in *Input) clockSurface(s *subject) *surface {
	p := s.clock
	if p == nil || p.RoundTheClock || len(p.Minutes) == 0 {
		return nil
	}
	out := &surface{blurs: 1}
	for k := 1; k < 50; k++ {
		out.levelC = append(out.levelC, float64(k)/50)
	}
	for d, day := range in.Calendar.Days {
		if day.FromStep < in.Grid.PeriodFrom || day.ToStep > in.Grid.PeriodTo {
			continue
		}
		working, started, known := false, false, false
		for i := max(1, day.FromStep); i < day.ToStep; i++ {
			for _, z := range s.zones {
				working = working || in.Running.Zones[z].Occupied[i] == running.Occupied
			}
			for _, m := range p.Minutes {
				if at := int(in.Calendar.MinuteOfDay[i]); at >= m-5 && at <= m+5 && s.state[i] >= 0 && s.state[i-1] >= 0 {
					known = true
					started = started || (s.state[i] == 0 && s.state[i-1] == 1)
				}
			}
		}
		if !working || !known {
			continue
		}
		out.days, out.informs = append(out.days, int32(d)), append(out.informs, true)
		for _, share := range out.levelC {
			if started {
				out.ll = append(out.ll, math.Log(share))
			} else {
				out.ll = append(out.ll, math.Log(1-share))
			}
		}
	}
	return out
}
