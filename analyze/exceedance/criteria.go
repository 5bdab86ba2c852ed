package exceedance

import (
	"fmt"
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
	// other returns the limits that would hold if the zone were free-running;
	// nil where the criterion has only one line.
	other func(i int) (low, high float64)
	// votes marks a criterion judged on predicted votes instead of temperatures.
	votes *votes
}

// judgesOf lists the criteria of a zone in the order they are printed. fanMS is
// the speed of a fan the zone's people can use, NaN without one: it raises the
// upper adaptive limits of EN 16798-1 and ASHRAE 55.
func judgesOf(c criteria.Settings, out *outdoor.Outdoor, cat comfort.Category, l *Limits, hasAdaptive bool, fanMS float64) []judge {
	withFan := func(b comfort.Band) comfort.Band {
		if !math.IsNaN(fanMS) {
			b.HighC = comfort.WithAirMovementC(b.HighC, fanMS)
		}
		return b
	}
	js := []judge{headlineJudge(c, cat, l)}
	for _, k := range []comfort.Category{comfort.CategoryI, comfort.CategoryII, comfort.CategoryIII} {
		js = append(js, enJudge(out, k, l, withFan))
	}
	if hasAdaptive {
		js = append(js, freeJudge(out, l, "en15251-"+lower(cat), "EN 15251 category "+cat.String()+" adaptive, in free-running steps; for comparison with older studies",
			"EN 15251:2007 Annex A.2, withdrawn (range of the lower limits from memory)", "EN 15251 adaptive", false,
			func(d *outdoor.Day) comfort.Band { return comfort.EN15251Adaptive(d.RunningMeanENC, cat) }))
		for _, a := range []comfort.Acceptability{comfort.Accept80, comfort.Accept90} {
			js = append(js, freeJudge(out, l, fmt.Sprintf("ashrae55-%d", a), fmt.Sprintf("ASHRAE 55 adaptive, %d %% acceptability, in free-running steps", a),
				"ASHRAE 55-2023 (read in public texts)", "ASHRAE 55 adaptive", true,
				func(d *outdoor.Day) comfort.Band { return withFan(comfort.ASHRAE55Adaptive(d.RunningMeanASHRAEC, a)) }))
		}
		js = append(js, imacJudge(out))
	}
	return js
}

// headlineJudge is the criterion the headline figures follow.
func headlineJudge(c criteria.Settings, cat comfort.Category, l *Limits) judge {
	j := judge{id: headlineID(c), band: func(i int) (string, float64, float64, bool) {
		m := l.Model[i]
		return m.String(), float64(l.LowC[i]), float64(l.HighC[i]), m != NoModel
	}}
	if j.id != headlineIMAC {
		j.other = func(i int) (float64, float64) { return float64(l.LowOfDayC[i]), float64(l.UpperOfDayC[i]) }
	}
	const ranges = "; EN 16798-1 operative range with plant"
	switch j.id {
	case headlineASHRAE55:
		j.words = fmt.Sprintf("ASHRAE 55, %d %% acceptability, the headline: adaptive while free-running%s", c.ASHRAE55Percent, ranges)
		j.source = "ASHRAE 55-2023 (read in public texts)"
		j.note = "limits beyond a prevailing mean of 10 to 33.5 °C are our extension; calculation only: editions before 2023 exclude buildings with mechanical cooling (from memory)"
		j.calculationOnly = true
	case headlineEN15251:
		j.words = "EN 15251 category " + cat.String() + ", the headline: adaptive while free-running" + ranges
		j.source = "EN 15251:2007 Annex A.2, withdrawn; EN 16798-1:2019 Annex B"
		j.note = "no lower limit between a running mean of 10 and 15 °C; limits beyond 10 to 30 °C are our extension"
	case headlineIMAC:
		j.words = "Indian mixed-mode model, 90 % acceptability, the headline: one line for both running states"
		j.source = "Manu et al. 2016, Building and Environment 98:55"
		j.note = "limits beyond a 30-day mean of 13 to 38.5 °C are our extension"
	default:
		j.words = "EN 16798-1 category " + cat.String() + ", the headline: adaptive while free-running, operative range with plant"
		j.source = "EN 16798-1:2019 Annex B (read in public texts, not checked against the purchased standard)"
		j.note = "limits beyond a running mean of 10 to 30 °C are our extension"
	}
	return j
}

// enJudge is EN 16798-1 in one category, without our extensions.
func enJudge(out *outdoor.Outdoor, cat comfort.Category, l *Limits, withFan func(comfort.Band) comfort.Band) judge {
	type ofDay struct {
		free, fixed comfort.Band
		model       Model
	}
	days := make([]ofDay, len(out.Days))
	for d := range out.Days {
		season, model := seasonOf(out.Days[d].RunningMeanENC)
		days[d] = ofDay{withFan(comfort.EN16798Adaptive(out.Days[d].RunningMeanENC, cat)), comfort.OfficeRange(cat, season), model}
	}
	return judge{
		id: "en16798-1-" + lower(cat), words: "EN 16798-1 category " + cat.String() + " as published: adaptive within a running mean of 10 to 30 °C, operative ranges with plant",
		source: "EN 16798-1:2019 Annex B (categories I and III of the operative ranges from memory)",
		other: func(i int) (float64, float64) {
			b := days[out.DayOf[i]].free
			return b.LowC, b.HighC
		},
		band: func(i int) (string, float64, float64, bool) {
			d := &days[out.DayOf[i]]
			switch {
			case d.model == NoModel:
				return "", math.NaN(), math.NaN(), false
			case l.Free[i]:
				return ENAdaptive.String(), d.free.LowC, d.free.HighC, d.free.Applies()
			}
			return d.model.String(), d.fixed.LowC, d.fixed.HighC, true
		},
	}
}

// freeJudge is an adaptive method in free-running steps, within its range.
func freeJudge(out *outdoor.Outdoor, l *Limits, id, words, source, model string, calculationOnly bool, of func(*outdoor.Day) comfort.Band) judge {
	bands := make([]comfort.Band, len(out.Days))
	for d := range out.Days {
		bands[d] = of(&out.Days[d])
	}
	j := judge{id: id, words: words, source: source, calculationOnly: calculationOnly}
	if calculationOnly {
		j.note = "calculation only: editions before 2023 exclude buildings with mechanical cooling (from memory)"
	}
	j.band = func(i int) (string, float64, float64, bool) {
		if !l.Free[i] {
			return "", math.NaN(), math.NaN(), false
		}
		b := bands[out.DayOf[i]]
		return model, b.LowC, b.HighC, b.Applies()
	}
	return j
}

// imacJudge is the Indian mixed-mode model: one line for both running states,
// so that periods compare whatever ran.
func imacJudge(out *outdoor.Outdoor) judge {
	bands := make([]comfort.Band, len(out.Days))
	for d := range out.Days {
		bands[d] = comfort.IMAC(out.Days[d].Mean30DaysC, comfort.IMACMixedMode)
	}
	return judge{
		id: "imac-mm-90", words: "Indian mixed-mode model, 90 % acceptability, in every running state",
		source: "Manu et al. 2016, Building and Environment 98:55 (read in public texts)",
		note:   "found in Indian offices; here the line that does not depend on the running state",
		band: func(i int) (string, float64, float64, bool) {
			b := bands[out.DayOf[i]]
			return IMACMixedMode.String(), b.LowC, b.HighC, b.Applies()
		},
	}
}

func lower(cat comfort.Category) string {
	return map[comfort.Category]string{comfort.CategoryI: "i", comfort.CategoryII: "ii", comfort.CategoryIII: "iii"}[cat]
}
