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
	s.Blocks = append(s.Blocks, b.months(), b.outcomes())
	return s
}

// outcomeMeans says what each outcome means.
var outcomeMeans = map[chart.Class]string{
	chart.AchievedOK:         "weather suitable, windows open, plant off; inside the comfort limits and the CO2 limit",
	chart.AchievedWarm:       "the same, but above the comfort limit",
	chart.AchievedCool:       "the same, but below the comfort limit",
	chart.AchievedStale:      "the same, but above the CO2 limit",
	chart.AchievedUnassessed: "the same, but comfort or air was not measured",
	chart.Missed:             "weather suitable and the zone wanted cooling or air, but plant ran or it stayed shut",
	chart.NotNeeded:          "weather suitable, not open, and nothing was wanted: comfortable and fresh, cool, or being heated",
	chart.IllTimed:           "open while the weather did not suit, for longer than a short airing",
	chart.ClosedUnsuited:     "closed while the weather did not suit, short airings included",
	chart.NoOpening:          "the zone has no opening to outdoors",
	chart.Unjudged:           "weather, windows or plant unknown",
}

// outcomes lists the average occupant's hours by outcome; they add up to the
// occupied hours.
func (b *builder) outcomes() block {
	t := table{ID: "outcomes", Caption: "Occupied hours of the average occupant by outcome", Small: true,
		Head: []column{col("Outcome"), num("Per working day"), num("Hours " + b.span.Words), num("Share of occupied"), col("Meaning")}}
	sum := b.in.Results.Summary.Building
	for _, c := range chart.Outcomes() {
		h := 0.0
		for _, k := range outcomeCols[c] {
			h += sum.H[k]
		}
		if h == 0 && c == chart.NoOpening {
			continue
		}
		cells := row(c.Label(), words.Duration(b.span.PerDay(h)), words.HoursNumber(h*b.span.PerYear), words.Share(h/sum.Occupied.Value), outcomeMeans[c])
		cells[0].Swatch = swatch(c)
		t.Rows = append(t.Rows, cells)
	}
	total := row("occupied", words.Duration(b.span.PerDay(sum.Occupied.Value)), words.HoursNumber(sum.Occupied.Value*b.span.PerYear), words.Share(sum.Occupied.Value/sum.Occupied.Value), "all of the above")
	for i := range total {
		total[i].Strong = true
	}
	t.Rows = append(t.Rows, total)
	if h := sum.H[hours.COccupiedUnknown]; h > 0 {
		t.Foot = append(t.Foot, words.Hours(h*b.span.PerYear)+" more may have been occupied: presence is not known there.")
	}
	return b.table(t)
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
	b.keepCarpet("outcome-carpet", first, days)
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
	b.keepCarpet("running-carpet", first, days)
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
