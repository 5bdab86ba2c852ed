package breeze

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/internal/physics/opening"
)

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: %v, want %v ± %v", what, got, want, tolerance)
	}
}

// ASHRAE Fundamentals ch. 24 (16 sectors, read in a public text); 0 and 360 are
// the same north.
func TestSector(t *testing.T) {
	for deg, want := range map[float64]string{0: "N", 360: "N", 348.75: "N", 348.74: "NNW", 11.249: "N", 11.25: "NNE", 90: "E", 180: "S", 270: "W", 292.5: "WNW", 359.9: "N", -90: "W", 720: "N"} {
		if got := SectorNames[Sector(deg)]; got != want {
			t.Errorf("%g°: %s, want %s", deg, got, want)
		}
	}
	if Sector(math.NaN()) != -1 || Sector(math.Inf(1)) != -1 {
		t.Error("no direction has no sector")
	}
	rapid.Check(t, func(t *rapid.T) {
		deg := rapid.Float64Range(-720, 720).Draw(t, "deg")
		s := Sector(deg)
		if OffDeg(deg, float64(s)*22.5) > 11.25+1e-9 || s != Sector(deg+360) {
			t.Fatalf("%g° in sector %d", deg, s)
		}
	})
}

// Beaufort scale (WMO, from memory): lower bounds as class starts, against
// the rule 0.836 B^1.5 m/s for the middle of a class.
func TestBeaufort(t *testing.T) {
	for b := 1; b <= 12; b++ {
		if got := Beaufort(0.836 * math.Pow(float64(b), 1.5)); got != b {
			t.Errorf("middle of Beaufort %d is put in %d", b, got)
		}
	}
	for ms, want := range map[float64]int{0: 0, 0.29: 0, 0.3: 1, 1.59: 1, 1.6: 2, 3.4: 3, 5.5: 4, 8.0: 5, 10.8: 6, 13.9: 7, 17.2: 8, 20.8: 9, 24.5: 10, 28.5: 11, 32.69: 11, 32.7: 12, 80: 12, -1: -1} {
		if got := Beaufort(ms); got != want {
			t.Errorf("%g m/s: %d, want %d", ms, got, want)
		}
	}
	if Beaufort(math.NaN()) != -1 {
		t.Error("NaN")
	}
}

// Circular mean, hand calculation: atan2 of the sums, resultant over n.
func TestMeanDirection(t *testing.T) {
	for _, c := range []struct {
		degs     []float64
		deg, r   float64
		noResult bool
	}{
		{[]float64{350, 10}, 0, 0.984808, false},
		{[]float64{0, 90}, 45, 0.707107, false},
		{[]float64{350, 20, 40}, 16.7773, 0.936721, false},
		{[]float64{0, 180}, 0, 0, true},
		{nil, 0, 0, true},
	} {
		deg, r := MeanDirection(c.degs)
		if c.noResult {
			if !math.IsNaN(deg) || r != 0 {
				t.Errorf("%v: %g, %g", c.degs, deg, r)
			}
			continue
		}
		near(t, "direction", OffDeg(deg, c.deg), 0, 5e-5)
		near(t, "steadiness", r, c.r, 5e-7)
		if deg < 0 || deg >= 360 {
			t.Errorf("%g°", deg)
		}
	}
}

// ASHRAE Fundamentals ch. 24, Example 1 (read in a public text): 10 m/s at a 10
// m mast at an airport is 7.8 m/s at 15 m in a suburb. Factors at 3, 10 and 30
// m recomputed from eq. 4 and Table 1. EN 16798-7 roughness (K_R, z_0, z_min
// read in public code): 0.22 ln(8/0.3) below 8 m in a suburb.
func TestSpeed(t *testing.T) {
	c := criteria.Settings{WindMastM: 10, WindMastTerrain: "country", WindOpeningM: 15, WindOpeningTerrain: "suburb"}
	near(t, "example 1", 10*speedOf(c).Factor, 7.8366, 5e-5)
	for terrain, want := range map[string][3]float64{
		"city": {0.30139, 0.44842, 0.64436}, "suburb": {0.54999, 0.71678, 0.91275}, "country": {0.84488, 1, 1.16626}, "water": {1.03724, 1.16995, 1.30581},
	} {
		for k, m := range []float64{3, 10, 30} {
			c.WindOpeningM, c.WindOpeningTerrain = m, terrain
			near(t, terrain, speedOf(c).Factor, want[k], 1e-5)
		}
	}
	c.WindOpeningM, c.WindOpeningTerrain = 6, "suburb"
	near(t, "EN 16798-7", speedOf(c).ENFactor, 0.22*math.Log(8/0.3)/(0.19*math.Log(10/0.05)), 1e-9)
	for _, r := range []struct {
		terrain       opening.Terrain
		k, z0, leastM float64
	}{{opening.Water, 0.17, 0.01, 2}, {opening.Country, 0.19, 0.05, 4}, {opening.Suburb, 0.22, 0.3, 8}, {opening.City, 0.24, 1, 16}} {
		for _, z := range []float64{1, 5, 10, 20, 40} {
			near(t, "C_R", opening.RoughnessFactorEN16798(z, r.terrain), r.k*math.Log(math.Max(z, r.leastM)/r.z0), 1e-12)
		}
	}
	for _, name := range criteria.Terrains {
		if _, ok := terrains[name]; !ok {
			t.Errorf("terrain %s is not known here", name)
		}
	}
}

// fixture is one zone that faces south, open and occupied throughout, at 24
// steps of an hour a day.
func fixture(days int) Input {
	n := days * 24
	f := func(v float32) []float32 {
		out := make([]float32, n)
		for i := range out {
			out[i] = v
		}
		return out
	}
	run := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n)}
	suit := make([]potential.Suit, n)
	for i := range run.Occupied {
		run.Occupied[i], run.State[i] = running.Occupied, running.Open
	}
	return Input{
		Site:     &site.Site{Zones: []site.Zone{{ID: "A", Openings: site.Openings{Outdoors: true}, FacesDeg: []float64{180}}}},
		Criteria: criteria.Settings{BreezeAboveC: 24, WindCalmMS: 0.5, WindMastM: 10, WindMastTerrain: "country", WindOpeningM: 10, WindOpeningTerrain: "country", MinDecayEvents: 3},
		Grid:     &grid.Grid{StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC},
		Outdoor:  &outdoor.Outdoor{TempC: f(20), WindMS: f(2), WindDirDeg: f(180)},
		Running:  &running.Result{Zones: []running.Zone{run}, Weights: []float64{1}}, Potential: &potential.Result{Zones: []potential.Zone{{Suit: suit}}},
	}
}

func TestRoses(t *testing.T) {
	in := fixture(1)
	nan := float32(math.NaN())
	w, d, temp := in.Outdoor.WindMS, in.Outdoor.WindDirDeg, in.Outdoor.TempC
	for i := 12; i < 20; i++ {
		temp[i] = 26 // 8 wanted hours
	}
	w[12], w[13] = 0.49, 0 // calm
	d[14] = nan            // no direction
	w[15] = nan            // unknown
	d[16], d[17] = 0, 240  // leeward; windward at just 60°
	d[18] = 241
	temp[0] = nan
	for i := range in.Potential.Zones[0].Suit {
		if i < 6 || i > 16 {
			in.Potential.Zones[0].Suit[i] = potential.TooCold
		}
	}
	r := Catch(in)
	if r.Missing != "" {
		t.Error(r.Missing)
	}
	a := r.Wanted
	near(t, "calm", a.CalmH, 2, 0)
	near(t, "no direction", a.NoDirectionH, 1, 0)
	near(t, "unknown", a.UnknownH, 2, 0) // no wind; no temperature
	near(t, "known", a.KnownH, 6, 0)
	near(t, "wanted and suited", r.WantedSuitedH, 5, 0)
	f := r.Facings[0]
	near(t, "windward", f.WindwardH, 2, 0)
	near(t, "leeward", f.LeewardH, 2, 0)
	near(t, "calm on the opening", f.CalmH, 2, 0)
	near(t, "share", f.WindwardShare, 2.0/6, 1e-12)
	near(t, "suited hours", r.Suited.KnownH, 9, 0)
	near(t, "all", r.All.KnownH+r.All.UnknownH+r.All.NoDirectionH, 24, 0)
}

// Sectors and calm make up the known hours, whatever the wind.
func TestRoseProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var r Rose
		n := rapid.IntRange(0, 50).Draw(t, "n")
		for range n {
			deg := rapid.SampledFrom([]float64{math.NaN(), 0, 360, 77, 348.75}).Draw(t, "deg")
			r.add(rapid.SampledFrom([]float64{math.NaN(), 0, 0.4, 0.5, 3, 60}).Draw(t, "ms"), deg, 0.5, 0.25)
		}
		r.finish()
		sum := r.CalmH
		for s := range Sectors {
			sum += r.SectorH(s)
		}
		if math.Abs(sum-r.KnownH) > 1e-9 || math.Abs(r.KnownH+r.NoDirectionH+r.UnknownH-0.25*float64(n)) > 1e-9 {
			t.Fatalf("%+v", r)
		}
	})
}

// No wind logged is said, and nothing is made up.
func TestMissing(t *testing.T) {
	for _, c := range []struct {
		speed, direction bool
		want             string
	}{
		{false, false, "wind is not logged: no rose can be drawn, and nothing can be said about the wind at the openings"},
		{false, true, "wind speed is not logged, only its direction: calm cannot be told from wind, so no rose is drawn"},
		{true, false, "wind direction is not logged: speeds are given, sectors and façades cannot be"},
	} {
		in := fixture(1)
		in.Rates = []Rate{{Zone: 0, FromStep: 0, ToStep: 2, AirChangePerH: 3}}
		if !c.speed {
			in.Outdoor.WindMS = nil
		}
		if !c.direction {
			in.Outdoor.WindDirDeg = nil
		}
		r := Catch(in)
		if r.Missing != c.want {
			t.Errorf("%q", r.Missing)
		}
		if !c.speed && (r.All.KnownH != 0 || r.All.CalmH != 0 || r.Drive != nil) {
			t.Errorf("something from nothing: %+v", r.All)
		}
		if c.speed && !c.direction && (r.All.NoDirectionH != 24 || r.All.Main() != -1 || math.Abs(r.All.MeanMS-2) > 1e-9) {
			t.Errorf("%+v", r.All)
		}
	}
}

// Rates that grow with the wind by a known law are found to do so; rates that
// do not are not, over many draws no more often than the interval says.
func TestDrive(t *testing.T) {
	wrong, missed := 0, 0
	for seed := range uint64(200) {
		rng := rand.New(rand.NewPCG(seed, 1))
		in := fixture(60)
		for i := range in.Outdoor.WindMS {
			in.Outdoor.WindMS[i] = float32(6 * rng.Float64())
			in.Outdoor.WindDirDeg[i] = float32(360 * rng.Float64())
		}
		law := func(slope float64) *Drive {
			in.Rates = nil
			for day := range 40 {
				i := day*24 + 18
				ms := float64(in.Outdoor.WindMS[i]+in.Outdoor.WindMS[i+1]) / 2
				in.Rates = append(in.Rates, Rate{FromStep: i, ToStep: i + 2, AirChangePerH: 3 + slope*ms + 0.8*rng.NormFloat64()})
			}
			return Catch(in).Drive
		}
		if d := law(0); d.Driven || d.SlopeHigh < 0 {
			wrong++
		}
		if d := law(0.6); !d.Driven {
			missed++
		}
	}
	// 5 % expected; 200 draws at 5 % give 21 or more once in 1000 (binomial).
	if wrong > 20 {
		t.Errorf("a slope was found in %d of 200 draws without one", wrong)
	}
	if missed > 10 {
		t.Errorf("a clear slope was missed in %d of 200 draws", missed)
	}
}

func TestDriveGroups(t *testing.T) {
	in := fixture(20)
	w, d := in.Outdoor.WindMS, in.Outdoor.WindDirDeg
	for day := range 20 {
		i := day * 24
		in.Rates = append(in.Rates, Rate{FromStep: i, ToStep: i + 2, AirChangePerH: 2})
		switch {
		case day < 5: // windward and strong
			w[i], w[i+1], in.Rates[day].AirChangePerH = 5, 5, 6
		case day < 10: // leeward
			d[i], d[i+1] = 0, 350
		case day < 12: // calm, too few to judge
			w[i], w[i+1] = 0.2, 0.4
		case day == 12: // no wind known
			w[i], w[i+1] = float32(math.NaN()), float32(math.NaN())
		}
	}
	g := Catch(in).Drive
	if g.NoWind != 1 || len(g.Points) != 19 {
		t.Fatalf("%d without wind, %d with", g.NoWind, len(g.Points))
	}
	near(t, "windward", g.Sides[1].Median, 1, 1e-9) // of 12, seven at 2 per hour
	near(t, "leeward", g.Sides[2].Median, 1, 1e-9)
	if g.Sides[0].Decays != 2 || !math.IsNaN(g.Sides[0].Median) {
		t.Errorf("two decays in calm are too few: %+v", g.Sides[0])
	}
	near(t, "4 m/s and more", g.Speeds[4].Median, 3, 1e-9)
	near(t, "rates", g.Speeds[4].MedianPerH, 6, 1e-9)
	if g.Sectors[0].Decays != 5 || g.Sectors[4].Decays != 12 {
		t.Errorf("north %d, south %d", g.Sectors[0].Decays, g.Sectors[4].Decays)
	}
	sum := g.NoWind
	for _, s := range g.Sides {
		sum += s.Decays
	}
	if sum != 20 {
		t.Errorf("%d decays in all groups", sum)
	}
}

func TestDocs(t *testing.T) {
	for _, d := range Docs() {
		if d.Title == "" || d.Question == "" || d.Formula == "" || len(d.Limits) == 0 || len(d.Sources) == 0 {
			t.Errorf("incomplete: %+v", d)
		}
		if d.Standing != method.Published && d.Standing != method.FromMemory && d.Standing != method.OurAssumption {
			t.Errorf("%s: standing %q", d.Title, d.Standing)
		}
	}
}
