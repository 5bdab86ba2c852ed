package comfort

import "math"

// Table gives standard effective temperature and cooling effect of one
// activity from tabulated values, in a hundredth of the time. Where
// [Table.Covers] says so, differences from [SET], [CoolingEffectK] and
// [PMVElevated] stay within the bounds below; elsewhere the exact functions
// are called. Safe for concurrent use; nodes are worked out when first needed.
type Table struct {
	met   float64
	o     SETOptions
	setC  *lattice
	coolK *lattice
	// still is the air speed up to which the heat transfer coefficient of SET
	// and of the cooling effect does not change.
	still [2]float64
}

// Bounds of the differences between [Table] and the exact functions: with
// radiant as air temperature, and with radiant within TableRadiantK of it. A
// test looks at the middle of every cell, where straight lines err most, and
// at random places.
const (
	TableSETWithinK     = 0.12
	TableCoolingWithinK = 0.07
	TablePMVWithin      = 0.02

	TableRadiantK              = 2.0
	TableSETRadiantWithinK     = 0.25
	TableCoolingRadiantWithinK = 0.2
	TablePMVRadiantWithin      = 0.05
)

// Range of the table. Above, sweat may drip, where the two-node model is not
// smooth.
const (
	tableMetLow, tableMetHigh = 1.0, 1.4
	tableVapourPa             = 2700
	tableSpeedMS              = 1.2
)

var (
	tableTempC   = axis{low: 12, step: 0.5, n: 39} // to 31 °C
	tableRHPct   = axis{low: 0, step: 10, n: 11}
	tableClo     = axis{low: 0.3, step: 0.1, n: 10} // to 1.2 clo
	tableCoolC   = axis{low: 12, step: 1, n: 20}
	tableSpeedsN = 13
)

// NewTable returns an empty table for an activity.
func NewTable(met float64, o SETOptions) *Table {
	t := &Table{met: met, o: o}
	cooling := o
	cooling.ForCoolingEffect = true
	var speeds [2]axis
	for k, opt := range []SETOptions{o, cooling} {
		t.still[k] = t.speed(t.convection(0.1, opt))
		// Convection grows nearly with the root of the speed.
		low := math.Sqrt(t.still[k])
		speeds[k] = axis{low: low, step: (math.Sqrt(tableSpeedMS) - low) / float64(tableSpeedsN-1), n: tableSpeedsN}
	}
	t.setC = newLattice([4]axis{tableTempC, tableRHPct, tableClo, speeds[0]}, func(x [4]float64) float64 {
		return SET(t.at(x), o)
	})
	t.coolK = newLattice([4]axis{tableCoolC, tableRHPct, tableClo, speeds[1]}, func(x [4]float64) float64 {
		ce, _ := CoolingEffectK(t.at(x), cooling)
		return ce
	})
	return t
}

// at are the conditions of a node: radiant as air temperature.
func (t *Table) at(x [4]float64) Conditions {
	return Conditions{AirC: x[0], RadiantC: x[0], RHPct: x[1], Met: t.met, Clo: x[2], AirSpeedMS: x[3] * x[3]}
}

// convection is the heat transfer coefficient the two-node model takes.
func (t *Table) convection(speedMS float64, o SETOptions) float64 {
	return newTwoNode(Conditions{AirC: 25, RadiantC: 25, AirSpeedMS: speedMS, RHPct: 50, Met: t.met, Clo: 0.5}, o).hc
}

// speed is the slowest air with a heat transfer coefficient.
func (t *Table) speed(hc float64) float64 {
	return math.Pow(hc/8.600001, 1/0.53) / t.pressure()
}

// Covers reports whether the table answers for conditions; where not, the
// exact functions do.
func (t *Table) Covers(c Conditions) bool {
	if !(c.WorkMet == 0 && c.Met == t.met && t.met >= tableMetLow && t.met <= tableMetHigh && c.AirSpeedMS >= 0 && c.AirSpeedMS <= tableSpeedMS &&
		math.Abs(c.AirC-c.RadiantC) <= TableRadiantK && vapourPa(c.AirC, c.RHPct) <= tableVapourPa && tableRHPct.holds(c.RHPct) && tableClo.holds(c.Clo)) {
		return false
	}
	low, high := math.Min(c.AirC, c.RadiantC), math.Max(c.AirC, c.RadiantC)
	return low >= tableTempC.low && high <= t.warmestC(c.Clo)
}

// warmestC is the warm edge of the table: the more people wear and do, the
// earlier they sweat as much as their skin can shed, where the model bends.
func (t *Table) warmestC(clo float64) float64 {
	return tableTempC.high() - 6*math.Max(0, clo-0.5) - 12*math.Max(0, t.met-1.2)
}

// SET returns the standard effective temperature in °C, see [SET].
func (t *Table) SET(c Conditions) float64 {
	if !t.Covers(c) {
		return SET(c, t.o)
	}
	v := math.Max(c.AirSpeedMS, t.still[0])
	top := t.operative(c, v)
	return t.setC.at([4]float64{top, humidityAt(c, top), c.Clo, math.Sqrt(v)})
}

// CoolingEffectK returns the cooling effect of air movement in K, see
// [CoolingEffectK].
func (t *Table) CoolingEffectK(c Conditions) (ceK float64, found bool) {
	if !t.Covers(c) {
		return CoolingEffectK(c, t.o)
	}
	v := c.AirSpeedMS
	if v <= t.still[1] {
		return 0, true
	}
	// Moving air brings people closer to the air's temperature than still air.
	top := t.operative(c, v)
	ce := t.coolK.at([4]float64{top, humidityAt(c, top), c.Clo, math.Sqrt(v)})
	ce += t.operative(c, t.still[1]) - top
	return math.Max(0, ce), ce >= 0
}

// PMVElevated returns the predicted mean vote with the cooling effect of air
// movement, see [PMVElevated].
func (t *Table) PMVElevated(c Conditions) float64 {
	if c.AirSpeedMS <= 0.1 {
		return PMV(c)
	}
	ce, found := t.CoolingEffectK(c)
	if !found {
		return math.NaN()
	}
	return PMV(stillAndCooler(c, ce))
}

func (t *Table) pressure() float64 {
	if t.o.PressurePa != 0 {
		return t.o.PressurePa / 101325
	}
	return 1
}

// operative weights air and radiant temperature as the two-node model begins
// to, with 4.7 W/(m²K) of radiation.
func (t *Table) operative(c Conditions, speedMS float64) float64 {
	if c.AirC == c.RadiantC {
		return c.AirC
	}
	hc := 8.600001 * math.Pow(speedMS*t.pressure(), 0.53)
	return (hc*c.AirC + 4.7*c.RadiantC) / (hc + 4.7)
}

// humidityAt is the humidity that the same vapour has at another temperature.
func humidityAt(c Conditions, tempC float64) float64 {
	if c.AirC == tempC {
		return c.RHPct
	}
	return math.Min(100, c.RHPct*satTorr(c.AirC)/satTorr(tempC))
}
