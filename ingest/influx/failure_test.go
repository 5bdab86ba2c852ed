package influx

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"
	"slices"
	"strings"
	"sync"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/influx/influxtest"
	"sashlog/ingest/reading"
)

const secretToken = "keeper:not-the-word"

// fails holds an error against what it must say; no error may show a token.
func fails(t *testing.T, err error, want ...string) {
	t.Helper()
	if err == nil {
		t.Fatalf("no error, want %q", want)
	}
	for _, w := range want {
		if !strings.Contains(err.Error(), w) {
			t.Errorf("got %q, want %q in it", err, w)
		}
	}
	for e := err; e != nil; e = errors.Unwrap(e) {
		for _, shown := range []string{e.Error(), fmt.Sprintf("%+v", e), fmt.Sprintf("%#v", e)} {
			if strings.Contains(shown, "not-the-word") || strings.Contains(shown, "open-sesame") {
				t.Fatal("the token shows in an error")
			}
		}
	}
}

func attempt(s *site.Site) error {
	src, _, err := Open(context.Background(), s, &s.Logs[0], everyPoint(s))
	if err != nil {
		return err
	}
	return src.Read(context.Background(), &told{})
}

func TestTokens(t *testing.T) {
	address := guarded.Address(t)
	guarded.Database(t, "house")
	guarded.Write(t, "house", "readings,point=temp value=20 1735689600\n")
	s, log := houseOf(address, "house", site.InfluxMeans, site.Point{Column: "temp", Quantity: site.AirTemp})
	fails(t, attempt(s), "the server asks for a token", "the variable SASHLOG_INFLUX_TOKEN is not set")
	log.Influx.Token = site.NewSecret(secretToken)
	fails(t, attempt(s), "the server refuses the token in SASHLOG_INFLUX_TOKEN")
	_, err := Load(context.Background(), s, log, nil, nil)
	fails(t, err, "the server refuses the token in SASHLOG_INFLUX_TOKEN")
	log.Influx.Token = site.NewSecret(influxtest.Token)
	if err := attempt(s); err != nil {
		t.Error(err)
	}
	log.Influx.Bucket = "elsewhere"
	fails(t, attempt(s), `there is no bucket "elsewhere"`)
}

func TestNoBucketNoServer(t *testing.T) {
	address := server.Address(t)
	s, log := houseOf(address, "nowhere", site.InfluxMeans, site.Point{Column: "temp", Quantity: site.AirTemp})
	fails(t, attempt(s), `there is no bucket "nowhere"`, "on an InfluxDB 1.8 the bucket is database or database/retention")
	_, err := Load(context.Background(), s, log, nil, nil)
	fails(t, err, `there is no bucket "nowhere"`)
	server.Database(t, "kept")
	log.Influx.Bucket = "kept/nothing"
	fails(t, attempt(s), `there is no bucket "kept/nothing"`)

	// Nobody listens: told at once, not after all the patience for a server
	// that is being restarted.
	log.Influx.Address = "http://127.0.0.1:1"
	began := time.Now()
	fails(t, attempt(s), "the connection failed", "is the server running, and is the address of the log right?")
	if d := time.Since(began); d > 20*time.Second {
		t.Errorf("it took %v", d)
	}
	// Something else answers: this is where an InfluxDB would have its own
	// folder behind a gateway, and has not.
	log.Influx.Address = address + "/not/here"
	fails(t, attempt(s), "the server answers 404", "this source needs an InfluxDB 2.x, or 1.8 with Flux enabled")
}

// From documentation, not from servers: 3.x answers no Flux and has no
// /api/v2/query; 1.8 is the first with a v2-compatible API.
func TestVersionHint(t *testing.T) {
	for version, want := range map[string]string{
		"3.0.1": "the server is version 3.0.1, and 3.x answers no Flux", "1.7.11": "the server is version 1.7.11: this source needs", "0.9": "the server is version 0.9: ",
		"": "look whether the address leads to one", "2.7.1": "(it says it is 2.7.1)", "1.8.10": "(it says it is 1.8.10)",
	} {
		if got := versionHint(version); !strings.Contains(got, want) {
			t.Errorf("%q: %s", version, got)
		}
	}
}

// months4 writes four months of one point a minute and some states, and returns
// what was written.
func months4(t *testing.T, database string) (points []site.Point, want map[int][]number) {
	t.Helper()
	server.Database(t, database)
	var text strings.Builder
	r := rand.New(rand.NewPCG(11, 11))
	want = map[int][]number{}
	for i, name := range []string{"temp", "contact"} {
		var rs []number
		for at := utc(2025, 1, 5, 0, 0); at < utc(2025, 4, 25, 0, 0); at += 60 {
			if i == 0 {
				rs = append(rs, number{at, float64(200+r.IntN(20)) / 10})
			} else if r.IntN(300) == 0 {
				rs = append(rs, number{at + int64(r.IntN(60)), float64(r.IntN(2))})
			}
		}
		want[i] = rs
		lines(&text, "readings", name, "%.1f", rs)
	}
	server.Write(t, database, text.String())
	return []site.Point{{Column: "temp", Quantity: site.AirTemp}, {Column: "contact", Quantity: site.Window, Logging: site.COV}}, want
}

// answers is how many bytes the answers to a whole reading take.
func answers(t *testing.T, proxy *influxtest.Proxy, src *Source) int64 {
	t.Helper()
	before := proxy.Sent()
	if err := src.Read(context.Background(), &told{}); err != nil {
		t.Fatal(err)
	}
	return proxy.Sent() - before
}

// A connection that is cut in mid-answer costs that answer; every reading
// comes once.
func TestCutConnection(t *testing.T) {
	address := server.Address(t)
	points, want := months4(t, "cut")
	proxy := influxtest.NewProxy(t, address)
	s, _ := houseOf(proxy.Address(), "cut", site.InfluxRaw, points...)
	src := open(t, s)
	all := answers(t, proxy, src)
	for _, after := range []int64{20, all / 50, all / 2, all * 9 / 10} {
		cut := 0
		proxy.CutAfter(after, func() { cut++ })
		var got told
		if err := src.Read(context.Background(), &got); err != nil || cut != 1 {
			t.Fatalf("%v, cut %d times", err, cut)
		}
		sameReadings(t, s, got.readings, want)
	}
}

// The server is killed in mid-read and started again: reading goes on with the
// month it was at. If it stays away, nothing but whole months were handed
// over, and the error says so.
func TestKilledServer(t *testing.T) {
	address := server.Address(t)
	for _, read := range []site.InfluxRead{site.InfluxRaw, site.InfluxMeans} {
		points, want := months4(t, "killed-"+string(read))
		proxy := influxtest.NewProxy(t, address)
		s, _ := houseOf(proxy.Address(), "killed-"+string(read), read, points...)
		src := open(t, s)
		var whole told
		if err := src.Read(context.Background(), &whole); err != nil {
			t.Fatal(err)
		}
		if read == site.InfluxRaw {
			sameReadings(t, s, whole.readings, want)
		}

		all := answers(t, proxy, src)
		src.conn.waits = slices.Repeat([]time.Duration{500 * time.Millisecond}, 60)
		var wg sync.WaitGroup
		var back error
		proxy.CutAfter(all*6/10, func() {
			server.Kill()
			wg.Add(1)
			go func() {
				defer wg.Done()
				time.Sleep(time.Second)
				back = server.Restart()
			}()
		})
		var got told
		err := src.Read(context.Background(), &got)
		wg.Wait()
		if err != nil || back != nil {
			t.Fatal(err, back)
		}
		sameReadings(t, s, got.readings, whole.readings)

		src.conn.waits = src.conn.waits[:2]
		proxy.CutAfter(all*6/10, server.Kill)
		got = told{}
		err = src.Read(context.Background(), &got)
		fails(t, err, "influx://127.0.0.1", " 2025: ", "the ")
		if got.n == 0 || got.n >= whole.n {
			t.Errorf("%d readings of %d before the server was killed", got.n, whole.n)
		}
		t.Log(err)
		for i, rs := range got.readings { // of each point a beginning, to the end of a month
			for k := range rs {
				if rs[k] != whole.readings[i][k] {
					t.Fatalf("point %d, reading %d is not what it was", i, k)
				}
			}
			if next := time.Unix(whole.readings[i][len(rs)].t, 0).UTC(); time.Unix(rs[len(rs)-1].t, 0).UTC().Month() == next.Month() {
				t.Errorf("point %d ends within a month, before %v", i, next)
			}
		}
		if err := server.Restart(); err != nil {
			t.Fatal(err)
		}
	}
}

// An answer that lacks readings and yet ends in good order is noticed.
func TestTruncatedAnswers(t *testing.T) {
	address := server.Address(t)
	points, want := months4(t, "truncated")
	for _, read := range []site.InfluxRead{site.InfluxRaw, site.InfluxMeans} {
		gate := influxtest.NewTruncator(t, address, 3000)
		s, _ := houseOf(gate.Address(), "truncated", read, points...)
		src := open(t, s)
		src.conn.waits = []time.Duration{time.Millisecond, time.Millisecond}
		gate.Times.Store(2) // then it mends itself
		var got told
		if err := src.Read(context.Background(), &got); err != nil {
			t.Fatal(err)
		}
		if gate.Times.Load() > 0 {
			t.Fatal("nothing was cut")
		}
		if read == site.InfluxRaw {
			sameReadings(t, s, got.readings, want)
		}
		gate.Times.Store(1 << 40)
		got = told{}
		err := src.Read(context.Background(), &got)
		fails(t, err, "January 2025: ", "the answer", "nothing of it was used")
		if len(got.readings[0]) > 0 {
			t.Errorf("%d readings of a truncated answer were handed over", len(got.readings[0]))
		}
		t.Log(err)
	}
}

// A slow server ends in an error that says so, within the time it may take,
// and not in part of an answer; and a user who gives up need not wait.
func TestSlowAnswers(t *testing.T) {
	address := server.Address(t)
	points, _ := months4(t, "slow")
	proxy := influxtest.NewProxy(t, address)
	for _, read := range []site.InfluxRead{site.InfluxRaw, site.InfluxMeans} {
		s, log := houseOf(proxy.Address(), "slow", read, points...)
		src := open(t, s)
		src.conn.waits = src.conn.waits[:1]
		log.Influx.TimeOutS = 1
		proxy.Delay(100 * time.Millisecond)
		var got told
		began := time.Now()
		fails(t, src.Read(context.Background(), &got), "no complete answer within 1s", "raise time_out_s")
		if d := time.Since(began); d > 15*time.Second || len(got.readings[0]) > 0 {
			t.Errorf("it took %v, %d readings", d, len(got.readings[0]))
		}
		log.Influx.TimeOutS = 600
		ctx, cancel := context.WithTimeout(context.Background(), 500*time.Millisecond)
		began = time.Now()
		if err := src.Read(ctx, &told{}); !errors.Is(err, context.DeadlineExceeded) {
			t.Errorf("got %v", err)
		}
		cancel()
		if d := time.Since(began); d > 5*time.Second {
			t.Errorf("giving up took %v", d)
		}
		proxy.Delay(0)
	}
}

// Who stops listening in mid-read stops the reading.
func TestStop(t *testing.T) {
	address := server.Address(t)
	points, _ := months4(t, "stopped")
	s, _ := houseOf(address, "stopped", site.InfluxRaw, points...)
	ctx, cancel := context.WithCancel(context.Background())
	got := told{each: func(n int) {
		if n == 100 {
			cancel()
		}
	}}
	if err := open(t, s).Read(ctx, &got); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
}

// Readings that come or go while a month is read are no partial answer.
func TestGrowingDatabase(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "growing")
	server.Write(t, "growing", "readings,point=temp value=20 1735689600\nreadings,point=temp value=21 1735689660\n")
	s, _ := houseOf(address, "growing", site.InfluxRaw, site.Point{Column: "temp", Quantity: site.AirTemp})
	src := open(t, s)
	jobs, err := src.plan(context.Background(), src.points)
	if err != nil || len(jobs) != 1 {
		t.Fatal(err, len(jobs))
	}
	server.Write(t, "growing", "readings,point=temp value=22 1735689630\n")
	got, err := src.fetch(context.Background(), &jobs[0])
	if err != nil || len(got[0].numbers) != 3 {
		t.Errorf("%v, %+v", err, got)
	}
}

// A server that is killed while a site is loaded, and comes back, has it all;
// one that stays away is an error.
func TestKilledWhileLoading(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "loading")
	proxy := influxtest.NewProxy(t, address)
	s, log := houseOf(proxy.Address(), "loading", site.InfluxRaw, site.Point{Column: "temp", Quantity: site.AirTemp})
	src := &listed{name: "a.csv", points: []int{0}}
	for k := range int64(20 * batchLines) {
		src.rows = append(src.rows, row{0, utc(2025, 1, 1, 0, 0) + 60*k, float64(k % 30)})
	}
	var wg sync.WaitGroup
	var back error
	proxy.CutAfter(3000, func() { // the answer to a batch is some 300 bytes
		server.Kill()
		wg.Add(1)
		go func() {
			defer wg.Done()
			back = server.Restart()
		}()
	})
	loaded, err := Load(context.Background(), s, log, []reading.Source{src}, nil)
	wg.Wait()
	if err != nil || back != nil || loaded[0].Written != 20*batchLines {
		t.Fatalf("%v %v %+v", err, back, loaded)
	}
	gone := 0
	proxy.CutAfter(3000, func() { server.Kill(); gone++ })
	ctx, cancel := context.WithTimeout(context.Background(), 3*time.Second)
	defer cancel()
	if _, err = Load(ctx, s, log, []reading.Source{src}, nil); err == nil || gone != 1 {
		t.Errorf("%v, killed %d times", err, gone)
	}
	if err := server.Restart(); err != nil {
		t.Fatal(err)
	}
}
