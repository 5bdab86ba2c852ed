package sources

import (
	"context"
	"fmt"

	"sashlog/configs/site"
	"sashlog/ingest/influx"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

// database sets up the source of a log that is kept in an InfluxDB.
func (o *opener) database(ctx context.Context, li int) error {
	log := &o.site.Logs[li]
	var points []int
	for i := range o.site.Points {
		if means(o.site.Points[i].Source, log.Name) {
			o.sourced[i] = true
			points = append(points, i)
		}
	}
	if len(points) == 0 {
		o.problem(Problem{Kind: NoPoint, Where: reading.Where{File: log.Name}, Point: -1, Log: li, Count: 1, Text: fmt.Sprintf("no point is mapped to the database %q", log.Name)})
		return nil
	}
	src, unmet, err := influx.Open(ctx, o.site, log, points)
	if err != nil {
		if ctx.Err() != nil {
			return ctx.Err()
		}
		o.problem(Problem{Kind: Unreadable, Where: reading.Where{File: log.Name}, Point: -1, Log: li, Count: 1, Text: err.Error(), Err: err})
		return nil
	}
	for _, u := range unmet {
		p := &o.site.Points[u.Point]
		hint := ""
		if n := tabular.Nearest(p.Column, u.Near); n != "" {
			hint = fmt.Sprintf("did you mean %q", n)
		} else if len(u.Near) > 0 {
			hint = "it holds " + few(u.Near)
		}
		o.found[u.Point] = true // told here
		o.problem(Problem{Kind: NoColumn, Where: reading.Where{File: "points.csv", Line: int64(p.Line)}, Point: u.Point, Log: -1, Count: 1, Text: u.Text, Hint: hint})
	}
	for _, i := range src.Points() {
		o.found[i] = true
	}
	if len(src.Points()) > 0 {
		o.set.Sources = append(o.set.Sources, src)
	}
	return nil
}

// Own returns a copy of the site whose points and period a source may change
// without anybody else seeing it.
func Own(s *site.Site) *site.Site {
	c := *s
	c.Points = append([]site.Point(nil), s.Points...)
	return &c
}
