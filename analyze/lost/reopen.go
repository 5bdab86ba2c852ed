package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

func reopenTest() test {
	return test{
		Test: Test{SlowToReopen, "the plant stopped, or the weather began to suit, and the zone did run open in the end, but later than the delay that counts as slow; " +
			"where people alone move the windows only if the plant ran for most of that time", ourAssumption},
		explain: reopenExplains,
	}
}

func reopenExplains(e *evidence, s *spell) verdict {
	in := e.in
	me := &in.Running.Zones[s.zone]
	opened := e.opensAfter(s)
	if opened < 0 {
		return nothing
	}
	onset, what := e.onset(s, opened)
	if onset < 0 {
		return nothing
	}
	delay := float64(opened-onset) * float64(in.Grid.StepS) / 60
	if delay <= in.Criteria.ReopenDelayMin {
		return nothing
	}
	since, withPlant := 0, 0
	for _, i := range s.missed {
		if i < onset {
			continue
		}
		since++
		if me.State[i] == running.Mech || me.State[i] == running.Both {
			withPlant++
		}
	}
	if in.Site.Zones[s.zone].Windows == site.ManualWindows && 2*withPlant < since {
		return nothing
	}
	return verdict{explains(s, func(i int) bool { return i >= onset }), fmt.Sprintf("%s at %s, the zone ran open from %s, %s later",
		what, clock(int(e.cal.MinuteOfDay[onset])), clock(int(e.cal.MinuteOfDay[opened])), minutes(delay)), -1}
}

// opensAfter is the step at which the zone runs open right after a spell, or
// -1.
func (e *evidence) opensAfter(s *spell) int {
	bridge := e.steps(e.in.Criteria.InterruptionMin)
	state := e.in.Running.Zones[s.zone].State
	for i := s.to; i < min(len(state), s.to+bridge+1); i++ {
		if state[i] == running.Open {
			return i
		}
	}
	return -1
}

// onset is the last moment from which open mode was due: the plant's last stop
// before the opening, else the weather beginning to suit as the spell began.
func (e *evidence) onset(s *spell, opened int) (step int, what string) {
	me := &e.in.Running.Zones[s.zone]
	for i := opened - 1; i > s.from; i-- {
		prev := me.Plant[i-1]
		if me.Plant[i] == uint8(site.PlantOff) && prev != uint8(site.PlantOff) && prev != running.PlantUnknown {
			if delay := float64(opened-i) * float64(e.in.Grid.StepS) / 60; delay > e.in.Criteria.ReopenDelayMin {
				return i, "the plant stopped"
			}
			break
		}
	}
	suit := e.in.Potential.Zones[s.zone].Suit
	before := s.from - 1
	if before >= 0 && before < len(suit) && suit[before] != potential.Suited && suit[before] != potential.SuitUnknown &&
		me.Occupied[before] == running.Occupied {
		words := "the weather began to suit"
		if t := at(e.in.Outdoor.TempC, s.from); !math.IsNaN(t) {
			words += fmt.Sprintf(" (%.1f °C outdoors)", t)
		}
		return s.from, words
	}
	return -1, ""
}
