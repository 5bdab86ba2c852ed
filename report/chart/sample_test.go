package chart

import (
	"math"
	"math/rand/v2"
	"time"

	"gonum.org/v1/plot/vg"
)

// The samples are invented and have the shape of real results: a year of a
// small building, with unknown weeks, long names and names meant to do harm.

func cap1(title string) Caption {
	return Caption{Title: title, Desc: "Invented sample for tests."}
}

func sampleRandom() *rand.Rand { return rand.New(rand.NewPCG(7, 11)) }

var harmfulNames = []string{
	`<script>alert("x")</script>`,
	"two\nlines and\ttabs",
	"\u202Eturned\u202C & \"quoted\"",
	"North-west corner meeting room with the very long name, third floor",
	"L1.02", "l1.02", "Büro Süd 3 – CO₂", "Зал 5",
}

func sampleCarpet(first time.Time, days int) CarpetData {
	r := sampleRandom()
	d := CarpetData{Caption: cap1("Outcome of each hour"), FirstDay: first}
	for i := range days {
		var row [24]Class
		at := first.AddDate(0, 0, i)
		warm := math.Sin(float64(at.YearDay()-100) / 365 * 2 * math.Pi)
		for h := range 24 {
			row[h] = Unoccupied
			if h < 8 || h >= 18 || at.Weekday() == time.Saturday || at.Weekday() == time.Sunday {
				continue
			}
			t := 11 + 9*warm + 5*math.Sin(float64(h-9)/24*2*math.Pi) + 2*r.NormFloat64()
			switch {
			case at.YearDay() > 210 && at.YearDay() < 224:
				row[h] = Unjudged
			case t < 12:
				row[h] = ClosedUnsuited
			case t > 25:
				row[h] = Class(map[bool]int{true: int(IllTimed), false: int(ClosedUnsuited)}[r.Float64() < 0.4])
			default:
				row[h] = []Class{AchievedOK, AchievedOK, AchievedOK, Missed, Missed, AchievedWarm, AchievedCool, AchievedStale, NotNeeded, AchievedUnassessed}[r.IntN(10)]
			}
		}
		d.Days = append(d.Days, row)
	}
	return d
}

func sampleMonths(n int) MonthlyStackData {
	r := sampleRandom()
	d := MonthlyStackData{Caption: cap1("Hours per month"), Classes: Outcomes(), YTitle: "occupied hours of the average occupant (h per month)"}
	for i := range n {
		m := MonthHours{Year: 2025 + (i+2)/12, Month: time.Month((i+2)%12 + 1), Partial: i == 0 && n > 1}
		for range d.Classes {
			m.Hours = append(m.Hours, math.Round(r.Float64()*320)/10)
		}
		d.Months = append(d.Months, m)
	}
	return d
}

func sampleWaterfall() WhereHoursWentData {
	return WhereHoursWentData{Caption: cap1("Where the hours went"), XTitle: "hours per year of the average occupant (h)", Steps: []HoursStep{
		{Label: "occupied", Class: Occupied, Hours: 2210, Total: true},
		{Label: "too cold outdoors", Class: ClosedUnsuited, Hours: 705},
		{Label: "too warm outdoors", Class: ClosedUnsuited, Hours: 171},
		{Label: "too humid, windy or wet outdoors", Class: ClosedUnsuited, Hours: 84.4},
		{Label: "cannot be assessed", Class: Unjudged, Hours: 120},
		{Label: "weather suitable", Class: Suited, Hours: 1129.6, Total: true, Note: "51 % of occupied"},
		{Label: "open mode not needed", Class: NotNeeded, Hours: 210},
		{Label: "could have been open: plant cooled", Class: Missed, Hours: 260},
		{Label: "could have been open: plant ventilated", Class: Missed, Hours: 101},
		{Label: "could have been open: shut while warm or stale", Class: Missed, Hours: 66.2},
		{Label: "ran open", Class: AchievedOK, Hours: 492.4, Total: true, Note: "53 % of those it could"},
		{Label: "too warm", Class: AchievedWarm, Hours: 40},
		{Label: "too cool", Class: AchievedCool, Hours: 3.2},
		{Label: "short of fresh air", Class: AchievedStale, Hours: 31},
		{Label: "not assessed", Class: AchievedUnassessed, Hours: 9},
		{Label: "ran open, comfortable and fresh", Class: AchievedOK, Hours: 409.2, Total: true, Note: "19 % of occupied"},
	}}
}

// sampleOutdoor has hours of a temperate year; the class follows the limits
// only loosely, as in life.
func sampleOutdoor(n int, h Humidity) OutdoorQuadrantsData {
	r := sampleRandom()
	d := OutdoorQuadrantsData{Caption: cap1("Outdoor air of the occupied hours"), Humidity: h,
		TempLimits: []Limit{{12.8, "12.8 °C"}, {25, "25 °C"}}}
	for range n {
		t := 13 + 8*r.NormFloat64()
		y := t - math.Abs(6*r.NormFloat64())
		if h == RelativePC {
			y = math.Min(100, math.Max(15, 65+18*r.NormFloat64()))
		}
		c := []Class{AchievedOK, AchievedOK, Missed, NotNeeded, AchievedWarm, AchievedStale, Unjudged}[r.IntN(7)]
		if t < 12.8 || t > 26 || (h == DewPointC && y > 17) {
			c = []Class{ClosedUnsuited, ClosedUnsuited, ClosedUnsuited, IllTimed}[r.IntN(4)]
		}
		d.Points = append(d.Points, OutdoorPoint{t, y, c})
	}
	if h == DewPointC {
		d.HumidityLimits = []Limit{{17, "dew point 17 °C"}}
		d.Hours = [][]float64{{903, 1180.4, 120}, {0, 41.2, 66}}
	} else {
		for t := 10.0; t <= 40; t++ {
			d.LimitCurve = append(d.LimitCurve, XY{t, 100 * math.Exp(17.62*17/(243.12+17)-17.62*t/(243.12+t))})
		}
		d.CurveLabel = "dew point 17 °C"
	}
	return d
}

func zoneName(i int) string {
	if i < len(harmfulNames) {
		return harmfulNames[i]
	}
	return "Zone " + string(rune('A'+i%26)) + "." + string(rune('0'+i/26))
}

func sampleExceedance(n int) ExceedanceData {
	r := sampleRandom()
	d := ExceedanceData{Caption: cap1("Exceedance per zone"), XTitle: "occupied hours outside EN 16798-1 category II (h per year)"}
	for i := range n {
		w, c := r.ExpFloat64()*80, r.ExpFloat64()*25
		z := ZoneExceedance{Zone: zoneName(i), TooWarm: Bounded{w, w * 0.9, w*1.1 + 10}, TooCool: Bounded{c, math.NaN(), math.NaN()}}
		if i%9 == 8 {
			z.TooWarm = Bounded{math.NaN(), 0, 100}
			z.TooCool = Bounded{math.NaN(), 0, 100}
		}
		d.Zones = append(d.Zones, z)
	}
	return d
}

func sampleLeague(n int) ZoneLeagueData {
	r := sampleRandom()
	d := ZoneLeagueData{Caption: cap1("Achieved share per zone"), Building: 0.53}
	for i := range n {
		v := r.Float64()
		z := ZoneShare{Zone: zoneName(i), Share: Bounded{v, v * 0.85, v + (1-v)*0.2}, Hours: math.Round(r.Float64() * 1500)}
		if i%11 == 10 {
			z.Share = Bounded{math.NaN(), math.NaN(), math.NaN()}
		}
		d.Zones = append(d.Zones, z)
	}
	return d
}

func sampleCO2(n int) CO2DurationData {
	r := sampleRandom()
	d := CO2DurationData{Caption: cap1("CO2 duration"), Limits: []Limit{{970, "category I"}, {1220, "category II"}, {1770, "category III"}}}
	for i := range n {
		z := CO2Zone{Zone: zoneName(i)}
		for k, s := range []Class{Open, Mech, Both, Shut} {
			c := CO2Curve{State: s}
			top := 800 + 300*float64(k) + 200*r.Float64()
			for x := 0.0; x <= 100; x += 0.25 {
				c.Points = append(c.Points, XY{x, 430 + (top-430)*math.Exp(-x/40)})
			}
			z.Curves = append(z.Curves, c)
		}
		if i == 4 {
			z.Curves = nil
		}
		d.Zones = append(d.Zones, z)
	}
	return d
}

func sampleStrip(days int) EpisodeStripData {
	r := sampleRandom()
	d := EpisodeStripData{Caption: cap1("A missed episode"), Start: time.Date(2025, 8, 12, 0, 0, 0, 0, time.UTC), Step: 5 * time.Minute, CO2LimitPPM: 1220}
	walk := 0.0
	for i := range days * 288 {
		h := float64(i%288) / 12
		walk = 0.98*walk + 0.05*r.NormFloat64()
		out := 19 + 6*math.Sin((h-9)/24*2*math.Pi) + walk
		in := 24 + 1.6*math.Sin((h-11)/24*2*math.Pi) + walk/2
		co2 := 430 + 600*math.Max(0, math.Sin((h-8)/10*math.Pi))
		w, p := WindowShut, PlantOff
		if h > 8 && h < 10.5 {
			w = WindowOpen
		}
		if h >= 10.5 && h < 17 {
			p = PlantCool
		} else if h > 6.5 && h < 8 {
			p = PlantVent
		}
		if h > 19 && h < 21 {
			in, co2, w = math.NaN(), math.NaN(), WindowUnknown
		}
		if h < 7 || h > 19 {
			co2 = 430 + 10*r.Float64()
		}
		d.IndoorC, d.OutdoorC, d.CO2PPM = append(d.IndoorC, in), append(d.OutdoorC, out), append(d.CO2PPM, co2)
		d.ComfortLowC, d.ComfortHighC = append(d.ComfortLowC, 21.6), append(d.ComfortHighC, 26.1)
		d.Window, d.Plant = append(d.Window, w), append(d.Plant, p)
	}
	for k := range days {
		d.Missed = append(d.Missed, Span{k*288 + 126, k*288 + 204})
	}
	return d
}

func sampleCurve() ExceedanceCurveData {
	d := ExceedanceCurveData{Caption: cap1("Time above a temperature"), Limits: []Limit{{26, "26 °C"}, {28, "28 °C"}}}
	for k, name := range []string{"third floor, south", "second floor", "ground floor"} {
		c := NamedCurve{Name: name}
		for t := 16.0; t <= 32; t += 0.1 {
			c.Points = append(c.Points, XY{t, 100 / (1 + math.Exp((t-24+float64(k))*1.1))})
		}
		d.Curves = append(d.Curves, c)
	}
	return d
}

func sampleChangeover() ChangeoverCurveData {
	d := ChangeoverCurveData{Caption: cap1("Changeover of an air handling unit"),
		Limits: []LimitBand{{23, 22.7, 23.4, "ends 23.0 °C", false}, {15, 14.6, 15.1, "begins 15.0 °C", true}, {22.5, 22.2, 22.9, "begins 22.5 °C", true}}}
	for t := 8.5; t < 30; t++ {
		c, o := 100/(1+math.Exp((23-t)*3)), 100/(1+math.Exp((15-t)*3))/(1+math.Exp((t-22.5)*3))
		d.Closed, d.Opened = append(d.Closed, XY{t, 4 + 0.96*c}), append(d.Opened, XY{t, 0.8 * o})
		if t < 25 {
			d.Closing = append(d.Closing, XY{t, math.Min(100, 6+0.9*c)})
		}
		d.Opening = append(d.Opening, XY{t, 0.75 * o})
	}
	return d
}

func sampleRose() SpeedRoseData {
	d := SpeedRoseData{Caption: cap1("Wind rose"), Bands: []string{"up to 2 m/s", "2 to 4 m/s", "4 to 6 m/s", "above 6 m/s"}, CalmShare: 7.3}
	for i := range 16 {
		a := 1 + math.Cos(float64(i-10)/16*2*math.Pi)
		d.Sectors = append(d.Sectors, []float64{1.2 + a*0.4, 1 + a, a * 0.8, a * a * 0.35})
	}
	return d
}

func sampleLine(n int) []vg.Point {
	var pts []vg.Point
	for i := range n {
		x := float64(i) / 4
		pts = append(pts, vg.Point{X: vg.Length(x), Y: vg.Length(30 * math.Sin(x/40))})
	}
	return pts
}
