package exceedance

import (
	"math"

	"sashlog/analyze/comfort"
	"sashlog/analyze/outdoor"
	"sashlog/configs/criteria"
)

// Headline criteria a site may choose.
const (
	headlineEN16798  = "en16798-1"
	headlineEN15251  = "en15251"
	headlineASHRAE55 = "ashrae55"
	headlineIMAC     = "imac-mm"
)

func headlineID(c criteria.Settings) string {
	if c.Headline != "" {
		return c.Headline
	}
	return headlineEN16798
}

// lineOfDay returns the headline's adaptive limits of a day in still air and
// the model they come from. Beyond a standard's range of validity the line
// goes on as our extension and says so: below, EN's operative range of the
// heating season, ASHRAE's and the Indian model's line frozen at its end;
// above, every line frozen at its end.
func lineOfDay(c criteria.Settings, d *outdoor.Day, cat comfort.Category) (comfort.Band, Model) {
	within := func(x, low, high float64) (float64, bool) { return min(max(x, low), high), x < low || x > high }
	switch headlineID(c) {
	case headlineASHRAE55:
		mean, beyond := within(d.RunningMeanASHRAEC, 10, 33.5)
		return labelled(comfort.ASHRAE55Adaptive(mean, comfort.Acceptability(c.ASHRAE55Percent)), beyond, ASHRAEAdaptive, ASHRAEExtended)
	case headlineIMAC:
		mean, beyond := within(d.Mean30DaysC, 13, 38.5)
		return labelled(comfort.IMAC(mean, comfort.IMACMixedMode), beyond, IMACMixedMode, IMACExtended)
	case headlineEN15251:
		if band := comfort.EN15251Adaptive(d.RunningMeanENC, cat); band.Applies() {
			return band, EN15251Adaptive
		}
		band, extended := comfort.EN16798Extended(d.RunningMeanENC, cat)
		return labelled(band, extended, NoModel, EN15251Extended)
	}
	band, extended := comfort.EN16798Extended(d.RunningMeanENC, cat)
	return labelled(band, extended, ENAdaptive, ENExtended)
}

func labelled(band comfort.Band, beyond bool, inside, outside Model) (comfort.Band, Model) {
	switch {
	case !band.Applies():
		return band, NoModel
	case beyond:
		return band, outside
	}
	return band, inside
}

// rangeOfDay returns the limits while plant conditions the zone: EN 16798-1's
// operative range of the season, whatever the headline, or the Indian
// mixed-mode line, which serves both states.
func rangeOfDay(c criteria.Settings, d *outdoor.Day, cat comfort.Category) (comfort.Band, Model) {
	if headlineID(c) == headlineIMAC {
		return lineOfDay(c, d, cat)
	}
	season, model := seasonOf(d.RunningMeanENC)
	if model == NoModel {
		return comfort.Band{LowC: math.NaN(), HighC: math.NaN()}, NoModel
	}
	return comfort.OfficeRange(cat, season), model
}

// seasonOf parts the seasons of the operative ranges by the running mean.
func seasonOf(runningMeanC float64) (comfort.Season, Model) {
	switch {
	case math.IsNaN(runningMeanC):
		return comfort.BetweenSeasons, NoModel
	case runningMeanC <= heatingSeasonToC:
		return comfort.HeatingSeason, ENHeating
	case runningMeanC >= coolingSeasonFromC:
		return comfort.CoolingSeason, ENCooling
	}
	return comfort.BetweenSeasons, ENBetween
}
