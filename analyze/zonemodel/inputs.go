package zonemodel

import (
	"fmt"
	"math"
	"strings"
	"time"

	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/internal/physics/sun"
)

// stepS is the length of a model step. Steps of the grid divide it.
const stepS = 900

// groundReflectance is the usual value.
const groundReflectance = 0.2

// weather is what all zones share, on the model's steps.
type weather struct {
	n, ratio         int // model steps; grid steps in each
	outdoorC, windMS []float64
	global           []float64      // W/m², as measured or of a clear sky
	sky              []sun.Position // nil without coordinates
	irradiance       []sun.Irradiance
	sunSource        string
	sunKnown         bool
	windFilled       float64 // share of steps without a reading, the mean stands in
	windKnown        bool
	dayOf            []int32
	onFacade         map[string][]float64
}

// aggregate means a grid series over model steps; NaN where less than half of a
// step is known.
func aggregate(in []float32, n, ratio int) []float64 {
	out := make([]float64, n)
	for k := range out {
		sum, known := 0.0, 0
		for _, v := range in[k*ratio : (k+1)*ratio] {
			if v == v {
				sum += float64(v)
				known++
			}
		}
		out[k] = math.NaN()
		if known*2 > ratio || known == ratio {
			out[k] = sum / float64(known)
		}
	}
	return out
}

func gatherWeather(in *Input) *weather {
	ratio := max(1, int(stepS/in.Grid.StepS))
	w := &weather{n: in.Grid.N / ratio, ratio: ratio, onFacade: map[string][]float64{}}
	w.dayOf = make([]int32, w.n)
	for k := range w.dayOf {
		w.dayOf[k] = in.Calendar.DayOf[k*ratio]
	}
	w.outdoorC = aggregate(in.Outdoor.TempC, w.n, ratio)
	if in.Outdoor.WindMS != nil {
		w.windMS = aggregate(in.Outdoor.WindMS, w.n, ratio)
		w.fillWind()
	}
	w.gatherSun(in)
	return w
}

func (w *weather) fillWind() {
	sum, known := 0.0, 0
	for _, v := range w.windMS {
		if v == v {
			sum += v
			known++
		}
	}
	if w.windKnown = known*10 > 9*w.n; !w.windKnown {
		return
	}
	w.windFilled = 1 - float64(known)/float64(w.n)
	for k, v := range w.windMS {
		if v != v {
			w.windMS[k] = sum / float64(known)
		}
	}
}

func (w *weather) gatherSun(in *Input) {
	s := in.Site
	placed := !math.IsNaN(s.LatitudeDeg) && !math.IsNaN(s.LongitudeDeg)
	if placed {
		w.sky = make([]sun.Position, w.n)
		for k := range w.sky {
			mid := in.Grid.StartUTC + int64(k*w.ratio)*in.Grid.StepS + stepS/2
			w.sky[k] = sun.At(time.Unix(mid, 0), s.LatitudeDeg, s.LongitudeDeg)
		}
	}
	w.irradiance = make([]sun.Irradiance, w.n)
	switch {
	case in.Outdoor.SolarWm2 != nil:
		w.global = aggregate(in.Outdoor.SolarWm2, w.n, w.ratio)
		w.sunSource, w.sunKnown = "sun as measured", true
		if placed {
			for k, g := range w.global {
				w.irradiance[k] = sun.SplitGlobal(g, w.sky[k])
			}
		}
	case placed:
		w.sunSource, w.sunKnown = "sun of a clear sky (none measured; clouds are part of the error)", true
		w.global = make([]float64, w.n)
		elevation := s.ElevationM
		if math.IsNaN(elevation) {
			elevation = 0
		}
		for k := range w.global {
			w.irradiance[k] = sun.ClearSky(w.sky[k], elevation, sun.Clear)
			w.global[k] = w.irradiance[k].GlobalWm2
		}
	default:
		w.sunSource = "no sun (neither measured nor coordinates given)"
	}
}

// sunOn is the mean irradiance on façades in W/m²; on the ground where no
// direction or no place is given.
func (w *weather) sunOn(facesDeg []float64) []float64 {
	if len(facesDeg) == 0 || w.sky == nil {
		return w.global
	}
	key := fmt.Sprint(facesDeg)
	if known := w.onFacade[key]; known != nil {
		return known
	}
	out := make([]float64, w.n)
	for k := range out {
		sum := 0.0
		for _, f := range facesDeg {
			sum += w.irradiance[k].OnFacadeWm2(w.sky[k], f, groundReflectance)
		}
		out[k] = sum / float64(len(facesDeg))
	}
	w.onFacade[key] = out
	return out
}

// zoneSeries is one zone's record on the model's steps.
type zoneSeries struct {
	series
	open      []bool // free with the windows open
	words     string
	hasPeople bool
}

// seriesOf brings one zone's record to the model's steps. sunWm2 is the sun on
// it, nil without any.
func (w *weather) seriesOf(in *Input, z int, sunWm2 []float64) *zoneSeries {
	run, room := &in.Running.Zones[z], &in.Indoor[z]
	out := &zoneSeries{open: make([]bool, w.n)}
	out.hours = float64(int64(w.ratio)*in.Grid.StepS) / 3600
	out.tempC = aggregate(room.OperativeC, w.n, w.ratio)
	out.drive, out.kind, out.learn = make([]drive, w.n), make([]kind, w.n), make([]bool, w.n)
	people, words := w.people(in, z)
	out.hasPeople = people != nil
	share := aggregate(run.OpenShare, w.n, w.ratio)
	calm := make([]bool, w.n) // free by itself; a way is free when both ends are
	for k := range calm {
		d := &out.drive[k]
		d.outdoorC, d.share = w.outdoorC[k], share[k]
		if sunWm2 != nil {
			d.sunKWm2 = sunWm2[k] / 1000
		}
		if people != nil {
			d.people = people[k]
		}
		if w.windKnown {
			d.windMS = w.windMS[k]
		}
		calm[k] = out.freeStep(run, k*w.ratio, (k+1)*w.ratio) && !math.IsNaN(d.outdoorC+d.sunKWm2+d.people+d.share)
		out.open[k] = calm[k] && d.share > in.Criteria.OpenThreshold
	}
	for k := 1; k < w.n; k++ {
		weatherKnown := !math.IsNaN(out.drive[k-1].outdoorC + out.drive[k].outdoorC + out.drive[k-1].sunKWm2 + out.drive[k].sunKWm2)
		switch {
		case calm[k-1] && calm[k]:
			out.kind[k] = free
		case weatherKnown && !math.IsNaN(out.tempC[k-1]+out.tempC[k]):
			out.kind[k] = held
		}
	}
	parts := []string{w.sunSource, words}
	if w.windKnown && w.windFilled > 0 {
		parts = append(parts, fmt.Sprintf("mean wind in %.1f %% of steps without a reading", 100*w.windFilled))
	}
	out.words = strings.Join(parts, "; ")
	return out
}

// freeStep: the plant is known to be off and the zone's state known.
func (s *zoneSeries) freeStep(run *running.Zone, from, to int) bool {
	for i := from; i < to; i++ {
		if run.Plant[i] != uint8(site.PlantOff) || (run.State[i] != running.Open && run.State[i] != running.Shut) {
			return false
		}
	}
	return true
}

// people are shares of the usual number: counted, else seen, else by the
// schedule. Where a counter is silent the schedule stands in, which is said.
func (w *weather) people(in *Input, z int) ([]float64, string) {
	scheduled := make([]float64, w.n)
	for k := range scheduled {
		for _, o := range in.Running.Zones[z].Occupied[k*w.ratio : (k+1)*w.ratio] {
			if o == running.Occupied {
				scheduled[k] += 1 / float64(w.ratio)
			}
		}
	}
	counted, scale, words := in.Indoor[z].People, 1/in.Site.Zones[z].People, "people as counted"
	if counted == nil || math.IsNaN(scale) || math.IsInf(scale, 0) {
		counted, scale, words = in.Indoor[z].Presence, 1, "people as present or not"
	}
	if counted == nil {
		return scheduled, "people by the occupied times"
	}
	out := aggregate(counted, w.n, w.ratio)
	filled := 0
	for k, v := range out {
		out[k] = v * scale
		if math.IsNaN(v) {
			out[k] = scheduled[k]
			filled++
		}
	}
	if filled > 0 {
		words += fmt.Sprintf(" (by the occupied times in %.0f %% of steps)", 100*float64(filled)/float64(w.n))
	}
	return out, words
}
