// Package demo writes the logs of an invented building whose truth is known.
//
// The building is simulated, not measured: its own weather, people, windows,
// plant and faults, deterministic by seed and deliberately richer than
// anything the analyses fit (air, mass and envelope nodes, coupled zones, sun by
// direction with blinds, flow by buoyancy and wind, one-minute control). The
// steps of [Write]:
//
//  1. a calendar of local days, with 30 days of lead-in
//  2. the weather (weather.go)
//  3. people, windows, plant and air, minute by minute (people.go, windows.go,
//     control.go, room.go, simulate.go), into a [Truth] per step
//  4. planted faults (faults.go)
//  5. the logs as such a building would have written them (sensors.go, logs.go,
//     events.go, sheet.go), with the site file, points table and diary (site.go)
//     and a typical year of the same climate (epw.go)
package demo

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"time"
	_ "time/tzdata" // the clock rules must not depend on the machine

	"sashlog/configs/site"
)

const leadDays = 30

// Options choose which demo building is written.
type Options struct {
	// Seed chooses weather, people and sensor noise.
	Seed uint64
	// From is the first local day of the period; the zero date means 2025-01-01.
	From site.Date
	// Days is the length of the period; 0 means to the end of From's year.
	Days int
	// Zones is how many zones take part, in the order of the site file; 0
	// means all (16). The rest of the building is then not there.
	Zones int
	// Faults plants log faults. Defaults sets it.
	Faults bool
	// Declared describes the planted faults in the site file, points table and
	// diary as a careful site would once it knew of them: unit, wiring, clock
	// shift, dates of the frozen sensor. The logs stay as they are. The drift of
	// the CO2 sensor and the undeclared day off stay undeclared.
	Declared bool
	// Changes are settings an operator changes on the way.
	Changes []Change
	// WriteTruth also writes truth.csv.gz.
	WriteTruth bool
}

// Defaults returns the options of the whole year with every zone and fault.
func Defaults() Options { return Options{Seed: 1, Faults: true} }

// span returns the period's first and last day.
func (o Options) span() (from, to site.Date, err error) {
	from = o.From
	if from.IsZero() {
		from = site.Date{Year: 2025, Month: 1, Day: 1}
	}
	if from.Year < 1990 || from.Year > 2036 {
		return from, to, fmt.Errorf("demo: first day %v is outside 1990 to 2036", from)
	}
	switch {
	case o.Days < 0 || o.Days > 3*366:
		return from, to, fmt.Errorf("demo: %d days; give 1 to %d, or 0 for the rest of the year", o.Days, 3*366)
	case o.Days == 0:
		return from, site.Date{Year: from.Year, Month: 12, Day: 31}, nil
	}
	to = site.DateOf(time.Date(from.Year, from.Month, from.Day+o.Days-1, 12, 0, 0, 0, time.UTC))
	return from, to, nil
}

// Simulate computes the building's truth without writing anything.
func Simulate(o Options) (Truth, error) {
	b, err := simulate(o)
	if err != nil {
		return Truth{}, err
	}
	return *b.truth, nil
}

// building is a finished simulation, ready to be written.
type building struct {
	options  Options
	from, to site.Date
	loc      *time.Location
	zones    []zoneSpec
	units    []*unit
	days     []day
	weather  *weather
	sim      *simulation
	truth    *Truth
}

func simulate(o Options) (*building, error) {
	from, to, err := o.span()
	if err != nil {
		return nil, err
	}
	if o.Zones < 0 || o.Zones > len(zoneSpecs) {
		return nil, fmt.Errorf("demo: %d zones; give 1 to %d, or 0 for all", o.Zones, len(zoneSpecs))
	}
	loc, err := time.LoadLocation(zoneName)
	if err != nil {
		return nil, fmt.Errorf("demo: clock rules: %w", err)
	}
	b := &building{options: o, from: from, to: to, loc: loc, zones: slices.Clone(zoneSpecs)}
	if o.Zones > 0 {
		b.zones = b.zones[:o.Zones]
	}
	if err := b.check(); err != nil {
		return nil, err
	}
	first := site.DateOf(time.Date(from.Year, from.Month, from.Day-leadDays, 12, 0, 0, 0, time.UTC))
	if from.Month == 1 && from.Day == 1 { // a whole December before a year
		first = site.Date{Year: from.Year - 1, Month: 12, Day: 1}
	}
	b.days = calendarOf(first, to, loc)
	start, periodStart := b.days[0].start, from.Start(loc).Unix()
	lead := int((periodStart - start) / stepS)
	n := int((to.Next().Start(loc).Unix() - periodStart) / stepS)
	b.weather = makeWeather(o.Seed, start, lead+n)
	var plants []plantSpec
	for i := range plantSpecs {
		for _, z := range b.zones {
			if z.plant == i {
				plants = append(plants, plantSpecs[i])
				break
			}
		}
	}
	b.truth = newTruth(o.Seed, b.zones, plants, periodStart, n)
	w := b.weather
	b.truth.Outdoor = Outdoor{StartUTC: start, Lead: lead, TempC: w.tempC, DewC: w.dewC, RHPct: w.rhPct, WindMS: w.windMS,
		WindDeg: w.windDeg, RainMMh: w.rainMMh, GlobalWm2: w.globalWm2, CO2PPM: w.co2PPM}
	b.sim = newSimulation(o.Seed, b.zones, b.weather, b.truth)
	b.units = b.sim.units
	b.sim.run(b.days, loc, o.Changes)
	if o.Faults {
		b.truth.Faults = b.plantedFaults()
	}
	return b, nil
}

// Write simulates the building and writes its folder: README.txt, site.yaml,
// points.csv, events.csv, typical.epw and logs/. The folder is made if need
// be; files of the same names are replaced. The same options give the same
// bytes (per architecture). Truth is what really happened.
func Write(dir string, o Options) (Truth, error) {
	b, err := simulate(o)
	if err != nil {
		return Truth{}, err
	}
	if err := os.MkdirAll(filepath.Join(dir, "logs"), 0o777); err != nil {
		return Truth{}, fmt.Errorf("demo: make the folder: %w", err)
	}
	errs := []error{
		b.writeFloors(dir), b.writeOwnLogger(dir), b.writeWeather(dir), b.writePlantTemps(dir),
		b.writeWindows(dir), b.writePlantStatus(dir), b.writePresence(dir), b.writePower(dir),
		b.writeTypicalYear(dir), b.writeSite(dir), b.writePoints(dir), b.writeDiary(dir), b.writeReadme(dir),
	}
	if o.WriteTruth {
		errs = append(errs, writeTruth(filepath.Join(dir, "truth.csv.gz"), b.truth))
	}
	if err := errors.Join(errs...); err != nil {
		return Truth{}, err
	}
	return *b.truth, nil
}
