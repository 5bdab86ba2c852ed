package lost

import (
	"fmt"
	"math"
	"strings"
)

const ourAssumption = "our assumption"

// clock writes a minute of the day.
func clock(minute int) string { return fmt.Sprintf("%02d:%02d", minute/60, minute%60) }

func percent(share float64) string { return fmt.Sprintf("%.0f %%", share*100) }

// count writes a number with its noun.
func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

func minutes(m float64) string {
	if m < 120 {
		return fmt.Sprintf("%.0f min", m)
	}
	return fmt.Sprintf("%.1f h", m/60)
}

// circumstances ends an episode's sentence with what it was like.
func (e *evidence) circumstances(ep *Episode) string {
	var parts []string
	say := func(format string, v float64) {
		if !math.IsNaN(v) {
			parts = append(parts, fmt.Sprintf(format, v))
		}
	}
	say("outdoors %.1f °C", ep.OutdoorTempC)
	say("indoors %.1f °C", ep.IndoorTempC)
	say("comfort limit %.1f °C", ep.ComfortHighC)
	say("CO2 %.0f ppm", ep.CO2PPM)
	if len(parts) == 0 {
		return ""
	}
	return "; " + strings.Join(parts, ", ")
}

// unexplained says honestly what is known.
func (e *evidence) unexplained(ep *Episode, s *spell) string {
	what := map[string]string{"mech": "mechanical plant ran with the windows shut", "both": "plant ran with windows open",
		"shut": "windows and plant stayed off"}[ep.Running]
	if what == "" {
		what = "the running state varied"
	}
	what += " and no test explains half of it"
	warm, n := 0.0, 0.0
	for _, i := range s.missed {
		for _, u := range e.zones[s.zone].units {
			if a := e.askingFor(u, i); e.cools(u, i) && !math.IsNaN(a.warm) {
				warm, n = warm+a.warm, n+1
				break
			}
		}
	}
	if n > 0 && warm/n >= e.in.Criteria.FewRoomShare {
		what += fmt.Sprintf("; %s of the people its plant serves were too warm, so that it had reason to run", percent(warm/n))
	}
	return what
}
