// Package schedule holds the schedule of a trial: which days run under the
// trial's setting and which as usual, and the rule they were drawn by. The
// verdict draws anew by the same rule, so the rule travels with the days.
package schedule

import (
	"fmt"
	"math/bits"
	"math/rand/v2"
	"slices"
	"time"

	"sashlog/configs/site"
)

// Design is the rule the settings are drawn by. Every block is two weeks in a
// row; a weekday that runs on trial in one of them runs as usual in the other,
// so that weekdays balance exactly and the weather of a fortnight nearly.
type Design string

// Designs.
const (
	// ByDays: half the weekdays are on trial in the first week (rounded either
	// way), the others in the second.
	ByDays Design = "days"
	// ByWeeks: a whole week is on trial, which of the two is drawn. For settings
	// that cannot be changed every morning.
	ByWeeks Design = "weeks"
)

// Designs lists all of them.
func Designs() []Design { return []Design{ByDays, ByWeeks} }

// Weekdays is a set of weekdays, bit w for time.Weekday w.
type Weekdays uint8

// Holds reports whether a weekday belongs to the set.
func (s Weekdays) Holds(w time.Weekday) bool { return s>>w&1 == 1 }

// Patterns lists what may be drawn for a block: the sets of weekdays on trial
// in its first week, each as likely as the others.
func (d Design) Patterns(days Weekdays) []Weekdays {
	if d == ByWeeks {
		return []Weekdays{0, days}
	}
	n := bits.OnesCount8(uint8(days))
	var out []Weekdays
	for p := range Weekdays(1 << 7) {
		if k := bits.OnesCount8(uint8(p)); p&^days == 0 && (k == n/2 || k == (n+1)/2) {
			out = append(out, p)
		}
	}
	return out
}

// OnTrial reports whether a weekday of week 0 or 1 of a block is on trial under
// a pattern.
func OnTrial(pattern Weekdays, week int, w time.Weekday) bool {
	return pattern.Holds(w) == (week == 0)
}

// Ran is what a person noted about a day afterwards.
type Ran string

// What may be noted.
const (
	NotNoted Ran = ""
	RanUsual Ran = "usual"
	RanTrial Ran = "trial"
	Stopped  Ran = "stopped" // a stopping rule was met that day
)

// Day is one scheduled day.
type Day struct {
	Date  site.Date
	Block int // from 1
	Week  int // 0 or 1 within the block
	Trial bool
	// Ran is what was run as noted afterwards; it changes the count of days not
	// run as scheduled, never the group a day belongs to.
	Ran  Ran
	Note string
}

// Schedule is a drawn schedule.
type Schedule struct {
	Design Design
	Seed   uint64
	// Setting names what is changed on trial, in words.
	Setting string
	// Zones it reaches, and those it does not reach that stand beside them.
	Zones, Untouched []string
	Days             []Day // in order of time
}

// Weekday is the weekday of a date.
func Weekday(d site.Date) time.Weekday {
	return time.Date(d.Year, d.Month, d.Day, 12, 0, 0, 0, time.UTC).Weekday()
}

// AddDays is the date n days later.
func AddDays(d site.Date, n int) site.Date {
	return site.DateOf(time.Date(d.Year, d.Month, d.Day+n, 12, 0, 0, 0, time.UTC))
}

// Monday is the first Monday on or after a date.
func Monday(d site.Date) site.Date {
	return AddDays(d, (int(time.Monday)-int(Weekday(d))+7)%7)
}

// Draw draws the days of blocks of two weeks that begin on a Monday. Days off
// are left out; the others keep what was drawn for their weekday.
func Draw(d Design, seed uint64, from site.Date, blocks int, days Weekdays, off []site.Date) []Day {
	rng := rand.New(rand.NewPCG(seed, 0x7121a1))
	patterns := d.Patterns(days)
	var out []Day
	for b := range blocks {
		p := patterns[rng.IntN(len(patterns))]
		for k := range 14 {
			date := AddDays(from, 14*b+k)
			if w := Weekday(date); days.Holds(w) && !slices.Contains(off, date) {
				out = append(out, Day{Date: date, Block: b + 1, Week: k / 7, Trial: OnTrial(p, k/7, w)})
			}
		}
	}
	return out
}

// Weekdays are the weekdays that occur.
func (s *Schedule) Weekdays() Weekdays {
	var out Weekdays
	for _, d := range s.Days {
		out |= 1 << Weekday(d.Date)
	}
	return out
}

// Pattern tells what was drawn for a block: all patterns that agree with its
// days. Days off leave room for several, which count as one.
func (s *Schedule) pattern(block int) (fits bool) {
	for _, p := range s.Design.Patterns(s.Weekdays()) {
		agrees := true
		for _, d := range s.Days {
			agrees = agrees && (d.Block != block || OnTrial(p, d.Week, Weekday(d.Date)) == d.Trial)
		}
		if agrees {
			return true
		}
	}
	return false
}

// Problem is what is wrong with the schedule as drawn: the index of the day,
// and words. Days are -1 when it concerns all.
type Problem struct {
	Day  int
	Text string
}

// Check holds the days against the design.
func (s *Schedule) Check() []Problem {
	var out []Problem
	if len(s.Days) == 0 {
		return []Problem{{-1, "the schedule has no days"}}
	}
	first := map[int]site.Date{} // Monday of each block
	for i, d := range s.Days {
		monday := AddDays(d.Date, -(int(Weekday(d.Date))+6)%7-7*d.Week)
		switch was, seen := first[d.Block]; {
		case i > 0 && !s.Days[i-1].Date.Before(d.Date):
			out = append(out, Problem{i, fmt.Sprintf("%s does not come after %s", d.Date, s.Days[i-1].Date)})
		case i > 0 && d.Block < s.Days[i-1].Block:
			out = append(out, Problem{i, fmt.Sprintf("block %d comes after block %d", d.Block, s.Days[i-1].Block)})
		case !seen:
			first[d.Block] = monday
		case was != monday:
			out = append(out, Problem{i, fmt.Sprintf("%s is not in week %d of block %d, which begins on %s", d.Date, d.Week+1, d.Block, was)})
		}
	}
	if len(out) > 0 {
		return out
	}
	for i, d := range s.Days {
		if (i == 0 || s.Days[i-1].Block != d.Block) && !s.pattern(d.Block) {
			out = append(out, Problem{i, fmt.Sprintf("block %d is not as it can have been drawn by %s", d.Block, s.Design)})
		}
	}
	return out
}
