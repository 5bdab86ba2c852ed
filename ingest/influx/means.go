package influx

import (
	"context"
	"fmt"
	"math"
	"strings"

	"github.com/influxdata/influxdb-client-go/v2/api/query"

	"sashlog/configs/site"
	"sashlog/ingest/quality"
)

const (
	// marginS is looked at on both sides of a month, to judge the windows at
	// its ends, and is the least standstill whose ends are read as logged.
	marginS = 6 * 3600
	// oddMost is how many odd readings a survey lists.
	oddMost = 5000
	// exactLeast is the share of a month's windows that means must be good
	// for; below, the whole month is read as logged.
	exactLeast = 0.6
	// rangesMost is how many ranges one query joins.
	rangesMost = 40
)

// means fetches one point's month: the means of the server, and readings
// where a mean does not do. Instants come out moved to the start of their
// interval.
func (s *Source) means(ctx context.Context, p *point, month span) (fetched, error) {
	var out fetched
	err := s.conn.steadily(ctx, func() (err error) {
		out, err = s.meansOnce(ctx, p, month)
		return err
	})
	return out, err
}

func (s *Source) meansOnce(ctx context.Context, p *point, month span) (fetched, error) {
	step := int64(s.site.StepS)
	from := floorDiv(month.from, step)*step - marginS/step*step
	to := -floorDiv(-month.to, step)*step + marginS/step*step
	w := windows{fromNS: (from + p.shiftS) * second, stepNS: step * second, n: int((to - from) / step)}
	wide := span{from + p.shiftS, to + p.shiftS}
	out := fetched{point: p}
	rule := quality.Rule(&s.site.Points[p.index])
	conv := s.site.Points[p.index].Conversion
	if conv.Factor == 0 {
		conv = site.Conversion{Factor: 1}
	}
	low, high := (rule.Low-conv.Offset)/conv.Factor, (rule.High-conv.Offset)/conv.Factor
	low, high = min(low, high), max(low, high)
	spike := rule.Spike / math.Abs(conv.Factor)
	sv, err := s.conn.survey(ctx, p, wide, low, high, spike)
	if err != nil || sv.count == 0 {
		return out, err
	}
	interval := p.intervalS * second
	lo, hi := int(marginS/step), w.n-int(marginS/step)
	if sv.many {
		return s.asIs(ctx, p, w, lo, hi)
	}
	runs, err := sv.runs(interval)
	if err != nil {
		return out, &Failure{Text: "the answers do not fit together: " + err.Error(), Hint: "is something writing to this month just now?", again: true}
	}
	means, n, err := s.conn.windowMeans(ctx, p, wide, w)
	if err != nil {
		return out, err
	}
	standstill := 0
	if rule.FrozenS > 0 {
		standstill = int(marginS / step)
	}
	filled, exact := judge(w, &sv, runs, interval, low, high, spike, standstill, means)
	if err := sameWindows(filled, means, n); err != nil {
		return out, err
	}
	good, all := 0, 0
	for k := lo; k < hi; k++ {
		if filled[k] {
			all++
		}
		if exact[k] {
			good++
		}
	}
	if float64(good) < exactLeast*float64(all) {
		return s.asIs(ctx, p, w, lo, hi)
	}
	pieces, err := s.pieces(ctx, p, w, runs, rest(filled, exact, lo, hi))
	if err != nil {
		return out, err
	}
	out.numbers, err = compose(w, lo, hi, exact, means, pieces)
	for i := range out.numbers {
		out.numbers[i].t -= p.shiftS
	}
	return out, err
}

// sameWindows holds the windows the server averaged against those that hold
// readings.
func sameWindows(filled []bool, means []float64, n int) error {
	want := 0
	for k, f := range filled {
		if f {
			want++
		}
		if f == math.IsNaN(means[k]) {
			n = -1
		}
	}
	if n != want {
		return &Failure{Text: fmt.Sprintf("the answer's means are not those of the %d windows that hold readings", want),
			Hint: "nothing of it was used; is something writing to this month just now?", again: true}
	}
	return nil
}

// asIs fetches the windows [lo, hi) wholly as logged.
func (s *Source) asIs(ctx context.Context, p *point, w windows, lo, hi int) (fetched, error) {
	sp := span{(w.fromNS + int64(lo)*w.stepNS) / second, (w.fromNS + int64(hi)*w.stepNS) / second}
	n, err := s.conn.counts(ctx, p.place, []string{p.tag}, sp)
	if err != nil {
		return fetched{}, err
	}
	got, err := s.conn.raw(ctx, []*point{p}, n, s.conn.source(p.place, []string{p.tag}, sp.from, sp.to)+s.conn.columns("_time", "_value"))
	if err != nil {
		return fetched{}, err
	}
	if !whole(got, n) {
		return fetched{}, partial(total(got), sum(n))
	}
	for i := range got[0].numbers {
		got[0].numbers[i].t -= p.shiftS
	}
	return got[0], nil
}

// pieces fetches ranges of windows as logged, in order of time.
func (s *Source) pieces(ctx context.Context, p *point, w windows, runs []run, ranges [][2]int) ([]number, error) {
	var out []number
	for _, some := range chunks(ranges, rangesMost) {
		var each []string
		var want int64
		for _, r := range some {
			lo, hi := w.fromNS+int64(r[0])*w.stepNS, w.fromNS+int64(r[1])*w.stepNS
			each = append(each, s.conn.source(p.place, []string{p.tag}, lo/second, hi/second))
			want += inRange(runs, p.intervalS*second, lo, hi)
		}
		flux := each[0]
		if len(each) > 1 {
			flux = "union(tables: [\n" + strings.Join(each, ",\n") + "])\n"
		}
		flux += s.conn.columns("_time", "_value") + ` |> sort(columns: ["_time"])` + "\n"
		got, err := s.conn.raw(ctx, []*point{p}, map[string]int64{p.tag: want}, flux)
		if err != nil {
			return nil, err
		}
		if n := total(got); n != want || int64(len(got[0].numbers)) != n {
			return nil, partial(n, want)
		}
		out = append(out, got[0].numbers...)
	}
	return out, nil
}

// survey asks for what can be known of a point's readings without fetching
// them.
func (c *conn) survey(ctx context.Context, p *point, sp span, low, high, spike float64) (survey, error) {
	src := "src = " + c.source(p.place, []string{p.tag}, sp.from, sp.to)
	if p.whole {
		src += " |> toFloat()\n"
	}
	flux := src + fmt.Sprintf(`
src |> count() |> keep(columns: ["_value"]) |> yield(name: "count")
src |> first() |> keep(columns: ["_time", "_value"]) |> yield(name: "first")
src |> elapsed(unit: 1ns) |> filter(fn: (r) => r.elapsed != %d or r._value < %s or r._value > %s)
 |> limit(n: %d) |> keep(columns: ["_time", "_value", "elapsed"]) |> yield(name: "odd")
`, p.intervalS*second, fluxFloat(low), fluxFloat(high), oddMost+1)
	if spike > 0 {
		flux += fmt.Sprintf(`src |> difference() |> filter(fn: (r) => r._value > %s or r._value < %s)
 |> limit(n: %d) |> keep(columns: ["_time"]) |> yield(name: "jumps")
`, fluxFloat(spike), fluxFloat(-spike), oddMost+1)
	}
	var s survey
	said := map[string]bool{}
	err := c.rows(ctx, flux, func(r *query.FluxRecord) error {
		said[r.Result()] = true
		if r.Result() == "count" {
			n, ok := r.Value().(int64)
			if !ok {
				return brokenOff{fmt.Errorf("a count that is no number")}
			}
			s.count = n
			return nil
		}
		ns, err := instant(r)
		if err != nil {
			return err
		}
		switch r.Result() {
		case "first":
			v, ok := r.Value().(float64)
			if !ok {
				return brokenOff{fmt.Errorf("a reading without a value")}
			}
			s.firstNS, s.firstValue = ns, v
		case "odd":
			e, ok1 := r.ValueByKey("elapsed").(int64)
			v, ok2 := r.Value().(float64)
			if !ok1 || !ok2 {
				return brokenOff{fmt.Errorf("a reading without a value")}
			}
			s.odd = append(s.odd, odd{ns, e, v})
		case "jumps":
			s.jumps = append(s.jumps, ns)
		}
		return nil
	})
	s.many = len(s.odd) > oddMost || len(s.jumps) > oddMost
	if err == nil && said["count"] != said["first"] {
		return s, partial(0, s.count)
	}
	return s, err
}

// windowMeans asks for the mean of each window; n is how many there are. The
// pipeline up to mean is one that newer servers carry out where the data lie.
func (c *conn) windowMeans(ctx context.Context, p *point, sp span, w windows) (means []float64, n int, err error) {
	flux := c.source(p.place, []string{p.tag}, sp.from, sp.to) +
		fmt.Sprintf(" |> window(every: %ds, offset: %ds)\n |> mean()\n", w.stepNS/second, p.shiftS%(w.stepNS/second)) +
		` |> keep(columns: ["_start", "_value"]) |> group()` + "\n"
	means = make([]float64, w.n)
	for k := range means {
		means[k] = math.NaN()
	}
	err = c.rows(ctx, flux, func(r *query.FluxRecord) error {
		v, ok := r.Value().(float64)
		if !ok {
			return brokenOff{fmt.Errorf("a mean that is no number")}
		}
		at := r.Start().UnixNano()
		k := w.index(at)
		if k < 0 || k >= w.n || at != w.fromNS+int64(k)*w.stepNS || !math.IsNaN(means[k]) {
			return brokenOff{fmt.Errorf("a mean of a window that was not asked for, from %v", r.Start())}
		}
		means[k] = v
		n++
		return nil
	})
	return means, n, err
}
