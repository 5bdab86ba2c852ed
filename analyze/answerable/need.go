package answerable

import (
	"math"

	"sashlog/configs/site"
)

// need is one thing a question needs of a zone.
type need struct {
	words    string
	cheapest string
	// met returns how far a zone has it: 1 wholly, 0 not, between in part.
	met func(l *logs, z int) float64
	// optional needs complete the answer; without them it is "partly". A
	// bonus makes it surer, and it is whole without.
	optional, bonus bool
}

func yes(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func siteNeed(words, cheapest string, q ...site.Quantity) need {
	return need{words: words, cheapest: cheapest, met: func(l *logs, _ int) float64 {
		for _, k := range q {
			if l.site[k] {
				return 1
			}
		}
		return 0
	}}
}

func zoneNeed(words, cheapest string, q ...site.Quantity) need {
	return need{words: words, cheapest: cheapest, met: func(l *logs, z int) float64 { return yes(l.any(z, q...)) }}
}

func described(words, cheapest string, has func(z *site.Zone) bool) need {
	return need{words: words, cheapest: cheapest, met: func(l *logs, z int) float64 { return yes(has(&l.s.Zones[z])) }}
}

// windowWords is what the questions call window contacts.
const windowWords = "window contacts or positions"

// What the questions need, with the cheapest way to get it.
func needs() map[string]need {
	const contact = "a battery window contact with its own memory on the largest opening of each zone without one; two weeks in spring and two in autumn answer most"
	return map[string]need{
		"outdoor temperature": siteNeed("outdoor temperature", "hourly readings of the nearest weather station as a file, or one shaded logger on the north side", site.OutdoorTemp),
		"outdoor humidity":    siteNeed("outdoor humidity or dew point", "hourly readings of the nearest weather station as a file", site.OutdoorHumidity, site.OutdoorDewPoint),
		"wind":                siteNeed("wind speed", "hourly readings of the nearest weather station as a file", site.WindSpeed),
		"wind direction":      siteNeed("wind direction", "hourly readings of the nearest weather station as a file", site.WindDirection),
		"rain":                siteNeed("rain", "trend the rain sensor that the window control usually has, or the nearest weather station's file", site.Rain),
		"outdoor CO2":         siteNeed("outdoor CO2", "put one of the room sensors outdoors in the shade for a week and write the level into the site file", site.OutdoorCO2),
		"windows": {words: windowWords, cheapest: contact, met: func(l *logs, z int) float64 {
			if l.s.Zones[z].Openings.None() {
				return math.NaN() // nothing to know: leaves the question without this zone
			}
			return l.windows(z)
		}},
		"plant": {words: "plant status (or valves, dampers, air flow)", cheapest: "trend the run status of each plant unit on change of value; the controller has it already",
			met: func(l *logs, z int) float64 {
				if l.any(z, site.PlantStatus, site.ZoneAirflow, site.ZoneDamper, site.HeatingValve, site.CoolingValve) {
					return 1
				}
				units := l.serving(z)
				if len(units) == 0 {
					return 1 // served by no plant: known to be off
				}
				have := 0
				for _, u := range units {
					if l.plant[u][site.PlantStatus] || l.plant[u][site.SupplyAirflow] {
						have++
					}
				}
				return float64(have) / float64(len(units))
			}},
		"plant type": {words: "whether plant heats, cools or only moves air", cheapest: "trend the coil valves or the unit's heating and cooling status beside its run status",
			met: func(l *logs, z int) float64 {
				units := l.serving(z)
				if len(units) == 0 || l.any(z, site.HeatingValve, site.CoolingValve, site.PlantStatus) {
					return 1
				}
				have := 0
				for _, u := range units {
					if l.plant[u][site.PlantStatus] || l.plant[u][site.SupplyAirTemp] || l.plant[u][site.CoolingValve] {
						have++
					}
				}
				return float64(have) / float64(len(units))
			}},
		"room temperature":  zoneNeed("room temperature", "trend the thermostat's reading, or a battery logger on a desk away from sun and draught", site.AirTemp, site.OperativeTemp, site.GlobeTemp, site.ThermostatTemp),
		"operative":         zoneNeed("operative or globe temperature", "a globe thermometer in the worst zone for two warm weeks", site.OperativeTemp, site.GlobeTemp),
		"room humidity":     zoneNeed("room humidity", "a battery logger of temperature and humidity in a few rooms, one per floor", site.Humidity),
		"CO2":               zoneNeed("CO2", "one battery CO2 logger moved from zone to zone, two weeks each", site.CO2),
		"people counted":    zoneNeed("people counted", "an hourly head count on a few days, or the presence sensors of the lighting", site.People),
		"presence":          zoneNeed("presence or people counted", "trend the presence sensors of the lighting", site.Presence, site.People),
		"volume":            described("floor area and height", "read both off the plans and write them into the site file", func(z *site.Zone) bool { return z.AreaM2 > 0 && z.HeightM > 0 }),
		"usual people":      described("usual number of people", "count the desks and write the number into the site file", func(z *site.Zone) bool { return z.People >= 0 }),
		"orientation":       described("directions the openings face", "read them off the plan and write them into the site file", func(z *site.Zone) bool { return len(z.FacesDeg) > 0 || !z.Openings.Outdoors }),
		"cooling set-point": {words: "cooling set-points or thermostat readings", cheapest: "trend the thermostats' set-points; the controller has them already", met: func(l *logs, z int) float64 { return yes(l.any(z, site.SetpointCool, site.ThermostatTemp)) }},
		"rated or metered power": {words: "electric power, or rated power of the plant", cheapest: "read the rated power off the units' plates and write it into the site file", met: func(l *logs, z int) float64 {
			if l.site[site.ElectricPower] {
				return 1
			}
			units := l.serving(z)
			have := 0
			for _, u := range units {
				if l.s.Plant[u].RatedPowerKW > 0 || l.plant[u][site.ElectricPower] {
					have++
				}
			}
			if len(units) == 0 {
				return math.NaN()
			}
			return float64(have) / float64(len(units))
		}},
	}
}
