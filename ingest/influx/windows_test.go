package influx

import (
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/quality"
)

// look makes of readings what a server answers to a survey and to the question
// for means.
func look(w windows, rs []number, intervalNS int64, low, high, spike float64) (survey, []float64) {
	var s survey
	sums, n, means := make([]float64, w.n), make([]int, w.n), make([]float64, w.n)
	for i, r := range rs {
		ns := r.t * second
		k := w.index(ns)
		sums[k] += r.x
		n[k]++
		s.count++
		if i == 0 {
			s.firstNS, s.firstValue = ns, r.x
			continue
		}
		since := ns - rs[i-1].t*second
		if since != intervalNS || r.x < low || r.x > high {
			s.odd = append(s.odd, odd{ns, since, r.x})
		}
		if spike > 0 && math.Abs(r.x-rs[i-1].x) > spike {
			s.jumps = append(s.jumps, ns)
		}
	}
	for k := range means {
		means[k] = sums[k] / float64(n[k]) // NaN where there are none
	}
	return s, means
}

// Whatever is missing, late, impossible or a spike: the grid of means and
// pieces is the grid of the readings, to the 1e-4 that readings are rounded to
// on either side and the rounding of float32.
func TestComposedGrid(t *testing.T) {
	const from, days = 1735689600, 2
	rapid.Check(t, func(rt *rapid.T) {
		interval := rapid.SampledFrom([]int64{10, 20, 50, 60, 75, 100, 150}).Draw(rt, "interval")
		q := rapid.SampledFrom([]site.Quantity{site.AirTemp, site.SurfaceTemp, site.CO2, site.SupplyAirTemp}).Draw(rt, "quantity")
		s, _ := houseOf("", "", site.InfluxMeans, site.Point{Column: "x", Quantity: q})
		trait, _ := q.Trait()
		rule := quality.Rule(&s.Points[0])
		phase := rapid.SampledFrom([]int64{0, 0, 0, 7}).Draw(rt, "phase")
		var rs []number
		x, mid := 0.0, (trait.Low+trait.High)/4
		if q == site.CO2 {
			mid = 800
		}
		worse := rapid.IntRange(0, 60).Draw(rt, "faults in a thousand")
		skip := 0
		for at := int64(from); at < from+days*86400; at += interval {
			x += float64(rapid.IntRange(-4, 4).Draw(rt, "change")) / 10
			if rapid.IntRange(0, 999).Draw(rt, "luck") < worse {
				switch rapid.IntRange(0, 5).Draw(rt, "fault") {
				case 0:
					skip = rapid.IntRange(1, 40).Draw(rt, "lost")
				case 1:
					rs = append(rs, number{at + phase, mid + x + 2*rule.Spike})
					continue
				case 2:
					rs = append(rs, number{at + phase, trait.High + 50})
					continue
				case 3:
					x += rule.Spike * 1.5
				case 4:
					phase = int64(rapid.IntRange(0, int(interval)-1).Draw(rt, "new phase"))
				case 5:
					rs = append(rs, number{at + phase, mid + x}, number{at + phase + interval/3, mid - x})
					continue
				}
			}
			if skip > 0 {
				skip--
				continue
			}
			rs = append(rs, number{at + phase, mid + x})
		}
		for i := len(rs) - 1; i > 0; i-- { // a database has one value per instant, in order
			if rs[i].t <= rs[i-1].t {
				rs = append(rs[:i], rs[i+1:]...)
			}
		}
		if len(rs) < 2 {
			return
		}
		sameGrid(rt, s, rs, interval, from, days)
	})
}

// sameGrid holds the grid of means and pieces against that of the readings.
func sameGrid(t interface{ Fatalf(string, ...any) }, s *site.Site, rs []number, interval, from, days int64) {
	const step = 300
	rule := quality.Rule(&s.Points[0])
	w := windows{fromNS: from * second, stepNS: step * second, n: int(days*86400/step + 1)}
	sv, means := look(w, rs, interval*second, rule.Low, rule.High, rule.Spike)
	runs, err := sv.runs(interval * second)
	if err != nil {
		t.Fatalf("%v", err)
	}
	if n := inRange(runs, interval*second, math.MinInt64/4, math.MaxInt64/4); n != int64(len(rs)) {
		t.Fatalf("%d readings in runs, want %d", n, len(rs))
	}
	filled, exact := judge(w, &sv, runs, interval*second, rule.Low, rule.High, rule.Spike, 6*3600/step, means)
	var pieces []number
	for _, g := range rest(filled, exact, 0, w.n) {
		lo, hi := w.fromNS+int64(g[0])*w.stepNS, w.fromNS+int64(g[1])*w.stepNS
		before := len(pieces)
		for _, r := range rs {
			if r.t*second >= lo && r.t*second < hi {
				pieces = append(pieces, r)
			}
		}
		if n, want := int64(len(pieces)-before), inRange(runs, interval*second, lo, hi); n != want {
			t.Fatalf("%d readings in a range, counted %d", n, want)
		}
	}
	got, err := compose(w, 0, w.n, exact, means, pieces)
	if err != nil {
		t.Fatalf("%v", err)
	}
	s.Points[0].Hold = time.Duration(grid.UsualHoldS(interval)) * time.Second
	column := func(rs []number) grid.Column {
		b := grid.NewBuilder(s, grid.Options{Rule: quality.Rule})
		for _, r := range rs {
			b.Reading(0, r.t, r.x)
		}
		b.Flush()
		return b.Finish(grid.Frame{FromUTC: from, PeriodFromUTC: from, ToUTC: from + days*86400 + 7200, Loc: s.Location}).Grid.Columns[0]
	}
	g, want := column(got), column(rs)
	for k := range want.Mean {
		if g.CoveredS[k] != want.CoveredS[k] || want.CoveredS[k] > 0 && !(math.Abs(float64(g.Mean[k]-want.Mean[k])) <= 2e-4+math.Abs(float64(want.Mean[k]))/(1<<22)) {
			t.Fatalf("step %d: got %v over %d s, want %v over %d s", k, g.Mean[k], g.CoveredS[k], want.Mean[k], want.CoveredS[k])
		}
	}
}

// A jump at the end of a step is a spike, or not, by the reading after it and
// not by the mean of the next step.
func TestJumpAtTheEndOfAStep(t *testing.T) {
	for _, next := range []float64{28, 21} {
		s, _ := houseOf("", "", site.InfluxMeans, site.Point{Column: "x", Quantity: site.AirTemp})
		var rs []number
		for at := utc(2025, 1, 1, 0, 0); at < utc(2025, 1, 2, 0, 0); at += 60 {
			rs = append(rs, number{at, 20 + float64(at/60%3)/10}) // no standstill
		}
		for i, x := range []float64{36, next, 20, 20, 20} { // 36 ends a step
			rs[299+i].x = x
		}
		sameGrid(t, s, rs, 60, utc(2025, 1, 1, 0, 0), 1)
	}
}

func TestRunsThatDoNotFit(t *testing.T) {
	for name, s := range map[string]survey{
		"too few":     {count: 3, firstNS: 0, odd: []odd{{ns: 10 * second, sinceNS: 5 * second}}},
		"out of step": {count: 9, firstNS: 0, odd: []odd{{ns: 10*second + 1, sinceNS: 5 * second}}},
		"backwards":   {count: 9, firstNS: 10 * second, odd: []odd{{ns: 11 * second, sinceNS: 5 * second}}},
	} {
		if r, err := s.runs(second); err == nil {
			t.Errorf("%s: %v", name, r)
		}
	}
}
