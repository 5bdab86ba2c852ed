package exceedance

import (
	"math"
	"strconv"

	"sashlog/analyze/comfort"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
)

// pmvJudge works out the predicted mean vote in the steps in which operative
// ranges apply. Humidity is read where logged, else 50 %; clothing follows the
// outdoor temperature at 06:00 unless given; air and radiant temperature are
// taken as equal to the operative temperature.
type pmvJudge struct {
	limit   float64 // |PMV| allowed
	met     float64
	speedMS float64
	clo     []float64 // per day
	in      *indoor.Zone
	dayOf   []int32
}

func newPMVJudge(c criteria.Settings, out *outdoor.Outdoor, cat comfort.Category, in *indoor.Zone) *pmvJudge {
	p := &pmvJudge{limit: comfort.PMVLimit(cat), met: c.MetabolicMet, in: in, dayOf: out.DayOf,
		speedMS: comfort.RelativeAirSpeedMS(c.AirSpeedMS, c.MetabolicMet), clo: make([]float64, len(out.Days))}
	for d := range out.Days {
		clo := c.ClothingClo
		if math.IsNaN(clo) {
			clo = comfort.ClothingClo(out.Days[d].SixAMC)
		}
		p.clo[d] = comfort.DynamicClo(clo, c.MetabolicMet)
	}
	return p
}

// assumed reports whether the humidity of a step is not known and taken as
// 50 %.
func (p *pmvJudge) assumed(i int) bool {
	return p.in.RHPct == nil || math.IsNaN(float64(p.in.RHPct[i]))
}

// vote returns the predicted mean vote at a step, NaN where it is unknown.
func (p *pmvJudge) vote(i int) float64 {
	t, rh := float64(p.in.OperativeC[i]), 50.0
	if p.in.RHPct != nil && !math.IsNaN(float64(p.in.RHPct[i])) {
		rh = float64(p.in.RHPct[i])
	}
	speed := p.speedMS
	if p.in.AirSpeedMS != nil && !math.IsNaN(float64(p.in.AirSpeedMS[i])) {
		speed = comfort.RelativeAirSpeedMS(float64(p.in.AirSpeedMS[i]), p.met)
	}
	return comfort.PMV(comfort.Conditions{AirC: t, RadiantC: t, AirSpeedMS: speed, RHPct: rh, Met: p.met, Clo: p.clo[p.dayOf[i]]})
}

// trim writes a limit without trailing zeros.
func trim(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }
