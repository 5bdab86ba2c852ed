package table

import "sort"

// predicted writes what a zone's people would be predicted to feel.
func (in *Input) predicted(z int) any {
	p := in.Results.Predicted
	if p == nil {
		return nil
	}
	s := &p.Zones[z].Summary
	outside := &object{}
	var names []string
	for name := range s.OutsideOf {
		names = append(names, name)
	}
	sort.Strings(names)
	for _, name := range names {
		outside.set(name, num(s.OutsideOf[name]))
	}
	d := &s.Draught
	return (&object{}).set("known_h", num(s.KnownH)).set("outside_h", num(s.OutsideH)).set("outside_of_h", outside).set("unknown_h", num(s.UnknownH)).
		set("assumed_humidity_h", num(s.AssumedHumidityH)).set("assumed_air_speed_h", num(s.AssumedSpeedH)).set("assumed_radiant_h", num(s.AssumedRadiantH)).
		set("mean_vote", num(s.MeanVote)).set("mean_vote_moving_air", num(s.MeanElevated)).
		set("moving_air_h", num(s.MovingH)).set("limited_air_speed_h", num(s.LimitedH)).set("no_effect_h", num(s.NoEffectH)).set("mean_cooling_k", num(s.MeanCoolingK)).
		set("set_edition", p.SETEdition).set("set_mean_c", num(s.SETMeanC)).set("set_p5_c", num(s.SET5C)).set("set_p95_c", num(s.SET95C)).
		set("draught", (&object{}).set("judged_h", num(d.JudgedH)).set("outside_h", num(d.OutsideH)).set("unknown_h", num(d.UnknownH)).
			set("mean_percent", num(d.MeanPct)).set("above_10_percent_h", num(d.AboveH[0])).set("above_20_percent_h", num(d.AboveH[1])).set("above_30_percent_h", num(d.AboveH[2])))
}
