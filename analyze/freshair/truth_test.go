package freshair

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/demo"
	"sashlog/ingest/grid"
)

// demoRoom is what the truth does not hold of a zone of the invented building.
type demoRoom struct {
	areaM2, heightM, people float64
	facade                  bool
	plant                   string
}

var demoRooms = map[string]demoRoom{
	"L1.01": {180, 3.2, 16, true, "AHU-1"}, "L1.02": {150, 3.2, 13, true, "AHU-1"}, "L1.03": {60, 3.0, 7, false, "AHU-1"}, "L1.04": {90, 3.2, 5, true, "AHU-1"},
	"L2.01": {170, 3.2, 15, true, "AHU-2"}, "L2.02": {150, 3.2, 13, true, "AHU-2"}, "L2.03": {70, 3.0, 6, false, "AHU-2"}, "L2.04": {60, 3.2, 5, true, "AHU-2"},
	"L2.05": {45, 3.2, 7, true, "AHU-2"}, "L2.06": {24, 3.2, 2, true, "AHU-2"},
	"L3.01": {160, 3.4, 11, true, "AHU-3"}, "L3.02": {140, 3.4, 10, true, "AHU-3"}, "L3.03": {50, 3.0, 3, false, "AHU-3"},
	"L3.04": {55, 3.2, 5, true, "FCU-1"}, "L3.05": {55, 3.2, 5, true, "FCU-1"}, "L3.06": {40, 3.2, 4, true, "FCU-2"},
}

func demoSettings() criteria.Settings {
	return criteria.Settings{CO2AboveOutdoorPPM: 800, OutdoorCO2DoubtPPM: 30, CO2PerPersonLs: 0.00505, CO2PerPersonDoubtPct: 20, PeopleDoubtPct: 60,
		DecayStartAbovePPM: 200, MinDecayEvents: 3, AccuracyCO2PPM: 50, AccuracyCO2Pct: 3, CO2Category: "II", PollutionClass: "low", AirSpaceUse: "office", AirDistribution: 1}
}

// demoInput reads the truth of the invented building with sensors that have an
// offset (8 ppm standard deviation), noise (6 ppm) and a resolution of 1 ppm,
// like those of its logs. Counters are those of all zones when counted.
func demoInput(t *testing.T, o demo.Options, counted bool) (Input, *demo.Truth) {
	t.Helper()
	tr, err := demo.Simulate(o)
	if err != nil {
		t.Fatal(err)
	}
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	rng := rand.New(rand.NewPCG(o.Seed, 77))
	in := Input{Site: &site.Site{}, Criteria: demoSettings(), Grid: &grid.Grid{StartUTC: tr.StartUTC, StepS: tr.StepS, N: tr.N, PeriodTo: tr.N, Loc: loc},
		Outdoor: &outdoor.Outdoor{CO2DefaultPPM: 425, CO2Source: "site file"}, Running: &running.Result{}}
	for k := range tr.Zones {
		z := &tr.Zones[k]
		r := demoRooms[z.ID]
		in.Site.Zones = append(in.Site.Zones, site.Zone{ID: z.ID, AreaM2: r.areaM2, HeightM: r.heightM, People: r.people, Floor: z.ID[1:2]})
		co2, bias := make([]float32, tr.N), 8*rng.NormFloat64()
		run := running.Zone{State: make([]running.State, tr.N), Occupied: make([]running.Occupancy, tr.N), Plant: z.Plant, OpenShare: z.OpenShare}
		for i := range co2 {
			co2[i] = float32(math.Round(float64(z.CO2PPM[i]) + bias + 6*rng.NormFloat64()))
			open, on := z.OpenShare[i] > 0.05, z.Plant[i] != uint8(site.PlantOff)
			run.State[i] = running.Shut
			switch {
			case open && on:
				run.State[i] = running.Both
			case open:
				run.State[i] = running.Open
			case on:
				run.State[i] = running.Mech
			}
			if z.Occupied[i] == 1 {
				run.Occupied[i] = running.Occupied
			}
		}
		room := indoor.Zone{CO2PPM: co2}
		if counted {
			room.People = z.People
		}
		in.Indoor = append(in.Indoor, room)
		in.Running.Zones = append(in.Running.Zones, run)
	}
	plants := map[string][]string{}
	for _, z := range in.Site.Zones {
		plants[demoRooms[z.ID].plant] = append(plants[demoRooms[z.ID].plant], z.ID)
	}
	for _, p := range tr.Plants {
		in.Site.Plant = append(in.Site.Plant, site.Plant{ID: p.ID, Serves: plants[p.ID]})
	}
	return in, &tr
}

// trueRate is the outdoor air change of a zone over steps: openings, plant, and
// the leakage the simulation adds (0.05 + 0.006 dT + 0.02 wind per hour, 0.03
// without a façade).
func trueRate(tr *demo.Truth, k, from, to int) float64 {
	z := &tr.Zones[k]
	r := demoRooms[z.ID]
	v, sum := r.areaM2*r.heightM, 0.0
	for i := from; i < to; i++ {
		leak := 0.03
		if r.facade {
			leak = 0.05 + 0.006*math.Abs(float64(z.AirC[i]-tr.Outdoor.TempC[i+tr.Outdoor.Lead])) + 0.02*float64(tr.Outdoor.WindMS[i+tr.Outdoor.Lead])
		}
		sum += float64(z.OpenLs[i]+z.PlantLs[i])*3.6/v + leak
	}
	return sum / float64(to-from)
}
