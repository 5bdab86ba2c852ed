package advice

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// staleAir finds zones that are stale in mechanical running, those whose plant
// brings no outdoor air apart from the rest.
func (a *adviser) staleAir() []found {
	var out []found
	for _, recirculating := range []bool{true, false} {
		if f, ok := a.staleIn(recirculating); ok {
			out = append(out, f)
		}
	}
	return out
}

// onlyRecirculates: every unit that serves the zone is known to bring no
// outdoor air.
func (a *adviser) onlyRecirculates(z int) bool {
	served := false
	for u := range a.Site.Plant {
		if !a.servesAny(u, []int{z}) {
			continue
		}
		served = true
		if k := a.Site.Plant[u].Air; k != site.AirRecirculated && k != site.AirNone {
			return false
		}
	}
	return served
}

func (a *adviser) staleIn(recirculating bool) (found, bool) {
	if a.FreshAir == nil {
		return found{}, false
	}
	mech := func(z int) (stale, known, unknown float64) {
		if a.onlyRecirculates(z) != recirculating {
			return 0, 0, 0
		}
		l := &a.FreshAir.Zones[z].State[running.Mech]
		return l.AboveCatH[3], l.KnownH, l.UnknownH
	}
	stale := func(z int) float64 { h, _, _ := mech(z); return h }
	s := a.sizeOf(stale, stale, func(z int) float64 {
		h, known, unknown := mech(z)
		if known > 0 {
			h += unknown * h / known
		}
		return h
	})
	// A share worth acting on: category limits allow 5 % of the time outside.
	known := 0.0
	for _, z := range s.zones {
		_, k, _ := mech(z)
		known += k
	}
	if len(s.zones) == 0 || s.h < 0.05*known {
		return found{}, false
	}
	var days [][]float64
	events := 0
	for _, z := range s.zones {
		perDay := a.perDay(z, func(i int) bool { return a.stale(z, i) && a.Running.Zones[z].State[i] == running.Mech })
		days = append(days, perDay)
		for _, h := range perDay {
			if h > 0 {
				events++
			}
		}
	}
	compare := ""
	if o, m := a.meanAbove(s.zones, running.Open), a.meanAbove(s.zones, running.Mech); !math.IsNaN(o) && !math.IsNaN(m) {
		compare = fmt.Sprintf(" (%.0f ppm above outdoors on average, %.0f ppm when open)", m, o)
	}
	f := found{Finding: Finding{
		Confidence: confidence(s, events, 20),
		RivalExplanations: []string{
			"the CO2 sensor has drifted or hangs where people breathe on it",
			"more people were there than the rooms are meant for",
		},
		UndoIf:  "rooms fall below the lower comfort limit or draughts are reported",
		Caution: "Stale air also carries infection from person to person: in times of illness act at once and open windows where it is safe; " + codes,
	}}
	if recirculating {
		units := a.plantWords(s.zones)
		f.ID = "stale-recirculating"
		f.What = fmt.Sprintf("%s%s no outdoor air, and with windows shut the air %s goes stale%s: %s above the CO2 limit %s",
			capital(units), verb(units, " brings", " bring"), a.inZones(s.zones), compare, between(s.h, s.low, s.high, unitOf(s.zones)), a.period())
		f.CheckOnSite = "Follow the ducts of " + units + ": is there any outdoor air, and do the windows open while " + verb(units, "it runs", "they run") + "?"
		f.DoNext = "Let windows be opened for airing while " + verb(units, "the unit runs", "the units run") + ", and plan an outdoor air supply"
		f.Who = servicesFirm
	} else {
		f.ID = "stale-mechanical"
		f.What = fmt.Sprintf("In mechanical running the air %s is stale%s: %s above the CO2 limit %s", a.inZones(s.zones), compare, between(s.h, s.low, s.high, unitOf(s.zones)), a.period())
		f.CheckOnSite = "Measure the outdoor air of " + a.plantWords(s.zones) + " at its damper and at the zone's outlets with the plant at usual speed"
		f.DoNext = "Set the least position of the outdoor air damper, or the zone's air flow, to what the number of people needs"
		f.Who = servicesFirm
	}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.CO2, site.PlantStatus, site.OutdoorAirDamper), Figure: FigureCO2,
		TypicalDay: a.typical(sumDays(days...)), ContraryDay: a.freshDay(s.zones)}
	return f, true
}

func (a *adviser) stale(z, i int) bool {
	co2 := a.Indoor[z].CO2PPM
	return co2 != nil && float64(co2[i])-a.Outdoor.OutdoorCO2(i) > a.Criteria.CO2AboveOutdoorPPM
}

// meanAbove is the mean CO2 above outdoors of zones in a state, by known time.
func (a *adviser) meanAbove(zones []int, s running.State) float64 {
	sum, h := 0.0, 0.0
	for _, z := range zones {
		if l := &a.FreshAir.Zones[z].State[s]; l.KnownH > 0 {
			sum, h = sum+l.AboveOutdoorMeanPPM*l.KnownH, h+l.KnownH
		}
	}
	return sum / h
}

// freshDay is the day with most occupied mechanical hours of known CO2 and none
// stale.
func (a *adviser) freshDay(zones []int) string {
	good, bad := make([]float64, len(a.cal.Days)), make([]float64, len(a.cal.Days))
	for _, z := range zones {
		if a.Indoor[z].CO2PPM == nil {
			continue
		}
		mech := a.perDay(z, func(i int) bool {
			return a.Running.Zones[z].State[i] == running.Mech && !math.IsNaN(float64(a.Indoor[z].CO2PPM[i]))
		})
		for d, h := range a.perDay(z, func(i int) bool { return a.stale(z, i) }) {
			good[d] += mech[d]
			bad[d] += h
		}
	}
	best, day := 0.0, -1
	for d := range good {
		if bad[d] == 0 && good[d] >= 1 && good[d] > best {
			best, day = good[d], d
		}
	}
	if day < 0 {
		return ""
	}
	return a.cal.Days[day].Date.String()
}
