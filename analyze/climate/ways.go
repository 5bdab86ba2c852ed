package climate

import (
	"fmt"
	"math"

	"sashlog/analyze/comfort"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
)

// vote is what one way of counting says of one step.
type vote uint8

const (
	no vote = iota
	yes
	unknown
	outside // the way does not reach here: beyond its validity
)

// way is one published way of counting on one record.
type way struct {
	name, words, source string
	votes               []vote
}

// bare is the weather with temperature and humidity alone, which is all that a
// typical year and every way have in common.
func bare(out *outdoor.Outdoor) *outdoor.Outdoor {
	c := *out
	c.RainMMH, c.PM25, c.WindMS, c.WindDirDeg = nil, nil, nil, nil
	return &c
}

// upperOfDay is the adaptive upper limit of the day of the site's category,
// without any fan, per step.
func upperOfDay(c criteria.Settings, r *record) []float32 {
	s := &site.Site{Zones: []site.Zone{{FanSpeedMS: math.NaN()}}}
	return exceedance.NewLimiter(s, c, r.g, r.out).Upper(0)
}

// headlineBare is the headline rule by temperature and humidity alone, runs of
// any length: the rule that a measured and a typical year can share.
func headlineBare(c criteria.Settings, r *record, upper []float32) []vote {
	c.MinSuitedRunMin = 0
	return ofSuits(potential.NewHeadline(c, r.g, bare(r.out)).Suit(upper))
}

func ofSuits(suits []potential.Suit) []vote {
	out := make([]vote, len(suits))
	for i, s := range suits {
		out[i] = ofSuit(s)
	}
	return out
}

func ofSuit(s potential.Suit) vote {
	switch s {
	case potential.Suited:
		return yes
	case potential.SuitUnknown:
		return unknown
	}
	return no
}

// waysOf judges every step of a record by each published way but the headline.
func waysOf(c criteria.Settings, r *record, upper []float32, b HeatBalance, needs []Need, credited []bool) []way {
	published := c
	published.RiseK = 0
	cat, ok := comfort.ParseCategory(c.Category)
	if !ok {
		cat = comfort.CategoryII
	}
	dew := fmt.Sprintf(", dew point at most %g °C", c.DewPointMaxC)
	if r.out.DewPointC == nil {
		dew = ", humidity not logged and not tested"
	}
	heat, night := make([]vote, len(needs)), make([]vote, len(needs))
	needVotes(heat, needs, nil)
	needVotes(night, needs, credited)
	return []way{
		{"published band", fmt.Sprintf("outdoor air from %g °C to the adaptive upper limit of the day, no margin", c.OutdoorLowC) + dew,
			"lower limit from memory: Chen, Tong & Malkawi 2017; upper limit EN 16798-1", headlineBare(published, r, upper)},
		{plainBand, fmt.Sprintf("outdoor air from %g to %g °C", c.BandLowC, c.BandHighC) + dew, "our assumption",
			r.within(c, func(*outdoor.Day) comfort.Band { return comfort.Band{LowC: c.BandLowC, HighC: c.BandHighC} })},
		{adaptiveEN, fmt.Sprintf("outdoor air itself within the adaptive limits of category %s", cat) + dew, "EN 16798-1:2019",
			r.within(c, func(d *outdoor.Day) comfort.Band { return comfort.EN16798Adaptive(d.RunningMeanENC, cat) })},
		{adaptive55, "outdoor air itself within the 80 % limits (calculation only where cooling is installed)" + dew, "ASHRAE 55-2023",
			r.within(c, func(d *outdoor.Day) comfort.Band {
				return comfort.ASHRAE55Adaptive(d.RunningMeanASHRAEC, comfort.Accept80)
			})},
		{heatBalance, fmt.Sprintf("outdoor air from the balance point %.1f °C to where %g air changes per hour no longer hold %g °C", b.BalancePointC(), b.MaxAirChangePerH, b.CoolingC) + dew,
			"from memory: Axley & Emmerich 2002, Emmerich et al. 2011", heat},
		{nightCooling, fmt.Sprintf("the same, and days carried through by the night before with at most %g air changes per hour", b.MaxAirChangePerH),
			"from memory: Emmerich et al. 2011; Artmann et al. 2007", night},
	}
}

// needVotes says what the heat balance says of each step: suited, or credited by
// the night before (nil: no night).
func needVotes(votes []vote, needs []Need, credited []bool) {
	for i, n := range needs {
		switch {
		case credited != nil && credited[i], n.Suited():
			votes[i] = yes
		case n == NeedUnknown:
			votes[i] = unknown
		}
	}
}

// within asks whether outdoor air itself lies within limits of the day and the
// humidity limit. Limits of NaN from known means are outside the validity; from
// an unknown mean they are unknown.
func (r *record) within(c criteria.Settings, limits func(*outdoor.Day) comfort.Band) []vote {
	out := make([]vote, r.g.N)
	bands := make([]comfort.Band, len(r.out.Days))
	for d := range bands {
		bands[d] = limits(&r.out.Days[d])
	}
	for i := range out {
		d := r.out.DayOf[i]
		out[i] = withinBand(float64(r.out.TempC[i]), r.dew(i), bands[d], c.DewPointMaxC)
		if out[i] == outside && math.IsNaN(r.out.Days[d].RunningMeanENC) {
			out[i] = unknown
		}
	}
	return out
}

// dew is the dew point of a step; -Inf where humidity was never logged, so
// that no limit is exceeded.
func (r *record) dew(i int) float64 {
	if r.out.DewPointC == nil {
		return math.Inf(-1)
	}
	return float64(r.out.DewPointC[i])
}

func withinBand(tempC, dewC float64, b comfort.Band, dewMaxC float64) vote {
	switch {
	case math.IsNaN(tempC):
		return unknown
	case math.IsNaN(b.LowC) || math.IsNaN(b.HighC):
		return outside
	case round3(tempC) < round3(b.LowC) || round3(tempC) > round3(b.HighC):
		return no
	case math.IsNaN(dewC):
		return unknown
	case round3(dewC) > round3(dewMaxC):
		return no
	}
	return yes
}

// round3 takes both sides of a limit to 0.001, as everywhere in the analyses.
func round3(v float64) float64 {
	if math.IsInf(v, 0) {
		return v
	}
	return math.Round(v*1000) / 1000
}
