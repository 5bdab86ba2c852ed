package grid

import (
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// A point that says it has no value does not go on holding the one before: an
// hour's window open at 0 h, silent at 1 h, shut at 3 h, is known for one hour
// and from 3 h on; in whatever order the records come.
func TestSilenceEndsTheHold(t *testing.T) {
	nan := math.NaN()
	records := []reading.At{{UnixS: 0, Value: 1}, {UnixS: 3600, Value: nan}, {UnixS: 3 * 3600, Value: 0}, {UnixS: 4 * 3600, Value: nan}, {UnixS: 4 * 3600, Value: 1}}
	rapid.Check(t, func(t *rapid.T) {
		list := rapid.Permutation(records).Draw(t, "order")
		b := NewBuilder(siteOf(site.Point{Quantity: site.Window, Logging: site.COV}), Options{Rule: rules})
		defer b.Close()
		b.Readings(0, list)
		again, err := b.Again()
		if err != nil {
			t.Fatal(err)
		}
		if len(again) > 0 {
			b.Readings(0, list)
		}
		if err := b.Sort(); err != nil {
			t.Fatal(err)
		}
		b.Flush()
		c := b.Finish(Frame{ToUTC: 6 * 3600, Loc: time.UTC}).Grid.Columns[0]
		for i := range c.Mean {
			hour := i / 12
			want, covered := float32(1), uint16(300)
			switch hour {
			case 1, 2:
				covered = 0
			case 3:
				want = 0
			}
			if c.CoveredS[i] != covered || covered > 0 && c.Mean[i] != want {
				t.Fatalf("step %d: %g over %d s, want %g over %d s", i, c.Mean[i], c.CoveredS[i], want, covered)
			}
		}
	})
}
