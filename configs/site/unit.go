package site

// Conversion turns a logged number into the quantity's canonical unit:
// canonical = Factor*logged + Offset.
type Conversion struct{ Factor, Offset float64 }

// Identity leaves a number as it is.
var identity = Conversion{1, 0}

// conversions by canonical unit and logged unit (lower case). The factors are
// definitions (SI brochure, international yard and pound agreement).
var conversions = map[string]map[string]Conversion{
	"degC":  {"degc": identity, "c": identity, "°c": identity, "celsius": identity, "degf": {5.0 / 9, -160.0 / 9}, "f": {5.0 / 9, -160.0 / 9}, "°f": {5.0 / 9, -160.0 / 9}, "fahrenheit": {5.0 / 9, -160.0 / 9}, "k": {1, -273.15}, "kelvin": {1, -273.15}},
	"%":     {"%": identity, "percent": identity, "pct": identity, "%rh": identity, "fraction": {100, 0}, "1": {100, 0}, "0-1": {100, 0}},
	"ppm":   {"ppm": identity, "vol%": {1e4, 0}, "fraction": {1e6, 0}},
	"m3/h":  {"m3/h": identity, "m³/h": identity, "cmh": identity, "l/s": {3.6, 0}, "m3/s": {3600, 0}, "m³/s": {3600, 0}, "cfm": {1.69901082, 0}},
	"m/s":   {"m/s": identity, "km/h": {1 / 3.6, 0}, "mph": {0.44704, 0}, "kn": {1852.0 / 3600, 0}, "knots": {1852.0 / 3600, 0}, "ft/min": {0.00508, 0}, "fpm": {0.00508, 0}},
	"deg":   {"deg": identity, "°": identity, "degrees": identity},
	"ug/m3": {"ug/m3": identity, "µg/m3": identity, "µg/m³": identity, "mg/m3": {1000, 0}},
	// Rain per logging interval (mm, in) needs the interval; see RainPerInterval.
	"mm/h": {"mm/h": identity, "in/h": {25.4, 0}, "mm": identity, "in": {25.4, 0}},
	"W/m2": {"w/m2": identity, "w/m²": identity, "kw/m2": {1000, 0}},
	"kW":   {"kw": identity, "w": {0.001, 0}, "mw": {1000, 0}},
	"":     {"": identity, "1": identity, "persons": identity, "people": identity, "0/1": identity},
}
