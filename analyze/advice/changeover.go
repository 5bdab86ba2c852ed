package advice

import (
	"fmt"
	"math"
	"sort"

	"sashlog/analyze/lost"
	"sashlog/configs/site"
)

// fewRooms finds the rooms whose thermostats get everybody's plant started,
// one finding per leading room, the two worst.
func (a *adviser) fewRooms() []found {
	var leaders []int
	for led := range a.Site.Zones {
		for z := range a.Site.Zones {
			if a.Lost.LedH[z][led] > 0 {
				leaders = append(leaders, led)
				break
			}
		}
	}
	var out []found
	for _, led := range leaders {
		take := func(z int) float64 {
			if h := a.Lost.ByCauseH[z][lost.FewRoom]; h > 0 {
				return a.Lost.LedH[z][led] / h
			}
			return 0
		}
		s := a.causeSize(lost.FewRoom, take)
		perDay, n := a.causeDays(lost.FewRoom, func(ep *lost.Episode) bool { return ep.Led == led })
		room := a.Site.Zones[led].ID
		plant := a.plantWords([]int{led})
		f := found{Finding: Finding{
			ID: "few-room-" + room,
			What: fmt.Sprintf("The thermostat of zone %s starts %s for everybody while few people are too warm: %s of suitable weather could have been open %s",
				room, plant, between(s.h, s.low, s.high, unitOf(s.zones)), a.period()),
			Confidence: a.callConfidence(led, confidence(s, n, 20)),
			RivalExplanations: []string{
				"other rooms were too warm as well, but their sensors read low or hang in a cool place",
				"the plant was started by hand or by another signal at the same time",
			},
			CheckOnSite: fmt.Sprintf("Read the cooling set-point of zone %s and which rooms may start %s; see where its thermostat hangs, and what gives off heat there", room, plant),
			DoNext: fmt.Sprintf("Let zone %s be cooled alone, or take it out of the signals that start %s; else raise its set-point towards the comfort limit and remove heat from the room first",
				room, plant),
			Who:     controlsFirm,
			UndoIf:  fmt.Sprintf("zone %s stays above its comfort limit for more than 3 %% of occupied hours", room),
			Caution: "Heat in a core room can be a matter of health or of equipment: watch the room while the setting is tried. " + plantCaution,
		}}
		if l := a.leaderOf(led); l != nil {
			f.DoNext += ". " + instead(room, l)
		}
		s.fill(a, &f.Finding)
		f.Evidence = Evidence{Points: a.points([]int{led}, site.ThermostatTemp, site.AirTemp, site.OperativeTemp, site.SetpointCool, site.PlantStatus),
			Figure: FigureEpisodes}
		a.both(&f.Evidence, perDay, s.zones)
		out = append(out, f)
	}
	sort.SliceStable(out, func(i, j int) bool { return a.weight(&out[i]) > a.weight(&out[j]) })
	return out[:min(mostAlike, len(out))]
}

// callConfidence lowers confidence where a zone's call is inferred from starts
// that often did not follow.
func (a *adviser) callConfidence(z int, c string) string {
	for _, u := range a.Lost.Units {
		for _, call := range u.Calls {
			if call.Zone == z && !call.Logged && c == "high" && float64(call.Followed) < 0.7*float64(call.Passed) {
				return "fair"
			}
		}
	}
	return c
}

func (a *adviser) clockStarts() []found {
	s := a.causeSize(lost.ClockStart, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	p := a.Lost.Patterns[s.zones[0]].Clock
	perDay, n := a.causeDays(lost.ClockStart, everyEpisode)
	plant := a.plantWords(s.zones)
	start := capital(plant) + verb(plant, " runs", " run") + " round the clock"
	check := "See in the time programme, and at the hand switches, why it never stops"
	if !p.RoundTheClock {
		at := clockTimes(p.Minutes)
		start = fmt.Sprintf("%s%s at %s by the clock, whatever the weather (on %s of working days)", capital(plant), verb(plant, " starts", " start"), at, percent(p.Share))
		check = fmt.Sprintf("Read the start times of %s in the time programme: the logs show %s", plant, at)
		if p.HoldMinute >= 0 {
			check += fmt.Sprintf(", held until about %s", clock(p.HoldMinute))
		}
	}
	f := found{Finding: Finding{
		ID:         "clock-start",
		What:       fmt.Sprintf("%s: %s of suitable weather could have been open %s", start, between(s.h, s.low, s.high, unitOf(s.zones)), a.period()),
		Confidence: confidence(s, n, 20),
		RivalExplanations: []string{
			"an early start is needed after cold nights (warm-up of two to three hours is common practice)",
			"an optimum start moves with the weather but looks fixed over this period",
		},
		CheckOnSite: check,
		DoNext:      "Start plant by need and not by the clock: release the start only when rooms are outside their limits or outdoors does not suit, and leave windows free in the morning",
		Who:         controlsFirm,
		UndoIf:      "rooms are below 20 °C, or stale, for the first hour of occupied time on more than one day a week",
		Caution:     plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.PlantStatus, site.ZoneAirflow, site.OutdoorTemp), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

// outdoorLimits finds changeover limits outdoors that are tighter than the
// weather allows, one finding per plant unit, the two worst; indoorLimits
// those indoors.
func (a *adviser) outdoorLimits() []found {
	seen := map[string]bool{}
	var out []found
	for z := range a.Site.Zones {
		unit := a.Lost.Patterns[z].Limit.Unit
		if seen[unit] {
			continue
		}
		seen[unit] = true
		if f, ok := a.outdoorLimit(unit); ok {
			out = append(out, f)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return a.weight(&out[i]) > a.weight(&out[j]) })
	return out[:min(mostAlike, len(out))]
}

// indoorPart is the share of a zone's hours lost to a tight limit that is lost
// to one indoors.
func (a *adviser) indoorPart(z int) float64 {
	if h := a.Lost.ByCauseH[z][lost.LimitTooTight]; h > 0 {
		return math.Min(1, a.Lost.IndoorLimitH[z]/h)
	}
	return 0
}

func (a *adviser) outdoorLimit(unit string) (found, bool) {
	mine := func(z int) bool { return a.Lost.Patterns[z].Limit.Unit == unit }
	s := a.causeSize(lost.LimitTooTight, func(z int) float64 { return one(mine(z)) * (1 - a.indoorPart(z)) })
	if len(s.zones) == 0 {
		return found{}, false
	}
	p := &a.Lost.Patterns[s.zones[0]].Limit
	var limits string
	switch {
	case !math.IsNaN(p.UpperC) && !math.IsNaN(p.LowerC):
		limits = fmt.Sprintf("below about %.1f °C and above about %.1f °C outdoors", p.LowerC, p.UpperC)
	case !math.IsNaN(p.UpperC):
		limits = fmt.Sprintf("above about %.1f °C outdoors", p.UpperC)
	default:
		limits = fmt.Sprintf("below about %.1f °C outdoors", p.LowerC)
	}
	perDay, _ := a.causeDays(lost.LimitTooTight, func(ep *lost.Episode) bool { return mine(ep.Zone) && !ep.Indoors })
	id, who, plant := "outdoor-limit", "The control of "+a.windowsOf(s.zones), "the window control"
	if unit != "" {
		id, plant = "outdoor-limit-"+unit, "plant unit "+unit
		who = "Plant unit " + unit
	}
	f := found{Finding: Finding{
		ID: id,
		What: fmt.Sprintf("%s allows no open mode %s although the weather suits from %.1f °C to %g K below each day's comfort limit: %s could have been open %s",
			who, limits, a.Criteria.OutdoorLowC, a.Criteria.RiseK, between(s.h, s.low, s.high, unitOf(s.zones)), a.period()),
		Confidence: confidence(s, p.UpperN+p.LowerN, 20),
		RivalExplanations: []string{
			"rooms grew too warm at about that outdoor temperature, and their thermostats, not an outdoor limit, closed the windows",
			"the outdoor sensor of the control reads warmer or colder than the one logged (sun, exhaust air)",
		},
		CheckOnSite: "Read the changeover limits of " + plant + " and compare the control's outdoor sensor with the logged one on a sunny day",
		DoNext:      "Widen the limit by 1 K at a time for two weeks each, and watch the share of time too warm",
		Who:         controlsFirm,
		UndoIf:      "a zone is above its comfort limit for more than 3 % of the occupied hours of the trial",
		Caution:     windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.OutdoorTemp, site.PlantStatus, site.Window, site.WindowOpening), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return f, true
}

// windowsOf is "the windows of zone A" or "the windows of zones A and B".
func (a *adviser) windowsOf(zones []int) string {
	if len(zones) == 1 {
		return "the windows of zone " + a.names(zones)
	}
	return "the windows of zones " + a.names(zones)
}

func (a *adviser) indoorLimits() []found {
	s := a.causeSize(lost.LimitTooTight, a.indoorPart)
	if len(s.zones) == 0 {
		return nil
	}
	low, high, n, margin := math.Inf(1), math.Inf(-1), 0, 0.0
	// The calls that lie well below comfort, of the zones themselves where they
	// have any.
	for _, own := range []bool{true, false} {
		for _, u := range a.Lost.Units {
			for _, c := range u.Calls {
				if c.MarginK >= lost.IndoorMarginK && own == contains(s.zones, c.Zone) && a.servesAny(a.Site.PlantIndex(u.ID), s.zones) {
					low, high, margin = math.Min(low, c.AboveC), math.Max(high, c.AboveC), math.Max(margin, c.MarginK)
					n += max(1, c.Followed)
				}
			}
		}
		if n > 0 {
			break
		}
	}
	at := fmt.Sprintf("at about %.1f °C indoors", low)
	if high-low >= 0.3 {
		at = fmt.Sprintf("between %.1f and %.1f °C indoors", low, high)
	}
	perDay, _ := a.causeDays(lost.LimitTooTight, func(ep *lost.Episode) bool { return ep.Indoors })
	f := found{Finding: Finding{
		ID: "indoor-limit",
		What: fmt.Sprintf("Cooling takes over from open windows %s, up to %.1f K below the comfort limit: %s of suitable weather could have been open %s",
			at, margin, between(s.h, s.low, s.high, unitOf(s.zones)), a.period()),
		Confidence: confidence(s, n, 20),
		RivalExplanations: []string{
			"the logged sensor reads lower than what the people feel (radiant heat, a cool wall)",
			"the limit keeps equipment cool and not people",
		},
		CheckOnSite: "Read the cooling set-points " + a.inZones(s.zones),
		DoNext:      "Raise the cooling set-point by 0.5 to 1 K at a time while windows are open, and keep the lower one for mechanical running",
		Who:         controlsFirm,
		UndoIf:      "people say it is too warm, or a zone is above its comfort limit for more than 3 % of occupied hours",
		Caution:     "Heat can harm people who are ill, old or heavily dressed: tell them before a trial. " + windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.SetpointCool, site.ThermostatTemp, site.AirTemp, site.OperativeTemp, site.PlantStatus), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

func (a *adviser) slowReopening() []found {
	s := a.causeSize(lost.SlowToReopen, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.SlowToReopen, everyEpisode)
	plant := a.plantWords(s.zones)
	f := found{Finding: Finding{
		ID: "slow-to-reopen",
		What: fmt.Sprintf("%s back to open mode more than %.0f min after it was due: %s could have been open %s",
			capital(zonesGo(a.names(s.zones), len(s.zones))), a.Criteria.ReopenDelayMin, between(s.h, s.low, s.high, unitOf(s.zones)), a.period()),
		Confidence: confidence(s, n, 20),
		RivalExplanations: []string{
			"rain, wind or a smoke signal that is not logged kept the windows shut",
			"people closed the windows for noise and nobody opened them again",
		},
		CheckOnSite: "Read the delay and the least running time of " + plant + " and how the windows are released after it stops",
		DoNext:      fmt.Sprintf("Shorten the delay to %.0f min or less, or tell people by a signal that windows may be opened", a.Criteria.ReopenDelayMin),
		Who:         controlsFirm,
		UndoIf:      "the plant starts and stops more than three times a day",
		Caution:     windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.PlantStatus, site.Window, site.WindowOpening, site.WindowEnable), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

func one(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

// zonesGo is "zone A goes" or "zones A and B go".
func zonesGo(names string, n int) string {
	if n == 1 {
		return "zone " + names + " goes"
	}
	return "zones " + names + " go"
}

// verb picks the form that fits "plant unit A" or "plant units A and B".
func verb(plant, singular, plural string) string {
	if len(plant) > 11 && plant[:11] == "plant units" {
		return plural
	}
	return singular
}

func clock(minute int) string { return fmt.Sprintf("%02d:%02d", minute/60, minute%60) }

func clockTimes(minutes []int) string {
	var out []string
	for _, m := range minutes {
		out = append(out, clock(m))
	}
	return list(out, 3)
}
