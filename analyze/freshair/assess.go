package freshair

import (
	"fmt"
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/cores"
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
	// Calendar gives the days a balance is fitted over; nil: 24 h each.
	Calendar *calendar.Calendar
	// Baselines are the offsets of the zones' CO2, by [Baselines]; nil: unknown.
	Baselines []Baseline
}

// offsetDoubtPPM is how far the difference between a zone's reading and outdoor
// air may be off, 95 times in 100: outdoor level and sensor together, or, where
// the offset was taken off, what the weeks leave open.
func (in *Input) offsetDoubtPPM(z int) float64 {
	if in.Baselines != nil && in.Baselines[z].Corrected {
		return math.Max(correctedDoubtPPM, in.Baselines[z].SpreadPPM)
	}
	return math.Hypot(in.Criteria.OutdoorCO2DoubtPPM, in.Criteria.AccuracyCO2PPM)
}

// correctedDoubtPPM is left when the offset was taken off; our assumption.
const correctedDoubtPPM = 20

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
	r.Zones = make([]Zone, len(in.Site.Zones))
	cores.Each(len(r.Zones), func(z int) { r.Zones[z] = assessZone(&in, z, r.CurvePPM) })
	r.RebreathedCaution = rebreathedCaution
	r.Plants = comparePlants(&in, r.Zones)
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
	for s := range out.Rebreathed {
		out.Rebreathed[s] = byState[s].rebreathed()
	}
	if in.Baselines != nil {
		out.Baseline = in.Baselines[z]
	}
	out.Required = requirements(in.Criteria, in.Site.Zones[z].People, in.Site.Zones[z].AreaM2)
	out.airChanges(in, z)
	return out
}
