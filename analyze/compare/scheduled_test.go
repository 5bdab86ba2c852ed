package compare

import (
	"fmt"
	"math"
	"math/rand/v2"
	"sync"
	"testing"

	"sashlog/analyze/randomisation"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
	"sashlog/ingest/demo"
)

const workdays = schedule.Weekdays(0b0111110)

func drawnFrom(design schedule.Design, seed uint64, blocks int) *schedule.Schedule {
	return &schedule.Schedule{Design: design, Seed: seed, Days: schedule.Draw(design, seed, date(6, 2), blocks, workdays, nil)}
}

// ran is a small demo building in which every day of the schedule on trial runs
// with wider limits, where there is something to change.
func ran(t testing.TB, seed uint64, s *schedule.Schedule, change bool) Input {
	o := demo.Options{Seed: seed, From: date(5, 30), Days: 90, Zones: 3}
	if change {
		low, high, usualLow, usualHigh := 13.0, 26.0, 15.0, 22.5
		was := false
		for _, d := range s.Days {
			switch {
			case d.Trial && !was:
				o.Changes = append(o.Changes, demo.Change{From: d.Date, OpenLowC: &low, OpenHighC: &high, CoolOnK: 1})
			case !d.Trial && was:
				o.Changes = append(o.Changes, demo.Change{From: d.Date, OpenLowC: &usualLow, OpenHighC: &usualHigh, CoolOnK: -1})
			}
			was = d.Trial
		}
	}
	return judged(t, o)
}

// A trial that widens limits on the drawn days of six fortnights is found; the
// same days drawn over a building in which nothing changes are called different
// no more often than they should be.
func TestTrialOfTheDemo(t *testing.T) {
	n := uint64(size(2, 40))
	var mu sync.Mutex
	better, worse := 0, 0
	each(int(n), func(seed uint64) {
		s := drawnFrom(schedule.ByDays, seed, 6)
		a := Trial(ran(t, seed, s, true), s, []int{0, 1}, nil).Outcomes[AchievedShare]
		mu.Lock()
		defer mu.Unlock()
		switch a.Verdict {
		case Better:
			better++
		case Worse:
			worse++
		}
		t.Logf("seed %d: %.2f on trial, %.2f as usual, p %.4f", seed, a.Answer.Trial, a.Answer.Usual, a.Answer.P)
		if !(a.Answer.Low <= a.Answer.Difference && a.Answer.Difference <= a.Answer.High) {
			t.Errorf("%+v", a)
		}
	})
	t.Logf("%d of %d trials found better, %d worse", better, n, worse)
	if worse > 0 || better < int(n)*8/10 {
		t.Errorf("%d of %d better, %d worse", better, n, worse)
	}

	// Nothing changed: one building serves many schedules, since only the
	// drawing is random.
	buildings, schedules := uint64(size(1, 20)), uint64(size(200, 100))
	var called [NumMeasures]int
	for b := range buildings {
		in := ran(t, 50+b, drawnFrom(schedule.ByDays, 1, 6), false)
		in.Before, in.After = Span{From: date(6, 2)}, Span{To: date(8, 24)}
		days, _ := Daily(in, []int{0}, []int{1})
		known := map[site.Date]*DayRatios{}
		for i := range days {
			known[days[i].Date] = &days[i]
		}
		for k := range schedules {
			s := drawnFrom(schedule.Designs()[k%2], 1000*b+k, 6)
			for m := range NumMeasures {
				if randomisation.New(Blocks(s, known, m), true).PValue(499, rand.New(rand.NewPCG(b, k))) <= 0.05 {
					called[m]++
				}
			}
		}
	}
	total := int(buildings * schedules)
	for m := range called {
		share := float64(called[m]) / float64(total)
		t.Logf("%-15v %d trials of nothing, %.1f %% (±%.1f) wrongly called different", Measure(m), total, 100*share, 100*binomial95(share, total))
		if share-1.3*binomial95(math.Max(share, 0.05), total) > 0.05 {
			t.Errorf("%v: %.1f %%", Measure(m), 100*share)
		}
	}
}

// Days count where they were drawn, whatever was run, and what was not run as
// drawn is counted.
func TestIntentionToTreat(t *testing.T) {
	s := drawnFrom(schedule.ByDays, 4, 2)
	in := ran(t, 3, s, false)
	before := Trial(in, s, []int{0, 1}, nil)
	s.Days[0].Ran, s.Days[1].Ran, s.Days[2].Ran = schedule.Stopped, schedule.RanTrial, schedule.RanTrial
	after := Trial(in, s, []int{0, 1}, nil)
	if fmt.Sprint(before.Outcomes) != fmt.Sprint(after.Outcomes) { // NaN differs from itself
		t.Error("a note moved a figure")
	}
	k := after.Kept
	if k.Days != 20 || k.Stopped != 1 || k.NotNoted != 17 || k.AsDrawn+k.Otherwise != 2 {
		t.Errorf("%+v", k)
	}
	late := &schedule.Schedule{Design: schedule.ByDays, Days: schedule.Draw(schedule.ByDays, 1, date(8, 25), 3, workdays, nil)}
	if r := Trial(in, late, []int{0, 1}, nil); r.Unusable == "" || r.Kept.ToCome == 0 {
		t.Errorf("three days of a trial gave a verdict: %+v", r.Kept)
	}
}
