// Package sun holds the position of the sun, clear-sky irradiance and the
// irradiance on façades.
//
// Angles are in degrees, azimuths clockwise from true north, irradiance in
// W/m². Functions are pure; NaN in gives NaN out.
package sun

import (
	"math"
	"time"
)

// Position is the sun's place in the sky at one instant and location.
type Position struct {
	ZenithDeg      float64 // true angle from the vertical, without refraction
	ElevationDeg   float64 // 90 less ZenithDeg
	ApparentDeg    float64 // elevation as seen through a standard atmosphere
	AzimuthDeg     float64 // clockwise from north, [0, 360)
	DeclinationDeg float64 // apparent declination
	EquationMin    float64 // equation of time, min: true less mean solar time
	DistanceAU     float64 // sun to earth
}

const deg = math.Pi / 180

// At returns the position of the sun at an instant; latitude positive north
// (-90 to 90), longitude positive east. Within about 0.01° from 1950 to 2050
// and a few hundredths in the century after.
//
// Method: the low-accuracy solar coordinates of Meeus, Astronomical
// Algorithms, ch. 25 (as in NOAA's solar calculator), with nutation in
// longitude by its main term, and parallax. Time is taken as UT for the
// coordinates too, an error of 0.001°.
func At(instant time.Time, latitudeDeg, longitudeDeg float64) Position {
	days := float64(instant.Unix())/86400 + float64(instant.Nanosecond())/86400e9 - 10957.5 // since J2000.0
	t := days / 36525

	meanLongitude := 280.46646 + t*(36000.76983+t*0.0003032)
	anomaly := (357.52911 + t*(35999.05029-t*0.0001537)) * deg
	eccentricity := 0.016708634 - t*(0.000042037+t*0.0000001267)
	sinM, cosM := math.Sincos(anomaly)
	sin2M := 2 * sinM * cosM
	sin3M := sinM * (3 - 4*sinM*sinM)
	centre := (1.914602-t*(0.004817+t*0.000014))*sinM + (0.019993-t*0.000101)*sin2M + 0.000289*sin3M
	trueAnomaly := anomaly + centre*deg
	distance := 1.000001018 * (1 - eccentricity*eccentricity) / (1 + eccentricity*math.Cos(trueAnomaly))

	node := (125.04 - 1934.136*t) * deg
	sinNode, cosNode := math.Sincos(node)
	nutation := -0.00478 * sinNode
	longitude := (meanLongitude + centre - 0.00569 + nutation) * deg
	obliquity := (23.4392911 - t*(0.0130041667+t*(1.639e-7-t*5.036e-7)) + 0.00256*cosNode) * deg

	sinLon, cosLon := math.Sincos(longitude)
	sinObl, cosObl := math.Sincos(obliquity)
	ascension := math.Atan2(cosObl*sinLon, cosLon)
	sinDec := sinObl * sinLon
	cosDec := math.Sqrt(1 - sinDec*sinDec)

	sidereal := 280.46061837 + 360.98564736629*days + t*t*(0.000387933-t/38710000) + nutation*cosObl
	hour := (sidereal+longitudeDeg)*deg - ascension

	sinLat, cosLat := math.Sincos(latitudeDeg * deg)
	sinHour, cosHour := math.Sincos(hour)
	// East, north, up of the sun's direction.
	east := -cosDec * sinHour
	north := cosLat*sinDec - sinLat*cosDec*cosHour
	up := sinLat*sinDec + cosLat*cosDec*cosHour

	const parallaxDeg = 8.794 / 3600
	zenith := math.Atan2(math.Hypot(east, north), up)/deg + parallaxDeg*math.Hypot(east, north)/distance
	elevation := 90 - zenith
	return Position{
		ZenithDeg:      zenith,
		ElevationDeg:   elevation,
		ApparentDeg:    elevation + refractionDeg(elevation),
		AzimuthDeg:     turn(math.Atan2(east, north) / deg),
		DeclinationDeg: math.Atan2(sinDec, cosDec) / deg,
		EquationMin:    4 * half(meanLongitude-0.0057183-ascension/deg+nutation*cosObl),
		DistanceAU:     distance,
	}
}

// Up reports whether the sun's centre stands above the true horizon.
func (p Position) Up() bool { return p.ElevationDeg > 0 }

// CosZenith returns the cosine of the zenith angle, 0 when the sun is down.
func (p Position) CosZenith() float64 {
	return math.Max(0, math.Cos(p.ZenithDeg*deg))
}

// CosIncidence returns the cosine of the angle between the sun's rays and the
// normal of a surface, 0 when the sun is down or behind it. Tilt is 0 for a
// horizontal surface facing up and 90 for a wall; azimuth is the direction the
// surface faces.
func (p Position) CosIncidence(tiltDeg, azimuthDeg float64) float64 {
	if p.ElevationDeg <= 0 {
		return 0 * tiltDeg * azimuthDeg // NaN stays NaN
	}
	sinZ, cosZ := math.Sincos(p.ZenithDeg * deg)
	sinT, cosT := math.Sincos(tiltDeg * deg)
	return math.Max(0, cosZ*cosT+sinZ*sinT*math.Cos((p.AzimuthDeg-azimuthDeg)*deg))
}

// refractionDeg is the lift of the sun by refraction at 1010 hPa and 10 °C:
// Saemundsson's formula in Meeus, ch. 16; nil once the disc is well down.
func refractionDeg(elevationDeg float64) float64 {
	if elevationDeg < -0.85 {
		return 0
	}
	return 1.02 / math.Tan((elevationDeg+10.3/(elevationDeg+5.11))*deg) / 60
}

// turn brings an angle to [0, 360).
func turn(angle float64) float64 {
	angle = math.Mod(angle, 360)
	if angle < 0 {
		angle += 360
	}
	if angle >= 360 { // -1e-17 + 360
		angle = 0
	}
	return angle
}

// half brings an angle to [-180, 180).
func half(angle float64) float64 { return turn(angle+180) - 180 }
