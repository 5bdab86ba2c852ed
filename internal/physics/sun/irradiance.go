package sun

import "math"

// SolarConstantWm2 is the mean irradiance outside the atmosphere: 1361 W/m²,
// Kopp & Lean 2011, Geophysical Research Letters 38:L01706 (from memory).
const SolarConstantWm2 = 1361.0

// Irradiance is one sky's irradiance in W/m².
type Irradiance struct {
	DirectNormalWm2 float64 // beam, on a surface facing the sun
	DiffuseWm2      float64 // from the whole sky, on a horizontal surface
	GlobalWm2       float64 // beam and diffuse on a horizontal surface
}

// ExtraterrestrialNormalWm2 returns the irradiance outside the atmosphere on a
// surface facing the sun.
func (p Position) ExtraterrestrialNormalWm2() float64 {
	return SolarConstantWm2 / (p.DistanceAU * p.DistanceAU)
}

// Haze is the state of the clear air.
type Haze int

const (
	// Clear is Hottel's standard clear atmosphere, 23 km visibility.
	Clear Haze = iota
	// Hazy is Hottel's urban haze, 5 km visibility.
	Hazy
)

// ClearSky returns the irradiance of a cloudless sky at an elevation of 0 to
// 2500 m (elevations outside are taken as the nearer end). All zero when the
// sun is down.
//
// Beam: Hottel 1976, A simple model for estimating the transmittance of direct
// solar radiation through clear atmospheres, Solar Energy 18:129. Diffuse: Liu
// & Jordan 1960, Solar Energy 4:1, t_d = 0.271 - 0.294 t_b. Coefficients from
// memory, without Hottel's climate-type corrections of -8 to +3 %.
func ClearSky(p Position, elevationM float64, haze Haze) Irradiance {
	cosZ := p.CosZenith()
	if cosZ <= 0 {
		return Irradiance{}
	}
	outside := p.ExtraterrestrialNormalWm2()
	beam := HottelBeam(cosZ, elevationM, haze)
	diffuse := (0.271 - 0.294*beam) * outside * cosZ
	return Irradiance{
		DirectNormalWm2: beam * outside,
		DiffuseWm2:      diffuse,
		GlobalWm2:       beam*outside*cosZ + diffuse,
	}
}

// HottelBeam returns the transmittance of clear air for beam radiation from
// the cosine of the zenith angle (0 to 1) and the elevation in m.
func HottelBeam(cosZenith, elevationM float64, haze Haze) float64 {
	if cosZenith <= 0 {
		return 0
	}
	km := math.Max(0, math.Min(2.5, elevationM/1000))
	sq := func(x float64) float64 { return x * x }
	a0 := 0.4237 - 0.00821*sq(6-km)
	a1 := 0.5055 + 0.00595*sq(6.5-km)
	k := 0.2711 + 0.01858*sq(2.5-km)
	if haze == Hazy {
		a0 = 0.2538 - 0.0063*sq(6-km)
		a1 = 0.7678 + 0.0010*sq(6.5-km)
		k = 0.249 + 0.081*sq(2.5-km)
	}
	return a0 + a1*math.Exp(-k/cosZenith)
}

// HaurwitzGlobalWm2 returns the clear-sky global irradiance on a horizontal
// surface from the zenith angle alone: 1098 cos z exp(-0.057/cos z), Haurwitz
// 1945, Journal of Meteorology 2:154 (from memory). A cross-check on
// [ClearSky] and a ceiling for pyranometer readings.
func HaurwitzGlobalWm2(cosZenith float64) float64 {
	if cosZenith <= 0 {
		return 0
	}
	return 1098 * cosZenith * math.Exp(-0.057/cosZenith)
}

// SplitGlobal divides a measured global irradiance into beam and diffuse by the
// clearness index: Erbs, Klein & Duffie 1982, Solar Energy 28:293 (from
// memory). With the sun lower than 3° all of it counts as diffuse, because the
// quotient is then meaningless. Negative readings count as 0.
func SplitGlobal(globalWm2 float64, p Position) Irradiance {
	if math.IsNaN(globalWm2) || math.IsNaN(p.ZenithDeg) {
		return Irradiance{math.NaN(), math.NaN(), globalWm2}
	}
	global := math.Max(0, globalWm2)
	cosZ := p.CosZenith()
	if p.ElevationDeg < 3 {
		return Irradiance{0, global, global}
	}
	kt := global / (p.ExtraterrestrialNormalWm2() * cosZ)
	diffuse := global * erbsDiffuseShare(kt)
	return Irradiance{(global - diffuse) / cosZ, diffuse, global}
}

// erbsDiffuseShare returns the diffuse share of global irradiance at a
// clearness index; shares beyond the fitted range stay at its ends.
func erbsDiffuseShare(kt float64) float64 {
	switch {
	case kt <= 0.22:
		return 1 - 0.09*kt
	case kt <= 0.80:
		return 0.9511 + kt*(-0.1604+kt*(4.388+kt*(-16.638+kt*12.336)))
	default:
		return 0.165
	}
}

// OnSurfaceWm2 returns the irradiance on a surface of the given tilt (0
// horizontal facing up, 90 wall) that faces azimuthDeg: beam, an evenly bright
// sky, and light reflected by level ground of the given reflectance (0 to 1;
// 0.2 is usual). Isotropic sky: Liu & Jordan 1963, Solar Energy 7:53 (from
// memory). It understates bright skies near the sun.
func (i Irradiance) OnSurfaceWm2(p Position, tiltDeg, azimuthDeg, groundReflectance float64) float64 {
	cosTilt := math.Cos(tiltDeg * deg)
	return i.DirectNormalWm2*p.CosIncidence(tiltDeg, azimuthDeg) +
		i.DiffuseWm2*(1+cosTilt)/2 +
		i.GlobalWm2*groundReflectance*(1-cosTilt)/2
}

// OnFacadeWm2 returns the irradiance on a vertical façade: [Irradiance.OnSurfaceWm2]
// for a tilt of 90°, with half the sky and half the ground in view.
func (i Irradiance) OnFacadeWm2(p Position, azimuthDeg, groundReflectance float64) float64 {
	cosIncidence := 0.0
	if p.ElevationDeg > 0 {
		cosIncidence = math.Max(0, math.Sin(p.ZenithDeg*deg)*math.Cos((p.AzimuthDeg-azimuthDeg)*deg))
	}
	return i.DirectNormalWm2*cosIncidence + i.DiffuseWm2/2 + i.GlobalWm2*groundReflectance/2
}
