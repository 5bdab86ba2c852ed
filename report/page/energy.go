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
	if e.MissedMoney != nil {
		out = append(out, text(fmt.Sprintf("At %s %s per kWh the missed hours cost about %s.", words.Number(e.PricePerKWh, 2), words.Clean(e.Currency),
			words.Between(e.MissedMoney.Value*k, e.MissedMoney.Low*k, e.MissedMoney.High*k, words.Clean(e.Currency)))))
	}
	if e.MissedCarbonKg != nil {
		out = append(out, text(fmt.Sprintf("At %s kg per kWh that is about %s of CO2 equivalent.", words.Number(e.CarbonKgPerKWh, 3),
			words.Between(e.MissedCarbonKg.Value*k, e.MissedCarbonKg.Low*k, e.MissedCarbonKg.High*k, "kg"))))
	}
	t := table{ID: "energy-units", Caption: "Electricity of plant units", Head: []column{col("Unit"), col("Power known by"), num("Ran (h)"), num("Used (kWh)"), num("Missed, conditioning (kWh)"), num("Missed, moving air (kWh)"), num("With windows open (kWh)")}}
	number := func(r energy.Range) string { return words.Between(r.Value*k, r.Low*k, r.High*k, "") }
	for i := range e.Units {
		u := &e.Units[i]
		if u.Source == "" {
			t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), "not known", words.HoursNumber(u.RunH*k), words.Dash, words.Dash, words.Dash, words.Dash))
			continue
		}
		t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), u.Source, words.HoursNumber(u.RunH*k), number(u.Used), number(u.MissedConditioned), number(u.MissedVentilated), number(u.Clash)))
	}
	t.Foot = []string{"Figures " + b.span.Words + ". A unit's energy is shared by its occupied zones; the least counts only hours in which all of them could have been open, the most every hour in which any could. " +
		"Rated: without a meter a unit is taken to use half its rated power while heating or cooling (15 to 100 %) and a quarter while moving air (5 to 50 %), our assumption; metered cooling gives electricity divided by 3.5 (2.5 to 5)."}
	return append(out, b.table(t))
}

func sum(a, b energy.Range) energy.Range {
	return energy.Range{Value: a.Value + b.Value, Low: a.Low + b.Low, High: a.High + b.High}
}
