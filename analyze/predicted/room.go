package predicted

import (
	"math"

	"sashlog/analyze/comfort"
	"sashlog/analyze/indoor"
	"sashlog/configs/criteria"
)

// Room works out the conditions of one zone.
type Room struct {
	in      *indoor.Zone
	dayOf   []int32
	clo     []float64 // per day, lowered for movement
	met     float64
	stillMS float64
	// fanMS is the speed of a fan the people can use, NaN without.
	fanMS float64
	table *comfort.Table
}

// condition is what a step is judged on, and what was taken for granted.
type condition struct {
	comfort.Conditions
	roomSpeedMS                             float64 // without the people's own movement
	assumedRH, assumedSpeed, assumedRadiant bool
}

// at gathers a step's conditions; false where the temperature or the clothing
// is not known.
func (r *Room) at(i int) (condition, bool) {
	if r.in.OperativeC == nil {
		return condition{}, false
	}
	t := float64(r.in.OperativeC[i])
	c := condition{Conditions: comfort.Conditions{AirC: t, RadiantC: t, RHPct: 50, Met: r.met, Clo: r.clo[r.dayOf[i]]}, roomSpeedMS: r.stillMS}
	c.assumedRadiant = true
	if air, radiant := valueAt(r.in.AirTempC, i), valueAt(r.in.RadiantC, i); !math.IsNaN(air) && !math.IsNaN(radiant) {
		c.AirC, c.RadiantC, c.assumedRadiant = air, radiant, false
	}
	if rh := valueAt(r.in.RHPct, i); math.IsNaN(rh) {
		c.assumedRH = true
	} else {
		c.RHPct = rh
	}
	switch logged, fan := valueAt(r.in.AirSpeedMS, i), valueAt(r.in.FanOn, i); {
	case !math.IsNaN(logged):
		c.roomSpeedMS = logged
	case fan >= 0.5 && !math.IsNaN(r.fanMS):
		c.roomSpeedMS = math.Max(r.stillMS, r.fanMS)
	default:
		c.assumedSpeed = true
	}
	c.AirSpeedMS = comfort.RelativeAirSpeedMS(c.roomSpeedMS, r.met)
	return c, !math.IsNaN(t) && !math.IsNaN(c.Clo)
}

// AssumedHumidity reports whether the humidity of a step is not known and taken
// as 50 %.
func (r *Room) AssumedHumidity(i int) bool { return math.IsNaN(valueAt(r.in.RHPct, i)) }

// VoteAt is the predicted mean vote of ISO 7730 at any step; NaN where
// something is not known or beyond the standard's range.
func (r *Room) VoteAt(i int) float64 {
	c, known := r.at(i)
	if !known {
		return math.NaN()
	}
	if v := comfort.PMV(c.Conditions); comfort.PMVInRange(c.Conditions, v) {
		return v
	}
	return math.NaN()
}

// elevated is the vote with the cooling effect of moving air. Limited: the air
// is faster than counts; effectK is NaN where moving air does not cool.
func (r *Room) elevated(c *condition) (vote, effectK float64, limited bool) {
	x := c.Conditions
	if math.IsNaN(r.fanMS) {
		most := comfort.AirSpeedLimitMS(comfort.OperativeISO(x.AirC, x.RadiantC, c.roomSpeedMS))
		if limited = c.roomSpeedMS > most; limited {
			x.AirSpeedMS = comfort.RelativeAirSpeedMS(most, r.met)
		}
	}
	if x.AirSpeedMS <= 0.1 {
		return comfort.PMV(x), 0, limited
	}
	effectK, found := r.table.CoolingEffectK(x)
	if !found {
		effectK = 0
	}
	x.AirC, x.RadiantC, x.AirSpeedMS = x.AirC-effectK, x.RadiantC-effectK, 0.1
	vote = comfort.PMV(x)
	if !found {
		effectK = math.NaN()
	}
	return vote, effectK, limited
}

func valueAt(list []float32, i int) float64 {
	if list == nil {
		return math.NaN()
	}
	return float64(list[i])
}

// clothing is the insulation per day, lowered for movement.
func clothing(c criteria.Settings, sixAMC []float64) []float64 {
	out := make([]float64, len(sixAMC))
	for d, t := range sixAMC {
		clo := c.ClothingClo
		if math.IsNaN(clo) {
			clo = comfort.ClothingClo(t)
		}
		out[d] = comfort.DynamicClo(clo, c.MetabolicMet)
	}
	return out
}
