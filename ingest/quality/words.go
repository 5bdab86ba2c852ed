package quality

import (
	"fmt"
	"slices"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// zoneOf returns the zone of a point, -1 when it belongs to plant or site.
func zoneOf(s *site.Site, point int) int {
	if p := &s.Points[point]; p.Owner == site.OwnerZone {
		return p.Index
	}
	return -1
}

func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// median of values; of an even number the mean of the two in the middle, 0 of
// none. It sorts its argument.
func median(v []float64) float64 {
	if len(v) == 0 {
		return 0
	}
	slices.Sort(v)
	m := len(v) / 2
	if len(v)%2 == 1 {
		return v[m]
	}
	return (v[m-1] + v[m]) / 2
}

func day(unixS int64, loc *time.Location) string {
	return time.Unix(unixS, 0).In(loc).Format("2006-01-02")
}

func minute(unixS int64, loc *time.Location) string {
	return time.Unix(unixS, 0).In(loc).Format("2006-01-02 15:04")
}

// span words a half-open time as its first and last local day.
func span(fromUTC, toUTC int64, loc *time.Location) string {
	a, b := day(fromUTC, loc), day(toUTC-1, loc)
	if a == b {
		return "on " + a
	}
	return "from " + a + " to " + b
}

func warn(kind reading.CheckKind, zone int, points []int, evidence, do string) reading.Check {
	return reading.Check{Kind: kind, Points: points, Zone: zone, Effect: reading.EffectWarned, Evidence: evidence, DoNext: do}
}

// unitWords is how a canonical unit is printed; differences of temperature are
// in kelvin but read well enough in degrees.
func unitWords(unit string) string {
	if unit == "degC" {
		return "°C"
	}
	return unit
}
