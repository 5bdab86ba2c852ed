package afterhours

import "sashlog/analyze/calendar"

// night is the purge hours from one evening to the next morning.
type night struct {
	day      int // calendar day of the evening
	from, to int // steps, half-open
}

// nightsOf lists the nights wholly within the period, from the evening's
// PurgeFromH to the next morning's PurgeToH.
func nightsOf(in *Input, cal *calendar.Calendar) []night {
	fromMin, toMin := int(in.Criteria.PurgeFromH*60), int(in.Criteria.PurgeToH*60)
	var out []night
	for d := range cal.Days {
		n := night{day: d, from: firstAt(cal, d, fromMin)}
		switch {
		case fromMin < toMin: // within one day
			n.to = firstAt(cal, d, toMin)
		case d+1 < len(cal.Days):
			n.to = firstAt(cal, d+1, toMin)
		default:
			continue
		}
		if n.from < in.Grid.PeriodFrom || n.to > in.Grid.PeriodTo || n.to <= n.from {
			continue
		}
		out = append(out, n)
	}
	return out
}

// firstAt is the first step of a day at or after a local minute, the day's end
// when there is none.
func firstAt(cal *calendar.Calendar, day, minute int) int {
	d := cal.Days[day]
	for i := d.FromStep; i < d.ToStep; i++ {
		if int(cal.MinuteOfDay[i]) >= minute {
			return i
		}
	}
	return d.ToStep
}
