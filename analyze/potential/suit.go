package potential

import (
	"fmt"
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Judge settles when the weather suited each zone, by the headline rule and
// its variants, and counts suitable hours by each method.
func Judge(s *site.Site, c criteria.Settings, g *grid.Grid, cal *calendar.Calendar, out *outdoor.Outdoor, run *running.Result, exc *exceedance.Result) *Result {
	w := newWeather(c, g, out)
	r := &Result{Tested: tested(out, c)}
	r.Zones = w.zones(s, run, exc, func(zone *Zone, l *exceedance.Limits) {
		zone.Raw = w.verdicts(l.UpperOfDayC, true)
		zone.Suit = w.dropBrief(zone.Raw)
		zone.Fan = w.dropBrief(w.verdicts(l.WithFanC, true))
		zone.AnyHumidity = w.dropBrief(w.verdicts(l.UpperOfDayC, false))
	})
	r.Methods = w.methods(s, run, r.Zones)
	r.Typical = typical(s, c, g, cal, out)
	return r
}

// Headline gives the part of Judge that the classes of hours rest on: when the
// weather suited, by the headline rule, a zone with the upper limits of a day.
// It is safe for concurrent use.
type Headline struct{ w *weather }

// NewHeadline prepares the outdoor side of the rule.
func NewHeadline(c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor) *Headline {
	return &Headline{newWeather(c, g, out)}
}

// Suit judges every step against the upper comfort limit of its day.
func (h *Headline) Suit(upperOfDayC []float32) []Suit {
	return h.w.dropBrief(h.w.verdicts(upperOfDayC, true))
}

// zones fills the zones with openings; those with the same limits share their
// verdicts.
func (w *weather) zones(s *site.Site, run *running.Result, exc *exceedance.Result, fill func(*Zone, *exceedance.Limits)) []Zone {
	out := make([]Zone, len(s.Zones))
	same := map[string]*Zone{}
	for z := range out {
		if run.Zones[z].NoOpening {
			continue
		}
		key := fmt.Sprintf("%s %v", s.Zones[z].Category, s.Zones[z].FanSpeedMS)
		if known, ok := same[key]; ok {
			out[z] = *known
			continue
		}
		fill(&out[z], &exc.Zones[z].Limits)
		same[key] = &out[z]
	}
	return out
}

// weather is the outdoor side of the rule, worked out once per step.
type weather struct {
	c   criteria.Settings
	g   *grid.Grid
	out *outdoor.Outdoor
	// wet holds 1 while it rains and until RainDryMin after, 0 when known dry,
	// 2 when unknown; nil when rain is not logged.
	wet []uint8
}

func newWeather(c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor) *weather {
	return &weather{c: c, g: g, out: out, wet: wetness(c, g, out.RainMMH)}
}

// wetness follows rain and the time after it.
func wetness(c criteria.Settings, g *grid.Grid, rain []float32) []uint8 {
	if rain == nil {
		return nil
	}
	wet := make([]uint8, g.N)
	after := int(math.Ceil(c.RainDryMin*60/float64(g.StepS) - 1e-9))
	sinceRain, sinceUnknown := after+1, after+1
	for i, v := range rain {
		switch {
		case math.IsNaN(float64(v)):
			sinceUnknown = 0
		case v > 0:
			sinceRain = 0
		}
		switch {
		case sinceRain <= after:
			wet[i] = 1
		case sinceUnknown <= after:
			wet[i] = 2
		}
		sinceRain++
		sinceUnknown++
	}
	return wet
}

// verdicts judges every step against an upper comfort limit; of several failing
// tests the first in the order of Suit names the step, a failing test outranks
// an unknown one.
func (w *weather) verdicts(upperC []float32, humidity bool) []Suit {
	out := make([]Suit, w.g.N)
	for i := range out {
		out[i] = w.verdict(i, float64(upperC[i])-w.c.RiseK, humidity)
	}
	return out
}

func (w *weather) verdict(i int, highC float64, humidity bool) Suit {
	unknown := false
	// test notes a comparison of a logged quantity with its limit.
	fails := func(series []float32, limit float64, above bool) bool {
		v := float64(series[i])
		if math.IsNaN(v) || math.IsNaN(limit) {
			unknown = true
			return false
		}
		if above {
			return round3(v) > round3(limit)
		}
		return round3(v) < round3(limit)
	}
	if w.out.TempC == nil {
		return SuitUnknown
	}
	if fails(w.out.TempC, w.c.OutdoorLowC, false) {
		return TooCold
	}
	if fails(w.out.TempC, highC, true) {
		switch w.verdict(i, math.Inf(1), humidity) {
		case Suited, SuitUnknown:
			return TooWarm
		}
		return TooWarmAndMore
	}
	if humidity && w.out.DewPointC != nil && fails(w.out.DewPointC, w.c.DewPointMaxC, true) {
		return TooHumid
	}
	if w.out.WindMS != nil && fails(w.out.WindMS, w.c.WindMaxMS, true) {
		return TooWindy
	}
	if w.wet != nil {
		switch w.wet[i] {
		case 1:
			return Rain
		case 2:
			unknown = true
		}
	}
	if w.out.PM25 != nil && fails(w.out.PM25, w.c.OutdoorPM25Max, true) {
		return Polluted
	}
	if unknown {
		return SuitUnknown
	}
	return Suited
}

// dropBrief turns runs of suited steps shorter than the minimum into TooBrief;
// a short run beside unknown weather, or cut by the record's ends, is unknown.
func (w *weather) dropBrief(raw []Suit) []Suit {
	out := append([]Suit(nil), raw...)
	least := int(math.Ceil(w.c.MinSuitedRunMin*60/float64(w.g.StepS) - 1e-9))
	for from := 0; from < len(out); {
		if raw[from] != Suited {
			from++
			continue
		}
		to := from
		for to < len(raw) && raw[to] == Suited {
			to++
		}
		if to-from < least {
			verdict := TooBrief
			if from == 0 || to == len(raw) || raw[from-1] == SuitUnknown || raw[to] == SuitUnknown {
				verdict = SuitUnknown
			}
			for i := from; i < to; i++ {
				out[i] = verdict
			}
		}
		from = to
	}
	return out
}

func round3(v float64) float64 { return math.Round(v*1000) / 1000 }

// tested says which tests the logs allowed.
func tested(out *outdoor.Outdoor, c criteria.Settings) []string {
	var t []string
	say := func(have bool, name, limit string) {
		if have {
			t = append(t, name+": tested, "+limit)
		} else {
			t = append(t, name+": not logged, not tested")
		}
	}
	say(out.TempC != nil, "outdoor temperature", fmt.Sprintf("from %g °C to the upper comfort limit of the day less %g K", c.OutdoorLowC, c.RiseK))
	say(out.HumidityLogged, "humidity", fmt.Sprintf("dew point at most %g °C", c.DewPointMaxC))
	say(out.WindMS != nil, "wind", fmt.Sprintf("mean wind at most %g m/s", c.WindMaxMS))
	say(out.RainMMH != nil, "rain", fmt.Sprintf("no rain, nor the %g minutes after it", c.RainDryMin))
	say(out.PM25 != nil, "pollution", fmt.Sprintf("PM2.5 at most %g µg/m³", c.OutdoorPM25Max))
	return t
}
