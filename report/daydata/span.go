package daydata

import (
	"fmt"
	"time"

	"sashlog/configs/site"
)

// spanQuantities are what a protected room tells of a day or week as a mean.
var spanQuantities = []string{"temp_c", "comfort_low_c", "comfort_high_c", "rh_pct"}

// spanSeries names the series of a protected room's spans: the first day as a
// number from 0, means, and the minutes of each outcome.
func spanSeries(outcomes int) []Series {
	out := []Series{{"first_day", 1}}
	for _, key := range spanQuantities {
		for _, q := range zoneSeries {
			if q.Key == key {
				out = append(out, q.Series)
			}
		}
	}
	for k := range outcomes {
		out = append(out, Series{fmt.Sprintf("outcome_%d_min", k), 1})
	}
	return out
}

// spans packs a protected room by day, or by week.
func (p *packer) spans(z int) (text string, count int) {
	first, err := time.Parse("2006-01-02", p.data.FirstDay)
	if err != nil {
		panic(fmt.Sprintf("daydata: %v", err)) // we wrote it ourselves
	}
	day := func(d int) site.Date { return site.DateOf(first.AddDate(0, 0, d)) }
	columns := make([]column, len(p.data.Span))
	add := func(k int, v, scale float64) { columns[k] = append(columns[k], packed(v, scale)) }
	days := len(p.data.Days) - 1
	for from := 0; from < days; {
		to := from + 1
		for to < days && p.in.Rule.SameSpan(z, day(from), day(to)) {
			to++
		}
		a, b := p.data.Days[from], p.data.Days[to]
		k := 0
		add(k, float64(from), 1)
		for _, key := range spanQuantities {
			for _, q := range zoneSeries {
				if q.Key == key {
					k++
					add(k, p.mean(q.of(p, z), a, b), q.Scale)
				}
			}
		}
		for outcome := range p.in.Outcomes {
			k++
			add(k, p.minutes(z, outcome, a, b), 1)
		}
		from = to
		count++
	}
	return block(columns), count
}

// mean is the mean of the known values of steps [from, to).
func (p *packer) mean(of source, from, to int) float64 {
	if of == nil {
		return unknown()
	}
	sum, n := 0.0, 0
	a, _ := p.grids(from)
	_, b := p.grids(to - 1)
	for i := a; i < b; i++ {
		if v := of(i); v == v {
			sum += v
			n++
		}
	}
	return sum / float64(n)
}

// minutes is how long an outcome lasted in steps [from, to).
func (p *packer) minutes(z, outcome, from, to int) float64 {
	n := 0
	a, _ := p.grids(from)
	_, b := p.grids(to - 1)
	for i := a; i < b; i++ {
		if p.in.Outcome(z, i) == outcome {
			n++
		}
	}
	return float64(int64(n)*p.in.Grid.StepS) / 60
}
