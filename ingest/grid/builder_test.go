package grid

import (
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

type raw struct {
	point int
	t     int64
	v     float64
}

// rules gives the plain limits of the quantity.
func rules(p *site.Point) Rule {
	t, _ := p.Quantity.Trait()
	return Rule{Low: t.Low, High: t.High}
}

func siteOf(points ...site.Point) *site.Site {
	return &site.Site{StepS: 300, Points: points}
}

// build feeds parts one after the other, twice where the builder asks for it.
func build(t testing.TB, s *site.Site, o Options, f Frame, parts ...[]raw) *Built {
	t.Helper()
	if o.Rule == nil {
		o.Rule = rules
	}
	b := NewBuilder(s, o)
	feed := func() {
		for _, part := range parts {
			for _, r := range part {
				b.Reading(r.point, r.t, r.v)
			}
		}
	}
	feed()
	again, err := b.Again()
	if err != nil {
		t.Fatal(err)
	}
	if len(again) > 0 {
		feed()
	}
	if err := b.Sort(); err != nil {
		t.Fatal(err)
	}
	b.Flush()
	return b.Finish(f)
}

func frame(fromS, toS int64) Frame {
	return Frame{FromUTC: fromS, PeriodFromUTC: fromS, ToUTC: toS, Loc: time.UTC}
}

// A worked example, computed by hand: 20 at 0 h, 21 at 1 h, 22.5 at
// 1.5 h, 22 at 4 h, until 6 h, has the time-weighted mean 21.791667.
func TestTimeWeightedMeanOfWorkedExample(t *testing.T) {
	s := siteOf(site.Point{Quantity: site.AirTemp, Logging: site.COV, Hold: 6 * time.Hour})
	b := build(t, s, Options{}, frame(0, 6*3600), []raw{{0, 0, 20}, {0, 3600, 21}, {0, 5400, 22.5}, {0, 4 * 3600, 22}})
	var sum float64
	for i, m := range b.Grid.Columns[0].Mean {
		if b.Grid.Columns[0].CoveredS[i] != 300 {
			t.Fatalf("step %d: %d s covered", i, b.Grid.Columns[0].CoveredS[i])
		}
		sum += float64(m)
	}
	if got := sum / 72; math.Abs(got-21.791667) > 1e-6 {
		t.Errorf("mean %.6f, want 21.791667", got)
	}
	if c := b.Ledger.Points[0].Coverage; c != 1 {
		t.Errorf("coverage %v", c)
	}
}

func TestHoldLimits(t *testing.T) {
	day := int64(86400)
	for _, c := range []struct {
		name    string
		point   site.Point
		parts   []raw
		covered int64
	}{
		{"change of value, number: 1 h", site.Point{Quantity: site.AirTemp, Logging: site.COV}, []raw{{0, 0, 20}, {0, 7200, 21}}, 7200},
		{"change of value, state: 25 h", site.Point{Quantity: site.Window, Logging: site.COV}, []raw{{0, 0, 1}, {0, 2 * day, 0}}, 50 * 3600},
		{"sampled each 10 min: 30 min", site.Point{Quantity: site.AirTemp}, []raw{{0, 0, 20}, {0, 600, 20}, {0, 1200, 20}, {0, 9000, 21}}, 1200 + 2*1800},
		{"sampled each minute: not below 5 min", site.Point{Quantity: site.AirTemp}, []raw{{0, 0, 20}, {0, 60, 20}, {0, 120, 20}}, 120 + 300},
		{"sampled each 2 h: not above 3 h", site.Point{Quantity: site.AirTemp}, []raw{{0, 0, 20}, {0, 7200, 20}, {0, 14400, 20}}, 14400 + 3*3600},
		{"given: 10 min", site.Point{Quantity: site.AirTemp, Hold: 10 * time.Minute}, []raw{{0, 0, 20}, {0, 7200, 20}}, 1200},
	} {
		b := build(t, siteOf(c.point), Options{}, frame(0, 4*day), c.parts)
		var covered int64
		for _, s := range b.Grid.Columns[0].CoveredS {
			covered += int64(s)
		}
		if covered != c.covered {
			t.Errorf("%s: %d s covered, want %d", c.name, covered, c.covered)
		}
	}
}

func TestKindsOfStep(t *testing.T) {
	s := siteOf(
		site.Point{Quantity: site.Window, Logging: site.COV},
		site.Point{Quantity: site.PlantStatus, Logging: site.COV},
		site.Point{Quantity: site.WindDirection, Hold: time.Hour},
		site.Point{Quantity: site.Rain, Unit: "mm", Stamp: site.StampEnd},
	)
	b := build(t, s, Options{}, frame(0, 1800), []raw{
		// Open 100 s of the first step.
		{0, 0, 0}, {0, 200, 1}, {0, 300, 0},
		// 100 s off, 200 s heat; then 150 s each: the stronger.
		{1, 0, 0}, {1, 100, 3}, {1, 300, 3}, {1, 450, 4}, {1, 600, 4},
		// 350 and 10 degrees average to north; opposite winds to nothing.
		{2, 0, 350}, {2, 150, 10}, {2, 300, 90}, {2, 450, 270}, {2, 600, 180},
		// 1 mm in 10 min is 6 mm/h, in the ten minutes before the stamp.
		{3, 600, 0}, {3, 1200, 1}, {3, 1800, 0},
	})
	col := func(p, i int) float64 { return float64(b.Grid.Columns[p].Mean[i]) }
	if got := col(0, 0); math.Abs(got-1.0/3) > 1e-6 {
		t.Errorf("open share %v, want 1/3", got)
	}
	if col(1, 0) != 3 || col(1, 1) != 4 {
		t.Errorf("states %v %v, want 3 4", col(1, 0), col(1, 1))
	}
	if got := col(2, 0); math.Min(got, 360-got) > 1e-3 {
		t.Errorf("direction %v, want north", got)
	}
	if !math.IsNaN(col(2, 1)) || b.Grid.Columns[2].CoveredS[1] != 0 {
		t.Errorf("opposite winds: %v covered %d, want nothing", col(2, 1), b.Grid.Columns[2].CoveredS[1])
	}
	if col(3, 1) != 0 || col(3, 2) != 6 || col(3, 3) != 6 || col(3, 4) != 0 {
		t.Errorf("rain %v, want 6 mm/h in steps 2 and 3", b.Grid.Columns[3].Mean)
	}
}

func TestDuplicatesConflictsRangeSpikes(t *testing.T) {
	s := siteOf(site.Point{Quantity: site.AirTemp})
	o := Options{Rule: func(*site.Point) Rule { return Rule{Low: -30, High: 60, Spike: 8} }}
	b := build(t, s, o, frame(0, 7200), []raw{
		{0, 0, 20}, {0, 300, 20}, {0, 300, 20}, // duplicate
		{0, 600, 21}, {0, 600, 22}, {0, 600, 21}, // conflict: all three
		{0, 900, 99}, // out of range
		{0, 1200, 20}, {0, 1500, 35}, {0, 1800, 20.5}, {0, 2100, 30}, {0, 2400, 30},
		{0, 2700, math.NaN()},
	})
	l := b.Ledger.Points[0]
	want := map[reading.Reason]int64{reading.Accepted: 6, reading.Duplicate: 1, reading.Conflict: 3,
		reading.OutOfRange: 1, reading.Spike: 1, reading.NotNumber: 1}
	var total int64
	for r := reading.Reason(0); r < reading.NumReasons; r++ {
		if l.Counts[r] != want[r] {
			t.Errorf("%v: %d, want %d", r, l.Counts[r], want[r])
		}
		total += l.Counts[r]
	}
	if total != l.RowsRead {
		t.Errorf("%d counted of %d", total, l.RowsRead)
	}
	if l.Min != 20 || l.Max != 30 {
		t.Errorf("least %v, greatest %v", l.Min, l.Max)
	}
}

func TestFrozenRunsAndGaps(t *testing.T) {
	o := Options{Rule: func(*site.Point) Rule { return Rule{Low: -30, High: 60, FrozenS: 6 * 3600} }}
	var rs []raw
	for i := int64(0); i < 288; i++ {
		v := 20 + float64(i%7)/10
		if i >= 100 && i < 200 {
			v = 21.5
		}
		if i >= 230 && i < 250 {
			continue
		}
		rs = append(rs, raw{0, i * 300, v})
	}
	b := build(t, siteOf(site.Point{Quantity: site.AirTemp}), o, frame(0, 86400), rs)
	if got := b.Facts[0].Runs; len(got) != 1 || got[0].FromUTC != 30000 || got[0].ToUTC != 199*300 || got[0].Readings != 100 || got[0].Value != 21.5 {
		t.Errorf("runs %+v", got)
	}
	if l := b.Ledger.Points[0]; l.Gaps != 1 || l.LongestGapS != 21*300 {
		t.Errorf("gaps %d, longest %d s", l.Gaps, l.LongestGapS)
	}
	if n := b.Tally.Void(0, 100, 200, reading.Frozen); n != 100 {
		t.Errorf("%d readings moved, want 100", n)
	}
	b.Tally.Settle()
	l := b.Ledger.Points[0]
	if l.Counts[reading.Frozen] != 100 || l.Counts[reading.Accepted]+100 != l.RowsRead || b.Grid.Columns[0].CoveredS[150] != 0 {
		t.Errorf("ledger after voiding: %+v", l.Counts)
	}
}

func TestRedoCorrectsUnit(t *testing.T) {
	s := siteOf(site.Point{Quantity: site.AirTemp})
	for _, shuffled := range []bool{false, true} {
		rs := []raw{{0, 0, 68}, {0, 300, 77}, {0, 600, 68}}
		if shuffled {
			rs[0], rs[2] = rs[2], rs[0]
		}
		b := NewBuilder(s, Options{Rule: rules})
		feed := func() {
			for _, r := range rs {
				b.Reading(r.point, r.t, r.v)
			}
		}
		feed()
		b.Redo(0, site.Conversion{Factor: 5.0 / 9, Offset: -160.0 / 9})
		if again, err := b.Again(); err != nil || !slices.Equal(again, []int{0}) {
			t.Fatal(again, err)
		}
		feed()
		if err := b.Sort(); err != nil {
			t.Fatal(err)
		}
		b.Flush()
		got := b.Finish(frame(0, 900))
		if l := got.Ledger.Points[0]; l.RowsRead != 3 || l.Counts[reading.Accepted] != 3 || l.Counts[reading.OutOfRange] != 0 || l.Disordered != shuffled {
			t.Errorf("ledger %+v", l)
		}
		if m := got.Grid.Columns[0].Mean; m[0] != 20 || m[1] != 25 {
			t.Errorf("means %v", m)
		}
	}
}

func TestSpanLeavesStraysOut(t *testing.T) {
	s := siteOf(site.Point{Quantity: site.AirTemp})
	b := NewBuilder(s, Options{Rule: rules})
	b.Reading(0, 0, 20) // a logger that lost its clock
	at := time.Date(2024, 3, 1, 12, 0, 0, 0, time.UTC).Unix()
	for i := int64(0); i < 1000; i++ {
		b.Reading(0, at+i*3600, 20)
	}
	b.Flush()
	first, last, strays, ok := b.Span(func(int) bool { return true })
	if !ok || first != at || last != at+999*3600 || strays != 1 {
		t.Errorf("span %d..%d, %d strays, %v", first, last, strays, ok)
	}
	if _, _, _, ok := b.Span(func(int) bool { return false }); ok {
		t.Error("span of no points")
	}
}

// slowMean integrates the step function second by second.
func slowMean(rs []raw, holdS, from, to int64) (mean float64, covered int64) {
	var sum float64
	for s := from; s < to; s++ {
		at := -1
		for i, r := range rs {
			if r.t <= s {
				at = i
			}
		}
		if at >= 0 && s-rs[at].t < holdS {
			sum += rs[at].v
			covered++
		}
	}
	return sum / float64(covered), covered
}

func TestMeanIsIntegralOfStepFunction(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		hold := rapid.Int64Range(1, 2000).Draw(rt, "hold")
		var rs []raw
		at := int64(0)
		for range rapid.IntRange(1, 20).Draw(rt, "n") {
			at += rapid.Int64Range(1, 900).Draw(rt, "gap")
			rs = append(rs, raw{0, at, float64(rapid.IntRange(-300000, 600000).Draw(rt, "v")) / unit})
		}
		p := site.Point{Quantity: site.AirTemp, Hold: time.Duration(hold) * time.Second}
		to := (at/300 + 8) * 300
		b := build(t, siteOf(p), Options{}, frame(0, to), rs)
		var counted int
		for i := 0; i < b.Grid.N; i++ {
			want, covered := slowMean(rs, hold, int64(i)*300, int64(i+1)*300)
			c := b.Grid.Columns[0]
			if int64(c.CoveredS[i]) != covered {
				rt.Fatalf("step %d: covered %d, want %d", i, c.CoveredS[i], covered)
			}
			if covered == 0 != math.IsNaN(float64(c.Mean[i])) || covered > 0 && math.Abs(float64(c.Mean[i])-want) > 1e-5 {
				rt.Fatalf("step %d: mean %v, want %v", i, c.Mean[i], want)
			}
			counted += int(b.Tally.Readings[0][i])
		}
		if counted != len(rs) {
			rt.Fatalf("%d readings in steps, want %d", counted, len(rs))
		}
	})
}

func sameColumns(rt *rapid.T, name string, a, b *Built) {
	for p := range a.Grid.Columns {
		x, y := a.Grid.Columns[p], b.Grid.Columns[p]
		if !slices.Equal(x.CoveredS, y.CoveredS) || !slices.Equal(a.Tally.Readings[p], b.Tally.Readings[p]) {
			rt.Fatalf("%s: point %d: covered or counted differently", name, p)
		}
		if !slices.EqualFunc(x.Mean, y.Mean, func(u, v float32) bool { return math.Float32bits(u) == math.Float32bits(v) }) {
			rt.Fatalf("%s: point %d: means differ", name, p)
		}
	}
}

// Rows in any order and a file split in two give the
// same outputs as the tidy file.
func TestOrderDoesNotMatter(t *testing.T) {
	points := []site.Point{
		{Quantity: site.AirTemp, Stamp: site.StampEnd}, {Quantity: site.Window, Logging: site.COV},
		{Quantity: site.PlantStatus, Logging: site.COV}, {Quantity: site.WindDirection}, {Quantity: site.Rain, Unit: "mm"},
	}
	rule := func(p *site.Point) Rule {
		r := rules(p)
		r.FrozenS = 3600
		if p.Quantity == site.AirTemp {
			r.Spike, r.Bins = 5, TempBins
		}
		return r
	}
	ignore := cmp.Options{cmpopts.EquateNaNs(), cmp.AllowUnexported(Run{}),
		cmpopts.IgnoreFields(reading.PointLedger{}, "Disordered"), cmpopts.IgnoreFields(Facts{}, "Early")}
	rapid.Check(t, func(rt *rapid.T) {
		seed := rapid.Uint64().Draw(rt, "seed")
		r := rand.New(rand.NewPCG(seed, 1))
		var rs []raw
		at := int64(1_700_000_000)
		for range rapid.IntRange(1, 300).Draw(rt, "n") {
			at += int64(r.IntN(3)) * int64(r.IntN(1200)) // often the same instant again
			p := r.IntN(len(points))
			tr, _ := points[p].Quantity.Trait()
			v := math.Round(tr.Low + r.Float64()*1.05*(tr.High-tr.Low))
			if p == 0 {
				v = float64(20 + r.IntN(2)*r.IntN(12))
			}
			rs = append(rs, raw{p, at, v})
			if r.IntN(100) == 0 {
				at += 40 * 86400 // so that several months are spilled
			}
		}
		f := frame(1_700_000_000-86400, at+2*86400)
		dir := t.TempDir()
		tidy := build(t, siteOf(points...), Options{Rule: rule}, f, rs)
		var accepted int64
		for i := range tidy.Ledger.Points {
			accepted += tidy.Ledger.Points[i].Counts[reading.Accepted]
		}
		if accepted == 0 {
			rt.Skip("nothing accepted: equality would prove nothing")
		}
		shuffled := slices.Clone(rs)
		r.Shuffle(len(shuffled), func(i, j int) { shuffled[i], shuffled[j] = shuffled[j], shuffled[i] })
		cut := r.IntN(len(rs) + 1)
		for name, parts := range map[string][][]raw{
			"shuffled": {shuffled}, "second half first": {rs[cut:], rs[:cut]}, "split": {rs[:cut], rs[cut:]},
		} {
			got := build(t, siteOf(points...), Options{Rule: rule, TempDir: dir}, f, parts...)
			if d := cmp.Diff(tidy.Ledger, got.Ledger, ignore); d != "" {
				rt.Fatalf("%s: %s", name, d)
			}
			if d := cmp.Diff(tidy.Facts, got.Facts, ignore); d != "" {
				rt.Fatalf("%s: %s", name, d)
			}
			sameColumns(rt, name, tidy, got)
		}
		if left, _ := os.ReadDir(dir); len(left) > 0 {
			rt.Fatalf("left behind: %v", left)
		}
	})
}

func TestReadingsOutsideFrameAreCounted(t *testing.T) {
	s := siteOf(site.Point{Quantity: site.AirTemp, Stamp: site.StampEnd})
	rs := []raw{}
	for i := int64(0); i < 20; i++ {
		rs = append(rs, raw{0, i * 300, 20})
	}
	for _, o := range []Options{{}, {FromUTC: 600, ToUTC: 3000}} {
		b := build(t, s, o, frame(600, 3000), rs)
		l := b.Ledger.Points[0]
		// Stamped at the end: 900 s to 3000 s tell of 600 s to 2700 s, and so on.
		if l.Counts[reading.Accepted] != 8 || l.Counts[reading.OutsidePeriod] != 12 {
			t.Errorf("accepted %d, outside %d", l.Counts[reading.Accepted], l.Counts[reading.OutsidePeriod])
		}
		if l.Coverage != 1 || b.Grid.N != 8 {
			t.Errorf("coverage %v of %d steps", l.Coverage, b.Grid.N)
		}
	}
}

func BenchmarkBuilder(b *testing.B) {
	const columns, minutes = 60, 43200
	points := make([]site.Point, columns)
	for i := range points {
		points[i].Quantity = site.AirTemp
	}
	rule := func(*site.Point) Rule {
		return Rule{Low: -30, High: 60, Spike: 8, FrozenS: 86400, Bins: TempBins}
	}
	for b.Loop() {
		bd := NewBuilder(siteOf(points...), Options{Rule: rule})
		for m := int64(0); m < minutes; m++ {
			v := 20 + float64(m%50)/10
			for p := range points {
				bd.Reading(p, m*60, v)
			}
		}
		bd.Flush()
		bd.Finish(frame(0, minutes*60))
	}
	b.ReportMetric(float64(columns*minutes)*float64(b.N)/b.Elapsed().Seconds()/1e6, "Mreadings/s")
}
