package quality

import (
	"fmt"
	"math"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// A log's clock is doubted when its daily pattern, over at least two weeks, fits
// the other logs better at a lag of whole or half hours, for two kinds of
// quantity, and fits without a lag the rest of the time. All limits are our
// assumption, chosen so that a changed habit (one quantity) or a slow room (all
// year) is never taken for a clock.
const (
	binS           = 1800
	lagMost        = 12 // half hours
	clockDaysLeast = 10
	clockFit       = 0.30 // correlation at the lag
	clockMargin    = 0.15 // better than without
	clockSure      = 4.0  // the best lag must beat every other not next to it by this many days of evidence
	otherPoints    = 3
	otherLogs      = 2
	clip           = 3 // standard deviations a single change counts for
)

// natures are the kinds of quantity that witness apart from each other: one
// follows people, the others weather, plant and people.
var natures = [][]site.Quantity{{site.CO2}, {site.AirTemp}, {site.Humidity}, {site.People, site.Presence}}

// witness is one log's mean pattern of changes for one nature beside that of
// all other logs.
type witness struct {
	mine, others []float64 // per bin, NaN unknown
	logs, points int       // of the others
	days         [][]float64
}

// clocks looks at every log that holds zone points.
func clocks(r *run) {
	if len(r.days) < 2*clockDaysLeast {
		return
	}
	changes := map[int][]float64{}
	sources := map[string]bool{}
	var names []string
	for _, n := range natures {
		r.each(func(i int, p *site.Point, c *grid.Column) {
			if p.Owner == site.OwnerZone && p.Placement != site.PlacementReturn {
				changes[i] = r.changes(c)
				if !sources[p.Source] {
					sources[p.Source] = true
					names = append(names, p.Source)
				}
			}
		}, n...)
	}
	if len(names) < 2 {
		return
	}
	for _, name := range names {
		r.clockOf(name, changes)
	}
}

// changes is the standardised change of half-hour means, clipped.
func (r *run) changes(c *grid.Column) []float64 {
	per := int(binS / r.grid.StepS)
	bins := r.grid.N / per
	out := make([]float64, bins)
	last := math.NaN()
	var sum2 float64
	n := 0
	for b := range out {
		sum, k := 0.0, 0
		for i := b * per; i < (b+1)*per; i++ {
			if known(c.Mean[i]) {
				sum, k = sum+float64(c.Mean[i]), k+1
			}
		}
		m := math.NaN()
		if 2*k >= per {
			m = sum / float64(k)
		}
		out[b] = m - last
		last = m
		if !math.IsNaN(out[b]) {
			sum2, n = sum2+out[b]*out[b], n+1
		}
	}
	sd := math.Sqrt(sum2 / float64(max(n, 1)))
	for b, v := range out {
		switch {
		case sd == 0:
			out[b] = math.NaN()
		case !math.IsNaN(v):
			out[b] = min(max(v/sd, -clip), clip)
		}
	}
	return out
}

// clockOf judges one log.
func (r *run) clockOf(name string, changes map[int][]float64) {
	var ws []witness
	for _, n := range natures {
		if w, ok := r.witness(name, changes, n); ok {
			ws = append(ws, w)
		}
	}
	if len(ws) == 0 {
		return
	}
	// The evidence of each day for each lag, added up over the natures.
	total := func(lag int) []float64 {
		out := make([]float64, len(r.days))
		for _, w := range ws {
			for d, v := range w.days[lag+lagMost] {
				out[d] += v - w.days[lagMost][d]
			}
		}
		return out
	}
	best, from, to, score := 0, 0, 0, 0.0
	for lag := -lagMost; lag <= lagMost; lag++ {
		if lag == 0 {
			continue
		}
		if a, b, s := bestSpan(total(lag)); s > score {
			best, from, to, score = lag, a, b, s
		}
	}
	if best == 0 || to-from < clockDaysLeast || score < clockSure {
		return
	}
	agree, against := 0, 0
	var fitBest, fitZero float64
	logs, points := 0, 0
	for _, w := range ws {
		zero, lagged := r.fit(&w, 0, from, to), r.fit(&w, best, from, to)
		if lagged >= clockFit && lagged-zero >= clockMargin {
			agree++
			if lagged > fitBest {
				fitBest, fitZero = lagged, zero
			}
			logs, points = max(logs, w.logs), max(points, w.points)
		} else if zero-lagged >= clockMargin {
			against++
		}
	}
	if agree == 0 || against > 0 {
		return
	}
	rest := len(r.days) - (to - from)
	restFits := rest >= clockDaysLeast
	for _, w := range ws {
		if r.fitOutside(&w, 0, from, to) <= r.fitOutside(&w, best, from, to) {
			restFits = false
		}
	}
	from, to = r.widen(total(best), from, to)
	var ps []int
	for i := range r.site.Points {
		if r.site.Points[i].Source == name && r.grid.Columns[i].Mean != nil {
			ps = append(ps, i)
		}
	}
	fromUTC, toUTC := r.at(r.days[from].from), r.at(r.days[to-1].to)
	ahead := "behind"
	if best > 0 {
		ahead = "ahead"
	}
	evidence := fmt.Sprintf("the log %q runs %.1f h %s of %s of other logs %s: the pattern of changes fits with a correlation of %.2f at that lag and %.2f without; %s",
		name, math.Abs(float64(best))*0.5, ahead, count(points, "point", "points"), span(fromUTC, toUTC, r.grid.Loc), fitBest, fitZero,
		map[bool]string{true: "the rest of the time it fits without", false: "it does so throughout, which working hours may explain"}[restFits])
	do := fmt.Sprintf("compare the logger's clock with a watch; if it was wrong, give the log's clock a shift of %+d min for these days in the site file", -best*30)
	if agree >= 2 && restFits && logs >= otherLogs && points >= otherPoints {
		var n int64
		for _, p := range ps {
			n += r.built.Tally.Void(p, r.days[from].from, r.days[to-1].to, reading.ClockDoubt)
		}
		r.add(reading.Check{Kind: reading.CheckClock, Points: ps, Zone: r.commonZone(ps), Effect: reading.EffectRemoved, FromUTC: fromUTC, ToUTC: toUTC, Readings: n, Evidence: evidence, DoNext: do})
		return
	}
	w := warn(reading.CheckClock, r.commonZone(ps), ps, evidence, do)
	w.FromUTC, w.ToUTC = fromUTC, toUTC
	r.add(w)
}

func (r *run) commonZone(points []int) int {
	zone := -1
	for k, p := range points {
		if z := zoneOf(r.site, p); k == 0 {
			zone = z
		} else if z != zone {
			return -1
		}
	}
	return zone
}

func (r *run) witness(name string, changes map[int][]float64, qs []site.Quantity) (w witness, ok bool) {
	bins := r.grid.N / int(binS/r.grid.StepS)
	mine, others := newMean(bins), newMean(bins)
	logs := map[string]bool{}
	r.each(func(i int, p *site.Point, _ *grid.Column) {
		c, ok := changes[i]
		switch {
		case !ok:
		case p.Source == name:
			mine.add(c)
		default:
			others.add(c)
			logs[p.Source] = true
			w.points++
		}
	}, qs...)
	if mine.points == 0 || w.points == 0 {
		return w, false
	}
	w.mine, w.others, w.logs = mine.result(), others.result(), len(logs)
	w.days = make([][]float64, 2*lagMost+1)
	for lag := -lagMost; lag <= lagMost; lag++ {
		w.days[lag+lagMost] = r.dayProducts(&w, lag)
	}
	return w, true
}

// meanOf averages series of bins.
type meanOf struct {
	sum    []float64
	n      []int
	points int
}

func newMean(bins int) *meanOf { return &meanOf{sum: make([]float64, bins), n: make([]int, bins)} }

func (m *meanOf) add(v []float64) {
	m.points++
	for i, x := range v {
		if !math.IsNaN(x) {
			m.sum[i] += x
			m.n[i]++
		}
	}
}

func (m *meanOf) result() []float64 {
	for i, n := range m.n {
		m.sum[i] /= float64(n) // 0/0 is NaN: unknown
	}
	return m.sum
}

// pair calls f with what both said; a lag above 0 means that mine comes later.
func (w *witness) pair(lag, from, to int, f func(x, y float64)) {
	for b := max(from, lag, 0); b < min(to, len(w.mine), len(w.mine)+lag); b++ {
		if x, y := w.mine[b], w.others[b-lag]; !math.IsNaN(x) && !math.IsNaN(y) {
			f(x, y)
		}
	}
}

func (r *run) bins(fromDay, toDay int) (from, to int) {
	per := int(binS / r.grid.StepS)
	return r.days[fromDay].from / per, r.days[toDay-1].to / per
}

// dayProducts is the share of correlation each day brings at a lag, in days:
// their mean over the record is the correlation.
func (r *run) dayProducts(w *witness, lag int) []float64 {
	var xx, yy float64
	w.pair(0, 0, len(w.mine), func(x, y float64) { xx += x * x; yy += y * y })
	scale := float64(len(r.days)) / math.Sqrt(xx*yy)
	out := make([]float64, len(r.days))
	if math.IsInf(scale, 0) || math.IsNaN(scale) {
		return out
	}
	for d := range out {
		from, to := r.bins(d, d+1)
		w.pair(lag, from, to, func(x, y float64) { out[d] += x * y * scale })
	}
	return out
}

// fit is the correlation at a lag within a span of days.
func (r *run) fit(w *witness, lag, fromDay, toDay int) float64 {
	from, to := r.bins(fromDay, toDay)
	return correlate(w, lag, [][2]int{{from, to}})
}

func (r *run) fitOutside(w *witness, lag, fromDay, toDay int) float64 {
	from, to := r.bins(fromDay, toDay)
	return correlate(w, lag, [][2]int{{0, from}, {to, len(w.mine)}})
}

func correlate(w *witness, lag int, spans [][2]int) float64 {
	var xy, xx, yy float64
	for _, s := range spans {
		w.pair(lag, s[0], s[1], func(x, y float64) { xy += x * y; xx += x * x; yy += y * y })
	}
	if xx == 0 || yy == 0 {
		return 0
	}
	return xy / math.Sqrt(xx*yy)
}

// bestSpan is the span of days with the greatest sum (Kadane's method).
func bestSpan(v []float64) (from, to int, sum float64) {
	start, run := 0, 0.0
	for i, x := range v {
		if run <= 0 {
			start, run = i, 0
		}
		run += x
		if run > sum {
			from, to, sum = start, i+1, run
		}
	}
	return from, to, sum
}

// widen takes in neighbouring days that say nothing either way, such as
// weekends, four at most on each side.
func (r *run) widen(v []float64, from, to int) (int, int) {
	const most = 4
	typical := 0.0
	for _, x := range v[from:to] {
		typical += x
	}
	typical /= float64(to - from)
	quiet := func(d int) bool { return math.Abs(v[d]) < typical/3 }
	for n := 0; n < most && from > 0 && quiet(from-1); n++ {
		from--
	}
	for n := 0; n < most && to < len(v) && quiet(to); n++ {
		to++
	}
	return from, to
}
