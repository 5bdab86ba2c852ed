// Package energy answers: what did the plant use in hours that could have been
// open, and with windows open beside it? Every figure has bounds: a unit that
// serves several zones would have run for some of them anyway, and without a
// meter its power is only known to lie below its rating.
package energy

import (
	"sashlog/analyze/hours"
	"sashlog/analyze/method"
	"sashlog/analyze/running"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the energy is worked out from.
type Input struct {
	Site    *site.Site
	Grid    *grid.Grid
	Running *running.Result
	Record  *hours.Record
}

// Range is a figure with its least and greatest possible value.
type Range struct{ Value, Low, High float64 }

func (r *Range) add(o Range) {
	r.Value, r.Low, r.High = r.Value+o.Value, r.Low+o.Low, r.High+o.High
}

func (r Range) times(f float64) Range { return Range{r.Value * f, r.Low * f, r.High * f} }

// Unit is one plant unit over the period, in kWh of electricity.
type Unit struct {
	ID string
	// Source says how its power is known: "metered", "metered cooling", "rated"
	// or "" when it is not known at all.
	Source string
	// RunH is how long it ran, KnownH of it with known power.
	RunH, KnownH float64
	Used         Range // all of the period
	// Missed is what the missed hours cost, while conditioning air and while
	// merely moving it; Clash what was used with a window open beside the
	// running plant, in any weather.
	MissedConditioned, MissedVentilated, Clash Range
}

// Result is the answer.
type Result struct {
	Units                                            []Unit
	Used, MissedConditioned, MissedVentilated, Clash Range
	// Unknown names units that ran and whose power is not known at all.
	Unknown []string
	// Money and carbon of the missed hours; nil factors are not given.
	Currency        string
	MissedMoney     *Range
	MissedCarbonKg  *Range
	ClashMoney      *Range
	ClashCarbonKg   *Range
	PricePerKWh     float64 // NaN when not given
	CarbonKgPerKWh  float64
	AnythingMetered bool
}

// Shares of the rated power a running unit takes without a meter: conditioning
// and merely moving air. Our assumption; the bounds are as wide as they are
// because rated power says what a unit may take, not what it takes.
var (
	shareConditioning = Range{0.5, 0.15, 1}
	shareMovingAir    = Range{0.25, 0.05, 0.5}
)

// seasonalCOP turns metered cooling into electricity. Our assumption: chillers
// and split units give 2.5 to 5 kWh of cooling per kWh.
var seasonalCOP = Range{3.5, 2.5, 5}

// meterError is how far metered electricity may be off, as a share: class 2 of
// IEC 62053-21, 2 %, from memory.
const meterError = 0.02

// Doc documents the package.
var Doc = method.Doc{
	Title:    "Energy of hours that could have been open",
	Question: "What did the plant use in missed hours and with windows open beside it, and what does that cost?",
	Formula: "sum over steps of power × share of the unit's occupied zones that could have been open; low: only steps in which all of them could, high: steps in which any could. " +
		"Power: metered electricity ± 2 %; else metered cooling / 3.5 (2.5 to 5); else rated power × 0.5 (0.15 to 1) while heating or cooling and × 0.25 (0.05 to 0.5) while moving air only",
	Limits: []string{
		"what the unit would have used anyway (standby, other zones) is in the bounds, not taken off",
		"opening later or longer changes the heat stored in the building; that is not counted",
		"hours a unit ran with its power unknown are counted and shown, and in none of the sums",
		"shares of rated power and the yield of cooling are our assumptions",
	},
	Sources:  []string{"arithmetic on the logs; factors are our assumption", method.Memory("2 % of metered electricity: IEC 62053-21, class 2")},
	Standing: method.OurAssumption,
}
