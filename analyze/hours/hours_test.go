package hours

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"
	_ "time/tzdata"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"

	"pgregory.net/rapid"
)

// settings are the numbers of the headline rule in design "How a step is
// judged"; the test states them itself so that it does not lean on a preset.
func settings() criteria.Settings {
	return criteria.Settings{
		OutdoorLowC: 12.8, RiseK: 1, DewPointMaxC: 17, WindMaxMS: 10, RainDryMin: 30, OutdoorPM25Max: 35,
		MinSuitedRunMin: 30, BandLowC: 16, BandHighC: 26, OpenThreshold: 0.05, AiringMin: 15, ValveOpenPct: 5,
		DamperOpenPct: 5, FlowOnM3hPerM2: 0.5, StepCoverageMin: 0.5, Headline: "en16798-1", Category: "II",
		AdaptiveAfterH: 1, FanSpeedMS: 0.9, MetabolicMet: 1.2, ClothingClo: math.NaN(), AirSpeedMS: 0.1,
		CO2AboveOutdoorPPM: 800, OutdoorCO2PPM: 425,
		PurgeFromH: 22, PurgeToH: 7, PurgeIndoorMinC: 23, PurgeDifferenceK: 2, PurgeOutdoorMinC: 10,
	}
}

// world is a site with its grid, ready to be judged.
type world struct {
	s *site.Site
	g *grid.Grid
}

func (w *world) judge(c criteria.Settings) (*Record, *Summary, *running.Result) {
	cal := calendar.Of(w.g)
	list, hourOf := Clock(w.g, cal)
	out := outdoor.Measure(w.s, c, w.g, cal)
	in := indoor.Combine(w.s, c, w.g)
	run := running.Judge(w.s, c, w.g, cal, in)
	exc := exceedance.Limit(w.s, c, w.g, out, run)
	felt := predicted.Sense(predicted.Input{Site: w.s, Criteria: c, Grid: w.g, Outdoor: out, Indoor: in, Running: run})
	exc.Count(w.s, c, w.g, out, in, run, felt, hourOf)
	pot := potential.Judge(w.s, c, w.g, cal, out, run, exc)
	rec := Make(Input{Site: w.s, Criteria: c, Grid: w.g, Outdoor: out, Indoor: in, Running: run, Exceedance: exc,
		Potential: pot, Calendar: cal, Hours: list})
	return rec, Sum(rec, w.g, cal, run), run
}

// random makes a site of three zones (one opens through the first, one does
// not open) with patchy random columns, in the given zone.
func random(rng *rand.Rand, zone string, days int) *world {
	loc, err := time.LoadLocation(zone)
	if err != nil {
		panic(err)
	}
	start := time.Date(2025, 3, 20+rng.IntN(15), 0, 0, 0, 0, loc)
	s := &site.Site{Location: loc, OutdoorCO2PPM: math.NaN(), StepS: 300,
		Occupancy: site.Occupancy{Source: site.BySchedule, Times: []site.Times{{FromMin: 8 * 60, ToMin: 18 * 60}}}}
	for d := 1; d < 6; d++ {
		s.Occupancy.Times[0].Days[d] = true
	}
	nan := math.NaN()
	s.Zones = []site.Zone{
		{ID: "a", AreaM2: nan, HeightM: nan, People: 4, FanSpeedMS: nan, Openings: site.Openings{Outdoors: true}},
		{ID: "A", AreaM2: nan, HeightM: nan, People: 2, FanSpeedMS: nan, Openings: site.Openings{Through: []string{"a"}}, Scheme: site.Concurrent},
		{ID: "core", AreaM2: nan, HeightM: nan, People: 3, FanSpeedMS: nan},
	}
	s.Plant = []site.Plant{{ID: "unit", Serves: []string{"a", "A", "core"}}}
	add := func(owner site.OwnerKind, index int, q site.Quantity) {
		s.Points = append(s.Points, site.Point{Owner: owner, Index: index, Quantity: q, Share: nan})
	}
	for z := range s.Zones {
		add(site.OwnerZone, z, site.AirTemp)
		add(site.OwnerZone, z, site.CO2)
	}
	add(site.OwnerZone, 0, site.Window)
	add(site.OwnerZone, 0, site.Window)
	add(site.OwnerPlant, 0, site.PlantStatus)
	for _, q := range []site.Quantity{site.OutdoorTemp, site.OutdoorHumidity, site.WindSpeed, site.Rain} {
		add(site.OwnerSite, 0, q)
	}
	lead := 10
	g := &grid.Grid{StartUTC: start.AddDate(0, 0, -lead).Unix(), StepS: 300, Loc: loc}
	g.N = int((start.AddDate(0, 0, days).Unix() - g.StartUTC) / 300)
	g.PeriodFrom, g.PeriodTo = g.Index(start.Unix()), g.N
	span := map[site.Quantity][2]float64{site.AirTemp: {18, 29}, site.CO2: {420, 1600}, site.Window: {0, 1}, site.PlantStatus: {0, 4},
		site.OutdoorTemp: {8, 30}, site.OutdoorHumidity: {30, 95}, site.WindSpeed: {0, 13}, site.Rain: {-3, 1}}
	for _, p := range s.Points {
		col := grid.Column{Mean: make([]float32, g.N), CoveredS: make([]uint16, g.N)}
		v, left, known := 0.0, 0, true
		for i := range col.Mean {
			if left == 0 {
				r := span[p.Quantity]
				v, left, known = r[0]+rng.Float64()*(r[1]-r[0]), 1+rng.IntN(40), rng.Float64() > 0.1
				if p.Quantity == site.Window || p.Quantity == site.PlantStatus {
					v = math.Round(v)
				}
				if p.Quantity == site.Rain {
					v = math.Max(0, v)
				}
			}
			left--
			col.Mean[i] = float32(math.NaN())
			if known || p.Quantity == site.OutdoorTemp {
				col.Mean[i], col.CoveredS[i] = float32(v), 300
			}
		}
		g.Columns = append(g.Columns, col)
	}
	return &world{s, g}
}

// TestIdentities holds the identities of the hourly record on random grids, in
// whole seconds, in zones with a whole-hour, a half-hour and a quarter-hour
// offset and across clock changes.
func TestIdentities(t *testing.T) {
	judged := map[Class]bool{}
	defer func() {
		if len(judged) < int(NumClasses)-2 {
			t.Errorf("only %d of %d classes met over all grids: they are too dull to test anything", len(judged), NumClasses)
		}
	}()
	rapid.Check(t, func(t *rapid.T) {
		zone := rapid.SampledFrom([]string{"Europe/Zurich", "Asia/Kolkata", "Asia/Kathmandu", "Australia/Lord_Howe", "America/New_York"}).Draw(t, "zone")
		w := random(rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1)), zone, 4)
		r, sum, _ := w.judge(settings())
		for z := range r.ZoneIDs {
			for h := range r.Hours {
				row := r.Row(z, h)
				get := func(cols ...Col) (total int) {
					for _, c := range cols {
						total += int(r.Seconds[c][row])
					}
					return total
				}
				same := func(what string, a, b int) {
					if a != b {
						t.Fatalf("%s: zone %s hour %v: %d s against %d s", what, r.ZoneIDs[z], r.Hours[h], a, b)
					}
				}
				same("states", get(COpen, CMech, CBoth, CShut, CUnknown), get(COccupied))
				same("all states", get(CAllOpen, CAllMech, CAllBoth, CAllShut, CAllUnknown), (r.Hours[h].ToStep-r.Hours[h].FromStep)*300)
				same("classes", get(CAchieved, CMissed, CNotNeeded, CIllTimed, CClosedUnsuited, CNoOpening, CUnjudged), get(COccupied))
				same("suited", get(CAchieved, CMissed, CNotNeeded, CUnjudgedSuited), get(CSuited))
				same("weather", get(CSuited, CSuitedUnknown, CTooCold, CTooWarm, CTooHumid, CTooWindy, CRain, CPolluted, CTooBrief), get(COccupied)-get(CNoOpening))
				same("achieved", get(CAchievedOK, CAchievedWarm, CAchievedCool, CAchievedStale, CAchievedUnassessed), get(CAchieved))
				same("missed", get(CMissedCool, CMissedVent, CMissedBoth, CMissedShut, CMissedUntyped), get(CMissed))
				same("both", get(CBothCool, CBothHeat, CBothVent, CBothUntyped), get(CBoth))
			}
			for _, c := range r.Class[z] {
				judged[c] = true
			}
		}
		b := sum.Building
		if got := b.H[CAchieved] + b.H[CMissed] + b.H[CNotNeeded] + b.H[CIllTimed] + b.H[CClosedUnsuited] + b.H[CNoOpening] + b.H[CUnjudged]; math.Abs(got-b.H[COccupied]) > 1e-9 {
			t.Fatalf("building's classes %g h, occupied %g h", got, b.H[COccupied])
		}
		var months [NumCols]float64
		for _, m := range sum.Months {
			for c := range months {
				months[c] += m.Building.H[c]
			}
		}
		for c := range months {
			if math.Abs(months[c]-b.H[c]) > 1e-9 {
				t.Fatalf("%s: months sum to %g h, the period has %g h", ColName(Col(c)), months[c], b.H[c])
			}
		}
	})
}

// TestRenamingZonesChangesNothing is metamorphic: ids carry no meaning.
func TestRenamingZonesChangesNothing(t *testing.T) {
	w := random(rand.New(rand.NewPCG(7, 1)), "Europe/Zurich", 10)
	_, before, _ := w.judge(settings())
	w.s.Zones[0].ID, w.s.Zones[1].ID = "Zone <b>", "L1.02"
	w.s.Zones[1].Openings.Through = []string{"Zone <b>"}
	w.s.Plant[0].Serves = []string{"Zone <b>", "L1.02", "core"}
	_, after, _ := w.judge(settings())
	if before.Building.H != after.Building.H {
		t.Errorf("renaming zones moved the building's figures")
	}
	if before.Building.H[CAchieved] == 0 || before.Building.H[CMissed] == 0 {
		t.Errorf("nothing achieved or missed: the test shows nothing")
	}
}
