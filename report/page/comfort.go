package page

import (
	"math"

	"sashlog/analyze/exceedance"
	"sashlog/report/chart"
	"sashlog/report/words"
)

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
	s.Blocks = append(s.Blocks, b.exceedanceChart(), b.againstRunningMean())
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
	s.Blocks = append(s.Blocks, b.predictedVotes(zones, foot)...)
	s.Blocks = append(s.Blocks, b.longTerm(zones, foot)...)
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
	t := table{ID: "comfort-criteria", Caption: "Share of occupied time too warm / too cool by each criterion, in per cent", Head: []column{col("Zone")}}
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
					v = words.ShareNumber(c.OverShare.Value) + "\u00a0/\u00a0" + words.ShareNumber(c.UnderShare.Value)
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
