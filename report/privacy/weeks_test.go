package privacy

import (
	"testing"

	"sashlog/configs/site"
)

// Days of a room whose presence is measured are told by weeks from Monday:
// 2025-07-13 is a Sunday.
func TestWeeks(t *testing.T) {
	day := func(d int) site.Date { return site.Date{Year: 2025, Month: 7, Day: d} }
	for _, c := range []struct {
		a, b  int
		weeks bool
		want  bool
	}{{7, 7, false, true}, {7, 8, false, false}, {7, 13, true, true}, {13, 14, true, false}, {14, 20, true, true}} {
		s := &site.Site{Zones: []site.Zone{{ID: "a", People: 2}}}
		if c.weeks {
			s.Zones[0].OccupancySource = site.ByPresence
		}
		if got := For(s).SameSpan(0, day(c.a), day(c.b)); got != c.want {
			t.Errorf("%d and %d, weeks %v: %v", c.a, c.b, c.weeks, got)
		}
	}
	site := &site.Site{Zones: []site.Zone{{ID: "a", People: 2}, {ID: "b", People: 20}}, Occupancy: site.Occupancy{Source: site.ByPresence}}
	if r := For(site); !r.ByWeek(0) || r.ByWeek(1) {
		t.Error("with presence measured everywhere the room for two is told by week, the one for twenty is not protected")
	}
}
