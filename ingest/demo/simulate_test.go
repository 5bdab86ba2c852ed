package demo

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func near(t testing.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.7g, want %.7g within %g", what, got, want, tol)
	}
}

// bare is a room of which only the given parts exchange heat.
func bare() *room {
	return &room{spec: &zoneSpec{}, volumeM3: 200, airJK: 1e7, massJK: 1e12, wallJK: 1e12, co2: 420, airC: 20}
}

// The closed-form build-up of a well-mixed space, ASHRAE Fundamentals ch. 16
// eq. 16 to 22: V 200 m³, 60 L/s of outdoor air, 10 people at 0.0052 L/s,
// 420 ppm outdoors and at the start. Values computed from that equation.
func TestCO2BuildUp(t *testing.T) {
	r := bare()
	r.openLs, r.co2Ls = 60, 10*personCO2
	want := map[int]float64{30: 781.618, 60: 992.351, 120: 1186.718, 180: 1252.725}
	for minute := 1; minute <= 180; minute++ {
		r.advance(outdoorAir{10, 0.005, 420}, minuteS)
		if w, ok := want[minute]; ok {
			near(t, "CO2", r.co2, w, 0.01)
		}
	}
	near(t, "mean of the last minute", r.meanCO2, r.co2, 1)
}

// A tight room only collects: 10 people for an hour into 200 m³ is
// 10·0.0052·3600/200000 = 936 ppm.
func TestCO2Tight(t *testing.T) {
	r := bare()
	r.glassWK = 1
	r.co2Ls = 10 * personCO2
	for range 60 {
		r.advance(outdoorAir{10, 0.005, 420}, minuteS)
	}
	near(t, "CO2", r.co2, 420+936, 1e-6)
}

// One resistance, one capacity, exact exponential: R 0.005 K/W, C 1e7 J/K,
// outdoors 14 °C, 500 W; values computed from T+ = aT + (1-a)(To + RQ),
// a = exp(-dt/RC).
func TestFreeRunningRoom(t *testing.T) {
	r := bare()
	r.glassWK, r.heatAirW, r.airC = 200, 500, 24
	for minute := 1; minute <= 480; minute++ {
		r.advance(outdoorAir{14, 0.005, 420}, minuteS)
		switch minute {
		case 15:
			near(t, "after 15 min", r.airC, 23.866208, 1e-6)
		case 480:
			near(t, "after 8 h", r.airC, 20.716068, 1e-6)
		}
	}
}

// Two capacities: Ri 0.002, Ro 0.008 K/W, Ci 2e6, Ce 2e7 J/K. The transition
// over 900 s was computed from the matrix exponential; the envelope node is
// stepped, hence the tolerance.
func TestTwoNodes(t *testing.T) {
	r := bare()
	r.airJK, r.wallJK, r.airWallWK, r.wallOutWK = 2e6, 2e7, 500, 125
	r.airC, r.wallC, r.heatAirW = 24, 20, 400
	for range 15 {
		r.advance(outdoorAir{10, 0.005, 420}, minuteS)
	}
	near(t, "air", r.airC, 0.80067782*24+0.19873960*20+5.8257328e-4*10+4.0330494e-4*400, 0.01)
	near(t, "envelope", r.wallC, 0.01987396*24+0.97457498*20+5.5510633e-3*10+4.6605862e-6*400, 0.01)
}

// Heat put in or let in is heat stored, whatever the room and the weather.
func TestEnergyIsConserved(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := func(name string, low, high float64) float64 { return rapid.Float64Range(low, high).Draw(t, name) }
		r := newRoom(&zoneSpecs[rapid.IntRange(0, len(zoneSpecs)-1).Draw(t, "zone")], 0)
		r.airC, r.massC, r.wallC = f("air", 5, 35), f("mass", 5, 35), f("wall", -5, 35)
		r.openLs, r.leakLs = f("open", 0, 800), f("leak", 0, 60)
		r.supplyLs, r.supplyC, r.supplyCO2 = f("supply", 0, 500), f("supplyC", 10, 35), 600
		r.heatAirW, r.heatMassW, r.panels, r.linkW = f("heat", 0, 9000), f("heat mass", 0, 9000), f("panel", -3000, 8000), f("link", -2000, 2000)
		r.co2Ls, r.linkCO2 = f("people", 0, 0.1), f("link CO2", -5e3, 5e3)
		out := outdoorAir{f("outdoor", -10, 35), 0.006, 425}
		air, mass, wall, co2 := r.airC, r.massC, r.wallC, r.co2
		r.advance(out, minuteS)
		stored := r.airJK*(r.airC-air) + r.massJK*(r.massC-mass) + r.wallJK*(r.wallC-wall)
		toOut := r.glassWK + airWKPerLs*(r.openLs+r.leakLs)
		in := minuteS * (r.heatAirW + r.heatMassW + r.panels + r.linkW + toOut*(out.tempC-r.meanAirC) +
			airWKPerLs*r.supplyLs*(r.supplyC-r.meanAirC) + r.wallOutWK*(out.tempC-wall))
		if math.Abs(stored-in) > 1e-6*(math.Abs(stored)+1e5) {
			t.Fatalf("stored %g J, let in %g J", stored, in)
		}
		gas := minuteS * (1e6*r.co2Ls + r.linkCO2 + (r.openLs+r.leakLs)*(out.co2-r.meanCO2) + r.supplyLs*(r.supplyCO2-r.meanCO2))
		if kept := r.volumeM3 * 1000 * (r.co2 - co2); math.Abs(kept-gas) > 1e-6*(math.Abs(kept)+1e5) {
			t.Fatalf("CO2 kept %g, let in %g", kept, gas)
		}
	})
}

// Rooms exchange: what leaves one enters another. Recirculated supply air
// brings back what it took.
func TestExchangeBalances(t *testing.T) {
	s := newSimulation(7, zoneSpecs, makeWeather(7, 1735686000, 12), &Truth{})
	for k, r := range s.rooms {
		r.airC, r.co2, r.ratio = 18+float64(k)*0.4, 430+50*float64(k), 0.005+0.0003*float64(k)
		r.share = float64(k%3) / 2
	}
	s.exchange(true)
	var heat, gas, vapour, moved float64
	for _, r := range s.rooms {
		heat, gas, vapour, moved = heat+r.linkW, gas+r.linkCO2, vapour+r.linkRatio, moved+math.Abs(r.linkW)
	}
	near(t, "heat", heat, 0, 1e-6)
	near(t, "CO2", gas, 0, 1e-6)
	near(t, "vapour", vapour, 0, 1e-9)
	if moved < 1000 {
		t.Errorf("rooms exchange only %g W", moved)
	}
	for _, u := range s.units[:3] {
		u.code, u.outside = codeVent, false
		u.supply(&outdoorNow{tempC: 5, ratio: 0.004, co2: 425})
		net, flow := 0.0, 0.0
		for _, r := range u.rooms {
			net += r.supplyLs * (r.supplyCO2 - r.co2)
			flow += r.supplyLs
		}
		near(t, u.spec.id+" CO2 recirculated", net, 0, 1e-6)
		if flow < 100 {
			t.Errorf("%s moves only %g L/s", u.spec.id, flow)
		}
		u.outside = true
		u.supply(&outdoorNow{tempC: 15, ratio: 0.004, co2: 425})
		fresh := 0.0
		for _, r := range u.rooms {
			fresh += r.supplyLs * r.outdoorShare / r.spec.areaM2
		}
		near(t, u.spec.id+" outdoor air per m²", fresh/float64(len(u.rooms)), 0.85, 0.02)
	}
}

// Ceiling units bring no outdoor air.
func TestCeilingUnitsRecirculate(t *testing.T) {
	s := newSimulation(7, zoneSpecs, makeWeather(7, 1735686000, 12), &Truth{})
	u := s.units[3]
	u.code, u.outside = codeCool, true
	for _, r := range u.rooms {
		r.airC = 27
	}
	u.supply(&outdoorNow{tempC: 20, co2: 425})
	for _, r := range u.rooms {
		if r.supplyLs*r.outdoorShare != 0 {
			t.Errorf("%s gets outdoor air from %s", r.spec.id, u.spec.id)
		}
		if r.panels >= 0 {
			t.Errorf("%s is not cooled: %g W", r.spec.id, r.panels)
		}
	}
}

// Window transitions of Haldi & Robinson 2009 at two states, recomputed from
// the published coefficients.
func TestWindowChances(t *testing.T) {
	near(t, "open (22, 10)", openChance(22, 10), 0.003670, 1e-6)
	near(t, "open (26, 20)", openChance(26, 20), 0.015337, 1e-6)
	near(t, "close (22, 10)", closeChance(22, 10), 0.014514, 1e-6)
	near(t, "close (26, 20)", closeChance(26, 20), 0.008459, 1e-6)
}

// A room's opening flow at one state: de Gids & Phaff 1982, A 1 m², h 1.2 m,
// dT 5 K, u 2 m/s gives 0.0935414 m³/s (recomputed from the published formula).
func TestOpeningFlow(t *testing.T) {
	r := newRoom(&zoneSpec{openM2: 1, openHighM: 1.2, faces: "W", areaM2: 50, heightM: 3}, 0)
	r.share, r.airC = 1, 20
	near(t, "windward", r.openingFlowLs(15, 2, 270), 93.5414, 1e-3)
	lee := r.openingFlowLs(15, 2, 90)
	if !(lee < 93.5 && lee > 80) {
		t.Errorf("leeward flow %g L/s, want somewhat less", lee)
	}
	r.share = 0
	near(t, "shut", r.openingFlowLs(15, 2, 270), 0, 0)
}
