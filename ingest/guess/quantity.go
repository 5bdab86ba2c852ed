package guess

import (
	"sort"

	"sashlog/configs/site"
)

// candidate is one thing a column may be, by its name.
type candidate struct {
	q      site.Quantity // empty: something there is no quantity for
	score  float64       // how plainly the name says so, 0 to 1
	at     int           // position of the word it hangs on: the last counts most
	why    string
	other  string // what it is, where q is empty
	needs  string // what a person must say, where the name leaves it open
	placed site.Placement
}

// candidates lists what a name may mean, the best first.
func (n *naming) candidates(t *Track) []candidate {
	var out []candidate
	add := func(q site.Quantity, score float64, head tag, tags ...tag) *candidate {
		if score <= 0 {
			return &candidate{}
		}
		c := candidate{q: q, score: score, at: n.last[head], why: "the name says " + n.quoted(append([]tag{head}, tags...)...)}
		out = append(out, c)
		return &out[len(out)-1]
	}
	no := func(what string, head tag) {
		if s := n.has(head); s >= abbreviation*0.8 {
			out = append(out, candidate{other: what, score: s, at: n.last[head], why: "the name says " + n.quoted(head)})
		}
	}
	no("brightness: no quantity of sashlog", "lux")
	no("pressure or visibility: no quantity of sashlog", "pressure")
	no("noise: no quantity of sashlog", "noise")
	no("a battery, current, signal or counter of hours: no quantity of sashlog", "voltage")
	no("other air quality: no quantity of sashlog", "voc")
	no("other dust: no quantity of sashlog", "dustelse")
	no("a door: no quantity of sashlog", "door")
	no("an energy counter: no quantity of sashlog (power is)", "energy")
	n.setpoints(add, &out)
	n.weather(add)
	n.temperatures(add, &out)
	n.air(add, &out)
	n.openings(add, t)
	n.plant(add, &out, t)
	if n.hasUnit && n.unit.dim == "other" && len(out) == 0 {
		out = append(out, candidate{other: "a unit of nothing sashlog uses", score: 0.8, why: "its unit"})
	}
	// The word that comes last says what is measured; those before it say where.
	last := 0
	for _, c := range out {
		last = max(last, c.at)
	}
	for i := range out {
		if out[i].at < last && out[i].other == "" {
			out[i].score *= 0.85
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].score > out[j].score })
	return out
}

type adding func(q site.Quantity, score float64, head tag, tags ...tag) *candidate

func (n *naming) setpoints(add adding, out *[]candidate) {
	s := n.has("setpoint")
	if s == 0 {
		return
	}
	switch {
	case n.any("co2", "hum", "flow", "pressure", "water", "lux") > 0 || n.any("supply", "return") > shortWord:
		*out = append(*out, candidate{other: "a set-point other than a room's temperature", score: s, at: 1000, why: "the name says " + n.quoted("setpoint", "co2", "hum", "flow", "pressure", "water", "supply")})
	case n.any("heat") > shortWord && n.any("cool") == 0:
		add(site.SetpointHeat, 0.95*min(s, n.has("heat")), "setpoint", "heat").at = 1000
	case n.any("cool") > shortWord && n.any("heat") == 0:
		add(site.SetpointCool, 0.95*min(s, n.has("cool")), "setpoint", "cool").at = 1000
	case s >= abbreviation:
		*out = append(*out, candidate{q: site.SetpointHeat, score: s, at: 1000, why: "the name says " + n.quoted("setpoint"),
			needs: "a set-point: for heating or for cooling?"})
	}
}

func (n *naming) weather(add adding) {
	out := n.any("out")
	sun := n.has("solar")
	if n.hasUnit && n.unit.dim == "sun" {
		sun = max(sun, 0.85)
	}
	add(site.Solar, sun, "solar", "global")
	add(site.Rain, n.has("rain"), "rain")
	if n.has("wind") > 0 {
		switch {
		case n.has("gust") > 0:
			add(site.WindGust, min(1, n.has("gust")), "gust", "wind")
		case n.has("dir") > 0:
			add(site.WindDirection, min(1, n.has("dir", "wind")), "dir", "wind")
		case n.has("speed") > 0:
			add(site.WindSpeed, n.has("wind", "speed"), "wind", "speed")
		case n.hasUnit && n.unit.dim == "angle":
			add(site.WindDirection, n.has("wind"), "wind")
		case n.hasUnit && n.unit.dim == "speed":
			add(site.WindSpeed, n.has("wind"), "wind")
		default:
			add(site.WindSpeed, 0.6*n.has("wind"), "wind")
		}
	} else if g := n.has("gust"); g > 0 {
		add(site.WindGust, 0.9*g, "gust")
	}
	if s := n.has("dew"); s > 0 {
		if out > 0 || n.any("room", "supply", "return") == 0 {
			add(site.OutdoorDewPoint, s*0.9, "dew", "out")
		}
	}
}

// temperatures adds what a temperature may be, by the place it is taken at.
func (n *naming) temperatures(add adding, out *[]candidate) {
	s := n.has("temp")
	why := tag("temp")
	if u := n.unit; n.hasUnit && u.dim == "temp" && s < 0.7*u.sure && n.any("setpoint", "dew", "hum", "co2") == 0 {
		s = 0.7 * u.sure
	}
	if s == 0 && n.any("tstat") == 0 && n.any("globe", "oper") == 0 || n.has("setpoint") >= abbreviation || n.has("dew") > 0 {
		return
	}
	if n.any("water") >= abbreviation {
		*out = append(*out, candidate{other: "a temperature of water", score: n.any("water"), at: max(n.last["water"], n.last["temp"]), why: "the name says " + n.quoted("water")})
		return
	}
	unitOwner := n.any("unit")
	inRoom := n.any("room") > shortWord || n.any("room") > 0 && unitOwner == 0
	switch {
	case n.has("globe") > 0:
		add(site.GlobeTemp, max(s, n.has("globe")), "globe", "temp")
	case n.has("oper") > 0:
		add(site.OperativeTemp, max(s, n.has("oper")), "oper", "temp")
	case n.has("surface") > 0 && s > 0:
		add(site.SurfaceTemp, min(s, n.has("surface")), "surface", "temp")
	case n.any("out") >= abbreviation || n.any("out") > 0 && n.any("room") <= shortWord && n.any("supply", "return", "mixed") == 0:
		c := add(site.OutdoorTemp, min(s, max(n.any("out"), 0.7)), why, "out")
		c.at = max(n.last["temp"], n.last["out"])
	case n.any("supply") > 0 && n.any("supply") >= n.any("return", "mixed", "exhaust"):
		add(site.SupplyAirTemp, min(s, n.any("supply")), why, "supply").at = max(n.last["temp"], n.last["supply"])
	case n.any("mixed") > 0 && unitOwner+n.any("air") > 0 || n.any("mixed") > shortWord:
		add(site.MixedAirTemp, min(s, n.any("mixed")), why, "mixed")
	case n.any("exhaust") > 0 && n.any("return") == 0:
		*out = append(*out, candidate{other: "exhaust air: no quantity of sashlog", score: n.any("exhaust"), at: n.last["temp"], why: "the name says " + n.quoted("exhaust")})
	case n.any("return") > 0:
		if unitOwner > 0 && !inRoom {
			add(site.ReturnAirTemp, min(s, n.any("return")), why, "return")
			return
		}
		c := add(site.ReturnAirTemp, min(s, n.any("return"))*0.9, why, "return")
		c.placed = site.PlacementReturn
	case n.has("tstat") > 0:
		add(site.ThermostatTemp, max(s, 0.8*n.has("tstat")), "tstat", "temp")
	case inRoom:
		add(site.AirTemp, s, why, "room")
	default:
		add(site.AirTemp, 0.75*s, why)
	}
}

// air adds humidity, CO2 and dust.
func (n *naming) air(add adding, out *[]candidate) {
	outdoors := n.any("out") >= shortWord && n.any("room") <= n.any("out")
	if s := n.has("co2"); s > 0 && n.has("setpoint") == 0 {
		switch {
		case outdoors:
			add(site.OutdoorCO2, s, "co2", "out")
		case n.any("supply", "return", "exhaust") > 0 && n.any("unit") > 0:
			*out = append(*out, candidate{other: "CO2 in a duct of plant: no quantity of sashlog", score: s, at: n.last["co2"], why: "the name says " + n.quoted("co2", "return", "supply")})
		default:
			add(site.CO2, s, "co2")
		}
	} else if n.hasUnit && n.unit.dim == "ppm" && n.any("voc") == 0 {
		add(site.CO2, 0.6, "co2")
	}
	if s := n.has("pm25"); s > 0 {
		if outdoors {
			add(site.OutdoorPM25, s, "pm25", "out")
		} else {
			add(site.PM25, s, "pm25")
		}
	}
	if s := n.has("hum"); s > 0 && n.has("setpoint") < abbreviation && !(n.hasUnit && n.unit.dim != "ratio") {
		switch {
		case outdoors || n.word["hum"] == "OAH" || n.word["hum"] == "OARH":
			add(site.OutdoorHumidity, s, "hum", "out")
		case n.any("supply", "return", "mixed", "exhaust") > 0 && n.any("unit") > 0:
			*out = append(*out, candidate{other: "humidity in a duct of plant: no quantity of sashlog", score: s, at: n.last["hum"], why: "the name says " + n.quoted("hum", "supply", "return")})
		default:
			add(site.Humidity, s, "hum", "room")
		}
	}
	if s := n.has("speed"); s > 0 && n.has("wind") == 0 && n.any("fan", "unit", "power") == 0 {
		add(site.AirSpeed, 0.9*s*max(n.any("air"), 0.6), "speed", "air")
	}
}

// openings adds windows and what moves them.
func (n *naming) openings(add adding, t *Track) {
	s := n.has("window")
	if s == 0 {
		if c := n.has("contact"); c > 0 && n.any("door") == 0 {
			add(site.Window, 0.5*c, "contact")
		}
		if n.has("open") > 0 && n.any("status") > 0 && n.any("door", "valve", "damper") == 0 {
			add(site.Window, 0.55, "open", "status")
		}
		return
	}
	switch {
	case n.any("enable") > 0 || t.vocabulary() == "lock":
		add(site.WindowEnable, max(s*0.9, 0.8), "window", "enable")
	case n.has("cmd") > shortWord:
		add(site.WindowCommand, s, "window", "cmd")
	case n.any("temp") > shortWord || n.hasUnit && n.unit.dim == "temp":
		add(site.SurfaceTemp, 0.4*s, "window", "temp")
	case !t.textual() && !t.binary() && t.number > 0:
		add(site.WindowOpening, s, "window", "position")
	default:
		add(site.Window, s, "window", "contact")
	}
}

// plant adds valves, dampers, fans, flows, states, people and power.
func (n *naming) plant(add adding, out *[]candidate, t *Track) {
	open := func(q site.Quantity, s float64, head tag, needs string) {
		*out = append(*out, candidate{q: q, score: s, at: n.last[head], why: "the name says " + n.quoted(head), needs: needs})
	}
	heat, cool := n.any("heat"), n.any("cool")
	if s := n.has("valve"); s > 0 && n.any("temp") == 0 {
		switch {
		case heat > cool:
			add(site.HeatingValve, min(s, max(heat, 0.7)), "valve", "heat")
		case cool > heat:
			add(site.CoolingValve, min(s, max(cool, 0.7)), "valve", "cool")
		case s > shortWord && n.any("open") == 0:
			open(site.HeatingValve, s, "valve", "a valve: for heating, for cooling, or a damper of the supply air?")
		}
	} else if (heat > shortWord || cool > shortWord) && n.any("cmd", "position") > 0 && n.any("setpoint", "temp", "power", "unit") == 0 && n.hasUnit && n.unit.dim == "ratio" {
		open(site.HeatingValve, 0.7, "cmd", "an output for heating or cooling: is it a valve?")
	}
	if s := n.has("damper"); s > 0 {
		switch {
		case n.any("out", "mixed") > 0:
			add(site.OutdoorAirDamper, min(s, max(n.any("out", "mixed"), 0.8)), "damper", "out")
		case n.any("unit", "return", "exhaust", "supply") > 0:
			open(site.OutdoorAirDamper, s, "damper", "a damper of a plant unit: of outdoor air?")
		default:
			add(site.ZoneDamper, s*0.95, "damper", "room")
		}
	} else if s := n.has("vavbox"); s > 0 && (n.any("position") > 0 || n.hasUnit && n.unit.dim == "ratio" && n.any("hum") == 0 || !n.hasUnit && t.percent()) && n.any("temp", "co2", "flow", "hum", "setpoint", "valve") == 0 {
		add(site.ZoneDamper, 0.8*s, "vavbox", "position")
	}
	if s := n.has("flow"); s > 0 && n.has("water") == 0 && n.any("setpoint") == 0 || n.hasUnit && n.unit.dim == "flow" && n.has("water") == 0 && n.any("setpoint") == 0 {
		s = max(s, 0.7)
		switch {
		case n.any("out", "exhaust", "return") > 0:
			open(site.SupplyAirflow, s, "flow", "an air flow other than supply air")
		case n.any("unit", "supfan") > 0:
			add(site.SupplyAirflow, s*0.9, "flow", "supply")
		default:
			add(site.ZoneAirflow, s*0.9, "flow", "room")
		}
	}
	fan := n.any("fan", "supfan")
	switch {
	case n.has("ceiling") > 0 && (fan > 0 || n.has("fan") > 0):
		add(site.CeilingFan, min(n.has("ceiling"), 0.95), "ceiling", "fan")
	case n.any("retfan") > 0 && n.any("status", "fan") > 0 && n.any("supfan") == 0 && n.any("hum") == 0:
		open(site.PlantStatus, 0.8, "retfan", "a return or exhaust fan: does its unit run with it?")
	case n.has("cmd") > 0 && n.has("cmd") >= n.any("status") && (fan > 0 || n.any("unit") > 0) && n.any("temp", "valve", "damper", "window") == 0:
		open(site.PlantStatus, 0.8, "cmd", "a command: is there no status that shows the unit runs?")
	case fan > 0 && n.any("supfan", "unit", "supply", "ceiling") == 0 && n.any("status", "cmd") > 0 && n.any("temp", "valve", "damper", "window", "hum", "co2", "power", "flow", "setpoint", "wind") == 0:
		open(site.PlantStatus, 0.8, "fan", "a fan: of a plant unit, or one that people use in the room?")
	case (fan > 0 && n.any("status") > 0 || n.any("unit") > 0 && n.any("status", "mode") > 0 || fan > 0 && n.any("unit") > 0) && n.any("temp", "valve", "damper", "window", "hum", "co2", "power", "flow", "setpoint") == 0:
		s := max(min(max(fan, n.any("unit")), max(n.any("status"), n.any("mode"))), 0.75)
		c := add(site.PlantStatus, s, "status", "supfan", "fan", "unit", "mode")
		c.at = max(n.last["status"], n.last["fan"], n.last["unit"])
	case n.any("unit") > 0 && len(*out) == 0 && n.any("window", "temp") == 0:
		add(site.PlantStatus, 0.6, "unit")
	case (heat > 0 || cool > 0) && n.any("status") > 0 && n.any("temp", "valve", "setpoint") == 0:
		open(site.PlantStatus, 0.7, "status", "the state of heating or cooling: on which unit?")
	}
	if n.any("override") > shortWord && n.any("people") == 0 {
		add(site.ManualOverride, 0.9*n.any("override"), "override")
	}
	if n.any("mode", "natural") > shortWord && n.any("unit", "fan") == 0 && n.any("temp", "setpoint") == 0 {
		if n.any("natural") > 0 {
			add(site.ModeSignal, 0.8, "natural", "mode")
		} else {
			open(site.ModeSignal, n.any("mode"), "mode", "a mode: which of its values mean open mode?")
		}
	}
	n.occupants(add, t)
	if s := n.has("power"); s > 0 && n.has("energy") == 0 || n.hasUnit && n.unit.dim == "power" && n.any("solar") == 0 {
		s = max(s, 0.85)
		switch {
		case heat > 0 && heat > cool:
			add(site.HeatingPower, 0.85*s, "power", "heat")
		case cool > 0:
			add(site.CoolingPower, 0.85*s, "power", "cool")
		default:
			c := add(site.ElectricPower, s, "power", "unit")
			c.at = 1000
		}
	}
}

// occupants tells presence from counts by the values.
func (n *naming) occupants(add adding, t *Track) {
	pres, ppl := n.has("presence"), n.has("people")
	count := n.has("count")
	if n.any("setpoint", "temp", "status") > abbreviation && ppl == 0 && pres < fullWord {
		return
	}
	counted := !t.textual() && (!t.binary() && t.whole && t.number > 0 && t.max > 1 || t.counted)
	switch {
	case ppl > 0 && !t.textual():
		add(site.People, ppl, "people")
	case pres > 0 && counted && t.max < 1000:
		add(site.People, 0.85*pres, "presence", "count")
	case pres > 0:
		add(site.Presence, pres, "presence")
	case count > shortWord && counted && n.any("room") > 0:
		add(site.People, 0.5*count, "count")
	}
}

// percent reports numbers within 0 to 100.
func (t *Track) percent() bool { return t.number > 0 && t.min >= 0 && t.max <= 100 && t.max > 1 }
