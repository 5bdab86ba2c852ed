package page

import (
	"fmt"

	"sashlog/analyze/energy"
	"sashlog/report/words"
)

// cost shows what missed hours and open windows beside running plant used.
func (b *builder) cost() []block {
	e := b.in.Results.Energy
	if e == nil || len(e.Units) == 0 {
		return nil
	}
	out := []block{heading("What it costs")}
	if e.Used.High == 0 {
		return append(out, note("Neither metered nor rated power is known for any plant unit that ran, so no energy can be stated. Give rated_power_kw in the site file, or log electric_power."))
	}
	k := b.span.PerYear
	kwh := func(r energy.Range) string { return words.Between(r.Value*k, r.Low*k, r.High*k, "kWh") }
	out = append(out, text(fmt.Sprintf("Plant used about %s %s while the weather suited and zones could have been open: %s while heating or cooling air and %s while merely moving it. With windows open beside running plant it used %s, in any weather; that is what stood against each other, not all of it waste.",
		kwh(sum(e.MissedConditioned, e.MissedVentilated)), b.span.Words, kwh(e.MissedConditioned), kwh(e.MissedVentilated), kwh(e.Clash))))
	each := func(missed, clash *energy.Range, unit string) string {
		of := func(r *energy.Range) string { return words.Between(r.Value*k, r.Low*k, r.High*k, unit) }
		return fmt.Sprintf("the missed hours %s and the hours with windows open beside running plant %s", of(missed), of(clash))
	}
	if e.MissedMoney != nil && e.ClashMoney != nil {
		out = append(out, text(fmt.Sprintf("At %s %s per kWh that cost, %s: %s. Hours that are both count in both.", words.Number(e.PricePerKWh, 2), words.Clean(e.Currency), b.span.Words,
			each(e.MissedMoney, e.ClashMoney, words.Clean(e.Currency)))))
	}
	if e.MissedCarbonKg != nil && e.ClashCarbonKg != nil {
		out = append(out, text(fmt.Sprintf("At %s kg of CO2 equivalent per kWh it is, %s: %s.", words.Number(e.CarbonKgPerKWh, 3), b.span.Words, each(e.MissedCarbonKg, e.ClashCarbonKg, "kg"))))
	}
	if h := unknownPowerH(e); h >= 0.05 {
		out = append(out, note(fmt.Sprintf("Plant ran for %s %s while its power was not known (no meter reading, or no rating); those hours are in none of these figures, which are too low by what it used in them.", words.Hours(h*k), b.span.Words)))
	}
	t := table{ID: "energy-units", Caption: "Electricity of plant units", Head: []column{col("Unit"), col("Power known by"), num("Ran (h)"), num("Of it with known power (h)"), num("Used (kWh)"), num("Missed, conditioning (kWh)"), num("Missed, moving air (kWh)"), num("With windows open (kWh)")}}
	number := func(r energy.Range) string { return words.Between(r.Value*k, r.Low*k, r.High*k, "") }
	for i := range e.Units {
		u := &e.Units[i]
		if u.Source == "" {
			t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), "not known", words.HoursNumber(u.RunH*k), words.HoursNumber(0), words.Dash, words.Dash, words.Dash, words.Dash))
			continue
		}
		t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), u.Source, words.HoursNumber(u.RunH*k), words.HoursNumber(u.KnownH*k), number(u.Used), number(u.MissedConditioned), number(u.MissedVentilated), number(u.Clash)))
	}
	t.Foot = []string{"Figures " + b.span.Words + ". A unit's energy is shared by its occupied zones; the least counts only hours in which all of them could have been open, the most every hour in which any could. " +
		"Metered: ± 2 %, the error a class 2 meter may have (IEC 62053-21, from memory). Rated: without a meter a unit is taken to use half its rated power while heating or cooling (15 to 100 %) and a quarter while moving air (5 to 50 %), our assumption; metered cooling gives electricity divided by 3.5 (2.5 to 5)."}
	return append(out, b.table(t))
}

// unknownPowerH are the hours plant ran with its power unknown.
func unknownPowerH(e *energy.Result) (h float64) {
	for i := range e.Units {
		h += e.Units[i].RunH - e.Units[i].KnownH
	}
	return h
}

func sum(a, b energy.Range) energy.Range {
	return energy.Range{Value: a.Value + b.Value, Low: a.Low + b.Low, High: a.High + b.High}
}
