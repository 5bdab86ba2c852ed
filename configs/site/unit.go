package site

import (
	"fmt"
	"sort"
	"strings"
)

// Conversion turns a logged number into the quantity's canonical unit:
// canonical = Factor*logged + Offset.
type Conversion struct{ Factor, Offset float64 }

// Identity leaves a number as it is.
var identity = Conversion{1, 0}

// Exact definitions: international yard and pound agreement (1 ft = 0.3048 m,
// 1 mile = 1609.344 m), international nautical mile (1852 m), the
// international-table Btu (1055.05585262 J) and the ton of refrigeration
// (12 000 Btu/h).
const (
	footM    = 0.3048
	mileM    = 1609.344
	nauticM  = 1852.0
	btuHourW = 1055.05585262 / 3600
)

// conversions by canonical unit and logged unit (lower case, spaces removed).
var conversions = map[string]map[string]Conversion{
	"degC": {"degc": identity, "c": identity, "°c": identity, "celsius": identity,
		"degf": {5.0 / 9, -160.0 / 9}, "f": {5.0 / 9, -160.0 / 9}, "°f": {5.0 / 9, -160.0 / 9}, "fahrenheit": {5.0 / 9, -160.0 / 9},
		"k": {1, -273.15}, "kelvin": {1, -273.15}},
	"%": {"%": identity, "percent": identity, "pct": identity, "%rh": identity,
		"fraction": {100, 0}, "1": {100, 0}, "0-1": {100, 0}, "0-10v": {10, 0}},
	"ppm": {"ppm": identity, "vol%": {1e4, 0}, "fraction": {1e6, 0}},
	"m3/h": {"m3/h": identity, "m³/h": identity, "cmh": identity, "l/s": {3.6, 0}, "l/h": {0.001, 0},
		"m3/s": {3600, 0}, "m³/s": {3600, 0}, "cfm": {footM * footM * footM * 60, 0}},
	"m/s": {"m/s": identity, "km/h": {1 / 3.6, 0}, "mph": {mileM / 3600, 0}, "kn": {nauticM / 3600, 0},
		"knots": {nauticM / 3600, 0}, "ft/min": {footM / 60, 0}, "fpm": {footM / 60, 0}},
	"deg":   {"deg": identity, "°": identity, "degrees": identity},
	"ug/m3": {"ug/m3": identity, "µg/m3": identity, "μg/m3": identity, "µg/m³": identity, "μg/m³": identity, "mg/m3": {1000, 0}},
	// Rain per logging interval (mm, in) needs the interval; see RainPerInterval.
	"mm/h": {"mm/h": identity, "in/h": {25.4, 0}, "mm": identity, "in": {25.4, 0}},
	"W/m2": {"w/m2": identity, "w/m²": identity, "kw/m2": {1000, 0}, "kw/m²": {1000, 0}},
	"kW": {"kw": identity, "w": {0.001, 0}, "mw": {1000, 0}, "btu/h": {btuHourW / 1000, 0},
		"kbtu/h": {btuHourW, 0}, "tonr": {12 * btuHourW, 0}},
	"": {"": identity, "1": identity, "persons": identity, "people": identity, "0/1": identity},
}

// only lists units that make sense for some quantities of a canonical unit
// alone: a relative humidity is not logged as a control voltage, a wind
// direction in per cent of nothing.
var only = map[string]func(Quantity) bool{
	"%rh":   func(q Quantity) bool { return q == Humidity || q == OutdoorHumidity },
	"0-10v": func(q Quantity) bool { return q != Humidity && q != OutdoorHumidity },
}

// Convert returns the conversion from the unit a point is logged in to the
// canonical unit of its quantity. Case and spaces do not matter; an empty unit
// means the canonical one. The error names the units allowed.
func Convert(q Quantity, unit string) (Conversion, error) {
	t, ok := q.Trait()
	if !ok {
		return Conversion{}, fmt.Errorf("unknown quantity %q", string(q))
	}
	u := unitKey(unit)
	if u == "" {
		return identity, nil
	}
	c, ok := conversions[t.Unit][u]
	if f := only[u]; ok && (f == nil || f(q)) {
		return c, nil
	}
	if len(Units(q)) == 0 {
		return Conversion{}, fmt.Errorf("unknown unit %q of %s: it has no unit, leave the cell empty", unit, q)
	}
	return Conversion{}, fmt.Errorf("unknown unit %q of %s: allowed are %s", unit, q, strings.Join(Units(q), ", "))
}

// Units lists the units a quantity may be logged in, the canonical one first,
// the others in alphabetical order.
func Units(q Quantity) []string {
	t, ok := q.Trait()
	if !ok {
		return nil
	}
	var out []string
	for u := range conversions[t.Unit] {
		if f := only[u]; u != "" && u != unitKey(t.Unit) && (f == nil || f(q)) {
			out = append(out, u)
		}
	}
	sort.Strings(out)
	if t.Unit != "" {
		out = append([]string{t.Unit}, out...)
	}
	return out
}

// RainPerInterval reports whether a unit of rain is an amount per logging
// interval (mm, in) rather than a rate. Convert then gives millimetres; who
// reads the log divides by the interval in hours.
func RainPerInterval(unit string) bool {
	u := unitKey(unit)
	return u == "mm" || u == "in"
}

func unitKey(unit string) string {
	return strings.ToLower(strings.Join(strings.Fields(unit), ""))
}
