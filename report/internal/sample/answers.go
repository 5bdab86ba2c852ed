package sample

import (
	"fmt"
	"math"

	"sashlog/analyze/advice"
	"sashlog/analyze/afterhours"
	"sashlog/analyze/answerable"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/lost"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

func settings() criteria.Settings {
	return criteria.Settings{Preset: "en16798-1", OutdoorLowC: 12.8, RiseK: 1, DewPointMaxC: 17, WindMaxMS: 10,
		Headline: "en16798-1", Category: "II", CO2Category: "II", CO2AboveOutdoorPPM: 800, AiringMin: 15, MinSuitedRunMin: 30,
		Notes: map[string]criteria.Note{
			"outdoor_low_c": {Key: "outdoor_low_c", Unit: "°C", Words: "coldest outdoor air that suits", Value: "12.8", Source: "Chen, Tong & Malkawi 2017", Standing: "from memory"},
			"rise_k":        {Key: "rise_k", Unit: "K", Words: "margin below the upper comfort limit", Value: "1", Source: "what people and sun add in a well-opened zone", Standing: "our assumption"},
		}}
}

func (m *maker) makeAnswers() {
	r := m.Results
	b := r.Summary.Building
	r.Potential.Methods = []potential.Method{
		{Name: "headline", Words: "headline rule", SuitedH: b.H[hours.CSuited], UnknownH: b.H[hours.CSuitedUnknown], Source: "design rule"},
		{Name: "without humidity limit", Words: "without humidity limit", SuitedH: b.H[hours.CSuited] + b.H[hours.CTooHumid], Source: "design rule"},
		{Name: "with air movement", Words: "with air movement of 0.9 m/s", SuitedH: b.H[hours.CSuited] * 1.1, Source: "EN 16798-1"},
		{Name: "plain band", Words: "plain outdoor band", SuitedH: b.H[hours.CSuited] * 0.9, Source: "our assumption"},
	}
	r.Potential.Tested = []string{"outdoor temperature: tested", "humidity: tested", "wind: not logged, not tested", "rain: not logged, not tested"}
	r.FreshAir.LimitsPPM = [3]float64{550, 800, 1350}
	r.FreshAir.Sentence = "Low CO2 with few people in the room proves little about the ventilation."
	r.FreshAir.OutdoorNote = "Outdoor CO2 is not logged: 420 ppm is assumed, with a doubt of 20 ppm."
	for p := 400.0; p <= 2000; p += 50 {
		r.FreshAir.CurvePPM = append(r.FreshAir.CurvePPM, p)
	}
	for z := range m.o.Zones {
		m.makeZone(z)
	}
	for _, c := range []struct {
		c      lost.Cause
		rule   string
		weight float64
	}{
		{lost.ClockStart, "the plant of the zone starts within 10 min of the same clock time on most working days", 0.4},
		{lost.FewRoom, "fewer than 30 % of people were outside comfort when the plant started", 0.25},
		{lost.LimitTooTight, "the plant starts below an outdoor temperature at which the weather still suits", 0.2},
		{lost.Unexplained, "no test above fits", 0.15},
	} {
		r.Lost.Tests = append(r.Lost.Tests, lost.Test{Cause: c.c, Rule: c.rule, Standing: "our assumption"})
		r.Lost.BuildingH[c.c] = b.H[hours.CMissed] * c.weight
	}
	m.makeEpisodes()
	r.AfterHours.Zones = append(r.AfterHours.Zones, r.AfterHours.Building)
	r.Findings = m.findings()
	r.Answerable = []answerable.Question{
		{ID: "achieved", Question: "How long did each zone run open?", Needs: "window contacts, plant status, weather", Have: []string{"window contacts", "weather"}, Missing: []string{"plant status of one unit"}, Answer: answerable.Partly, ZonesYes: m.o.Zones - 1, ZonesTotal: m.o.Zones, Cheapest: "log the fan's run signal of the unit"},
		{ID: "air", Question: "Was the air fresh enough?", Needs: "CO2", Answer: answerable.No, ZonesTotal: m.o.Zones, Missing: []string{"CO2"}, Cheapest: "a battery logger per zone for four weeks"},
		{ID: "suited", Question: "When did the weather suit?", Needs: "outdoor temperature and humidity", Have: []string{"outdoor temperature", "outdoor humidity"}, Answer: answerable.Yes, ZonesYes: m.o.Zones, ZonesTotal: m.o.Zones},
	}
}

func (m *maker) makeZone(z int) {
	r := m.Results
	t := r.Summary.Zones[z]
	occ := t.H[hours.COccupied]
	over := 0.03 + 0.02*float64(z%5)
	people := m.Site.Zones[z].People
	crit := func(id, words string, k float64) exceedance.Criterion {
		return exceedance.Criterion{ID: id, Words: words, AppliesH: occ * 0.9, UnknownH: occ * 0.1, OverH: occ * over * k, UnderH: occ * 0.02,
			OverKh: occ * over * k * 0.8, UnderKh: occ * 0.01, PersonOverH: occ * over * k * people, PersonUnderH: occ * 0.02 * people,
			OverShare: exceedance.Range{Value: over * k, Low: over * k * 0.9, High: over*k*0.9 + 0.1}, UnderShare: exceedance.Range{Value: 0.02, Low: 0.018, High: 0.12},
			CalculationOnly: id == "ashrae55-80", Source: "EN 16798-1:2019"}
	}
	r.Exceedance.Zones = append(r.Exceedance.Zones, exceedance.Zone{
		Limits: m.limits(),
		Criteria: []exceedance.Criterion{crit("en16798-1", "EN 16798-1 category II", 1), crit("en16798-1-I", "EN 16798-1 category I", 1.6),
			crit("ashrae55-80", "ASHRAE 55 adaptive, 80 %", 0.7)}})
	fz := freshair.Zone{HasCO2: !m.o.NoCO2, FewPeople: z%2 == 0}
	level := freshair.Levels{KnownH: occ * 0.9, UnknownH: occ * 0.1, MeanPPM: 640 + 60*float64(z%7), P95PPM: 990 + 70*float64(z%7), AboveCatH: [4]float64{occ * .2, occ * .1, occ * .02, occ * .1}, AboveOutdoorMeanPPM: 230, Category: "II"}
	nothing := freshair.Levels{UnknownH: occ, MeanPPM: math.NaN(), P95PPM: math.NaN(), AboveOutdoorMeanPPM: math.NaN()}
	for s := range fz.State {
		fz.State[s] = level
		fz.State[s].KnownH = t.H[stateCols[s]]
		fz.AirChange[s] = freshair.AirChange{MedianPerH: math.NaN(), LowPerH: math.NaN(), HighPerH: math.NaN(), FlowLs: math.NaN(), FlowLsPerson: math.NaN(),
			FromPerH: math.NaN(), ToPerH: math.NaN(), OutdoorLowPerH: math.NaN(), OutdoorHighPerH: math.NaN(), AtUsualPeoplePPM: math.NaN(), Events: 1, NotMeasurable: "1 decay, at least 5 are needed", NeighbourPer10LsPerH: math.NaN()}
		fz.NeighbourShare[s] = math.NaN()
	}
	fz.AirChange[running.Open] = freshair.AirChange{MedianPerH: 3.1, LowPerH: 2.4, HighPerH: 4.1, FromPerH: 1.8, ToPerH: 5.2, FlowLs: 155, FlowLsPerson: 155 / people, OutdoorLowPerH: 2.6, OutdoorHighPerH: 3.7, AtUsualPeoplePPM: 880, Events: 14, Method: "decay after the room empties", NeighbourPer10LsPerH: 0.05}
	fz.NeighbourShare[running.Open] = 0.7
	fz.Baseline = freshair.Baseline{OffsetPPM: 12 - 90*float64(z), SpreadPPM: 8, Weeks: 9, ExplainedPPM: 70}
	fz.All = level
	for s := range fz.Curve {
		for k := range r.FreshAir.CurvePPM {
			fz.Curve[s] = append(fz.Curve[s], math.Max(0, 1-float64(k*k)/float64(120+20*s+9*z)))
		}
	}
	if m.o.NoCO2 {
		fz.All = nothing
		for s := range fz.State {
			fz.State[s], fz.Curve[s] = nothing, nil
		}
	}
	r.FreshAir.Zones = append(r.FreshAir.Zones, fz)
	if r.AfterHours == nil {
		r.AfterHours = &afterhours.Result{Building: afterhours.Zone{PlantOnH: 410, PlantUnknownH: 60, PlantConditioningH: 300, WindowsOpenH: 95, WindowsUnknownH: 12, PurgeH: 40, PurgeAvailableH: 320, NightsPlantOn: 31, NightsWindowsOpen: 6, Nights: m.o.Days, WarmUpH: 120}}
	} else {
		r.AfterHours.Zones = append(r.AfterHours.Zones, r.AfterHours.Building)
	}
	var by [lost.NumCauses]float64
	by[lost.ClockStart], by[lost.Unexplained] = t.H[hours.CMissed]*0.6, t.H[hours.CMissed]*0.4
	r.Lost.ByCauseH = append(r.Lost.ByCauseH, by)
}

func (m *maker) limits() exceedance.Limits {
	n := m.Grid.N
	l := exceedance.Limits{Model: make([]exceedance.Model, n), LowC: make([]float32, n), HighC: make([]float32, n), UpperOfDayC: make([]float32, n), WithFanC: make([]float32, n)}
	for i := range n {
		l.Model[i], l.LowC[i], l.HighC[i], l.UpperOfDayC[i] = exceedance.ENAdaptive, 20, 25.2, 26
	}
	return l
}

// makeEpisodes finds runs of missed steps in the sample's own classes.
func (m *maker) makeEpisodes() {
	r := m.Results
	for z, class := range r.Hours.Class {
		for i := 0; i < len(class); {
			if !class[i].Missed() {
				i++
				continue
			}
			to := i
			for to < len(class) && class[to].Missed() {
				to++
			}
			h := float64(to-i) * m.Grid.StepH()
			r.Lost.Episodes = append(r.Lost.Episodes, lost.Episode{Zone: z, FromStep: i, ToStep: to, Hours: h, Running: "mech",
				OutdoorTempC: float64(m.outC[i]), IndoorTempC: float64(m.indoor[z][i]), ComfortHighC: 25.2, CO2PPM: float64(m.co2[z][i]),
				Cause: lost.ClockStart, Contributing: []lost.Cause{lost.LimitTooTight}, Evidence: "plant of " + m.Site.Zones[z].ID + " started at 07:00 on 188 of 212 working days",
				People: m.Site.Zones[z].People, PersonH: h * m.Site.Zones[z].People, Led: -1})
			i = to
		}
	}
}

func (m *maker) findings() []advice.Finding {
	ids := []string{}
	for _, z := range m.Site.Zones {
		ids = append(ids, z.ID)
	}
	if len(ids) > 5 {
		ids = ids[:5]
	}
	missed := m.Results.Summary.Building.H[hours.CMissed]
	var out []advice.Finding
	for i, what := range []string{"The plant starts by the clock at 07:00 although the weather suits", "The changeover limit shuts the windows at 19 °C outdoors, well below what people accept",
		"A few core rooms get the whole floor closed", "Windows stay shut in one zone all year"} {
		h := missed * (0.5 - 0.1*float64(i))
		out = append(out, advice.Finding{ID: fmt.Sprintf("F%d", i+1), What: fmt.Sprintf("%s: about %.0f h (%.0f to %.0f h) in zones L1.01, L1.02, L1.03 and 8 more could have been open in the days audited", what, h, h*0.8, h*1.25), Zones: ids, Hours: h, PersonH: h * 9, Low: h * 0.8, High: h * 1.25,
			Confidence: "fair", Evidence: advice.Evidence{Points: []string{"plant status", "outdoor temperature"}, Figure: "where-hours-went", TypicalDay: "2031-01-06", ContraryDay: "2031-01-09"},
			RivalExplanations: []string{"a warm-up that is needed after cold nights"}, CheckOnSite: "Read the start time in the time programme of the unit, and see whether a thermostat, a furniture edge or a broken handle keeps the windows shut", DoNext: "Start the plant by need and not by the clock: release it only when rooms are outside their limits, half a degree at a time",
			Who: "controls engineer", UndoIf: "rooms are below 20 °C at 09:00", Caution: "Keep the frost protection in force"})
	}
	if m.o.NoPeople {
		for i := range out {
			out[i].PersonH = math.NaN()
		}
	}
	return out
}

func (m *maker) makeLedger() {
	l := &reading.Ledger{Unmapped: map[string]int64{"AHU3 spare": 120}}
	for i, p := range m.Site.Points {
		pl := reading.PointLedger{RowsRead: 1000, IntervalS: 300, HoldS: 900, Coverage: 0.93, FirstUTC: m.Grid.StartUTC, LastUTC: m.Grid.StartUTC + 86400, Gaps: i % 3, LongestGapS: 7200, Min: 1, Max: 30, Mean: 20}
		pl.Counts[reading.Accepted], pl.Counts[reading.Missing], pl.Counts[reading.Spike] = 930, 60, 10
		if p.Quantity == site.CO2 && m.o.NoCO2 {
			pl = reading.PointLedger{Min: math.NaN(), Max: math.NaN(), Mean: math.NaN()}
		}
		l.Points = append(l.Points, pl)
	}
	l.Files = []reading.FileLedger{{Path: "trends.csv", SHA256: "1f2e3d4c5b6a79880123456789abcdef1f2e3d4c5b6a79880123456789abcdef", Bytes: 123456, Rows: 8760, Dialect: []string{"UTF-8", "separator ;", "dates day.month.year, proven by 13.01.2031"}}}
	l.Checks = []reading.Check{
		{Kind: reading.CheckFrozen, Points: []int{0}, Zone: 0, Effect: reading.EffectRemoved, FromUTC: m.Grid.StartUTC, ToUTC: m.Grid.StartUTC + 86400, Readings: 288, Evidence: "21.3 °C without any change for 24 h", DoNext: "Replace the sensor or declare the fault in the diary"},
		{Kind: reading.CheckHoliday, Points: nil, Zone: -1, Effect: reading.EffectWarned, Evidence: "three days of flat CO2", DoNext: "Add them to the holidays if nobody was there"},
	}
	l.Clock = []reading.ClockNote{{File: "trends.csv", Text: "daylight saving: one hour skipped, one repeated", Skipped: 12, Repeated: 12}}
	l.Clocks = []reading.ClockVerdict{{Log: "trends", Points: []int{0}, Declared: "local time", Verdict: reading.ClockForATime, ShiftMin: 60, EndShiftMin: 60, FromUTC: m.Grid.StartUTC, ToUTC: m.Grid.StartUTC + 30*86400,
		HeldAgainst: "CO2 of 3 other logs", Fit: 0.8, FitWithout: 0.4, Better: 28, Days: 30, Sure: true, Evidence: "the log \"trends\" runs 1.0 h ahead of 12 points of other logs",
		DoNext: "compare the logger's clock with a watch", SiteFile: "clock: {is: local, shifts: [{from: 2031-01-01, to: 2031-01-30, shift_min: -60}]}"},
		{Log: "weather", Declared: "universal time", Verdict: reading.ClockUntold, ShiftMin: math.NaN(), EndShiftMin: math.NaN(), Evidence: "nothing else that is logged moves with what this log says"}}
	l.Issues = []reading.Issue{{Where: reading.Where{File: "trends.csv", Line: 17, Col: 3}, Point: 0, Text: `not a number: "n/a"`, Hint: "add it to the missing markers"}}
	m.Ledger = l
}
