package schedule

import (
	"math/bits"
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/configs/site"
)

// Patterns counted by hand: five weekdays give 10 + 10 ways to take two or
// three, four give 6, one gives 2; weeks always 2.
func TestPatterns(t *testing.T) {
	for _, c := range []struct {
		design Design
		days   Weekdays
		want   int
	}{{ByDays, 0b0111110, 20}, {ByDays, 0b0011110, 6}, {ByDays, 0b0000010, 2}, {ByWeeks, 0b0111110, 2}} {
		if got := len(c.design.Patterns(c.days)); got != c.want {
			t.Errorf("%s of %07b: %d patterns, want %d", c.design, c.days, got, c.want)
		}
	}
}

// Whatever is drawn, each weekday of a fortnight is on trial once and as usual
// once, a week of days holds half of them, the check agrees, and the same seed
// draws the same days.
func TestDrawn(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		design := rapid.SampledFrom(Designs()).Draw(t, "design")
		days := Weekdays(rapid.IntRange(1, 127).Draw(t, "weekdays"))
		seed, blocks := rapid.Uint64().Draw(t, "seed"), rapid.IntRange(1, 9).Draw(t, "blocks")
		from := Monday(AddDays(site.Date{Year: 2026, Month: 1, Day: 1}, rapid.IntRange(0, 700).Draw(t, "from")))
		if Weekday(from) != time.Monday {
			t.Fatalf("%s is a %s", from, Weekday(from))
		}
		s := Schedule{Design: design, Seed: seed, Days: Draw(design, seed, from, blocks, days, nil)}
		if p := s.Check(); len(p) > 0 {
			t.Fatalf("%+v", p)
		}
		if len(s.Days) != 2*blocks*bits.OnesCount8(uint8(days)) || s.Weekdays() != days {
			t.Fatalf("%d days of %07b", len(s.Days), s.Weekdays())
		}
		type cell struct {
			block int
			day   time.Weekday
		}
		onTrial := map[cell]int{}
		perWeek := map[[2]int]int{}
		for _, d := range s.Days {
			if d.Trial {
				onTrial[cell{d.Block, Weekday(d.Date)}]++
				perWeek[[2]int{d.Block, d.Week}]++
			}
		}
		for c, n := range onTrial {
			if n != 1 {
				t.Fatalf("%v is on trial %d times", c, n)
			}
		}
		if len(onTrial) != len(s.Days)/2 {
			t.Fatalf("%d of %d days on trial", len(onTrial), len(s.Days))
		}
		if n := bits.OnesCount8(uint8(days)); design == ByDays {
			for w, k := range perWeek {
				if k != n/2 && k != (n+1)/2 {
					t.Fatalf("week %v has %d of %d days on trial", w, k, n)
				}
			}
		}
		// Any day turned round cannot have been drawn: its weekday would be on
		// trial twice or never.
		k := rapid.IntRange(0, len(s.Days)-1).Draw(t, "turned")
		s.Days[k].Trial = !s.Days[k].Trial
		if len(s.Check()) == 0 {
			t.Fatalf("day %d turned round was not seen", k)
		}
	})
}

// Days off are left out, and the others keep what was drawn for them.
func TestDaysOff(t *testing.T) {
	from, off := site.Date{Year: 2026, Month: 5, Day: 4}, site.Date{Year: 2026, Month: 5, Day: 14}
	all := Draw(ByDays, 7, from, 2, 0b0111110, nil)
	some := Draw(ByDays, 7, from, 2, 0b0111110, []site.Date{off})
	k := 0
	for _, d := range all {
		if d.Date == off {
			continue
		}
		if some[k] != d {
			t.Fatalf("%+v, want %+v", some[k], d)
		}
		k++
	}
	s := Schedule{Design: ByDays, Days: some}
	if k != len(some) || len(s.Check()) != 0 {
		t.Errorf("%d of %d days, %+v", k, len(some), s.Check())
	}
}
