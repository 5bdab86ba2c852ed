package trial

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/randomisation"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

const workdays = schedule.Weekdays(0b0111110)

var monday = site.Date{Year: 2025, Month: 5, Day: 5}

// summer invents logged days: the share open wanders from day to day, and the
// untouched zones with it. The gain is so much of each day's possible hours.
func summer(rng *rand.Rand, weeks int, gain float64) *season {
	s := &season{days: map[site.Date]logged{}, weekdays: workdays, design: schedule.ByDays}
	wander := 0.0
	for k := range 7 * weeks {
		wander = 0.6*wander + rng.NormFloat64()
		whole := 20 + 40*rng.Float64()
		share := 1 / (1 + math.Exp(-(wander+0.8*rng.NormFloat64())/2))
		other := 1 / (1 + math.Exp(-(wander+0.8*rng.NormFloat64())/2))
		s.days[schedule.AddDays(monday, k)] = logged{day: randomisation.Day{Main: randomisation.Ratio{Part: whole * share * 0.6, Whole: whole},
			Untouched: randomisation.Ratio{Part: 50 * other, Whole: 50}}, gain: gain * whole}
	}
	return s
}

// The power the plan promises from one logged summer is about the share of
// trials, run in summers of the same kind, that end with a verdict; with nothing
// to gain it is what the test allows. SASHLOG_LONG=1 runs more.
func TestPromisedPower(t *testing.T) {
	n := 300
	if os.Getenv("SASHLOG_LONG") != "" {
		n = 3000
	}
	for _, c := range []struct {
		fortnights int
		gain       float64
	}{{4, 0}, {4, 0.1}, {8, 0.1}, {8, 0.05}} {
		promised, found := 0.0, 0
		const summers = 6
		for seed := range uint64(summers) {
			s := summer(rand.New(rand.NewPCG(seed, 1)), 20, c.gain)
			promised += s.power(monday, 20, c.fortnights, 150, true, seed).Finds / summers
		}
		for seed := range uint64(n) {
			rng := rand.New(rand.NewPCG(seed, 3))
			s := summer(rng, 2*c.fortnights, c.gain)
			blocks := make([]randomisation.Block, c.fortnights)
			for b := range blocks {
				f := s.fortnightAt(schedule.AddDays(monday, 14*b))
				blocks[b] = f.with(rng.IntN(len(f.patterns)), 1)
			}
			if randomisation.New(blocks, true).PValue(drawings, rng) <= 0.05 {
				found++
			}
		}
		share := float64(found) / float64(n)
		half := 1.96 * math.Sqrt(math.Max(share, 0.05)*(1-share)*(1/float64(n)+1.0/900))
		t.Logf("%d fortnights, gain %.0f points: promised %.1f %%, found in %.1f %% (±%.1f)", c.fortnights, 100*c.gain, 100*promised, 100*share, 100*half)
		if math.Abs(share-promised) > half+0.06 { // summers differ
			t.Errorf("promised %.3f, found %.3f", promised, share)
		}
		if c.gain == 0 && share > 0.05+half {
			t.Errorf("%.3f of trials of nothing end with a verdict", share)
		}
	}
}

// hourly is one unit with two zones for n hours, all occupied.
func hourly(outC []float32, class [2][]hours.Class, unit []uint8, operative [2][]float32) Input {
	n := len(outC)
	g := &grid.Grid{StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC}
	in := Input{Grid: g, Calendar: calendar.Of(g), Outdoor: &outdoor.Outdoor{TempC: outC}, Criteria: criteria.Settings{OutdoorLowC: 12.8},
		Site:    &site.Site{Zones: []site.Zone{{ID: "a", People: 10}, {ID: "b", People: 5}, {ID: "c", People: 1}}, Plant: []site.Plant{{ID: "unit", Serves: []string{"a", "b"}}}},
		Running: &running.Result{Zones: make([]running.Zone, 3), Units: [][]uint8{unit}}, Record: &hours.Record{}, Exceedance: &exceedance.Result{Zones: make([]exceedance.Zone, 3)}}
	high := make([]float32, n)
	for i := range high {
		high[i] = 27
	}
	for z := range 3 {
		zone := indoor.Zone{}
		list := make([]hours.Class, n)
		if z < 2 {
			zone.OperativeC, list = operative[z], class[z]
		}
		in.Indoor = append(in.Indoor, zone)
		in.Record.Class = append(in.Record.Class, list)
		in.Exceedance.Zones[z].Limits.UpperOfDayC = high
	}
	return in
}

// By hand: closed above 22 °C outdoors, 1 K further on trial. Inside (20 to 22
// °C) zone a was open 2 h and missed 1 h, zone b open 1 h and missed 2 h: half.
// Beyond: 22.5 °C both missed (2 h within the step), 23.5 °C both (beyond only).
// The hour at 22.5 °C in which the room calls too is not this limit's to gain.
func TestOutdoorStep(t *testing.T) {
	ok, no := hours.AchievedOK, hours.MissedCool
	outC := []float32{19, 20.5, 21, 21.5, 22.5, 23.5, 22.5, 25}
	cool := []float32{24, 24, 24, 24, 24, 24, 25.6, 24}
	in := hourly(outC, [2][]hours.Class{{ok, ok, ok, no, no, no, no, hours.ClosedUnsuitedFresh}, {ok, ok, no, no, no, no, no, hours.ClosedUnsuitedFresh}},
		make([]uint8, 8), [2][]float32{cool, cool})
	sub := &changeover.Subject{ID: "unit", Opening: changeover.Direction{Limits: []changeover.Limit{{Zone: -1, Above: true, LevelC: 22, LowC: 21.8, HighC: 22.2},
		{Zone: -1, Above: false, LevelC: 13, LowC: 13, HighC: 13}}}}
	in.Lost = &lost.Result{Units: []lost.UnitPattern{{ID: "unit", Calls: []lost.Call{{Zone: 0, AboveC: 25.5, Followed: 12}, {Zone: 1, AboveC: 25, Followed: 3}}}}}
	limits := limitsOf(&in, sub, true)
	if len(limits) != 3 || limits[2].Zone != 0 || limits[2].LevelC != 25.5 {
		t.Fatalf("%+v", limits)
	}
	st, can := stepOf(&in, sub, limits[0], true)
	if !can || st.ID != "unit/outdoors-above" || st.TrialC != 23 || fmt.Sprint(st.Zones, st.Untouched) != "[0 1] [2]" {
		t.Fatalf("%+v", st)
	}
	st.others = limits[1:]
	st.weigh(&in)
	if st.BeyondH != 4 || st.StepH != 2 || st.OpenInside != 0.5 || st.GainH != 1 || math.Abs(st.GainPersonH-7.5) > 1e-9 {
		t.Errorf("beyond %g, step %g, inside %g, gain %g (%g person-hours)", st.BeyondH, st.StepH, st.OpenInside, st.GainH, st.GainPersonH)
	}
	if g := st.gains(&in); len(g) != 1 || math.Abs(g[0]-7.5) > 1e-9 {
		t.Errorf("gains %v", g)
	}
	// 0.2 K above what the criteria allow is no step.
	if _, can := stepOf(&in, sub, limits[1], true); can {
		t.Error("colder air than the criteria allow is to be tried")
	}
}

// By hand: the room calls at 25 °C. The run of hours 2 to 4 begins with its
// call; that of hours 6 and 7 with none (the clock), and counts nowhere; nor does
// one when the step would come too near to the comfort limit.
func TestIndoorStep(t *testing.T) {
	ok, no := hours.AchievedOK, hours.MissedCool
	cool, off := uint8(site.PlantCool), uint8(site.PlantOff)
	class := []hours.Class{ok, ok, no, no, no, ok, no, no}
	in := hourly(make([]float32, 8), [2][]hours.Class{class, class}, []uint8{off, off, cool, cool, cool, off, cool, cool},
		[2][]float32{{24.2, 24.8, 25, 24.6, 24.1, 24, 23.9, 23.5}, make([]float32, 8)})
	st := Step{IsPlant: true, Zone: 0, Above: true, NowC: 25, TrialC: 26, Zones: []int{0, 1}}
	st.weigh(&in)
	if st.StepH != 6 || st.OpenInside != indoorShare || st.GainH != 3 {
		t.Errorf("step %g, inside %g, gain %g", st.StepH, st.OpenInside, st.GainH)
	}
	st = Step{IsPlant: true, Zone: 0, Above: true, NowC: 25, TrialC: 26.6, Zones: []int{0, 1}}
	if st.weigh(&in); st.StepH != 0 {
		t.Errorf("%g h would be tried 0.4 K below the comfort limit", st.StepH)
	}
}

func TestSeasons(t *testing.T) {
	if at := richest([]float64{0, 1, 5, 4, 0, 9}, 2); at != 2 {
		t.Errorf("richest two weeks begin at %d", at)
	}
	mondays := []site.Date{monday, schedule.AddDays(monday, 7)}
	if at := sameSeason(mondays, schedule.AddDays(monday, 7+364)); at != 1 {
		t.Errorf("a year later is week %d", at)
	}
	if at := sameSeason(mondays, schedule.AddDays(monday, 70)); at != -1 {
		t.Errorf("a season not seen is week %d", at)
	}
}
