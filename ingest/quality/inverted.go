package quality

import (
	"fmt"
	"math"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// A contact looks inverted when it says open in the cold and with nobody
// there, and shut when people are there and it is mild. Common practice:
// windows are mostly shut in the cold and at night; the limits are our
// assumption.
const (
	coldC           = 8
	mildLowC        = 16
	mildHighC       = 26
	invertedCold    = 0.85 // open share in the cold
	invertedEmpty   = 0.75 // open share with nobody there, where no cold is logged
	invertedMargin  = 0.10 // less open when used and mild
	invertedHours   = 40   // of evidence each
	co2SupportPPM   = 30
	invertedDoubtly = 0.95
)

// shareOf gathers the open share under a condition.
type shareOf struct{ sum, n float64 }

func (s *shareOf) add(v float32) { s.sum += float64(v); s.n++ }
func (s *shareOf) mean() float64 {
	if s.n == 0 {
		return math.NaN()
	}
	return s.sum / s.n
}

// inverted looks at every contact that still speaks.
func inverted(r *run) {
	r.each(func(i int, p *site.Point, c *grid.Column) {
		if p.Owner != site.OwnerZone {
			return
		}
		var cold, mild, empty, used, co2Open, co2Shut shareOf
		co2 := r.zoneMean(p.Index, site.CO2)
		for k, v := range c.Mean {
			if c.CoveredS[k] == 0 {
				continue
			}
			people := r.scheduled(p.Index, k)
			if people {
				used.add(v)
				if co2 != nil && known(co2[k]) {
					if v >= 0.5 {
						co2Open.add(co2[k])
					} else {
						co2Shut.add(co2[k])
					}
				}
			} else if h := r.minute[k] / 60; h >= 20 || h < 6 || !r.workday(k) {
				empty.add(v)
			}
			if r.outdoor == nil || !known(r.outdoor[k]) {
				continue
			}
			switch t := r.outdoor[k]; {
			case t < coldC:
				cold.add(v)
			case people && t >= mildLowC && t <= mildHighC:
				mild.add(v)
			}
		}
		enough := func(s shareOf) bool { return r.hours(int(s.n)) >= invertedHours }
		if !enough(used) || !enough(empty) {
			return
		}
		byCold := enough(cold) && enough(mild)
		support := 0.0 // CO2 lower while "shut" than while "open": as if it were the other way round
		if enough(co2Open) && enough(co2Shut) {
			support = co2Open.mean() - co2Shut.mean()
		}
		contrast := cold.mean() - mild.mean()
		least := invertedCold
		if !byCold {
			contrast, least = empty.mean()-used.mean(), invertedEmpty
		}
		level := cold.mean()
		if !byCold {
			level = empty.mean()
		}
		if level < least {
			return
		}
		evidence := fmt.Sprintf("open %.0f %% of the time with nobody there and %.0f %% while the zone is used", 100*empty.mean(), 100*used.mean())
		if byCold {
			evidence = fmt.Sprintf("open %.0f %% of the time below %d °C outdoors but only %.0f %% while the zone is used and it is %d to %d °C; %s",
				100*cold.mean(), coldC, 100*mild.mean(), mildLowC, mildHighC, evidence)
		}
		if support != 0 {
			evidence += fmt.Sprintf("; CO2 is %.0f ppm while it says open and %.0f ppm while it says shut", co2Open.mean(), co2Shut.mean())
		}
		do := fmt.Sprintf("look at the window once; if it is the other way round, give points.csv the word logged while the window stands open as open_value (or swap the words under values) for %s", p.ID())
		strong := contrast >= invertedMargin && support > -co2SupportPPM && (byCold || support >= co2SupportPPM)
		if !strong {
			if contrast >= invertedMargin || level >= invertedDoubtly {
				r.add(warn(reading.CheckInverted, p.Index, []int{i}, evidence, do))
			}
			return
		}
		n := r.built.Tally.Void(i, 0, r.grid.N, reading.Inverted)
		r.add(reading.Check{Kind: reading.CheckInverted, Points: []int{i}, Zone: p.Index, Effect: reading.EffectRemoved, Readings: n, Evidence: evidence, DoNext: do})
	}, site.Window)
}

// workday reports whether anybody is scheduled anywhere on the step's day.
func (r *run) workday(step int) bool {
	d := &r.days[r.dayOf[step]]
	return !d.holiday && slices.ContainsFunc(r.site.Occupancy.Times, func(t site.Times) bool { return t.Days[d.weekday] })
}

// zoneMean is the mean of the zone's points of a quantity, nil without any.
func (r *run) zoneMean(zone int, q site.Quantity) []float32 {
	var ps []int
	for i := range r.site.Points {
		p := &r.site.Points[i]
		if p.Owner == site.OwnerZone && p.Index == zone && p.Quantity == q {
			ps = append(ps, i)
		}
	}
	return r.grid.Average(ps, 0.5)
}
