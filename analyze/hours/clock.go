package hours

import (
	"sashlog/analyze/calendar"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Clock lists the local clock hours of the period and gives each step's hour
// (index into the list, -1 outside the period). A repeated hour of the clock
// is two hours; a skipped one is none.
func Clock(g *grid.Grid, cal *calendar.Calendar) (list []Hour, hourOf []int32) {
	hourOf = make([]int32, g.N)
	for i := range hourOf {
		hourOf[i] = -1
	}
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		t := g.Time(i)
		_, offset := t.Zone()
		if n := len(list); n == 0 || cal.MinuteOfDay[i]%60 == 0 || list[n-1].OffsetS != offset {
			list = append(list, Hour{StartUTC: g.StartUTC + int64(i)*g.StepS, OffsetS: offset,
				Date: site.DateOf(t), HourOfDay: t.Hour(), FromStep: i, ToStep: i})
		}
		list[len(list)-1].ToStep = i + 1
		hourOf[i] = int32(len(list) - 1)
	}
	return list, hourOf
}
