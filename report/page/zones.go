package page

import (
	"math"

	"sashlog/analyze/hours"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// mostRows caps the tables that hold several rows or many columns per zone;
// the rest is in the tables and results beside the report.
const mostRows = 60

// capped returns the zones of a detailed table, worst first, and what to say
// of the rest.
func (b *builder) capped(zones []int) (list []int, foot string) {
	if len(zones) <= mostRows {
		return zones, ""
	}
	return zones[:mostRows], "The " + words.Count(mostRows) + " zones where most was missed; the other " + words.Count(int64(len(zones)-mostRows)) + " are in results.json."
}

func (b *builder) zones() section {
	s := section{ID: "zones", Title: "Zone by zone"}
	t := table{ID: "zone-table", Caption: "Zones, those where most was missed for most people first",
		Head: []column{col("Zone"), num("People"), num("Occupied (h)"), num("Weather suitable"), num("Ran open"), num("Could have been open"), num("Reached of the possible"),
			num("Too warm (h)"), num("Too cool (h)"), num("Judged")}}
	dashes := false
	for _, z := range b.order {
		x := b.in.Results.Summary.Zones[z]
		r := b.in.Results.Running.Zones[z]
		var cells []cell
		switch {
		case r.NoOpening:
			cells = row(b.w.Zone(z), b.people(z), words.HoursNumber(x.Occupied.Value*b.span.PerYear), "no opening", words.Dash, words.Dash, words.Dash)
		case !r.HasContacts:
			cells = row(b.w.Zone(z), b.people(z), words.HoursNumber(x.Occupied.Value*b.span.PerYear), b.perDay(x.Suited), "no contacts", words.Dash, words.Dash)
			dashes = true
		default:
			cells = row(b.w.Zone(z), b.people(z), words.HoursNumber(x.Occupied.Value*b.span.PerYear), b.perDay(x.Suited), b.perDay(x.Achieved), b.perDay(x.Missed),
				words.ShareBetween(x.AchievedShare.Value, x.AchievedShare.Low, x.AchievedShare.High))
		}
		over, under := words.HoursNumber(x.H[hours.COver]*b.span.PerYear), words.HoursNumber(x.H[hours.CUnder]*b.span.PerYear)
		if c := b.headline(z); c == nil || !(c.AppliesH > 0) {
			over, under, dashes = words.Dash, words.Dash, true
		}
		cells = append(cells, row(over, under, words.Share(x.JudgedShare))...)
		t.Rows = append(t.Rows, cells)
	}
	t.Foot = []string{"Durations are per working day, hours " + b.span.Words + "; brackets give the least and greatest possible value, given the unknown hours. “Reached of the possible” is ran open ÷ (ran open + could have been open)."}
	if dashes {
		t.Foot = append(t.Foot, words.Dash+" not known: the points it needs are not logged or never usable in this zone (see What these logs can answer).")
	}
	t.Foot = append(t.Foot, b.privacySentences()...)
	s.Blocks = append(s.Blocks, b.table(t), b.plan(), b.league())
	if sens := b.sensitivity(); sens != nil {
		s.Blocks = append(s.Blocks, heading("What counts as open"), text("A zone counts as open above a share of its opening area. The answer at three thresholds:"), b.table(*sens))
	}
	return s
}

func (b *builder) perDay(r hours.Range) string { return b.span.PerDayBetween(r) }

// people is the usual number, a dash when not given.
func (b *builder) people(z int) string {
	p := b.in.Results.Hours.People[z]
	if !(p >= 0) {
		return words.Dash
	}
	if p == math.Trunc(p) {
		return words.Number(p, 0)
	}
	return words.Number(p, 1)
}

func (b *builder) privacySentences() []string {
	protected, unstated := b.rule.Count()
	var out []string
	if b.rule.Internal() {
		return []string{"Internal report (privacy: internal): rooms for one to three people are shown in full. Do not pass it on."}
	}
	if protected > 0 {
		out = append(out, privacyNote+" "+words.Zones(protected)+" of this kind, or opening through one, "+isAre(protected)+" shown without presence, counts and votes, and never finer than by day and week.")
	}
	if unstated > 0 {
		out = append(out, "For "+words.Zones(unstated)+" the usual number of people is not given, so this report cannot tell whether "+map[bool]string{true: "it is a room", false: "they are rooms"}[unstated == 1]+" for one to three people; give the numbers before passing it on.")
	}
	return out
}

func isAre(n int) string {
	if n == 1 {
		return "is"
	}
	return "are"
}

func (b *builder) league() block {
	d := chart.ZoneLeagueData{Caption: chart.Caption{Title: "Share of the possible hours each zone reached", Desc: "One dot per zone with a whisker for its bounds."}, Building: math.NaN()}
	if b.w.CanSay() == words.Full {
		d.Building = b.in.Results.Summary.Building.AchievedShare.Value
	}
	for _, z := range b.order {
		x, r := b.in.Results.Summary.Zones[z], b.in.Results.Running.Zones[z]
		share := chart.Bounded{Value: x.AchievedShare.Value, Low: x.AchievedShare.Low, High: x.AchievedShare.High}
		if r.NoOpening || !r.HasContacts {
			share = chart.Bounded{Value: math.NaN(), Low: math.NaN(), High: math.NaN()}
		}
		d.Zones = append(d.Zones, chart.ZoneShare{Zone: b.w.Zone(z), Share: share, Hours: (x.Achieved.Value + x.Missed.Value) * b.span.PerYear})
	}
	return b.draw("zone-league", "How much of what was possible each zone reached: lowest first, with the bounds the unknown hours leave. The figure beside each row is the hours "+b.span.Words+" the share is of; a low share of few hours matters little.",
		"No zone has hours that ran open or could have, so there is no league of zones.",
		func(o chart.Options) (chart.SVG, error) { return chart.ZoneLeague(d, o) })
}

func (b *builder) sensitivity() *table {
	t := table{ID: "open-threshold", Caption: "Occupied hours counted as open, by the share of the opening area that must be open", Small: true,
		Head: []column{col("Zone"), num("any opening (h)"), num("25 % (h)"), num("50 % (h)"), num("Mode signal disagrees (h)")}}
	zones, foot := b.capped(b.order)
	for _, z := range zones {
		r := b.in.Results.Running.Zones[z]
		if !r.HasContacts {
			continue
		}
		k := b.span.PerYear
		mode := words.Dash
		if r.ModeH > 0 {
			mode = words.HoursNumber(r.ModeDisagreeH*k) + " of " + words.HoursNumber(r.ModeH*k)
		}
		t.Rows = append(t.Rows, row(b.w.Zone(z), words.HoursNumber(r.OpenHoursAny*k), words.HoursNumber(r.OpenHours25*k), words.HoursNumber(r.OpenHours50*k), mode))
	}
	if len(t.Rows) == 0 {
		return nil
	}
	t.Foot = []string{"Hours " + b.span.Words + ". " + words.Dash + " no mode signal is logged for the zone."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return &t
}
