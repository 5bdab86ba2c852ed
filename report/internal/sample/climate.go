package sample

import (
	"math"

	"sashlog/analyze/breeze"
	"sashlog/analyze/climate"
	"sashlog/analyze/hours"
)

// makeClimate invents what the climate offered; nothing measured without
// weather.
func (m *maker) makeClimate() {
	occ, suited := m.Results.Summary.Building.H[hours.COccupied], m.Results.Summary.Building.H[hours.CSuited]
	c := &climate.Result{HeightNote: "mean height of the zones, 3.00 m", Balance: climate.HeatBalance{GainsWm2: 30, LossWm2K: 0.8, MinAirChangePerH: 1,
		MaxAirChangePerH: 10, HeightM: 3, HeatingC: 20, CoolingC: 26, DewPointMaxC: 17}}
	offer := func(name string, k float64) *climate.Offer {
		o := &climate.Offer{Name: name, OccupiedH: occ, RequiredMedianPerH: 2.1, Required90PerH: 7.4,
			Night: climate.Night{Nights: m.o.Days, CoolingPotentialKh: 120 * k, CriticalK: 3, StorageWm2PerAirChange: 14, ShortDays: 30, CoveredDays: 22, ShortH: 140, CreditedH: 90}}
		for i, method := range []string{"headline", "published band", "plain band", "adaptive EN 16798-1", "adaptive ASHRAE 55", "heat balance", "heat balance and night cooling"} {
			o.Methods = append(o.Methods, climate.Method{Name: method, Words: "invented rule " + method, Source: "invented", SuitedH: math.Min(occ, suited*k*(0.7+0.2*float64(i))), UnknownH: 12 * float64(i%2), OutsideH: 30 * float64(i/3)})
		}
		for n := range o.NeedH {
			o.NeedH[n] = occ / float64(climate.NumNeeds)
		}
		for i := range o.Night.ByMonthKh {
			o.Night.ByMonthKh[i] = 60 + 100*math.Abs(math.Cos(float64(i)/4))
		}
		o.Night.ByMonthKh[11] = math.NaN()
		return o
	}
	c.Typical = offer("Harbour (invented)", 1.1)
	c.Outdoors = climate.Fields{TempEdgesC: [2]float64{12.8, 26}, Humidity: "dew point (°C)", HumidityEdges: []float64{17}, HoursH: make([][3][climate.NumFeels]float64, 3)}
	c.Indoors = climate.Fields{TempEdgesC: [2]float64{20, 26}, Humidity: "relative humidity (%)", HumidityEdges: []float64{25, 60}, HoursH: make([][3][climate.NumFeels]float64, 4), UnknownH: 9}
	for _, f := range []*climate.Fields{&c.Outdoors, &c.Indoors} {
		for h := range f.HoursH {
			for t := range f.HoursH[h] {
				for feel := range f.HoursH[h][t] {
					f.HoursH[h][t][feel] = occ / 40 * float64((h+2*t+3*feel)%5)
				}
			}
		}
	}
	m.Results.Climate = c
	m.makeBreeze()
	if m.o.NoWeather {
		return
	}
	c.Measured = offer("measured", 1)
	n := len(c.Measured.Methods)
	for j := range n {
		c.Agreement = append(c.Agreement, make([]climate.Pair, n))
		for k := range n {
			c.Agreement[j][k] = climate.Pair{AgreeShare: 1 - 0.1*math.Abs(float64(j-k)), KnownH: occ, OnlyFirstH: 5 * math.Max(0, float64(j-k)), OnlySecondH: 5 * math.Max(0, float64(k-j))}
		}
	}
	c.WaySensitivity = []climate.WayMoved{{Way: "plain band", Moved: climate.Moved{Key: "band_low_c", Words: "coldest outdoor air of the band", From: "16 °C", To: "14 °C", SuitedH: suited * 1.1, ChangeH: suited * 0.2}},
		{Way: "heat balance", Moved: climate.Moved{Key: "climate_gains_w_m2", Words: "heat from people, sun and equipment", From: "30 W/m²", To: "40 W/m²", SuitedH: suited * 1.3, UnknownH: 12, ChangeH: -suited * 0.1}}}
	c.Sensitivity = []climate.Moved{
		{Key: "outdoor_low_c", Words: "coldest outdoor air that suits", From: "12.8 °C", To: "10.8 °C", SuitedH: suited + 50, ChangeH: 50},
		{Key: "outdoor_low_c", Words: "coldest outdoor air that suits", From: "12.8 °C", To: "14.8 °C", SuitedH: suited - 40, ChangeH: -40},
		{Key: "dew_point_max_c", Words: "dampest outdoor air that suits (dew point)", From: "17 °C", To: "no limit", SuitedH: suited + 20, ChangeH: 20},
	}
	c.Year = &climate.Year{Name: "Harbour (invented)", MeasuredC: 11.2, TypicalC: 10.1, OccupiedH: occ, MeasuredSuitedH: suited, TypicalSuitedH: suited * 0.86, Known: true, Verdict: climate.Warmer}
	for month := 1; month <= 12; month++ {
		c.Year.Months = append(c.Year.Months, climate.Month{Month: month, KnownH: 700, ShareKnown: 0.97, MeasuredC: 4 + float64(month), TypicalC: 3 + 1.1*float64(month), OccupiedH: 180, MeasuredSuitedH: 15 * float64(month%7), TypicalSuitedH: 13 * float64(month%6), Verdict: climate.Verdict(month % 4)})
	}
	a := &climate.AirSpeed{}
	for z := range m.o.Zones {
		s := climate.SpeedSteps{Openings: z%5 != 4, InstalledMS: math.NaN(), SuitedH: suited, WarmH: 40, WarmFreeH: 12, TemperatureH: occ * 0.9, TemperatureUnknownH: occ * 0.1}
		for k := range climate.SpeedsMS {
			s.AddedIncrementH[k], s.AddedEffectH[k] = float64(k*(20+z)), float64((k+1)*(18+z))
			s.RelievedIncrementH[k], s.RelievedSETH[k] = float64(4*k), float64(9*(k+1))
		}
		if z%3 == 2 {
			s.InstalledMS = 0.9
		}
		if !s.Openings {
			s.SuitedH, s.AddedIncrementH, s.AddedEffectH = 0, [4]float64{}, [4]float64{}
		}
		a.Zones = append(a.Zones, s)
	}
	a.Building = a.Zones[0]
	c.AirSpeed = a
}

func (m *maker) makeBreeze() {
	b := &breeze.Result{WantedAboveC: 24, CalmMS: 0.5, Speed: breeze.Speed{MastM: 10, OpeningM: 6, MastTerrain: "country", OpeningTerrain: "suburb", Factor: 0.64, ENFactor: 0.72}}
	m.Results.Breeze = b
	if m.o.NoWeather {
		b.Missing = "wind is not logged: no rose can be drawn, and nothing can be said about the wind at the openings"
		return
	}
	b.SpeedLogged, b.DirectionOK, b.WantedSuitedH = true, true, 60
	for i, r := range []*breeze.Rose{&b.All, &b.Suited, &b.Wanted} {
		for s := range r.HoursH {
			for k := range r.HoursH[s] {
				r.HoursH[s][k] = math.Max(0, 12*math.Cos(float64(s-9-2*i)/16*2*math.Pi)+3) / float64(k+1) / float64(i+1)
				r.KnownH += r.HoursH[s][k]
			}
		}
		r.CalmH = 20
		r.KnownH += 20
		r.UnknownH, r.NoDirectionH, r.MeanMS, r.MeanDeg, r.Steadiness = 5, 3, 2.4, 213, 0.4
	}
	zones := []int{}
	for z := range m.o.Zones {
		zones = append(zones, z)
	}
	b.Facings = []breeze.Facing{{FaceDeg: 180, Zones: zones, WindwardH: 90, LeewardH: 50, CalmH: 20, UnknownH: 5, WindwardShare: 0.5625, MeanWindwardMS: 1.7},
		{FaceDeg: 0, Zones: zones[:1], WindwardH: 20, LeewardH: 120, CalmH: 20, UnknownH: 5, WindwardShare: 0.125, MeanWindwardMS: 1.1}}
	nan := math.NaN()
	d := &breeze.Drive{Least: 3, NoWind: 2, SlopePerMS: 0.2, SlopeLow: 0.1, SlopeHigh: 0.3, Driven: true, Days: 31, Zones: zones[:1], Points: make([]breeze.Point, 40)}
	group := func(name string, n int, v float64) breeze.Group {
		g := breeze.Group{Name: name, Decays: n / 2, Days: n - n/2, Zones: min(n, 3), Median: v, Low: v * 0.7, High: v * 1.4, MedianPerH: 3 * v}
		if n < 3 {
			g.Median, g.Low, g.High, g.MedianPerH = nan, nan, nan, nan
		}
		return g
	}
	d.Speeds = []breeze.Group{group("below 1 m/s", 12, 0.8), group("1 to 2 m/s", 16, 1), group("2 to 3 m/s", 9, 1.3), group("3 to 4 m/s", 3, 1.6), group("4 m/s and more", 0, 1)}
	d.Sides = []breeze.Group{group("calm", 5, 0.7), group("windward", 20, 1.2), group("leeward", 15, 0.9), group("direction turning or not known", 0, 1)}
	for s, name := range []string{"N", "NE", "E", "SE", "S", "SW", "W", "NW"} {
		d.Sectors = append(d.Sectors, group(name, s%6, 0.8+float64(s)/15))
	}
	b.Drive = d
}
