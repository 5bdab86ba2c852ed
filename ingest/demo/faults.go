package demo

import (
	"time"

	"sashlog/configs/site"
)

// faultSpec is one planted fault: a zone, a column and days of a year. Month 0
// means the whole record.
type faultSpec struct {
	kind         FaultKind
	zone, column string
	source       string
	fromM, fromD int
	toM, toD     int // exclusive
	inDiary      bool
	note         string
}

var faultSpecs = []faultSpec{
	{FaultFahrenheit, "L1.01", "F1_R01_TMP [°C]", "floor1", 0, 0, 0, 0, false, "sensor sends °F, the trend export calls it °C"},
	{FaultFrozen, "L1.02", "F1_R02_TMP [°C]", "floor1", 5, 12, 6, 8, false, "last value repeated"},
	{FaultMissing, "floor1", "", "floor1", 9, 8, 9, 22, true, "trend storage full, no rows written"},
	{FaultInverted, "L2.05", "F2-R05-W1", "windows", 0, 0, 0, 0, false, "contact wired as normally closed"},
	{FaultClock, "L2.06", "", "logger206", 6, 10, 7, 10, true, "clock set an hour ahead at the battery change"},
	{FaultReturnDuct, "L3.02", "F3_R02_RTN_TMP [°C]", "floor3", 0, 0, 0, 0, false, "hangs in the return duct: still air when the fan is off"},
	{FaultCO2Drift, "L3.05", "F3_R05_CO2 [ppm]", "floor3", 3, 3, 10, 16, true, "baseline drifts upwards until the sensor is changed"},
}

// plantedFaults returns the faults that fall into the period and concern zones
// that take part.
func (b *building) plantedFaults() []Fault {
	start, end := b.truth.StartUTC, b.truth.StartUTC+int64(b.truth.N)*stepS
	has := map[string]bool{}
	var floor1 []string
	for _, z := range b.zones {
		has[z.id] = true
		if z.floor == 1 {
			floor1 = append(floor1, z.id)
		}
	}
	var out []Fault
	for _, s := range faultSpecs {
		zones := []string{s.zone}
		if s.zone == "floor1" {
			zones = floor1
		} else if !has[s.zone] {
			continue
		}
		for y := b.from.Year; y <= b.to.Year; y++ {
			from, to := start, end
			if s.fromM > 0 {
				at := func(m, d int) int64 {
					return site.Date{Year: y, Month: time.Month(m), Day: d}.Start(b.loc).Unix()
				}
				from, to = max(start, at(s.fromM, s.fromD)), min(end, at(s.toM, s.toD))
			} else if y > b.from.Year {
				continue
			}
			if from < to {
				out = append(out, Fault{s.kind, zones, s.source, s.column, from, to, s.inDiary, s.note})
			}
		}
	}
	for y := b.from.Year; y <= b.to.Year; y++ {
		d := bridgeDay(y)
		if !d.Before(b.from) && !b.to.Before(d) {
			var all []string
			for _, z := range b.zones {
				all = append(all, z.id)
			}
			out = append(out, Fault{FaultUndeclared, all, "", "", d.Start(b.loc).Unix(), d.Next().Start(b.loc).Unix(), false,
				"nobody comes, the schedule does not say so"})
		}
	}
	return out
}

// faultAt returns the fault of a kind at an instant in a zone, or nil.
func (b *building) faultAt(kind FaultKind, zone string, t int64) *Fault {
	for i := range b.truth.Faults {
		f := &b.truth.Faults[i]
		if f.Kind != kind || t < f.FromUTC || t >= f.ToUTC {
			continue
		}
		for _, z := range f.Zones {
			if z == zone {
				return f
			}
		}
	}
	return nil
}
