package grid

import (
	"math"
	"reflect"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// What stretch takes at once must be what the stages make of the readings one
// by one: with gaps, spikes, repeats, contradictions, values out of range and
// out of order, for every kind of point and way of stamping.
func TestReadingsAtOnceAreReadingsOneByOne(t *testing.T) {
	quantities := []site.Quantity{site.AirTemp, site.Window, site.PlantStatus, site.WindDirection, site.Rain, site.CO2}
	stretched := 0
	rapid.Check(t, func(t *rapid.T) {
		p := site.Point{Quantity: rapid.SampledFrom(quantities).Draw(t, "quantity"),
			Logging: rapid.SampledFrom([]site.Logging{site.Sampled, site.COV}).Draw(t, "logging"),
			Stamp:   rapid.SampledFrom([]site.Stamp{site.StampInstant, site.StampEnd}).Draw(t, "stamp")}
		s := &site.Site{StepS: rapid.SampledFrom([]int{60, 300, 900}).Draw(t, "step"), Location: time.UTC, Points: []site.Point{p}}
		rule := Rule{Low: -40, High: 60, Spike: rapid.SampledFrom([]float64{0, 8}).Draw(t, "spike"), FrozenS: 1800, Bins: TempBins}
		opt := Options{Rule: func(*site.Point) Rule { return rule }}
		if rapid.Bool().Draw(t, "bounded") {
			opt.FromUTC, opt.ToUTC = 20_000, 400_000
		}
		kind := rapid.IntRange(0, 99)
		var unixS []int64
		var values []float64
		at, v := int64(0), 20.0
		for range rapid.IntRange(150, 500).Draw(t, "readings") {
			switch k := kind.Draw(t, "what"); {
			case k < 2:
				at += 20_000 // a gap
			case k == 2 && at > 3000:
				at -= 1500 // out of order
			case k < 6: // the same instant again
			default:
				at += 60 * int64(1+k%7)
			}
			x := v
			switch k := kind.Draw(t, "value"); {
			case k == 0:
				x = 1000
			case k < 4:
				x = v + 15 // a spike
			case k == 4:
				x = math.NaN() // fell silent
			case k == 5:
				x = reading.Nothing
			case k < 60:
				v += float64(k%9-4) / 10
				x = v
			}
			unixS, values = append(unixS, at), append(values, x)
		}
		one, many := NewBuilder(s, opt), NewBuilder(s, opt)
		defer one.Close()
		defer many.Close()
		feed := func() {
			for i, v := range values {
				switch {
				case math.IsNaN(v):
					one.gap(0, unixS[i])
				case v != reading.Nothing:
					one.Reading(0, unixS[i], v)
				}
			}
			for from := 0; from < len(values); {
				to := from + rapid.IntRange(1, len(values)-from).Draw(t, "parcel")
				many.Readings(0, unixS[from:to], values[from:to])
				from = to
			}
		}
		feed()
		a, err := one.Again()
		if err != nil {
			t.Fatal(err)
		}
		b, err := many.Again()
		if err != nil {
			t.Fatal(err)
		}
		if !reflect.DeepEqual(a, b) {
			t.Fatalf("read again: %v one by one, %v at once", a, b)
		}
		if len(a) > 0 {
			feed()
		}
		for _, x := range []*Builder{one, many} {
			if err := x.Sort(); err != nil {
				t.Fatal(err)
			}
			x.Flush()
		}
		if s := &many.series[0]; s.n > 150 && !s.dropped {
			stretched++
		}
		f := Frame{FromUTC: 0, PeriodFromUTC: 0, ToUTC: at + 86400, Loc: time.UTC}
		x, y := one.Finish(f), many.Finish(f)
		if !reflect.DeepEqual(bits(x.Grid.Columns[0]), bits(y.Grid.Columns[0])) || !cmp.Equal(x.Facts, y.Facts, cmpopts.IgnoreUnexported(Run{}), cmpopts.EquateNaNs()) ||
			!reflect.DeepEqual(x.Ledger.Points[0].Counts, y.Ledger.Points[0].Counts) || x.Ledger.Points[0].RowsRead != y.Ledger.Points[0].RowsRead {
			t.Fatalf("at once differs from one by one:\n%+v\n%+v", x.Ledger.Points[0], y.Ledger.Points[0])
		}
	})
	if stretched == 0 {
		t.Fatal("no series was long enough to be taken at once")
	}
}

func bits(c Column) []uint32 {
	out := make([]uint32, 0, 2*len(c.Mean))
	for i, m := range c.Mean {
		out = append(out, math.Float32bits(m), uint32(c.CoveredS[i]))
	}
	return out
}
