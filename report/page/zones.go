package page

import (
	"math"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/running"
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
	s.Blocks = append(s.Blocks, b.table(t), b.league())
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
		out = append(out, privacyNote+" "+words.Zones(protected)+" of this kind "+isAre(protected)+" shown without presence, counts and votes, and never finer than by day and week.")
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

// headline is the zone's outcome of the headline criterion, nil without one.
func (b *builder) headline(z int) *exceedance.Criterion {
	e := b.in.Results.Exceedance
	if z >= len(e.Zones) {
		return nil
	}
	for i := range e.Zones[z].Criteria {
		if e.Zones[z].Criteria[i].ID == e.Headline {
			return &e.Zones[z].Criteria[i]
		}
	}
	return nil
}

func (b *builder) comfort() section {
	s := section{ID: "comfort", Title: "Comfort: how long, by how much, for how many"}
	s.Blocks = append(s.Blocks, text("A comfort criterion gives a zone a lowest and a highest temperature. Occupied time above it counts as too warm, below it as too cool, and the two are kept apart. In open mode the limits follow the outdoor temperature of the past days, since people who can open windows accept more (the adaptive model); while plant cools or heats they are fixed. Degree-hours (K·h) add up by how much and how long; person-hours multiply hours by the usual number of people."))
	s.Blocks = append(s.Blocks, b.exceedanceChart())
	head := table{ID: "comfort-headline", Caption: "Occupied time outside the headline criterion",
		Head: []column{col("Zone"), num("Judged (h)"), num("Too warm (h)"), num("share"), num("K·h"), num("person-h"), num("Too cool (h)"), num("share"), num("K·h"), num("person-h"), num("Not known (h)")}}
	zones, foot := b.capped(b.order)
	k := b.span.PerYear
	for _, z := range zones {
		c := b.headline(z)
		if c == nil {
			continue
		}
		if !(c.AppliesH > 0) {
			head.Rows = append(head.Rows, row(b.w.Zone(z), "0", words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.HoursNumber(c.UnknownH*k)))
			continue
		}
		head.Rows = append(head.Rows, row(b.w.Zone(z), words.HoursNumber(c.AppliesH*k),
			words.HoursNumber(c.OverH*k), words.ShareBetween(c.OverShare.Value, c.OverShare.Low, c.OverShare.High), words.HoursNumber(c.OverKh*k), words.HoursNumber(c.PersonOverH*k),
			words.HoursNumber(c.UnderH*k), words.ShareBetween(c.UnderShare.Value, c.UnderShare.Low, c.UnderShare.High), words.HoursNumber(c.UnderKh*k), words.HoursNumber(c.PersonUnderH*k),
			words.HoursNumber(c.UnknownH*k)))
	}
	head.Foot = []string{"Hours " + b.span.Words + ". " + words.Dash + " not known: no usable temperature, or the number of people is not given.", b.temperatureNotes()}
	if foot != "" {
		head.Foot = append(head.Foot, foot)
	}
	if len(head.Rows) > 0 {
		s.Blocks = append(s.Blocks, b.table(head))
	}
	s.Blocks = append(s.Blocks, b.criteriaTable(zones, foot)...)
	return s
}

func (b *builder) temperatureNotes() string {
	count := map[string]int{}
	var seen []string
	for _, z := range b.in.Results.Indoor {
		if z.TempNote == "" {
			continue
		}
		if count[z.TempNote] == 0 {
			seen = append(seen, z.TempNote)
		}
		count[z.TempNote]++
	}
	var parts []string
	for _, n := range seen {
		parts = append(parts, words.Clean(n)+" ("+words.Zones(count[n])+")")
	}
	if len(parts) == 0 {
		return "No indoor temperature is logged."
	}
	return "Temperature judged: " + words.List(parts, 0) + "."
}

func (b *builder) exceedanceChart() block {
	d := chart.ExceedanceData{Caption: chart.Caption{Title: "Occupied hours too cool and too warm per zone", Desc: "Too cool to the left, too warm to the right of the middle axis."},
		XTitle: "share of judged occupied hours (%)"}
	for _, z := range b.order {
		e := chart.ZoneExceedance{Zone: b.w.Zone(z), TooWarm: unknownBar(), TooCool: unknownBar()}
		if c := b.headline(z); c != nil && c.AppliesH > 0 {
			e.TooWarm, e.TooCool = percent(c.OverShare), percent(c.UnderShare)
		}
		d.Zones = append(d.Zones, e)
	}
	name := "the headline criterion"
	for z := range b.in.Results.Exceedance.Zones {
		if c := b.headline(z); c != nil {
			name = words.Clean(c.Words)
			break
		}
	}
	return b.draw("exceedance", "Share of occupied hours outside "+name+". Long bars to the right are zones that overheat, to the left zones that are cold; whiskers are the bounds the unknown hours leave.",
		"No zone has an indoor temperature in occupied hours, so comfort cannot be drawn.",
		func(o chart.Options) (chart.SVG, error) { return chart.Exceedance(d, o) })
}

func unknownBar() chart.Bounded {
	return chart.Bounded{Value: math.NaN(), Low: math.NaN(), High: math.NaN()}
}

func percent(r exceedance.Range) chart.Bounded {
	return chart.Bounded{Value: r.Value * 100, Low: r.Low * 100, High: r.High * 100}
}

// criteriaTable sets all criteria side by side, zones downwards.
func (b *builder) criteriaTable(zones []int, foot string) []block {
	var ids []string
	first := map[string]exceedance.Criterion{}
	for _, z := range b.in.Results.Exceedance.Zones {
		for _, c := range z.Criteria {
			if _, ok := first[c.ID]; !ok {
				ids = append(ids, c.ID)
				first[c.ID] = c
			}
		}
	}
	if len(ids) == 0 {
		return nil
	}
	t := table{ID: "comfort-criteria", Caption: "Share of occupied time too warm / too cool by each criterion", Head: []column{col("Zone")}}
	var keys []string
	for i, id := range ids {
		letter := string(rune('A' + i%26))
		t.Head = append(t.Head, num(letter))
		c := first[id]
		k := letter + ": " + words.Clean(c.Words)
		if c.CalculationOnly {
			k += " (calculation only, the standard does not cover this use)"
		}
		if c.Note != "" {
			k += "; " + b.w.Foreign(c.Note)
		}
		if c.Source != "" {
			k += ". Source: " + words.Clean(c.Source)
		}
		keys = append(keys, words.Sentence(k))
	}
	for _, z := range zones {
		if z >= len(b.in.Results.Exceedance.Zones) {
			continue
		}
		cells := row(b.w.Zone(z))
		for _, id := range ids {
			v := words.Dash
			for _, c := range b.in.Results.Exceedance.Zones[z].Criteria {
				if c.ID == id && c.AppliesH > 0 {
					v = words.Share(c.OverShare.Value) + " / " + words.Share(c.UnderShare.Value)
				}
			}
			cells = append(cells, cell{Text: v})
		}
		t.Rows = append(t.Rows, cells)
	}
	t.Foot = []string{words.Dash + " the criterion does not apply to this zone's hours, or no temperature is known. Hours, bounds and degree-hours of each criterion are in results.json and comfort.parquet."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return []block{b.table(t), text("The criteria:"), {List: keys}}
}

// stateWords are the running states as a reader meets them.
var stateWords = [running.NumStates]string{"unknown", "open", "mechanical", "open with plant", "shut"}

// statesShown is the order in which states are listed.
var statesShown = []running.State{running.Open, running.Mech, running.Both, running.Shut}
