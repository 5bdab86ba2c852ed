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

// score gathers how a way does against the truth.
type score struct {
	n, covered, below int // below: the truth lies below the upper bound
	logErr            []float64
}

func (s *score) add(e *Estimate, truth float64) {
	s.n++
	if e.LowPerH <= truth && truth <= e.HighPerH {
		s.covered++
	}
	if truth <= e.HighPerH {
		s.below++
	}
	s.logErr = append(s.logErr, math.Log(e.MedianPerH/truth))
}

func (s *score) bias() float64 { return math.Exp(median(s.logErr)) }

// typical is the factor within which half of the estimates lie.
func (s *score) typical() float64 {
	v := make([]float64, len(s.logErr))
	for i, x := range s.logErr {
		v[i] = math.Abs(x)
	}
	return math.Exp(median(v))
}

func (s *score) coverage() float64 { return float64(s.covered) / float64(s.n) }

// The invented building's known flows, over many seeds. Rooms whose unit brings
// outdoor air must be recovered with intervals that hold; rooms with ceiling
// units have little air of their own, and what comes through doors from
// neighbours counts as outdoor air in any balance of one room, so for them only
// the upper bound is held. Core rooms and the meeting room, which live on their
// neighbours' air, are left out. The tolerances are what was found over twelve
// seeds, with a margin; nothing published sets them.
func TestTruthRecovered(t *testing.T) {
	if testing.Short() {
		t.Skip("simulates a building many times")
	}
	type key struct {
		way     Way
		state   running.State
		ceiling bool
	}
	scores := map[key]*score{}
	upper, upperHeld, right, wrong := 0, 0, 0, 0
	for seed := uint64(1); seed <= 8; seed++ {
		for _, counted := range []bool{true, false} {
			in, tr := demoInput(t, demo.Options{Seed: seed, From: site.Date{Year: 2025, Month: 4, Day: 1}, Days: 60}, counted)
			r := Assess(in)
			for k := range r.Zones {
				z, room := &r.Zones[k], demoRooms[tr.Zones[k].ID]
				if !room.facade || tr.Zones[k].ID == "L2.05" {
					continue
				}
				for s := running.Open; s < running.NumStates; s++ {
					inDecays, inUse := truths(&in, tr, k, s, z.Decays)
					for i := range z.AirChange[s].Estimates {
						e := &z.AirChange[s].Estimates[i]
						at := key{e.Way, s, room.plant[:3] == "FCU"}
						truth := inUse
						if e.Way == ByDecay {
							truth = inDecays
						}
						switch {
						case e.NotMeasurable != "" || len(truth) == 0:
						case e.Way == ByScheduled:
							upper++
							if median(truth) < e.HighPerH {
								upperHeld++
							}
						default:
							if scores[at] == nil {
								scores[at] = &score{}
							}
							scores[at].add(e, median(truth))
						}
					}
				}
			}
			for _, p := range r.Plants {
				switch ceiling := tr.Plants[p.Plant].ID[:3] == "FCU"; {
				case p.Finding == BringsAir && !ceiling, p.Finding == BringsNone && ceiling:
					right++
				case p.Finding == BringsAir, p.Finding == BringsNone:
					wrong++
				}
			}
		}
	}
	groups := 0
	for k, x := range scores {
		t.Logf("%-24s %-5s ceiling %-5v %4d estimates, bias %.2f, half within x%.2f, interval holds the truth %.0f %%, upper bound %.0f %%",
			k.way, k.state, k.ceiling, x.n, x.bias(), x.typical(), 100*x.coverage(), 100*float64(x.below)/float64(x.n))
		if x.n < 20 {
			continue
		}
		groups++
		if held := float64(x.below) / float64(x.n); k.ceiling && held < 0.85 {
			t.Errorf("%+v: the upper bound holds in %.0f %%", k, 100*held)
		}
		if k.ceiling {
			continue
		}
		if x.coverage() < 0.80 || x.bias() < 0.75 || x.bias() > 1.25 || x.typical() > 1.35 {
			t.Errorf("%+v: coverage %.2f, bias %.2f, half within x%.2f", k, x.coverage(), x.bias(), x.typical())
		}
	}
	t.Logf("scheduled: %d of %d upper values held; plant: %d right, %d wrong", upperHeld, upper, right, wrong)
	if groups < 10 || upper < 100 || float64(upperHeld) < 0.97*float64(upper) || right < 20 || wrong > 0 {
		t.Error("too little was measured, or wrongly")
	}
}

// truths are the true rates in a zone's decays of a state, one each, and in the
// occupied steps of the state.
func truths(in *Input, tr *demo.Truth, k int, s running.State, decays []Event) (inDecays, inUse []float64) {
	for _, d := range decays {
		if d.State == s {
			inDecays = append(inDecays, trueRate(tr, k, d.FromStep, d.ToStep))
		}
	}
	for i := 0; i < tr.N; i++ {
		if in.Running.Zones[k].State[i] == s && in.Running.Zones[k].Occupied[i] == running.Occupied {
			inUse = append(inUse, trueRate(tr, k, i, i+1))
		}
	}
	return inDecays, inUse
}
