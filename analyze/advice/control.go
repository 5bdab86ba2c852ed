package advice

import (
	"fmt"

	"sashlog/analyze/lost"
	"sashlog/configs/site"
)

// overridden finds hours lost while somebody had taken the control by hand.
func (a *adviser) overridden() []found {
	s := a.causeSize(lost.Overridden, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.Overridden, everyEpisode)
	f := found{Finding: Finding{
		ID: "manual-override",
		What: fmt.Sprintf("A manual override was on while the weather suited: %s could have been open %s %s",
			between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence: confidence(s, n, 10),
		RivalExplanations: []string{
			"the override was needed: a fault, cleaning, work on the building, an event",
			"the signal says override for another reason, such as maintenance mode",
		},
		CheckOnSite: "Read who switched what by hand and why: hand switches at the unit, overrides left in the operator's screen, notes of the caretaker",
		DoNext:      "Let overrides end by themselves after two to four hours, and list those still on once a week",
		Who:         manager,
		UndoIf:      "the same override has to be set again day after day: then mend what makes it necessary",
		Caution:     "Never end an override before knowing why it was set: somebody may be at work on the plant. " + plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.ManualOverride, site.PlantStatus, site.Window, site.WindowOpening), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

// lockedOut finds hours in which the control kept windows shut with nothing
// running although the weather suited.
func (a *adviser) lockedOut() []found {
	s := a.causeSize(lost.LockedOut, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.LockedOut, everyEpisode)
	f := found{Finding: Finding{
		ID: "needless-lock",
		What: fmt.Sprintf("Windows were locked with nothing mechanical running, in weather within the limits of humidity, wind and rain: %s could have been open %s %s",
			between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence: confidence(s, n, 10),
		RivalExplanations: []string{
			"a reason that is not logged: smoke signal, security at night rounds, pollen or smell outdoors",
			"gusts or showers between two readings of the weather",
		},
		CheckOnSite: "Read the conditions of the lock in the window control (wind, rain, humidity, time) with their delays, and see what the rain and wind sensors say on a dry, calm day",
		DoNext:      "Shorten the time the lock stays on after its reason has gone, clean or replace a rain sensor that stays wet, and set its limits no tighter than the makers of windows and drives ask",
		Who:         controlsFirm,
		UndoIf:      "rain gets in, a window slams, or a drive stops against the wind",
		Caution:     "Locks may be part of smoke control or security: do not touch those. " + windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.WindowEnable, site.WindowCommand, site.Window, site.WindowOpening, site.Rain, site.WindSpeed), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

// misledThermostats finds hours lost to thermostats that read well above the
// room they stand for.
func (a *adviser) misledThermostats() []found {
	s := a.causeSize(lost.BadThermostat, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.BadThermostat, everyEpisode)
	plant := a.plantWords(s.zones)
	f := found{Finding: Finding{
		ID: "misleading-thermostat",
		What: fmt.Sprintf("%s ran while a thermostat read warmer than its own room, which was within comfort: %s could have been open %s %s",
			capital(plant), between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence: confidence(s, n, 10),
		RivalExplanations: []string{
			"the room's other sensor reads too low, hangs in a draught or by an open window",
			"the thermostat serves a hot corner of the room where people do sit",
		},
		CheckOnSite: "Lay a thermometer beside the thermostat and one where people sit for a day; look for sun, lamps, screens, a shelf or a hollow wall behind it",
		DoNext:      "Move the thermostat to where people are, shield it from sun and equipment, or let the mean of the room's sensors decide",
		Who:         controlsFirm,
		UndoIf:      "people in the corner it stood for say that it is too warm",
		Caution:     plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.ThermostatTemp, site.AirTemp, site.OperativeTemp, site.SetpointCool, site.PlantStatus), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

// cycling finds hours lost to plant that starts and stops again and again.
func (a *adviser) cycling() []found {
	s := a.causeSize(lost.ShortCycling, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.ShortCycling, everyEpisode)
	plant := a.plantWords(s.zones)
	f := found{Finding: Finding{
		ID: "short-cycling",
		What: fmt.Sprintf("%s %s three times or more within two hours, so that open mode never settles: %s could have been open %s %s",
			capital(plant), verb(plant, "starts and stops", "start and stop"), between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence: confidence(s, n, 10),
		RivalExplanations: []string{
			"a test or a repair was under way",
			"the status flickers while the unit runs on",
		},
		CheckOnSite: "Watch " + plant + " for an hour in mild weather: what starts it, what stops it, and how far apart its limits are",
		DoNext:      "Set the limits for opening and for closing at least 1 K apart, and a least time of 30 to 60 min in either mode",
		Who:         controlsFirm,
		UndoIf:      "rooms leave their comfort limits while waiting for the next change",
		Caution:     plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.PlantStatus, site.CoolingValve, site.ZoneAirflow, site.Window, site.WindowOpening), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}
