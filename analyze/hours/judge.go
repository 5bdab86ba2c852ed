package hours

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the record is made from.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Exceedance *exceedance.Result
	Potential  *potential.Result
	Calendar   *calendar.Calendar
	Hours      []Hour // of the period, see Clock
}

// judge classifies the steps of one zone.
type judge struct {
	in     *Input
	z      int
	run    *running.Zone
	room   *indoor.Zone
	limits *exceedance.Limits
	suit   []potential.Suit
	airing []bool // steps of openings no longer than a short airing
}

func newJudge(in *Input, z int) *judge {
	j := &judge{in: in, z: z, run: &in.Running.Zones[z], room: &in.Indoor[z],
		limits: &in.Exceedance.Zones[z].Limits, suit: in.Potential.Zones[z].Suit}
	j.airing = shortOpenings(in.Grid, j.run.State, in.Criteria.AiringMin)
	return j
}

// shortOpenings marks the steps of runs of open or both no longer than
// airingMin. A run beside steps of unknown state may have been longer, and is
// not known to be short.
func shortOpenings(g *grid.Grid, state []running.State, airingMin float64) []bool {
	out := make([]bool, len(state))
	longest := int(airingMin*60/float64(g.StepS) + 1e-9)
	isOpen := func(i int) bool { return state[i] == running.Open || state[i] == running.Both }
	for from := 0; from < len(state); from++ {
		if !isOpen(from) {
			continue
		}
		to := from
		for to < len(state) && isOpen(to) {
			to++
		}
		whole := (from == 0 || state[from-1] != running.Unknown) && (to == len(state) || state[to] != running.Unknown)
		if whole && to-from <= longest {
			for i := from; i < to; i++ {
				out[i] = true
			}
		}
		from = to
	}
	return out
}

// feel is what is known of comfort and freshness in a step.
type feel struct{ warm, cool, stale, tempKnown, co2Known bool }

func (j *judge) feel(i int) feel {
	var f feel
	if j.room.OperativeC != nil {
		t, high, low := float64(j.room.OperativeC[i]), float64(j.limits.HighC[i]), float64(j.limits.LowC[i])
		if !math.IsNaN(t) && j.limits.Model[i] != exceedance.NoModel {
			f.tempKnown = true
			f.warm = round3(t) > round3(high)
			f.cool = round3(t) < round3(low)
		}
	}
	if j.room.CO2PPM != nil {
		if v := float64(j.room.CO2PPM[i]); !math.IsNaN(v) {
			f.co2Known = true
			f.stale = round3(v) > round3(j.co2LimitPPM(i))
		}
	}
	return f
}

// co2LimitPPM is the limit in force at a step: outdoor level plus what the
// category allows above it.
func (j *judge) co2LimitPPM(i int) float64 {
	return j.in.Outdoor.OutdoorCO2(i) + j.in.Criteria.CO2AboveOutdoorPPM
}

// class puts one step of the zone into exactly one class.
func (j *judge) class(i int) Class {
	if j.run.Occupied[i] != running.Occupied {
		return NotOccupied
	}
	if j.run.NoOpening {
		return NoOpening
	}
	state := j.run.State[i]
	switch suit := j.suit[i]; {
	case suit == potential.SuitUnknown:
		return Unjudged
	case suit == potential.Suited && state == running.Unknown:
		return UnjudgedSuited
	case suit == potential.Suited:
		return j.suited(i, state)
	case state == running.Unknown:
		return Unjudged
	default:
		return j.unsuited(i, state, suit)
	}
}

// suited classifies a step of suitable weather whose running state is known.
func (j *judge) suited(i int, state running.State) Class {
	f := j.feel(i)
	switch state {
	case running.Open:
		switch {
		case f.warm:
			return AchievedWarm
		case f.cool:
			return AchievedCool
		case f.stale:
			return AchievedStale
		case !f.tempKnown || !f.co2Known:
			return AchievedUnassessed
		}
		return AchievedOK
	case running.Both:
		return MissedBoth
	case running.Mech:
		switch site.PlantState(j.run.Plant[i]) {
		case site.PlantCool:
			return MissedCool
		case site.PlantVent:
			return MissedVent
		case site.PlantHeat:
			return NotNeeded
		}
		switch { // plant of unknown kind in a cool zone is taken to be heating
		case f.cool:
			return NotNeeded
		case !f.tempKnown:
			return UnjudgedSuited
		}
		return MissedUntyped
	}
	// Shut, with the plant off: wanted only when warm or stale. Not needed is
	// said only when everything the zone logs is known, so that a faulty
	// sensor leaves the step unjudged.
	if f.warm || f.stale {
		return MissedShut
	}
	tempSilent := j.room.OperativeC != nil && !f.tempKnown
	co2Silent := j.room.CO2PPM != nil && !f.co2Known
	if tempSilent || co2Silent || (!f.tempKnown && !f.co2Known) {
		return UnjudgedSuited
	}
	return NotNeeded
}

// unsuited classifies a step of unsuitable weather whose state is known.
func (j *judge) unsuited(i int, state running.State, suit potential.Suit) Class {
	f := j.feel(i)
	closed := ClosedUnsuitedFresh
	if f.stale {
		closed = ClosedUnsuitedStale
	}
	if (state != running.Open && state != running.Both) || j.airing[i] {
		return closed
	}
	if suit == potential.TooWarm {
		indoorC := math.NaN()
		if j.room.OperativeC != nil {
			indoorC = float64(j.room.OperativeC[i])
		}
		switch outdoorC := float64(j.in.Outdoor.TempC[i]); {
		case math.IsNaN(indoorC):
			return Unjudged
		case round3(outdoorC) <= round3(indoorC):
			return closed // opening still cools
		}
	}
	return IllTimed
}

func round3(v float64) float64 { return math.Round(v*1000) / 1000 }
