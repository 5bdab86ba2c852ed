package chart

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"
)

func TestNothingToShow(t *testing.T) {
	nan := math.NaN()
	o := Options{ID: "x"}
	c := cap1("t")
	none := Bounded{nan, nan, nan}
	cases := map[string]func() (SVG, error){
		"carpet without days":   func() (SVG, error) { return Carpet(CarpetData{Caption: c}, o) },
		"carpet of empty cells": func() (SVG, error) { return Carpet(CarpetData{Caption: c, Days: make([][24]Class, 3)}, o) },
		"stack without months":  func() (SVG, error) { return MonthlyStack(MonthlyStackData{Caption: c, Classes: Outcomes()}, o) },
		"stack of unknown": func() (SVG, error) {
			return MonthlyStack(MonthlyStackData{Caption: c, Classes: []Class{Open}, Months: []MonthHours{{Year: 2025, Month: 1, Hours: []float64{nan}}}}, o)
		},
		"waterfall without steps": func() (SVG, error) { return WhereHoursWent(WhereHoursWentData{Caption: c}, o) },
		"waterfall of unknown": func() (SVG, error) {
			return WhereHoursWent(WhereHoursWentData{Caption: c, Steps: []HoursStep{{Hours: nan, Total: true}}}, o)
		},
		"outdoor without points": func() (SVG, error) { return OutdoorQuadrants(OutdoorQuadrantsData{Caption: c}, o) },
		"outdoor of unknown": func() (SVG, error) {
			return OutdoorQuadrants(OutdoorQuadrantsData{Caption: c, Points: []OutdoorPoint{{nan, 3, Open}}}, o)
		},
		"exceedance without zones": func() (SVG, error) { return Exceedance(ExceedanceData{Caption: c}, o) },
		"exceedance of unknown": func() (SVG, error) {
			return Exceedance(ExceedanceData{Caption: c, Zones: []ZoneExceedance{{"a", none, none}}}, o)
		},
		"league of unknown": func() (SVG, error) {
			return ZoneLeague(ZoneLeagueData{Caption: c, Zones: []ZoneShare{{"a", none, 3}}}, o)
		},
		"CO2 without zones": func() (SVG, error) { return CO2Duration(CO2DurationData{Caption: c}, o) },
		"CO2 of unknown": func() (SVG, error) {
			return CO2Duration(CO2DurationData{Caption: c, Zones: []CO2Zone{{"a", []CO2Curve{{Open, []XY{{nan, nan}}}}}}}, o)
		},
		"strip without steps": func() (SVG, error) { return EpisodeStrip(EpisodeStripData{Caption: c, Step: time.Minute}, o) },
		"strip of unknown": func() (SVG, error) {
			return EpisodeStrip(EpisodeStripData{Caption: c, Step: time.Minute, IndoorC: []float64{nan}, Window: []WindowMode{WindowUnknown}}, o)
		},
		"exceedance curve of unknown": func() (SVG, error) {
			return ExceedanceCurve(ExceedanceCurveData{Caption: c, Curves: []NamedCurve{{"a", None, []XY{{nan, 1}}}}}, o)
		},
		"rose without sectors": func() (SVG, error) { return SpeedRose(SpeedRoseData{Caption: c}, o) },
		"ways of unknown": func() (SVG, error) {
			return HoursByWay(HoursByWayData{Caption: c, Ways: []WayHours{{"a", none, nan}}}, o)
		},
		"added of nothing": func() (SVG, error) {
			return AddedHours(AddedHoursData{Caption: c, Steps: []string{"a"}, Zones: []ZoneAdded{{"z", []float64{0}, ""}}}, o)
		},
		"rates of unknown": func() (SVG, error) {
			return GroupRates(GroupRatesData{Caption: c, Groups: []GroupRate{{"a", none, 2}}, Usual: 1}, o)
		},
		"roses of calm": func() (SVG, error) {
			return WindRoses(WindRosesData{Caption: c, Bands: []string{"a"}, Roses: []NamedRose{{"a", "", make4(0), 100}}}, o)
		},
		"fields of nothing": func() (SVG, error) {
			return ComfortFields(ComfortFieldsData{Caption: c, Columns: []string{"a"}, Rows: []string{"b"}, Hours: [][]FieldHours{{{}}}}, o)
		},
		"rose of calm": func() (SVG, error) {
			return SpeedRose(SpeedRoseData{Caption: c, Bands: []string{"a"}, Sectors: make4(0)}, o)
		},
	}
	for name, draw := range cases {
		if svg, err := draw(); !errors.Is(err, ErrNoData) || svg != "" {
			t.Errorf("%s: svg %.40q, error %v", name, svg, err)
		}
	}
}

func make4(v float64) [][]float64 { return [][]float64{{v}, {v}, {v}, {v}} }

func TestRefusals(t *testing.T) {
	o := Options{ID: "x"}
	c := cap1("t")
	cases := map[string]struct {
		draw func() (SVG, error)
		want string
	}{
		"id":        {func() (SVG, error) { return Carpet(sampleCarpet(jan1(), 2), Options{ID: `a" onload="x`}) }, "chart: carpet: id "},
		"width":     {func() (SVG, error) { return Carpet(sampleCarpet(jan1(), 2), Options{ID: "x", WidthMM: math.NaN()}) }, "width NaN mm"},
		"title":     {func() (SVG, error) { return Carpet(CarpetData{}, o) }, "title is empty"},
		"class":     {func() (SVG, error) { return Carpet(CarpetData{Caption: c, Days: [][24]Class{{200}}}, o) }, "class 200 is not known"},
		"many days": {func() (SVG, error) { return Carpet(CarpetData{Caption: c, Days: make([][24]Class, 5000)}, o) }, "5000 days: at most 1500"},
		"parallel": {func() (SVG, error) {
			return MonthlyStack(MonthlyStackData{Caption: c, Classes: Outcomes(), Months: []MonthHours{{Month: 1, Hours: []float64{1}}}}, o)
		}, "1 values for 11 classes"},
		"negative": {func() (SVG, error) {
			return MonthlyStack(MonthlyStackData{Caption: c, Classes: []Class{Open}, Months: []MonthHours{{Month: 1, Hours: []float64{-1}}}}, o)
		}, "must be 0 to 1e9"},
		"sum": {func() (SVG, error) {
			return WhereHoursWent(WhereHoursWentData{Caption: c, Steps: []HoursStep{{"all", Open, 100, true, ""}, {"lost", Missed, 30, false, ""}, {"left", Open, 60, true, ""}}}, o)
		}, `total "left" is 60 h but 70 h remain`},
		"overdrawn": {func() (SVG, error) {
			return WhereHoursWent(WhereHoursWentData{Caption: c, Steps: []HoursStep{{"all", Open, 100, true, ""}, {"lost", Missed, 130, false, ""}}}, o)
		}, "more than remained"},
		"share": {func() (SVG, error) {
			return ZoneLeague(ZoneLeagueData{Caption: c, Zones: []ZoneShare{{"a", Bounded{53, 40, 60}, 1}}}, o)
		}, "must be 0 to 1"},
		"lengths": {func() (SVG, error) {
			return EpisodeStrip(EpisodeStripData{Caption: c, Step: time.Minute, IndoorC: make([]float64, 3), OutdoorC: make([]float64, 4)}, o)
		}, "indoor has 3 steps, others have 4"},
		"step":   {func() (SVG, error) { return EpisodeStrip(EpisodeStripData{Caption: c, IndoorC: make([]float64, 3)}, o) }, "step 0s"},
		"panels": {func() (SVG, error) { return CO2Duration(sampleCO2(13), o) }, "13 zones: at most 12"},
		"sectors": {func() (SVG, error) {
			return SpeedRose(SpeedRoseData{Caption: c, Bands: []string{"a"}, Sectors: [][]float64{{1}}}, o)
		}, "1 sectors"},
		"ways": {func() (SVG, error) {
			return HoursByWay(HoursByWayData{Caption: c, Ways: []WayHours{{"a", Bounded{-1, 0, 0}, 1}}}, o)
		}, "must be 0 to 1e9"},
		"steps": {func() (SVG, error) {
			return AddedHours(AddedHoursData{Caption: c, Steps: []string{"a"}, Zones: []ZoneAdded{{"z", nil, ""}}}, o)
		}, "0 values for 1 steps"},
		"rates": {func() (SVG, error) {
			return GroupRates(GroupRatesData{Caption: c, Groups: []GroupRate{{"a", Bounded{1, -2, 3}, 2}}}, o)
		}, "must be 0 to 1e9"},
		"roses": {func() (SVG, error) {
			return WindRoses(WindRosesData{Caption: c, Roses: make([]NamedRose, 4)}, o)
		}, "at most 3"},
		"petals": {func() (SVG, error) {
			return WindRoses(WindRosesData{Caption: c, Bands: []string{"a"}, Roses: []NamedRose{{"a", "", make4(120), 0}}}, o)
		}, "must be 0 to 100"},
		"fields": {func() (SVG, error) {
			return ComfortFields(ComfortFieldsData{Caption: c, Columns: []string{"a"}, Rows: []string{"b"}, Hours: [][]FieldHours{{}}}, o)
		}, "0 fields for 1 columns"},
		"hours rows": {func() (SVG, error) {
			return OutdoorQuadrants(OutdoorQuadrantsData{Caption: c, Points: []OutdoorPoint{{1, 1, Open}}, Hours: make4(1)}, o)
		}, "hours have 4 rows, limits make 1"},
	}
	for name, tc := range cases {
		svg, err := tc.draw()
		if err == nil || !strings.Contains(err.Error(), tc.want) || svg != "" {
			t.Errorf("%s: error %v, want one with %q", name, err, tc.want)
		}
	}
}

// TestHarmlessText: nothing a user can name reaches the document as markup,
// line breaks or marks that turn the writing direction.
func TestHarmlessText(t *testing.T) {
	bad := "</desc></svg><script>alert(1)</script>\u202E\r\n\x00\xff\"'&"
	svg, err := Exceedance(ExceedanceData{Caption: Caption{bad, bad}, XTitle: bad, Zones: []ZoneExceedance{{bad, Bounded{5, 1, 9}, Bounded{}}}}, Options{ID: "x"})
	if err != nil {
		t.Fatal(err)
	}
	p := parse(t, svg)
	found := false
	for _, e := range p.elements {
		if e.name == "script" {
			t.Fatal("a script element came through")
		}
		found = found || e.name == "desc" && strings.Contains(e.text, "<script>alert(1)</script>")
	}
	if !found {
		t.Error("the description lost its text")
	}
	if strings.ContainsAny(string(svg), "\u202E\r\x00") {
		t.Error("a control character came through")
	}
}

func TestShortenedNameKeepsWhole(t *testing.T) {
	name := strings.Repeat("north-west corner ", 10)
	svg, err := ZoneLeague(ZoneLeagueData{Caption: cap1("t"), Building: math.NaN(), Zones: []ZoneShare{{name, Bounded{0.5, 0.4, 0.6}, math.NaN()}}}, Options{ID: "x"})
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(svg), "<title>"+name+"</title>north-west") || !strings.Contains(string(svg), "…</text>") {
		t.Error("a name that does not fit must be shortened and carry the whole name as its title")
	}
}

// anyFloat draws ordinary values, and those that break careless arithmetic.
func anyFloat() *rapid.Generator[float64] {
	return rapid.OneOf(rapid.Float64Range(-50, 3000), rapid.Just(0.0),
		rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 1e300, -1e300, 1e-300, math.MaxFloat64}))
}

// TestAnyDataDrawsOrRefuses: whatever the data, a figure is well formed and
// free of numbers that are none, or there is an error; it never panics.
func TestAnyDataDrawsOrRefuses(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		f := func() float64 { return anyFloat().Draw(r, "v") }
		n := rapid.IntRange(0, 9).Draw(r, "n")
		bounded := func() Bounded { return Bounded{f(), f(), f()} }
		class := func() Class { return Class(rapid.IntRange(0, int(classCount)).Draw(r, "class")) }
		text := func() string { return rapid.String().Draw(r, "text") }
		xy := func() (pts []XY) {
			for range n {
				pts = append(pts, XY{f(), f()})
			}
			return pts
		}
		many := func() (v []float64) {
			for range n {
				v = append(v, f())
			}
			return v
		}
		o := Options{ID: "x", WidthMM: rapid.Float64Range(60, 200).Draw(r, "width")}
		c := Caption{"t" + text(), text()}
		var ex ExceedanceData
		var lg ZoneLeagueData
		var ou OutdoorQuadrantsData
		var wf WhereHoursWentData
		ex.Caption, lg.Caption, ou.Caption, wf.Caption = c, c, c, c
		ex.XTitle, lg.Building = text(), f()
		for range n {
			ex.Zones = append(ex.Zones, ZoneExceedance{text(), bounded(), bounded()})
			lg.Zones = append(lg.Zones, ZoneShare{text(), bounded(), f()})
			ou.Points = append(ou.Points, OutdoorPoint{f(), f(), class()})
			wf.Steps = append(wf.Steps, HoursStep{text(), class(), f(), rapid.Bool().Draw(r, "total"), text()})
		}
		ou.LimitCurve, ou.CurveLabel = xy(), text()
		ou.TempLimits = []Limit{{f(), text()}}
		st := EpisodeStripData{Caption: c, Start: jan1(), Step: 5 * time.Minute, IndoorC: many(), OutdoorC: many(), ComfortHighC: many(), CO2PPM: many(), CO2LimitPPM: f(),
			Missed: []Span{{rapid.IntRange(-3, 9).Draw(r, "from"), rapid.IntRange(-3, 99).Draw(r, "to")}}}
		ms := MonthlyStackData{Caption: c, YTitle: text(), Classes: make([]Class, n), Months: []MonthHours{{2025, 3, many(), true}, {2025, 4, many(), false}}}
		co := CO2DurationData{Caption: c, Zones: []CO2Zone{{text(), []CO2Curve{{class(), xy()}, {class(), xy()}}}}, Limits: []Limit{{f(), text()}}}
		cu := ExceedanceCurveData{Caption: c, Curves: []NamedCurve{{text(), class(), xy()}}, Limits: []Limit{{f(), text()}}}
		ro := SpeedRoseData{Caption: c, Bands: []string{text()}, Sectors: [][]float64{{f()}, {f()}, {f()}, {f()}}, CalmShare: f()}
		ch := ChangeoverCurveData{Caption: c, Closing: xy(), Opening: xy(), Closed: xy(), Opened: xy(), Limits: []LimitBand{{f(), f(), f(), text(), true}}}
		for i, draw := range []func() (SVG, error){
			func() (SVG, error) { return ChangeoverCurve(ch, o) },
			func() (SVG, error) { return Exceedance(ex, o) },
			func() (SVG, error) { return ZoneLeague(lg, o) },
			func() (SVG, error) { return OutdoorQuadrants(ou, o) },
			func() (SVG, error) { return WhereHoursWent(wf, o) },
			func() (SVG, error) { return EpisodeStrip(st, o) },
			func() (SVG, error) { return MonthlyStack(ms, o) },
			func() (SVG, error) { return CO2Duration(co, o) },
			func() (SVG, error) { return ExceedanceCurve(cu, o) },
			func() (SVG, error) { return SpeedRose(ro, o) },
		} {
			svg, err := draw()
			if (err == nil) == (svg == "") {
				r.Fatalf("figure %d: svg of %d bytes with error %v", i, len(svg), err)
			}
			if err == nil {
				checkDrawn(t, r, i, svg)
			}
		}
	})
}

func checkDrawn(t *testing.T, r *rapid.T, i int, svg SVG) {
	for _, e := range parse(t, svg).elements {
		for k, v := range e.attr {
			if k != "href" && (strings.Contains(v, "NaN") || strings.Contains(v, "Inf") || len(v) > 200_000) {
				r.Fatalf("figure %d: %s %s=%.60q", i, e.name, k, v)
			}
		}
	}
}
