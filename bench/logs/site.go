package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
)

// writeSite writes the site file and points table of one shape into a folder
// of its own, beside the logs.
func writeSite(dir, name string, ps []*point, long bool) error {
	folder := filepath.Join(dir, name)
	if err := os.MkdirAll(folder, 0o755); err != nil {
		return err
	}
	var y strings.Builder
	fmt.Fprintf(&y, "site: {name: Invented benchmark building, invented: true, time_zone: UTC, latitude: 47, longitude: 8}\n")
	y.WriteString("points: points.csv\noccupancy: {source: schedule, times: [{days: mon-fri, from: \"08:00\", to: \"18:00\"}]}\nzones:\n")
	for z := 1; z <= zoneCount; z++ {
		fmt.Fprintf(&y, "  - {id: Z%02d, people: 8, area_m2: 80, height_m: 3, openings: outdoors}\n", z)
	}
	y.WriteString("plant:\n")
	for a := 1; a <= unitCount; a++ {
		var serves []string
		for z := a; z <= zoneCount; z += unitCount {
			serves = append(serves, fmt.Sprintf("Z%02d", z))
		}
		fmt.Fprintf(&y, "  - {id: AHU%d, serves: [%s], air: mixed}\n", a, strings.Join(serves, ", "))
	}
	if long {
		y.WriteString("logs:\n  - {name: trend, path: ../l12.csv, layout: long, time_column: timestamp, key_columns: [point_id], value_columns: [value], clock: utc}\n")
	} else {
		fmt.Fprintf(&y, "logs:\n  - {name: trend, path: ../%s.csv, layout: wide, time_column: timestamp, clock: utc}\n", name)
	}
	if err := os.WriteFile(filepath.Join(folder, "site.yaml"), []byte(y.String()), 0o644); err != nil {
		return err
	}
	var c strings.Builder
	c.WriteString("source,column,belongs_to,quantity,unit,logging,stamp,hold,open_value,placement,share,note\n")
	for i, p := range ps {
		belongs, quantity, unit, hold := fmt.Sprintf("Z%02d", i/4+1), "", "", "1h"
		switch {
		case i >= zoneCount*4+unitCount:
			k := i - zoneCount*4 - unitCount
			belongs = "site"
			quantity = []string{"outdoor_temp", "outdoor_humidity", "wind_speed", "wind_direction"}[k]
			unit = []string{"degC", "%", "m/s", "deg"}[k]
		case i >= zoneCount*4:
			belongs, quantity, hold = fmt.Sprintf("AHU%d", i-zoneCount*4+1), "plant_status", "25h"
		default:
			quantity = []string{"air_temp", "humidity", "co2", "window"}[i%4]
			unit = []string{"degC", "%", "ppm", ""}[i%4]
			if i%4 == 3 {
				hold = "25h"
			}
		}
		column, logging, open := p.wname, "sampled", ""
		if long {
			column, logging = p.lname, "cov"
		} else {
			hold = ""
		}
		switch quantity {
		case "window":
			open = "Open"
		case "plant_status":
			open = ""
		}
		fmt.Fprintf(&c, "trend,%s,%s,%s,%s,%s,instant,%s,%s,,,\n", column, belongs, quantity, unit, logging, hold, open)
	}
	return os.WriteFile(filepath.Join(folder, "points.csv"), []byte(c.String()), 0o644)
}
