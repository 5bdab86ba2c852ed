package influx

import (
	"context"
	"fmt"
	"math"
	"net/url"
	"slices"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Source is one log kept in an InfluxDB; it satisfies reading.Source. Read may
// be called more than once and then asks the server again.
type Source struct {
	name   string
	site   *site.Site
	log    *site.Log
	conn   *conn
	points []*point // in order of place, then of the points table
	span   span
	server string

	file  reading.FileLedger
	notes []reading.ClockNote
}

// point is one point of the site and its series.
type point struct {
	index int
	place place
	tag   string
	found

	means     bool
	why       string // why it is read as logged
	intervalS int64  // usual time between readings, 0 when unknown
	shiftS    int64  // values stamped with the end of their interval belong so much earlier; means only
}

// Unmet is a point whose series the database does not hold, with the tag
// values that it does hold there.
type Unmet struct {
	Point int
	Text  string
	Near  []string
}

// Open finds the series of the points of a log and decides how each is read.
// Points read as means are changed in the site to how they are handed over:
// sampled, stamped at the start of a step, with a hold that covers it; the
// caller passes a site of its own. The site's period, where given, bounds what
// is asked for.
func Open(ctx context.Context, s *site.Site, log *site.Log, points []int) (*Source, []Unmet, error) {
	src := &Source{site: s, log: log, conn: connect(log.Influx), name: nameOf(log.Influx)}
	byPlace := map[place][]*point{}
	var places []place
	var unmet []Unmet
	taken := map[place]map[string]int{}
	for _, i := range points {
		m, f, tag := log.Influx.Series(s.Points[i].Column)
		pl := place{m, f}
		if byPlace[pl] == nil {
			places = append(places, pl)
			taken[pl] = map[string]int{}
		}
		if first, twice := taken[pl][tag]; twice {
			unmet = append(unmet, Unmet{Point: i, Text: fmt.Sprintf("column %q is the series that column %q is already", s.Points[i].Column, s.Points[first].Column)})
			continue
		}
		taken[pl][tag] = i
		byPlace[pl] = append(byPlace[pl], &point{index: i, place: pl, tag: tag})
	}
	all := span{math.MaxInt64, math.MinInt64}
	for _, pl := range places {
		have, err := src.conn.inventory(ctx, pl)
		if err != nil {
			return nil, nil, err
		}
		for _, p := range byPlace[pl] {
			f := have[p.tag]
			if f == nil {
				unmet = append(unmet, src.unmet(p, have))
				continue
			}
			p.found = *f
			all.from, all.to = min(all.from, f.first), max(all.to, f.last+1)
			src.points = append(src.points, p)
		}
	}
	src.span = src.within(all)
	src.server = src.conn.version(ctx)
	if err := src.decide(ctx); err != nil {
		return nil, nil, err
	}
	return src, unmet, nil
}

// nameOf is how messages call a database: address without scheme, and bucket.
func nameOf(in *site.Influx) string {
	host := in.Address
	if u, err := url.Parse(in.Address); err == nil && u.Host != "" {
		host = u.Host
	}
	return "influx://" + host + "/" + in.Bucket
}

func (s *Source) unmet(p *point, have map[string]*found) Unmet {
	u := Unmet{Point: p.index, Text: fmt.Sprintf("no series of measurement %q, field %q has %s = %q", p.place.measurement, p.place.field, s.log.Influx.PointTag, p.tag)}
	if len(have) == 0 {
		u.Text = fmt.Sprintf("the bucket holds no readings of measurement %q, field %q with the tag %q", p.place.measurement, p.place.field, s.log.Influx.PointTag)
	}
	for tag := range have {
		u.Near = append(u.Near, tag)
	}
	slices.Sort(u.Near)
	return u
}

// tailS is read beyond the period's end: values stamped with the end of their
// interval belong before it.
const tailS = 3 * 3600

// within bounds what the database holds by the period that is asked for, with
// the days before it that running means need.
func (s *Source) within(all span) span {
	if all.to <= all.from {
		return span{}
	}
	loc := s.site.Location
	if from := s.site.Period.From; !from.IsZero() && loc != nil {
		from.Day -= grid.LeadDays // Start normalises
		all.from = max(all.from, from.Start(loc).Unix())
	}
	if to := s.site.Period.To; !to.IsZero() && loc != nil {
		all.to = min(all.to, to.Next().Start(loc).Unix()+tailS)
	}
	if c := s.log.Clock; c.Kind != site.ClockUTC || c.ShiftS != 0 || len(c.Shifts) > 0 {
		// What the database calls an instant is not one: take in what may
		// belong to the period.
		most := int64(c.MostS())
		all.from, all.to = all.from-most-36*3600, all.to+most+36*3600
	}
	if all.to <= all.from {
		return span{}
	}
	return span{max(all.from, spanLeast), min(all.to, spanMost)}
}

// Name implements reading.Source.
func (s *Source) Name() string { return s.name }

// Points implements reading.Source.
func (s *Source) Points() []int {
	var out []int
	for _, p := range s.points {
		out = append(out, p.index)
	}
	slices.Sort(out)
	return out
}

// Describe returns the account of what was read, valid after Read. Its
// checksum is of the readings as they came, since a database has no bytes of
// its own.
func (s *Source) Describe() reading.FileLedger { return s.file }

// ClockNotes says what the clock met, valid after Read.
func (s *Source) ClockNotes() []reading.ClockNote { return s.notes }

// Close gives up the connection.
func (s *Source) Close() { s.conn.close() }

// dialect says in words how the points were read.
func (s *Source) dialect() []string {
	what := "InfluxDB"
	if s.server != "" {
		what += " " + s.server
	}
	out := []string{what + ", asked in Flux, month by month", "every month's number of readings is the one the server counted"}
	n, why, order := 0, map[string]int{}, []string(nil)
	for _, p := range s.points {
		if p.means {
			n++
			continue
		}
		if why[p.why]++; why[p.why] == 1 {
			order = append(order, p.why)
		}
	}
	if n > 0 {
		out = append(out, fmt.Sprintf("%s as means over %d s by the server, as logged where a reading is missing or odd", count(n), s.site.StepS))
	}
	slices.Sort(order)
	for _, w := range order {
		out = append(out, strings.TrimSpace(count(why[w])+" as logged "+w))
	}
	return out
}

func count(n int) string {
	if n == 1 {
		return "1 point"
	}
	return fmt.Sprintf("%d points", n)
}
