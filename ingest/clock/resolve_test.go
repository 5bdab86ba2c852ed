package clock

import (
	"testing"
	"time"
	_ "time/tzdata"

	"pgregory.net/rapid"

	"sashlog/configs/site"
)

func zoneOf(t testing.TB, name string) *time.Location {
	t.Helper()
	loc, err := time.LoadLocation(name)
	if err != nil {
		t.Fatal(err)
	}
	return loc
}

func wall(t testing.TB, s string) int64 {
	t.Helper()
	w, err := time.Parse("2006-01-02 15:04:05", s)
	if err != nil {
		t.Fatal(err)
	}
	return w.Unix()
}

// The transitions are those of the IANA time zone database; for the EU also
// Directive 2000/84/EC (last Sundays of March and October, 01:00 UTC), for the
// United States the Energy Policy Act of 2005, section 110 (second Sunday of
// March, first of November, 02:00 local).
func TestResolve(t *testing.T) {
	local := site.Clock{Kind: site.ClockLocal}
	for _, c := range []struct {
		zone  string
		clock site.Clock
		wall  string
		want  string // instant, or a verdict
	}{
		{"Europe/Zurich", local, "2025-03-30 01:59:59", "2025-03-30T00:59:59Z"},
		{"Europe/Zurich", local, "2025-03-30 02:00:00", "skipped"},
		{"Europe/Zurich", local, "2025-03-30 02:59:59", "skipped"},
		{"Europe/Zurich", local, "2025-03-30 03:00:00", "2025-03-30T01:00:00Z"},
		{"Europe/Zurich", local, "2025-10-26 01:59:59", "2025-10-25T23:59:59Z"},
		{"Europe/Zurich", local, "2025-10-26 02:00:00", "repeated"},
		{"Europe/Zurich", local, "2025-10-26 02:59:59", "repeated"},
		{"Europe/Zurich", local, "2025-10-26 03:00:00", "2025-10-26T02:00:00Z"},
		{"America/New_York", local, "2025-03-09 02:30:00", "skipped"},
		{"America/New_York", local, "2025-03-09 03:00:00", "2025-03-09T07:00:00Z"},
		{"America/New_York", local, "2025-11-02 01:30:00", "repeated"},
		{"America/New_York", local, "2025-11-02 02:00:00", "2025-11-02T07:00:00Z"},
		{"Australia/Sydney", local, "2025-10-05 02:30:00", "skipped"},
		{"Australia/Sydney", local, "2025-04-06 02:30:00", "repeated"},
		{"Australia/Sydney", local, "2025-04-06 03:00:00", "2025-04-05T17:00:00Z"},
		{"Australia/Lord_Howe", local, "2025-10-05 02:15:00", "skipped"},
		{"Australia/Lord_Howe", local, "2025-10-05 02:30:00", "2025-10-04T15:30:00Z"},
		{"Australia/Lord_Howe", local, "2025-04-06 01:45:00", "repeated"},
		{"Australia/Lord_Howe", local, "2025-04-06 01:29:59", "2025-04-05T14:29:59Z"},
		{"Australia/Lord_Howe", local, "2025-04-06 02:00:00", "2025-04-05T15:30:00Z"},
		{"Asia/Kolkata", local, "2025-06-01 05:30:00", "2025-06-01T00:00:00Z"},
		{"Asia/Kathmandu", local, "2025-06-01 05:45:00", "2025-06-01T00:00:00Z"},
		{"Europe/Zurich", site.Clock{Kind: site.ClockUTC}, "2025-03-30 02:30:00", "2025-03-30T02:30:00Z"},
		{"Europe/Zurich", site.Clock{Kind: site.ClockStandard}, "2025-03-30 02:30:00", "2025-03-30T01:30:00Z"},
		{"Europe/Zurich", site.Clock{Kind: site.ClockStandard}, "2025-07-01 12:00:00", "2025-07-01T11:00:00Z"},
		{"Europe/Dublin", site.Clock{Kind: site.ClockStandard}, "2025-07-01 12:00:00", "2025-07-01T12:00:00Z"},
		{"Australia/Sydney", site.Clock{Kind: site.ClockStandard}, "2025-01-01 12:00:00", "2025-01-01T02:00:00Z"},
		{"Europe/Zurich", site.Clock{Kind: site.ClockOffset, OffsetS: -5 * 3600}, "2025-10-26 02:30:00", "2025-10-26T07:30:00Z"},
		{"Europe/Zurich", site.Clock{Kind: site.ClockZone, Zone: zoneOf(t, "America/New_York")}, "2025-07-01 12:00:00", "2025-07-01T16:00:00Z"},
		{"Europe/Zurich", site.Clock{ShiftS: -90}, "2025-07-01 12:00:00", "2025-07-01T09:58:30Z"},
	} {
		r, err := NewResolver(c.clock, zoneOf(t, c.zone))
		if err != nil {
			t.Fatal(err)
		}
		for pass := 0; pass < 2; pass++ { // the second from the kept segment
			u, v := r.Resolve(wall(t, c.wall))
			got := time.Unix(u, 0).UTC().Format(time.RFC3339)
			switch v {
			case Skipped:
				got = "skipped"
			case Repeated:
				got = "repeated"
			}
			if got != c.want {
				t.Errorf("%s %v %s: got %s, want %s", c.zone, c.clock.Kind, c.wall, got, c.want)
			}
		}
	}
}

func TestShiftsOfPartOfTheTime(t *testing.T) {
	c := site.Clock{ShiftS: 10, Shifts: []site.ClockShift{{From: site.Date{Year: 2025, Month: 3, Day: 1}, To: site.Date{Year: 2025, Month: 3, Day: 31}, ShiftS: 3600}}}
	r, err := NewResolver(c, zoneOf(t, "Europe/Zurich"))
	if err != nil {
		t.Fatal(err)
	}
	for _, x := range [][2]string{
		{"2025-02-28 23:59:59", "2025-02-28T23:00:09Z"},
		{"2025-03-01 00:00:00", "2025-03-01T00:00:10Z"},
		// A clock that runs an hour behind shows 02:30 when it is 03:30.
		{"2025-03-30 02:30:00", "2025-03-30T01:30:10Z"},
		{"2025-03-31 23:59:59", "2025-03-31T23:00:09Z"},
		{"2025-04-01 00:00:00", "2025-03-31T22:00:10Z"},
	} {
		u, v := r.Resolve(wall(t, x[0]))
		if got := time.Unix(u, 0).UTC().Format(time.RFC3339); v != Sure || got != x[1] {
			t.Errorf("%s: got %s (%d), want %s", x[0], got, v, x[1])
		}
	}
	if u, _ := r.Written(wall(t, "2025-03-05 12:00:00"), 3600); u != wall(t, "2025-03-05 12:00:10") {
		t.Errorf("written offset: got %d", u)
	}
}

func TestResolverRefuses(t *testing.T) {
	if _, err := NewResolver(site.Clock{Kind: site.ClockZone}, time.UTC); err == nil {
		t.Error("a zone clock without a zone was taken")
	}
	if _, err := NewResolver(site.Clock{Kind: "moon"}, time.UTC); err == nil {
		t.Error("an unknown clock was taken")
	}
}

// Every instant's written time resolves back to the instant, or says that the
// time is repeated and the window then holds both showings. The reference is
// the standard library's conversion from instants to wall clocks, which is
// never in doubt.
func TestResolveInvertsWallClock(t *testing.T) {
	zones := []string{"Europe/Zurich", "America/New_York", "Australia/Sydney", "Australia/Lord_Howe", "Asia/Kolkata", "Asia/Kathmandu", "America/St_Johns", "Africa/Casablanca", "Pacific/Apia", "America/Sao_Paulo"}
	rs := map[string]*Resolver{}
	locs := map[string]*time.Location{}
	for _, z := range zones {
		locs[z] = zoneOf(t, z)
		rs[z], _ = NewResolver(site.Clock{}, locs[z])
	}
	rapid.Check(t, func(t *rapid.T) {
		z := rapid.SampledFrom(zones).Draw(t, "zone")
		var at int64
		if rapid.Bool().Draw(t, "near a change") {
			d := time.Unix(rapid.Int64Range(1_000_000_000, 1_900_000_000).Draw(t, "from"), 0).In(locs[z])
			_, end := d.ZoneBounds()
			if end.IsZero() {
				end = d
			}
			at = end.Unix() + rapid.Int64Range(-8000, 8000).Draw(t, "off")
		} else {
			at = rapid.Int64Range(1_000_000_000, 1_900_000_000).Draw(t, "at")
		}
		tm := time.Unix(at, 0).In(locs[z])
		_, off := tm.Zone()
		w := at + int64(off)
		u, v := rs[z].Resolve(w)
		switch v {
		case Sure:
			if u != at {
				t.Fatalf("%s: %d resolves to %d", z, at, u)
			}
		case Repeated:
			win := rs[z].Window(w)
			if u != at && u+win.DeltaS != at || w < win.LoS || w >= win.HiS {
				t.Fatalf("%s: %d is neither %d nor %d later", z, at, u, win.DeltaS)
			}
		default:
			t.Fatalf("%s: the clock showed %d but it is called skipped", z, w)
		}
	})
}

func BenchmarkResolve(b *testing.B) {
	r, _ := NewResolver(site.Clock{}, zoneOf(b, "Europe/Zurich"))
	w := wall(b, "2025-07-01 00:00:00")
	b.ReportAllocs()
	for i := 0; i < b.N; i++ {
		r.Resolve(w + int64(i%86400))
	}
}

// A correction that grows is the straight line between its first and last day,
// in steps of a day; the instants in between follow from the rule of three.
func TestShiftThatGrows(t *testing.T) {
	day := func(m time.Month, d int) site.Date { return site.Date{Year: 2025, Month: m, Day: d} }
	c := site.Clock{Kind: site.ClockUTC, Shifts: []site.ClockShift{{From: day(1, 1), To: day(1, 31), ShiftS: 60, Grows: true, EndShiftS: -540}}}
	r, err := NewResolver(c, time.UTC)
	if err != nil {
		t.Fatal(err)
	}
	for _, x := range []struct {
		wall string
		addS int64
	}{
		{"2024-12-31 23:59:59", 0}, {"2025-01-01 00:00:00", 60}, {"2025-01-01 23:59:59", 60}, {"2025-01-16 12:00:00", -240},
		{"2025-01-31 12:00:00", -540}, {"2025-02-01 00:00:00", 0}, {"2025-01-04 01:00:00", 0}, {"2025-01-02 00:00:00", 40},
	} {
		w := wall(t, x.wall)
		if u, v := r.Resolve(w); v != Sure || u-w != x.addS {
			t.Errorf("%s: %d s, verdict %v; want %d", x.wall, u-w, v, x.addS)
		}
		if u, _ := r.Written(w, 3600); u-w+3600 != x.addS {
			t.Errorf("%s with an offset: %d s, want %d", x.wall, u-w+3600, x.addS)
		}
	}
}
