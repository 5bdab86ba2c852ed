package grid

import (
	"math"
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/configs/site"
)

// A point that says it has no value does not go on holding the one before: an
// hour's window open at 0 h, silent at 1 h, shut at 3 h, is known for one hour
// and from 3 h on; in whatever order the records come.
func TestSilenceEndsTheHold(t *testing.T) {
	nan := math.NaN()
	type record struct {
		unixS int64
		value float64
	}
	records := []record{{0, 1}, {3600, nan}, {3 * 3600, 0}, {4 * 3600, nan}, {4 * 3600, 1}}
	rapid.Check(t, func(t *rapid.T) {
		var unixS []int64
		var values []float64
		for _, r := range rapid.Permutation(records).Draw(t, "order") {
			unixS, values = append(unixS, r.unixS), append(values, r.value)
		}
		b := NewBuilder(siteOf(site.Point{Quantity: site.Window, Logging: site.COV}), Options{Rule: rules})
		defer b.Close()
		b.Readings(0, unixS, values)
		again, err := b.Again()
		if err != nil {
			t.Fatal(err)
		}
		if len(again) > 0 {
			b.Readings(0, unixS, values)
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
