package demo

import (
	"math"
	"time"

	"sashlog/internal/physics/air"
	"sashlog/internal/physics/sun"
)

// weather is the outdoor climate of an invented place, one value per step,
// held constant within the step.
type weather struct {
	start int64 // unix seconds of the first step
	n     int

	tempC, dewC, rhPct []float32
	ratio              []float32 // humidity ratio, kg/kg
	windMS, windDeg    []float32
	rainMMh, cloud     []float32
	globalWm2          []float32
	diffuseWm2         []float32
	co2PPM             []float32
	// facadeWm2 holds irradiance on walls facing N, E, S, W.
	facadeWm2  [4][]float32
	pressurePa float64
}

// The invented climate: means and swings. A mild, rather damp place with
// modest summers.
const (
	seasonMeanC    = 11.4
	seasonSwingC   = 6.3
	warmestDay     = 203.0
	synopticC      = 2.9
	slowC          = 1.0
	sunWarmsK      = 0.021 // K per W/m² of global irradiance, before lag
	nightCoolsK    = 3.4   // under a clear sky
	diurnalLagS    = 4.3 * 3600
	dewBelowMeanK  = 2.6
	rainThreshold  = 0.88
	clearTurbidity = 0.94
)

// makeWeather generates n steps from start. The same seed and span give the
// same weather.
//
// Temperature: a season, a slow and a synoptic process, and a lagged response
// to the sun that was actually there, so that clear days are wide and dull
// ones flat. Irradiance: the clear sky of package sun under cloud by Kasten &
// Czeplak 1980 (Solar Energy 24:177, from memory: 1 - 0.75 c^3.4), divided
// into beam and diffuse by clearness.
func makeWeather(seed uint64, start int64, n int) *weather {
	const burn = 20 * 86400 / stepS
	w := &weather{start: start, n: n, pressurePa: air.PressureAtPa(elevationM)}
	for _, p := range []*[]float32{&w.tempC, &w.dewC, &w.rhPct, &w.ratio, &w.windMS, &w.windDeg, &w.rainMMh, &w.cloud,
		&w.globalWm2, &w.diffuseWm2, &w.co2PPM, &w.facadeWm2[0], &w.facadeWm2[1], &w.facadeWm2[2], &w.facadeWm2[3]} {
		*p = make([]float32, n)
	}
	ou := func(name string, decayH float64) *drifter {
		return newDrifter(stream(seed, "weather/"+name), stepS, decayH*3600)
	}
	slow, synoptic, front := ou("slow", 14*24), ou("synoptic", 3.2*24), ou("front", 15)
	cloudSlow, cloudFast := ou("cloud", 26), ou("cloud fast", 0.4)
	damp, gustSlow, gustFast := ou("damp", 40), ou("wind", 22), ou("wind fast", 0.25)
	veer, swirl := ou("direction", 30), ou("direction fast", 0.5)
	wet, shower, burst := ou("rain", 3), ou("shower", 0.7), ou("rain rate", 0.4)
	city := ou("co2", 8)

	lag := math.Exp(-stepS / diurnalLagS)
	var diurnal, syn float64
	for i := -burn; i < n; i++ {
		t := start + int64(i)*stepS
		at := time.Unix(t+stepS/2, 0).UTC()
		yearDay := float64(at.YearDay()) + float64(at.Hour())/24
		season := math.Cos(2 * math.Pi * (yearDay - warmestDay) / 365.25)

		// Unsettled weather (u > 0): cloud, wind and rain go together.
		sl, sy, fr := slow.next(), synoptic.next(), front.next()
		syn += (sy - syn) * stepS / (10 * 3600) // rounds the jagged process
		cl := 0.75*cloudSlow.next() + 0.65*fr
		base := logistic(1.5*cl + 0.15 - 0.75*season)
		cloud := clamp(base+1.6*base*(1-base)*0.45*cloudFast.next(), 0, 1)

		p := sun.At(at, latitudeDeg, longitudeDeg)
		clear := sun.ClearSky(p, elevationM, sun.Clear).GlobalWm2 * clearTurbidity
		global := clear * (1 - 0.75*math.Pow(cloud, 3.4))
		split := sun.SplitGlobal(global, p)

		target := sunWarmsK*global - nightCoolsK*(1-0.8*cloud)
		diurnal = target + (diurnal-target)*lag
		wetness := 0.55*wet.next() + 0.55*shower.next() + 0.85*cl
		rain, rate := 0.0, burst.next()
		if cloud > rainThreshold && wetness > 1.42 {
			rain = math.Exp(-0.05+0.8*rate) * (1 + 0.3*season)
		}
		swing := synopticC * (1 - 0.12*season)
		temp := seasonMeanC + seasonSwingC*season + slowC*sl + swing*1.15*syn + diurnal - 0.9*fr*(0.5+0.5*season)
		if rain > 0 {
			diurnal -= 0.02 * math.Min(rain, 4) // evaporation, remembered by the lag
		}
		dew := seasonMeanC + seasonSwingC*0.92*season + 1.1*slowC*sl + 0.75*swing*syn - dewBelowMeanK + 1.7*damp.next() + 1.3*cl
		if rain > 0 {
			dew = math.Max(dew, temp-1.6)
		}
		dew = math.Min(dew, temp-0.2-0.8*(1-cloud))

		gust := gustSlow.next() + 0.35*fr
		calm := 0.35 * ramp(p.ElevationDeg, -5, 25) // days are windier than nights
		speed := 2.3 * math.Exp(0.55*gust-0.15) * (0.8 + calm) * (1 + 0.18*gustFast.next()) * (1 - 0.12*season)
		speed = clamp(speed, 0, 28)
		dir := 245 + 55*veer.next() - 30*syn + 18*swirl.next()
		if veer.x > 1.1 { // a spell of north-easterlies
			dir = 50 + 20*swirl.x
		}
		co2 := 425 + 4*math.Cos(2*math.Pi*(yearDay-45)/365.25) + 3.5*city.next()
		if i < 0 {
			continue
		}
		rh := clamp(100*math.Exp(lnMagnus(dew)-lnMagnus(temp)), 1, 100)
		w.tempC[i], w.dewC[i], w.rhPct[i] = float32(temp), float32(dew), float32(rh)
		w.ratio[i] = float32(air.HumidityRatio(air.MagnusSatPressurePa(dew), w.pressurePa))
		w.windMS[i], w.windDeg[i] = float32(speed), float32(math.Mod(dir+720, 360))
		w.rainMMh[i], w.cloud[i] = float32(rain), float32(cloud)
		w.globalWm2[i], w.diffuseWm2[i] = float32(split.GlobalWm2), float32(split.DiffuseWm2)
		w.co2PPM[i] = float32(co2)
		for f := range w.facadeWm2 {
			if global > 0 {
				w.facadeWm2[f][i] = float32(split.OnFacadeWm2(p, float64(90*f), 0.2))
			}
		}
	}
	return w
}

// lnMagnus is the logarithm of the saturation pressure by the WMO's Magnus
// formula, without its base.
func lnMagnus(tempC float64) float64 { return 17.62 * tempC / (243.12 + tempC) }
