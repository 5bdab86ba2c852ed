package potential

import (
	"fmt"
	"math"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// methods counts suitable occupied hours of the average occupant by each way
// of counting.
func (w *weather) methods(s *site.Site, run *running.Result, zones []Zone) []Method {
	c := w.c
	headline := "air from %g °C to the day's upper comfort limit less %g K"
	band := func(humidity bool) func(int) []Suit {
		v := w.bandVerdicts(humidity)
		return func(int) []Suit { return v }
	}
	ways := []struct {
		name, words, source string
		of                  func(z int) []Suit
	}{
		{"headline", fmt.Sprintf(headline+", dew point at most %g °C, wind, rain and pollution where logged, runs of at least %g min", c.OutdoorLowC, c.RiseK, c.DewPointMaxC, c.MinSuitedRunMin), "lower limit from memory: Chen, Tong & Malkawi 2017; upper limit EN 16798-1", func(z int) []Suit { return zones[z].Suit }},
		{"without humidity limit", "the headline rule with any dew point", "as above", func(z int) []Suit { return zones[z].AnyHumidity }},
		{"with air movement", fmt.Sprintf("the headline rule with the upper limit raised by %g m/s of air movement that people control", c.FanSpeedMS), "EN 16798-1, ASHRAE 55 Table 5-13", func(z int) []Suit { return zones[z].Fan }},
		{"without shortest run", "the headline rule, runs of any length", "as above", func(z int) []Suit { return zones[z].Raw }},
		{"plain band", fmt.Sprintf("outdoor air from %g to %g °C, dew point at most %g °C", c.BandLowC, c.BandHighC, c.DewPointMaxC), "our assumption", band(true)},
		{"plain band, any humidity", fmt.Sprintf("outdoor air from %g to %g °C", c.BandLowC, c.BandHighC), "our assumption", band(false)},
	}
	var out []Method
	for _, way := range ways {
		m := Method{Name: way.name, Words: way.words, Source: way.source}
		for z := range zones {
			if run.Weights[z] == 0 || run.Zones[z].NoOpening {
				continue
			}
			v := way.of(z)
			suited, unknown := 0, 0
			for i := w.g.PeriodFrom; i < w.g.PeriodTo; i++ {
				if run.Zones[z].Occupied[i] != running.Occupied {
					continue
				}
				switch v[i] {
				case Suited:
					suited++
				case SuitUnknown:
					unknown++
				}
			}
			m.SuitedH += run.Weights[z] * float64(suited) * w.g.StepH()
			m.UnknownH += run.Weights[z] * float64(unknown) * w.g.StepH()
		}
		out = append(out, m)
	}
	return out
}

// bandVerdicts judges every step by the plain outdoor band.
func (w *weather) bandVerdicts(humidity bool) []Suit {
	out := make([]Suit, w.g.N)
	for i := range out {
		out[i] = SuitUnknown
		if w.out.TempC == nil {
			continue
		}
		dew := math.NaN()
		if w.out.DewPointC != nil {
			dew = float64(w.out.DewPointC[i])
		}
		out[i] = bandVerdict(w.c, float64(w.out.TempC[i]), dew, humidity && w.out.HumidityLogged)
	}
	return out
}

func bandVerdict(c criteria.Settings, tempC, dewC float64, humidity bool) Suit {
	switch {
	case math.IsNaN(tempC):
		return SuitUnknown
	case round3(tempC) < round3(c.BandLowC):
		return TooCold
	case round3(tempC) > round3(c.BandHighC):
		return TooWarm
	case humidity && math.IsNaN(dewC):
		return SuitUnknown
	case humidity && round3(dewC) > round3(c.DewPointMaxC):
		return TooHumid
	}
	return Suited
}

// typical compares the measured weather with a typical year by the plain band
// with humidity limit, in the site's occupied times by its clock; the typical
// year itself is in standard time. Each month's measured
// share is applied to the same month of the typical year, so that a record of
// part of a year is compared with that part only.
func typical(s *site.Site, c criteria.Settings, g *grid.Grid, cal *calendar.Calendar, out *outdoor.Outdoor) *TypicalPotential {
	if g.Typical == nil || out.TempC == nil {
		return nil
	}
	t := &TypicalPotential{Name: g.Typical.Name}
	type tally struct{ occupied, inBand, sumC, n float64 }
	var typ, meas [12]tally
	humidity := out.HumidityLogged
	start := time.Date(2023, 1, 1, 0, 30, 0, 0, time.UTC).Unix() - int64(g.Typical.OffsetH*3600) // a common year
	for h := range g.Typical.TempC {
		at := time.Unix(start+int64(h)*3600, 0).In(g.Loc)
		k := &typ[at.Month()-1]
		temp := float64(g.Typical.TempC[h])
		if !math.IsNaN(temp) {
			k.sumC += temp
			k.n++
		}
		if !scheduled(s, at.Weekday(), at.Hour()*60+at.Minute()) {
			continue
		}
		k.occupied++
		if bandVerdict(c, temp, float64(g.Typical.DewPointC[h]), humidity) == Suited {
			k.inBand++
		}
	}
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		day := &cal.Days[cal.DayOf[i]]
		k := &meas[day.Date.Month-1]
		temp, dew := float64(out.TempC[i]), math.NaN()
		if humidity {
			dew = float64(out.DewPointC[i])
		}
		if !math.IsNaN(temp) {
			k.sumC += temp
			k.n++
		}
		if !scheduled(s, day.Weekday, int(cal.MinuteOfDay[i])) {
			continue
		}
		switch bandVerdict(c, temp, dew, humidity) {
		case SuitUnknown:
		case Suited:
			k.inBand++
			k.occupied++
		default:
			k.occupied++
		}
	}
	months := 0.0
	for m := range typ {
		if meas[m].occupied == 0 || meas[m].n == 0 || typ[m].n == 0 {
			continue
		}
		months++
		t.TypicalH += typ[m].inBand
		t.MeasuredH += meas[m].inBand / meas[m].occupied * typ[m].occupied
		t.TypicalMeanC += typ[m].sumC / typ[m].n
		t.MeasuredMeanC += meas[m].sumC / meas[m].n
	}
	if months == 0 {
		return nil
	}
	t.TypicalMeanC /= months
	t.MeasuredMeanC /= months
	t.Months = int(months)
	return t
}

// scheduled reports whether the site's occupied times hold a clock minute.
func scheduled(s *site.Site, day time.Weekday, minute int) bool {
	for _, t := range s.Occupancy.Times {
		if t.Days[day] && minute >= t.FromMin && minute < t.ToMin {
			return true
		}
	}
	return false
}
