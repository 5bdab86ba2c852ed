package demo

import (
	"compress/gzip"
	"fmt"
	"os"
	"strconv"
)

// Reason says what kept a zone from running open in a step: the decision of
// the simulated control or people, not a guess from the logs.
type Reason uint8

// Reasons. A zone with its plant running carries the unit's reason, also when
// a window is open.
const (
	// ReasonNone: the zone was open with its plant off, or it was outside the
	// programme's hours with the plant off.
	ReasonNone Reason = iota
	// ReasonClockStart: the time programme started the unit, whatever the weather.
	ReasonClockStart
	// ReasonOutdoorLimit: outdoor temperature outside the unit's changeover limits.
	ReasonOutdoorLimit
	// ReasonIndoorLimit: the zone's own thermostat called for cooling.
	ReasonIndoorLimit
	// ReasonCalledBy: another zone's thermostat called for cooling, see CalledBy.
	ReasonCalledBy
	// ReasonHeating: warm-up, a call for heat, or frost guard.
	ReasonHeating
	// ReasonSlowReopen: the unit had stopped, windows were not yet released.
	ReasonSlowReopen
	// ReasonNotOpened: windows were released and nobody opened them.
	ReasonNotOpened
	// ReasonNeverUsed: as ReasonNotOpened, in a zone whose windows are never used.
	ReasonNeverUsed
	// ReasonNotWarm: automatic windows released but shut, nothing asked for air.
	ReasonNotWarm
	// ReasonWeatherGuard: rain or wind kept automatic windows shut.
	ReasonWeatherGuard
	// ReasonNoOpening: the zone has no opening at all.
	ReasonNoOpening
	numReasons
)

var reasonNames = [numReasons]string{"none", "clock start", "outdoor changeover limit", "own thermostat", "called by another zone",
	"heating", "slow to reopen", "nobody opened", "window never used", "automatic window not wanted", "rain or wind guard", "no opening"}

func (r Reason) String() string {
	if r < numReasons {
		return reasonNames[r]
	}
	return "unknown"
}

// Truth is what really happened in the simulated building: step means without
// sensor noise. Step i covers [StartUTC+i*StepS, StartUTC+(i+1)*StepS) in unix
// seconds. All slices of a zone and of a plant unit have length N.
type Truth struct {
	Seed     uint64
	StartUTC int64
	StepS    int64
	N        int
	Outdoor  Outdoor
	Zones    []ZoneTruth
	Plants   []PlantTruth
	Faults   []Fault
}

// Outdoor is the weather, from 30 days before the period: step i of the truth
// is step i+Lead here.
type Outdoor struct {
	StartUTC int64
	Lead     int
	TempC    []float32
	DewC     []float32
	RHPct    []float32
	WindMS   []float32 // at 10 m, mean of the step
	WindDeg  []float32 // where the wind comes from
	RainMMh  []float32
	GlobalWm2,
	CO2PPM []float32
}

// ZoneTruth is one zone's year.
type ZoneTruth struct {
	ID         string
	AirC       []float32
	OperativeC []float32
	RHPct      []float32
	CO2PPM     []float32
	// OpenShare is the share of the zone's opening area open (of the zones it
	// opens through, where it has none of its own); 0 without openings.
	OpenShare []float32
	// OpenLs is the outdoor air through its openings in L/s (air exchanged with
	// the zone it opens through, where it has none of its own), PlantLs the
	// outdoor air in its supply air.
	OpenLs, PlantLs []float32
	People          []float32
	// Plant is the site.PlantState code that lasted longest in the step.
	Plant []uint8
	// Occupied is 1 within the declared schedule less declared holidays.
	Occupied []uint8
	Reason   []Reason
	// CalledBy is the index into Truth.Zones of the calling zone, -1 otherwise.
	CalledBy []int8
}

// PlantTruth is one unit's year.
type PlantTruth struct {
	ID      string
	State   []uint8 // site.PlantState code that lasted longest
	SupplyC []float32
	PowerKW []float32
}

// FaultKind names a planted fault of the logs.
type FaultKind string

// Planted faults.
const (
	FaultFrozen     FaultKind = "frozen temperature sensor"
	FaultInverted   FaultKind = "inverted window contact"
	FaultClock      FaultKind = "logger an hour ahead"
	FaultCO2Drift   FaultKind = "drifting CO2 sensor"
	FaultReturnDuct FaultKind = "temperature sensor in the return duct"
	FaultMissing    FaultKind = "missing weeks"
	FaultFahrenheit FaultKind = "Fahrenheit values labelled °C"
	FaultUndeclared FaultKind = "undeclared day off"
)

// Fault is one planted fault. FromUTC and ToUTC are unix seconds, half-open,
// within the period.
type Fault struct {
	Kind           FaultKind
	Zones          []string
	Source, Column string // as in points.csv; Column is empty when all are concerned
	FromUTC, ToUTC int64
	InDiary        bool
	Note           string
}

// Zone returns the truth of the zone with the id, nil when there is none.
func (t *Truth) Zone(id string) *ZoneTruth {
	for i := range t.Zones {
		if t.Zones[i].ID == id {
			return &t.Zones[i]
		}
	}
	return nil
}

// Clean reports whether no planted fault concerns the zone.
func (t *Truth) Clean(id string) bool {
	for _, f := range t.Faults {
		for _, z := range f.Zones {
			if z == id && f.Kind != FaultUndeclared {
				return false
			}
		}
	}
	return true
}

func newTruth(seed uint64, zones []zoneSpec, plants []plantSpec, start int64, n int) *Truth {
	t := &Truth{Seed: seed, StartUTC: start, StepS: stepS, N: n}
	for i := range zones {
		floats := make([]float32, 8*n)
		codes := make([]uint8, 2*n)
		cut := func(k int) []float32 { return floats[k*n : (k+1)*n : (k+1)*n] }
		t.Zones = append(t.Zones, ZoneTruth{ID: zones[i].id, AirC: cut(0), OperativeC: cut(1), RHPct: cut(2), CO2PPM: cut(3),
			OpenShare: cut(4), OpenLs: cut(5), PlantLs: cut(6), People: cut(7), Plant: codes[:n:n], Occupied: codes[n:],
			Reason: make([]Reason, n), CalledBy: make([]int8, n)})
	}
	for i := range plants {
		t.Plants = append(t.Plants, PlantTruth{ID: plants[i].id, State: make([]uint8, n), SupplyC: make([]float32, n), PowerKW: make([]float32, n)})
	}
	return t
}

// writeTruth writes the zones' truth as gzipped CSV: one row per zone and step.
func writeTruth(path string, t *Truth) (err error) {
	f, err := os.Create(path)
	if err != nil {
		return fmt.Errorf("write the truth: %w", err)
	}
	defer func() {
		if e := f.Close(); err == nil {
			err = e
		}
	}()
	zw, _ := gzip.NewWriterLevel(f, gzip.BestSpeed)
	buf := []byte("start_utc_s,zone,air_c,operative_c,rh_pct,co2_ppm,open_share,plant,occupied,people,open_ls,plant_ls,reason,called_by\n")
	for zi := range t.Zones {
		z := &t.Zones[zi]
		for i := range t.N {
			buf = strconv.AppendInt(buf, t.StartUTC+int64(i)*t.StepS, 10)
			buf = append(append(buf, ','), z.ID...)
			for _, v := range [...]struct {
				x      float32
				digits int
			}{{z.AirC[i], 3}, {z.OperativeC[i], 3}, {z.RHPct[i], 2}, {z.CO2PPM[i], 1}, {z.OpenShare[i], 4}} {
				buf = appendFixed(append(buf, ','), float64(v.x), v.digits, '.')
			}
			buf = append(buf, ',', '0'+z.Plant[i], ',', '0'+z.Occupied[i], ',')
			buf = appendFixed(buf, float64(z.People[i]), 1, '.')
			buf = appendFixed(append(buf, ','), float64(z.OpenLs[i]), 1, '.')
			buf = appendFixed(append(buf, ','), float64(z.PlantLs[i]), 1, '.')
			buf = append(append(buf, ','), z.Reason[i].String()...)
			buf = append(buf, ',')
			if c := z.CalledBy[i]; c >= 0 {
				buf = append(buf, t.Zones[c].ID...)
			}
			buf = append(buf, '\n')
			if len(buf) > 1<<16 {
				if _, err = zw.Write(buf); err != nil {
					return err
				}
				buf = buf[:0]
			}
		}
	}
	if _, err = zw.Write(buf); err != nil {
		return err
	}
	return zw.Close()
}
