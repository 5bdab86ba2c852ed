package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/running"
)

// thermostatOffK is how far a thermostat may read above the room's own sensors
// before it no longer represents its space. Our assumption: the desirable
// accuracy of two sensors together, and a gradient across a room, stay below.
const thermostatOffK = 1.0

// misleads returns the zone of a unit whose thermostat reads warm at a step
// while the room's sensors do not: by at least thermostatOffK, and the room
// within comfort. -1 when none does.
func (e *evidence) misleads(u, i int) (zone int, offK float64) {
	zone, offK = -1, thermostatOffK
	for _, z := range e.units[u].zones {
		in := &e.in.Indoor[z]
		reads, room := at(in.ThermostatC, i), at(in.OperativeC, i)
		if math.IsNaN(reads) || math.IsNaN(room) || room > e.limitBefore(z, i) {
			continue
		}
		set := at(e.zones[z].setpoint, i)
		if reads-room >= offK && (math.IsNaN(set) || (reads >= set && room < set)) {
			zone, offK = z, reads-room
		}
	}
	return zone, offK
}

func thermostatTest() test {
	return test{
		Test: Test{BadThermostat, "the plant ran while a thermostat it serves read at least 1 K above the sensors of its own room, and those were within comfort (and below the cooling set-point, where that is logged): " +
			"it does not represent its space (sun, a machine or a draught of warm air beside it)", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			me := &e.in.Running.Zones[s.zone]
			led := map[int]int{}
			sum := map[int]float64{}
			by := explains(s, func(i int) bool {
				if me.State[i] != running.Mech && me.State[i] != running.Both {
					return false
				}
				for _, u := range e.zones[s.zone].units {
					if z, off := e.misleads(u, i); z >= 0 && e.cools(u, i) {
						led[z]++
						sum[z] += off
						return true
					}
				}
				return false
			})
			v := verdict{by: by, led: -1}
			for z := range e.zones {
				if led[z] > led[v.led] {
					v.led = z
				}
			}
			if v.led >= 0 {
				v.why = fmt.Sprintf("the thermostat of zone %s read %.1f K above the room's own sensors while the plant ran", e.in.Site.Zones[v.led].ID, sum[v.led]/float64(led[v.led]))
			}
			return v
		},
	}
}
