package longterm

import (
	"math"
	"time"

	"sashlog/analyze/comfort"
	"sashlog/analyze/cores"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Assess works out the indices of every zone and the spread between them.
func Assess(in Input) *Result {
	r := &Result{Zones: make([]Zone, len(in.Site.Zones)), Southern: in.Site.Southern()}
	spans := newSpans(&in)
	cores.Each(len(r.Zones), func(z int) { r.Zones[z] = assessZone(&in, z, spans) })
	r.Spread = spreadOf(&in)
	r.roomsWithin(in.Site)
	return r
}

func assessZone(in *Input, z int, spans *spanIndex) Zone {
	room, run, lim := &in.Indoor[z], &in.Running.Zones[z], &in.Exceedance.Zones[z].Limits
	cat := categoryOf(in, z)
	voteLimit := comfort.PMVLimit(cat)
	h := in.Grid.StepH()
	out := Zone{MeanPPDPct: math.NaN()}
	var tm52 comfort.TM52
	dev := spans.counter()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if run.Occupied[i] != running.Occupied {
			continue
		}
		t := math.NaN()
		if room.OperativeC != nil {
			t = float64(room.OperativeC[i])
		}
		day := int(in.Outdoor.DayOf[i])
		if mean := in.Outdoor.Days[day].RunningMeanENC; mean > 10 && mean < 30 || math.IsNaN(mean) {
			tm52.Add(day, comfort.TM52InSeason(int(in.Outdoor.Days[day].Date.Month), in.Site.Southern()), h, t, comfort.TM52MaxC(mean, cat))
		} else {
			out.TM52OutsideH += h // EN 15251's lines end here
		}
		low, high := float64(lim.LowC[i]), float64(lim.HighC[i])
		known := !math.IsNaN(t) && (!math.IsNaN(low) || !math.IsNaN(high))
		over, under := known && milli(t) > milli(high), known && milli(t) < milli(low)
		dev.add(i, known, over || under)
		if !known {
			out.UnknownH += h
			continue
		}
		out.KnownH += h
		middle := (low + high) / 2
		switch {
		case over:
			out.OutsideH.Warm += h
			out.WeightedH.Warm += h * weight(t, high, middle)
		case under:
			out.OutsideH.Cool += h
			out.WeightedH.Cool += h * weight(t, low, middle)
		}
		vote := float64(in.Predicted.Zones[z].Vote[i])
		if math.IsNaN(vote) || in.Predicted.Zones[z].Outside[i] {
			out.NoVoteH += h
			continue
		}
		ppd := comfort.PPD(vote)
		out.VoteH += h
		out.SumPPDPctH += ppd * h
		if w := comfort.WeightByPPD(vote, voteLimit) * h; vote > 0 {
			out.PPDWeightedH.Warm += w
		} else {
			out.PPDWeightedH.Cool += w
		}
	}
	if out.VoteH > 0 {
		out.MeanPPDPct = out.SumPPDPctH / out.VoteH
	}
	if out.TM52 = tm52.Result(); out.TM52.WorstDayKh > 0 {
		out.TM52Date = in.Outdoor.Days[out.TM52.WorstDay].Date
	}
	out.Home = homeOf(in, z, out.TM52)
	out.Deviations = dev.deviations()
	return out
}

// weight is method B's; a limit without a counterpart has no middle, and its
// hours count once.
func weight(t, limit, middle float64) float64 {
	if w := comfort.WeightByTemperature(t, limit, middle); !math.IsNaN(w) {
		return w
	}
	return 1
}

func milli(v float64) float64 { return math.Round(v * 1000) }

func categoryOf(in *Input, z int) comfort.Category {
	name := in.Criteria.Category
	if c := in.Site.Zones[z].Category; c != "" {
		name = c
	}
	if cat, ok := comfort.ParseCategory(name); ok {
		return cat
	}
	return comfort.CategoryII
}

// roomsWithin works out the share of rooms that keep to the allowed deviation.
func (r *Result) roomsWithin(s *site.Site) {
	r.RoomsBy = "floor area"
	for z := range s.Zones {
		if !(s.Zones[z].AreaM2 > 0) {
			r.RoomsBy = "number of zones"
		}
	}
	var all, three, five float64
	for z := range r.Zones {
		o := &r.Zones[z]
		if o.KnownH == 0 {
			continue
		}
		w := 1.0
		if r.RoomsBy == "floor area" {
			w = s.Zones[z].AreaM2
		}
		share := (o.OutsideH.Warm + o.OutsideH.Cool) / o.KnownH
		all += w
		if share <= 0.03 {
			three += w
		}
		if share <= 0.05 {
			five += w
		}
	}
	r.RoomsWithin3, r.RoomsWithin5 = three/all, five/all // NaN when no zone is known
}

// spanIndex knows which day, week, month and period each step lies in.
type spanIndex struct {
	of    [numSpans][]int32 // per day of the calendar
	from  [numSpans][]site.Date
	dayOf []int32
}

func newSpans(in *Input) *spanIndex {
	x := &spanIndex{dayOf: in.Calendar.DayOf}
	days := in.Calendar.Days
	if len(days) == 0 {
		return x
	}
	for s := range x.of {
		x.of[s] = make([]int32, len(days))
		for d, day := range days {
			begins := d == int(in.Calendar.DayOf[in.Grid.PeriodFrom]) || d == 0
			switch Span(s) {
			case Day:
				begins = true
			case Week:
				begins = begins || day.Weekday == time.Monday
			case Month:
				begins = begins || day.Date.Day == 1
			}
			if begins {
				x.from[s] = append(x.from[s], day.Date)
			}
			x.of[s][d] = int32(len(x.from[s]) - 1)
		}
	}
	return x
}

// spanCounter counts one zone's steps per span.
type spanCounter struct {
	x                       *spanIndex
	known, unknown, outside [numSpans][]int32
}

func (x *spanIndex) counter() *spanCounter {
	c := &spanCounter{x: x}
	for s := range x.from {
		n := len(x.from[s])
		c.known[s], c.unknown[s], c.outside[s] = make([]int32, n), make([]int32, n), make([]int32, n)
	}
	return c
}

func (c *spanCounter) add(step int, known, outside bool) {
	day := c.x.dayOf[step]
	for s := range c.known {
		k := c.x.of[s][day]
		switch {
		case !known:
			c.unknown[s][k]++
			continue
		case outside:
			c.outside[s][k]++
		}
		c.known[s][k]++
	}
}

func (c *spanCounter) deviations() []Deviation {
	out := make([]Deviation, numSpans)
	for s := range out {
		d := Deviation{Span: Span(s), WorstShare: math.NaN()}
		for k, known := range c.known[s] {
			if known == 0 || known < c.unknown[s][k] {
				continue
			}
			d.Spans++
			// Shares are decided by counts: 3 % exactly is within 3 %.
			outside := int64(c.outside[s][k]) * 100
			if outside > 3*int64(known) {
				d.Over3++
			}
			if outside > 5*int64(known) {
				d.Over5++
			}
			if share := float64(c.outside[s][k]) / float64(known); !(share <= d.WorstShare) {
				d.WorstShare, d.WorstFrom = share, c.x.from[s][k]
			}
		}
		out[s] = d
	}
	return out
}
