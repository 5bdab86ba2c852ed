package compare

import (
	"math"
	"math/rand/v2"
	"os"
	"runtime"
	"sync"
	"sync/atomic"
	"testing"
	"time"
	_ "time/tzdata"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/demo"
	"sashlog/ingest/grid"
)

// long runs the large tables: SASHLOG_LONG=1.
var long = os.Getenv("SASHLOG_LONG") != ""

// size is how many are tried: few by default, many for the large tables.
func size(few, many int) int {
	if long {
		return many
	}
	return few
}

func date(m, d int) site.Date { return site.Date{Year: 2025, Month: time.Month(m), Day: d} }

// audited judges the truth of a small demo building as if it were logged
// without a fault, and compares two spans.
func audited(t testing.TB, o demo.Options, before, after Span, untouched []int) *Result {
	in := judged(t, o)
	in.Before, in.After, in.Untouched = before, after, untouched
	return Periods(in)
}

// judged is the demo building with every step judged.
func judged(t testing.TB, o demo.Options) Input {
	t.Helper()
	tr, err := demo.Simulate(o)
	if err != nil {
		t.Fatal(err)
	}
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	lead := tr.Outdoor.Lead
	n := tr.N + lead
	g := &grid.Grid{StartUTC: tr.StartUTC - int64(lead)*tr.StepS, StepS: tr.StepS, N: n, PeriodFrom: lead, PeriodTo: n, Loc: loc}
	nan := math.NaN()
	s := &site.Site{Location: loc, LatitudeDeg: 47, OutdoorCO2PPM: nan, StepS: int(tr.StepS)}
	add := func(owner site.OwnerKind, index int, q site.Quantity, list []float32) {
		s.Points = append(s.Points, site.Point{Owner: owner, Index: index, Quantity: q, Share: nan})
		col := grid.Column{Mean: make([]float32, n), CoveredS: make([]uint16, n)}
		skip := n - len(list)
		for i := range col.Mean {
			col.Mean[i] = float32(nan)
			if i >= skip {
				col.Mean[i], col.CoveredS[i] = list[i-skip], uint16(tr.StepS)
			}
		}
		g.Columns = append(g.Columns, col)
	}
	add(site.OwnerSite, 0, site.OutdoorTemp, tr.Outdoor.TempC)
	add(site.OwnerSite, 0, site.OutdoorHumidity, tr.Outdoor.RHPct)
	add(site.OwnerSite, 0, site.WindSpeed, tr.Outdoor.WindMS)
	add(site.OwnerSite, 0, site.Rain, tr.Outdoor.RainMMh)
	for z := range tr.Zones {
		zone := &tr.Zones[z]
		def := site.Zone{ID: zone.ID, People: 10, AreaM2: nan, HeightM: nan, FanSpeedMS: nan, Openings: site.Openings{Outdoors: true}}
		if zone.ID == "L1.03" {
			def.Openings = site.Openings{}
		}
		s.Zones = append(s.Zones, def)
		s.Plant = append(s.Plant, site.Plant{ID: "unit of " + zone.ID, Serves: []string{zone.ID}})
		state := make([]float32, len(zone.Plant))
		for i, c := range zone.Plant {
			state[i] = float32(c)
		}
		add(site.OwnerZone, z, site.AirTemp, zone.OperativeC)
		add(site.OwnerZone, z, site.CO2, zone.CO2PPM)
		if !def.Openings.None() {
			add(site.OwnerZone, z, site.Window, zone.OpenShare)
		}
		add(site.OwnerPlant, z, site.PlantStatus, state)
	}
	s.Occupancy = site.Occupancy{Source: site.BySchedule, Times: []site.Times{{FromMin: 8 * 60, ToMin: 18 * 60, Days: [7]bool{false, true, true, true, true, true, false}}}}
	c, err := criteria.Preset("en16798-1-ii")
	if err != nil {
		t.Fatal(err)
	}
	cal := calendar.Of(g)
	list, hourOf := hours.Clock(g, cal)
	in := Input{Site: s, Criteria: c, Grid: g, Calendar: cal, Seed: o.Seed}
	in.Outdoor = outdoor.Measure(s, c, g, cal)
	in.Indoor = indoor.Combine(s, c, g)
	in.Running = running.Judge(s, c, g, cal, in.Indoor)
	in.Exceedance = exceedance.Limit(s, c, g, in.Outdoor, in.Running)
	felt := predicted.Sense(predicted.Input{Site: s, Criteria: c, Grid: g, Outdoor: in.Outdoor, Indoor: in.Indoor, Running: in.Running})
	in.Exceedance.Count(s, c, g, in.Outdoor, in.Indoor, in.Running, felt, hourOf)
	pot := potential.Judge(s, c, g, cal, in.Outdoor, in.Running, in.Exceedance)
	in.Record = hours.Make(hours.Input{Site: s, Criteria: c, Grid: g, Outdoor: in.Outdoor, Indoor: in.Indoor, Running: in.Running,
		Exceedance: in.Exceedance, Potential: pot, Calendar: cal, Hours: list})
	return in
}

// each runs many demo buildings on all cores.
func each(n int, f func(seed uint64)) {
	var next atomic.Int64
	var wg sync.WaitGroup
	for range runtime.GOMAXPROCS(0) {
		wg.Go(func() {
			for i := next.Add(1); i <= int64(n); i = next.Add(1) {
				f(uint64(i))
			}
		})
	}
	wg.Wait()
}

// binomial95 is the normal approximation's half width of a share.
func binomial95(share float64, n int) float64 { return 1.96 * math.Sqrt(share*(1-share)/float64(n)) }

// The same eight weeks of two years: nothing but the weather and the people
// differ. (The halves of one summer differ by themselves: holidays empty the
// rooms in the second.)
var (
	firstYear  = Span{date(6, 2), date(7, 25)}
	secondYear = Span{site.Date{Year: 2026, Month: 6, Day: 1}, site.Date{Year: 2026, Month: 7, Day: 24}}
)

func small(seed uint64) demo.Options {
	return demo.Options{Seed: seed, From: date(5, 20), Days: 450, Zones: 3}
}

// Nothing was changed: a difference may be called one in at most one of twenty
// buildings. The table shows the rate with its own 95 % interval.
func TestNothingChanged(t *testing.T) {
	n := size(1, 400)
	var mu sync.Mutex
	var called, answered, second [NumMeasures]int
	each(n, func(seed uint64) {
		r := audited(t, small(seed), firstYear, secondYear, nil)
		mu.Lock()
		defer mu.Unlock()
		for m, o := range r.Outcomes {
			if o.Unusable != "" {
				continue
			}
			answered[m]++
			if o.Verdict == Better || o.Verdict == Worse {
				called[m]++
			}
			if e := o.SecondOpinion; e.Low > 0 || e.High < 0 {
				second[m]++
			}
		}
	})
	for m := range called {
		if n < 10 {
			continue // too few for a rate; see TestNothingChangedDaysDrawnAnew
		}
		if answered[m] < n*7/10 {
			t.Errorf("%v: only %d of %d buildings could be compared", Measure(m), answered[m], n)
			continue
		}
		share := float64(called[m]) / float64(answered[m])
		t.Logf("%-15v %4d compared, %5.1f %% (±%.1f) wrongly called different; second opinion %.1f %%", Measure(m), answered[m], 100*share,
			100*binomial95(share, answered[m]), 100*float64(second[m])/float64(answered[m]))
		if share-binomial95(share, answered[m]) > 0.05 {
			t.Errorf("%v: %.1f %% called different, more than 5 %%", Measure(m), 100*share)
		}
	}
}

// The same at the price of two buildings: their days are drawn anew, in runs of
// a week, into two periods of eight weeks each, so that nothing but chance tells
// the periods apart.
func TestNothingChangedDaysDrawnAnew(t *testing.T) {
	n := size(50, 400)
	var called, answered [NumMeasures]int
	var mu sync.Mutex
	const buildings = 2
	var pools [buildings][]day
	each(buildings, func(seed uint64) {
		in := judged(t, demo.Options{Seed: 100 + seed, From: date(5, 20), Days: 75, Zones: 3})
		in.Before = firstYear
		outside, _ := outsideHours(&in)
		pools[seed-1] = daysOf(&in, [2][]int{{0, 1}, nil}, outside)
	})
	each(n, func(seed uint64) {
		rng := rand.New(rand.NewPCG(seed, 9))
		pool := pools[seed%buildings]
		var days []day
		for k := range 2 {
			for range 8 {
				at := rng.IntN(len(pool))
				for d := range 5 {
					x := pool[(at+d)%len(pool)]
					x.after = k == 1
					days = append(days, x)
				}
			}
		}
		m := matched(days)
		if m.BeforeShare < LeastMatched || m.AfterShare < LeastMatched {
			return
		}
		var r Result
		for k := range r.Outcomes {
			r.Outcomes[k].Measure = Measure(k)
		}
		r.estimate(days, false, seed)
		mu.Lock()
		defer mu.Unlock()
		for m := range r.Outcomes {
			if o := &r.Outcomes[m]; o.Unusable == "" {
				answered[m]++
				if o.Verdict == Better || o.Verdict == Worse {
					called[m]++
				}
			}
		}
	})
	for m := range called {
		share := float64(called[m]) / float64(answered[m])
		t.Logf("%-15v %4d compared, %5.1f %% (±%.1f) wrongly called different", Measure(m), answered[m], 100*share, 100*binomial95(share, answered[m]))
		if answered[m] < n/2 || share-binomial95(share, answered[m]) > 0.05 {
			t.Errorf("%v: %d of %d compared, %.1f %% called different, more than 5 %%", Measure(m), answered[m], n, 100*share)
		}
	}
}

// Wider changeover limits, no start by the clock and a conference room that no
// longer calls for everybody open the building more often: nearly every
// building shows it, none the contrary.
func TestPlantedImprovement(t *testing.T) {
	n := size(2, 60)
	var mu sync.Mutex
	better, worse, compared := 0, 0, 0
	gain := 0.0
	each(n, func(seed uint64) {
		low, high := 13.0, 26.0
		o := small(seed)
		o.Changes = []demo.Change{{From: site.Date{Year: 2026, Month: 4, Day: 1}, OpenLowC: &low, OpenHighC: &high, CoolOnK: 1, NoClockStart: true, IgnoreCallsOf: []string{"L1.03"}}}
		r := audited(t, o, firstYear, secondYear, nil)
		mu.Lock()
		defer mu.Unlock()
		a := r.Outcomes[AchievedShare]
		if a.Unusable != "" {
			return
		}
		compared++
		gain += a.Difference.Value
		switch a.Verdict {
		case Better:
			better++
		case Worse:
			worse++
		}
		if a.ProbabilityBetter < 0.9 {
			t.Errorf("seed %d: probability of improvement %.2f", seed, a.ProbabilityBetter)
		}
	})
	t.Logf("%d of %d compared buildings called better, mean gain %.0f points", better, compared, 100*gain/float64(compared))
	if compared < n*6/10 || better < compared*9/10 || worse > 0 {
		t.Errorf("%d compared, %d better, %d worse", compared, better, worse)
	}
}

// What happened to everybody is not put down to the change: with the change in
// every zone and one of them declared untouched, the difference vanishes.
func TestUntouchedZones(t *testing.T) {
	low, high := 13.0, 26.0
	o := small(2)
	o.Changes = []demo.Change{{From: site.Date{Year: 2026, Month: 4, Day: 1}, OpenLowC: &low, OpenHighC: &high, CoolOnK: 1, NoClockStart: true, IgnoreCallsOf: []string{"L1.03"}}}
	r := audited(t, o, firstYear, secondYear, []int{1})
	a := r.Outcomes[AchievedShare]
	if a.Unusable != "" || a.Untouched.Value < 0.2 || math.Abs(a.Difference.Value) > 0.2 || a.Verdict == Worse {
		t.Errorf("%+v", a)
	}
	if len(r.Zones) != 1 || r.Zones[0] != 0 {
		t.Errorf("zones compared: %v", r.Zones)
	}
}

func TestTooShortAndTooUnlike(t *testing.T) {
	o := demo.Options{Seed: 1, From: date(1, 10), Days: 200, Zones: 1}
	r := audited(t, o, Span{date(1, 13), date(1, 24)}, Span{date(6, 1), date(7, 20)}, nil)
	if r.Unusable == "" || r.Outcomes[0].Verdict != NoAnswer {
		t.Errorf("ten days were compared: %+v", r)
	}
	r = audited(t, o, Span{date(1, 13), date(3, 10)}, Span{date(6, 1), date(7, 20)}, nil)
	if r.Unusable == "" {
		t.Errorf("winter was compared with summer: %+v", r.Matched)
	}
}

// Days of like weather are compared: by hand, two classes with 1:3 and 3:1
// days, shares 0.5 and 0.8 in both periods, differ by nothing once weighted,
// though plainly by 0.15.
func TestWeatherIsAllowedFor(t *testing.T) {
	var days []*day
	add := func(n int, after bool, tempC, share float64) {
		for range n {
			d := &day{after: after, alike: true, tempC: tempC}
			d.of[0][AchievedShare] = ratio{10 * share, 10}
			days = append(days, d)
		}
	}
	add(4, false, 15, 0.5)
	add(12, false, 21, 0.8)
	add(12, true, 15, 0.5)
	add(4, true, 21, 0.8)
	before, after := weigh(days, 0, AchievedShare)
	if math.Abs(before-after) > 1e-12 || math.Abs(after-0.575) > 1e-12 {
		t.Errorf("weighted %g and %g, want 0.575 twice", before, after)
	}
	if b, a := plain(days, false, 0, AchievedShare), plain(days, true, 0, AchievedShare); math.Abs(a-b+0.15) > 1e-12 {
		t.Errorf("plainly %g and %g", b, a)
	}
}
