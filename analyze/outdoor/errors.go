package outdoor

import (
	"sashlog/analyze/calendar"
	"sashlog/ingest/grid"
)

// WithErrors returns the weather as it would have been measured with the given
// errors added per step, in K and in per cent of relative humidity; nil means
// none. Means of days follow; everything else is shared. The dew point moves
// to first order, by the derivatives of the Magnus formula (WMO-No. 8, Annex
// 4.B; constants 17.62 and 243.12 °C): 0.1 K is within reach for the errors of
// sensors. Where the dew point itself is logged, an error of the relative
// humidity stands for its error.
func (o *Outdoor) WithErrors(g *grid.Grid, cal *calendar.Calendar, tempK, rhPct []float32) *Outdoor {
	c := *o
	if o.TempC == nil {
		return &c
	}
	if tempK != nil {
		c.TempC = make([]float32, len(o.TempC))
		for i, t := range o.TempC {
			c.TempC[i] = t + tempK[i]
		}
		c.days(g, cal)
	}
	if o.DewPointC != nil && (rhPct != nil || tempK != nil && !o.dewLogged) {
		c.DewPointC = make([]float32, len(o.DewPointC))
		for i, dew := range o.DewPointC {
			if tempK != nil && !o.dewLogged {
				r := (243.12 + dew) / (243.12 + o.TempC[i])
				dew += r * r * tempK[i]
			}
			if rhPct != nil && o.RHPct[i] > 1 {
				s := 243.12 + o.DewPointC[i]
				dew += s * s / (243.12 * 17.62) * rhPct[i] / o.RHPct[i]
			}
			c.DewPointC[i] = dew
		}
	}
	return &c
}
