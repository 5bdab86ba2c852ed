package guess

import (
	"context"
	"fmt"
	"math"
	"path"
	"sort"

	"sashlog/configs/site"
	"sashlog/ingest/clock"
)

// times reads the time of rows: seconds on the written clock. Zones do not
// matter yet; a person names the site's.
type times struct {
	s        *shape
	parser   *clock.Parser
	offsets  map[int64]int // written offsets met, with the rows that carry them
	lastText []byte
	last     int64
}

func newTimes(s *shape) (*times, error) {
	o := s.order
	if o == "" {
		o = site.DMY // only for what has no order, or in doubt
	}
	p, err := clock.NewParser(o, s.log.TimeFormat, s.date1904)
	return &times{s: s, parser: p, offsets: map[int64]int{}}, err
}

func (t *times) at(cells [][]byte) (int64, bool) {
	if t.s.undated {
		return 0, false
	}
	fr := t.s.rows.Frame()
	var st clock.Stamp
	f := clock.Unreadable
	switch {
	case fr.Time >= 0 && fr.Time < len(cells):
		if len(t.lastText) > 0 && string(cells[fr.Time]) == string(t.lastText) {
			return t.last, true
		}
		if st, f = t.parser.Parse(cells[fr.Time]); f == clock.Fine {
			t.lastText = append(t.lastText[:0], cells[fr.Time]...)
		}
	case fr.Date >= 0 && max(fr.Date, fr.Clock) < len(cells):
		st, f = t.parser.ParseSplit(cells[fr.Date], cells[fr.Clock])
	}
	if f != clock.Fine {
		return 0, false
	}
	if st.HasOffset {
		t.offsets[st.OffsetS]++
	}
	t.last = st.WallS
	return st.WallS, true
}

// pace tells how the times of a file or of one column go on.
type pace struct {
	n, equal, back int
	first, last    int64
	prev           int64
	steps          map[int64]int
}

func (p *pace) add(t int64) {
	if p.n == 0 {
		p.first, p.last, p.steps = t, t, map[int64]int{}
	} else {
		switch d := t - p.prev; {
		case d == 0:
			p.equal++
		case d < -2*3600:
			p.back++
		case d > 0:
			if len(p.steps) < 400 || p.steps[d] > 0 {
				p.steps[d]++
			}
		}
	}
	p.n++
	p.prev = t
	p.first, p.last = min(p.first, t), max(p.last, t)
}

// usual is the most frequent step in seconds, 0 when there is none.
func (p *pace) usual() int64 {
	best, most := int64(0), 0
	for d, n := range p.steps {
		if n > most || n == most && d < best {
			best, most = d, n
		}
	}
	return best
}

// share is the share of steps within a tenth of the usual one.
func (p *pace) share() float64 {
	u := p.usual()
	near, all := 0, 0
	for d, n := range p.steps {
		all += n
		if math.Abs(float64(d-u)) <= 0.1*float64(u)+2 {
			near += n
		}
	}
	if all == 0 {
		return 0
	}
	return float64(near) / float64(all)
}

// findOrder settles the order of day and month with its proof in words: a
// number above 12 where a month would stand, or which order lets the rows
// follow each other. Where neither tells, it stays open.
func (s *shape) findOrder(ctx context.Context) error {
	pr := s.rows.Prover()
	if !pr.Needed {
		return nil
	}
	if _, _, ok := pr.Proven(); !ok {
		if err := s.rows.ScanOrder(ctx); err != nil {
			return err
		}
	}
	if o, proof, ok := pr.Proven(); ok {
		s.order, s.proof = o, proof
		return nil
	}
	if c := pr.Contradiction(); c != "" {
		s.doubtful, s.proof = true, c
		return nil
	}
	leaps := map[site.DateOrder]int{}
	steps := 0
	for _, o := range []site.DateOrder{site.DMY, site.MDY} {
		n, all, err := s.leaps(ctx, o)
		if err != nil {
			return err
		}
		leaps[o], steps = n, all
	}
	d, m := leaps[site.DMY], leaps[site.MDY]
	switch {
	case steps > 20 && m >= 3 && d*10 <= m:
		s.order = site.DMY
		s.proof = fmt.Sprintf("day before month (read month first the rows would leap %d times by days or backwards, read day first %d times)", m, d)
	case steps > 20 && d >= 3 && m*10 <= d:
		s.order = site.MDY
		s.proof = fmt.Sprintf("month before day (read day first the rows would leap %d times by days or backwards, read month first %d times)", d, m)
	case pr.OnlyDotted():
		s.order, s.proof = site.DMY, "dates with points are day first (common practice)"
	default:
		s.doubtful = true
		s.proof = "no date has a number above 12 where only a day can stand, and either order lets the rows follow each other"
	}
	return nil
}

// leaps counts steps of more than two days or backwards by more than two
// hours when dates are read in an order.
func (s *shape) leaps(ctx context.Context, o site.DateOrder) (leaps, steps int, err error) {
	t := &times{s: s, offsets: map[int64]int{}}
	if t.parser, err = clock.NewParser(o, s.log.TimeFormat, s.date1904); err != nil {
		return 0, 0, err
	}
	prev, begun := int64(0), false
	err = s.rows.Rows(ctx, func(_ int64, cells [][]byte) bool {
		now, ok := t.at(cells)
		if !ok {
			return true
		}
		if begun && now != prev {
			steps++
			if d := now - prev; d > 2*86400 || d < -2*3600 {
				leaps++
			}
		}
		prev, begun = now, true
		return true
	})
	return leaps, steps, err
}

// besideDates adds to logs whose order of day and month is open what the logs
// in the same folder prove: a hint, since nothing says they were written alike.
func (p *Proposal) besideDates() {
	for _, l := range p.Logs {
		if !l.DateOpen {
			continue
		}
		for _, o := range p.Logs {
			if o != l && !o.DateOpen && o.Setting.DateOrder != "" && path.Dir(o.Setting.Path) == path.Dir(l.Setting.Path) {
				l.DateProof += fmt.Sprintf("; %s beside it is %s", o.Name, o.Setting.DateOrder)
				break
			}
		}
	}
}

// clockOf proposes the log's clock from what is written in its times.
func (t *times) clockOf(name string) (setting, why string) {
	if off, ok := clock.OffsetIn(name); ok {
		return off, fmt.Sprintf("the time column is called %q", name)
	}
	if len(t.offsets) > 0 {
		var list []int64
		for o := range t.offsets {
			list = append(list, o)
		}
		sort.Slice(list, func(i, j int) bool { return list[i] < list[j] })
		if len(list) == 1 && list[0] == 0 {
			return "utc", "its times carry the offset zero"
		}
		words := ""
		for i, o := range list {
			if i > 0 {
				words += " and "
			}
			words += offsetText(o)
		}
		return "local", "its times carry the offset " + words
	}
	for _, k := range tokens(name) {
		if k.fold == "utc" || k.fold == "gmt" || k.fold == "zulu" {
			return "utc", fmt.Sprintf("the time column is called %q", name)
		}
	}
	return "local", ""
}

func offsetText(s int64) string {
	sign := '+'
	if s < 0 {
		sign, s = '-', -s
	}
	return fmt.Sprintf("%c%02d:%02d", sign, s/3600, s/60%60)
}
