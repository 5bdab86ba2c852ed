package demo

import (
	"math"

	"sashlog/internal/physics/opening"
)

const (
	stepS   = 300
	minuteS = 60.0
	// airWKPerLs is the heat a flow of 1 L/s carries per kelvin.
	airWKPerLs = 1.206
	airKgM3    = 1.2
	airCpJkgK  = 1005.0
	personCO2  = 0.0052  // L/s: 0.31 L/min at 1.2 met, ASHRAE 62.1 informative appendix (from memory)
	personW    = 75.0    // sensible heat, common practice
	personKgS  = 1.39e-5 // 50 g/h of vapour, common practice
)

// room is one zone in the simulation: an air node, an internal mass node, an
// envelope node, CO2 and vapour.
type room struct {
	spec *zoneSpec
	// ignored: its calls for cooling start nothing.
	ignored bool
	index   int

	volumeM3                              float64
	airJK, massJK, wallJK                 float64 // heat capacities
	airMassWK, airWallWK, wallOutWK       float64
	glassWK, glassM2                      float64
	faces                                 []int // indexes into weather.facadeWm2
	airC, massC, wallC                    float64
	co2, ratio                            float64
	meanAirC, meanCO2, meanRatio          float64 // over the last minute
	linkW, linkCO2, linkRatio             float64 // from neighbours, this minute
	heatAirW, heatMassW, vapourKgS, co2Ls float64
	openLs, leakLs, throughLs             float64
	supplyLs, supplyC, supplyCO2          float64
	supplyRatio, outdoorShare             float64 // outdoor share of supply air
	panels                                float64 // heating less cooling of local units, W
	people                                int
	windows                               []window
	share                                 float64 // open share, mean of the minute
	through                               *room
	unit                                  *unit
	habit                                 float64
	coolCall, heatCall                    bool
	blinds                                bool
	movedMin                              int64 // last movement of automatic windows
	airingUntil                           int64
}

func newRoom(s *zoneSpec, index int) *room {
	r := &room{spec: s, index: index, volumeM3: s.areaM2 * s.heightM}
	r.airJK = r.volumeM3 * airKgM3 * airCpJkgK * 4 // with furniture and finishes
	r.massJK = s.areaM2 * 130e3
	r.airMassWK = s.areaM2 * 6.5
	r.glassM2 = s.facadeM2 * s.glassShare
	r.glassWK = r.glassM2 * 1.2
	opaque := s.facadeM2 - r.glassM2
	r.wallJK = opaque*160e3 + s.areaM2*10e3
	r.airWallWK = opaque*3 + s.areaM2*0.4
	r.wallOutWK = opaque * 0.33
	if s.roof {
		r.wallJK += s.areaM2 * 120e3
		r.airWallWK += s.areaM2 * 1.5
		r.wallOutWK += s.areaM2 * 0.18
	}
	for i := range s.faces {
		r.faces = append(r.faces, int(azimuthDeg(s.faces[i]))/90)
	}
	for i := range s.windows {
		r.windows = append(r.windows, window{spec: &s.windows[i]})
	}
	r.airC, r.massC, r.wallC, r.co2, r.ratio = 19, 19, 15, 430, 0.006
	r.meanAirC, r.meanCO2, r.meanRatio = r.airC, r.co2, r.ratio
	return r
}

// radiantC is the mean temperature of the surfaces around people.
func (r *room) radiantC() float64 {
	if r.spec.facadeM2 == 0 && !r.spec.roof {
		return r.massC
	}
	return 0.78*r.massC + 0.22*r.wallC
}

// relax solves dx/dt = rate·(target − x) exactly over dt with rate and target
// held and returns the value at the end and the mean over dt.
func relax(x, rate, target, dt float64) (end, mean float64) {
	k := rate * dt
	if k < 1e-9 {
		end = x + (target-x)*k
		return end, (x + end) / 2
	}
	fade := math.Exp(-k)
	end = target + (x-target)*fade
	return end, target + (x-target)*(1-fade)/k
}

// outdoorAir is the state of the air outside during a minute.
type outdoorAir struct{ tempC, ratio, co2 float64 }

// advance moves the room on by dt seconds. Flows, sources and neighbours are
// held; the air node is solved exactly, and the heat it exchanges with mass
// and envelope is that of its mean temperature, so energy is conserved.
func (r *room) advance(out outdoorAir, dt float64) {
	fresh := r.openLs + r.leakLs // L/s of outdoor air by itself
	massC, wallC := r.massC, r.wallC
	toOutWK := r.glassWK + airWKPerLs*fresh
	supplyWK := airWKPerLs * r.supplyLs
	sumWK := r.airMassWK + r.airWallWK + toOutWK + supplyWK
	gainW := r.airMassWK*massC + r.airWallWK*wallC + toOutWK*out.tempC + supplyWK*r.supplyC +
		r.heatAirW + r.panels + r.linkW
	r.airC, r.meanAirC = relax(r.airC, sumWK/r.airJK, gainW/sumWK, dt)
	r.massC += dt / r.massJK * (r.airMassWK*(r.meanAirC-massC) + r.heatMassW)
	r.wallC += dt / r.wallJK * (r.airWallWK*(r.meanAirC-wallC) + r.wallOutWK*(out.tempC-wallC))

	litres := r.volumeM3 * 1000
	flow := fresh + r.supplyLs
	if flow > 0 {
		target := (fresh*out.co2 + r.supplyLs*r.supplyCO2 + 1e6*r.co2Ls + r.linkCO2) / flow
		r.co2, r.meanCO2 = relax(r.co2, flow/litres, target, dt)
		// Surfaces take up and give back vapour: three times the air's volume.
		vapour := (fresh*out.ratio + r.supplyLs*r.supplyRatio + 1e3*r.vapourKgS/airKgM3 + r.linkRatio) / flow
		r.ratio, r.meanRatio = relax(r.ratio, flow/(3*litres), vapour, dt)
		return
	}
	before := r.co2
	r.co2 += dt / litres * (1e6*r.co2Ls + r.linkCO2)
	r.meanCO2 = (before + r.co2) / 2
	before = r.ratio
	r.ratio += dt / (3 * litres) * (1e3*r.vapourKgS/airKgM3 + r.linkRatio)
	r.meanRatio = (before + r.ratio) / 2
}

// openingFlowLs is the outdoor air through the open windows: one-sided flow by
// de Gids & Phaff 1982 with the wind weaker on lee walls, and for rooms with
// windows on two walls the cross flow by pressure difference, in quadrature.
func (r *room) openingFlowLs(outC, windMS, windDeg float64) float64 {
	if r.share <= 0 || len(r.faces) == 0 {
		return 0
	}
	area := r.spec.openM2 * r.share
	off := math.Abs(math.Remainder(windDeg-90*float64(r.faces[0]), 360))
	lee := 0.55 + 0.45*ramp(math.Cos(off*math.Pi/180), -0.5, 0.7)
	q := opening.SingleSidedDeGidsPhaff(area, r.spec.openHighM, windMS*lee, r.airC, outC)
	if len(r.faces) > 1 {
		off2 := windDeg - 90*float64(r.faces[1])
		dp := math.Abs(opening.PressureCoefficient(opening.Normal, off) - opening.PressureCoefficient(opening.Normal, off2))
		q = opening.CombineQuadrature(q, opening.CrossFlow(0.61, area/2, area/2, windMS*facadeWind, dp))
	}
	return 1000 * q
}

// facadeWind is the wind before a suburban façade at 6 m over that of the
// site's mast at 10 m in the open.
var facadeWind = opening.WindFactor(10, opening.Country, 6, opening.Suburb)

// leakFlowLs is the air that comes in with everything shut.
func (r *room) leakFlowLs(outC, windMS float64) float64 {
	if r.spec.facadeM2 == 0 {
		return r.volumeM3 * 0.03 / 3.6
	}
	return r.volumeM3 * (0.05 + 0.006*math.Abs(r.airC-outC) + 0.02*windMS) / 3.6
}
