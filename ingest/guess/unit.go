package guess

import (
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/tabular"
)

// unit is a unit of measurement as a name or a cell carries it.
type unit struct {
	text string // as points.csv takes it
	dim  string // what is measured in it: temp, ratio, ppm, flow, speed, angle, dust, rain, sun, power, other
	sure float64
}

// unitSpellings by folded text without spaces, marks and brackets.
var unitSpellings = func() map[string]unit {
	m := map[string]unit{}
	for text, rest := range map[string]string{
		"degC":     "temp degc °c oc celsius gradc degreescelsius deg_c gradcelsius",
		"degF":     "temp degf °f of fahrenheit degreesfahrenheit",
		"K":        "temp kelvin degk",
		"%":        "ratio % pct percent %rh %rf %hr rh% %r.h. prozent %open pourcent perc",
		"fraction": "ratio frac fraction 0-1",
		"ppm":      "ppm ppm ppmv",
		"m3/h":     "flow m3/h m³/h cmh m3h m3h1 m3perh",
		"l/s":      "flow l/s ls lps ls1",
		"m3/s":     "flow m3/s m³/s m3s",
		"cfm":      "flow cfm",
		"m/s":      "speed m/s ms ms1 mps m.s-1",
		"km/h":     "speed km/h kmh kph",
		"mph":      "speed mph",
		"kn":       "speed kn knots kt kts",
		"deg":      "angle deg ° degrees grad degree",
		"ug/m3":    "dust ug/m3 µg/m3 μg/m3 µg/m³ ugm3",
		"mm/h":     "rain mm/h mmh mmperh mmh1",
		"mm":       "rain mm",
		"in":       "rain inch inches",
		"W/m2":     "sun w/m2 w/m² wm2 wm² w/sqm wperm2",
		"kW":       "power kw",
		"W":        "power watt watts",
		"":         "other kwh wh mwh lux lx pa hpa mbar v volt ppb db dba bar kpa mb inhg",
	} {
		f := strings.Fields(rest)
		for _, w := range f[1:] {
			m[w] = unit{text: text, dim: f[0], sure: 1}
		}
	}
	// One letter: only in brackets or in a column of units.
	for w, u := range map[string]unit{"c": {"degC", "temp", 0.9}, "f": {"degF", "temp", 0.9}, "k": {"K", "temp", 0.5}, "w": {"W", "power", 0.8}} {
		m[w] = u
	}
	return m
}()

var unitMarks = strings.NewReplacer(" ", "", "'", "", `"`, "", "[", "", "]", "", "(", "", ")", "", "^", "", "·", "")

func unitKey(s string) string { return unitMarks.Replace(strings.ToLower(strings.TrimSpace(s))) }

// unitNamed finds a unit by its spelling.
func unitNamed(s string) (unit, bool) {
	k := unitKey(s)
	if k == "" {
		return unit{}, false
	}
	u, ok := unitSpellings[k]
	return u, ok
}

func isUnit(s string) bool {
	_, ok := unitNamed(s)
	return ok
}

// unitOf finds the unit a name carries: in brackets, after a comma, or as its
// last words ("temp_c", "wind__m_s_1"). Tokens that belong to it are marked.
func unitOf(name string, ts []token) (unit, bool) {
	if h := tabular.HeaderUnit(name); h != "" {
		if u, ok := unitNamed(h); ok {
			markUnit(ts, strings.LastIndex(name, h))
			return u, true
		}
	}
	for _, pair := range []string{"[]", "()", "{}"} {
		i, j := strings.LastIndexByte(name, pair[0]), strings.LastIndexByte(name, pair[1])
		if i >= 0 && j > i {
			if u, ok := unitNamed(name[i : j+1]); ok {
				markUnit(ts, i)
				return u, true
			}
			if strings.HasSuffix(strings.TrimSpace(name), pair[1:]) {
				markUnit(ts, i) // something in brackets that is no unit: no part of the identity
			}
		}
	}
	if i := strings.LastIndexByte(name, ','); i >= 0 {
		if u, ok := unitNamed(strings.TrimSuffix(name[i+1:], "()")); ok {
			markUnit(ts, i)
			return u, true
		}
	}
	// The last words, the longest first.
	for k := 3; k >= 1; k-- {
		if len(ts) <= k {
			continue
		}
		joined := ""
		for _, t := range ts[len(ts)-k:] {
			joined += t.fold
		}
		u, ok := unitNamed(joined)
		if !ok {
			continue
		}
		if k == 1 && len(joined) == 1 && !measures(ts[:len(ts)-1], u.dim) {
			continue // "R101 C" may be anything
		}
		u.sure = min(u.sure, 0.9)
		for i := len(ts) - k; i < len(ts); i++ {
			ts[i].unit = true
		}
		return u, true
	}
	return unit{}, false
}

// measures reports whether words speak of what a unit measures.
func measures(ts []token, dim string) bool {
	for i := range ts {
		if dim == "temp" && ts[i].is("temp") || dim == "power" && ts[i].is("power") {
			return true
		}
	}
	return false
}

// markUnit marks the tokens from a byte of the name on.
func markUnit(ts []token, from int) {
	for i := range ts {
		if ts[i].from >= from {
			ts[i].unit = true
		}
	}
}

// dimOf is the dimension a quantity is measured in.
func dimOf(q site.Quantity) string {
	t, _ := q.Trait()
	switch t.Unit {
	case "degC":
		return "temp"
	case "%":
		return "ratio"
	case "ppm":
		return "ppm"
	case "m3/h":
		return "flow"
	case "m/s":
		return "speed"
	case "deg":
		return "angle"
	case "ug/m3":
		return "dust"
	case "mm/h":
		return "rain"
	case "W/m2":
		return "sun"
	case "kW":
		return "power"
	}
	return ""
}

// fitUnit settles the unit of a quantity from what is written and what the
// values are; sure is false where only the values speak or nothing does.
func (t *Track) fitUnit(q site.Quantity, said unit, imperial bool) (text string, sure bool, why, doubt string) {
	tr, _ := q.Trait()
	if tr.Unit == "" {
		return "", true, "", ""
	}
	if said.dim != "" && said.dim == dimOf(q) {
		if _, err := site.Convert(q, said.text); err == nil {
			if alt, ok := t.contradicts(q, said.text); ok {
				return alt, false, "", "the name says " + said.text + ", but the values are those of " + alt
			}
			return said.text, true, "", ""
		}
	}
	mid, hi := t.q(0.5), t.q(0.99)
	switch dimOf(q) {
	case "temp":
		switch {
		case mid > 200 && mid < 340:
			return "K", true, "values as of kelvins", ""
		case hi > 60 && mid > 28 || imperial && hi > 48, imperial && mid > 45:
			return "degF", mid > 55 || hi > 70, "values as of degrees Fahrenheit", ""
		}
		return "degC", true, "values as of degrees Celsius", ""
	case "ratio":
		switch {
		case t.max <= 1.05 && !t.binary():
			return "fraction", true, "values from 0 to 1", ""
		case t.max <= 10.05 && t.max > 5 && q != site.Humidity && q != site.OutdoorHumidity:
			return "0-10V", false, "", "values end at 10: taken for a control voltage"
		}
		return "%", t.max > 10.05, "", ""
	case "ppm":
		if hi < 1 {
			return "vol%", false, "", "values below 1: taken for per cent by volume"
		}
		return "ppm", true, "", ""
	case "speed":
		if imperial {
			return "mph", false, "", "no unit is written; miles per hour, since temperatures beside it are in Fahrenheit"
		}
		return "m/s", false, "", "no unit is written; metres per second taken"
	case "rain":
		if imperial {
			return "in", false, "", "no unit is written; inches per interval, since temperatures beside it are in Fahrenheit"
		}
		return "mm", false, "", "no unit is written; millimetres per interval taken"
	case "power":
		if mid > 400 || hi > 3000 {
			return "W", false, "", "no unit is written; watts, since the numbers are large"
		}
		return "kW", false, "", "no unit is written; kilowatts taken"
	case "flow":
		return "m3/h", false, "", "no unit is written; cubic metres per hour taken"
	}
	return tr.Unit, true, "", ""
}

// contradicts names another unit when the values are impossible in the one
// that is written.
func (t *Track) contradicts(q site.Quantity, said string) (string, bool) {
	mid, hi := t.q(0.5), t.q(0.99)
	switch {
	case said == "degC" && mid > 45 && mid < 110 && q != site.SupplyAirTemp && q != site.SurfaceTemp:
		return "degF", true
	case said == "%" && hi > 0 && hi <= 1.0 && !t.binary() && (q == site.Humidity || q == site.OutdoorHumidity):
		return "fraction", true
	}
	return "", false
}

// sameText compares two spellings of a unit.
func sameText(a, b string) bool { return cell.SameUnit(a, b) }
