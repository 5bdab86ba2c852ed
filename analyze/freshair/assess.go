package freshair

import (
	"fmt"
	"math"

	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the assessment looks at.
type Input struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	Outdoor  *outdoor.Outdoor
	Indoor   []indoor.Zone
	Running  *running.Result
}

// Assess judges the CO2 of every zone over occupied time and measures air
// change rates where the logs allow it.
func Assess(in Input) *Result {
	r := &Result{
		CurvePPM:    curvePPM(),
		LimitsPPM:   CategoryLimitsPPM,
		OutdoorNote: outdoorNote(in),
		Sentence: "Low CO2 with few people proves little: it shows that little was given off, not that much air came in. " +
			"Air change rates and counted people say more than the level alone.",
	}
	for z := range in.Site.Zones {
		r.Zones = append(r.Zones, assessZone(&in, z, r.CurvePPM))
	}
	return r
}

func outdoorNote(in Input) string {
	o := in.Outdoor
	note := o.CO2Source
	if o.CO2PPM == nil {
		note = fmt.Sprintf("%.0f ppm (%s)", o.CO2DefaultPPM, o.CO2Source)
	}
	return fmt.Sprintf("outdoor CO2: %s; it may be off by %.0f ppm", note, in.Criteria.OutdoorCO2DoubtPPM)
}

func assessZone(in *Input, z int, curve []float64) Zone {
	run, room := &in.Running.Zones[z], &in.Indoor[z]
	out := Zone{HasCO2: room.CO2PPM != nil, FewPeople: true, PeopleMean: math.NaN()}
	var byState [running.NumStates + 1]collector
	people, counted := 0.0, 0
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		if run.Occupied[i] != running.Occupied {
			continue
		}
		if room.People != nil && !math.IsNaN(float64(room.People[i])) {
			people += float64(room.People[i])
			counted++
		}
		ppm := math.NaN()
		if room.CO2PPM != nil {
			ppm = float64(room.CO2PPM[i])
		}
		outdoorPPM := in.Outdoor.OutdoorCO2(i)
		byState[run.State[i]].add(ppm, outdoorPPM)
		byState[running.NumStates].add(ppm, outdoorPPM)
	}
	if counted > 0 {
		out.PeopleMean = people / float64(counted)
		// Without a usual number there is nothing to compare the count with.
		if usual := in.Site.Zones[z].People; usual > 0 {
			out.FewPeople = out.PeopleMean < usual/2
		}
	}
	for s := range byState {
		levels := byState[s].levels(in.Grid.StepH(), in.Criteria.CO2AboveOutdoorPPM)
		if s == int(running.NumStates) {
			out.All = levels
		} else {
			out.State[s] = levels
		}
		out.Curve[s] = byState[s].durations(curve)
	}
	out.AirChange = airChanges(in, z)
	return out
}
