package outdoor

import (
	"fmt"
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/comfort"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/internal/physics/air"
)

// dayCoverageMin is the share of a day that must be covered for its mean to
// count. Our assumption.
const dayCoverageMin = 0.8

// Measure collects the measured weather of the site.
func Measure(s *site.Site, c criteria.Settings, g *grid.Grid, cal *calendar.Calendar) *Outdoor {
	of := func(q site.Quantity) []float32 {
		var idx []int
		for i := range s.Points {
			if s.Points[i].Owner == site.OwnerSite && s.Points[i].Quantity == q {
				idx = append(idx, i)
			}
		}
		if q == site.WindDirection && len(idx) > 1 {
			return meanDirection(g, idx, c.StepCoverageMin)
		}
		return g.Average(idx, c.StepCoverageMin)
	}
	o := &Outdoor{
		TempC: of(site.OutdoorTemp), RHPct: of(site.OutdoorHumidity), DewPointC: of(site.OutdoorDewPoint),
		WindMS: of(site.WindSpeed), WindDirDeg: of(site.WindDirection), RainMMH: of(site.Rain),
		SolarWm2: of(site.Solar), CO2PPM: of(site.OutdoorCO2), PM25: of(site.OutdoorPM25),
		DayOf: cal.DayOf,
	}
	// ASHRAE 55 allows 7 to 30 days.
	o.prevailingDays = min(max(int(c.RunningMeanMinD), 7), 30)
	o.Measured, o.dewLogged = o.TempC != nil, o.DewPointC != nil
	o.humidity(g.N)
	o.CO2DefaultPPM, o.CO2Source = c.OutdoorCO2PPM, "from the settings"
	if math.IsNaN(c.OutdoorCO2PPM) {
		year := g.Time((g.PeriodFrom + g.PeriodTo) / 2).Year()
		o.CO2DefaultPPM, o.CO2Source = CO2OfYearPPM(year), fmt.Sprintf("default for %d, from memory", year)
	}
	if !math.IsNaN(s.OutdoorCO2PPM) {
		o.CO2DefaultPPM, o.CO2Source = s.OutdoorCO2PPM, "site file"
	}
	if o.CO2PPM != nil {
		o.CO2Source = fmt.Sprintf("measured; where missing %.0f ppm (%s)", o.CO2DefaultPPM, o.CO2Source)
	}
	o.days(g, cal)
	return o
}

// CO2OfYearPPM is the outdoor CO2 of a year where nothing better is known: the
// global mean of 2024 was about 423 ppm and rises by about 2.5 ppm a year (from
// memory). Towns lie 10 to 50 ppm above it, nights more than days.
func CO2OfYearPPM(year int) float64 { return 423 + 2.5*float64(year-2024) }

// humidity derives whichever of dew point and relative humidity was not
// logged from the other and the temperature.
func (o *Outdoor) humidity(n int) {
	o.HumidityLogged = o.DewPointC != nil || o.RHPct != nil
	if o.TempC == nil || !o.HumidityLogged {
		return
	}
	derive := func(have []float32, f func(tempC, x float64) float64) []float32 {
		out := make([]float32, n)
		lastT, lastX, lastY := float32(math.NaN()), float32(math.NaN()), float32(math.NaN())
		for i := range out {
			if o.TempC[i] != lastT || have[i] != lastX {
				lastT, lastX = o.TempC[i], have[i]
				lastY = float32(f(float64(lastT), float64(lastX)))
			}
			out[i] = lastY
		}
		return out
	}
	switch {
	case o.DewPointC == nil:
		o.DewPointC = derive(o.RHPct, air.DewPointC)
	case o.RHPct == nil:
		o.RHPct = derive(o.DewPointC, air.RelHumidityPct)
	}
}

// days fills the daily means and both running means.
func (o *Outdoor) days(g *grid.Grid, cal *calendar.Calendar) {
	o.Days = make([]Day, len(cal.Days))
	daily := make([]float64, len(cal.Days))
	for d, day := range cal.Days {
		o.Days[d] = Day{Date: day.Date, FromStep: day.FromStep, ToStep: day.ToStep, SixAMC: math.NaN()}
		daily[d] = math.NaN()
		if o.TempC == nil {
			continue
		}
		var sum float64
		n := 0
		for i := day.FromStep; i < day.ToStep; i++ {
			if v := float64(o.TempC[i]); !math.IsNaN(v) {
				sum += v
				n++
			}
			if cal.MinuteOfDay[i] == 360 {
				o.Days[d].SixAMC = float64(o.TempC[i])
			}
		}
		whole := day.Date.Next().Start(g.Loc).Unix() - day.Date.Start(g.Loc).Unix()
		if float64(int64(n)*g.StepS) >= dayCoverageMin*float64(whole) {
			daily[d] = sum / float64(n)
		}
	}
	en := comfort.RunningMeanEN(daily)
	ashrae, err := comfort.PrevailingMean(daily, o.prevailingDays)
	if err != nil {
		panic(err) // the settings allow only the standard's range
	}
	month, err := comfort.PrevailingMean(daily, 30)
	if err != nil {
		panic(err)
	}
	for d := range o.Days {
		o.Days[d].MeanC = daily[d]
		o.Days[d].Mean30DaysC = month[d]
		o.Days[d].RunningMeanENC = en[d]
		o.Days[d].RunningMeanASHRAEC = ashrae[d]
	}
}

// OutdoorCO2 is the outdoor level in force at a step, ppm.
func (o *Outdoor) OutdoorCO2(step int) float64 {
	if o.CO2PPM != nil {
		if v := float64(o.CO2PPM[step]); !math.IsNaN(v) {
			return v
		}
	}
	return o.CO2DefaultPPM
}

// meanDirection averages several wind vanes as unit vectors; opposite winds
// that cancel out leave no direction.
func meanDirection(g *grid.Grid, points []int, minShare float64) []float32 {
	need := minShare * float64(g.StepS)
	out := make([]float32, g.N)
	for i := range out {
		var sin, cos float64
		n := 0
		for _, p := range points {
			if col := &g.Columns[p]; col.Mean != nil && float64(col.CoveredS[i]) >= need && col.CoveredS[i] > 0 && !math.IsNaN(float64(col.Mean[i])) {
				s, c := math.Sincos(float64(col.Mean[i]) * math.Pi / 180)
				sin, cos, n = sin+s, cos+c, n+1
			}
		}
		if n == 0 || math.Hypot(sin, cos) < 1e-3*float64(n) {
			out[i] = float32(math.NaN())
			continue
		}
		deg := math.Atan2(sin, cos) * 180 / math.Pi
		if deg < 0 {
			deg += 360
		}
		out[i] = float32(math.Mod(deg, 360))
	}
	return out
}
