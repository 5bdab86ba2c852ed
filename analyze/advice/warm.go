package advice

import (
	"fmt"
	"math"

	"sashlog/analyze/exceedance"
	"sashlog/configs/site"
)

// warmShare is the share of occupied hours above the comfort limit that is
// worth acting on: EN 15251 Annex G allows 3 % or 5 % (from memory); 3 % here.
const warmShare = 0.03

// warmZones finds zones too warm by the headline criterion.
func (a *adviser) warmZones() []found {
	criterion := a.headline
	over := func(z int) float64 {
		if !a.tooWarmByDay(z) {
			return 0
		}
		return criterion(z).OverH
	}
	s := a.sizeOf(over, over, func(z int) float64 { return over(z) + criterion(z).UnknownH*over(z)/criterion(z).AppliesH })
	if len(s.zones) == 0 {
		return nil
	}
	var days [][]float64
	events := 0
	for _, z := range s.zones {
		perDay := a.perDay(z, func(i int) bool { return a.tooWarm(z, i) })
		days = append(days, perDay)
		for _, h := range perDay {
			if h > 0 {
				events++
			}
		}
	}
	worst := criterion(s.zones[0])
	share := percent(worst.OverH/worst.AppliesH) + " of occupied hours"
	if len(s.zones) > 1 {
		share = "zone " + a.Site.Zones[s.zones[0]].ID + ": " + share
	}
	f := found{Finding: Finding{
		ID:         "too-warm",
		What:       fmt.Sprintf("It is too warm %s: %s above the comfort limit %s (%s)", a.inZones(s.zones), between(s.h, s.low, s.high, unitOf(s.zones)), a.period(), share),
		Confidence: confidence(s, events, 20),
		RivalExplanations: []string{
			"the sensor hangs in the sun, above equipment or in a duct",
			"the limit is that of mechanical running, and people with open windows accept more",
		},
		CheckOnSite: "See where the sensors hang, whether shading is used, what gives off heat, and whether the windows can open at night",
		DoNext:      "Shade first, then take heat sources out, then use cool nights and fans; cooling last",
		Who:         manager,
		UndoIf:      "rooms fall below the lower comfort limit in the morning",
		Caution:     "Heat can harm people who are ill or old: watch hot spells day by day; " + codes,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.OperativeTemp, site.AirTemp, site.ThermostatTemp, site.OutdoorTemp), Figure: FigureExceedance,
		TypicalDay: a.typical(sumDays(days...)), ContraryDay: a.coolDay(s.zones)}
	return []found{f}
}

// headline is a zone's outcome of the headline criterion, nil without one.
func (a *adviser) headline(z int) *exceedance.Criterion {
	for k := range a.Exceedance.Zones[z].Criteria {
		if c := &a.Exceedance.Zones[z].Criteria[k]; c.ID == a.Exceedance.Headline {
			return c
		}
	}
	return nil
}

func (a *adviser) tooWarm(z, i int) bool {
	t, high := a.Indoor[z].OperativeC, a.Exceedance.Zones[z].Limits.HighC
	return t != nil && high != nil && t[i] > high[i]
}

// coolDay is the day with the warmest outdoor mean on which none of the zones
// was too warm.
func (a *adviser) coolDay(zones []int) string {
	best, day := math.Inf(-1), -1
	for d := range a.Outdoor.Days {
		if d >= len(a.cal.Days) || !(a.Outdoor.Days[d].MeanC > best) {
			continue
		}
		occupied, over := 0.0, 0.0
		for _, z := range zones {
			day := &a.cal.Days[d]
			for i := max(day.FromStep, a.Grid.PeriodFrom); i < min(day.ToStep, a.Grid.PeriodTo); i++ {
				if a.Record.Class[z][i] == 0 {
					continue
				}
				occupied++
				if a.tooWarm(z, i) {
					over++
				}
			}
		}
		if occupied > 0 && over == 0 {
			best, day = a.Outdoor.Days[d].MeanC, d
		}
	}
	if day < 0 {
		return ""
	}
	return a.cal.Days[day].Date.String()
}
