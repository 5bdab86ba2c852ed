package climate

import (
	"math"

	"sashlog/analyze/cores"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
)

// step is one setting of the headline rule and how it is moved. Our choice of
// steps, of the size that practice argues about.
type step struct {
	key, words, unit string
	at               func(*criteria.Settings) *float64
	by               []float64
	least            float64
	// logged reports whether the test is made at all.
	logged func(*Input) bool
	// day tells that the limits of the day change.
	day bool
}

func always(*Input) bool { return true }

var steps = []step{
	{"outdoor_low_c", "coldest outdoor air that suits", "°C", func(c *criteria.Settings) *float64 { return &c.OutdoorLowC }, []float64{-2, 2}, -50, always, false},
	{"rise_k", "margin below the upper limit", "K", func(c *criteria.Settings) *float64 { return &c.RiseK }, []float64{-1, 1}, 0, always, false},
	{"dew_point_max_c", "dampest outdoor air that suits (dew point)", "°C", func(c *criteria.Settings) *float64 { return &c.DewPointMaxC }, []float64{-1, 1}, -50, func(in *Input) bool { return in.Outdoor.DewPointC != nil }, false},
	{"wind_max_m_s", "strongest mean wind that suits", "m/s", func(c *criteria.Settings) *float64 { return &c.WindMaxMS }, []float64{-2, 2}, 0, func(in *Input) bool { return in.Outdoor.WindMS != nil }, false},
	{"rain_dry_min", "time after rain that does not suit", "min", func(c *criteria.Settings) *float64 { return &c.RainDryMin }, []float64{-30, 30}, 0, func(in *Input) bool { return in.Outdoor.RainMMH != nil }, false},
	{"outdoor_pm25_max_ug_m3", "dustiest outdoor air that suits", "µg/m³", func(c *criteria.Settings) *float64 { return &c.OutdoorPM25Max }, []float64{-10, 10}, 0, func(in *Input) bool { return in.Outdoor.PM25 != nil }, false},
	{"min_suited_run_min", "shortest spell that counts", "min", func(c *criteria.Settings) *float64 { return &c.MinSuitedRunMin }, []float64{-30, 30}, 0, always, false},
}

// variant is one set of settings to count the headline by.
type variant struct {
	moved Moved
	c     criteria.Settings
	day   bool
}

func variantsOf(in *Input) []variant {
	var out []variant
	for _, s := range steps {
		if !s.logged(in) {
			continue
		}
		for _, by := range s.by {
			c := in.Criteria
			at := s.at(&c)
			from := *at
			to := math.Max(s.least, from+by)
			if to == from {
				continue
			}
			*at = to
			out = append(out, variant{Moved{Key: s.key, Words: s.words, From: unit(from, s.unit), To: unit(to, s.unit)}, c, s.day})
		}
	}
	if in.Outdoor.DewPointC != nil {
		c := in.Criteria
		c.DewPointMaxC = 100
		out = append(out, variant{Moved{Key: "dew_point_max_c", Words: "dampest outdoor air that suits (dew point)", From: unit(in.Criteria.DewPointMaxC, "°C"), To: "no limit"}, c, false})
	}
	for _, cat := range []string{"I", "II", "III"} {
		if cat == in.Criteria.Category {
			continue
		}
		c := in.Criteria
		c.Category = cat
		out = append(out, variant{Moved{Key: "category", Words: "category of the upper limit (zones with one of their own keep it)", From: in.Criteria.Category, To: cat}, c, true})
	}
	for _, line := range []string{"en16798-1", "ashrae55"} {
		if line == in.Criteria.Headline {
			continue
		}
		c := in.Criteria
		c.Headline = line
		out = append(out, variant{Moved{Key: "headline", Words: "criterion of the upper limit", From: in.Criteria.Headline, To: line}, c, true})
	}
	return out
}

// sensitivity counts the headline anew with each setting moved, one at a time.
func sensitivity(in *Input) []Moved {
	list := variantsOf(in)
	suited, _ := in.suited(in.Criteria, false)
	cores.Each(len(list), func(k int) {
		v := &list[k]
		v.moved.SuitedH, v.moved.UnknownH = in.suited(v.c, v.day)
		v.moved.ChangeH = v.moved.SuitedH - suited
	})
	out := make([]Moved, len(list))
	for k := range list {
		out[k] = list[k].moved
	}
	return out
}

// suited counts the headline's suited hours with other settings; day tells
// that the limits of the day change with them.
func (in *Input) suited(c criteria.Settings, day bool) (suitedH, unknownH float64) {
	upper := func(z int) []float32 { return in.Exceedance.Zones[z].Limits.UpperOfDayC }
	if day {
		upper = exceedance.NewLimiter(in.Site, c, in.Grid, in.Outdoor).Upper
	}
	return in.suitedBelow(c, upper)
}

// suitedBelow counts the headline's suited hours of the average occupant below
// upper limits of the day, which zones may share.
func (in *Input) suitedBelow(c criteria.Settings, upper func(z int) []float32) (suitedH, unknownH float64) {
	headline := potential.NewHeadline(c, in.Grid, in.Outdoor)
	known := map[*float32][]potential.Suit{}
	for z := range in.Running.Zones {
		w := in.Running.Weights[z]
		if w == 0 || in.Running.Zones[z].NoOpening {
			continue
		}
		limits := upper(z)
		suits, ok := known[&limits[0]]
		if !ok {
			suits = headline.Suit(limits)
			known[&limits[0]] = suits
		}
		yes, unknown := in.countSuits(z, suits)
		suitedH += w * yes
		unknownH += w * unknown
	}
	return suitedH, unknownH
}

// countSuits counts the occupied hours of a zone that suited, or may have.
func (in *Input) countSuits(z int, suits []potential.Suit) (yesH, unknownH float64) {
	var count [potential.NumSuits]int
	occupied := in.Running.Zones[z].Occupied
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if occupied[i] == running.Occupied {
			count[suits[i]]++
		}
	}
	h := in.Grid.StepH()
	return float64(count[potential.Suited]) * h, float64(count[potential.SuitUnknown]) * h
}

// headline is the headline rule with the settings in force.
func (in *Input) headline() *potential.Headline {
	return potential.NewHeadline(in.Criteria, in.Grid, in.Outdoor)
}
