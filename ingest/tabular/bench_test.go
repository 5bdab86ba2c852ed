package tabular

import (
	"bytes"
	"context"
	"fmt"
	"math/rand/v2"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// adder is the least a sink can do.
type adder struct {
	n       int64
	sum     float64
	rejects int64
}

func (a *adder) Reading(_ int, _ int64, v float64)                 { a.n++; a.sum += v }
func (a *adder) Reject(int, reading.Reason, reading.Where, string) { a.rejects++ }
func (a *adder) Issue(reading.Issue)                               {}

// wideText makes rows of one minute with 60 zones of temperature, humidity,
// CO2 and a window state, as wide exports have them.
func wideText(rows int, states bool) ([]byte, []site.Point) {
	rng := rand.New(rand.NewPCG(1, 2))
	var b bytes.Buffer
	var ps []site.Point
	b.WriteString("timestamp")
	for z := 0; z < 60; z++ {
		for _, q := range []struct {
			q site.Quantity
			n string
		}{{site.AirTemp, "T"}, {site.Humidity, "RH"}, {site.CO2, "CO2"}, {site.Window, "WIN"}} {
			if q.n == "WIN" && !states {
				continue
			}
			name := fmt.Sprintf("Z%02d_%s", z, q.n)
			ps = append(ps, site.Point{Column: name, Quantity: q.q})
			b.WriteString("," + name)
		}
	}
	b.WriteByte('\n')
	at := time.Date(2025, 6, 1, 0, 0, 0, 0, time.UTC)
	for r := 0; r < rows; r++ {
		b.WriteString(at.Add(time.Duration(r) * time.Minute).Format("2006-01-02 15:04:05"))
		for z := 0; z < 60; z++ {
			fmt.Fprintf(&b, ",%.2f,%.1f,%d", 18+8*rng.Float64(), 30+30*rng.Float64(), 400+rng.IntN(900))
			if states {
				b.WriteString([]string{",Open", ",Closed"}[(r/97+z)%2])
			}
		}
		b.WriteByte('\n')
	}
	return b.Bytes(), ps
}

func longText(rows int) ([]byte, []site.Point) {
	rng := rand.New(rand.NewPCG(1, 2))
	var b bytes.Buffer
	var ps []site.Point
	for z := 0; z < 240; z++ {
		ps = append(ps, site.Point{Column: fmt.Sprintf("BLD1.Z%02d.P%d", z/4, z%4), Quantity: site.AirTemp, Logging: site.COV})
	}
	b.WriteString("timestamp,point_id,value\n")
	at := time.Date(2025, 6, 1, 0, 0, 0, 0, time.UTC).Unix()
	for r := 0; r < rows; r++ {
		fmt.Fprintf(&b, "%s,%s,%.2f\n", time.Unix(at+int64(r/4), 0).UTC().Format("2006-01-02 15:04:05"), ps[rng.IntN(len(ps))].Column, 18+8*rng.Float64())
	}
	return b.Bytes(), ps
}

func benchRead(b *testing.B, text []byte, ps []site.Point, log site.Log) {
	f, err := openBytes(b, "bench.csv", text, log, ps)
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(int64(len(text)))
	b.ReportAllocs()
	b.ResetTimer()
	for i := 0; i < b.N; i++ {
		var a adder
		if err := f.Read(context.Background(), &a); err != nil {
			b.Fatal(err)
		}
		if a.n == 0 || a.rejects > 0 {
			b.Fatalf("%d accepted, %d rejected", a.n, a.rejects)
		}
	}
}

func BenchmarkReadWideNumbers(b *testing.B) {
	text, ps := wideText(10000, false)
	benchRead(b, text, ps, site.Log{})
}

func BenchmarkReadWideStates(b *testing.B) {
	text, ps := wideText(10000, true)
	benchRead(b, text, ps, site.Log{})
}

func BenchmarkReadLong(b *testing.B) {
	text, ps := longText(400000)
	benchRead(b, text, ps, site.Log{Layout: site.Long, KeyColumns: []string{"point_id"}})
}

// A pass allocates for the pass, not for its rows.
func TestNoAllocationPerRow(t *testing.T) {
	count := func(rows int) float64 {
		text, ps := wideText(rows, true)
		f, err := openBytes(t, "a.csv", text, site.Log{}, ps)
		if err != nil {
			t.Fatal(err)
		}
		return testing.AllocsPerRun(2, func() {
			var a adder
			if err := f.Read(context.Background(), &a); err != nil || a.n == 0 {
				t.Fatal(err)
			}
		})
	}
	few, many := count(1200), count(5200)
	if many-few > 400 {
		t.Errorf("1200 rows take %.0f allocations, 5200 rows %.0f", few, many)
	}
}
