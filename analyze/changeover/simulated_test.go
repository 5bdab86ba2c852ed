package changeover

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/cores"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// behaviour is how a simulated unit changes over: a controller of known limits
// and nothing of the model's own form.
type behaviour struct {
	closeHighC, openHighC float64 // outdoors
	closeLowC, openLowC   float64
	roomC                 float64 // a room calls from here, until 0.8 K below
	noiseC                float64 // of the logged temperatures
	jitterC               float64 // the limit differs from day to day (standard deviation)
	random                float64 // chance per step of stopping open mode for no reason
	minRun                int     // steps
	changeDay             int     // from this day closeHighC and openHighC are 2 K higher; 0 never
}

var standard = behaviour{closeHighC: 23, openHighC: 22.5, closeLowC: 14.5, openLowC: 15, roomC: 25, noiseC: 0.08, random: 0.002, minRun: 6}

// simulate runs the unit from March to October at 10 min steps.
func simulate(b behaviour, days int, seed uint64) Input {
	const stepS, perDay = 600, 144
	rng := rand.New(rand.NewPCG(seed, 5))
	n := days * perDay
	start := time.Date(2031, 3, 3, 0, 0, 0, 0, time.UTC) // a Monday
	g := &grid.Grid{StartUTC: start.Unix(), StepS: stepS, N: n, PeriodTo: n, Loc: time.UTC}
	cal := calendar.Of(g)
	outC, roomC := make([]float32, n), make([]float32, n)
	state := make([]uint8, n)
	occ := make([]running.Occupancy, n)
	zone := make([]running.State, n)
	weather, room := 0.0, 22.0
	open, ran, calling := false, 99, false
	jitter := 0.0
	for i := range n {
		d, m := i/perDay, i%perDay
		if m == 0 {
			weather = 0.75*weather + 2.4*rng.NormFloat64()
			jitter = b.jitterC * rng.NormFloat64()
		}
		h := float64(m) / 6
		season := 9 * math.Sin(2*math.Pi*float64(d)/365)
		t := 12 + season + weather + 4.5*math.Sin(2*math.Pi*(h-9)/24)
		room += 0.02*(t+6-room) + 0.03*rng.NormFloat64()
		if h > 8 && h < 18 {
			room += 0.05
		}
		if !open {
			room += 0.08 * (22.5 - room)
		}
		outC[i], roomC[i] = float32(t+b.noiseC*rng.NormFloat64()), float32(room+b.noiseC*rng.NormFloat64())
		working := d%7 < 5 && h >= 7 && h < 19
		if d%7 < 5 && h >= 8 && h < 18 {
			occ[i] = running.Occupied
		}
		if room > b.roomC {
			calling = true
		} else if room < b.roomC-0.8 {
			calling = false
		}
		up := jitter
		if b.changeDay > 0 && d >= b.changeDay {
			up += 2
		}
		ran++
		switch {
		case !working:
			open, ran = false, 99
			state[i] = uint8(site.PlantOff)
			zone[i] = running.Shut
			continue
		case open && (t > b.closeHighC+up || t < b.closeLowC+jitter || calling || rng.Float64() < b.random):
			open, ran = false, 0
		case !open && ran >= b.minRun && t < b.openHighC+up && t > b.openLowC+jitter && !calling:
			open = true
		}
		state[i], zone[i] = uint8(site.PlantVent), running.Mech
		if open {
			state[i], zone[i] = uint8(site.PlantOff), running.Open
		}
	}
	return Input{
		Site: &site.Site{Zones: []site.Zone{{ID: "A", People: 5}}, Plant: []site.Plant{{ID: "U", Serves: []string{"A"}}}},
		Grid: g, Calendar: cal, Outdoor: &outdoor.Outdoor{TempC: outC}, Indoor: []indoor.Zone{{OperativeC: roomC}},
		Running:   &running.Result{Zones: []running.Zone{{State: zone, Occupied: occ, Plant: state}}, Units: [][]uint8{state}},
		Potential: &potential.Result{Zones: make([]potential.Zone, 1)}, Seed: seed,
	}
}

// find is the limit of the unit that matches, nil when none does.
func find(r *Result, opening bool, zone int, above bool) *Limit {
	for _, l := range r.Units[0].Limits() {
		if l.Opening == opening && l.Zone == zone && l.Above == above && l.Undetermined == "" {
			return &l
		}
	}
	return nil
}

// wilson is the 95 % interval of a share (Wilson 1927, from memory).
func wilson(k, n int) (low, high float64) {
	const z = 1.96
	p, m := float64(k)/float64(n), float64(n)
	mid, half := p+z*z/(2*m), z*math.Sqrt(p*(1-p)/m+z*z/(4*m*m))
	return (mid - half) / (1 + z*z/m), (mid + half) / (1 + z*z/m)
}

// seeds is how many are tried: all with SASHLOG_LONG set, else some of them.
func seeds(many int) int {
	switch {
	case os.Getenv("SASHLOG_LONG") != "":
		return many
	case testing.Short():
		return many / 10
	}
	return many / 5
}

// Known limits are found, and their intervals hold the truth about as often as
// they claim. Truth is the controller's setting.
func TestKnownLimitsRecovered(t *testing.T) {
	for _, c := range []struct {
		name string
		b    behaviour
	}{{"sharp", standard}, {"limit differs by day", func() behaviour { b := standard; b.jitterC = 0.4; return b }()}} {
		n := seeds(100)
		results := make([]*Result, n)
		cores.Each(n, func(k int) { results[k] = Read(simulate(c.b, 230, uint64(k+1))) })
		t.Logf("%s: limit, truth, found, mean error, covered (95 %% interval of the share), mean width", c.name)
		for _, x := range []struct {
			what           string
			opening, above bool
			zone           int
			truth          float64
		}{
			{"outdoors ends above", false, true, -1, c.b.closeHighC}, {"outdoors ends below", false, false, -1, c.b.closeLowC},
			{"outdoors begins below", true, true, -1, c.b.openHighC}, {"outdoors begins above", true, false, -1, c.b.openLowC},
			{"room ends above", false, true, 0, c.b.roomC},
		} {
			found, held := 0, 0
			bias, width := 0.0, 0.0
			for _, r := range results {
				l := find(r, x.opening, x.zone, x.above)
				if l == nil {
					continue
				}
				found++
				bias += l.LevelC - x.truth
				width += l.HighC - l.LowC
				if l.LowC <= x.truth && x.truth <= l.HighC {
					held++
				}
			}
			lo, hi := wilson(held, max(1, found))
			t.Logf("  %-22s %5.1f %3d of %d %+.3f K %.2f (%.2f to %.2f) %.2f K", x.what, x.truth, found, n, bias/float64(found), float64(held)/float64(found), lo, hi, width/float64(found))
			if x.what == "outdoors ends below" && found < n/2 {
				continue // hardly ever happens in a summer; what is found must still be right
			}
			if 10*found < 8*n {
				t.Errorf("%s, %s: found in %d of %d", c.name, x.what, found, n)
			}
			// A limit that differs from day to day is waited for: openings read it on
			// the far side by about that spread.
			allowed := 0.2
			if x.opening {
				allowed += 1.1 * c.b.jitterC
			}
			// Few seeds leave the mean error itself uncertain: two standard errors,
			// the width of an interval being four.
			allowed += width / float64(found) / 2 / math.Sqrt(float64(found))
			if math.Abs(bias/float64(found)) > allowed {
				t.Errorf("%s, %s: off by %.2f K on average", c.name, x.what, bias/float64(found))
			}
			if hi < 0.9 && (!x.opening || c.b.jitterC == 0) {
				t.Errorf("%s, %s: covered in %d of %d", c.name, x.what, held, found)
			}
		}
	}
}

// A planted change of 2 K is dated; a stable series shows none.
func TestChangeDated(t *testing.T) {
	n := seeds(200)
	const planted = 120
	type answer struct{ stable, found, dated, near int }
	out := make([]answer, n)
	cores.Each(n, func(k int) {
		b := standard
		b.roomC = 27 // rooms seldom call before the limit is reached
		if len(Read(simulate(b, 230, uint64(k+1))).Shifts()) > 0 {
			out[k].stable = 1
		}
		b.changeDay = planted
		for _, s := range Read(simulate(b, 230, uint64(k+1001))).Shifts() {
			out[k].found = 1
			if s.Shift.FromDay <= planted && planted <= s.Shift.ToDay {
				out[k].dated = 1
			}
			if math.Abs(float64(s.Shift.Day-planted)) <= 7 {
				out[k].near = 1
			}
		}
	})
	var sum answer
	for _, a := range out {
		sum.stable, sum.found, sum.dated, sum.near = sum.stable+a.stable, sum.found+a.found, sum.dated+a.dated, sum.near+a.near
	}
	share := func(k, n int) string {
		lo, hi := wilson(k, max(1, n))
		return fmt.Sprintf("%d of %d (%.3f to %.3f)", k, n, lo, hi)
	}
	t.Logf("stable: a change is told in %s", share(sum.stable, n))
	t.Logf("planted: told in %s; the interval holds the date in %s; within a week in %s", share(sum.found, n), share(sum.dated, sum.found), share(sum.near, sum.found))
	if lo, _ := wilson(sum.stable, n); lo > shiftAlpha {
		t.Errorf("false changes in %d of %d stable series", sum.stable, n)
	}
	if 10*sum.found < 8*n || 10*sum.near < 8*sum.found || 10*sum.dated < 8*sum.found {
		t.Errorf("planted change: told %d, near %d, dated %d of %d", sum.found, sum.near, sum.dated, n)
	}
}

// A limit that separates the data perfectly has a finite, sharp edge.
func TestSeparableData(t *testing.T) {
	b := behaviour{closeHighC: 22, openHighC: 22, closeLowC: -50, openLowC: -50, roomC: 99, minRun: 0}
	found := 0
	for seed := uint64(1); seed <= 10; seed++ {
		r := Read(simulate(b, 200, seed))
		for _, opening := range []bool{false, true} {
			l := find(r, opening, -1, true)
			if l == nil && opening { // most days begin open, so that openings are few
				continue
			}
			if l == nil {
				t.Fatalf("seed %d: no limit that ends open mode: %+v", seed, r.Units[0].Closing)
			}
			found++
			if math.Abs(l.LevelC-22) > 0.2 || !(l.BlurK >= sharpestK && l.BlurK < 0.2) || !(l.HighC-l.LowC > 0 && l.HighC-l.LowC < 1) || l.LowC > 22 || l.HighC < 22 {
				t.Errorf("seed %d: %+v", seed, *l)
			}
		}
	}
	if found <= 10 {
		t.Errorf("%d of 20 limits found", found)
	}
}

// Nothing is fitted to a handful of changes, and nothing panics on unknown data.
func TestRefusals(t *testing.T) {
	in := simulate(standard, 230, 1)
	for i := range in.Running.Units[0] {
		in.Running.Units[0][i] = running.PlantUnknown
	}
	u := Read(in).Units[0]
	if u.Closing.Refused == "" || u.Opening.Refused == "" || len(u.Limits()) > 0 || u.Days != 0 {
		t.Errorf("unknown plant: %+v", u)
	}
	in = simulate(standard, 230, 1)
	in.Outdoor.TempC = nil
	if u := Read(in).Units[0]; u.Closing.Refused == "" || len(u.Limits()) > 0 {
		t.Errorf("no weather: %+v", u.Closing)
	}
	if u := Read(simulate(standard, 3, 1)).Units[0]; u.Closing.Refused == "" {
		t.Errorf("three days: %+v", u.Closing)
	}
	in = simulate(standard, 60, 1)
	for i := range in.Indoor[0].OperativeC {
		in.Indoor[0].OperativeC[i] = float32(math.NaN())
	}
	Read(in)
}

// The same input gives the same result, whatever else the building holds.
func TestDeterministic(t *testing.T) {
	a, b := fmt.Sprintf("%+v", Read(simulate(standard, 120, 3))), fmt.Sprintf("%+v", Read(simulate(standard, 120, 3)))
	if a != b {
		t.Error("two readings differ")
	}
}
