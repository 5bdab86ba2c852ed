package energy

import (
	"math"

	"sashlog/analyze/cores"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Assess works out the energy of every plant unit.
func Assess(in Input) *Result {
	r := &Result{Units: make([]Unit, len(in.Site.Plant)), PricePerKWh: in.Site.Energy.PricePerKWh, CarbonKgPerKWh: in.Site.Energy.CarbonKgPerKWh, Currency: in.Site.Energy.Currency}
	cores.Each(len(r.Units), func(u int) { r.Units[u] = assessUnit(&in, u) })
	for i := range r.Units {
		u := &r.Units[i]
		if u.Source == "" {
			if u.RunH > 0 {
				r.Unknown = append(r.Unknown, u.ID)
			}
			continue
		}
		r.AnythingMetered = r.AnythingMetered || u.Source != rated
		r.Used.add(u.Used)
		r.MissedConditioned.add(u.MissedConditioned)
		r.MissedVentilated.add(u.MissedVentilated)
		r.Clash.add(u.Clash)
	}
	missed := r.MissedConditioned
	missed.add(r.MissedVentilated)
	priced := func(factor float64, of Range) *Range {
		if math.IsNaN(factor) {
			return nil
		}
		p := of.times(factor)
		return &p
	}
	r.MissedMoney, r.ClashMoney = priced(r.PricePerKWh, missed), priced(r.PricePerKWh, r.Clash)
	r.MissedCarbonKg, r.ClashCarbonKg = priced(r.CarbonKgPerKWh, missed), priced(r.CarbonKgPerKWh, r.Clash)
	return r
}

// Ways a unit's power is known.
const (
	metered        = "metered"
	meteredCooling = "metered cooling"
	rated          = "rated"
)

func assessUnit(in *Input, u int) Unit {
	def := &in.Site.Plant[u]
	out := Unit{ID: def.ID}
	power := powerOf(in, u, &out)
	state := in.Running.UnitState(in.Site, u)
	var zones []int
	for _, id := range def.Serves {
		if z := in.Site.ZoneIndex(id); z >= 0 {
			zones = append(zones, z)
		}
	}
	h := in.Grid.StepH()
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		s := state[i]
		on := s != uint8(site.PlantOff) && s != running.PlantUnknown
		if on {
			out.RunH += h
		}
		if power == nil {
			continue
		}
		p, known := power(i, s)
		if !known {
			continue
		}
		used := p.times(h)
		out.Used.add(used)
		if !on {
			continue
		}
		out.KnownH += h
		missed, clash := concerned(in, zones, i)
		if s == uint8(site.PlantVent) {
			out.MissedVentilated.add(attributed(used, missed))
		} else {
			out.MissedConditioned.add(attributed(used, missed))
		}
		out.Clash.add(attributed(used, clash))
	}
	return out
}

// part is how much of a unit's occupied zones a step concerns.
type part struct{ share, all, any float64 }

// concerned tells how many of the occupied zones could have been open, and how
// many had a window open.
func concerned(in *Input, zones []int, i int) (missed, clash part) {
	occupied, couldOpen, open := 0.0, 0.0, 0.0
	for _, z := range zones {
		run := &in.Running.Zones[z]
		if run.State[i] == running.Both {
			open++
		}
		if run.Occupied[i] != running.Occupied {
			continue
		}
		occupied++
		if in.Record.Class[z][i].Missed() {
			couldOpen++
		}
	}
	return partOf(couldOpen, occupied), partOf(open, float64(len(zones)))
}

func partOf(n, of float64) part {
	if n == 0 || of == 0 {
		return part{}
	}
	p := part{share: n / of, any: 1}
	if n == of {
		p.all = 1
	}
	return p
}

// attributed gives a unit's energy to the zones concerned: by their share, at
// least when all are, at most when any is.
func attributed(used Range, p part) Range {
	return Range{used.Value * p.share, used.Low * p.all, used.High * p.any}
}

// powerOf finds how the unit's power is known: a function of step and state
// that gives kW, or nil.
func powerOf(in *Input, u int, out *Unit) func(i int, state uint8) (Range, bool) {
	def := &in.Site.Plant[u]
	if list := column(in, u, site.ElectricPower); list != nil {
		out.Source = metered
		return func(i int, _ uint8) (Range, bool) {
			v := float64(list[i])
			return Range{v, v - meterError*math.Abs(v), v + meterError*math.Abs(v)}, !math.IsNaN(v)
		}
	}
	if list := column(in, u, site.CoolingPower); list != nil {
		out.Source = meteredCooling
		return func(i int, _ uint8) (Range, bool) {
			v := math.Abs(float64(list[i]))
			return Range{v / seasonalCOP.Value, v / seasonalCOP.High, v / seasonalCOP.Low}, !math.IsNaN(v)
		}
	}
	if !(def.RatedPowerKW > 0) {
		return nil
	}
	out.Source = rated
	return func(_ int, state uint8) (Range, bool) {
		switch state {
		case running.PlantUnknown:
			return Range{}, false
		case uint8(site.PlantOff):
			return Range{}, true
		case uint8(site.PlantVent):
			return shareMovingAir.times(def.RatedPowerKW), true
		}
		return shareConditioning.times(def.RatedPowerKW), true
	}
}

func column(in *Input, u int, q site.Quantity) []float32 {
	for i := range in.Site.Points {
		p := &in.Site.Points[i]
		if p.Owner == site.OwnerPlant && p.Index == u && p.Quantity == q {
			if m := in.Grid.Columns[i].Mean; m != nil {
				return m
			}
		}
	}
	return nil
}
