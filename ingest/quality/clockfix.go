package quality

import (
	"fmt"

	"sashlog/configs/site"
	"sashlog/ingest/clock/lag"
)

// correction is what the site file must say of a log's clock for its times to
// be read right.
func (c *clockRun) correction(l *logSeries, f *lag.Finding) string {
	stated := site.Clock{Kind: site.ClockLocal}
	if log := c.logOf(l.name); log != nil {
		stated = log.Clock
	}
	from := c.days[f.From].date
	to := c.days[f.To-1].date
	is := kindWord(&stated)
	follows, loc := c.daylightSaving(c.logOf(l.name))
	std := standardS(c.grid.Time(c.days[f.From].from).In(loc))
	switch f.Kind {
	case lag.ForATime:
		return fmt.Sprintf("clock: {is: %s, shifts: [{from: %v, to: %v, shift_min: %+.0f}]}", is, from, to, -f.ShiftMin)
	case lag.Drift:
		return fmt.Sprintf("clock: {is: %s, shifts: [{from: %v, to: %v, shift_min: 0, end_shift_min: %+.0f}]}", is, from, to, -f.EndShiftMin)
	}
	k := int(f.ShiftMin) * 60
	offset := std // of the stated clock outside daylight saving
	switch stated.Kind {
	case site.ClockUTC:
		offset = 0
	case site.ClockOffset:
		offset = stated.OffsetS
	}
	trueFollows := follows != (f.Kind == lag.Seasonal)
	offset += k
	switch {
	case trueFollows && offset == std:
		return "clock: local"
	case trueFollows:
		if stated.Kind != site.ClockZone {
			is = "local"
		}
		return fmt.Sprintf("clock: {is: %s, shift_min: %+d}", is, (std-offset)/60)
	case offset == std && loc == c.grid.Loc:
		return "clock: standard"
	case offset == 0:
		return "clock: utc"
	}
	return fmt.Sprintf("clock: %q", site.OffsetWords(offset))
}

func kindWord(c *site.Clock) string {
	switch c.Kind {
	case site.ClockOffset:
		return fmt.Sprintf("%q", site.OffsetWords(c.OffsetS))
	case site.ClockZone:
		return c.Zone.String()
	case "":
		return string(site.ClockLocal)
	}
	return string(c.Kind)
}
