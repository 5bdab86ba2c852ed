package weather

import (
	"compress/gzip"
	"math"
	"os"
	"strings"
	"testing"

	"sashlog/ingest/grid"
)

const head = `LOCATION,Somewhere,-,-,made by hand,000000,10.0,20.0,5.5,30.0
DESIGN CONDITIONS,0
TYPICAL/EXTREME PERIODS,0
GROUND TEMPERATURES,0
HOLIDAYS/DAYLIGHT SAVINGS,No,0,0,0
COMMENTS 1,
COMMENTS 2,
DATA PERIODS,1,1,Data,Sunday,1/1,12/31
`

func year(line func(month, day, hour int) string) string {
	var b strings.Builder
	b.WriteString(head)
	for m, n := range daysOf {
		for d := 1; d <= n; d++ {
			for h := 1; h <= 24; h++ {
				b.WriteString(line(m+1, d, h))
			}
		}
	}
	return b.String()
}

func plain(m, d, h int) string {
	return "2001," + itoa(m) + "," + itoa(d) + "," + itoa(h) + ",0,?,20.5,10.5,53,100000,0,0,300,400,0,0,0,0,0,0,270,2.6,9,9\n"
}

func itoa(i int) string { return string(rune('0'+i/10)) + string(rune('0'+i%10)) }

func TestReadEPW(t *testing.T) {
	missing := func(m, d, h int) string {
		if m == 1 && d == 1 && h == 24 {
			return "2001,1,1,24,0,?,99.9,99.9,999,999999,0,0,0,9999,0,0,0,0,0,0,999,999,99,99\n"
		}
		return plain(m, d, h)
	}
	y, err := ReadEPW(strings.NewReader(year(missing)), "x.epw")
	if err != nil {
		t.Fatal(err)
	}
	if y.Name != "Somewhere" || y.OffsetH != 5.5 || y.Source != "x.epw" {
		t.Errorf("head %q %v %q", y.Name, y.OffsetH, y.Source)
	}
	for _, c := range []struct {
		name string
		got  []float32
		want float32
	}{{"temp", y.TempC, 20.5}, {"dew", y.DewPointC, 10.5}, {"rh", y.RHPct, 53}, {"global", y.GlobalWm2, 400}, {"dir", y.WindDirDeg, 270}, {"wind", y.WindMS, 2.6}} {
		if len(c.got) != 8760 || c.got[22] != c.want || !math.IsNaN(float64(c.got[23])) || c.got[24] != c.want {
			t.Errorf("%s: %d values, %v", c.name, len(c.got), c.got[22:25])
		}
	}
}

func TestReadEPWErrors(t *testing.T) {
	good := year(plain)
	for _, c := range []struct{ name, text, want string }{
		{"empty", "", "0 hours"},
		{"other file", "time,value\n1,2\n", "x.epw:1: not an EPW file"},
		{"cut short", good[:len(good)/2], "x.epw"},
		{"one day short", good[:len(good)-24*len(plain(1, 1, 1))], "8736 hours, want 8760"},
		{"hour 0", strings.Replace(good, ",01,01,01,", ",01,01,00,", 1), "x.epw:9: month, day, hour"},
		{"twice", strings.Replace(good, ",01,01,02,", ",01,01,01,", 1), "x.epw:10: month 1, day 1, hour 1 comes twice"},
		{"no number", strings.Replace(good, "20.5", "warm", 1), `x.epw:9: "warm" in field 7`},
		{"long line", head + strings.Repeat("x", 1<<17), "longer than"},
		{"zone", strings.Replace(good, ",5.5,", ",99,", 1), "time zone"},
	} {
		if _, err := ReadEPW(strings.NewReader(c.text), "x.epw"); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %q", c.name, err, c.want)
		}
	}
}

// Chicago O'Hare TMY3 (Wilcox & Marion, NREL/TP-581-43156, 2008): the first
// hours as printed in the file, and the mean, hours above 25 degC and hours of
// 12 to 24 degC computed from it independently (regression values, not
// published ones). Source and licence stand beside the file.
func TestChicagoTypicalYear(t *testing.T) {
	y := chicago(t)
	if y.TempC[0] != -12.2 || y.DewPointC[1] != -15.6 || y.WindMS[0] != 2.6 || y.WindDirDeg[1] != 250 || y.OffsetH != -6 {
		t.Errorf("first hours %v %v %v %v %v", y.TempC[0], y.DewPointC[1], y.WindMS[0], y.WindDirDeg[1], y.OffsetH)
	}
	var sum float64
	warm, mild := 0, 0
	for _, v := range y.TempC {
		sum += float64(v)
		if v > 25 {
			warm++
		}
		if v >= 12 && v <= 24 {
			mild++
		}
	}
	if mean := sum / 8760; math.Abs(mean-9.99) > 0.005 || warm != 797 || mild != 3085 {
		t.Errorf("mean %.3f, %d h above 25, %d h of 12 to 24; want 9.99, 797, 3085", mean, warm, mild)
	}
}

func chicago(t *testing.T) *grid.TypicalYear {
	f, err := os.Open("testdata/Chicago.epw.gz")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	y, err := ReadEPW(z, "Chicago.epw")
	if err != nil {
		t.Fatal(err)
	}
	return y
}

func FuzzReadEPW(f *testing.F) {
	f.Add(head + plain(1, 1, 1))
	f.Add("LOCATION,,,,,,,,NaN\n")
	f.Add(year(plain))
	f.Fuzz(func(t *testing.T, text string) {
		y, err := ReadEPW(strings.NewReader(text), "f")
		if err != nil {
			return
		}
		for _, v := range y.TempC {
			if v < lowestTempC || v >= missingTemp {
				t.Fatalf("temperature %v", v)
			}
		}
	})
}
