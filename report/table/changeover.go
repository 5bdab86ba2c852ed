package table

import (
	"math"

	"sashlog/analyze/changeover"
	"sashlog/analyze/leaders"
	"sashlog/report/privacy"
)

// changeover writes the limits the building behaves as if it had, its rhythm,
// dates of change, and which rooms close it. Of rooms that may not be shown in
// detail nothing is written but their shares in sums.
func (in *Input) changeover(rule privacy.Rule) any {
	c := in.Results.Changeover
	if c == nil {
		return nil
	}
	units, zones := []any{}, []any{}
	for i := range c.Units {
		units = append(units, in.subject(&c.Units[i], rule, c.Units[i].ID, false))
	}
	for i := range c.Zones {
		if z := c.Zones[i].Index; !rule.Protected(z) {
			zones = append(zones, in.subject(&c.Zones[i], rule, rule.ID(z), true))
		}
	}
	return (&object{}).set("plant", units).set("zones", zones).set("behaviours_tried", c.Tried).set("leaders", in.leaders(rule))
}

func (in *Input) subject(s *changeover.Subject, rule privacy.Rule, id string, zone bool) *object {
	o := (&object{}).set("id", id)
	for _, way := range []struct {
		name string
		d    *changeover.Direction
	}{{"closing", &s.Closing}, {"opening", &s.Opening}} {
		limits := []any{}
		for _, l := range way.d.Limits {
			if l.Zone >= 0 && rule.Protected(l.Zone) {
				continue
			}
			of := "outdoors"
			if l.Zone >= 0 {
				of = rule.ID(l.Zone)
			}
			side := "below"
			if l.Above {
				side = "above"
			}
			limits = append(limits, (&object{}).set("temperature_of", of).set("closed", side).
				set("level_c", figure{num(l.LevelC), num(l.LowC), num(l.HighC)}).set("blur_k", num(l.BlurK)).
				set("changes_explained", num(l.Changes)).set("changes", l.All).set("openings_held_off", num(l.HeldOff)).set("undetermined", l.Undetermined).set("changed", in.shift(l.Shift)))
		}
		curve := []any{}
		for _, p := range way.d.Curve {
			curve = append(curve, (&object{}).set("from_c", num(p.FromC)).set("to_c", num(p.ToC)).set("moments", p.Moments).
				set("changed", p.Changed).set("fitted_share", num(p.Fitted)))
		}
		o.set(way.name, (&object{}).set("limits", limits).set("changes", way.d.Changes).set("moments", way.d.Moments).
			set("refused", way.d.Refused).set("curve", curve))
	}
	spells := func(sp *changeover.Spells) *object {
		return (&object{}).set("n", sp.N).set("median_min", num(sp.MedianMin)).set("p10_min", num(sp.ShortMin)).set("p90_min", num(sp.LongMin)).
			set("under_15_min", sp.UnderQuarterH).set("under_30_min", sp.UnderHalfHour).set("cut_short", sp.CutShort)
	}
	o.set("open_spells", spells(&s.Open)).set("closed_spells", spells(&s.Closed)).
		set("switches_per_day", num(s.SwitchesPerDay)).set("switches_most", num(s.SwitchesMost)).set("days", s.Days)
	week, year := []any{}, []any{}
	for _, v := range s.OpenShareWeekday {
		week = append(week, num(v))
	}
	for _, v := range s.OpenShareMonth {
		year = append(year, num(v))
	}
	o.set("open_share_by_weekday_from_sunday", week).set("open_share_by_month", year)
	if zone {
		delay := func(d *changeover.Delay) *object {
			return (&object{}).set("n", d.N).set("never", d.Never).set("median_min", num(d.MedianMin)).set("p90_min", num(d.Slow90th))
		}
		o.set("suited_to_open", delay(&s.ToOpen)).set("unsuited_to_closed", delay(&s.ToClose)).set("plant_stop_to_open", delay(&s.Released))
	}
	return o.set("clock_start_changed", in.shift(s.Clock))
}

func (in *Input) shift(s *changeover.Shift) any {
	if s == nil {
		return nil
	}
	day := func(d int) string {
		return in.Results.Calendar.Days[min(d, len(in.Results.Calendar.Days)-1)].Date.String()
	}
	return (&object{}).set("date", day(s.Day)).set("from", day(s.FromDay)).set("to", day(s.ToDay)).
		set("before", figure{num(s.Before), num(s.BeforeLow), num(s.BeforeHigh)}).set("after", figure{num(s.After), num(s.AfterLow), num(s.AfterHigh)}).
		set("p", num(s.P)).set("days", s.Days)
}

func interval(i leaders.Interval) figure { return figure{num(i.Value), num(i.Low), num(i.High)} }

// leaders writes the rooms whose thermostats start the plant.
func (in *Input) leaders(rule privacy.Rule) any {
	r := in.Results.Leaders
	if r == nil {
		return nil
	}
	list, units, explained := []any{}, []any{}, []any{}
	instead := func(i *leaders.Instead) *object {
		return (&object{}).set("freed_h", num(i.FreedH)).set("freed_person_h", num(i.FreedPersonH)).set("runs_avoided", i.RunsAvoided).
			set("own_warm_h_at_least", num(i.OwnWarmLowH)).set("own_warm_h_at_most", num(i.OwnWarmHighH))
	}
	for k := range r.Leaders {
		l := &r.Leaders[k]
		excess := interval(l.ExcessK)
		limit := l.LimitC
		if rule.Protected(l.Zone) {
			excess, limit = plain(math.NaN()), math.NaN()
		}
		list = append(list, (&object{}).set("zone", rule.ID(l.Zone)).set("plant", in.Site.Plant[l.Unit].ID).set("calls_from_c", num(limit)).
			set("starts", l.Starts).set("excess_k", excess).set("others_excess_k", interval(l.OthersExcessK)).
			set("others_lost_h", figure{num(l.LostH), num(l.AloneH), num(l.MostH)}).set("others_lost_person_h", num(l.LostPersonH)).set("own_lost_h", num(l.OwnLostH)).
			set("if_ignored", instead(&l.Ignored)).set("if_it_read_the_others_mean", instead(&l.Moved)).set("if_two_calls_were_needed", instead(&l.TwoCalls)))
	}
	for k := range r.Units {
		u := &r.Units[k]
		units = append(units, (&object{}).set("id", u.ID).set("starts", u.Starts).set("led_by_a_zone", u.Led).set("by_the_clock", u.ByClock).
			set("by_outdoors", u.ByOutdoors).set("unexplained", u.Unexplained))
	}
	for _, e := range r.Explained {
		explained = append(explained, (&object{}).set("thermostats", e.N).set("share_of_missed", interval(e.Share)))
	}
	return (&object{}).set("zones", list).set("plant", units).set("explained", explained).set("missed_zone_h", num(r.MissedH))
}
