package influx

import (
	"bytes"
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// listed is a source that yields a list.
type listed struct {
	name   string
	points []int
	rows   []row
}

type row struct {
	point int
	t     int64
	v     float64
}

func (l *listed) Name() string  { return l.name }
func (l *listed) Points() []int { return l.points }
func (l *listed) Read(_ context.Context, to reading.Sink) error {
	for _, r := range l.rows {
		to.Reading(r.point, r.t, r.v)
	}
	to.Reject(l.points[0], reading.Missing, reading.Where{}, "")
	return nil
}

// What is loaded reads back as it was, whatever the order, the kinds and the
// names; loading again changes nothing.
func TestLoadAndReadBack(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "loaded")
	s, log := houseOf(address, "loaded", site.InfluxRaw,
		site.Point{Column: "T [°C], a=b \"c\" 'd' \\e\\ ${f} |g| 温度 \u200fx", Quantity: site.AirTemp},
		site.Point{Column: "window", Quantity: site.Window, Logging: site.COV, Hold: 25 * time.Hour},
		site.Point{Column: "unit", Quantity: site.PlantStatus, Logging: site.COV},
		site.Point{Column: "vane", Quantity: site.WindDirection},
		site.Point{Column: "shuffled", Quantity: site.CO2},
		site.Point{Column: "contradicting", Quantity: site.CO2},
		site.Point{Column: "bucket", Quantity: site.Rain, Unit: "in"},
		site.Point{Column: "split", Quantity: site.Humidity, Unit: "fraction"})
	for i := range s.Points {
		s.Points[i].Source = "files"
	}
	r := rand.New(rand.NewPCG(3, 3))
	start := utc(2024, 12, 30, 22, 0)
	a, b := &listed{name: "a.csv", points: []int{0, 1, 2, 3, 4, 5, 6, 7}}, &listed{name: "b.csv", points: []int{7}}
	want := map[int][]number{}
	say := func(l *listed, p int, at int64, v float64) {
		l.rows = append(l.rows, row{p, at, v})
		want[p] = append(want[p], number{at, v})
	}
	for k := range 4000 {
		at := start + int64(k)*300
		say(a, 0, at, 21+r.NormFloat64())
		say(a, 3, at, 360*r.Float64())
		say(a, 6, at, 0.2*r.Float64())
		if k >= 2000 {
			say(a, 7, at, 100*r.Float64()) // the later half comes first
		}
		if k%7 == 0 {
			say(a, 1, at+int64(k%3), float64(k%2))
			say(a, 2, at+int64(k%5), float64(k%5))
		}
		if k%50 == 0 {
			a.rows = append(a.rows, row{0, at, want[0][len(want[0])-1].x}, row{3, at, math.NaN()}, row{4, at, math.Inf(1)})
		}
		if k%100 != 0 {
			say(a, 5, at, 500)
			continue
		}
		a.rows = append(a.rows, row{5, at, 500}, row{5, at, 501}, row{5, at, 500})
	}
	var later []row
	for k := range 2000 {
		say(b, 7, start+int64(k)*300, 100*r.Float64())
		later = append(later, row{4, start + int64(k)*300, 400 + float64(k)/8})
	}
	for _, x := range later {
		want[4] = append(want[4], number{x.t, x.v})
	}
	r.Shuffle(len(later), func(i, j int) { later[i], later[j] = later[j], later[i] })
	a.rows = append(a.rows, later...)
	want[7] = append(want[7][2000:], want[7][:2000]...)

	var loaded []Loaded
	for round := range 2 {
		var err error
		if loaded, err = Load(context.Background(), s, log, []reading.Source{a, b}, nil); err != nil {
			t.Fatalf("round %d: %v", round, err)
		}
		for i, l := range loaded {
			if l.Point != i || l.Written != int64(len(want[i])) {
				t.Errorf("round %d: %+v, want %d written", round, l, len(want[i]))
			}
		}
	}
	if l := loaded[5]; l.Conflicts != 120 || l.Duplicates != 0 {
		t.Errorf("%+v", l)
	}
	if loaded[0].Duplicates != 80 || loaded[3].Unfit != 80 || loaded[4].Unfit != 80 || loaded[0].Rejects != 1 {
		t.Errorf("%+v", loaded)
	}

	var table bytes.Buffer
	if err := WritePoints(&table, s, log, loaded); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{
		`store,"files:T [°C], a=b ""c"" 'd' %5Ce%5C ${f} %7Cg%7C 温度 ` + "\u200f" + `x",,air_temp,degC,sampled,`, "store,files:window,,window,,cov,,25h0m0s,,0=shut;1=open,", "store,files:unit,,plant_status,,cov,,,,0=off;1=on;2=vent;3=heat;4=cool,",
		"store,files:bucket,,rain,mm,"} {
		if !strings.Contains(table.String(), want) {
			t.Errorf("the table lacks %s:\n%s", want, table.String())
		}
	}

	back, _ := houseOf(address, "loaded", site.InfluxRaw, s.Points...)
	for i, l := range loaded {
		p := &back.Points[i]
		p.Column, p.Conversion = l.Tag, site.Conversion{Factor: 1}
		if p.Quantity == site.PlantStatus {
			p.Values = map[string]string{"0": "off", "1": "on", "2": "vent", "3": "heat", "4": "cool"}
		}
	}
	var got told
	if err := open(t, back).Read(context.Background(), &got); err != nil {
		t.Fatal(err)
	}
	sameReadings(t, back, got.readings, want)

	// A reading more in the database than in the files is told.
	server.Write(t, "loaded", "readings,point=files:window value=1 1735600001\n")
	_, err := Load(context.Background(), s, log, []reading.Source{a, b}, nil)
	if err == nil || !strings.Contains(err.Error(), `the database holds 1 reading more than the files, for instance of "files:window"`) {
		t.Errorf("got %v", err)
	}
}

func sameReadings(t *testing.T, s *site.Site, got, want map[int][]number) {
	t.Helper()
	for i := range s.Points {
		if len(got[i]) != len(want[i]) {
			t.Errorf("%s: %d readings, want %d", s.Points[i].Column, len(got[i]), len(want[i]))
			continue
		}
		for k := range want[i] {
			if got[i][k] != want[i][k] {
				t.Errorf("%s, reading %d: got %+v, want %+v", s.Points[i].Column, k, got[i][k], want[i][k])
				break
			}
		}
	}
}

// Two points must not share a name in the database.
func TestLoadNames(t *testing.T) {
	address := server.Address(t)
	server.Database(t, "names")
	s, log := houseOf(address, "names", site.InfluxRaw, site.Point{Column: "b:c", Quantity: site.CO2}, site.Point{Column: "c", Quantity: site.CO2})
	s.Points[0].Source, s.Points[1].Source = "a", "a:b"
	_, err := Load(context.Background(), s, log, []reading.Source{&listed{name: "x", points: []int{0, 1}}}, nil)
	if err == nil || !strings.Contains(err.Error(), `would have one name in the database: "a:b:c"`) {
		t.Errorf("got %v", err)
	}
	log.Influx.Measurement = "#1"
	if _, err = Load(context.Background(), s, log, nil, nil); err == nil || !strings.Contains(err.Error(), "begins a comment") {
		t.Errorf("got %v", err)
	}
}
