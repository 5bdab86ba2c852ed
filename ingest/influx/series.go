package influx

import (
	"context"
	"fmt"
	"math"
	"slices"
	"time"

	"github.com/influxdata/influxdb-client-go/v2/api/query"
)

// tagsMost is how many tag values one query names.
const tagsMost = 100

// span is a range of instants, unix seconds, half-open.
type span struct{ from, to int64 }

// The years a reading can lie in; the server is asked for nothing beyond.
const (
	spanLeast = -2208988800 // 1900
	spanMost  = 7258118400  // 2200
)

// found is what the database holds of one tag value of a place.
type found struct {
	series      int // sets of tags that carry the value
	first, last int64
	number      bool // the field is a number, not text or a truth value
	whole       bool // the field is an integer
}

// inventory asks which tag values a place has, since when and until when.
func (c *conn) inventory(ctx context.Context, pl place) (map[string]*found, error) {
	out := map[string]*found{}
	src := c.source(pl, nil, spanLeast, spanMost)
	for _, end := range []string{"first", "last"} {
		err := c.steadily(ctx, func() error {
			seen := map[string]int{}
			return c.rows(ctx, src+" |> "+end+"()\n", func(r *query.FluxRecord) error {
				tag, ok := r.ValueByKey(c.in.PointTag).(string)
				if !ok {
					return nil // a series without the tag
				}
				t, err := instant(r)
				if err != nil {
					return err
				}
				f := out[tag]
				if f == nil {
					f = &found{first: math.MaxInt64, last: math.MinInt64, number: true}
					out[tag] = f
				}
				seen[tag]++
				f.series = max(f.series, seen[tag])
				f.first, f.last = min(f.first, floorS(t)), max(f.last, floorS(t))
				switch r.Value().(type) {
				case float64:
				case int64, uint64:
					f.whole = true
				default:
					f.number = false
				}
				return nil
			})
		})
		if err != nil {
			return nil, at(fmt.Sprintf("looking for measurement %q", pl.measurement), err)
		}
	}
	return out, nil
}

// instant is the time of a row in nanoseconds.
func instant(r *query.FluxRecord) (int64, error) {
	t, ok := r.ValueByKey("_time").(time.Time)
	if !ok {
		return 0, brokenOff{fmt.Errorf("a row without a time")}
	}
	return t.UnixNano(), nil
}

const second = int64(time.Second)

func floorS(ns int64) int64 { return floorDiv(ns, second) }

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b != 0 && (a < 0) != (b < 0) {
		q--
	}
	return q
}

// counts asks how many readings each tag value has in a span; values without
// any are absent.
func (c *conn) counts(ctx context.Context, pl place, values []string, s span) (map[string]int64, error) {
	var out map[string]int64
	flux := c.source(pl, values, s.from, s.to) + " |> count()\n" + c.columns("_value")
	err := c.steadily(ctx, func() error {
		out = map[string]int64{}
		return c.rows(ctx, flux, func(r *query.FluxRecord) error {
			tag, ok := r.ValueByKey(c.in.PointTag).(string)
			n, isInt := r.Value().(int64)
			if !ok || !isInt {
				return brokenOff{fmt.Errorf("a count without a point or number")}
			}
			out[tag] += n
			return nil
		})
	})
	return out, err
}

// months cuts a span at the beginnings of months in universal time.
func months(s span) []span {
	var out []span
	for from := s.from; from < s.to; {
		t := time.Unix(from, 0).UTC()
		to := min(s.to, time.Date(t.Year(), t.Month()+1, 1, 0, 0, 0, 0, time.UTC).Unix())
		out = append(out, span{from, to})
		from = to
	}
	return out
}

func (s span) month() string { return time.Unix(s.from, 0).UTC().Format("January 2006") }

// chunks cuts a list into pieces of at most n.
func chunks[T any](list []T, n int) [][]T { return slices.Collect(slices.Chunk(list, n)) }
