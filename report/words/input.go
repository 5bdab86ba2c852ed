package words

import (
	"math"
	"strings"
	"time"

	"sashlog/analyze"
	"sashlog/analyze/hours"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
	"sashlog/report/privacy"
)

// Input is what the sentences are made from.
type Input struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	Ledger   *reading.Ledger
	Results  *analyze.Results
	// Privacy is the site's rule; empty means it is made from the site.
	Privacy privacy.Rule
}

func (in Input) rule() privacy.Rule {
	if in.Privacy.Empty() {
		return privacy.For(in.Site)
	}
	return in.Privacy
}

// Span is the length of the period, and how its totals are shown.
type Span struct {
	From, To          site.Date
	Days, WorkingDays int
	// PerYear is what totals are multiplied by, and Words what they then are:
	// "per year", or "in these 14 days" for periods well short of a year.
	PerYear float64
	Words   string
}

// SpanOf returns the period of the results.
func (in Input) SpanOf() Span {
	s := Span{Days: in.Results.Summary.Days, WorkingDays: in.Results.Summary.WorkingDays, PerYear: 1}
	if h := in.Results.Hours.Hours; len(h) > 0 {
		s.From, s.To = h[0].Date, h[len(h)-1].Date
	}
	switch {
	case s.Days >= 360 && s.Days <= 370:
		s.Words = "per year"
	case s.Days > 370:
		s.Words = "per year"
		s.PerYear = 365.25 / float64(s.Days)
	case s.Days == 1:
		s.Words = "on this day"
	default:
		s.Words = "in these " + Plural(s.Days, "day", "days")
	}
	return s
}

// Date writes a day: "3 May 2031".
func Date(d site.Date) string {
	if d.IsZero() {
		return Dash
	}
	return time.Date(d.Year, d.Month, d.Day, 0, 0, 0, 0, time.UTC).Format("2 January 2006")
}

// Period writes the period with its days.
func (s Span) Period() string {
	var t string
	switch {
	case s.From == s.To:
		t = Date(s.From)
	case s.From.Year == s.To.Year:
		t = time.Date(s.From.Year, s.From.Month, s.From.Day, 0, 0, 0, 0, time.UTC).Format("2 January") + " to " + Date(s.To)
	default:
		t = Date(s.From) + " to " + Date(s.To)
	}
	return t
}

// PerDay divides a total by the working days; NaN without any.
func (s Span) PerDay(total float64) float64 {
	if s.WorkingDays == 0 {
		return math.NaN()
	}
	return total / float64(s.WorkingDays)
}

// PerDayBetween writes a total with bounds as a duration per working day.
func (s Span) PerDayBetween(r hours.Range) string {
	return DurationBetween(s.PerDay(r.Value), s.PerDay(r.Low), s.PerDay(r.High))
}

// PerYearBetween writes a total with bounds in hours per year, or of the period.
func (s Span) PerYearBetween(r hours.Range) string {
	return HoursBetween(r.Value*s.PerYear, r.Low*s.PerYear, r.High*s.PerYear)
}

// Building is the name of the building as a reader sees it.
func (in Input) Building() string {
	if n := Clean(in.Site.Name); n != "" {
		return n
	}
	return "The building"
}

// Marked is the building's name, marked as invented where it is and does not
// say so itself.
func (in Input) Marked() string {
	n := in.Building()
	if in.Site.Invented && !strings.Contains(strings.ToLower(n), "invented") {
		n += " (invented)"
	}
	return n
}

// Zone names a zone: its id, and its name after it where it has one.
func (in Input) Zone(z int) string {
	id, name := Clean(in.rule().ID(z)), Clean(in.rule().Name(z))
	if name == "" {
		return id
	}
	return id + " " + name
}

// Foreign cleans a sentence that the analyses or checks wrote about zones, and
// replaces names by codes where the site asks for it.
func (in Input) Foreign(s string) string { return Clean(in.rule().Text(s)) }

// Contacts counts the zones with window contacts of those with openings.
func (in Input) Contacts() (with, of int) {
	for _, z := range in.Results.Running.Zones {
		if z.NoOpening {
			continue
		}
		of++
		if z.HasContacts {
			with++
		}
	}
	return with, of
}

// CanSay is what kind of answer the logs allow.
type CanSay int

// Kinds of answer.
const (
	Full CanSay = iota
	NoWeather
	NoOccupied
	NoOpenings
	PlantOnly // no window contacts
	NeverSuited
	NothingJudged
)

// CanSay tells what kind of answer the logs allow.
func (in Input) CanSay() CanSay {
	b := in.Results.Summary.Building
	with, of := in.Contacts()
	switch {
	case of == 0:
		return NoOpenings
	case !in.Results.Outdoor.Measured:
		return NoWeather
	case !(b.Occupied.Value > 0):
		return NoOccupied
	case !(b.Suited.Value > 0):
		if b.Suited.High > 0 {
			return NothingJudged
		}
		return NeverSuited
	case with == 0:
		return PlantOnly
	case b.Achieved.Value+b.Missed.Value+b.NotNeeded.Value == 0:
		return NothingJudged
	}
	return Full
}
