package hours

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/running"
	"sashlog/ingest/grid"
)

// Sum adds the record up per zone, month and building.
func Sum(r *Record, g *grid.Grid, cal *calendar.Calendar, run *running.Result) *Summary {
	s := &Summary{Weights: run.Weights, WeightedBy: run.WeightedBy}
	all := func(int) bool { return true }
	for z := range r.ZoneIDs {
		s.Zones = append(s.Zones, r.total(z, all))
	}
	s.Building = weighted(s.Zones, s.Weights)
	seen := map[[2]int]bool{}
	for _, h := range r.Hours {
		key := [2]int{h.Date.Year, int(h.Date.Month)}
		if seen[key] {
			continue
		}
		seen[key] = true
		m := Month{Year: key[0], Month: key[1]}
		for z := range r.ZoneIDs {
			m.Zones = append(m.Zones, r.total(z, func(k int) bool {
				return r.Hours[k].Date.Year == key[0] && int(r.Hours[k].Date.Month) == key[1]
			}))
		}
		m.Building = weighted(m.Zones, s.Weights)
		s.Months = append(s.Months, m)
	}
	s.days(g, cal, run)
	s.CarpetClass = carpet(r, g, s.Weights)
	return s
}

// total sums one zone's rows for which keep is true.
func (r *Record) total(z int, keep func(hour int) bool) Total {
	t := Total{ID: r.ZoneIDs[z], PeopleH: math.NaN()}
	var seconds [NumCols]int64
	for h := range r.Hours {
		if !keep(h) {
			continue
		}
		row := r.Row(z, h)
		for c := range seconds {
			seconds[c] += int64(r.Seconds[c][row])
		}
		t.OverKh += float64(r.Values[VOverKh][row])
		t.UnderKh += float64(r.Values[VUnderKh][row])
		if v := float64(r.Values[VPeopleH][row]); !math.IsNaN(v) {
			if math.IsNaN(t.PeopleH) {
				t.PeopleH = 0
			}
			t.PeopleH += v
		}
	}
	for c := range seconds {
		t.H[c] = float64(seconds[c]) / 3600
	}
	t.PersonH = t.H[COccupied] * r.People[z]
	t.PersonOverH = t.H[COver] * r.People[z]
	t.PersonUnderH = t.H[CUnder] * r.People[z]
	t.bound()
	return t
}

// bound works out every figure's least and greatest value: the unknown hours
// going wholly either way.
func (t *Total) bound() {
	h := &t.H
	vacantOrNot := h[COccupiedUnknown] // could be occupied, and then anything
	suitUnknown := h[CSuitedUnknown]
	stateUnknown := h[CUnjudgedSuited]
	restUnknown := h[CUnjudged] - h[CUnjudgedSuited] // weather unknown, or unsuited and state unknown
	upTo := func(value float64, slack ...float64) Range {
		r := Range{value, value, value + vacantOrNot}
		for _, s := range slack {
			r.High += s
		}
		return r
	}
	t.Occupied = upTo(h[COccupied])
	t.Suited = upTo(h[CSuited], suitUnknown)
	t.SuitedFan = upTo(h[CSuitedFan], h[CSuitedFanUnknown])
	t.Achieved = upTo(h[CAchieved], stateUnknown, suitUnknown)
	t.AchievedOK = upTo(h[CAchievedOK], h[CAchievedUnassessed], stateUnknown, suitUnknown)
	t.Missed = upTo(h[CMissed], stateUnknown, suitUnknown)
	t.NotNeeded = upTo(h[CNotNeeded], stateUnknown, suitUnknown)
	t.IllTimed = upTo(h[CIllTimed], restUnknown)
	t.ClosedUnsuited = upTo(h[CClosedUnsuited], restUnknown)
	t.Unjudged = upTo(h[CUnjudged])
	t.NoOpening = upTo(h[CNoOpening])
	t.Both = upTo(h[CBoth], h[CUnknown])
	t.AchievedShare = shareOf(h[CAchieved], h[CMissed], stateUnknown+suitUnknown+vacantOrNot)
	t.MechFreeShare = shareOf(h[CSuitedPlantOff], h[CSuited]-h[CSuitedPlantOff]-h[CSuitedPlantUnknown],
		h[CSuitedPlantUnknown]+suitUnknown+vacantOrNot)
	t.JudgedShare = math.NaN()
	if base := h[COccupied] - h[CNoOpening]; base > 0 {
		t.JudgedShare = 1 - h[CUnjudged]/base
	}
}

// shareOf is part/(part+rest), and its bounds when unknown goes wholly to rest
// or wholly to part. All NaN when there is nothing to share.
func shareOf(part, rest, unknown float64) Range {
	r := Range{math.NaN(), math.NaN(), math.NaN()}
	if part+rest > 0 {
		r.Value = part / (part + rest)
	}
	if all := part + rest + unknown; all > 0 {
		r.Low, r.High = part/all, (part+unknown)/all
	}
	return r
}

// weighted is the average occupant's total: counted hours are means over zones
// by weight, and the figures follow from them.
func weighted(zones []Total, weights []float64) Total {
	t := Total{ID: "building", PeopleH: math.NaN()}
	for z := range zones {
		for c := range t.H {
			t.H[c] += weights[z] * zones[z].H[c]
		}
		t.OverKh += weights[z] * zones[z].OverKh
		t.UnderKh += weights[z] * zones[z].UnderKh
		// Person-hours are sums over every zone, not means.
		t.PersonH += zones[z].PersonH
		t.PersonOverH += zones[z].PersonOverH
		t.PersonUnderH += zones[z].PersonUnderH
		if v := zones[z].PeopleH; !math.IsNaN(v) {
			if math.IsNaN(t.PeopleH) {
				t.PeopleH = 0
			}
			t.PeopleH += v
		}
	}
	t.bound()
	return t
}

// days counts the days of the period and those with occupied time in any zone.
func (s *Summary) days(g *grid.Grid, cal *calendar.Calendar, run *running.Result) {
	for _, d := range cal.Days {
		from, to := max(d.FromStep, g.PeriodFrom), min(d.ToStep, g.PeriodTo)
		if from >= to {
			continue
		}
		s.Days++
		if occupiedWithin(run, from, to) {
			s.WorkingDays++
		}
	}
}

func occupiedWithin(run *running.Result, from, to int) bool {
	for z := range run.Zones {
		for i := from; i < to; i++ {
			if run.Zones[z].Occupied[i] == running.Occupied {
				return true
			}
		}
	}
	return false
}

// carpet gives the class most people were in, per step of the period; ties go
// to the earlier class.
func carpet(r *Record, g *grid.Grid, weights []float64) []Class {
	out := make([]Class, g.PeriodTo-g.PeriodFrom)
	for k := range out {
		var votes [NumClasses]float64
		for z := range r.Class {
			votes[r.Class[z][g.PeriodFrom+k]] += weights[z]
		}
		best := Class(0)
		for c := range votes {
			if votes[c] > votes[best]+1e-12 {
				best = Class(c)
			}
		}
		out[k] = best
	}
	return out
}
