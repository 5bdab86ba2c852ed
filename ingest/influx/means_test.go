package influx

import (
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"sashlog/configs/site"
	"sashlog/ingest/influx/influxtest"
	"sashlog/ingest/reading"
)

// faulty is a sampled series with one kind of fault.
type faulty struct {
	name  string
	point site.Point
	every int64
	form  string // of the value in the line protocol
	make  func(r *rand.Rand, rs []number) []number
}

func tidy(_ *rand.Rand, rs []number) []number { return rs }

var faults = []faulty{
	{"tidy", site.Point{Quantity: site.AirTemp}, 60, "%.1f", tidy},
	{"start", site.Point{Quantity: site.AirTemp, Stamp: site.StampStart}, 60, "%.1f", tidy},
	{"end", site.Point{Quantity: site.AirTemp, Stamp: site.StampEnd}, 60, "%.1f", tidy},
	{"every100s", site.Point{Quantity: site.AirTemp}, 100, "%.1f", tidy},
	{"every150s", site.Point{Quantity: site.AirTemp}, 150, "%.1f", tidy},
	{"fahrenheit", site.Point{Quantity: site.AirTemp, Unit: "degF"}, 60, "%.1f", func(_ *rand.Rand, rs []number) []number {
		for i := range rs {
			rs[i].x = rs[i].x*1.8 + 32
		}
		return rs
	}},
	{"integer", site.Point{Quantity: site.CO2, Unit: "ppm"}, 60, "%.0fi", func(_ *rand.Rand, rs []number) []number {
		for i := range rs {
			rs[i].x = math.Round(400 + 20*rs[i].x)
		}
		return rs
	}},
	{"lost", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		return drop(rs, func(int) bool { return r.IntN(2000) == 0 })
	}},
	{"gaps", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		from, to := len(rs)/5, len(rs)/5+1000
		return drop(rs, func(i int) bool { return i >= from && i < to || i > len(rs)/2 && i < len(rs)/2+7 })
	}},
	{"end with gaps", site.Point{Quantity: site.AirTemp, Stamp: site.StampEnd}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		return drop(rs, func(i int) bool { return i%5003 < 9 || i > len(rs)/2 && i < len(rs)/2+777 })
	}},
	{"impossible", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := range rs {
			switch r.IntN(3000) {
			case 0:
				rs[i].x = 85
			case 1:
				rs[i].x = -999
			}
		}
		return rs
	}},
	{"spikes", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := range rs {
			if r.IntN(1500) == 0 {
				rs[i].x += 12
			}
		}
		return rs
	}},
	{"steps", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := range rs { // 5 min, and 4, up by 12 K: no spikes
			if i%1440 >= 100 && i%1440 < 105 || i%1441 >= 200 && i%1441 < 204 {
				rs[i].x += 12
			}
		}
		return rs
	}},
	{"bumps", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := range rs { // up by 4 K a minute and down again: no jump, yet one mean stands out
			if k := i % 1440; k >= 301 && k < 314 {
				rs[i].x += 4 * float64(min(k-300, 5, 314-k))
			}
		}
		return rs
	}},
	{"impossible surface", site.Point{Quantity: site.SurfaceTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := range rs { // a quantity without spikes
			if r.IntN(3000) == 0 {
				rs[i].x = 250
			}
		}
		return rs
	}},
	{"off the minute", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := len(rs) / 3; i < len(rs)/3+20000; i++ { // a restart moved its phase, another one back
			rs[i].t += 17
		}
		return rs
	}},
	{"impossible first", site.Point{Quantity: site.SurfaceTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		rs[0].x = 250
		return rs
	}},
	{"one more", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		var out []number
		for i := range rs {
			out = append(out, rs[i])
			if i%5 == 4 && i%4000 < 10 { // after the last of its step
				out = append(out, number{rs[i].t + 29, rs[i].x + 1})
			}
		}
		return out
	}},
	{"stray", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		var out []number
		for i := range rs {
			out = append(out, rs[i])
			if i%4000 == 77 {
				out = append(out, number{rs[i].t + 13, rs[i].x + 1})
			}
		}
		return out
	}},
	{"frozen", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := 10003; i < 20001; i++ {
			rs[i].x = rs[10002].x
		}
		return rs
	}},
	{"mostly late", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number {
		for i := range rs {
			if i > 200 && r.IntN(4) == 0 {
				rs[i].t += int64(r.IntN(50))
			}
		}
		return rs
	}},
	{"short", site.Point{Quantity: site.AirTemp}, 60, "%.1f", func(r *rand.Rand, rs []number) []number { return rs[43000:46000] }},
}

func drop(rs []number, gone func(i int) bool) []number {
	var out []number
	for i, r := range rs {
		if !gone(i) {
			out = append(out, r)
		}
	}
	return out
}

// The grid from the server's means is the grid from the readings: covered
// seconds exactly, means to the resolution readings are kept at (1e-4 of the
// unit on either side).
func TestMeansAreThoseOfTheReadings(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "means")
	from, to := utc(2025, 1, 12, 0, 0), utc(2025, 2, 16, 0, 0)
	var text strings.Builder
	var points []site.Point
	written := map[int][]number{}
	for i, f := range faults {
		r := rand.New(rand.NewPCG(7, uint64(i)))
		var rs []number
		x := 21.0
		for at := from; at < to; at += f.every {
			x += (r.Float64()-0.5)*0.4 + (21-x)*0.01
			rs = append(rs, number{at, math.Round(x*10) / 10})
		}
		rs = f.make(r, rs)
		for k := range rs { // what a file with this many decimals would say
			rs[k].x = math.Round(rs[k].x*10) / 10
		}
		p := f.point
		p.Column = f.name
		measurement := "readings"
		if strings.HasSuffix(f.form, "i") { // a field has one type in a measurement
			measurement, p.Column = "whole", "whole||"+f.name
		}
		points = append(points, p)
		written[i] = rs
		lines(&text, measurement, strings.ReplaceAll(f.name, " ", `\ `), f.form, rs)
	}
	server.Write(t, "means", text.String())

	proxy := influxtest.NewProxy(t, address)
	bytes := map[site.InfluxRead]int64{}
	for _, read := range []site.InfluxRead{site.InfluxMeans, site.InfluxRaw} {
		s, log := houseOf(proxy.Address(), "means", read, points...)
		plain, _ := houseOf(address, "means", site.InfluxRaw, points...)
		want := build(t, plain, from, to, func(k reading.Sink) error {
			for i := range points {
				for _, r := range written[i] {
					if r.x <= -999 {
						k.Reject(i, reading.Missing, reading.Where{}, "")
						continue
					}
					c := plain.Points[i].Conversion
					k.Reading(i, r.t, c.Factor*r.x+c.Offset)
				}
			}
			return nil
		})
		src := open(t, s)
		before := proxy.Sent()
		got := build(t, s, from, to, func(k reading.Sink) error { return src.Read(context.Background(), k) })
		bytes[read] = proxy.Sent() - before
		equalGrids(t, s, got, want, 2e-4)
		t.Log(read, src.Describe().Rows, strings.Join(src.Describe().Dialect, "; "))
		if read == site.InfluxMeans {
			for _, p := range src.points {
				if !p.means {
					t.Errorf("%s is read as logged %s", p.tag, p.why)
				}
			}
			for i := range points { // a frozen run ends where it ended
				if faults[i].name == "frozen" && (len(got.Facts[i].Runs) != 1 || got.Facts[i].Runs[0].FromUTC != want.Facts[i].Runs[0].FromUTC ||
					got.Facts[i].Runs[0].ToUTC != want.Facts[i].Runs[0].ToUTC) {
					t.Errorf("runs %+v, want %+v", got.Facts[i].Runs, want.Facts[i].Runs)
				}
			}
		}
		_ = log
	}
	t.Logf("%d bytes of answers as means, %d as logged", bytes[site.InfluxMeans], bytes[site.InfluxRaw])
	if bytes[site.InfluxMeans]*2 > bytes[site.InfluxRaw] {
		t.Errorf("means took %d bytes, the readings %d", bytes[site.InfluxMeans], bytes[site.InfluxRaw])
	}
}
