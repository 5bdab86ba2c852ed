package configs

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"
	_ "time/tzdata" // the zone base, so that every machine knows every zone

	"sashlog/configs/site"
)

// builder turns raw values into the site and collects what breaks a rule.
type builder struct {
	tree *tree
	raw  rawSite
	out  *Loaded
	env  func(string) string // nil: nothing comes from the environment
	// tables holds problems of the points table and the diary.
	tables Problems
}

func (b *builder) problems() Problems {
	return append(append(Problems{}, b.tree.problems...), b.tables...).tidy()
}

func (b *builder) warn(path, hint, format string, args ...any) {
	b.out.Warnings = append(b.out.Warnings, b.tree.problem(path, hint, format, args...))
}

// number checks an optional number against a range, both ends included. It
// returns NaN when it was not given or not allowed.
func (b *builder) number(path string, v *float64, low, high float64, unit string) float64 {
	if v == nil {
		return math.NaN()
	}
	if *v < low || *v > high || math.IsNaN(*v) {
		b.tree.at(path, "", "%s is %s: must lie between %s and %s%s", last(path), b.said(path, *v), plainNumber(low), plainNumber(high), unit)
		return math.NaN()
	}
	return *v
}

// positive checks an optional number that must be above zero.
func (b *builder) positive(path string, v *float64, high float64, unit string) float64 {
	if v != nil && !(*v > 0 && *v <= high) {
		b.tree.at(path, "", "%s is %s: must be above 0 and at most %s%s", last(path), b.said(path, *v), plainNumber(high), unit)
		return math.NaN()
	}
	if v == nil {
		return math.NaN()
	}
	return *v
}

// plainNumber writes a limit without an exponent.
func plainNumber(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

func (b *builder) said(path string, v float64) string {
	if s, ok := b.tree.written[path]; ok {
		return s
	}
	return fmt.Sprintf("%g", v)
}

// word checks a text against the allowed ones; an empty one gives the default.
func word[T ~string](b *builder, path, text string, def T, allowed ...T) T {
	if text == "" {
		if b.tree.has(path) && b.tree.written[path] == "" && !b.tree.reported(path) {
			b.tree.at(path, "", "%s is empty: must be one of %s", last(path), list(words(allowed)))
		}
		return def
	}
	for _, a := range allowed {
		if string(a) == text {
			return a
		}
	}
	b.tree.at(path, onlyNearest(text, words(allowed)), "%s is %q: must be one of %s", last(path), text, list(words(allowed)))
	return def
}

func words[T ~string](w []T) []string {
	out := make([]string, len(w))
	for i := range w {
		out[i] = string(w[i])
	}
	return out
}

// reported tells whether a problem stands at this path already.
func (t *tree) reported(path string) bool {
	pl, ok := t.places[path]
	if !ok {
		return false
	}
	for _, p := range t.problems {
		if p.Line == pl.line && p.Col == pl.col || p.Line == pl.keyLine && p.Col == pl.keyCol {
			return true
		}
	}
	return false
}

// missing reports a required key that was not given.
func (b *builder) missing(path, hint string) {
	if b.tree.has(path) {
		if !b.tree.reported(path) {
			b.tree.at(path, hint, "%s is empty", last(path))
		}
		return
	}
	where := "in the site file"
	if p := parent(path); p != "" {
		if b.tree.reported(p) && b.tree.kinds[p] != "a group of keys" {
			return // not a group of keys at all
		}
		where = "in " + p
	}
	b.tree.at(path, hint, "%s is missing %s", last(path), where)
}

func (b *builder) head() {
	s, r := b.out.Site, &b.raw
	if s.Name = r.Site.Name; strings.TrimSpace(s.Name) == "" {
		b.missing("site.name", "the name heads the report")
	}
	s.Invented = r.Site.Invented
	b.timeZone()
	s.LatitudeDeg = b.number("site.latitude", r.Site.Latitude, -90, 90, " degrees, south negative")
	s.LongitudeDeg = b.number("site.longitude", r.Site.Longitude, -180, 180, " degrees, west negative")
	s.ElevationM = b.number("site.elevation_m", r.Site.ElevationM, -450, 6000, " m")
	s.OutdoorCO2PPM = b.number("site.outdoor_co2_ppm", r.Site.OutdoorCO2PPM, 300, 1000, " ppm")
	if b.tree.has("site.latitude") != b.tree.has("site.longitude") {
		b.tree.at("site", "give both or neither", "latitude and longitude belong together: only one is given")
	}
	b.period()
	s.StepS = 300
	if r.StepMin != nil {
		sec := *r.StepMin * 60
		if !(sec >= 60 && sec <= 900) || sec != math.Trunc(sec) || 900%int(sec) != 0 {
			b.tree.at("step_min", "5 suits most logs", "step_min is %s: must divide 15 minutes (1, 3, 5 or 15)", b.said("step_min", *r.StepMin))
		} else {
			s.StepS = int(sec)
		}
	}
	b.privacy()
	s.TypicalYear = r.Weather.TypicalYear
	s.Energy = site.Energy{PricePerKWh: b.number("energy.price_per_kwh", r.Energy.PricePerKWh, 0, 100, ""), Currency: r.Energy.Currency,
		CarbonKgPerKWh: b.number("energy.carbon_kg_per_kwh", r.Energy.CarbonKgPerKWh, 0, 3, "")}
	if r.Energy.PricePerKWh != nil && r.Energy.Currency == "" {
		b.tree.at("energy", "for instance currency: EUR", "currency is missing in energy")
	}
	if s.RejectedShareMax = b.number("tolerance.rejected_share", r.Tolerance.RejectedShare, 0, 1, " (a share)"); math.IsNaN(s.RejectedShareMax) {
		s.RejectedShareMax = 0.02
	}
	if len(r.Points) == 0 {
		b.missing("points", "name the table that says what each logged column is, for instance points: points.csv")
	}
}

func (b *builder) timeZone() {
	s, name := b.out.Site, b.raw.Site.TimeZone
	s.TimeZone, s.Location = name, time.UTC
	if name == "" {
		b.missing("site.time_zone", "name it by region and city, for instance Europe/Zurich")
		return
	}
	loc, problem := zone(name)
	if problem != "" {
		b.tree.at("site.time_zone", "name it by region and city, for instance Europe/Zurich", "time_zone is %q: %s", name, problem)
		return
	}
	s.Location = loc
}

// zone finds a named time zone. Abbreviations are refused: many mean several
// zones, and most leave daylight saving open.
func zone(name string) (*time.Location, string) {
	if name != "UTC" && !strings.Contains(name, "/") {
		return nil, "abbreviations are ambiguous, and most leave daylight saving open"
	}
	loc, err := time.LoadLocation(name)
	if err != nil {
		return nil, "no such time zone"
	}
	return loc, ""
}

func (b *builder) period() {
	p := &b.out.Site.Period
	from, okF := b.date("period.from", b.raw.Period.From)
	to, okT := b.date("period.to", b.raw.Period.To)
	p.From, p.To = from, to
	if okF && okT && to.Before(from) {
		b.tree.at("period.to", "", "the period ends on %s, before it begins on %s", to, from)
	}
}

// date reads an optional day; ok is true when there is one.
func (b *builder) date(path, text string) (d site.Date, ok bool) {
	if text == "" {
		return d, false
	}
	d, ok = parseDate(text)
	if !ok {
		b.tree.at(path, "write year-month-day, for instance 2025-03-31", "%s is %q: no such day", last(path), text)
	}
	return d, ok
}

// parseDate reads a day written year-month-day.
func parseDate(text string) (site.Date, bool) {
	t, err := time.Parse(time.DateOnly, strings.TrimSpace(text))
	if err != nil || t.Year() < 1900 || t.Year() > 2200 {
		return site.Date{}, false
	}
	return site.DateOf(t), true
}

func (b *builder) privacy() {
	r := b.raw.Privacy
	show, path := r.Show, "privacy.show"
	if r.Word != "" {
		show, path = r.Word, "privacy"
	}
	w := word(b, path, show, "default", "default", "internal")
	b.out.Site.Privacy = site.Privacy{Internal: w == "internal", Codes: r.Codes}
}

func (b *builder) criteria() {
	b.out.Criteria = b.settings()
	c := b.out.Criteria
	if v := b.out.Site.OutdoorCO2PPM; !math.IsNaN(v) && b.tree.has("criteria.outdoor_co2_ppm") && !math.IsNaN(c.OutdoorCO2PPM) && v != c.OutdoorCO2PPM {
		b.tree.at("criteria.outdoor_co2_ppm", "keep one of them",
			"outdoor_co2_ppm is %g here and %g in site: they contradict each other", c.OutdoorCO2PPM, v)
	}
}
