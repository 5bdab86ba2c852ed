package influx

import (
	"context"
	"fmt"
	"slices"
	"time"

	"github.com/influxdata/influxdb-client-go/v2/api/query"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// decide settles for each point whether the server averages it, and changes
// the site's points to how they are handed over.
func (s *Source) decide(ctx context.Context) error {
	var ask []*point
	for _, p := range s.points {
		if p.why = s.asLogged(p); p.why == "" {
			ask = append(ask, p)
		}
	}
	if s.span.to <= s.span.from {
		return nil
	}
	for _, b := range batches(ask) {
		first, err := s.conn.firstTimes(ctx, b, s.span)
		if err != nil {
			return at("the first readings", err)
		}
		for _, p := range b {
			p.intervalS = usualInterval(first[p.tag])
			p.why = s.asSampled(p)
			if p.why != "" {
				continue
			}
			p.means = true
			sp := &s.site.Points[p.index]
			if sp.Hold == 0 {
				sp.Hold = time.Duration(grid.UsualHoldS(p.intervalS)) * time.Second
			}
			if sp.Stamp == site.StampEnd {
				p.shiftS = p.intervalS
			}
			sp.Stamp = site.StampStart
		}
	}
	return nil
}

// asLogged is why a point must be read as logged, whatever its readings are;
// empty when they must be looked at.
func (s *Source) asLogged(p *point) string {
	sp := &s.site.Points[p.index]
	t, _ := sp.Quantity.Trait()
	c := s.log.Clock
	switch {
	case s.log.Influx.Read == site.InfluxRaw:
		return "(the site file says so)"
	case t.Kind == site.Switch || t.Kind == site.Status:
		return "(states)"
	case t.Kind == site.Angle:
		return "(directions)"
	case !p.number:
		return "(text)"
	case sp.Logging == site.COV:
		return "(change of value)"
	case sp.Quantity == site.Rain && site.RainPerInterval(sp.Unit):
		return "(amounts per interval)"
	case p.series > 1:
		return "(several series of one name)"
	case len(s.log.Missing) > 0:
		return "(the log has missing markers of its own)"
	case c.Kind != site.ClockUTC || c.ShiftS != 0 || len(c.Shifts) > 0:
		return "(the clock is corrected)"
	}
	return ""
}

// asSampled is why a point's readings do not suit means, by the usual interval
// between them.
func (s *Source) asSampled(p *point) string {
	step := int64(s.site.StepS)
	hold := int64(s.site.Points[p.index].Hold / time.Second)
	switch {
	case p.intervalS <= 0:
		return "(too few readings)"
	case p.intervalS >= step:
		return fmt.Sprintf("(logged no oftener than every %d s)", step)
	case step%p.intervalS != 0:
		return "(the interval does not divide a step)"
	case hold > 0 && hold < step:
		return "(values hold for less than a step)"
	}
	return ""
}

// usualInterval is the lower median of the differences between instants, as
// the grid takes it.
func usualInterval(t []int64) int64 {
	if len(t) < 2 {
		return 0
	}
	d := make([]int64, len(t)-1)
	for i := range d {
		d[i] = t[i+1] - t[i]
	}
	slices.Sort(d)
	return d[(len(d)-1)/2]
}

// firstTimes asks for the instants of the first readings in a span, seconds,
// by tag value.
func (c *conn) firstTimes(ctx context.Context, b []*point, s span) (map[string][]int64, error) {
	var out map[string][]int64
	flux := c.source(b[0].place, tags(b), s.from, s.to) + fmt.Sprintf(" |> limit(n: %d)\n", grid.IntervalSample) + c.columns("_time")
	err := c.steadily(ctx, func() error {
		out = map[string][]int64{}
		return c.rows(ctx, flux, func(r *query.FluxRecord) error {
			t, err := instant(r)
			tag, _ := r.ValueByKey(c.in.PointTag).(string)
			out[tag] = append(out[tag], floorS(t))
			return err
		})
	})
	return out, err
}

// batches groups points of one place, as many as one query names.
func batches(points []*point) [][]*point {
	var out [][]*point
	for i, p := range points {
		last := len(out) - 1
		if i == 0 || out[last][0].place != p.place || len(out[last]) == tagsMost {
			out = append(out, nil)
			last++
		}
		out[last] = append(out[last], p)
	}
	return out
}

func tags(b []*point) []string {
	out := make([]string, len(b))
	for i, p := range b {
		out[i] = p.tag
	}
	return out
}
