package page

import (
	"fmt"
	"sort"
	"strings"

	"sashlog/analyze/hours"
	"sashlog/analyze/lost"
	"sashlog/analyze/running"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// sheets is the appendix with a sheet for every zone: who uses it, what became
// of its hours, and its carpet.
func (b *builder) sheets() section {
	s := section{ID: "sheets", Title: "Zone sheets"}
	zones, foot := b.capped(b.order)
	s.Blocks = append(s.Blocks, text("One sheet per zone, in the order of the zone table: those where most was missed for most people first. Colours mean the same in all of them."))
	for _, z := range zones {
		s.Blocks = append(s.Blocks, heading(b.w.Zone(z)), text(b.zoneFacts(z)+" "+b.zoneHours(z)))
		s.Blocks = append(s.Blocks, b.zoneCarpet(z))
	}
	if foot != "" {
		s.Blocks = append(s.Blocks, note(foot))
	}
	return s
}

// zoneFacts says what the site file tells of a zone.
func (b *builder) zoneFacts(z int) string {
	def := &b.in.Site.Zones[z]
	var parts []string
	if p := b.in.Results.Hours.People[z]; p >= 0 {
		parts = append(parts, words.People(p))
	} else {
		parts = append(parts, "number of people not given")
	}
	if def.Floor != "" {
		parts = append(parts, "floor "+b.w.Foreign(def.Floor))
	}
	if def.AreaM2 > 0 {
		parts = append(parts, words.Number(def.AreaM2, 0)+"\u00a0m²")
	}
	var units []string
	for _, u := range b.in.Site.Plant {
		for _, id := range u.Serves {
			if id == def.ID {
				units = append(units, b.w.Foreign(u.ID))
			}
		}
	}
	if len(units) > 0 {
		parts = append(parts, "served by "+words.List(units, 4))
	} else {
		parts = append(parts, "served by no plant unit named in the site file")
	}
	return words.Sentence(strings.Join(parts, ", "))
}

// zoneHours says what became of a zone's hours.
func (b *builder) zoneHours(z int) string {
	x, r := &b.in.Results.Summary.Zones[z], &b.in.Results.Running.Zones[z]
	var out []string
	switch {
	case r.NoOpening:
		out = append(out, "It has no opening to outdoors.")
	case !r.HasContacts:
		out = append(out, "The weather suited for "+b.perDay(x.Suited)+" per working day; no window contact is logged.")
	default:
		out = append(out, "The weather suited for "+b.perDay(x.Suited)+" per working day; it ran open for "+b.perDay(x.Achieved)+" and could have done so for "+b.perDay(x.Missed)+" more.")
	}
	if causes := b.zoneCauses(z); causes != "" {
		out = append(out, "Lost to: "+causes+".")
	}
	if c := b.headline(z); c != nil && c.AppliesH > 0 {
		out = append(out, fmt.Sprintf("Too warm for %s and too cool for %s of the occupied hours that could be judged.", words.Share(c.OverShare.Value), words.Share(c.UnderShare.Value)))
	}
	fa := b.in.Results.FreshAir
	if z < len(fa.Zones) && fa.Zones[z].HasCO2 && !b.rule.Protected(z) {
		l := &fa.Zones[z].All
		out = append(out, fmt.Sprintf("CO2 was %s ppm on average, below %s ppm for 95 %% of the time.", words.Number(l.MeanPPM, 0), words.Number(l.P95PPM, 0)))
		if a := &fa.Zones[z].AirChange[running.Open]; a.NotMeasurable == "" && a.MedianPerH > 0 {
			out = append(out, fmt.Sprintf("Open, its air was changed %s times per hour (%s to %s).", rate(a.MedianPerH), rate(a.LowPerH), rate(a.HighPerH)))
		}
	}
	return strings.Join(out, " ")
}

// zoneCauses names the two greatest first causes of a zone's missed hours.
func (b *builder) zoneCauses(z int) string {
	l := b.in.Results.Lost
	if z >= len(l.ByCauseH) {
		return ""
	}
	var list []lost.Cause
	total := 0.0
	for c := lost.Cause(0); c < lost.NumCauses; c++ {
		if h := l.ByCauseH[z][c]; h > 0 {
			list = append(list, c)
			total += h
		}
	}
	sort.SliceStable(list, func(i, j int) bool { return l.ByCauseH[z][list[i]] > l.ByCauseH[z][list[j]] })
	var parts []string
	for _, c := range list[:min(2, len(list))] {
		parts = append(parts, c.String()+" "+words.Share(l.ByCauseH[z][c]/total))
	}
	return strings.Join(parts, ", ")
}

// zoneCarpet draws the outcome of every hour of a zone.
func (b *builder) zoneCarpet(z int) block {
	if b.rule.Protected(z) {
		return note(privacyNote + " No picture by hour is shown of this one.")
	}
	class := b.in.Results.Hours.Class[z]
	first, days := b.carpet(func(h hours.Hour) chart.Class {
		var votes [64]int
		best := chart.None
		for i := h.FromStep; i < h.ToStep && i < len(class); i++ {
			c := classLook[class[i]]
			votes[c]++
			if votes[c] > votes[best] {
				best = c
			}
		}
		return best
	})
	name := b.w.Zone(z)
	return b.draw(fmt.Sprintf("zone-carpet-%d", z+1), "Outcome of every hour of zone "+name+".", "No hour of this zone has an outcome to draw.",
		func(o chart.Options) (chart.SVG, error) {
			return chart.Carpet(chart.CarpetData{Caption: chart.Caption{Title: "Outcome by day and hour of zone " + name, Desc: "One cell per hour, days from left to right, hours upwards."}, FirstDay: first, Days: days, Low: true}, o)
		})
}
