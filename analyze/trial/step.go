package trial

import (
	"fmt"
	"math"
	"slices"
	"sort"

	"sashlog/analyze/changeover"
	"sashlog/analyze/compare"
	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// steps lists what could be tried, most gain first.
func steps(in *Input) []Step {
	var out []Step
	add := func(list []changeover.Subject, plant bool) {
		for i := range list {
			sub := &list[i]
			if !plant && in.Running.Zones[sub.Index].ServedByPlant {
				continue // its plant unit stands for it
			}
			limits := limitsOf(in, sub, plant)
			for k, l := range limits {
				st, ok := stepOf(in, sub, l, plant)
				if !ok {
					continue
				}
				st.others = slices.Delete(slices.Clone(limits), k, k+1)
				st.weigh(in)
				if st.GainH >= LeastGainH {
					out = append(out, st)
				}
			}
		}
	}
	add(in.Changeover.Units, true)
	add(in.Changeover.Zones, false)
	sort.SliceStable(out, func(i, j int) bool { return out[i].GainH > out[j].GainH })
	return out
}

// leastFollowed is how often a unit must have started upon a room's call.
const leastFollowed = 10

// limitsOf are the limits a subject shows: outdoors those of the changeover fits,
// indoors the temperatures at which rooms start the unit.
func limitsOf(in *Input, sub *changeover.Subject, plant bool) []changeover.Limit {
	var out []changeover.Limit
	has := func(l changeover.Limit) bool {
		return slices.ContainsFunc(out, func(o changeover.Limit) bool { return o.Zone == l.Zone && o.Above == l.Above })
	}
	for _, l := range sub.Limits() {
		if l.Zone < 0 && l.Undetermined == "" && !math.IsNaN(l.LevelC) && !has(l) {
			out = append(out, l)
		}
	}
	if plant && sub.Index < len(in.Lost.Units) {
		for _, c := range in.Lost.Units[sub.Index].Calls {
			if !math.IsNaN(c.AboveC) && (c.Logged || c.Followed >= leastFollowed) {
				out = append(out, changeover.Limit{Zone: c.Zone, Above: true, LevelC: c.AboveC, LowC: math.NaN(), HighC: math.NaN()})
			}
		}
	}
	return out
}

// stepOf is how far a trial would move a limit; false when it should not.
func stepOf(in *Input, sub *changeover.Subject, l changeover.Limit, plant bool) (Step, bool) {
	st := Step{Subject: sub.ID, IsPlant: plant, Index: sub.Index, Zone: l.Zone, Above: l.Above, NowC: l.LevelC, LowC: l.LowC, HighC: l.HighC}
	where, side := "outdoors", "below"
	if l.Zone >= 0 {
		where = in.Site.Zones[l.Zone].ID
	}
	if l.Above {
		side = "above"
	}
	st.ID = fmt.Sprintf("%s/%s-%s", sub.ID, where, side)
	switch {
	case l.Above:
		st.TrialC = l.LevelC + StepK
	default:
		// Colder air than the criteria allow is not tried.
		st.TrialC = math.Max(l.LevelC-StepK, in.Criteria.OutdoorLowC)
		if st.TrialC > l.LevelC-StepK/2.0 {
			return st, false
		}
	}
	var reached []string
	if plant {
		reached = in.Site.Plant[sub.Index].Serves
	} else {
		reached = []string{sub.ID}
	}
	for z := range in.Site.Zones {
		def := &in.Site.Zones[z]
		through := slices.ContainsFunc(def.Openings.Through, func(id string) bool { return slices.Contains(reached, id) })
		switch {
		case in.Running.Zones[z].NoOpening:
		case slices.Contains(reached, def.ID):
			st.Zones = append(st.Zones, z)
		case !through: // neither reached nor untouched
			st.Untouched = append(st.Untouched, z)
		}
	}
	return st, len(st.Zones) > 0
}

// passed reports whether another limit is passed at a step.
func (st *Step) passed(in *Input, i int) bool {
	for _, o := range st.others {
		t := math.NaN()
		if o.Zone < 0 {
			t = float64(in.Outdoor.TempC[i])
		} else if op := in.Indoor[o.Zone].OperativeC; op != nil {
			t = float64(op[i])
		}
		if o.Above && t > o.LevelC || !o.Above && t < o.LevelC {
			return true
		}
	}
	return false
}

// reach works out, per step, how far it lies beyond the limit (negative inside
// it); NaN where unknown, where another limit is passed too, or where the step
// would be no trial.
func (st *Step) reach(in *Input) {
	st.beyondK = make([]float32, in.Grid.N)
	for i := range st.beyondK {
		st.beyondK[i] = float32(math.NaN())
	}
	if st.Zone >= 0 {
		st.reachIndoors(in)
		return
	}
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if st.passed(in, i) {
			continue
		}
		if st.beyondK[i] = in.Outdoor.TempC[i] - float32(st.NowC); !st.Above {
			st.beyondK[i] = -st.beyondK[i]
		}
	}
}

// reachIndoors: a room that calls is cooled at once, so that its temperature
// says nothing while the plant runs; what counts is a run that its call began,
// until another limit is passed.
func (st *Step) reachIndoors(in *Input) {
	op := in.Indoor[st.Zone].OperativeC
	state := in.Running.UnitState(in.Site, st.Index)
	if op == nil || len(state) < in.Grid.N {
		return
	}
	upper := in.Exceedance.Zones[st.Zone].Limits.UpperOfDayC
	mine := false
	for i := max(1, in.Grid.PeriodFrom); i < in.Grid.PeriodTo; i++ {
		on := state[i] != uint8(site.PlantOff) && state[i] != running.PlantUnknown
		k := float64(max(op[i], op[i-1])) - st.NowC
		switch {
		case !on:
			if mine = false; k < 0 && !st.passed(in, i) {
				st.beyondK[i] = float32(k)
			}
			continue
		case state[i-1] == uint8(site.PlantOff):
			mine = k >= -callTouchK && state[i] != uint8(site.PlantHeat) && st.TrialC+indoorMarginK <= float64(upper[i])
		}
		if mine = mine && !st.passed(in, i); mine {
			st.beyondK[i] = 0
		}
	}
}

// weigh works out what lies beyond the limit and what the step would gain.
func (st *Step) weigh(in *Input) {
	st.reach(in)
	stepH := in.Grid.StepH()
	width, inside := math.Abs(st.TrialC-st.NowC), float64(insideK)
	if st.Zone >= 0 {
		inside = 1
	}
	var open, wanted, person float64
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		k := float64(st.beyondK[i])
		if math.IsNaN(k) || k < -inside {
			continue
		}
		for _, z := range st.Zones {
			c := in.Record.Class[z][i]
			switch {
			case k < 0 && c.Achieved():
				open += stepH
				wanted += stepH
			case k < 0 && c.Missed():
				wanted += stepH
			case k >= 0 && c.Missed():
				st.BeyondH += stepH
				if k < width {
					st.StepH += stepH
					person += stepH * in.Site.Zones[z].People
				}
			}
		}
	}
	if wanted > 0 {
		st.OpenInside = open / wanted
	}
	if st.Zone >= 0 {
		st.OpenInside *= indoorShare
	}
	st.GainH, st.GainPersonH = st.StepH*st.OpenInside, person*st.OpenInside
}

// gains is what the step would add to the achieved hours of each calendar day,
// weighted as the comparison weighs zones.
func (st *Step) gains(in *Input) []float64 {
	out := make([]float64, len(in.Calendar.Days))
	width := math.Abs(st.TrialC - st.NowC)
	for d, day := range in.Calendar.Days {
		for i := max(day.FromStep, in.Grid.PeriodFrom); i < min(day.ToStep, in.Grid.PeriodTo); i++ {
			if k := float64(st.beyondK[i]); !(k >= 0 && k < width) {
				continue
			}
			for _, z := range st.Zones {
				if in.Record.Class[z][i].Missed() {
					out[d] += compare.WeightOf(in.Site, z) * in.Grid.StepH() * st.OpenInside
				}
			}
		}
	}
	return out
}

// overShare is how much of the occupied time of the step's zones was too warm
// between two days, NaN when nobody was there.
func (st *Step) overShare(in *Input, from, to int) (warm, stale float64) {
	var occupied, over, co2 float64
	for h := from; h < to; h++ {
		for _, z := range st.Zones {
			row := in.Record.Row(z, h)
			occupied += float64(in.Record.Seconds[hours.COccupied][row])
			over += float64(in.Record.Seconds[hours.COver][row])
			co2 += float64(in.Record.Seconds[hours.CCO2Over][row])
		}
	}
	return over / occupied, co2 / occupied
}
