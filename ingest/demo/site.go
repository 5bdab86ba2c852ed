package demo

import (
	"bufio"
	"encoding/csv"
	"fmt"
	"slices"
	"strings"
	"time"
)

// WrittenBy stands in the first line of a site file that the demo wrote.
const WrittenBy = "Written by sashlog demo"

// writeSite writes site.yaml.
func (b *building) writeSite(dir string) error {
	return writeFile(dir, "site.yaml", func(w *bufio.Writer) error {
		p := func(format string, args ...any) { fmt.Fprintf(w, format+"\n", args...) }
		p("# An invented building: nobody works here. %s, seed %d.", WrittenBy, b.options.Seed)
		p("# The place is made up; the time zone is used for its clock rules only and the")
		p("# coordinates are round numbers that give the sun a height.")
		p("site:")
		p("  name: %q", siteName)
		p("  invented: true")
		p("  time_zone: %s", zoneName)
		p("  latitude: %.1f", latitudeDeg)
		p("  longitude: %.1f", longitudeDeg)
		p("  elevation_m: %.0f", elevationM)
		p("  outdoor_co2_ppm: 425")
		p("period: {from: %v, to: %v}", b.from, b.to)
		p("step_min: 5")
		p("occupancy:")
		p("  source: schedule")
		p("  times:")
		p("    - {days: mon-fri, from: \"08:00\", to: \"18:00\"}")
		var free []string
		for _, d := range holidays(b.from, b.to) {
			free = append(free, d.String())
		}
		p("  holidays: [%s]", strings.Join(free, ", "))
		p("zones:")
		for i := range b.zones {
			p("  - {%s}", b.zoneLine(&b.zones[i]))
		}
		p("plant:")
		for _, u := range b.units {
			var serves []string
			for _, r := range u.rooms {
				serves = append(serves, r.spec.id)
			}
			kind := "mixed"
			if u.spec.kind == ceilingUnit {
				kind = "recirculated"
			}
			p("  - {id: %s, name: %q, serves: [%s], air: %s, rated_power_kw: %g}", u.spec.id, u.spec.name, strings.Join(serves, ", "), kind, u.spec.ratedKW)
		}
		p("criteria: {preset: en16798-1-ii}")
		p("privacy: default")
		p("logs:")
		for _, l := range b.logLines() {
			p("  - {%s}", l)
		}
		p("points: points.csv")
		p("diary: events.csv")
		p("weather: {typical_year: typical.epw}")
		p("tolerance: {rejected_share: 0.05}")
		return nil
	})
}

func (b *building) zoneLine(z *zoneSpec) string {
	s := fmt.Sprintf("id: %s, name: %q, floor: %d, area_m2: %g, height_m: %g, people: %d", z.id, z.name, z.floor, z.areaM2, z.heightM, z.people)
	if z.core {
		s += ", place: core"
	} else {
		s += ", place: perimeter, faces: [" + strings.Join(strings.Split(z.faces, ""), ", ") + "]"
	}
	switch {
	case z.through != "":
		s += ", openings: {through: [" + z.through + "]}, windows: automatic"
	case z.drive == noWindows:
		s += ", openings: none"
	default:
		s += ", openings: outdoors, windows: " + [...]string{"", "manual", "automatic", "mixed"}[z.drive]
	}
	if z.fanMS > 0 {
		s += fmt.Sprintf(", fan_m_s: %g", z.fanMS)
	}
	return s + ", scheme: changeover"
}

// logLines are the flow mappings under logs.
func (b *building) logLines() []string {
	var out []string
	for floor := 1; floor <= 3; floor++ {
		if len(b.floorColumns(floor)) == 0 {
			continue
		}
		times := "time_column: Timestamp"
		if floor == 2 {
			times = "date_column: Date, clock_column: Time"
		}
		out = append(out, fmt.Sprintf(`name: floor%d, path: %s, layout: wide, %s, separator: ";", decimal: ",", date_order: dmy, clock: local`, floor, floorFile(floor), times))
	}
	if b.hasZone(ownLoggerZone) {
		out = append(out, `name: logger206, path: logs/logger206.csv, layout: wide, time_column: datetime, separator: ",", decimal: ".", date_order: ymd, clock: `+b.ownClock())
	}
	out = append(out,
		`name: windows, path: logs/windows.csv, layout: long, time_column: Time, key_columns: [Contact], value_columns: [State], separator: ",", date_order: ymd, clock: local`)
	if b.hasPositions() {
		out = append(out, `name: window_drives, path: logs/window_drives.csv, layout: long, time_column: Time, key_columns: [Drive], value_columns: [Position], separator: ";", decimal: ".", date_order: ymd, clock: local`)
	}
	out = append(out,
		`name: plant_status, path: logs/plant_status.csv, layout: long, time_column: Timestamp, key_columns: [Object], value_columns: [Value], separator: ";", date_order: ymd, clock: standard`,
		`name: plant_temps, path: logs/plant_temps.csv, layout: wide, time_column: Time, separator: "\t", decimal: ".", date_order: ymd, clock: "+01:00"`)
	if b.hasPresence() {
		out = append(out, `name: presence, path: logs/presence.csv, layout: long, time_column: time, key_columns: [detector], value_columns: [state], separator: ",", date_order: ymd, clock: local`)
	}
	return append(out,
		`name: power, path: logs/power.xlsx, layout: wide, sheet: Power, time_column: Hour, clock: standard`,
		`name: weather, path: logs/weather.csv, layout: wide, time_column: time_utc, separator: ",", decimal: ".", date_order: ymd, clock: utc`)
}

// ownClock is how the site file describes the own logger's clock.
func (b *building) ownClock() string {
	for _, f := range b.truth.Faults {
		if f.Kind == FaultClock && b.options.Declared {
			from, last := time.Unix(f.FromUTC, 0).In(b.loc), time.Unix(f.ToUTC-1, 0).In(b.loc)
			return fmt.Sprintf("{is: local, shifts: [{from: %s, to: %s, shift_min: -60}]}", from.Format(time.DateOnly), last.Format(time.DateOnly))
		}
	}
	return "local"
}

// declared reports whether the site's description knows of a zone's fault.
func (b *building) declared(kind FaultKind, zone string) bool {
	return b.options.Declared && slices.ContainsFunc(b.truth.Faults, func(f Fault) bool {
		return f.Kind == kind && slices.Contains(f.Zones, zone)
	})
}

func (b *building) hasZone(id string) bool {
	return slices.ContainsFunc(b.zones, func(z zoneSpec) bool { return z.id == id })
}

// writePoints writes points.csv.
func (b *building) writePoints(dir string) error {
	return writeFile(dir, "points.csv", func(w *bufio.Writer) error {
		cw := csv.NewWriter(w)
		row := func(f ...string) { cw.Write(f) } // errors stay with the writer
		row("source", "column", "belongs_to", "quantity", "unit", "logging", "stamp", "hold", "open_value", "values", "placement", "share", "note")
		for floor := 1; floor <= 3; floor++ {
			for _, c := range b.floorColumns(floor) {
				placement := "room"
				switch c.kind {
				case 'r':
					placement = "return_duct"
				case 'p':
					placement = ""
				}
				quantity, unit := c.quantity, c.unit
				if c.kind == 'p' {
					quantity = "people"
				}
				if c.kind == 't' && b.declared(FaultFahrenheit, b.zones[c.zone].id) {
					unit = "degF"
				}
				row(fmt.Sprintf("floor%d", floor), c.name, b.zones[c.zone].id, quantity, unit, "sampled", "start", "", "", "", placement, "", "")
			}
		}
		if b.hasZone(ownLoggerZone) {
			for _, c := range [][3]string{{"temperature", "air_temp", "degC"}, {"humidity", "humidity", "%"}, {"co2", "co2", "ppm"}} {
				row("logger206", c[0], ownLoggerZone, c[1], c[2], "sampled", "instant", "", "", "", "room", "", "the tenant's own logger")
			}
		}
		for i := range b.zones {
			for _, win := range b.zones[i].windows {
				share := ""
				if len(b.zones[i].windows) > 1 {
					share = fmt.Sprintf("%g", win.share)
				}
				if win.position {
					row("window_drives", win.key, b.zones[i].id, "window_opening", "%", "cov", "", "25h", "", "", "", share, "")
					continue
				}
				words := "Open=open;Closed=shut"
				if b.declared(FaultInverted, b.zones[i].id) {
					words = "Open=shut;Closed=open"
				}
				row("windows", win.key, b.zones[i].id, "window", "", "cov", "", "25h", "", words, "", share, "")
			}
		}
		for _, u := range b.units {
			words := "Off=off;On=on;Fan only=vent;Heating=heat;Cooling=cool"
			if u.spec.kind == ceilingUnit {
				words = "Stop=off;Run=on;Fan=vent;Heat=heat;Cool=cool"
			}
			row("plant_status", u.spec.id, u.spec.id, "plant_status", "", "cov", "", "25h", "", words, "", "", "")
			if u.spec.kind == airHandler {
				row("plant_status", u.spec.id+" windows", u.spec.id, "mode_signal", "", "cov", "", "25h", "", "Released=on;Locked=off", "", "", "signal lamp and release of the drives")
			}
			row("plant_temps", u.spec.id+" SUP", u.spec.id, "supply_air_temp", "degC", "sampled", "instant", "", "", "", "", "", "")
			row("power", u.spec.id+" kW", u.spec.id, "electric_power", "kW", "sampled", "start", "", "", "", "", "", "")
		}
		for _, id := range presenceZones {
			if b.hasZone(id) {
				row("presence", "PIR "+id, id, "presence", "", "cov", "", "25h", "", "Occupied=on;Vacant=off", "", "", "")
			}
		}
		for _, c := range [][3]string{{"temp_c", "outdoor_temp", "degC"}, {"rh_pct", "outdoor_humidity", "%"}, {"wind_ms", "wind_speed", "m/s"},
			{"wind_dir_deg", "wind_direction", "deg"}, {"rain_mm_h", "rain", "mm/h"}, {"global_wm2", "solar", "W/m2"}} {
			row("weather", c[0], "site", c[1], c[2], "sampled", "end", "", "", "", "", "", "roof station")
		}
		cw.Flush()
		return cw.Error()
	})
}

// writeReadme says what the folder is.
func (b *building) writeReadme(dir string) error {
	return writeFile(dir, "README.txt", func(w *bufio.Writer) error {
		fmt.Fprintf(w, `%s

This building does not exist. Its people, weather and logs were computed by
"sashlog demo" (seed %d) to show what an audit looks like. The place is of our
own making; time zone and coordinates only give it clock rules and a sun.

site.yaml     the building, its plant, its logs
points.csv    which logged column measures what
events.csv    the diary of the site
typical.epw   a typical year of the same invented climate
logs/         what the building's systems wrote, %v to %v
`, siteName, b.options.Seed, b.from, b.to)
		if b.options.Faults {
			fmt.Fprint(w, `
Some sensors and loggers are faulty on purpose. Finding them is part of the
exercise; the diary knows of some.
`)
		}
		return nil
	})
}
