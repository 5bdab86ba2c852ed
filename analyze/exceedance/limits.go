package exceedance

import (
	"math"

	"sashlog/analyze/comfort"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// coolingSeasonFromC and heatingSeasonToC are the running means that part the
// seasons of the operative ranges, as in EN 15251 and EN 16798-1 (from memory).
const (
	heatingSeasonToC   = 10
	coolingSeasonFromC = 15
)

// dayLimits are one category's limits of one day.
type dayLimits struct {
	adaptive         comfort.Band
	extended         bool
	fixed            comfort.Band
	fixedModel       Model
	upperC, withFanC float64
}

// categoryOf is the headline category of a zone.
func categoryOf(c criteria.Settings, z *site.Zone) comfort.Category {
	name := c.Category
	if z.Category != "" {
		name = z.Category
	}
	cat, ok := comfort.ParseCategory(name)
	if !ok {
		return comfort.CategoryII
	}
	return cat
}

// limitsOfDays works out the limits of each day for a category. ownFanMS is
// the speed of a fan the zone's people can use, NaN without one; siteFanMS the
// speed "with air movement" is shown for.
func limitsOfDays(days []outdoor.Day, cat comfort.Category, ownFanMS, siteFanMS float64) []dayLimits {
	out := make([]dayLimits, len(days))
	for d := range days {
		rm := days[d].RunningMeanENC
		l := &out[d]
		l.adaptive, l.extended = comfort.EN16798Extended(rm, cat)
		season, model := comfort.BetweenSeasons, ENBetween
		switch {
		case math.IsNaN(rm):
			model = NoModel
		case rm <= heatingSeasonToC:
			season, model = comfort.HeatingSeason, ENHeating
		case rm >= coolingSeasonFromC:
			season, model = comfort.CoolingSeason, ENCooling
		}
		l.fixedModel, l.fixed = model, comfort.OfficeRange(cat, season)
		best := siteFanMS
		if !math.IsNaN(ownFanMS) {
			l.adaptive.HighC = comfort.WithAirMovementC(l.adaptive.HighC, ownFanMS)
			best = math.Max(best, ownFanMS)
		}
		l.upperC = l.adaptive.HighC
		plain, _ := comfort.EN16798Extended(rm, cat)
		l.withFanC = math.Max(l.upperC, comfort.WithAirMovementC(plain.HighC, best))
	}
	return out
}

// Limit settles which comfort model applies in each step of each zone, and its
// limits: adaptive only where people can open windows, while no heating or
// cooling runs and at least AdaptiveAfterH after it stopped (our assumption);
// operative ranges by season elsewhere. Where plant is unknown the operative
// ranges apply, the narrower of the two.
func Limit(s *site.Site, c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor, run *running.Result) *Result {
	r := &Result{Zones: make([]Zone, len(s.Zones)), Headline: headlineID(c)}
	// Zones of one category with the same fan share what depends on the day.
	type kind struct {
		category comfort.Category
		fan      float64
	}
	type perDay struct {
		days           []dayLimits
		upper, withFan []float32
	}
	known := map[kind]*perDay{}
	for z := range r.Zones {
		k := kind{categoryOf(c, &s.Zones[z]), s.Zones[z].FanSpeedMS}
		fan := k.fan
		if math.IsNaN(fan) {
			k.fan = -1 // no fan; NaN would never be found again
		}
		p := known[k]
		if p == nil {
			p = &perDay{days: limitsOfDays(out.Days, k.category, fan, c.FanSpeedMS), upper: make([]float32, g.N), withFan: make([]float32, g.N)}
			for i := range p.upper {
				d := &p.days[out.DayOf[i]]
				p.upper[i], p.withFan[i] = float32(d.upperC), float32(d.withFanC)
			}
			known[k] = p
		}
		l := limitsOfZone(c, g, out, &run.Zones[z], p.days)
		l.UpperOfDayC, l.WithFanC = p.upper, p.withFan
		r.Zones[z].Limits = l
	}
	return r
}

func limitsOfZone(c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor, run *running.Zone, days []dayLimits) Limits {
	l := Limits{Model: make([]Model, g.N), LowC: make([]float32, g.N), HighC: make([]float32, g.N)}
	free := freeRunning(c, g, run)
	for i := 0; i < g.N; i++ {
		d := &days[out.DayOf[i]]
		band := d.fixed
		l.Model[i] = d.fixedModel
		if free[i] && d.adaptive.Applies() {
			band, l.Model[i] = d.adaptive, ENAdaptive
			if d.extended {
				l.Model[i] = ENExtended
			}
		}
		if l.Model[i] == NoModel {
			band = comfort.Band{LowC: math.NaN(), HighC: math.NaN()}
		}
		l.LowC[i], l.HighC[i] = float32(band.LowC), float32(band.HighC)
	}
	return l
}

// freeRunning marks the steps in which a zone counts as free-running: its
// people can open windows, and neither heating nor cooling nor plant of
// unknown kind runs or ran within AdaptiveAfterH.
func freeRunning(c criteria.Settings, g *grid.Grid, run *running.Zone) []bool {
	free := make([]bool, g.N)
	if !run.PeopleCanOpen {
		return free
	}
	wait := int(math.Ceil(c.AdaptiveAfterH*3600/float64(g.StepS) - 1e-9))
	since := wait // the record begins as if the plant had been off
	for i := range free {
		switch run.Plant[i] {
		case uint8(site.PlantOff), uint8(site.PlantVent):
			free[i] = since >= wait
			since++
		default:
			since = 0
		}
	}
	return free
}

func headlineID(c criteria.Settings) string {
	if c.Headline != "" {
		return c.Headline
	}
	return "en16798-1"
}
