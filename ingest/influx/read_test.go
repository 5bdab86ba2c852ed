package influx

import (
	"context"
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Fields of every type, other measurements and fields, states in words, and
// what is no reading.
func TestKindsOfValues(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "kinds")
	server.Write(t, "kinds", `readings,point=temp value=21.5 1735689600
readings,point=temp value=-999 1735689660
readings,point=temp value=70.7 1735689720
ints,point=co2 value=612i 1735689600
ints,point=co2 value=-9999i 1735689660
air,point=L1.02 hum=0.5,temp=20 1735689600
words,point=unit value="Cooling" 1735689600
words,point=unit value="Off" 1735689660
words,point=unit value="" 1735689720
words,point=unit value="Flying" 1735689780
truth,point=window value=true 1735689600
truth,point=window value=F 1735689660
readings,point=two,logger=a value=1 1735689600
readings,point=two,logger=a value=3 1735689720
readings,point=two,logger=b value=2 1735689660
readings,point=border value=1 1738367999
readings,point=border value=2 1738368000
readings,logger=a value=5 1735689600
`)
	s, _ := houseOf(address, "kinds", site.InfluxMeans,
		site.Point{Column: "temp", Quantity: site.AirTemp}, site.Point{Column: "ints||co2", Quantity: site.CO2},
		site.Point{Column: "air|hum|L1.02", Quantity: site.Humidity, Unit: "fraction"}, site.Point{Column: "words||unit", Quantity: site.PlantStatus},
		site.Point{Column: "truth||window", Quantity: site.Window}, site.Point{Column: "two", Quantity: site.CO2}, site.Point{Column: "border", Quantity: site.CO2})
	src := open(t, s)
	var got told
	if err := src.Read(context.Background(), &got); err != nil {
		t.Fatal(err)
	}
	const t0 = 1735689600
	sameReadings(t, s, got.readings, map[int][]number{0: {{t0, 21.5}, {t0 + 120, 70.7}}, 1: {{t0, 612}}, 2: {{t0, 50}}, 3: {{t0, 4}, {t0 + 60, 0}},
		4: {{t0, 1}, {t0 + 60, 0}}, 5: {{t0, 1}, {t0 + 60, 2}, {t0 + 120, 3}}, 6: {{1738367999, 1}, {1738368000, 2}}})
	if fmt.Sprint(got.rejects) != fmt.Sprint(map[int]map[reading.Reason]int{0: {reading.Missing: 1}, 1: {reading.Missing: 1}, 3: {reading.Missing: 1, reading.UnknownWord: 1}}) {
		t.Errorf("rejects %v", got.rejects)
	}
	if len(got.issues) != 1 || got.issues[0].Point != 3 || !strings.Contains(got.issues[0].Text, `"Flying" (1)`) {
		t.Errorf("issues %+v", got.issues)
	}
	if f := src.Describe(); f.Rows != 17 || len(f.SHA256) != 64 || !strings.HasPrefix(f.Path, "influx://127.0.0.1:") || !strings.HasSuffix(f.Path, "/kinds") {
		t.Errorf("%+v", f)
	}
	again := src.Describe().SHA256
	if err := src.Read(context.Background(), &told{}); err != nil || src.Describe().SHA256 != again {
		t.Errorf("%v: a second reading has another checksum", err)
	}
	var some told
	if err := src.ReadSome(context.Background(), &some, []int{5}); err != nil || some.n != 3 {
		t.Errorf("%v, %d readings of point 5", err, some.n)
	}
}

// The period bounds what is asked for: 30 days before it for running means,
// some hours after it for values stamped at the end of their interval.
func TestPeriod(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "period")
	var text strings.Builder
	var all []number
	for at := utc(2025, 1, 1, 0, 0); at < utc(2025, 7, 1, 0, 0); at += 3600 {
		all = append(all, number{at, 20})
	}
	lines(&text, "readings", "temp", "%.1f", all)
	server.Write(t, "period", text.String())
	s, _ := houseOf(address, "period", site.InfluxRaw, site.Point{Column: "temp", Quantity: site.AirTemp})
	s.Period = site.Period{From: site.Date{Year: 2025, Month: 3, Day: 31}, To: site.Date{Year: 2025, Month: 4, Day: 2}}
	var got told
	if err := open(t, s).Read(context.Background(), &got); err != nil {
		t.Fatal(err)
	}
	// Zurich: midnight of 1 March is 23:00 UTC, of 3 April 22:00 UTC.
	first, last := got.readings[0][0].t, got.readings[0][got.n-1].t
	if first != utc(2025, 2, 28, 23, 0) || last != utc(2025, 4, 3, 0, 0) || int64(got.n) != (last-first)/3600+1 {
		t.Errorf("%d readings from %d to %d", got.n, first, last)
	}
	s.Period = site.Period{From: site.Date{Year: 2031, Month: 1, Day: 1}, To: site.Date{Year: 2031, Month: 1, Day: 2}}
	got = told{}
	if err := open(t, s).Read(context.Background(), &got); err != nil || got.n != 0 {
		t.Errorf("%v, %d readings of a year without any", err, got.n)
	}
}

// A log whose instants are in truth local times, and one that ran an hour off
// for some days.
func TestClocks(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "clocks")
	var text strings.Builder
	var all []number
	for at := utc(2025, 10, 20, 0, 0); at < utc(2025, 10, 30, 0, 0); at += 1800 {
		all = append(all, number{at, 20})
	}
	lines(&text, "readings", "temp", "%.1f", all)
	server.Write(t, "clocks", text.String())
	for name, c := range map[string]struct {
		clock site.Clock
		want  func(at int64) (int64, bool)
	}{
		"local": {site.Clock{Kind: site.ClockLocal}, func(at int64) (int64, bool) {
			switch { // 26 October: 02:00 to 03:00 comes twice
			case at < utc(2025, 10, 26, 2, 0):
				return at - 7200, true
			case at < utc(2025, 10, 26, 3, 0):
				return 0, false
			}
			return at - 3600, true
		}},
		"shifted": {site.Clock{Kind: site.ClockUTC, Shifts: []site.ClockShift{{From: site.Date{Year: 2025, Month: 10, Day: 22}, To: site.Date{Year: 2025, Month: 10, Day: 23}, ShiftS: -3600}}}, func(at int64) (int64, bool) {
			if at >= utc(2025, 10, 22, 0, 0) && at < utc(2025, 10, 24, 0, 0) {
				return at - 3600, true
			}
			return at, true
		}},
	} {
		s, log := houseOf(address, "clocks", site.InfluxMeans, site.Point{Column: "temp", Quantity: site.AirTemp})
		log.Clock = c.clock
		var want []number
		ambiguous := 0
		for _, r := range all {
			if at, ok := c.want(r.t); ok {
				want = append(want, number{at, 20})
			} else {
				ambiguous++
			}
		}
		src := open(t, s)
		var got told
		if err := src.Read(context.Background(), &got); err != nil {
			t.Fatal(err)
		}
		sameReadings(t, s, got.readings, map[int][]number{0: want})
		if got.rejects[0][reading.AmbiguousHour] != ambiguous || (len(src.ClockNotes()) > 0) != (ambiguous > 0) {
			t.Errorf("%s: rejects %v, notes %v", name, got.rejects, src.ClockNotes())
		}
	}
}

// Names of any characters select their own series and nothing else: nothing of
// a name can end the literal it stands in.
func TestNamesAreQuoted(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "quoted")
	n := 0
	rapid.Check(t, func(rt *rapid.T) {
		if n++; n > 40 { // each asks the server several times
			return
		}
		part := rapid.SampledFrom([]string{`"`, `\\`, `${`, `}`, `a`, ` `, `)`, `or`, `==`, `r`, "\t", `|`, `>`, `//`, `%`, `é`, `$`, `{`, `'`, `,`, "\u202e", `<script>`})
		name := strings.Join(rapid.SliceOfN(part, 1, 6).Draw(rt, "name"), "")
		if strings.Count(name, "|") >= 2 || strings.HasSuffix(name, `\`) {
			name += "."
		}
		tag := fmt.Sprintf("%s %d", name, n)
		stored := strings.NewReplacer(",", `\,`, "=", `\=`, " ", `\ `).Replace(tag)
		server.Write(t, "quoted", fmt.Sprintf("readings,point=%s value=%d 1735689600\nreadings,point=other%d value=7 1735689600\n", stored, n, n))
		s, _ := houseOf(address, "quoted", site.InfluxMeans, site.Point{Column: "||" + tag, Quantity: site.CO2})
		src, unmet, err := Open(context.Background(), s, &s.Logs[0], []int{0})
		if err != nil || len(unmet) > 0 {
			rt.Fatalf("%q: %v %+v", tag, err, unmet)
		}
		var got told
		if err := src.Read(context.Background(), &got); err != nil || len(got.readings[0]) != 1 || got.readings[0][0].x != float64(n) {
			rt.Fatalf("%q: %v, got %+v", tag, err, got.readings)
		}
	})
}

// Many points at once, in more than one query, from more than one month.
func TestManyPoints(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "many")
	var text strings.Builder
	var points []site.Point
	want := map[int][]number{}
	r := rand.New(rand.NewPCG(1, 1))
	for i := range 2*tagsMost + 7 {
		var rs []number
		for at := utc(2025, 1, 29, 0, 0); at < utc(2025, 2, 3, 0, 0); at += 3600 {
			if r.IntN(3) > 0 {
				rs = append(rs, number{at, float64(400 + r.IntN(800))})
			}
		}
		name := fmt.Sprintf("p%03d", i)
		lines(&text, "readings", name, "%.1f", rs)
		points = append(points, site.Point{Column: name, Quantity: site.CO2})
		want[i] = rs
	}
	server.Write(t, "many", text.String())
	s, _ := houseOf(address, "many", site.InfluxMeans, points...)
	var got told
	if err := open(t, s).Read(context.Background(), &got); err != nil {
		t.Fatal(err)
	}
	sameReadings(t, s, got.readings, want)
}

func TestUnmet(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "unmet")
	server.Write(t, "unmet", "readings,point=B1.T value=1 1735689600\nreadings,point=B2.T value=1 1735689600\n")
	s, log := houseOf(address, "unmet", site.InfluxMeans, site.Point{Column: "B1_T", Quantity: site.AirTemp}, site.Point{Column: "B2.T", Quantity: site.AirTemp},
		site.Point{Column: "air|temp|B1", Quantity: site.AirTemp}, site.Point{Column: "||B2.T", Quantity: site.AirTemp})
	src, unmet, err := Open(context.Background(), s, log, everyPoint(s))
	if err != nil {
		t.Fatal(err)
	}
	if p := src.Points(); len(p) != 1 || p[0] != 1 {
		t.Errorf("points %v", p)
	}
	want := map[int]string{0: `no series of measurement "readings", field "value" has point = "B1_T"`,
		2: `the bucket holds no readings of measurement "air", field "temp" with the tag "point"`, 3: `column "||B2.T" is the series that column "B2.T" is already`}
	for _, u := range unmet {
		if u.Text != want[u.Point] {
			t.Errorf("point %d: %s", u.Point, u.Text)
		}
		if u.Point == 0 && strings.Join(u.Near, " ") != "B1.T B2.T" {
			t.Errorf("near %q", u.Near)
		}
		delete(want, u.Point)
	}
	if len(want) > 0 {
		t.Errorf("not told: %v", want)
	}
}
