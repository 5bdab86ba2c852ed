package table

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
		if got := sameSpan(day(c.a), day(c.b), c.weeks); got != c.want {
			t.Errorf("%d and %d, weeks %v: %v", c.a, c.b, c.weeks, got)
		}
	}
}
