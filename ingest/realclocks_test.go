package ingest_test

import (
	"archive/zip"
	"bufio"
	"compress/gzip"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest"
)

// realData may name a folder with the whole sets instead of the excerpts.
var realData = flag.String("realdata", filepath.Join("..", "testdata", "real"), "folder of the open data")

func gunzip(t *testing.T, name string) string {
	t.Helper()
	f, err := os.Open(filepath.Join(*realData, name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		t.Fatal(err)
	}
	raw, err := io.ReadAll(z)
	if err != nil {
		t.Fatal(err)
	}
	return string(raw)
}

func unzip(t *testing.T, name string) map[string]string {
	t.Helper()
	z, err := zip.OpenReader(filepath.Join(*realData, name))
	if err != nil {
		t.Fatal(err)
	}
	defer z.Close()
	out := map[string]string{}
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		raw, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		out[filepath.Base(f.Name)] = string(raw)
	}
	return out
}

// realSite is a site made around logs of a set.
type realSite struct {
	head         string // of site.yaml, with zones and step
	logs, points []string
	files        map[string]string
}

func (r *realSite) load(t *testing.T) *site.Site {
	t.Helper()
	r.files["site.yaml"] = r.head + "\nlogs:\n  - " + strings.Join(r.logs, "\n  - ") + "\npoints: points.csv\n"
	r.files["points.csv"] = "source,column,belongs_to,quantity,unit,open_value\n" + strings.Join(r.points, "\n") + "\n"
	dir := t.TempDir()
	for n, text := range r.files {
		if err := os.WriteFile(filepath.Join(dir, n), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	return load(t, dir)
}

const schedule = "\noccupancy: {times: [{days: mon-fri, from: \"08:00\", to: \"18:00\"}]}"

// airports are three stations of one city, a log each.
func airports(t *testing.T) *realSite {
	r := &realSite{files: map[string]string{}, head: `site: {name: Airports, time_zone: America/New_York, latitude: 40.7, longitude: -73.9}
zones: [{id: Z, openings: outdoors}]` + schedule}
	rows := strings.SplitAfter(gunzip(t, "nyc-weather/weather.csv.gz"), "\n")
	for _, origin := range []string{"EWR", "JFK", "LGA"} {
		name := strings.ToLower(origin)
		var b strings.Builder
		b.WriteString(rows[0])
		for _, row := range rows[1:] {
			if strings.HasPrefix(row, origin+",") || strings.HasPrefix(row, `"`+origin) {
				b.WriteString(row)
			}
		}
		r.files[name+".csv"] = b.String()
		r.logs = append(r.logs, fmt.Sprintf("{name: %s, path: %s.csv, time_column: time_hour, clock: utc, missing: [NA]}", name, name))
		r.points = append(r.points, name+",temp,site,outdoor_temp,degF,", name+",humid,site,outdoor_humidity,%,", name+",wind_speed,site,wind_speed,mph,")
	}
	return r
}

// station is one weather station of the fixed-width set, its air temperature
// only, so that nothing but the course of the day speaks of its clock.
func station(t *testing.T, file string, lat, lon float64) *realSite {
	r := &realSite{files: map[string]string{}, head: fmt.Sprintf(`site: {name: Station, time_zone: America/Chicago, latitude: %g, longitude: %g}
zones: [{id: Z, openings: outdoors}]`, lat, lon) + schedule}
	var b strings.Builder
	b.WriteString("time,temp\n")
	sc := bufio.NewScanner(strings.NewReader(gunzip(t, "weather-tmy3-isd/"+file)))
	for sc.Scan() {
		f := strings.Fields(sc.Text())
		if len(f) > 4 && f[4] != "-9999" {
			fmt.Fprintf(&b, "%s-%s-%s %s:00,%s\n", f[0], f[1], f[2], f[3], tenths(f[4]))
		}
	}
	r.files["log.csv"] = b.String()
	r.logs, r.points = []string{"{name: log, path: log.csv, time_column: time, clock: utc, date_order: ymd}"}, []string{"log,temp,site,outdoor_temp,degC,"}
	return r
}

func tenths(s string) string {
	sign := ""
	if s[0] == '-' {
		sign, s = "-", s[1:]
	}
	for len(s) < 2 {
		s = "0" + s
	}
	return sign + s[:len(s)-1] + "." + s[len(s)-1:]
}

// flat has a log per room.
func flat(t *testing.T) *realSite {
	r := &realSite{files: map[string]string{}, head: `site: {name: Flat, time_zone: Europe/Berlin, latitude: 49.45, longitude: 11.08}
occupancy: {times: [{days: mon-sun, from: "07:00", to: "22:00"}]}
zones:`}
	rooms := []string{"Bathroom", "Kitchen", "Room1", "Room2", "Room3", "Toilet"}
	all := unzip(t, "open-smart-home/measurements.zip")
	for _, room := range rooms {
		r.head += fmt.Sprintf("\n  - {id: %s, openings: outdoors}", room)
		r.logs = append(r.logs, fmt.Sprintf(`{name: %s, path: "%s_*.csv", layout: per_point, separator: tab, header_row: -1, clock: utc}`, room, room))
		for _, kind := range [][3]string{{"Temperature", "air_temp", "degC"}, {"Humidity", "humidity", "%"}} {
			if n := room + "_" + kind[0]; all[n+".csv"] != "" {
				r.files[n+".csv"] = all[n+".csv"]
				r.points = append(r.points, fmt.Sprintf("%s,%s,%s,%s,%s,", room, n, room, kind[1], kind[2]))
			}
		}
	}
	r.files["Virtual_OutdoorTemperature.csv"] = all["Kitchen_Virtual_OutdoorTemperature.csv"]
	r.logs = append(r.logs, `{name: virtual, path: "Virtual_*.csv", layout: per_point, separator: tab, header_row: -1, clock: utc}`)
	r.points = append(r.points, "virtual,Virtual_OutdoorTemperature,site,outdoor_temp,degC,")
	return r
}

// office is the room of irregular readings; nothing speaks of its clock but
// when people are expected.
func office(t *testing.T) *realSite {
	raw, err := os.ReadFile(filepath.Join(*realData, "livingston-office", "liv_office_livingstone_aq_1.csv"))
	if err != nil {
		t.Fatal(err)
	}
	return &realSite{files: map[string]string{"log.csv": string(raw)}, head: `site: {name: Office, time_zone: Europe/London, latitude: 52.8, longitude: -1.2}
zones: [{id: Z, openings: outdoors}]` + schedule, logs: []string{"{name: log, path: log.csv, time_column: timestamp, clock: utc}"},
		points: []string{"log,co2 ['ppm'],Z,co2,ppm,", "log,humidity [],Z,humidity,%,", "log,temperature ['oC'],Z,air_temp,degC,"}}
}

// rooms are four rooms with a log per kind of reading. The days of the set are
// shuffled and carry no date: each gets one of its own with the right weekday.
func rooms(t *testing.T) *realSite {
	r := &realSite{files: map[string]string{}, head: `site: {name: Rooms, time_zone: UTC, latitude: 55.4, longitude: 10.4}
occupancy: {times: [{days: mon-fri, from: "08:00", to: "16:00"}]}
zones: [{id: R1, openings: none}, {id: R2, openings: none}, {id: R3, openings: none}, {id: R4, openings: none}]`}
	all := unzip(t, "sdu-ou44/rooms.zip")
	kinds := map[string][2]string{"co2": {"co2", "ppm"}, "occ": {"people", ""}, "vav": {"zone_damper", "%"}}
	var names []string
	for n := range all {
		names = append(names, n)
	}
	slices.Sort(names)
	dates, taken := map[string]string{}, map[string]bool{}
	made := map[string]bool{}
	for _, n := range names {
		kind := n[:3]
		k, ok := kinds[kind]
		if !ok {
			continue
		}
		room := "R" + strings.TrimSuffix(n, ".csv")[len(strings.TrimSuffix(n, ".csv"))-1:]
		var b strings.Builder
		b.WriteString("time," + room + "\n")
		for _, row := range strings.Split(all[n], "\n")[1:] {
			f := strings.Split(strings.TrimSpace(row), ",")
			if len(f) < 5 {
				continue
			}
			for d := time.Date(2017, 3, 20, 0, 0, 0, 0, time.UTC); dates[f[0]] == ""; d = d.AddDate(0, 0, 1) {
				// Weekday 0 is Monday.
				if s := d.Format(time.DateOnly); !taken[s] && fmt.Sprint((int(d.Weekday())+6)%7) == f[2] {
					dates[f[0]], taken[s] = s, true
				}
			}
			b.WriteString(dates[f[0]] + " " + f[1] + "," + f[4] + "\n")
		}
		r.files[kind+room+".csv"] = b.String()
		if !made[kind] {
			made[kind] = true
			r.logs = append(r.logs, fmt.Sprintf(`{name: %s, path: "%sR*.csv", time_column: time, clock: utc, date_order: ymd}`, kind, kind))
		}
		r.points = append(r.points, fmt.Sprintf("%s,%s,%s,%s,%s,", kind, room, room, k[0], k[1]))
	}
	return r
}

// Clocks that nobody doubts raise no alarm.
func TestSoundRealClocks(t *testing.T) {
	sets := map[string]func(*testing.T) *realSite{"nyc-weather": airports, "open-smart-home": flat, "livingston-office": office, "sdu-ou44": rooms,
		"weather-isd Chicago": func(t *testing.T) *realSite { return station(t, "725300-94846-2018.gz", 41.99, -87.93) }}
	for name, x := range map[string]struct {
		file     string
		lat, lon float64
	}{"weather-isd Houston": {"722430-12960-2018.gz", 29.98, -95.36}, "weather-isd San Francisco": {"724940-23234-2018.gz", 37.62, -122.37}, "weather-isd Cheyenne": {"725640-24018-2018.gz", 41.16, -104.81}} {
		if _, err := os.Stat(filepath.Join(*realData, "weather-tmy3-isd", x.file)); err == nil {
			sets[name] = func(t *testing.T) *realSite { return station(t, x.file, x.lat, x.lon) }
		}
	}
	for name, set := range sets {
		_, l := read(t, set(t).load(t), ingest.Options{})
		soundClocks(t, name, l)
		for i := range l.Clocks {
			t.Logf("    %-10s %s", l.Clocks[i].Log, l.Clocks[i].Evidence)
		}
	}
}
