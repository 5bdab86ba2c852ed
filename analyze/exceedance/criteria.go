package exceedance

import (
	"math"

	"sashlog/analyze/comfort"
	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
)

// judge is one criterion applied to one zone: what it says of a step.
type judge struct {
	id, words, source, note string
	calculationOnly         bool
	// band returns the model and limits at a step; ok is false outside the
	// criterion's validity.
	band func(i int) (model string, low, high float64, ok bool)
	// pmv marks the PMV criterion, judged on the vote instead of a temperature.
	pmv *pmvJudge
}

// judgesOf lists the criteria of a zone in the order they are printed.
func judgesOf(c criteria.Settings, out *outdoor.Outdoor, cat comfort.Category, l *Limits, hasAdaptive bool) []judge {
	js := []judge{{
		id: "en16798-1", words: "EN 16798-1 category " + cat.String() + ", the headline: adaptive while free-running, operative range with plant",
		source: "EN 16798-1:2019 Annex B (read in public texts, not checked against the purchased standard)",
		note:   "limits beyond a running mean of 10 to 30 °C are our extension",
		band: func(i int) (string, float64, float64, bool) {
			m := l.Model[i]
			return m.String(), float64(l.LowC[i]), float64(l.HighC[i]), m != NoModel
		},
	}}
	for _, k := range []comfort.Category{comfort.CategoryI, comfort.CategoryII, comfort.CategoryIII} {
		js = append(js, enJudge(out, k, l))
	}
	if hasAdaptive {
		for _, a := range []comfort.Acceptability{comfort.Accept80, comfort.Accept90} {
			js = append(js, ashraeJudge(out, a, l))
		}
	}
	return js
}

// enJudge is EN 16798-1 in one category, without our extensions.
func enJudge(out *outdoor.Outdoor, cat comfort.Category, l *Limits) judge {
	adaptive := make([]comfort.Band, len(out.Days))
	for d := range out.Days {
		adaptive[d] = comfort.EN16798Adaptive(out.Days[d].RunningMeanENC, cat)
	}
	heating, cooling := comfort.OfficeRange(cat, comfort.HeatingSeason), comfort.OfficeRange(cat, comfort.CoolingSeason)
	between := comfort.OfficeRange(cat, comfort.BetweenSeasons)
	return judge{
		id: "en16798-1-" + lower(cat), words: "EN 16798-1 category " + cat.String() + " as published: adaptive within a running mean of 10 to 30 °C, operative ranges with plant",
		source: "EN 16798-1:2019 Annex B (categories I and III of the operative ranges from memory)",
		band: func(i int) (string, float64, float64, bool) {
			b := comfort.Band{LowC: math.NaN(), HighC: math.NaN()}
			switch l.Model[i] {
			case ENAdaptive, ENExtended:
				b = adaptive[out.DayOf[i]]
			case ENHeating:
				b = heating
			case ENCooling:
				b = cooling
			case ENBetween:
				b = between
			}
			return l.Model[i].String(), b.LowC, b.HighC, b.Applies()
		},
	}
}

// ashraeJudge is the adaptive method of ASHRAE 55 in free-running steps.
func ashraeJudge(out *outdoor.Outdoor, a comfort.Acceptability, l *Limits) judge {
	bands := make([]comfort.Band, len(out.Days))
	for d := range out.Days {
		bands[d] = comfort.ASHRAE55Adaptive(out.Days[d].RunningMeanASHRAEC, a)
	}
	id, words := "ashrae55-80", "ASHRAE 55 adaptive, 80 % acceptability, in free-running steps"
	if a == comfort.Accept90 {
		id, words = "ashrae55-90", "ASHRAE 55 adaptive, 90 % acceptability, in free-running steps"
	}
	return judge{
		id: id, words: words, calculationOnly: true,
		source: "ASHRAE 55-2023 (read in public texts)",
		note:   "calculation only: editions before 2023 exclude buildings with mechanical cooling (from memory)",
		band: func(i int) (string, float64, float64, bool) {
			if l.Model[i] != ENAdaptive && l.Model[i] != ENExtended {
				return "", math.NaN(), math.NaN(), false
			}
			b := bands[out.DayOf[i]]
			return "ASHRAE 55 adaptive", b.LowC, b.HighC, b.Applies()
		},
	}
}

func lower(cat comfort.Category) string {
	return map[comfort.Category]string{comfort.CategoryI: "i", comfort.CategoryII: "ii", comfort.CategoryIII: "iii"}[cat]
}
