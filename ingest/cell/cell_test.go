package cell

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Short agrees with strconv.ParseFloat bit for bit wherever it answers.
func TestShortIsStrconv(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := rapid.StringMatching(`-?[0-9]{1,12}(\.[0-9]{1,6})?`).Draw(t, "number")
		rest := rapid.SampledFrom([]string{"", ";", ";x", ";21.04;Closed;", "\r\n2025-01-01", "\xff\xfe\xfd\xfc\xfb\xfa\xf9\xf8", " \u00b0C;21.0;"}).Draw(t, "rest")
		v, n := Short([]byte(s+rest), '.')
		if n == 0 {
			if len(strings.NewReplacer("-", "", ".", "").Replace(s)) <= 15 {
				t.Fatalf("%q not read", s)
			}
			return
		}
		want, err := strconv.ParseFloat(s, 64)
		if err != nil || n != len(s) || math.Float64bits(v) != math.Float64bits(want) {
			t.Fatalf("%q: got %v (%d bytes), want %v", s, v, n, want)
		}
	})
}

func TestShortLeavesTheRest(t *testing.T) {
	for _, s := range []string{"", "-", ".5", "5.", "x", "1234567890123456", "0.1234567890123456", "+5", " 5"} {
		for _, rest := range []string{"", ";", ";21.5;22.5;"} {
			if v, n := Short([]byte(s+rest), '.'); n != 0 {
				t.Errorf("%q: read %v from %d bytes", s+rest, v, n)
			}
		}
	}
}

func TestNumber(t *testing.T) {
	point, comma := Style{Mark: '.'}, Style{Mark: ','}
	said := Style{Mark: '.', Declared: true}
	for _, c := range []struct {
		style Style
		in    string
		want  float64
		rest  string
	}{
		{point, "21.5", 21.5, ""}, {point, " 21.5 ", 21.5, ""}, {point, "+21.5", 21.5, ""}, {point, ".5", 0.5, ""}, {point, "5.", 5, ""},
		{point, "\u221221.5", -21.5, ""}, {point, "21.5\u00a0", 21.5, ""}, {point, "- 3", -3, ""},
		{comma, "21,5", 21.5, ""}, {comma, "-0,25", -0.25, ""}, {comma, "1.234,5", 1234.5, ""}, {comma, "1 234,5", 1234.5, ""},
		{comma, "1\u202f234,5", 1234.5, ""}, {comma, "1\u00a0234\u00a0567,5", 1234567.5, ""},
		{point, "1,234.5", 1234.5, ""}, {point, "1,234,567", 1234567, ""}, {point, "1'234.5", 1234.5, ""}, {point, "1\u2019234", 1234, ""},
		{said, "1,234", 1234, ""},
		{point, "1.5E-05", 1.5e-5, ""}, {point, "1e3", 1000, ""},
		{point, "21.5 \u00b0C", 21.5, "\u00b0C"}, {point, "45%", 45, "%"}, {point, "45 %", 45, "%"}, {point, "400 ppm", 400, "ppm"},
		{Style{Mark: '.', Latin: true}, "\x9621.5\xa0", -21.5, ""},
		{point, "12345678901234567890", 12345678901234567890, ""},
	} {
		v, rest, ok := c.style.Number([]byte(c.in))
		if !ok || v != c.want || string(rest) != c.rest {
			t.Errorf("%q: got %v %q %v, want %v %q", c.in, v, rest, ok, c.want, c.rest)
		}
	}
	for _, c := range []struct {
		style Style
		in    string
	}{
		{point, "1,234"}, {comma, "1.234"}, {point, "21,5"}, {comma, "21.5"}, {point, "1,23,4"}, {point, "12:30"}, {point, "1.2.3"},
		{point, "abc"}, {point, ""}, {point, "-"}, {point, "--5"}, {point, "1_000"}, {point, "0x10"}, {point, "inf"}, {point, "1,2345"}, {point, "1234,567"},
		{point, "2025-01-01"}, {point, "1/2"},
	} {
		if v, rest, ok := c.style.Number([]byte(c.in)); ok && len(rest) == 0 {
			t.Errorf("%q: read as %v", c.in, v)
		}
	}
}

func TestDecode(t *testing.T) {
	degF := site.Point{Quantity: site.AirTemp, Unit: "degF", Conversion: site.Conversion{Factor: 5.0 / 9, Offset: -160.0 / 9}}
	degC := site.Point{Quantity: site.AirTemp, Unit: "degC"}
	power := site.Point{Quantity: site.ElectricPower, Unit: "kW"}
	window := site.Point{Quantity: site.Window}
	inverted := site.Point{Quantity: site.Window, OpenValue: "0"}
	closedOpen := site.Point{Quantity: site.Window, OpenValue: "Closed"}
	own := site.Point{Quantity: site.Window, Values: map[string]string{"Kipp": "open", "Zu": "shut", "2": "open"}}
	plant := site.Point{Quantity: site.PlantStatus, Values: map[string]string{"Stufe 2": "cool", "3": "heat"}}
	manual := site.Point{Quantity: site.ManualOverride}
	rh := site.Point{Quantity: site.Humidity, Unit: "%"}
	fraction := site.Point{Quantity: site.Humidity, Unit: "fraction", Conversion: site.Conversion{Factor: 100}}
	for _, c := range []struct {
		p    *site.Point
		in   string
		want float64
		r    reading.Reason
	}{
		{&degC, "21.5", 21.5, 0}, {&degC, "21.5 \u00b0C", 21.5, 0}, {&degC, "21.5\u00b0C", 21.5, 0}, {&degC, "21.5 C", 21.5, 0},
		{&degC, "21.5 \u00b0F", 0, reading.NotNumber}, {&degC, "warm", 0, reading.NotNumber}, {&degC, "21,5", 0, reading.NotNumber},
		{&degF, "68", 20, 0}, {&degF, "68 degF", 20, 0},
		{&rh, "45 %", 45, 0}, {&rh, "45%", 45, 0}, {&fraction, "0.45", 45, 0}, {&fraction, "45 %", 0, reading.NotNumber},
		{&degC, "", 0, reading.Missing}, {&degC, " ", 0, reading.Missing}, {&degC, "-999", 0, reading.Missing}, {&degC, "-9999.0", 0, reading.Missing},
		{&degC, "-999.0", 0, reading.Missing}, {&degC, "NaN", 0, reading.Missing}, {&degC, "#VALUE!", 0, reading.Missing}, {&degC, "#N/A", 0, reading.Missing},
		{&degC, "Bad", 0, reading.Missing}, {&degC, "---", 0, reading.Missing}, {&degC, "No Data", 0, reading.Missing}, {&degC, "null", 0, reading.Missing},
		{&degC, "n/v", 0, reading.Missing}, {&degC, "-55.5", 0, reading.Missing}, {&degC, "-55.50", 0, reading.Missing}, // the log's own markers
		{&power, "-999", 0, reading.Missing}, {&power, "-9999", 0, reading.Missing}, {&power, "-998", -998, 0}, // no floor there, so these are markers
		{&window, "Open", 1, 0}, {&window, "CLOSED", 0, 0}, {&window, "Ouvert", 1, 0}, {&window, "Ferm\u00e9", 0, 0}, {&window, "Ferme\u0301", 0, 0}, {&window, "Fermee", 0, 0},
		{&window, "Offen", 1, 0}, {&window, "Zu", 0, 0}, {&window, "geschlossen", 0, 0}, {&window, "Aperto", 1, 0}, {&window, "Abierto", 1, 0}, {&window, "Ge\u00f6ffnet", 1, 0},
		{&window, "1", 1, 0}, {&window, "0", 0, 0}, {&window, "1.0", 1, 0}, {&window, "TRUE", 1, 0}, {&window, "false", 0, 0},
		{&window, "Auto", 0, reading.UnknownWord}, {&window, "2", 0, reading.UnknownWord}, {&window, "-999", 0, reading.Missing}, {&window, "ajar", 0, reading.UnknownWord},
		{&inverted, "0", 1, 0}, {&inverted, "1", 0, 0}, {&inverted, "0.0", 1, 0}, {&inverted, "Closed", 0, 0},
		{&closedOpen, "closed", 1, 0}, {&closedOpen, "Open", 0, 0}, {&closedOpen, "Tilted", 0, reading.UnknownWord},
		{&own, "kipp", 1, 0}, {&own, "zu", 0, 0}, {&own, "2", 1, 0}, {&own, "2.0", 1, 0}, {&own, "auf", 1, 0},
		{&plant, "Off", 0, 0}, {&plant, "Marche", 1, 0}, {&plant, "Arr\u00eat", 0, 0}, {&plant, "Ein", 1, 0}, {&plant, "Cool", 4, 0}, {&plant, "Heating", 3, 0}, {&plant, "Fan only", 2, 0},
		{&plant, "L\u00fcften", 2, 0}, {&plant, "stufe 2", 4, 0}, {&plant, "3", 3, 0}, {&plant, "1", 1, 0}, {&plant, "2", 0, reading.UnknownWord}, {&plant, "Auto", 0, reading.UnknownWord},
		{&manual, "Auto", 0, 0}, {&manual, "Hand", 1, 0},
	} {
		d := NewDecoder(0, c.p, Style{Mark: '.'}, []string{"n/v", "-55.5"})
		for pass := 0; pass < 2; pass++ { // the second from memory
			v, r, _ := d.Decode([]byte(c.in))
			if r != c.r || math.Abs(v-c.want) > 1e-12 {
				t.Errorf("%s %q: got %v %v, want %v %v", c.p.Quantity, c.in, v, r, c.want, c.r)
			}
		}
	}
}

func TestUnknownWordsAreCounted(t *testing.T) {
	d := NewDecoder(0, &site.Point{Quantity: site.Window}, Style{Mark: '.'}, nil)
	for _, w := range []string{"ajar", "ajar", "tilt", "Open"} {
		d.Decode([]byte(w))
	}
	for i := 0; i < 10000; i++ {
		d.Decode([]byte("w" + strconv.Itoa(i)))
	}
	if d.Unknown["ajar"] != 2 || d.Unknown["tilt"] != 1 || d.Unknown["Open"] != 0 || len(d.Unknown) > unknownMax+1 || len(d.cache) > cacheMax {
		t.Errorf("%d words, ajar %d", len(d.Unknown), d.Unknown["ajar"])
	}
}

func TestWindows1252Words(t *testing.T) {
	d := NewDecoder(0, &site.Point{Quantity: site.Window}, Style{Mark: '.'}, nil)
	if v, r, _ := d.Decode([]byte("Ge\xf6ffnet")); v != 1 || r != reading.Accepted {
		t.Errorf("got %v %v", v, r)
	}
}

func FuzzDecode(f *testing.F) {
	for _, s := range []string{"21.5", "-999", "1.234,5", "\u221221,5 \u00b0C", "Open", "#N/A", "1e400", "9\xa0999", "\x96"} {
		f.Add(s)
	}
	var ds []*Decoder
	for _, q := range []site.Quantity{site.AirTemp, site.Window, site.PlantStatus} {
		for _, st := range []Style{{Mark: '.'}, {Mark: ',', Declared: true}, {Mark: ',', Latin: true}} {
			ds = append(ds, NewDecoder(0, &site.Point{Quantity: q, Unit: "degC"}, st, nil))
		}
	}
	f.Fuzz(func(t *testing.T, s string) {
		for _, d := range ds {
			v, r, _ := d.Decode([]byte(s))
			if r == reading.Accepted && (math.IsNaN(v) || math.IsInf(v, 0)) {
				t.Errorf("%q accepted as %v", s, v)
			}
			v2, r2, _ := d.Decode([]byte(s))
			if v2 != v || r2 != r {
				t.Errorf("%q: %v %v, then %v %v", s, v, r, v2, r2)
			}
		}
	})
}

func BenchmarkShort(b *testing.B) {
	c := []byte("21.37,")
	b.SetBytes(int64(len(c)))
	for i := 0; i < b.N; i++ {
		Short(c, '.')
	}
}
