package influx

import (
	"context"
	"fmt"
	"strconv"

	"github.com/influxdata/influxdb-client-go/v2/api/query"
)

// readings fetches a job as logged. The answer counts only when it holds as
// many readings of each point as the server counts.
func (c *conn) readings(ctx context.Context, j *job) ([]fetched, error) {
	flux := c.source(j.points[0].place, tags(j.points), j.span.from, j.span.to) + c.columns("_time", "_value")
	for _, p := range j.points {
		if p.series > 1 { // their rows come one series after the other
			flux += ` |> sort(columns: ["_time"])` + "\n"
			break
		}
	}
	var out []fetched
	err := c.steadily(ctx, func() error {
		got, err := c.raw(ctx, j.points, j.want, flux)
		if err != nil {
			return err
		}
		if !whole(got, j.want) {
			// Readings may have been written since they were counted.
			want, err := c.counts(ctx, j.points[0].place, tags(j.points), j.span)
			if err != nil {
				return err
			}
			j.want = want
			if !whole(got, want) {
				return partial(total(got), sum(want))
			}
		}
		out = got
		return nil
	})
	return out, err
}

// raw sends one query and sorts its rows by point.
func (c *conn) raw(ctx context.Context, points []*point, want map[string]int64, flux string) ([]fetched, error) {
	out := make([]fetched, len(points))
	byTag := make(map[string]*fetched, len(points))
	for i, p := range points {
		out[i].point = p
		byTag[p.tag] = &out[i]
		if p.number && want != nil {
			out[i].numbers = make([]number, 0, want[p.tag])
		}
	}
	var last *fetched
	err := c.rows(ctx, flux, func(r *query.FluxRecord) error {
		tag, _ := r.ValueByKey(c.in.PointTag).(string)
		if last == nil || last.point.tag != tag {
			if last = byTag[tag]; last == nil {
				return brokenOff{fmt.Errorf("a reading of %q, which nobody asked for", tag)}
			}
		}
		t, err := instant(r)
		if err != nil {
			return err
		}
		last.add(floorS(t), r.Value())
		return nil
	})
	return out, err
}

func (f *fetched) add(t int64, v any) {
	switch v := v.(type) {
	case float64:
		f.numbers = append(f.numbers, number{t, v})
	case int64:
		f.numbers = append(f.numbers, number{t, float64(v)})
	case uint64:
		f.numbers = append(f.numbers, number{t, float64(v)})
	case bool:
		f.texts = append(f.texts, text{t, strconv.FormatBool(v)})
	case string:
		f.texts = append(f.texts, text{t, v})
	case nil: // an empty text
		f.texts = append(f.texts, text{t, ""})
	default:
		f.texts = append(f.texts, text{t, fmt.Sprint(v)})
	}
}

func (f *fetched) rows() int64 { return int64(len(f.numbers) + len(f.texts)) }

func whole(got []fetched, want map[string]int64) bool {
	for i := range got {
		if got[i].rows() != want[got[i].point.tag] {
			return false
		}
	}
	return true
}

func total(got []fetched) (n int64) {
	for i := range got {
		n += got[i].rows()
	}
	return n
}

func sum(want map[string]int64) (n int64) {
	for _, k := range want {
		n += k
	}
	return n
}
