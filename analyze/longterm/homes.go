package longterm

import (
	"math"

	"sashlog/analyze/comfort"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Home is the outcome of TM59's criteria in a bedroom, living room or kitchen.
type Home struct {
	// NotApplicable says why there is no outcome; the rest is then empty.
	NotApplicable string
	// Mechanical: the zone has no opening, so the criterion of homes with mostly
	// mechanical ventilation applies instead of a and b.
	Mechanical bool
	// A: share of occupied season hours 1 K and more above TM52's limit.
	AShare float64
	// B, bedrooms only: hours above 26 °C from 22:00 to 07:00 of those known,
	// occupied or not. NightUnknownH lack a temperature.
	NightH, NightOver26H, NightUnknownH float64
	// Occupied hours above 26 °C of those known, for homes with mostly
	// mechanical ventilation.
	OccupiedH, Over26H float64
	// Known: enough is known for a verdict; Passes is the verdict.
	Known, Passes bool
}

// homeLimitC is the temperature of criterion b and of homes with mostly
// mechanical ventilation. CIBSE TM59:2017.
const homeLimitC = 26

// homeOf judges a zone by TM59. tm52 is the zone's outcome by TM52.
func homeOf(in *Input, z int, tm52 comfort.TM52Result) Home {
	def, run := &in.Site.Zones[z], &in.Running.Zones[z]
	temp := in.Indoor[z].OperativeC
	switch {
	case def.Use != site.UseBedroom && def.Use != site.UseLiving:
		return Home{NotApplicable: "the site file names no bedroom, living room or kitchen here"}
	case temp == nil:
		return Home{NotApplicable: "no temperature is logged"}
	}
	o := Home{Mechanical: run.NoOpening, AShare: tm52.ExceededShare}
	h := in.Grid.StepH()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		t := float64(temp[i])
		over := milli(t) > homeLimitC*1000
		if run.Occupied[i] == running.Occupied && !math.IsNaN(t) {
			o.OccupiedH += h
			if over {
				o.Over26H += h
			}
		}
		if def.Use != site.UseBedroom || !atNight(in.Grid.Time(i).Hour()) {
			continue
		}
		switch {
		case math.IsNaN(t):
			o.NightUnknownH += h
		default:
			o.NightH += h
			if over {
				o.NightOver26H += h
			}
		}
	}
	if o.Mechanical {
		o.Known = o.OccupiedH > 0
		o.Passes = o.Known && o.Over26H <= 0.03*o.OccupiedH+1e-6
		return o
	}
	nights := def.Use != site.UseBedroom || o.NightH > 0 && o.NightH >= o.NightUnknownH
	o.Known = nights && !math.IsNaN(o.AShare)
	o.Passes = o.Known && !tm52.Fails[0] && (def.Use != site.UseBedroom || comfort.TM59BedroomOK(o.NightOver26H, o.NightH))
	return o
}

// atNight reports whether a local hour lies in 22:00 to 07:00.
func atNight(hour int) bool { return hour >= 22 || hour < 7 }
