package breeze

import (
	"math"

	"sashlog/configs/criteria"
	"sashlog/internal/physics/opening"
)

// Speed is how the wind at the mast becomes the wind at the openings.
type Speed struct {
	MastM, OpeningM             float64
	MastTerrain, OpeningTerrain string
	// Factor multiplies the measured wind (ASHRAE Fundamentals ch. 24); ENFactor
	// is the ratio of the roughness factors of EN 16798-7, for comparison.
	Factor, ENFactor float64
}

var terrains = map[string]opening.Terrain{"city": opening.City, "suburb": opening.Suburb, "country": opening.Country, "water": opening.Water}

// speedOf gives the site's correction. Unknown terrain words, which the site
// file does not let through, count as the usual ones.
func speedOf(c criteria.Settings) Speed {
	s := Speed{MastM: c.WindMastM, OpeningM: c.WindOpeningM, MastTerrain: c.WindMastTerrain, OpeningTerrain: c.WindOpeningTerrain}
	mast, ok := terrains[s.MastTerrain]
	if !ok {
		mast = opening.Country
	}
	local, ok := terrains[s.OpeningTerrain]
	if !ok {
		local = opening.Suburb
	}
	s.Factor = opening.WindFactor(s.MastM, mast, s.OpeningM, local)
	s.ENFactor = opening.RoughnessFactorEN16798(s.OpeningM, local) / opening.RoughnessFactorEN16798(s.MastM, mast)
	return s
}

// BeaufortFromMS are the lower bounds of Beaufort 0 to 12 in m/s (WMO, from
// memory).
var BeaufortFromMS = [13]float64{0, 0.3, 1.6, 3.4, 5.5, 8.0, 10.8, 13.9, 17.2, 20.8, 24.5, 28.5, 32.7}

// Beaufort returns the number, 0 to 12, of a wind speed; -1 for NaN and
// negative speeds.
func Beaufort(ms float64) int {
	if !(ms >= 0) {
		return -1
	}
	b := 0
	for b+1 < len(BeaufortFromMS) && ms >= BeaufortFromMS[b+1] {
		b++
	}
	return b
}

// Sectors is the number of sectors of a rose.
const Sectors = 16

// SectorNames are the sectors clockwise from north.
var SectorNames = [Sectors]string{"N", "NNE", "NE", "ENE", "E", "ESE", "SE", "SSE", "S", "SSW", "SW", "WSW", "W", "WNW", "NW", "NNW"}

// Sector returns the sector, 0 to 15, that a direction in degrees lies in;
// -1 for NaN. Sectors are centred on their names: north is 348.75° to below
// 11.25°.
func Sector(deg float64) int { return sectorOf(deg, Sectors) }

// sectorOf is the one of n sectors, the first centred on north, that a
// direction lies in; -1 for NaN.
func sectorOf(deg float64, n int) int {
	if math.IsNaN(deg) || math.IsInf(deg, 0) {
		return -1
	}
	deg = math.Mod(deg, 360)
	if deg < 0 {
		deg += 360
	}
	wide := 360 / float64(n)
	return int((deg+wide/2)/wide) % n
}

// OffDeg is the angle, 0 to 180°, between two directions.
func OffDeg(a, b float64) float64 { return math.Abs(math.Remainder(a-b, 360)) }

// WindwardDeg is the angle up to which an opening is windward: EN 16798-7
// Table B.7 (read in public code).
const WindwardDeg = 60

// MeanDirection is the mean of directions as unit vectors, 0 to below 360°,
// and their steadiness, 0 to 1. NaN and 0 when they cancel out or there is none.
func MeanDirection(degs []float64) (deg, steadiness float64) {
	var d direction
	for _, v := range degs {
		d.add(v, 1)
	}
	return d.mean()
}

// direction sums unit vectors.
type direction struct{ sin, cos, n float64 }

func (d *direction) add(deg, weight float64) {
	sin, cos := math.Sincos(deg * math.Pi / 180)
	d.sin, d.cos, d.n = d.sin+weight*sin, d.cos+weight*cos, d.n+weight
}

func (d *direction) mean() (deg, steadiness float64) {
	r := math.Hypot(d.sin, d.cos)
	if d.n == 0 || r < 1e-9*d.n {
		return math.NaN(), 0
	}
	deg = math.Mod(math.Atan2(d.sin, d.cos)*180/math.Pi+360, 360)
	if deg >= 360-1e-9 {
		deg = 0
	}
	return deg, r / d.n
}
