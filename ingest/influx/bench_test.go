package influx

import (
	"context"
	"fmt"
	"strings"
	"testing"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// counter counts what it is given.
type counter struct{ n int64 }

func (c *counter) Reading(int, int64, float64)                       { c.n++ }
func (c *counter) Reject(int, reading.Reason, reading.Where, string) {}
func (c *counter) Issue(reading.Issue)                               {}

// BenchmarkRead reads a month of ten points logged every minute. The rate is
// that of readings in the database, also where the server averages them.
func BenchmarkRead(b *testing.B) {
	address := server.Address(b)
	server.Database(b, "bench")
	var points []site.Point
	var text strings.Builder
	var n int64
	for i := range 10 {
		var rs []number
		for at := utc(2025, 1, 1, 0, 0); at < utc(2025, 2, 1, 0, 0); at += 60 {
			rs = append(rs, number{at, 20 + float64((at/60+int64(i))%37)/10})
		}
		n += int64(len(rs))
		name := fmt.Sprintf("p%d", i)
		lines(&text, "readings", name, "%.1f", rs)
		points = append(points, site.Point{Column: name, Quantity: site.AirTemp})
	}
	server.Write(b, "bench", text.String())
	for _, read := range []site.InfluxRead{site.InfluxRaw, site.InfluxMeans} {
		b.Run(string(read), func(b *testing.B) {
			s, _ := houseOf(address, "bench", read, points...)
			src, _, err := Open(context.Background(), s, &s.Logs[0], everyPoint(s))
			if err != nil {
				b.Fatal(err)
			}
			b.ReportAllocs()
			b.ResetTimer()
			for range b.N {
				var c counter
				if err := src.Read(context.Background(), &c); err != nil || c.n == 0 {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(n)*float64(b.N)/b.Elapsed().Seconds(), "readings/s")
		})
	}
}

// BenchmarkLoad writes a month of ten points logged every minute.
func BenchmarkLoad(b *testing.B) {
	address := server.Address(b)
	server.Database(b, "benchload")
	var points []site.Point
	src := &listed{name: "a.csv"}
	for i := range 10 {
		points = append(points, site.Point{Column: fmt.Sprintf("p%d", i), Quantity: site.AirTemp})
		src.points = append(src.points, i)
	}
	for at := utc(2025, 1, 1, 0, 0); at < utc(2025, 2, 1, 0, 0); at += 60 {
		for i := range points {
			src.rows = append(src.rows, row{i, at, 20 + float64((at/60+int64(i))%37)/10})
		}
	}
	s, log := houseOf(address, "benchload", site.InfluxRaw, points...)
	b.ReportAllocs()
	b.ResetTimer()
	for range b.N {
		if _, err := Load(context.Background(), s, log, []reading.Source{src}, nil); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(len(src.rows))*float64(b.N)/b.Elapsed().Seconds(), "readings/s")
}
