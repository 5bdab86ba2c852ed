package influx

import (
	"context"
	"sync"
)

const (
	// workers is how many jobs are fetched at once.
	workers = 2
	// rowsMost is about how many readings one job holds in memory; a single
	// point's month is never cut.
	rowsMost = 1 << 20
)

// job is one piece of reading: some points over a month or less. Jobs of one
// point follow each other in order of time.
type job struct {
	span   span
	points []*point         // of one place; as means: a single one
	want   map[string]int64 // as logged: the readings the server counted, by tag value
}

// fetched is what a job brought of one point: numbers, and what came as text,
// each in order of time.
type fetched struct {
	point   *point
	numbers []number
	texts   []text
}

type number struct {
	t int64 // unix seconds as the database has it
	x float64
}

type text struct {
	t int64
	s string
}

// plan lists the jobs, month by month.
func (s *Source) plan(ctx context.Context, points []*point) ([]job, error) {
	var raw, means []*point
	for _, p := range points {
		if p.means {
			means = append(means, p)
		} else {
			raw = append(raw, p)
		}
	}
	var jobs []job
	for _, m := range months(s.span) {
		for _, b := range batches(raw) {
			n, err := s.conn.counts(ctx, b[0].place, tags(b), m)
			if err != nil {
				return nil, at("the number of readings of "+m.month(), err)
			}
			jobs = append(jobs, cut(m, b, n)...)
		}
		for _, p := range means {
			if from, to := p.first-int64(s.site.StepS), p.last+int64(s.site.StepS); from < m.to && to > m.from {
				jobs = append(jobs, job{span: m, points: []*point{p}})
			}
		}
	}
	return jobs, nil
}

// cut makes jobs of a batch that fit into memory; points without readings
// drop out.
func cut(m span, b []*point, n map[string]int64) []job {
	var out []job
	var rows int64
	for _, p := range b {
		k := n[p.tag]
		if k == 0 {
			continue
		}
		if len(out) == 0 || rows+k > rowsMost {
			out = append(out, job{span: m, want: map[string]int64{}})
			rows = 0
		}
		j := &out[len(out)-1]
		j.points = append(j.points, p)
		j.want[p.tag] = k
		rows += k
	}
	return out
}

// run fetches the jobs, some at once, and hands them over in order.
func (s *Source) run(ctx context.Context, jobs []job, hand func([]fetched) error) error {
	ctx, cancel := context.WithCancel(ctx)
	var wg sync.WaitGroup
	defer wg.Wait()
	defer cancel()
	type answer struct {
		got []fetched
		err error
	}
	ahead := make(chan chan answer, workers-1)
	wg.Add(1)
	go func() {
		defer wg.Done()
		defer close(ahead)
		for i := range jobs {
			ch := make(chan answer, 1)
			select {
			case ahead <- ch:
			case <-ctx.Done():
				return
			}
			wg.Add(1)
			go func() {
				defer wg.Done()
				got, err := s.fetch(ctx, &jobs[i])
				ch <- answer{got, err}
			}()
		}
	}()
	for ch := range ahead {
		a := <-ch
		if a.err != nil {
			return a.err
		}
		if err := hand(a.got); err != nil {
			return err
		}
	}
	return ctx.Err()
}

func (s *Source) fetch(ctx context.Context, j *job) ([]fetched, error) {
	if j.want != nil {
		got, err := s.conn.readings(ctx, j)
		return got, at("readings of "+j.span.month(), err)
	}
	p := j.points[0]
	got, err := s.means(ctx, p, j.span)
	return []fetched{got}, at("means of "+p.tag+", "+j.span.month(), err)
}
