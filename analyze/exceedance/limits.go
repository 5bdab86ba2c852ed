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
	adaptive         comfort.Band // while free-running
	adaptiveModel    Model
	fixed            comfort.Band // while plant conditions the zone
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
// the speed of a fan the zone's people can use, NaN without one; "with air
// movement" is shown for the criteria's speed.
func limitsOfDays(c criteria.Settings, days []outdoor.Day, cat comfort.Category, ownFanMS float64) []dayLimits {
	out := make([]dayLimits, len(days))
	for d := range days {
		l := &out[d]
		l.adaptive, l.adaptiveModel = lineOfDay(c, &days[d], cat)
		l.fixed, l.fixedModel = rangeOfDay(c, &days[d], cat)
		plainC, best := l.adaptive.HighC, c.FanSpeedMS
		if !math.IsNaN(ownFanMS) {
			l.adaptive.HighC = comfort.WithAirMovementC(l.adaptive.HighC, ownFanMS)
			best = math.Max(best, ownFanMS)
			if headlineID(c) == headlineIMAC {
				l.fixed.HighC = l.adaptive.HighC
			}
		}
		l.upperC = l.adaptive.HighC
		l.withFanC = math.Max(l.upperC, comfort.WithAirMovementC(plainC, best))
	}
	return out
}

// Limit settles which comfort model applies in each step of each zone, and its
// limits: adaptive only where people can open windows, while no heating or
// cooling runs and at least AdaptiveAfterH after it stopped (our assumption);
// operative ranges by season elsewhere. Where plant is unknown the operative
// ranges stand in; Count counts such a step as unknown where the adaptive
// limits would judge it otherwise.
func Limit(s *site.Site, c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor, run *running.Result) *Result {
	r := &Result{Zones: make([]Zone, len(s.Zones)), Headline: headlineID(c)}
	l := NewLimiter(s, c, g, out)
	for z := range r.Zones {
		r.Zones[z].Limits = l.Zone(z, freeRunning(c, g, &run.Zones[z]))
	}
	return r
}

// Limiter gives the limits of zones one by one. It is safe for concurrent use.
type Limiter struct {
	c    criteria.Settings
	g    *grid.Grid
	out  *outdoor.Outdoor
	kind []*perDay // by zone
}

// perDay is what zones of one category with the same fan share.
type perDay struct {
	days                  []dayLimits
	upper, withFan, lower []float32
}

// NewLimiter works out what depends on the day.
func NewLimiter(s *site.Site, c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor) *Limiter {
	type kind struct {
		category comfort.Category
		fan      float64
	}
	known := map[kind]*perDay{}
	l := &Limiter{c: c, g: g, out: out, kind: make([]*perDay, len(s.Zones))}
	for z := range s.Zones {
		k := kind{categoryOf(c, &s.Zones[z]), s.Zones[z].FanSpeedMS}
		fan := k.fan
		if math.IsNaN(fan) {
			k.fan = -1 // no fan; NaN would never be found again
		}
		p := known[k]
		if p == nil {
			p = &perDay{days: limitsOfDays(c, out.Days, k.category, fan), upper: make([]float32, g.N), withFan: make([]float32, g.N), lower: make([]float32, g.N)}
			for i := range p.upper {
				d := &p.days[out.DayOf[i]]
				p.upper[i], p.withFan[i], p.lower[i] = float32(d.upperC), float32(d.withFanC), float32(d.adaptive.LowC)
			}
			known[k] = p
		}
		l.kind[z] = p
	}
	return l
}

// Upper returns the adaptive upper limit of the day per step of a zone's kind;
// zones of one kind share the slice.
func (l *Limiter) Upper(z int) []float32 { return l.kind[z].upper }

// Zone returns the limits of one zone, which is free-running in the steps
// marked.
func (l *Limiter) Zone(z int, free []bool) Limits {
	p := l.kind[z]
	limits := limitsOfZone(l.g, l.out, free, p.days)
	limits.UpperOfDayC, limits.WithFanC, limits.LowOfDayC = p.upper, p.withFan, p.lower
	return limits
}

func limitsOfZone(g *grid.Grid, out *outdoor.Outdoor, free []bool, days []dayLimits) Limits {
	l := Limits{Model: make([]Model, g.N), LowC: make([]float32, g.N), HighC: make([]float32, g.N), Free: free}
	for i := 0; i < g.N; i++ {
		d := &days[out.DayOf[i]]
		band, model := d.fixed, d.fixedModel
		if l.Free[i] && d.adaptiveModel != NoModel {
			band, model = d.adaptive, d.adaptiveModel
		}
		if model == NoModel {
			band = comfort.Band{LowC: math.NaN(), HighC: math.NaN()}
		}
		l.Model[i], l.LowC[i], l.HighC[i] = model, float32(band.LowC), float32(band.HighC)
	}
	return l
}

// freeRunning marks the steps in which a zone counts as free-running: its
// people can open windows, and neither heating nor cooling nor plant of
// unknown kind runs or ran within AdaptiveAfterH. Free spells shorter than
// AdaptiveLeastMin stay with the operative range, and the range holds at least
// as long, so that the criterion does not change from step to step.
func freeRunning(c criteria.Settings, g *grid.Grid, run *running.Zone) []bool {
	free := make([]bool, g.N)
	if !run.PeopleCanOpen {
		return free
	}
	steps := func(seconds float64) int { return int(math.Ceil(seconds/float64(g.StepS) - 1e-9)) }
	least := steps(c.AdaptiveLeastMin * 60)
	wait := max(steps(c.AdaptiveAfterH*3600), least-1) // the step that ran is one itself
	since := wait                                      // the record begins as if the plant had been off
	for i := range free {
		switch run.Plant[i] {
		case uint8(site.PlantOff), uint8(site.PlantVent):
			free[i] = since >= wait
			since++
		default:
			since = 0
		}
	}
	for from := 0; from < len(free); {
		to := from + 1
		for to < len(free) && free[to] == free[from] {
			to++
		}
		// A spell cut off by the record's ends may have been long enough.
		if free[from] && to-from < least && from > 0 && to < len(free) {
			clear(free[from:to])
		}
		from = to
	}
	return free
}
