package climate

import (
	"math"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// invented is an hourly year of invented weather: a yearly and a daily wave.
func invented(hour int, offsetK float64) (tempC, dewC float64) {
	day := float64(hour) / 24
	t := 13 - 9*math.Cos(2*math.Pi*(day-20)/365) - 5*math.Cos(2*math.Pi*(day-0.125)) + offsetK
	if hour/24%5 == 0 { // every fifth day is damp
		return t, math.Min(t-3, 19)
	}
	return t, math.Min(t-3, 14)
}

// year is a site with one zone of 3 m height, occupied 08:00 to 18:00 every
// day, shut and off, with 30 days of weather before the period; measured
// weather is the typical year moved by offsetK.
func year(offsetK float64) Input {
	const lead = 30
	loc := time.FixedZone("standard", 3600)
	start := time.Date(2023, 1, 1, 0, 0, 0, 0, loc).Unix() - lead*86400
	n := (lead + 365) * 24
	g := &grid.Grid{StartUTC: start, StepS: 3600, N: n, PeriodFrom: lead * 24, PeriodTo: n, Loc: loc}
	typical := &grid.TypicalYear{Name: "Invented", OffsetH: 1}
	for h := range hoursOfYear {
		t, d := invented(h, 0)
		typical.TempC, typical.DewPointC = append(typical.TempC, float32(t)), append(typical.DewPointC, float32(d))
	}
	g.Typical = typical
	c, err := criteria.Preset("")
	if err != nil {
		panic(err)
	}
	s := &site.Site{Zones: []site.Zone{{ID: "A", HeightM: 3, FanSpeedMS: math.NaN(), Openings: site.Openings{Outdoors: true}}}}
	var days [7]bool
	for d := range days {
		days[d] = true
	}
	s.Occupancy.Times = []site.Times{{Days: days, FromMin: 480, ToMin: 1080}}
	cal := calendar.Of(g)
	nan := float32(math.NaN())
	out := &outdoor.Outdoor{Measured: true, HumidityLogged: true, DayOf: cal.DayOf}
	run := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n), Plant: make([]uint8, n), OpenShare: make([]float32, n), PeopleCanOpen: true}
	room := indoor.Zone{OperativeC: make([]float32, n), RHPct: make([]float32, n)}
	for i := range n {
		h := (i - lead*24 + hoursOfYear) % hoursOfYear
		t, d := invented(h, offsetK)
		out.TempC, out.DewPointC = append(out.TempC, float32(t)), append(out.DewPointC, float32(d))
		run.State[i] = running.Shut
		if hour := i % 24; hour >= 8 && hour < 18 {
			run.Occupied[i] = running.Occupied
		}
		room.OperativeC[i], room.RHPct[i] = 24, nan
	}
	out.Days = typicalDaysOf(c, out, cal)
	in := Input{Site: s, Criteria: c, Grid: g, Calendar: cal, Outdoor: out, Indoor: []indoor.Zone{room},
		Running: &running.Result{Zones: []running.Zone{run}, Weights: []float64{1}}}
	in.Exceedance = exceedance.Limit(s, c, g, out, in.Running)
	in.Potential = potential.Judge(s, c, g, cal, out, in.Running, in.Exceedance)
	return in
}

// typicalDaysOf gives the days of a record of 395 days the means that the same
// weather has as a typical year.
func typicalDaysOf(c criteria.Settings, out *outdoor.Outdoor, cal *calendar.Calendar) []outdoor.Day {
	days, _ := typicalDays(c, out.TempC[30*24:], localHours(&grid.Grid{StartUTC: time.Date(2023, 1, 1, 0, 0, 0, 0, time.UTC).Unix(), StepS: 3600, N: hoursOfYear, Loc: time.UTC}, 2023), 2023)
	list := make([]outdoor.Day, len(cal.Days))
	for d := range list {
		list[d] = days[(d-30+365)%365]
		list[d].Date, list[d].FromStep, list[d].ToStep = cal.Days[d].Date, cal.Days[d].FromStep, cal.Days[d].ToStep
	}
	return list
}

func method0(t *testing.T, o *Offer, name string) Method {
	t.Helper()
	for _, m := range o.Methods {
		if m.Name == name {
			return m
		}
	}
	t.Fatalf("no method %s", name)
	return Method{}
}

// A year that is the typical one is normal and offers the same by every way;
// shifted by 3 K it is not.
func TestNormalYear(t *testing.T) {
	r := Offered(year(0))
	for _, m := range r.Typical.Methods {
		if m.Name == "headline" {
			continue // with the shortest run on one side only
		}
		got := method0(t, r.Measured, m.Name)
		near(t, m.Name, got.SuitedH, m.SuitedH, 1e-6)
		near(t, m.Name+" outside", got.OutsideH, m.OutsideH, 1e-6)
	}
	near(t, "nights", r.Measured.Night.CoolingPotentialKh, r.Typical.Night.CoolingPotentialKh, 0.5) // first night apart
	if !r.Year.Known || !r.Year.Normal || r.Year.Verdict != AsUsual || len(r.Year.Months) != 12 {
		t.Errorf("%+v", r.Year)
	}
	near(t, "same hours", r.Year.MeasuredSuitedH, r.Year.TypicalSuitedH, 0)
	warm := Offered(year(3)).Year
	if warm.Normal || warm.Verdict != Warmer {
		t.Errorf("3 K warmer: %+v", warm)
	}
	near(t, "warmer by", warm.MeasuredC-warm.TypicalC, 3, 1e-4)
	for _, m := range warm.Months {
		if m.Verdict != Warmer {
			t.Errorf("month %d: %s", m.Month, m.Verdict)
		}
	}
	if cool := Offered(year(-1.2)).Year; cool.Verdict != Cooler || cool.Months[0].Verdict != AsUsual {
		t.Errorf("1.2 K cooler: the year is cooler, its months as usual: %s, %s", cool.Verdict, cool.Months[0].Verdict)
	}
}

// Hours counted by hand over the same weather: heat balance and plain band.
func TestOfferAgainstPlainCounting(t *testing.T) {
	in := year(0)
	r := Offered(in)
	plain, balance := 0.0, 0.0
	point := r.Balance.BalancePointC()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if h := i % 24; h < 8 || h >= 18 {
			continue
		}
		temp, dew := float64(in.Outdoor.TempC[i]), float64(in.Outdoor.DewPointC[i])
		if temp >= 16 && temp <= 26 && dew <= 17 {
			plain++
		}
		if temp >= point && temp < 26 && dew <= 17 && (30/(26-temp)-0.8)/(1.2*1006*3/3600) <= 10 {
			balance++
		}
	}
	near(t, "plain band", method0(t, r.Measured, "plain band").SuitedH, plain, 1e-6)
	near(t, "heat balance", method0(t, r.Measured, "heat balance").SuitedH, balance, 1e-6)
	needs := 0.0
	for _, h := range r.Measured.NeedH {
		needs += h
	}
	near(t, "needs make up the occupied hours", needs, r.Measured.OccupiedH, 1e-6)
	near(t, "occupied", r.Measured.OccupiedH, 3650, 1e-6)
	night := r.Measured.Night
	if night.Nights != 365 || night.UnknownNights != 0 || night.ShortDays == 0 || night.CoveredDays > night.ShortDays {
		t.Errorf("%+v", night)
	}
	near(t, "credit", method0(t, r.Measured, "heat balance and night cooling").SuitedH-balance, night.CreditedH, 1e-6)
}

// The ways agree with themselves wholly, and with others alike in both orders;
// what one suits alone and the agreement make up the common hours.
func TestAgreement(t *testing.T) {
	r := Offered(year(1))
	if len(r.Agreement) != len(r.Measured.Methods) {
		t.Fatal(len(r.Agreement))
	}
	for j := range r.Agreement {
		for k := range r.Agreement {
			p, q := r.Agreement[j][k], r.Agreement[k][j]
			near(t, "both orders", p.AgreeShare, q.AgreeShare, 1e-12)
			near(t, "sum", p.AgreeShare*p.KnownH+p.OnlyFirstH+p.OnlySecondH, p.KnownH, 1e-6)
			if j == k && p.AgreeShare != 1 {
				t.Errorf("%s does not agree with itself", r.Measured.Methods[j].Name)
			}
		}
	}
	// Two hand-made ways: same on 6 of 8 hours.
	a := newAgreement(2)
	for i := range 8 {
		first, second := no, no
		if i < 4 {
			first = yes
		}
		if i >= 1 && i < 5 {
			second = yes
		}
		a.add(a.bits(0, first)|a.bits(1, second), 1)
	}
	a.add(a.bits(0, yes)|a.bits(1, unknown), 1)
	p := a.pairs(1)[0][1]
	near(t, "share", p.AgreeShare, 0.75, 1e-12)
	near(t, "known", p.KnownH, 8, 0)
	near(t, "first alone", p.OnlyFirstH, 1, 0)
}

// A wider setting never costs hours, a narrower never adds any, and each
// setting is moved by itself.
func TestSensitivity(t *testing.T) {
	in := year(4)
	base, _ := in.suited(in.Criteria, false)
	near(t, "headline", method0(t, Offered(in).Measured, "headline").SuitedH, base, 1e-6)
	seen := map[string]float64{}
	for _, m := range sensitivity(&in) {
		seen[m.Key+" "+m.To] = m.ChangeH
		near(t, m.Key, m.SuitedH-base, m.ChangeH, 1e-9)
	}
	for key, sign := range map[string]float64{"outdoor_low_c 10.8 °C": 1, "outdoor_low_c 14.8 °C": -1, "rise_k 0 K": 1, "rise_k 2 K": -1,
		"dew_point_max_c 16 °C": -1, "dew_point_max_c no limit": 1, "category I": -1, "category III": 1} {
		v, ok := seen[key]
		if !ok || v*sign <= 0 {
			t.Errorf("%s: %v (%v)", key, v, ok)
		}
	}
	if _, ok := seen["wind_max_m_s 8 m/s"]; ok {
		t.Error("wind is not logged and cannot move the answer")
	}
	near(t, "category and rise move the limit alike", seen["category I"], seen["rise_k 2 K"], 1e-9)
}

// EN 16798-1 and ASHRAE 55 Table 5-13: 1.2, 1.8, 2.2 K at 0.6, 0.9, 1.2 m/s,
// nothing at 0.3 m/s. Rooms held just above the limit of a day are within it
// from the step that covers the excess.
func TestAirSpeed(t *testing.T) {
	in := year(4)
	limits := &in.Exceedance.Zones[0].Limits
	room := in.Indoor[0].OperativeC
	excess := [4]float32{1.0, 1.7, 2.1, 2.3}
	warm, by := 0.0, [4]float64{}
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		limits.Free[i] = limits.Model[i] == exceedance.ENAdaptive
		if !limits.Free[i] || i%24 < 8 || i%24 >= 18 {
			room[i] = 20
			continue
		}
		k := i % 4
		room[i] = limits.HighC[i] + excess[k]
		if limits.HighC[i] > 25 {
			by[k]++
		}
		warm++
	}
	a := airSpeed(&in)
	z := a.Zones[0]
	near(t, "warm", z.WarmH, warm, 1e-6)
	near(t, "0.3 m/s", z.RelievedIncrementH[0], 0, 0)
	near(t, "0.6 m/s", z.RelievedIncrementH[1], by[0], 1e-6)
	near(t, "0.9 m/s", z.RelievedIncrementH[2], by[0]+by[1], 1e-6)
	near(t, "1.2 m/s", z.RelievedIncrementH[3], by[0]+by[1]+by[2], 1e-6)
	for k := range SpeedsMS {
		if k > 0 && (z.AddedIncrementH[k] < z.AddedIncrementH[k-1] || z.AddedEffectH[k] < z.AddedEffectH[k-1]) {
			t.Errorf("faster air takes hours away: %+v", z)
		}
	}
	if z.AddedIncrementH[3] <= 0 || z.AddedEffectH[0] <= 0 || z.AddedIncrementH[0] != 0 {
		t.Errorf("%+v", z)
	}
	near(t, "one zone is the building", a.Building.AddedEffectH[2], z.AddedEffectH[2], 1e-9)
	in.Indoor[0].OperativeC = nil
	if z := airSpeed(&in).Zones[0]; !math.IsNaN(z.WarmH) || !math.IsNaN(z.RelievedSETH[0]) || z.SuitedH == 0 {
		t.Errorf("without a temperature indoors nothing is said about rooms: %+v", z)
	}
}

func TestFields(t *testing.T) {
	f := newFields([2]float64{12.8, 26}, "dew point (°C)", 17)
	nan := float32(math.NaN())
	for _, x := range []struct {
		temp, dew float32
		row, col  int
	}{{12.79, 5, 0, 0}, {12.8, 17, 0, 1}, {26, 17.01, 1, 1}, {26.01, 20, 1, 2}, {20, nan, 2, 1}} {
		f.add(x.temp, x.dew, Comfortable, 1)
		if f.HoursH[x.row][x.col][Comfortable] == 0 {
			t.Errorf("%+v: %v", x, f.HoursH)
		}
	}
	f.add(nan, 5, TooWarm, 2)
	near(t, "without temperature", f.UnknownH, 2, 0)
	r := Offered(year(0))
	for _, f := range []Fields{r.Outdoors, r.Indoors} {
		sum := f.UnknownH
		for _, row := range f.HoursH {
			for _, cell := range row {
				for _, h := range cell {
					sum += h
				}
			}
		}
		near(t, "fields make up the occupied hours", sum, 3650, 1e-6)
	}
}

// Unknown weather stays unknown, and none at all leaves nothing but the
// typical year.
func TestUnknownWeather(t *testing.T) {
	in := year(0)
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodFrom+31*24; i++ {
		in.Outdoor.TempC[i] = float32(math.NaN())
	}
	r := Offered(in)
	if got := method0(t, r.Measured, "plain band").UnknownH; got != 310 {
		t.Errorf("%g h unknown, want 310", got)
	}
	if m := r.Year.Months[0]; m.Verdict != NotKnown || m.KnownH != 0 || !math.IsNaN(m.MeasuredC) {
		t.Errorf("%+v", m)
	}
	if r.Measured.Night.UnknownNights != 32 { // the night into February ends in January's hours
		t.Errorf("%d nights unknown", r.Measured.Night.UnknownNights)
	}
	in.Outdoor = &outdoor.Outdoor{DayOf: in.Outdoor.DayOf, Days: in.Outdoor.Days}
	r = Offered(in)
	if r.Measured != nil || r.Year != nil || r.AirSpeed != nil || r.Sensitivity != nil || r.Typical == nil {
		t.Errorf("%+v", r)
	}
	in.Grid.Typical = nil
	if Offered(in).Typical != nil {
		t.Error("no typical year was given")
	}
}

// The hour of a typical year follows its standard time, and a leap day counts
// as the day before.
func TestHourOfYear(t *testing.T) {
	for _, c := range []struct {
		at     string
		offset float64
		want   int
	}{{"2024-01-01T00:00:00Z", 0, 0}, {"2023-12-31T23:30:00Z", 1, 0}, {"2024-02-29T05:00:00Z", 0, 58*24 + 5}, {"2024-12-31T23:00:00Z", 0, 8759},
		{"2024-03-01T00:00:00Z", 5.5, 59*24 + 5}} {
		at, err := time.Parse(time.RFC3339, c.at)
		if err != nil {
			t.Fatal(err)
		}
		if got := hourOfYear(at.Unix(), c.offset); got != c.want {
			t.Errorf("%s: %d, want %d", c.at, got, c.want)
		}
	}
}

// A typical year is kept in standard time, but people and their days follow the
// clock of the site. In Zurich clocks stood an hour ahead from 26 March to 29
// October 2023, from 31 March to 27 October 2024 and from 30 March to 26 October
// 2025 (IANA time zone data base), so that a day from 8 to 18 o'clock lies in
// the hours 8 to 17 of a typical January day and 7 to 16 of a July day, whether
// it comes from the site's times or from a record. A record of the leap year
// 2024 is laid out by the clock of 2025.
func TestTypicalYearFollowsTheClock(t *testing.T) {
	zurich, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	const january, july = 20, 181 + 9
	for _, recorded := range []bool{false, true} {
		in := year(0)
		start := time.Date(2023, 1, 1, 0, 0, 0, 0, zurich).Unix()
		n := 24 // one day: all else by the site's times
		spring, autumn := 59+25, 273+28
		if recorded {
			n, spring, autumn = 366*24, 59+29, 273+25
			start = time.Date(2024, 1, 1, 0, 0, 0, 0, zurich).Unix()
			in.Site.Occupancy.Times = nil
		}
		g := &grid.Grid{StartUTC: start, StepS: 3600, N: n, PeriodTo: n, Loc: zurich, Typical: in.Grid.Typical}
		occ := make([]float32, n)
		for i := range occ {
			if h := g.Time(i).In(zurich).Hour(); h >= 8 && h < 18 {
				occ[i] = 1
			}
		}
		r := typicalRecord(in.Site, in.Criteria, g, occ, in.Outdoor)
		for day, first := range map[int]int{january: 8, spring - 1: 8, spring: 7, july: 7, autumn - 1: 7, autumn: 8} {
			for h := range 24 {
				want := float32(0)
				if h >= first && h < first+10 {
					want = 1
				}
				if got := r.occ[day*24+h]; got != want {
					t.Errorf("recorded %v, day %d, hour %d of standard time: %v, want %v", recorded, day, h, got, want)
				}
			}
		}
		// The day is that of the clock: it begins an hour earlier in July, has 23
		// hours in March and 25 in October, and the night begins at 18:00 standard
		// time.
		d := r.out.Days[july]
		if d.FromStep != july*24-1 || d.ToStep != july*24+23 {
			t.Errorf("July day from %d to %d", d.FromStep, d.ToStep)
		}
		if m, o := r.out.Days[spring], r.out.Days[autumn]; m.ToStep-m.FromStep != 23 || o.ToStep-o.FromStep != 25 {
			t.Errorf("%d and %d hours", m.ToStep-m.FromStep, o.ToStep-o.FromStep)
		}
		if got, want := d.SixAMC, float64(r.out.TempC[july*24+5]); got != want {
			t.Errorf("six o'clock: %v, want %v", got, want)
		}
		night, ok := r.nightBefore(july)
		if !ok || night[0] != float64(r.out.TempC[(july-1)*24+18]) {
			t.Errorf("night begins with %v", night)
		}
	}
}
