package influx

import (
	"context"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"
	"time"
	_ "time/tzdata"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/influx/influxtest"
	"sashlog/ingest/quality"
	"sashlog/ingest/reading"
)

// One server serves all tests of the package; each test has a database of its
// own.
var (
	server  influxtest.Server
	guarded = influxtest.Server{Auth: true}
)

func TestMain(m *testing.M) {
	code := m.Run()
	server.Stop()
	guarded.Stop()
	os.Exit(code)
}

// houseOf is a site with one log in a database.
func houseOf(address, bucket string, read site.InfluxRead, points ...site.Point) (*site.Site, *site.Log) {
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		panic(err)
	}
	s := &site.Site{Location: loc, TimeZone: "Europe/Zurich", StepS: 300, Zones: []site.Zone{{ID: "A"}}, File: "site.yaml"}
	s.Logs = []site.Log{{Name: "store", Clock: site.Clock{Kind: site.ClockUTC}, Influx: &site.Influx{Address: address, Bucket: bucket, TokenEnv: "SASHLOG_INFLUX_TOKEN",
		Measurement: "readings", PointTag: "point", Field: "value", TimeOutS: 120, Read: read}}}
	for i, p := range points {
		p.Source, p.Line, p.Share = "store", i+2, math.NaN()
		if p.Conversion.Factor == 0 {
			c, err := site.Convert(p.Quantity, p.Unit)
			if err != nil {
				panic(err)
			}
			p.Conversion = c
		}
		if p.Logging == "" {
			p.Logging = site.Sampled
		}
		s.Points = append(s.Points, p)
	}
	return s, &s.Logs[0]
}

func everyPoint(s *site.Site) []int {
	out := make([]int, len(s.Points))
	for i := range out {
		out[i] = i
	}
	return out
}

func open(t *testing.T, s *site.Site) *Source {
	t.Helper()
	src, unmet, err := Open(context.Background(), s, &s.Logs[0], everyPoint(s))
	if err != nil {
		t.Fatal(err)
	}
	for _, u := range unmet {
		t.Fatalf("unmet: %+v", u)
	}
	return src
}

// told keeps what a source hands over, by point.
type told struct {
	readings map[int][]number
	rejects  map[int]map[reading.Reason]int
	issues   []reading.Issue
	n        int
	each     func(n int)
}

func (k *told) Reading(p int, t int64, v float64) {
	if k.readings == nil {
		k.readings = map[int][]number{}
	}
	k.readings[p] = append(k.readings[p], number{t, v})
	if k.n++; k.each != nil {
		k.each(k.n)
	}
}

func (k *told) Reject(p int, r reading.Reason, _ reading.Where, _ string) {
	if k.rejects == nil {
		k.rejects = map[int]map[reading.Reason]int{}
	}
	if k.rejects[p] == nil {
		k.rejects[p] = map[reading.Reason]int{}
	}
	k.rejects[p][r]++
}

func (k *told) Issue(i reading.Issue) { k.issues = append(k.issues, i) }

// build makes the grid of a site from what feed hands over.
func build(t *testing.T, s *site.Site, from, to int64, feed func(reading.Sink) error) *grid.Built {
	t.Helper()
	b := grid.NewBuilder(s, grid.Options{Rule: quality.Rule, FromUTC: from, ToUTC: to, TempDir: t.TempDir()})
	defer b.Close()
	if err := feed(b); err != nil {
		t.Fatal(err)
	}
	again, err := b.Again()
	if err != nil {
		t.Fatal(err)
	}
	if len(again) > 0 {
		if err := feed(b); err != nil {
			t.Fatal(err)
		}
	}
	if err := b.Sort(); err != nil {
		t.Fatal(err)
	}
	b.Flush()
	return b.Finish(grid.Frame{FromUTC: from, PeriodFromUTC: from, ToUTC: to, Loc: s.Location})
}

// equalGrids compares two grids: covered seconds exactly, means to tolerance.
func equalGrids(t *testing.T, s *site.Site, got, want *grid.Built, tolerance float64) {
	t.Helper()
	for i := range s.Points {
		g, w := got.Grid.Columns[i], want.Grid.Columns[i]
		if len(g.Mean) != len(w.Mean) || len(w.Mean) == 0 {
			t.Errorf("%s: %d steps, want %d", s.Points[i].Column, len(g.Mean), len(w.Mean))
			continue
		}
		bad, worst, covered := 0, 0.0, 0
		for k := range w.Mean {
			if w.CoveredS[k] > 0 {
				covered++
			}
			d := math.Abs(float64(g.Mean[k]) - float64(w.Mean[k]))
			if g.CoveredS[k] != w.CoveredS[k] || w.CoveredS[k] > 0 && !(d <= tolerance) {
				if bad++; bad <= 3 {
					t.Errorf("%s, step %d (%s): got %v over %d s, want %v over %d s", s.Points[i].Column, k, got.Grid.Time(k).UTC().Format(time.RFC3339),
						g.Mean[k], g.CoveredS[k], w.Mean[k], w.CoveredS[k])
				}
			} else if w.CoveredS[k] > 0 {
				worst = max(worst, d)
			}
		}
		if bad > 0 {
			t.Errorf("%s: %d of %d steps differ", s.Points[i].Column, bad, len(w.Mean))
		}
		if covered < 100 {
			t.Errorf("%s: only %d steps are covered: the comparison says little", s.Points[i].Column, covered)
		}
		t.Logf("%-28s %6d steps covered, greatest difference %.2g", s.Points[i].Column, covered, worst)
	}
}

// lines writes readings of one point in the line protocol; format gives the
// value's form.
func lines(b *strings.Builder, measurement, point, format string, rs []number) {
	for _, r := range rs {
		fmt.Fprintf(b, "%s,point=%s value="+format+" %d\n", measurement, point, r.x, r.t)
	}
}

func utc(y int, m time.Month, d, h, min int) int64 {
	return time.Date(y, m, d, h, min, 0, 0, time.UTC).Unix()
}
