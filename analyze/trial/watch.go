package trial

import (
	"fmt"
	"math"

	"sashlog/analyze/hours"
	"sashlog/configs/site"
)

// What a trial is stopped at. The 3 % are common practice (a share of occupied
// hours above a comfort limit that is borne with); the rest is our assumption.
const (
	warmStopShare = 0.03
	warmStopK     = 2
	staleStopH    = 1
	startsPerDay  = 3
)

// watches lists what to watch with the signs to stop at.
func watches(in *Input, st *Step, from, to site.Date) []Watch {
	first, last := 0, 0
	for h := range in.Record.Hours {
		if in.Record.Hours[h].Date.Before(from) {
			first = h + 1
		}
		if !to.Before(in.Record.Hours[h].Date) {
			last = h + 1
		}
	}
	warm, stale := st.overShare(in, first, last)
	limit := warmStopShare
	if warm > 0 {
		limit += warm
	}
	percent := func(v float64) string {
		if math.IsNaN(v) {
			return ""
		}
		return fmt.Sprintf("%.1f %% of occupied hours of the same season", 100*v)
	}
	c := &in.Criteria
	out := []Watch{
		{What: "Too warm", Stop: fmt.Sprintf("over any five days on trial a zone is above its comfort limit for more than %.0f %% of occupied hours", 100*limit),
			Then: "end the trial and go back to the usual setting", Today: percent(warm), Basis: "3 % above what is usual: common practice"},
		{What: "Much too warm", Stop: fmt.Sprintf("a zone is more than %d K above its comfort limit for an hour, or somebody feels unwell from heat", warmStopK),
			Then: "usual setting for the rest of the day; note it in the schedule as stopped; after the second time end the trial", Basis: "our assumption"},
	}
	if hasCO2(in, st) {
		out = append(out, Watch{What: "Stale air", Stop: fmt.Sprintf("CO2 in a zone is more than %.0f ppm above outdoors for more than %d h of a day on trial, and was not on days as usual", c.CO2AboveOutdoorPPM, staleStopH),
			Then: "find out whether the windows really opened; end the trial if they cannot", Today: percent(stale), Basis: "the site's CO2 category; the hour is our assumption"})
	} else {
		out = append(out, Watch{What: "Stale air", Stop: "people say the air is stale", Then: "end the trial until CO2 is logged", Basis: "CO2 is not logged in these zones"})
	}
	out = append(out,
		Watch{What: "Rain and wind", Stop: fmt.Sprintf("water comes in once, or windows stand open in rain or at a mean wind above %.0f m/s", c.WindMaxMS),
			Then: "shut the windows; end the trial until rain and wind shut them by themselves or somebody is charged with it", Basis: "the site's criteria"},
		Watch{What: "Humidity", Stop: fmt.Sprintf("the outdoor dew point is above %.0f °C, or water stands on cold surfaces", c.DewPointMaxC),
			Then: "usual setting for that day; note it as stopped", Basis: "the site's criteria"},
		Watch{What: "Security and falls", Stop: "a window that can be reached from outside, or that somebody could fall from, is found open with nobody in the room",
			Then: "end the trial until whoever answers for security and safety agrees to go on", Basis: "common practice"},
		Watch{What: "Plant", Stop: fmt.Sprintf("the plant starts more than %d times on a day on trial, or shows an alarm", startsPerDay),
			Then: "end the trial; the changeover needs a longer delay first", Basis: "our assumption"},
		Watch{What: "Smoke, works, pollution", Stop: "smoke outdoors, works at the façade, or an authority asks to keep windows shut", Then: "usual setting for those days; note them as stopped", Basis: "common practice"},
	)
	return out
}

func hasCO2(in *Input, st *Step) bool {
	for _, z := range st.Zones {
		for h := range in.Record.Hours {
			if v := in.Record.Values[hours.VCO2PPM][in.Record.Row(z, h)]; !math.IsNaN(float64(v)) {
				return true
			}
		}
	}
	return false
}
