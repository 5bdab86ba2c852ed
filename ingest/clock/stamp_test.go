package clock

import (
	"testing"
	"time"

	"pgregory.net/rapid"

	"sashlog/configs/site"
)

func parse(t testing.TB, order site.DateOrder, s string) (string, Fault) {
	p, err := NewParser(order, "", false)
	if err != nil {
		t.Fatal(err)
	}
	p.Parse([]byte("2024-01-01 00:00")) // a date to remember
	st, f := p.Parse([]byte(s))
	st2, f2 := p.Parse([]byte(s)) // from the date remembered
	if st != st2 || f != f2 {
		t.Errorf("%q: %v %v at first, then %v %v", s, st, f, st2, f2)
	}
	if f != Fine {
		return "", f
	}
	w := time.Unix(st.WallS, 0).UTC().Format("2006-01-02 15:04:05")
	if st.HasOffset {
		w += time.Unix(0, 0).In(time.FixedZone("", int(st.OffsetS))).Format("-07:00")
	}
	return w, Fine
}

func TestParse(t *testing.T) {
	for _, c := range []struct {
		order   site.DateOrder
		in, out string
	}{
		// ISO 8601, basic and extended, and its usual relaxations.
		{"", "2025-03-30T02:30:00", "2025-03-30 02:30:00"},
		{"", "2025-03-30 02:30", "2025-03-30 02:30:00"},
		{"", "2025-03-30 2:30", "2025-03-30 02:30:00"},
		{"", "2025-03-30T02:30:00.123456", "2025-03-30 02:30:00"},
		{"", "2025-03-30T02:30:00,5", "2025-03-30 02:30:00"},
		{"", "2025-03-30T02:30:00Z", "2025-03-30 02:30:00+00:00"},
		{"", "2025-03-30T02:30:00.000+02:00", "2025-03-30 02:30:00+02:00"},
		{"", "2022-10-12T16:13:00+0200", "2022-10-12 16:13:00+02:00"},
		{"", "2012-04-26 00:00:00+00", "2012-04-26 00:00:00+00:00"},
		{"", "2025-03-30 02:30:00 -05:30", "2025-03-30 02:30:00-05:30"},
		{"", "2025-03-30 02:30 UTC", "2025-03-30 02:30:00+00:00"},
		{"", "2025-03-30T02:30:00+02:00[Europe/Zurich]", "2025-03-30 02:30:00+02:00"},
		{"", "2025-03-30 GMT+01:00", ""},
		{"", "2025-03-30 02:30 GMT+01:00", "2025-03-30 02:30:00+01:00"},
		{"", "2025/03/30 02:30", "2025-03-30 02:30:00"},
		{"", "2025.03.30 02:30:15", "2025-03-30 02:30:15"},
		{"", "20250330T023000", "2025-03-30 02:30:00"},
		{"", "20250330T0230Z", "2025-03-30 02:30:00+00:00"},
		{"", "20250330 02:30", "2025-03-30 02:30:00"},
		{"", "202503300230", "2025-03-30 02:30:00"},
		{"", "20250330023015", "2025-03-30 02:30:15"},
		{"", "2025-03-30", "2025-03-30 00:00:00"},
		{"", "2025-03-30 24:00", "2025-03-31 00:00:00"},
		{"", " 2025-03-30 02:30\u00a0", "2025-03-30 02:30:00"},
		// Day and month by their order.
		{site.DMY, "03/04/2025 02:30", "2025-04-03 02:30:00"},
		{site.MDY, "03/04/2025 02:30", "2025-03-04 02:30:00"},
		{site.DMY, "3/4/25 2:30", "2025-04-03 02:30:00"},
		{site.MDY, "10/02/13 06:00:00 AM", "2013-10-02 06:00:00"},
		{site.MDY, "10/02/13 12:15 am", "2013-10-02 00:15:00"},
		{site.MDY, "10/02/13 12:15 PM", "2013-10-02 12:15:00"},
		{site.MDY, "10/02/2013 1:05:09p.m.", "2013-10-02 13:05:09"},
		{site.MDY, "10/02/2013 6 PM", "2013-10-02 18:00:00"},
		{site.DMY, "30-03-2025 02:30", "2025-03-30 02:30:00"},
		{site.DMY, "30/03/2025, 02:30:10", "2025-03-30 02:30:10"},
		{site.YMD, "25-03-30 02:30", "2025-03-30 02:30:00"},
		{"", "30.03.2025 02:30", "2025-03-30 02:30:00"},
		{"", "1.2.2025 14.30", "2025-02-01 14:30:00"},
		{"", "1.2.25 14h30", "2025-02-01 14:30:00"},
		{"", "05/05/2025 02:30", "2025-05-05 02:30:00"},
		// Months in words.
		{"", "12-Mar-25 06:00", "2025-03-12 06:00:00"},
		{"", "12 March 2025 06:00:00 PM", "2025-03-12 18:00:00"},
		{"", "Mar 12, 2025 6:00 PM", "2025-03-12 18:00:00"},
		{"", "Wed 12-Mar-2025 06:00", "2025-03-12 06:00:00"},
		{"", "12. M\u00e4rz 2025 06:00", "2025-03-12 06:00:00"},
		{"", "12 d\u00e9c. 2025 06:00", "2025-12-12 06:00:00"},
		{"", "1 juil. 2025 06:00", "2025-07-01 06:00:00"},
		// Numbers. 1489017527 = 2017-03-08 23:58:47 UTC (POSIX time).
		{"", "1489017527", "2017-03-08 23:58:47+00:00"},
		{"", "1489017527.9", "2017-03-08 23:58:47+00:00"},
		{"", "1489017527123", "2017-03-08 23:58:47+00:00"},
		{"", "1489017527123456789", "2017-03-08 23:58:47+00:00"},
		// Spreadsheet serials (ECMA-376 part 1, 18.17.4.1: 1900 system).
		{"", "25569", "1970-01-01 00:00:00"},
		{"", "45746.104166666664", "2025-03-30 02:30:00"},
		{"", "45746,104166666664", "2025-03-30 02:30:00"},
	} {
		got, f := parse(t, c.order, c.in)
		if got != c.out {
			t.Errorf("%s %q: got %q (fault %d), want %q", c.order, c.in, got, f, c.out)
		}
	}
}

func TestParseFaults(t *testing.T) {
	for _, c := range []struct {
		order site.DateOrder
		in    string
		want  Fault
	}{
		{"", "2025-03-30 02:30 CEST", Abbreviation},
		{"", "2025-03-30 02:30:00 EST", Abbreviation},
		{"", "03/04/2025 02:30", NoOrder},
		{"", "3-4-25 02:30", NoOrder},
		{site.DMY, "04/17/2025 02:30", Unreadable},
		{site.MDY, "17/04/2025 02:30", Unreadable},
		{site.DMY, "29/02/2025 02:30", Unreadable},
		{"", "2025-02-29 02:30", Unreadable},
		{"", "2025-13-01 02:30", Unreadable},
		{"", "2025-03-30 25:00", Unreadable},
		{"", "2025-03-30 24:01", Unreadable},
		{"", "2025-03-30 02:61", Unreadable},
		{"", "2025-03-30 13:00 PM", Unreadable},
		{"", "2025-03-30 0:30 PM", Unreadable},
		{"", "2025-03-30 02:30 +2", Fine},
		{"", "2025-03-30 02:30 +25:00", Unreadable},
		{"", "2025-03-30 2", Unreadable},
		{"", "2025-03-30 02:30 x", Abbreviation},
		{"", "", Unreadable},
		{"", "Logged", Unreadable},
		{"", "21.5", Unreadable},
		{"", "17", Unreadable},
		{"", "12345678901", Unreadable},
		{"", "99999999", Unreadable},
		{"", "02:30", Unreadable},
		{"", "End of report: 12 rows", Unreadable},
	} {
		if _, f := parse(t, c.order, c.in); f != c.want {
			t.Errorf("%s %q: fault %d, want %d", c.order, c.in, f, c.want)
		}
	}
}

func TestParseSplitAndLayout(t *testing.T) {
	p, _ := NewParser(site.DMY, "", false)
	for _, c := range [][3]string{
		{"03/04/2025", "02:30", "2025-04-03 02:30:00"},
		{"2025-04-03", "2:30:10 PM", "2025-04-03 14:30:10"},
		{"45746", "0.104166666666667", "2025-03-30 02:30:00"},
	} {
		st, f := p.ParseSplit([]byte(c[0]), []byte(c[1]))
		if got := time.Unix(st.WallS, 0).UTC().Format("2006-01-02 15:04:05"); f != Fine || got != c[2] {
			t.Errorf("%v: got %s (%d)", c, got, f)
		}
	}
	if _, f := p.ParseSplit([]byte("03/04/2025"), nil); f != Unreadable {
		t.Error("a date without its time of day was taken")
	}
	p, err := NewParser("", "02 01 2006 / 15h04", false)
	if err != nil {
		t.Fatal(err)
	}
	if st, f := p.Parse([]byte("03 04 2025 / 02h30")); f != Fine || st.WallS != wall(t, "2025-04-03 02:30:00") || st.HasOffset {
		t.Errorf("layout: %v %d", st, f)
	}
	if _, err := NewParser("", "2006-01-02 15:04 MST", false); err == nil {
		t.Error("a layout with a zone abbreviation was taken")
	}
	// ECMA-376 part 1, 18.17.4.1: serial 0 of the 1904 system is 1904-01-01,
	// 1462 days after serial 0 of the other.
	p, _ = NewParser("", "", true)
	if st, f := p.Parse([]byte("44284")); f != Fine || st.WallS != wall(t, "2025-03-30 00:00:00") {
		t.Errorf("1904: %v %d", st, f)
	}
}

// Times written by the standard library in many layouts read back.
func TestParseReadsWhatTimeWrites(t *testing.T) {
	layouts := []struct {
		layout string
		order  site.DateOrder
		trunc  int64
	}{
		{"2006-01-02 15:04:05", "", 1}, {time.RFC3339, "", 1}, {"2006-01-02T15:04:05-0700", "", 1}, {"02/01/2006 15:04", site.DMY, 60},
		{"01/02/2006 03:04:05 PM", site.MDY, 1}, {"1/2/06 3:04 PM", site.MDY, 60}, {"2.1.2006 15:04:05", "", 1}, {"02-Jan-06 15:04:05", "", 1},
		{"Mon Jan 2, 2006 15:04", "", 60}, {"20060102T150405Z0700", "", 1}, {"20060102150405", "", 1}, {"January 2, 2006 15:04:05", "", 1},
	}
	ps := map[site.DateOrder]*Parser{}
	for _, o := range []site.DateOrder{"", site.DMY, site.MDY} {
		ps[o], _ = NewParser(o, "", false)
	}
	rapid.Check(t, func(t *rapid.T) {
		l := rapid.SampledFrom(layouts).Draw(t, "layout")
		w := rapid.Int64Range(0, 3_000_000_000).Draw(t, "wall")
		off := rapid.Int64Range(-47, 56).Draw(t, "quarters") * 900
		s := time.Unix(w-off, 0).In(time.FixedZone("", int(off))).Format(l.layout)
		st, f := ps[l.order].Parse([]byte(s))
		if f != Fine || st.WallS != w-w%l.trunc {
			t.Fatalf("%q: got %d (fault %d), want %d", s, st.WallS, f, w)
		}
		if st.HasOffset && st.OffsetS != off {
			t.Fatalf("%q: offset %d, want %d", s, st.OffsetS, off)
		}
	})
}

func TestProver(t *testing.T) {
	for _, c := range []struct {
		dates []string
		want  site.DateOrder
		words string
	}{
		{[]string{"01/02/2025 00:00", "17/02/2025 00:00"}, site.DMY, "day before month (a 17 stands where a month would, line 2)"},
		{[]string{"02/01/2025", "02/17/2025"}, site.MDY, "month before day (a 17 stands where a day must, line 2)"},
		{[]string{"01/02/2025", "02/02/2025"}, "", ""},
		{[]string{"17/02/2025", "02/17/2025"}, "", ""},
		{[]string{"25/03/30", "25/03/31"}, "", ""},
		{[]string{"25/03/28", "25/03/29", "25/03/30"}, site.YMD, "year first (the first number stays at 25 while the last runs from 28 to 30)"},
		{[]string{"13/03/25", "14/03/25", "15/03/25"}, site.DMY, "day before month (a 13 stands where a month would, line 1)"},
	} {
		var p Prover
		for i, d := range c.dates {
			p.Add([]byte(d), int64(i+1))
		}
		if o, w, ok := p.Proven(); o != c.want || w != c.words || ok != (c.want != "") {
			t.Errorf("%v: %q %q %v", c.dates, o, w, ok)
		}
	}
	var p Prover
	p.Add([]byte("2025-03-04 00:00"), 1)
	p.Add([]byte("12-Mar-25"), 2)
	if p.Needed {
		t.Error("dates without doubt need no order")
	}
	p.Add([]byte("3.4.2025"), 3)
	if !p.OnlyDotted() {
		t.Error("a date with points")
	}
	p.Add([]byte("3/4/2025"), 4)
	if p.OnlyDotted() {
		t.Error("a date with slashes")
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"2025-03-30T02:30:00+02:00", "30.03.2025 02:30", "3/4/25 2:30 PM", "45746.1", "1489017527", "Mar 12, 2025", "20250330", "12-", "1. "} {
		f.Add(s)
	}
	ps := []*Parser{}
	for _, o := range []site.DateOrder{"", site.DMY, site.MDY, site.YMD} {
		p, _ := NewParser(o, "", false)
		ps = append(ps, p)
	}
	f.Fuzz(func(t *testing.T, s string) {
		for _, p := range ps {
			st, fault := p.Parse([]byte(s))
			if fault == Fine && (st.WallS < -2208988800-86400 || st.WallS > 9_999_999_999) {
				t.Errorf("%q: %d is out of bounds", s, st.WallS)
			}
			fresh := *p
			fresh.dateN = 0
			if st2, f2 := fresh.Parse([]byte(s)); st2 != st || f2 != fault {
				t.Errorf("%q: the date remembered changes the answer", s)
			}
		}
		FormOf([]byte(s))
		var pr Prover
		pr.Add([]byte(s), 1)
	})
}

func BenchmarkParse(b *testing.B) {
	p, _ := NewParser("", "", false)
	texts := [][]byte{[]byte("2025-03-30 02:30:00"), []byte("2025-03-30 02:31:00"), []byte("2025-03-30 02:32:00")}
	b.SetBytes(19)
	b.ReportAllocs()
	for i := 0; i < b.N; i++ {
		if _, f := p.Parse(texts[i%3]); f != Fine {
			b.Fatal(f)
		}
	}
}
