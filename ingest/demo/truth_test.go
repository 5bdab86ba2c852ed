package demo

import (
	"math"
	"testing"
)

// suitedSteps is a rough count of the steps that suit open mode: outdoors 12.8
// °C to a plain 26 °C, dew point at most 17 °C, no rain within 30 min, wind
// below 10 m/s. It is no audit, only a check that the demo is worth auditing.
func suitedSteps(tr *Truth) []bool {
	out := make([]bool, tr.N)
	dry := 99
	for i := range out {
		k := i + tr.Outdoor.Lead
		dry++
		if tr.Outdoor.RainMMh[k] > 0 {
			dry = 0
		}
		x := tr.Outdoor.TempC[k]
		out[i] = x >= 12.8 && x <= 26 && tr.Outdoor.DewC[k] <= 17 && tr.Outdoor.WindMS[k] <= 10 && dry > 6
	}
	return out
}

// The building is half good: the weather suits a fair part of the year, a part
// of that is achieved, and each planted weakness costs hours where it should.
func TestWorthAuditing(t *testing.T) {
	for seed := uint64(1); seed <= 3; seed++ {
		tr := &Truth{}
		if seed == Defaults().Seed {
			_, tr = wholeYear(t)
		} else {
			s, err := Simulate(Options{Seed: seed})
			if err != nil {
				t.Fatal(err)
			}
			tr = &s
		}
		suits := suitedSteps(tr)
		var achieved, suited float64
		lost := map[string]map[Reason]float64{}
		calls := map[string]float64{}
		for zi := range tr.Zones {
			z, spec := &tr.Zones[zi], &zoneSpecs[zi]
			lost[z.ID] = map[Reason]float64{}
			for i := range tr.N {
				if z.Occupied[i] == 0 || !suits[i] || (spec.drive == noWindows && spec.through == "") {
					continue
				}
				suited += float64(spec.people)
				if z.OpenShare[i] > 0.05 && z.Plant[i] == codeOff {
					achieved += float64(spec.people)
					continue
				}
				lost[z.ID][z.Reason[i]] += 1.0 / 12
				if c := z.CalledBy[i]; c >= 0 {
					calls[tr.Zones[c].ID] += 1.0 / 12
				}
			}
		}
		occupied := 0.0
		for _, o := range tr.Zones[0].Occupied {
			if o == 1 {
				occupied++
			}
		}
		people := 0.0
		for _, z := range zoneSpecs {
			if z.drive != noWindows || z.through != "" {
				people += float64(z.people)
			}
		}
		suitedShare, achievedShare := suited/people/occupied, achieved/suited
		t.Logf("seed %d: suited %.1f %% of occupied hours, achieved %.1f %% of suited", seed, 100*suitedShare, 100*achievedShare)
		if suitedShare < 0.30 || suitedShare > 0.48 {
			t.Errorf("seed %d: weather suits %.3f of occupied hours", seed, suitedShare)
		}
		if achievedShare < 0.22 || achievedShare > 0.55 {
			t.Errorf("seed %d: %.3f of suited hours achieved", seed, achievedShare)
		}
		for _, c := range []struct {
			zone string
			why  Reason
			from float64
		}{
			{"L1.01", ReasonClockStart, 50}, {"L1.01", ReasonOutdoorLimit, 150}, {"L1.01", ReasonCalledBy, 100},
			{"L1.04", ReasonNeverUsed, 15}, {"L2.01", ReasonCalledBy, 100}, {"L3.01", ReasonSlowReopen, 80},
			{"L3.06", ReasonIndoorLimit, 80}, {"L3.06", ReasonNotOpened, 80},
		} {
			if got := lost[c.zone][c.why]; got < c.from {
				t.Errorf("seed %d: %s loses %.0f h to %q, want at least %.0f", seed, c.zone, got, c.why, c.from)
			}
		}
		if calls["L2.03"] < 300 {
			t.Errorf("seed %d: the core room L2.03 closes others for %.0f zone-hours", seed, calls["L2.03"])
		}
	}
}

func TestPlausibleTruth(t *testing.T) {
	_, tr := wholeYear(t)
	for zi := range tr.Zones {
		z, spec := &tr.Zones[zi], &zoneSpecs[zi]
		occupied, agree, both := 0, 0, 0
		for i := range tr.N {
			for _, c := range []struct {
				what      string
				x         float32
				low, high float64
			}{
				{"air", z.AirC[i], 8, 36}, {"operative", z.OperativeC[i], 8, 36}, {"RH", z.RHPct[i], 8, 100}, {"CO2", z.CO2PPM[i], 405, 5000},
				{"open share", z.OpenShare[i], 0, 1.000001}, {"people", z.People[i], 0, float64(max(spec.people, 14))},
				{"flow", z.OpenLs[i], 0, 6000}, {"plant flow", z.PlantLs[i], 0, 200},
			} {
				if x := float64(c.x); !(x >= c.low && x <= c.high) {
					t.Fatalf("%s step %d: %s %g outside %g to %g", z.ID, i, c.what, x, c.low, c.high)
				}
			}
			if spec.closed() && z.OpenShare[i] != 0 {
				t.Fatalf("%s has no opening and is open", z.ID)
			}
			if z.OpenShare[i] == 0 && z.OpenLs[i] != 0 {
				t.Fatalf("%s: %g L/s through shut windows", z.ID, z.OpenLs[i])
			}
			if spec.plant >= 3 && z.PlantLs[i] != 0 {
				t.Fatalf("%s gets outdoor air from a unit that only recirculates", z.ID)
			}
			if z.Occupied[i] == 0 {
				continue
			}
			occupied++
			running, open := z.Plant[i] != codeOff, z.OpenShare[i] > 0.999
			if running && z.OpenShare[i] > 0.05 {
				both++
			}
			// The reason agrees with what is seen, but for steps in transition.
			switch {
			case spec.closed():
				agree += int(bit(z.Reason[i] == ReasonNoOpening))
			case running:
				agree += int(bit(z.Reason[i] != ReasonNone))
			case open:
				agree += int(bit(z.Reason[i] == ReasonNone))
			default:
				agree++
			}
		}
		if occupied != 2490*12 { // 249 working days of 10 h in 2025
			t.Errorf("%s: %.1f occupied hours, want 2490", z.ID, float64(occupied)/12)
		}
		if share := float64(agree) / float64(occupied); share < 0.97 {
			t.Errorf("%s: reasons agree with the state in %.3f of steps", z.ID, share)
		}
		if spec.drive == manual && !spec.neverOpens && both == 0 {
			t.Errorf("%s: windows are never open with the plant running", z.ID)
		}
	}
	// Night purge runs in its season on the second floor and nowhere else.
	purge := map[string]int{}
	for _, z := range tr.Zones {
		for i, x := range z.OpenShare {
			if h := i % 288; x > 0.3 && z.Plant[i] == codeOff && h > 12 && h < 48 {
				purge[z.ID]++
			}
		}
	}
	if purge["L3.01"] < 300 || purge["L2.01"] > 0 {
		t.Errorf("night purge steps %v", purge)
	}
	// Cooled supply air at about 12 °C, common practice.
	cold, n := 0.0, 0
	for i, s := range tr.Plants[1].State {
		if i > 12 && s == codeCool && tr.Plants[1].State[i-6] == codeCool {
			cold += float64(tr.Plants[1].SupplyC[i])
			n++
		}
	}
	if n == 0 || math.Abs(cold/float64(n)-12) > 0.5 {
		t.Errorf("supply air while cooling %.2f °C over %d steps", cold/float64(n), n)
	}
}

// closed reports that a zone has no opening, its own or through another.
func (z *zoneSpec) closed() bool { return z.drive == noWindows && z.through == "" }

// Cold mornings: two to three hours of warm-up, common practice.
func TestWarmUp(t *testing.T) {
	_, tr := wholeYear(t)
	longest := 0
	for d := 0; d < 60; d++ {
		minutes := 0
		for i := d*288 + 60; i < d*288+96; i++ { // 05:00 to 08:00 local
			if tr.Plants[1].State[i] == codeHeat {
				minutes += 5
			}
		}
		longest = max(longest, minutes)
	}
	if longest < 90 || longest > 185 {
		t.Errorf("longest warm-up of the winter %d min", longest)
	}
}
