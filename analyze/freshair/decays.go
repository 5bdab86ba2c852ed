package freshair

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
)

// Rules of a usable decay; our assumptions unless said otherwise.
const (
	decayPointsMin = 3    // ASTM D6245-18 asks for more than two readings
	decayFrom      = 0.90 // of the start: the range that fits best
	decayTo        = 0.37
	decayFloorPPM  = 50   // above outdoors, below it the sensor's error rules
	decayFloor     = 0.10 // of the start, where the usual range has too few readings
	decayR2Min     = 0.90
	decayFallMin   = 0.15 // a decay must lose so much of its start to be seen
	decayLongestH  = 8.0
	peakWithinH    = 2.0 // the last people may leave after occupied time
	shareSteady    = 0.1 // change of the open share that counts as a new state
)

const decayMethod = "fall of CO2 after the room empties: regression of ln(C - C outdoors) against time, from 90 % to 37 % of the start where that holds 3 readings (ASTM E741, ISO 12569, ASTM D6245, at second hand)"

// event is one decay found and fitted. outdoorLow and outdoorHigh are fits with
// the outdoor level off by its doubt, offLow and offHigh with the doubt in the
// sensor's offset on top.
type event struct {
	fit, outdoorLow, outdoorHigh, offLow, offHigh Fit
	from, to                                      int // steps
}

// tally counts, for one running state, the decays found and those that were no
// use, so that the report can say why a rate is missing.
type tally struct {
	events                       []event
	emptied, low, short, unclear int
}

// span is a run of steps [from, to).
type span struct{ from, to int }

// emptySpans lists the runs in which the room was empty after having been
// used, within one steady state of openings and plant. A counter or presence
// sensor says whether it was empty; else the end of occupied time does, and a
// late stay shows as a bad fit.
func emptySpans(in *Input, z int) []span {
	run, room := &in.Running.Zones[z], &in.Indoor[z]
	var spans []span
	used := false // occupied since the last span
	g := in.Grid
	for i := g.PeriodFrom; i < g.PeriodTo; {
		if !empty(run, room.People, room.Presence, i) {
			used = used || run.Occupied[i] == running.Occupied
			i++
			continue
		}
		to := i + 1
		for to < g.PeriodTo && empty(run, room.People, room.Presence, to) && steady(run, i, to) {
			to++
		}
		if used && run.State[i] != running.Unknown {
			spans = append(spans, span{i, to})
			used = false
		}
		// A changed state within the same empty spell starts another span: the
		// level may still be high enough.
		if to < g.PeriodTo && empty(run, room.People, room.Presence, to) {
			used = true
		}
		i = to
	}
	return spans
}

func empty(run *running.Zone, people, presence []float32, i int) bool {
	for _, series := range [][]float32{people, presence} {
		if series != nil && !math.IsNaN(float64(series[i])) {
			return series[i] < 0.05
		}
	}
	return run.Occupied[i] == running.Vacant
}

func steady(run *running.Zone, i, j int) bool {
	if run.State[i] != run.State[j] || run.Plant[i] != run.Plant[j] {
		return false
	}
	a, b := float64(run.OpenShare[i]), float64(run.OpenShare[j])
	return math.IsNaN(a) == math.IsNaN(b) && !(math.Abs(a-b) > shareSteady)
}

// try fits the decay within a span, if there is one.
func (t *tally) try(in *Input, z int, s span) {
	t.emptied++
	g, co2 := in.Grid, in.Indoor[z].CO2PPM
	start, peak := -1, math.Inf(-1)
	for i := s.from; i < min(s.to, s.from+int(peakWithinH/g.StepH())); i++ {
		if above := float64(co2[i]) - in.Outdoor.OutdoorCO2(i); above > peak {
			start, peak = i, above
		}
	}
	if start < 0 || peak < in.Criteria.DecayStartAbovePPM {
		t.low++
		return
	}
	end := min(s.to, start+int(decayLongestH/g.StepH())+1)
	timeH, ppm, outdoorPPM := readings(in, z, span{start, end}, peak, decayFrom, decayTo)
	if len(ppm) < decayPointsMin {
		timeH, ppm, outdoorPPM = readings(in, z, span{start, end}, peak, 1, decayFloor)
	}
	if len(ppm) < decayPointsMin {
		t.short++
		return
	}
	fit, err := FitDecay(timeH, ppm, outdoorPPM)
	fallen := 1 - (ppm[len(ppm)-1]-outdoorPPM)/peak
	if err != nil || fit.R2 < decayR2Min || fit.AirChangePerH <= 0 || fallen < decayFallMin {
		t.unclear++
		return
	}
	doubt := in.Criteria.OutdoorCO2DoubtPPM
	low, errLow := FitDecay(timeH, ppm, outdoorPPM-doubt)
	high, errHigh := FitDecay(timeH, ppm, outdoorPPM+doubt)
	off := in.offsetDoubtPPM(z)
	offLow, errOffLow := FitDecay(timeH, ppm, outdoorPPM-off)
	offHigh, errOffHigh := FitDecay(timeH, ppm, outdoorPPM+off)
	if errLow != nil || errHigh != nil || errOffLow != nil || errOffHigh != nil || !(offLow.AirChangePerH > 0) { // a floor so near outdoors proves nothing
		t.unclear++
		return
	}
	t.events = append(t.events, event{fit, low, high, offLow, offHigh, start, start + int(timeH[len(timeH)-1]/g.StepH()+0.5) + 1})
}

// readings gathers the readings of a span from the share from of the start
// down to the first below the share to, or below the sensor's floor. Unknown
// steps are left out.
func readings(in *Input, z int, s span, peak, from, to float64) (timeH, ppm []float64, outdoorPPM float64) {
	g, co2 := in.Grid, in.Indoor[z].CO2PPM
	outdoorPPM = in.Outdoor.OutdoorCO2(s.from)
	for i := s.from; i < s.to; i++ {
		c := float64(co2[i])
		if math.IsNaN(c) {
			continue
		}
		above := c - outdoorPPM
		// The floor keeps clear of the doubt in the levels.
		if above < to*peak*(1-1e-6) || above < math.Max(decayFloorPPM, in.offsetDoubtPPM(z)+10) {
			break
		}
		if above > from*peak*(1+1e-6) && len(ppm) == 0 {
			continue
		}
		timeH = append(timeH, float64(i-s.from)*g.StepH())
		ppm = append(ppm, c)
	}
	return timeH, ppm, outdoorPPM
}

// why says in one sentence why there is no rate.
func (t *tally) why(in *Input, z int, state running.State, need int) string {
	switch {
	case in.Indoor[z].CO2PPM == nil:
		return "CO2 is not logged in this zone"
	case state == running.Unknown:
		return "the running state is not known"
	case t.emptied == 0:
		return "the room never emptied in this state"
	}
	decays := "decays"
	if len(t.events) == 1 {
		decays = "decay"
	}
	return fmt.Sprintf("%d usable %s, at least %d needed: the room emptied %d times in this state, %d times from under %.0f ppm above outdoors, "+
		"%d times with too few readings before the state changed, %d times without a clear fall",
		len(t.events), decays, need, t.emptied, t.low, in.Criteria.DecayStartAbovePPM, t.short, t.unclear)
}
