package advice

import (
	"fmt"
	"math"
	"sort"

	"sashlog/analyze/changeover"
	"sashlog/analyze/leaders"
	"sashlog/analyze/lost"
	"sashlog/configs/site"
)

// leaderOf is what the event study found of a zone's thermostat, over the units
// it leads the one with most hours; nil when nothing.
func (a *adviser) leaderOf(zone int) *leaders.Leader {
	if a.Leaders == nil {
		return nil
	}
	for k := range a.Leaders.Leaders {
		if l := &a.Leaders.Leaders[k]; l.Zone == zone {
			return l
		}
	}
	return nil
}

// instead words what the logged runs would have been with the thermostat
// ignored, moved, or two calls needed, and what it would cost the room itself.
func instead(room string, l *leaders.Leader) string {
	one := func(i *leaders.Instead, from string) string {
		own := fmt.Sprintf("at most %s h", whole(math.Ceil(i.OwnWarmHighH)))
		if low := math.Floor(i.OwnWarmLowH); low >= 1 {
			own = fmt.Sprintf("%s to %s h", whole(low), whole(math.Ceil(i.OwnWarmHighH)))
		}
		if i.OwnWarmHighH < 0.5 {
			own = "no h"
		}
		return fmt.Sprintf("%s up to %s zone-hours freed in the other rooms, %s more too warm in zone %s", from, whole(i.FreedH), own, room)
	}
	return fmt.Sprintf("On the %s it led in the logs: ", count(l.Starts, "run", "runs")) + one(&l.Ignored, "with its call left out") + "; " +
		one(&l.Moved, "with the mean of the other rooms in its place") + "; " + one(&l.TwoCalls, "with two calls needed") +
		". In the rest of those runs other rooms, the weather or the clock asked for the plant as well; the room's own hours assume that it goes on warming as it did before such starts, by 2 K at most"
}

// tightened finds settings that became tighter within the period: dates at which
// a plant unit began to behave so, the two worst. What became wider is told
// with the changeover, since nothing is left to gain from it.
func (a *adviser) tightened() []found {
	if a.Changeover == nil {
		return nil
	}
	var out []found
	for k := range a.Changeover.Units {
		u := &a.Changeover.Units[k]
		for _, l := range u.Limits() {
			if l.Shift != nil && l.Undetermined == "" && (l.Shift.After < l.Shift.Before) == l.Above {
				out = append(out, a.tighterLimit(u, l)...)
			}
		}
		if s := u.Clock; s != nil && s.After > s.Before {
			out = append(out, a.moreByClock(u, s)...)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return a.weight(&out[i]) > a.weight(&out[j]) })
	return out[:min(mostAlike, len(out))]
}

// since sums, from a day on, the missed hours of the zones a unit serves that
// are of the causes kept and at steps for which at holds: the size (least: with
// no other cause beside) and the hours by day.
func (a *adviser) since(unit, day int, keep func(ep *lost.Episode) bool, at func(step int) bool) (s size, perDay []float64, episodes int) {
	n := len(a.Site.Zones)
	h, low, high := make([]float64, n), make([]float64, n), make([]float64, n)
	perDay = make([]float64, len(a.cal.Days))
	for k := range a.Lost.Episodes {
		ep := &a.Lost.Episodes[k]
		if int(a.cal.DayOf[ep.FromStep]) < day || !keep(ep) || !a.servesAny(unit, []int{ep.Zone}) {
			continue
		}
		any := false
		for i := ep.FromStep; i < ep.ToStep; i++ {
			if !a.Record.Class[ep.Zone][i].Missed() {
				continue
			}
			high[ep.Zone] += a.Grid.StepH()
			if !at(i) {
				continue
			}
			any = true
			h[ep.Zone] += a.Grid.StepH()
			perDay[a.cal.DayOf[i]] += a.Grid.StepH()
			if len(ep.Contributing) == 0 {
				low[ep.Zone] += a.Grid.StepH()
			}
		}
		if any {
			episodes++
		}
	}
	of := func(v []float64) func(int) float64 { return func(z int) float64 { return v[z] } }
	return a.sizeOf(of(h), of(low), of(high)), perDay, episodes
}

func (a *adviser) tighterLimit(u *changeover.Subject, l changeover.Limit) []found {
	if l.Zone >= 0 && !(a.Site.Zones[l.Zone].People > 3) {
		return nil // the level of a small room's thermostat tells who is there
	}
	series, where := a.Outdoor.TempC, "outdoors"
	if l.Zone >= 0 {
		series, where = a.Indoor[l.Zone].OperativeC, "in zone "+a.Site.Zones[l.Zone].ID
	}
	low, high := math.Min(l.Shift.Before, l.Shift.After), math.Max(l.Shift.Before, l.Shift.After)
	s, perDay, n := a.since(u.Index, l.Shift.Day,
		func(ep *lost.Episode) bool {
			return ep.Cause == lost.LimitTooTight && ep.Indoors == (l.Zone >= 0) || l.Zone >= 0 && ep.Cause == lost.FewRoom && ep.Led == l.Zone
		},
		func(i int) bool { return i < len(series) && float64(series[i]) >= low && float64(series[i]) <= high })
	if len(s.zones) == 0 {
		return nil
	}
	side, way := "below", "ends open mode"
	if l.Above {
		side = "above"
	}
	if l.Opening {
		way = "lets open mode begin no more"
	}
	id := fmt.Sprintf("limit-tightened-%s-%s-%s", u.ID, side, map[bool]string{true: "opening", false: "closing"}[l.Opening])
	if l.Zone >= 0 {
		id += "-" + a.Site.Zones[l.Zone].ID
	}
	f := found{Finding: Finding{
		ID: id,
		What: fmt.Sprintf("Since %s (between %s and %s) plant unit %s %s %s %.1f °C %s, before that %s %.1f °C: %s at temperatures in between could have been open since then",
			a.date(l.Shift.Day), a.date(l.Shift.FromDay), a.date(l.Shift.ToDay), u.ID, way, side, l.Shift.After, where, side, l.Shift.Before,
			between(s.h, s.low, s.high, unitOf(s.zones))),
		Confidence: confidence(s, n, 20),
		RivalExplanations: []string{
			"the season changed at about that date, and with it what people and other limits do",
			"a sensor of the control was replaced, moved or began to read otherwise, while the setting stayed",
		},
		CheckOnSite: fmt.Sprintf("Ask who changed what on plant unit %s about %s (job sheets, the controller's own list of changes), and compare its sensor with the logged one", u.ID, a.date(l.Shift.Day)),
		DoNext:      "Put the setting back unless there was a reason that still holds, and write it with its date into the diary of events, so that the next comparison knows of it",
		Who:         controlsFirm,
		UndoIf:      "the reason for the change shows again, or a zone is above its comfort limit for more than 3 % of occupied hours",
		Caution:     "Ask for the reason first: the change may have answered a complaint or a danger. " + windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.OutdoorTemp, site.AirTemp, site.OperativeTemp, site.PlantStatus, site.Window, site.WindowOpening), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

func (a *adviser) moreByClock(u *changeover.Subject, shift *changeover.Shift) []found {
	s, perDay, n := a.since(u.Index, shift.Day, func(ep *lost.Episode) bool { return ep.Cause == lost.ClockStart }, func(int) bool { return true })
	if len(s.zones) == 0 {
		return nil
	}
	f := found{Finding: Finding{
		ID: "clock-start-added-" + u.ID,
		What: fmt.Sprintf("Since %s (between %s and %s) plant unit %s is started by the clock on %s of working days, before that on %s: %s could have been open since then",
			a.date(shift.Day), a.date(shift.FromDay), a.date(shift.ToDay), u.ID, percent(shift.After), percent(shift.Before), between(s.h, s.low, s.high, unitOf(s.zones))),
		Confidence: confidence(s, n, 20),
		RivalExplanations: []string{
			"a programme for the season began on that date as intended",
			"the start moves with the weather and only looks fixed since then",
		},
		CheckOnSite: fmt.Sprintf("Ask who changed the time programme of plant unit %s about %s, and why", u.ID, a.date(shift.Day)),
		DoNext:      "Put the time programme back unless the reason still holds, and write the change with its date into the diary of events",
		Who:         controlsFirm,
		UndoIf:      "rooms are below 20 °C, or stale, for the first hour of occupied time on more than one day a week",
		Caution:     plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.PlantStatus, site.ZoneAirflow, site.OutdoorTemp), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

func (a *adviser) date(day int) string {
	return a.cal.Days[max(0, min(day, len(a.cal.Days)-1))].Date.String()
}
