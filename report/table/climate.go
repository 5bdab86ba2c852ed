package table

import (
	"math"

	"sashlog/analyze/climate"
	"sashlog/report/privacy"
)

// climateInto adds to the suitable hours what the climate offered by published
// ways of counting; nulls where the analysis has nothing.
func (in *Input) climateInto(o *object, rule privacy.Rule) *object {
	c := in.Results.Climate
	if c == nil {
		c = &climate.Result{}
	}
	return o.set("measured", offerObject(c.Measured)).set("typical", offerObject(c.Typical)).set("normal_year", yearObject(c.Year)).
		set("agreement", agreementList(c)).set("sensitivity", sensitivityList(c.Sensitivity)).
		set("way_sensitivity", waySensitivityList(c.WaySensitivity)).
		set("air_movement", in.airMovement(c.AirSpeed, rule)).set("fields", in.fields(c)).set("heat_balance", balanceObject(c))
}

func offerObject(o *climate.Offer) any {
	if o == nil {
		return nil
	}
	methods := []any{}
	for _, m := range o.Methods {
		methods = append(methods, (&object{}).set("method", m.Name).set("words", m.Words).set("source", m.Source).
			set("suited_h", figure{num(m.SuitedH), num(m.SuitedH), num(m.SuitedH + m.UnknownH)}).set("outside_validity_h", num(m.OutsideH)))
	}
	needs := &object{}
	for n := climate.Need(0); n < climate.NumNeeds; n++ {
		needs.set(n.String(), num(o.NeedH[n]))
	}
	n := &o.Night
	months := []any{}
	for _, kh := range n.ByMonthKh {
		months = append(months, num(kh))
	}
	night := (&object{}).set("nights", n.Nights).set("unknown_nights", n.UnknownNights).set("critical_k", num(n.CriticalK)).
		set("cooling_potential_kh_per_night", num(n.CoolingPotentialKh)).set("by_month_kh", months).
		set("storage_w_m2_per_air_change", num(n.StorageWm2PerAirChange)).set("short_days", n.ShortDays).set("covered_days", n.CoveredDays).
		set("unknown_days", n.UnknownDays).set("short_h", num(n.ShortH)).set("credited_h", num(n.CreditedH)).set("unknown_h", num(n.UnknownH))
	return (&object{}).set("name", o.Name).set("occupied_h", num(o.OccupiedH)).set("methods", methods).set("need_h", needs).
		set("air_change_asked_median_per_h", num(o.RequiredMedianPerH)).set("air_change_asked_90_per_h", num(o.Required90PerH)).set("night", night)
}

func balanceObject(c *climate.Result) *object {
	b := c.Balance
	return (&object{}).set("gains_w_m2", num(b.GainsWm2)).set("loss_w_m2_k", num(b.LossWm2K)).set("min_air_change_per_h", num(b.MinAirChangePerH)).
		set("max_air_change_per_h", num(b.MaxAirChangePerH)).set("height_m", num(b.HeightM)).set("height_from", c.HeightNote).
		set("heating_c", num(b.HeatingC)).set("cooling_c", num(b.CoolingC)).set("balance_point_c", num(b.BalancePointC()))
}

func yearObject(y *climate.Year) any {
	if y == nil {
		return nil
	}
	months := []any{}
	for _, m := range y.Months {
		months = append(months, (&object{}).set("month", m.Month).set("verdict", m.Verdict.String()).set("known_share", num(m.ShareKnown)).
			set("measured_c", num(m.MeasuredC)).set("typical_c", num(m.TypicalC)).set("occupied_h", num(m.OccupiedH)).
			set("measured_suited_h", num(m.MeasuredSuitedH)).set("typical_suited_h", num(m.TypicalSuitedH)))
	}
	return (&object{}).set("typical_year", y.Name).set("verdict", y.Verdict.String()).set("normal", y.Normal && y.Known).set("measured_c", num(y.MeasuredC)).
		set("typical_c", num(y.TypicalC)).set("occupied_h", num(y.OccupiedH)).set("measured_suited_h", num(y.MeasuredSuitedH)).
		set("typical_suited_h", num(y.TypicalSuitedH)).set("months", months)
}

func agreementList(c *climate.Result) []any {
	out := []any{}
	for j := range c.Agreement {
		for k := range j {
			p := c.Agreement[j][k]
			out = append(out, (&object{}).set("first", c.Measured.Methods[j].Name).set("second", c.Measured.Methods[k].Name).
				set("agree_share", num(p.AgreeShare)).set("known_h", num(p.KnownH)).set("only_first_h", num(p.OnlyFirstH)).set("only_second_h", num(p.OnlySecondH)))
		}
	}
	return out
}

func sensitivityList(list []climate.Moved) []any {
	out := []any{}
	for _, m := range list {
		out = append(out, movedInto(&object{}, m))
	}
	return out
}

func waySensitivityList(list []climate.WayMoved) []any {
	out := []any{}
	for _, m := range list {
		out = append(out, movedInto((&object{}).set("method", m.Way), m.Moved))
	}
	return out
}

func movedInto(o *object, m climate.Moved) *object {
	return o.set("key", m.Key).set("words", m.Words).set("from", m.From).set("to", m.To).
		set("suited_h", figure{num(m.SuitedH), num(m.SuitedH), num(m.SuitedH + m.UnknownH)}).set("change_h", num(m.ChangeH))
}

func (in *Input) airMovement(a *climate.AirSpeed, rule privacy.Rule) any {
	if a == nil {
		return nil
	}
	of := func(s *climate.SpeedSteps) *object {
		speeds := []any{}
		for k, v := range climate.SpeedsMS {
			speeds = append(speeds, (&object{}).set("air_speed_m_s", num(v)).set("added_suited_h", num(s.AddedIncrementH[k])).set("added_suited_by_set_h", num(s.AddedEffectH[k])).
				set("relieved_h", num(s.RelievedIncrementH[k])).set("relieved_by_set_h", num(s.RelievedSETH[k])))
		}
		return (&object{}).set("suited_still_air_h", num(s.SuitedH)).set("too_warm_indoors_h", num(s.WarmH)).set("too_warm_free_running_h", num(s.WarmFreeH)).
			set("indoor_known_h", num(s.TemperatureH)).set("indoor_unknown_h", num(s.TemperatureUnknownH)).set("speeds", speeds)
	}
	zones := []any{}
	for z := range a.Zones {
		s := &a.Zones[z]
		o := (&object{}).set("id", rule.ID(z)).set("openings", s.Openings).set("installed_m_s", num(s.InstalledMS))
		part := of(s)
		o.keys, o.values = append(o.keys, part.keys...), append(o.values, part.values...)
		zones = append(zones, o)
	}
	return (&object{}).set("building", of(&a.Building)).set("zones", zones)
}

func (in *Input) fields(c *climate.Result) *object {
	of := func(f *climate.Fields) *object {
		list := []any{}
		edge := func(lo, hi int, edges []float64) (num, num) {
			low, high := math.NaN(), math.NaN()
			if lo >= 0 {
				low = edges[lo]
			}
			if hi < len(edges) {
				high = edges[hi]
			}
			return num(low), num(high)
		}
		for h := range f.HoursH {
			for t := range f.HoursH[h] {
				o := &object{}
				low, high := edge(t-1, t, f.TempEdgesC[:])
				o.set("from_c", low).set("to_c", high)
				known := h <= len(f.HumidityEdges)
				low, high = num(math.NaN()), num(math.NaN())
				if known {
					low, high = edge(h-1, h, f.HumidityEdges)
				}
				o.set("humidity_known", known).set("humidity_from", low).set("humidity_to", high)
				for feel := climate.Feel(0); feel < climate.NumFeels; feel++ {
					o.set([...]string{"too_cool_h", "comfortable_h", "too_warm_h", "comfort_unknown_h"}[feel], num(f.HoursH[h][t][feel]))
				}
				list = append(list, o)
			}
		}
		return (&object{}).set("humidity", f.Humidity).set("unknown_h", num(f.UnknownH)).set("fields", list)
	}
	return (&object{}).set("outdoors", of(&c.Outdoors)).set("indoors", of(&c.Indoors))
}
