package clock

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// told collects what a series hands over as text, one letter per row: the
// instant's UTC time, or the reason.
type told struct{ out []string }

func (k *told) Reading(p int, at int64, v float64) {
	k.out = append(k.out, time.Unix(at, 0).UTC().Format("15:04"))
}
func (k *told) Reject(p int, r reading.Reason, at reading.Where, text string) {
	k.out = append(k.out, r.String())
}
func (k *told) Issue(reading.Issue) {}

// run feeds wall times (15:04 of the day) through a series.
func run(t *testing.T, zone, day string, exact, distrust bool, walls ...string) (string, Tally) {
	t.Helper()
	r, err := NewResolver(site.Clock{}, zoneOf(t, zone))
	if err != nil {
		t.Fatal(err)
	}
	var tally Tally
	s := NewSeries(&tally, exact)
	if distrust {
		s.Distrust()
	}
	k := &told{}
	for _, w := range walls {
		ws := wall(t, day+" "+w+":00")
		u, v := r.Resolve(ws)
		switch v {
		case Sure:
			s.Sure(ws, k)
			k.Reading(0, u, 0)
		case Repeated:
			s.Hold(ws, r.Window(ws), reading.Where{}, k).Reading(0, u, 0)
		case Skipped:
			k.Reject(0, reading.SkippedHour, reading.Where{}, "")
		}
	}
	s.Flush(k)
	return strings.Join(k.out, " "), tally
}

// Clocks went back in Zurich on 2025-10-26 at 03:00 (01:00 UTC), at Lord Howe
// on 2025-04-06 at 02:00 by half an hour (15:00 UTC the day before).
func TestSeriesRepeatedHour(t *testing.T) {
	const zh, lh = "Europe/Zurich", "Australia/Lord_Howe"
	amb := func(n int) string { return strings.TrimSpace(strings.Repeat("ambiguous hour ", n)) }
	for _, c := range []struct {
		name, zone, day string
		exact, distrust bool
		walls, want     string
	}{
		{"two passes", zh, "2025-10-26", true, false, "01:30 02:00 02:30 02:00 02:30 03:00", "23:30 00:00 00:30 01:00 01:30 02:00"},
		{"newest first", zh, "2025-10-26", true, false, "03:00 02:30 02:00 02:30 02:00 01:30", "02:00 01:30 01:00 00:30 00:00 23:30"},
		{"hourly", zh, "2025-10-26", true, false, "00:00 01:00 02:00 02:00 03:00 04:00", "22:00 23:00 00:00 01:00 02:00 03:00"},
		{"hourly, change of value", zh, "2025-10-26", false, false, "00:00 01:00 02:00 02:00 03:00", "22:00 23:00 " + amb(2) + " 02:00"},
		{"equal but not hourly", zh, "2025-10-26", true, false, "01:45 02:10 02:10 03:00", "23:45 " + amb(2) + " 02:00"},
		{"one pass", zh, "2025-10-26", true, false, "01:30 02:00 02:30 03:00", "23:30 " + amb(2) + " 02:00"},
		{"a duplicate in one pass", zh, "2025-10-26", true, false, "01:45 02:00 02:15 02:15 02:30 02:45 03:00", "23:45 " + amb(5) + " 02:00"},
		{"three passes", zh, "2025-10-26", true, false, "01:30 02:00 02:30 02:00 02:30 02:00 03:00", "23:30 " + amb(5) + " 02:00"},
		{"the second pass is cut off", zh, "2025-10-26", true, false, "01:30 02:00 02:30 02:00", "23:30 00:00 00:30 01:00"},
		{"begins within", zh, "2025-10-26", true, false, "02:30 02:00 02:30 03:00", "00:30 01:00 01:30 02:00"},
		{"only the hour", zh, "2025-10-26", true, false, "02:00 02:30 02:00 02:30", amb(4)},
		{"unlike passes", zh, "2025-10-26", false, false, "01:30 02:40 02:05 02:20 03:10", "23:30 00:40 01:05 01:20 02:10"},
		{"rows out of order before", zh, "2025-10-26", true, false, "01:30 01:00 01:45 02:00 02:30 02:00 02:30 03:00", "23:30 23:00 23:45 " + amb(4) + " 02:00"},
		{"a turn at the window", zh, "2025-10-26", true, false, "01:00 01:30 02:30 02:00 01:45", "23:00 23:30 " + amb(2) + " 23:45"},
		{"known disorder", zh, "2025-10-26", true, true, "01:30 02:00 02:30 02:00 02:30 03:00", "23:30 " + amb(4) + " 02:00"},
		{"half an hour", lh, "2025-04-06", true, false, "01:15 01:30 01:45 01:30 01:45 02:00", "14:15 14:30 14:45 15:00 15:15 15:30"},
		{"New York", "America/New_York", "2025-11-02", true, false, "00:53 01:53 01:53 02:53", "04:53 05:53 06:53 07:53"},
		{"Sydney", "Australia/Sydney", "2025-04-06", true, false, "01:30 02:00 02:30 02:00 02:30 03:00", "14:30 15:00 15:30 16:00 16:30 17:00"},
		{"skipped", zh, "2025-03-30", true, false, "01:30 02:00 02:30 03:00", "00:30 skipped local hour skipped local hour 01:00"},
	} {
		got, tally := run(t, c.zone, c.day, c.exact, c.distrust, strings.Fields(c.walls)...)
		if got != c.want {
			t.Errorf("%s: got %s, want %s", c.name, got, c.want)
		}
		if n := strings.Count(c.want, "ambiguous"); int(tally.Ambiguous) != n {
			t.Errorf("%s: counted %d ambiguous, want %d", c.name, tally.Ambiguous, n)
		}
	}
}

// A long run of rows in order makes up for one disorder before it, such as two
// exports joined in the wrong order.
func TestSeriesTrustsAgain(t *testing.T) {
	r, _ := NewResolver(site.Clock{}, zoneOf(t, "Europe/Zurich"))
	var tally Tally
	s := NewSeries(&tally, true)
	k := &told{}
	feed := func(at int64) {
		_, off := time.Unix(at, 0).In(zoneOf(t, "Europe/Zurich")).Zone()
		w := at + int64(off)
		u, v := r.Resolve(w)
		if v == Repeated {
			s.Hold(w, r.Window(w), reading.Where{}, k).Reading(0, u, 0)
			return
		}
		s.Sure(w, k)
		if u != at {
			t.Fatalf("%d resolves to %d", at, u)
		}
	}
	nov := time.Date(2025, 11, 10, 0, 0, 0, 0, time.UTC).Unix()
	oct := time.Date(2025, 10, 20, 0, 0, 0, 0, time.UTC).Unix()
	for at := nov; at < nov+86400; at += 900 {
		feed(at)
	}
	for at := oct; at < oct+10*86400; at += 900 {
		feed(at)
	}
	if tally.Repeated != 8 || tally.Ambiguous != 0 {
		t.Errorf("%+v", tally)
	}
}

// Shuffled rows never get a wrong instant: sure times are right, and the
// repeated hour is rejected or, where rows happen to stand right, right.
func TestSeriesShuffled(t *testing.T) {
	loc := zoneOf(t, "Europe/Zurich")
	from := time.Date(2025, 10, 25, 0, 0, 0, 0, loc).Unix()
	for seed := uint64(0); seed < 200; seed++ {
		rng := rand.New(rand.NewPCG(seed, 1))
		var ats []int64
		for at := from; at < from+2*86400; at += 900 {
			ats = append(ats, at)
		}
		rng.Shuffle(len(ats), func(i, j int) { ats[i], ats[j] = ats[j], ats[i] })
		r, _ := NewResolver(site.Clock{}, loc)
		var tally Tally
		s := NewSeries(&tally, true)
		s.Distrust() // what the reader finds in the head
		k := &told{}
		for _, at := range ats {
			_, off := time.Unix(at, 0).In(loc).Zone()
			w := at + int64(off)
			u, v := r.Resolve(w)
			if v == Repeated {
				s.Hold(w, r.Window(w), reading.Where{}, k).Reading(0, u, 0)
				continue
			}
			if s.Sure(w, k); u != at {
				t.Fatalf("seed %d: %d resolves to %d", seed, at, u)
			}
		}
		s.Flush(k)
		if tally.Ambiguous != 8 || tally.Repeated != 0 {
			t.Fatalf("seed %d: %+v", seed, tally)
		}
	}
}

func TestSeriesBound(t *testing.T) {
	var tally Tally
	s := NewSeries(&tally, true)
	k := &counts{}
	s.Sure(0, k)
	w := Window{100, 200, 100}
	for i := 0; i < maxHeld+10; i++ {
		s.Hold(100+int64(i%2), w, reading.Where{}, k).Reading(0, 0, 0)
	}
	s.Sure(200, k)
	if k.rejected != maxHeld+10 || tally.Ambiguous != int64(maxHeld+10) {
		t.Errorf("%d rejected, %+v", k.rejected, tally)
	}
}

type counts struct{ read, rejected int }

func (c *counts) Reading(int, int64, float64)                       { c.read++ }
func (c *counts) Reject(int, reading.Reason, reading.Where, string) { c.rejected++ }
func (c *counts) Issue(reading.Issue)                               {}

func ExampleSeries() {
	loc, _ := time.LoadLocation("Europe/Zurich")
	r, _ := NewResolver(site.Clock{}, loc)
	w := time.Date(2025, 10, 26, 2, 30, 0, 0, time.UTC).Unix() // as written
	u, v := r.Resolve(w)
	fmt.Println(time.Unix(u, 0).UTC().Format(time.RFC3339), v == Repeated, r.Window(w).DeltaS)
	// Output: 2025-10-26T00:30:00Z true 3600
}
