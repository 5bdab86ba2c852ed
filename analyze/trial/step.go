package trial

import (
	"fmt"
	"math"
	"slices"
	"sort"

	"sashlog/analyze/changeover"
	"sashlog/analyze/compare"
	"sashlog/analyze/hours"
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
			seen := map[string]bool{}
			for _, l := range sub.Limits() {
				st, ok := stepOf(in, sub, l, plant)
				if !ok || seen[st.ID] {
					continue
				}
				seen[st.ID] = true
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
	case l.Undetermined != "" || math.IsNaN(l.LevelC):
		return st, false
	case l.Zone >= 0 && !l.Above:
		return st, false // a cold room is heated, whatever the limit
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

// beyondK is how far a step lies beyond the limit, negative inside it, NaN
// where unknown or too warm to try.
func (st *Step) beyondK(in *Input, i int) float64 {
	if st.Zone < 0 {
		t := float64(in.Outdoor.TempC[i])
		if st.Above {
			return t - st.NowC
		}
		return st.NowC - t
	}
	op := in.Indoor[st.Zone].OperativeC
	if op == nil {
		return math.NaN()
	}
	t := float64(op[i])
	if t-st.NowC >= 0 && !(t+indoorMarginK <= float64(in.Exceedance.Zones[st.Zone].Limits.UpperOfDayC[i])) {
		return math.NaN()
	}
	return t - st.NowC
}

// weigh works out what lies beyond the limit and what the step would gain.
func (st *Step) weigh(in *Input) {
	stepH := in.Grid.StepH()
	width, inside := math.Abs(st.TrialC-st.NowC), float64(insideK)
	if st.Zone >= 0 {
		inside = 1
	}
	var open, wanted, person float64
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		k := st.beyondK(in, i)
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
	st.GainH, st.GainPersonH = st.StepH*st.OpenInside, person*st.OpenInside
}

// gains is what the step would add to the achieved hours of each calendar day,
// weighted as the comparison weighs zones.
func (st *Step) gains(in *Input) []float64 {
	out := make([]float64, len(in.Calendar.Days))
	width := math.Abs(st.TrialC - st.NowC)
	for d, day := range in.Calendar.Days {
		for i := max(day.FromStep, in.Grid.PeriodFrom); i < min(day.ToStep, in.Grid.PeriodTo); i++ {
			if k := st.beyondK(in, i); !(k >= 0 && k < width) {
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
