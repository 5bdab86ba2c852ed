package running

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/indoor"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// occupiedOf settles occupied time of zone z: its occupied times less holidays
// and closures, or what a counter or presence sensor says. Where such a sensor
// is silent occupancy is unknown.
func occupiedOf(s *site.Site, g *grid.Grid, cal *calendar.Calendar, z int, in *indoor.Zone) []Occupancy {
	zone := &s.Zones[z]
	source := s.Occupancy.Source
	if zone.OccupancySource != "" {
		source = zone.OccupancySource
	}
	if source == site.ByPresence {
		return byPresence(g, in)
	}
	times := s.Occupancy.Times
	if zone.Occupied != nil {
		times = zone.Occupied
	}
	holiday := map[site.Date]bool{}
	for _, d := range s.Occupancy.Holidays {
		holiday[d] = true
	}
	out := make([]Occupancy, g.N)
	for _, day := range cal.Days {
		if holiday[day.Date] {
			continue
		}
		for _, t := range times {
			if !t.Days[day.Weekday] {
				continue
			}
			for i := day.FromStep; i < day.ToStep; i++ {
				if m := int(cal.MinuteOfDay[i]); m >= t.FromMin && m < t.ToMin {
					out[i] = Occupied
				}
			}
		}
	}
	for _, e := range s.Diary {
		if e.Kind != site.EventClosure || !concerns(e, zone.ID) {
			continue
		}
		for i := max(0, g.Index(e.FromUTC)); i < min(g.N, g.Index(e.ToUTC)); i++ {
			out[i] = Vacant
		}
	}
	return out
}

func concerns(e site.Event, zoneID string) bool {
	if len(e.Zones) == 0 {
		return true
	}
	for _, id := range e.Zones {
		if id == zoneID {
			return true
		}
	}
	return false
}

// byPresence takes a step as occupied when someone was seen in it: half a
// person counted on average, or the presence sensor on for half the time.
func byPresence(g *grid.Grid, in *indoor.Zone) []Occupancy {
	out := make([]Occupancy, g.N)
	for i := range out {
		out[i] = OccupancyUnknown
		for _, series := range [][]float32{in.People, in.Presence} {
			if series == nil || math.IsNaN(float64(series[i])) {
				continue
			}
			if series[i] >= 0.5 {
				out[i] = Occupied
			} else if out[i] == OccupancyUnknown {
				out[i] = Vacant
			}
		}
	}
	return out
}
