package table

import "sashlog/analyze/energy"

// energy writes what the plant used; null without plant.
func (in *Input) energy() any {
	e := in.Results.Energy
	if e == nil || len(e.Units) == 0 {
		return nil
	}
	of := func(r energy.Range) figure { return figure{num(r.Value), num(r.Low), num(r.High)} }
	maybe := func(r *energy.Range) any {
		if r == nil {
			return nil
		}
		return of(*r)
	}
	units := []any{}
	for i := range e.Units {
		u := &e.Units[i]
		units = append(units, (&object{}).set("id", u.ID).set("power_known_by", u.Source).set("run_h", num(u.RunH)).set("known_h", num(u.KnownH)).
			set("used_kwh", of(u.Used)).set("missed_conditioned_kwh", of(u.MissedConditioned)).set("missed_ventilated_kwh", of(u.MissedVentilated)).set("clash_kwh", of(u.Clash)))
	}
	return (&object{}).set("used_kwh", of(e.Used)).set("missed_conditioned_kwh", of(e.MissedConditioned)).set("missed_ventilated_kwh", of(e.MissedVentilated)).
		set("clash_kwh", of(e.Clash)).set("units_not_known", e.Unknown).set("price_per_kwh", num(e.PricePerKWh)).set("currency", e.Currency).
		set("carbon_kg_per_kwh", num(e.CarbonKgPerKWh)).set("missed_money", maybe(e.MissedMoney)).set("clash_money", maybe(e.ClashMoney)).
		set("missed_carbon_kg", maybe(e.MissedCarbonKg)).set("clash_carbon_kg", maybe(e.ClashCarbonKg)).set("units", units)
}
