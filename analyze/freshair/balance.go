package freshair

import "math"

// Balance is the mass balance of CO2 in one well-mixed room (ASHRAE
// Fundamentals ch. 16 eq. 16 to 22): V dC/dt = G + Q (Co - C).
type Balance struct {
	VolumeM3     float64 // > 0
	FlowLs       float64 // outdoor air, > 0
	GenerationLs float64 // CO2 given off, at room conditions
	OutdoorPPM   float64
}

// AirChangePerH is Q/V.
func (b Balance) AirChangePerH() float64 { return b.FlowLs * 3.6 / b.VolumeM3 }

// SteadyPPM is the level the room tends to: Co + 1e6 G/Q.
func (b Balance) SteadyPPM() float64 { return b.OutdoorPPM + 1e6*b.GenerationLs/b.FlowLs }

// After is the level after some hours from startPPM.
func (b Balance) After(hours, startPPM float64) float64 {
	steady := b.SteadyPPM()
	return steady + (startPPM-steady)*math.Exp(-b.AirChangePerH()*hours)
}
