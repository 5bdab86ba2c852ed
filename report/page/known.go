package page

import (
	"time"

	"sashlog/analyze/calendar"
	"sashlog/configs/site"
	"sashlog/report/chart"
)

// knownCalendar shows which kinds of readings were known on which days.
func (b *builder) knownCalendar() block {
	g := b.in.Grid
	d := chart.KnownCalendarData{Caption: chart.Caption{Title: "What was known on each day, by kind of reading", Desc: "A row per kind of reading, a mark per day."}}
	days := b.in.Results.Calendar
	if days == nil {
		days = calendar.Of(g)
	}
	var order []site.Quantity
	points := map[site.Quantity][]int{}
	for i := range b.in.Site.Points {
		q := b.in.Site.Points[i].Quantity
		if points[q] == nil {
			order = append(order, q)
		}
		points[q] = append(points[q], i)
	}
	for _, q := range order[:min(len(order), 24)] {
		trait, _ := q.Trait()
		row := chart.KnownRow{Name: trait.Words}
		for _, day := range days.Days {
			from, to := max(day.FromStep, g.PeriodFrom), min(day.ToStep, g.PeriodTo)
			if to <= from {
				continue
			}
			if d.FirstDay.IsZero() {
				d.FirstDay = time.Date(day.Date.Year, day.Date.Month, day.Date.Day, 0, 0, 0, 0, time.UTC)
			}
			covered := 0.0
			for _, p := range points[q] {
				if c := &g.Columns[p]; c.Mean != nil {
					for _, s := range c.CoveredS[from:to] {
						covered += float64(s)
					}
				}
			}
			row.Days = append(row.Days, covered/float64(int64(to-from)*g.StepS*int64(len(points[q]))))
		}
		d.Rows = append(d.Rows, row)
	}
	return b.draw("known-calendar", "What was known on each day, by kind of reading: the share of the day with usable readings, over all points of the kind. Orange is when nothing was known.",
		"No point is mapped, so there is nothing to show by day.",
		func(o chart.Options) (chart.SVG, error) { return chart.KnownCalendar(d, o) })
}
