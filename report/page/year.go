package page

import (
	"time"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// classLook is the drawn class of an hour's outcome.
var classLook = [hours.NumClasses]chart.Class{
	hours.NotOccupied: chart.Unoccupied, hours.AchievedOK: chart.AchievedOK, hours.AchievedWarm: chart.AchievedWarm,
	hours.AchievedCool: chart.AchievedCool, hours.AchievedStale: chart.AchievedStale, hours.AchievedUnassessed: chart.AchievedUnassessed,
	hours.MissedCool: chart.Missed, hours.MissedVent: chart.Missed, hours.MissedBoth: chart.Missed, hours.MissedShut: chart.Missed,
	hours.MissedUntyped: chart.Missed, hours.NotNeeded: chart.NotNeeded, hours.IllTimed: chart.IllTimed,
	hours.ClosedUnsuitedFresh: chart.ClosedUnsuited, hours.ClosedUnsuitedStale: chart.ClosedUnsuited, hours.NoOpening: chart.NoOpening,
	hours.UnjudgedSuited: chart.Unjudged, hours.Unjudged: chart.Unjudged,
}

var stateLook = [running.NumStates]chart.Class{running.Unknown: chart.Unknown, running.Open: chart.Open, running.Mech: chart.Mech,
	running.Both: chart.Both, running.Shut: chart.Shut}

// outcomeCols are the counted hours of the drawn outcomes.
var outcomeCols = map[chart.Class][]hours.Col{
	chart.AchievedOK: {hours.CAchievedOK}, chart.AchievedWarm: {hours.CAchievedWarm}, chart.AchievedCool: {hours.CAchievedCool},
	chart.AchievedStale: {hours.CAchievedStale}, chart.AchievedUnassessed: {hours.CAchievedUnassessed}, chart.Missed: {hours.CMissed},
	chart.NotNeeded: {hours.CNotNeeded}, chart.IllTimed: {hours.CIllTimed}, chart.ClosedUnsuited: {hours.CClosedUnsuited},
	chart.NoOpening: {hours.CNoOpening}, chart.Unjudged: {hours.CUnjudged},
}

func (b *builder) year() section {
	s := section{ID: "year", Title: "The period at a glance"}
	s.Blocks = append(s.Blocks, text("Each occupied moment of a zone lands in one outcome. “Ran open” means windows open and mechanical plant off while the weather suited; “could have been open” means the weather suited and the zone wanted cooling or air, but plant ran or the zone stayed shut; “open outside limits” means open for longer than a short airing while the weather did not suit."))
	if b.withheldTogether() {
		s.Blocks = append(s.Blocks, note(privacyNote+" All zones together are usually used by no more than three people, so the pictures by hour are left out."))
	} else {
		s.Blocks = append(s.Blocks, b.outcomeCarpet(), b.stateCarpet())
	}
	s.Blocks = append(s.Blocks, b.months())
	return s
}

const privacyNote = "Privacy: windows, presence and CO2 of a room for one to three people say when those people are there."

// withheldTogether: a picture of the whole building would follow few people.
func (b *builder) withheldTogether() bool {
	var pooled []int
	for z, w := range b.in.Results.Summary.Weights {
		if w > 0 {
			pooled = append(pooled, z)
		}
	}
	return b.rule.ProtectedTogether(pooled)
}

func (b *builder) outcomeCarpet() block {
	class := b.in.Results.Summary.CarpetClass
	from := b.in.Grid.PeriodFrom
	first, days := b.carpet(func(h hours.Hour) chart.Class {
		var votes [64]int
		best := chart.None
		for i := h.FromStep - from; i < h.ToStep-from; i++ {
			if i < 0 || i >= len(class) {
				continue
			}
			c := classLook[class[i]]
			votes[c]++
			if votes[c] > votes[best] {
				best = c
			}
		}
		return best
	})
	return b.draw("outcome-carpet",
		"Outcome of every hour, for most of the people. Look for orange: at which hours, in which months, the building could have been open. White is outside occupied times.",
		"No hour of this period has an outcome to draw.",
		func(o chart.Options) (chart.SVG, error) {
			return chart.Carpet(chart.CarpetData{Caption: chart.Caption{Title: "Outcome by day and hour", Desc: "One cell per hour, days from left to right, hours upwards."}, FirstDay: first, Days: days}, o)
		})
}

func (b *builder) stateCarpet() block {
	r, sum := b.in.Results.Hours, b.in.Results.Summary
	cols := [running.NumStates]hours.Col{hours.CAllUnknown, hours.CAllOpen, hours.CAllMech, hours.CAllBoth, hours.CAllShut}
	index := map[int64]int{}
	for k, h := range r.Hours {
		index[h.StartUTC] = k
	}
	first, days := b.carpet(func(h hours.Hour) chart.Class {
		// The colour of a cell is the state most people's zones were in longest.
		var votes [running.NumStates]float64
		k := index[h.StartUTC]
		for z := range sum.Weights {
			for st, c := range cols {
				votes[st] += sum.Weights[z] * float64(r.Seconds[c][r.Row(z, k)])
			}
		}
		best := running.Unknown
		for st := range votes {
			if votes[st] > votes[best]+1e-9 {
				best = running.State(st)
			}
		}
		if votes[best] == 0 {
			return chart.None
		}
		return stateLook[best]
	})
	return b.draw("running-carpet",
		"What most of the people's zones were doing in every hour, day and night. Look for plant that starts at the same hour every day, and for plant or windows left on or open overnight.",
		"The running state of the zones is not known for any hour.",
		func(o chart.Options) (chart.SVG, error) {
			return chart.Carpet(chart.CarpetData{Caption: chart.Caption{Title: "Running state by day and hour", Desc: "One cell per hour, days from left to right, hours upwards."}, FirstDay: first, Days: days}, o)
		})
}

// carpet places the hours of the record in days of local standard time.
func (b *builder) carpet(class func(hours.Hour) chart.Class) (first time.Time, days [][24]chart.Class) {
	list := b.in.Results.Hours.Hours
	if len(list) == 0 {
		return first, nil
	}
	offset := standardOffset(b.in.Grid.Loc, time.Unix(list[0].StartUTC, 0))
	day := func(h hours.Hour) int64 { return floorDiv(h.StartUTC+int64(offset), 86400) }
	start := day(list[0])
	first = time.Unix(start*86400, 0).UTC()
	if n := day(list[len(list)-1]) - start + 1; n > 0 && n <= 1500 {
		days = make([][24]chart.Class, n)
	}
	for _, h := range list {
		if d := int(day(h) - start); d >= 0 && d < len(days) {
			hour := (h.StartUTC + int64(offset) - day(h)*86400) / 3600
			days[d][hour] = class(h)
		}
	}
	return first, days
}

// standardOffset is the offset without daylight saving, in seconds.
func standardOffset(loc *time.Location, at time.Time) int {
	y := at.In(loc).Year()
	_, jan := time.Date(y, 1, 1, 12, 0, 0, 0, loc).Zone()
	_, jul := time.Date(y, 7, 1, 12, 0, 0, 0, loc).Zone()
	return min(jan, jul)
}

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}

func (b *builder) months() block {
	d := chart.MonthlyStackData{Caption: chart.Caption{Title: "Occupied hours per month by outcome", Desc: "One stacked column per month."},
		YTitle: "occupied hours of the average occupant (h per month)", Classes: chart.Outcomes()}
	for _, m := range b.in.Results.Summary.Months {
		row := chart.MonthHours{Year: m.Year, Month: time.Month(m.Month), Partial: b.partial(m.Year, time.Month(m.Month))}
		for _, c := range d.Classes {
			v := 0.0
			for _, k := range outcomeCols[c] {
				v += m.Building.H[k]
			}
			row.Hours = append(row.Hours, v)
		}
		d.Months = append(d.Months, row)
	}
	return b.draw("months", "Occupied hours per month by outcome, for the average occupant. The months with much orange are those in which a change pays.",
		"There are no occupied hours to show by month.",
		func(o chart.Options) (chart.SVG, error) { return chart.MonthlyStack(d, o) })
}

// partial reports whether the month is not wholly inside the period.
func (b *builder) partial(year int, month time.Month) bool {
	first := time.Date(year, month, 1, 0, 0, 0, 0, time.UTC)
	last := first.AddDate(0, 1, -1)
	from := time.Date(b.span.From.Year, b.span.From.Month, b.span.From.Day, 0, 0, 0, 0, time.UTC)
	to := time.Date(b.span.To.Year, b.span.To.Month, b.span.To.Day, 0, 0, 0, 0, time.UTC)
	return first.Before(from) || last.After(to)
}

func (b *builder) weather() section {
	s := section{ID: "weather", Title: "What the weather offered"}
	p := b.in.Results.Potential
	if !b.in.Results.Outdoor.Measured {
		s.Blocks = append(s.Blocks, note("No measured outdoor temperature covers the period, so no hour can be called suitable. A sensor on the site, or the hourly file of a nearby station, closes this gap; a typical year may not stand in for it."))
	}
	s.Blocks = append(s.Blocks, text("“Weather suitable” counts occupied hours in which outdoor air could keep a zone within its limits. There is more than one defensible way of counting; where the ways differ much, the answer depends on the setting and not on the building."))
	t := table{ID: "suitable-hours", Caption: "Suitable hours of the average occupant by way of counting", Small: true,
		Head: []column{col("Way of counting"), num("Suitable per working day"), num("Suitable hours " + b.span.Words), num("Weather unknown"), col("Rule and source")}}
	for _, m := range p.Methods {
		low, high := m.SuitedH*b.span.PerYear, (m.SuitedH+m.UnknownH)*b.span.PerYear
		name := m.Name
		rule := words.Sentence(m.Words)
		if m.Source != "" {
			rule += " Source: " + words.Clean(m.Source) + "."
		}
		t.Rows = append(t.Rows, row(words.Clean(name), words.Duration(b.span.PerDay(m.SuitedH)), words.HoursBetween(low, low, high), words.Hours(m.UnknownH*b.span.PerYear), rule))
	}
	if len(t.Rows) > 0 {
		t.Foot = []string{"Brackets: from no unknown hour suitable to all of them."}
		s.Blocks = append(s.Blocks, b.table(t))
	}
	if y := p.Typical; y != nil {
		s.Blocks = append(s.Blocks, text("Against a typical year ("+words.Clean(y.Name)+", plain band with humidity limit, "+words.Plural(y.Months, "month", "months")+" compared): "+
			words.Hours(y.MeasuredH)+" were in the band as measured, "+words.Hours(y.TypicalH)+" in the typical year. Mean outdoor temperature "+
			words.Unit(y.MeasuredMeanC, 1, "°C")+" as measured, "+words.Unit(y.TypicalMeanC, 1, "°C")+" in the typical year. The typical year only says whether the logged weather was normal; it never stands in for measured weather."))
	}
	if len(p.Tested) > 0 {
		s.Blocks = append(s.Blocks, text("Which tests the logs allowed (not logged means not tested, never calm or dry):"), block{List: b.foreign(p.Tested)})
	}
	s.Blocks = append(s.Blocks, b.outdoorAir())
	return s
}

func (b *builder) foreign(list []string) []string {
	out := make([]string, len(list))
	for i, x := range list {
		out[i] = words.Sentence(b.w.Foreign(x))
	}
	return out
}

// outdoorAir draws one point per occupied hour: the step in its middle.
func (b *builder) outdoorAir() block {
	out, class, from := b.in.Results.Outdoor, b.in.Results.Summary.CarpetClass, b.in.Grid.PeriodFrom
	d := chart.OutdoorQuadrantsData{Caption: chart.Caption{Title: "Outdoor air of the occupied hours by outcome", Desc: "One point per occupied hour: outdoor temperature across, dew point upwards."},
		Humidity: chart.DewPointC}
	none := "Outdoor humidity is not logged, so outdoor temperature cannot be drawn against it."
	if b.withheldTogether() {
		return note(privacyNote + " The picture of single hours against the outdoor air is left out, since all zones together are usually used by no more than three people.")
	}
	if out.TempC != nil && out.DewPointC != nil {
		for _, h := range b.in.Results.Hours.Hours {
			i := (h.FromStep + h.ToStep) / 2
			if k := i - from; k < 0 || k >= len(class) || i >= len(out.TempC) || class[k] == hours.NotOccupied {
				continue
			}
			d.Points = append(d.Points, chart.OutdoorPoint{TempC: float64(out.TempC[i]), Humidity: float64(out.DewPointC[i]), Class: classLook[class[i-from]]})
		}
		if c := b.in.Criteria; c.OutdoorLowC > 0 {
			d.TempLimits = []chart.Limit{{Value: c.OutdoorLowC, Label: "coldest that suits"}}
		}
		if c := b.in.Criteria; c.DewPointMaxC > 0 {
			d.HumidityLimits = []chart.Limit{{Value: c.DewPointMaxC, Label: "most humid that suits"}}
		}
	}
	return b.draw("outdoor-air", "Outdoor air in the occupied hours, coloured by the outcome of most people. Orange between the limits is what could have been open; where orange and blue lie on the same spot, the same weather was treated differently.",
		none, func(o chart.Options) (chart.SVG, error) { return chart.OutdoorQuadrants(d, o) })
}
