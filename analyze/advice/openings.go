package advice

import (
	"fmt"
	"math"

	"sashlog/analyze/lost"
	"sashlog/configs/site"
)

func (a *adviser) neverUsed() []found {
	s := a.causeSize(lost.NeverUsed, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	// Whatever else is mended, nothing is won while the opening stays shut: at
	// most all that the zones missed.
	s.high = 0
	for _, z := range s.zones {
		s.high += math.Max(a.Summary.Zones[z].Missed.Value, a.Summary.Zones[z].Missed.High)
	}
	s.high = math.Max(s.high, s.h)
	perDay, n := a.causeDays(lost.NeverUsed, everyEpisode)
	u := a.Lost.Patterns[s.zones[0]].Opening
	f := found{Finding: Finding{
		ID: "never-used",
		What: fmt.Sprintf("The windows %s are next to never opened (%s: %s open of %s known): %s could have been open with nothing else in the way, the most if all else is mended too, %s",
			a.inZones(s.zones), a.Site.Zones[s.zones[0]].ID, tenths(u.OpenH), about(u.KnownH), between(s.h, s.low, s.high, unitOf(s.zones)), a.period()),
		Confidence: confidence(s, n, 10),
		RivalExplanations: []string{
			"the window contact is dead or stuck, and the windows are opened after all",
			"opening brings noise, dust, glare or draught, so that it is not an option",
		},
		CheckOnSite: "Try to open the windows: furniture before them, a lock, a broken handle or drive, noise from outside, and whether the contact follows",
		DoNext:      "Clear the way to the windows or repair them, then look at the contact again after two weeks of mild weather",
		Who:         manager,
		UndoIf:      "the windows turn out to be unsafe to use",
		Caution:     windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.Window, site.WindowOpening), Figure: FigureCarpet}
	a.both(&f.Evidence, perDay, a.others(s.zones))
	return []found{f}
}

// others are the zones not listed.
func (a *adviser) others(zones []int) []int {
	listed := map[int]bool{}
	for _, z := range zones {
		listed[z] = true
	}
	var out []int
	for z := range a.Site.Zones {
		if !listed[z] {
			out = append(out, z)
		}
	}
	return out
}

func (a *adviser) notOpened() []found {
	s := a.causeSize(lost.NotOpened, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.NotOpened, everyEpisode)
	f := found{Finding: Finding{
		ID: "not-opened",
		What: fmt.Sprintf("Rooms sat warm or stale with windows shut and nothing mechanical running: %s %s %s",
			between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence: confidence(s, n, 20),
		RivalExplanations: []string{
			"the windows were locked by the control, which is not logged",
			"opening was no option: noise, smell, rain driven in, a meeting",
			"nobody was there although the time counts as occupied",
		},
		CheckOnSite: "See whether handles can be reached, whether a signal says that windows may be opened, and how loud it is with them open",
		DoNext:      "Show when the weather suits (a small light or a notice), make handles easy to reach, and ask what keeps windows shut",
		Who:         manager,
		UndoIf:      "complaints of noise, draught or dust grow",
		Caution:     windowCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.Window, site.WindowOpening, site.CO2, site.AirTemp, site.WindowEnable), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

// clashes finds windows open with the plant running.
func (a *adviser) clashes() []found {
	s := a.causeSize(lost.NotInterlocked, everyZone)
	if len(s.zones) == 0 {
		return nil
	}
	perDay, n := a.causeDays(lost.NotInterlocked, everyEpisode)
	f := found{Finding: Finding{
		ID: "not-interlocked",
		What: fmt.Sprintf("Windows stand open while the plant runs, in weather that needs no plant: %s %s %s",
			between(s.h, s.low, s.high, unitOf(s.zones)), a.inZones(s.zones), a.period()),
		Confidence: confidence(s, n, 20),
		RivalExplanations: append(a.alwaysOpen(s.zones),
			"the plant's status says on while it idles",
			"both running at once is meant (then set the zone's scheme to concurrent in the site file)"),
		CheckOnSite: "Open a window of one of the zones and see whether its unit or valve shuts within five minutes",
		DoNext:      "Wire or programme the window contacts to stop cooling and heating of their zone after about five minutes open",
		Who:         controlsFirm,
		UndoIf:      "rooms fall below the lower comfort limit because windows are forgotten open",
		Caution:     plantCaution,
	}}
	s.fill(a, &f.Finding)
	f.Evidence = Evidence{Points: a.points(s.zones, site.Window, site.WindowOpening, site.PlantStatus, site.CoolingValve, site.HeatingValve), Figure: FigureEpisodes}
	a.both(&f.Evidence, perDay, s.zones)
	return []found{f}
}

// alwaysOpen names zones whose contact says open nearly all the time.
func (a *adviser) alwaysOpen(zones []int) []string {
	var out []string
	for _, z := range zones {
		u := &a.Lost.Patterns[z].Opening
		if u.KnownH > 0 && u.OpenH > 0.8*u.KnownH {
			out = append(out, fmt.Sprintf("the contact of zone %s says open in %s of all hours: it may be wired the wrong way round", a.Site.Zones[z].ID, percent(u.OpenH/u.KnownH)))
		}
	}
	return out
}

// tenths writes a small number of hours.
func tenths(h float64) string { return fmt.Sprintf("%.1f h", h) }
