package lost

import (
	"math"
	"sort"

	"sashlog/analyze/calendar"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// evidence is what the tests look at.
type evidence struct {
	in    *Input
	cal   *calendar.Calendar
	zones []zoneEvidence
	units []unitEvidence
}

// zoneEvidence is what the whole period shows of one zone.
type zoneEvidence struct {
	Pattern
	runs     []run // of its plant
	released []float32
	setpoint []float32
	// overridden and cycling mark steps; overridden is nil when not logged.
	overridden, cycling []bool
	units               []int // serving it
	peers               []int // see peersOf
}

// unitEvidence is one plant unit.
type unitEvidence struct {
	on    []uint8 // plant state per step, running.PlantUnknown where missing
	runs  []run
	zones []int // served
	calls []Call
	// calling[k] marks the steps at which the k-th served zone calls.
	calling [][]bool
	limit   LimitPattern
}

// run is a stretch of steps with the plant running. Unknown steps neither
// start nor end a run.
type run struct {
	from, to int
	// known: the steps before were known to be off, so that the start is a start.
	known bool
	// offSteps is how long the plant was off before, in steps.
	offSteps int
}

// gapSteps is the longest run of unknown steps a run lives through.
const gapSteps = 12

// plantRuns lists the runs of a plant state series.
func plantRuns(state []uint8) []run {
	var out []run
	off := 0 // known off steps up to here
	open, unsure := false, true
	for i, s := range state {
		switch {
		case s == running.PlantUnknown:
			if open && i-out[len(out)-1].to >= gapSteps {
				open = false
			}
			if !open {
				unsure = true
			}
		case s == uint8(site.PlantOff):
			open = false
			if unsure {
				off, unsure = 0, false
			}
			off++
		default:
			if !open {
				out = append(out, run{from: i, known: !unsure && off > 0, offSteps: off})
				open = true
			}
			out[len(out)-1].to = i + 1
			off, unsure = 0, false
		}
	}
	return out
}

// runAt returns the run that holds a step, or nil.
func runAt(runs []run, i int) *run {
	k := sort.Search(len(runs), func(k int) bool { return runs[k].to > i })
	if k < len(runs) && runs[k].from <= i {
		return &runs[k]
	}
	return nil
}

// gatherUnits reads every plant unit and the zones it serves.
func (e *evidence) gatherUnits() {
	in := e.in
	e.units = make([]unitEvidence, len(in.Site.Plant))
	for u := range e.units {
		unit := &e.units[u]
		for _, id := range in.Site.Plant[u].Serves {
			if z := in.Site.ZoneIndex(id); z >= 0 {
				unit.zones = append(unit.zones, z)
				e.zones[z].units = append(e.zones[z].units, u)
			}
		}
		unit.on = in.Running.UnitState(in.Site, u)
		unit.runs = plantRuns(unit.on)
	}
}

// steps turns minutes into steps, rounded to the nearest.
func (e *evidence) steps(minutes float64) int {
	return int(math.Round(minutes * 60 / float64(e.in.Grid.StepS)))
}

// quantile is Hyndman & Fan type 7 of unsorted values, NaN of none.
func quantile(values []float64, p float64) float64 {
	if len(values) == 0 {
		return math.NaN()
	}
	v := append([]float64(nil), values...)
	sort.Float64s(v)
	h := float64(len(v)-1) * p
	low := int(h)
	if low+1 >= len(v) {
		return v[len(v)-1]
	}
	return v[low] + (h-float64(low))*(v[low+1]-v[low])
}
