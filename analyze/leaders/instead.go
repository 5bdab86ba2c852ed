package leaders

import (
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// leader sums up what a zone's starts did to the others; days are the lost
// hours by day.
func (in *Input) leader(u *unit, z int, starts []int, st *study) (Leader, []float64) {
	l := Leader{Zone: z, Unit: u.index, LimitC: u.callC[z], Starts: len(starts)}
	days := make([]float64, len(in.Calendar.Days))
	h := in.Grid.StepH()
	var own, others []float64
	var day []int32
	var rise []float64
	hour := int(3600 / in.Grid.StepS)
	for _, n := range starts {
		s := u.starts[n]
		own = append(own, st.excess(z, s.FromStep))
		sum, k := 0.0, 0.0
		for _, o := range u.zones {
			if v := st.excess(o, s.FromStep); o != z && !math.IsNaN(v) {
				sum, k = sum+v, k+1
			}
		}
		others = append(others, sum/k)
		day = append(day, in.Calendar.DayOf[s.FromStep])
		if v := at(in.Indoor[z].OperativeC, s.FromStep) - at(in.Indoor[z].OperativeC, s.FromStep-hour); !math.IsNaN(v) {
			rise = append(rise, v)
		}
		for i := s.FromStep; i < s.ToStep; i++ {
			alone := !in.otherReason(u, z, &s, i)
			its := alone || u.calling[z][i] // else the run goes on for somebody else
			for _, o := range u.zones {
				if !in.Record.Class[o][i].Missed() {
					continue
				}
				if o == z {
					if its {
						l.OwnLostH += h
					}
					continue
				}
				l.MostH += h
				if !its {
					continue
				}
				l.LostH += h
				l.LostPersonH += h * in.Site.Zones[o].People
				days[in.Calendar.DayOf[i]] += h
				if alone {
					l.AloneH += h
				}
			}
		}
	}
	rng := stream(in.Seed, "leaders/"+in.Site.Zones[z].ID)
	l.ExcessK, l.OthersExcessK = meanOver(own, day, rng), meanOver(others, day, rng)
	perHour := 0.0
	for _, v := range rise {
		perHour += math.Max(0, v) / float64(len(rise))
	}
	l.Ignored = in.instead(u, z, starts, perHour, func(s *Start, i int) bool { return in.otherReason(u, z, s, i) })
	mean := in.othersMean(u, z)
	moved := latch(mean, u.callC[z], u.calmC[z])
	l.Moved = in.instead(u, z, starts, perHour, func(s *Start, i int) bool { return moved[i] || in.otherReason(u, z, s, i) })
	l.TwoCalls = in.instead(u, z, starts, perHour, func(s *Start, i int) bool {
		calls := 0
		for o := range u.calling {
			if u.calling[o][i] {
				calls++
			}
		}
		return calls >= 2 || in.noRoom(u, s, i)
	})
	return l, days
}

// noRoom reports whether something else than a room keeps a run on.
func (in *Input) noRoom(u *unit, s *Start, i int) bool {
	return in.beyond(u, i) || in.clocked(u, s.FromStep, i) || u.state[i] == uint8(site.PlantHeat)
}

// otherReason reports whether another room, or something else, keeps a run on.
func (in *Input) otherReason(u *unit, z int, s *Start, i int) bool {
	for o, calling := range u.calling {
		if o != z && calling[i] {
			return true
		}
	}
	return in.noRoom(u, s, i)
}

// othersMean is the mean temperature of the unit's other rooms.
func (in *Input) othersMean(u *unit, z int) []float32 {
	out := make([]float32, in.Grid.N)
	for i := range out {
		sum, n := 0.0, 0
		for _, o := range u.zones {
			if v := at(in.Indoor[o].OperativeC, i); o != z && !math.IsNaN(v) {
				sum, n = sum+v, n+1
			}
		}
		out[i] = float32(sum / float64(n)) // NaN of none
	}
	return out
}

// instead replays the runs a zone led with another rule for keeping on.
func (in *Input) instead(u *unit, z int, starts []int, perHour float64, keep func(s *Start, i int) bool) Instead {
	var out Instead
	h := in.Grid.StepH()
	for _, n := range starts {
		s := &u.starts[n]
		if !keep(s, s.FromStep) {
			out.RunsAvoided++
		}
		began := at(in.Indoor[z].OperativeC, s.FromStep)
		free := 0.0 // hours without cooling so far
		for i := s.FromStep; i < s.ToStep; i++ {
			if keep(s, i) {
				free = 0
				continue
			}
			free += h
			for _, o := range u.zones {
				if o != z && in.Record.Class[o][i].Missed() {
					out.FreedH += h
					out.FreedPersonH += h * in.Site.Zones[o].People
				}
			}
			limit := at(in.Exceedance.Zones[z].Limits.UpperOfDayC, i)
			if in.Running.Zones[z].Occupied[i] != running.Occupied || at(in.Indoor[z].OperativeC, i) > limit {
				continue
			}
			if began > limit {
				out.OwnWarmLowH += h
			}
			if began+math.Min(warmestByK, perHour*free) > limit {
				out.OwnWarmHighH += h
			}
		}
	}
	return out
}
