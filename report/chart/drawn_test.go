package chart

import (
	"bytes"
	"encoding/base64"
	"image/color"
	"image/png"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"time"
)

// TestCarpetCells reads the picture back: every day and hour has the colour of
// its class, hour 0 at the bottom.
func TestCarpetCells(t *testing.T) {
	d := sampleCarpet(jan1(), 365)
	svg, err := Carpet(d, Options{ID: "x"})
	if err != nil {
		t.Fatal(err)
	}
	_, rest, _ := strings.Cut(string(svg), "base64,")
	raw, err := base64.StdEncoding.DecodeString(rest[:strings.IndexByte(rest, '"')])
	if err != nil {
		t.Fatal(err)
	}
	img, err := png.Decode(bytes.NewReader(raw))
	if err != nil {
		t.Fatal(err)
	}
	w, h := img.Bounds().Dx()/365, img.Bounds().Dy()/24
	seen := map[Class]int{}
	for day, row := range d.Days {
		for hour, c := range row {
			seen[c]++
			for x := range w {
				for y := range h {
					got := color.RGBAModel.Convert(img.At(day*w+x, (23-hour)*h+y)).(color.RGBA)
					if got != c.Look().Fill && (c != Unjudged || got != c.Look().Ink) {
						t.Fatalf("day %d hour %d: %v, want %q %v", day, hour, got, c.Label(), c.Look().Fill)
					}
				}
			}
		}
	}
	if len(seen) < 9 {
		t.Fatalf("the sample has only %d classes", len(seen))
	}
}

// TestMonthsUnderTheirMiddle: February of a year drawn from January stands
// between its borders, 31 and 59 days in.
func TestMonthsUnderTheirMiddle(t *testing.T) {
	labels, borders := dayTicks(jan1(), 365, 450)
	if len(labels) != 12 || len(borders) != 11 {
		t.Fatalf("%d labels, %d borders", len(labels), len(borders))
	}
	if labels[1].Label != "Feb" || labels[1].Value != 45 || borders[0] != 31 || borders[1] != 59 {
		t.Errorf("February %+v between %v and %v", labels[1], borders[0], borders[1])
	}
	for days := 1; days <= 800; days += 7 {
		labels, _ := dayTicks(time.Date(2024, 2, 20, 23, 0, 0, 0, time.FixedZone("", 5*3600+1800)), days, 450)
		for _, l := range labels {
			if l.Value <= 0 || l.Value >= float64(days) {
				t.Fatalf("%d days: label %+v outside", days, l)
			}
		}
	}
}

var height = regexp.MustCompile(`h[-.\d]+v(-?[.\d]+)`)

// TestStackHeights: bars are as high as their hours, on one scale.
func TestStackHeights(t *testing.T) {
	d := MonthlyStackData{Caption: cap1("t"), Classes: []Class{AchievedOK, Missed}, Months: []MonthHours{
		{Year: 2025, Month: 1, Hours: []float64{100, 50}}, {Year: 2025, Month: 2, Hours: []float64{25, 0}}}}
	svg, err := MonthlyStack(d, Options{ID: "x"})
	if err != nil {
		t.Fatal(err)
	}
	heights := func(c Class) (out []float64) {
		for _, e := range parse(t, svg).elements {
			// The first path of a colour is the legend's swatch.
			if e.name == "path" && e.attr["fill"] == c.Look().Hex() {
				out = nil
				for _, m := range height.FindAllStringSubmatch(e.attr["d"], -1) {
					v, _ := strconv.ParseFloat(m[1], 64)
					out = append(out, math.Abs(v))
				}
			}
		}
		return out
	}
	ok, missed := heights(AchievedOK), heights(Missed)
	if len(ok) != 2 || len(missed) != 1 {
		t.Fatalf("bars %v and %v", ok, missed)
	}
	if math.Abs(ok[0]/ok[1]-4) > 0.01 || math.Abs(ok[0]/missed[0]-2) > 0.01 {
		t.Errorf("heights %v and %v for 100, 25 and 50 h", ok, missed)
	}
}

// TestGapsStayGaps: a line is broken where values are not known.
func TestGapsStayGaps(t *testing.T) {
	moves := func(v []float64) int {
		svg, err := EpisodeStrip(EpisodeStripData{Caption: cap1("t"), Start: jan1(), Step: time.Hour, IndoorC: v}, Options{ID: "x"})
		if err != nil {
			t.Fatal(err)
		}
		n := 0
		for _, e := range parse(t, svg).elements {
			if e.name == "path" && e.attr["stroke"] == hex(inkIndoor) && e.attr["stroke-width"] == short(float64(lineData)) {
				n += strings.Count(strings.ToLower(e.attr["d"]), "m")
			}
		}
		return n
	}
	nan := math.NaN()
	if got := moves([]float64{20, 21, 22, 21, 20}); got != 1 {
		t.Errorf("whole: %d pieces", got)
	}
	if got := moves([]float64{20, 21, nan, 21, 20, nan, nan, 23}); got != 3 {
		t.Errorf("two gaps: %d pieces", got)
	}
}

// TestThinKeepsShape: the thinned line stays within its tolerance of every point.
func TestThinKeepsShape(t *testing.T) {
	var pts = sampleLine(2000)
	out := thin(pts, 0.12)
	if len(out) >= len(pts)/2 || out[0] != pts[0] || out[len(out)-1] != pts[len(pts)-1] {
		t.Fatalf("%d of %d points kept", len(out), len(pts))
	}
	k := 0
	for _, p := range pts {
		for k+2 < len(out) && p.X > out[k+1].X {
			k++
		}
		if d := offLine(p, out[k], out[k+1]); d > 0.12+1e-9 {
			t.Fatalf("a point is off by %v", d)
		}
	}
}

func TestTicks(t *testing.T) {
	for _, tc := range []struct {
		lo, hi float64
		want   string
	}{
		{0, 2500, "0 500 1,000 1,500 2,000 2,500"},
		{-12, 12, "−10 −5 0 5 10"},
		{0, 1, "0.0 0.2 0.4 0.6 0.8 1.0"},
		{5, 5, "5"},
	} {
		var got []string
		for _, tick := range (niceTicks{want: 6}).Ticks(tc.lo, tc.hi) {
			got = append(got, tick.Label)
		}
		if s := strings.Join(got, " "); s != tc.want {
			t.Errorf("%v to %v: %q, want %q", tc.lo, tc.hi, s, tc.want)
		}
	}
}
