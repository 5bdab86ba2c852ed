package guess

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
)

// fit is what the values of a track say to a quantity.
type fit struct {
	support float64 // 0 nothing, up to 0.6 plainly so
	why     string
	against string // why it cannot be
	needs   string // what a person must say
	doubts  []string
	values  string // meaning of the words met, as points.csv writes it
}

// usual ranges of quantities in their canonical unit: the median and nearly
// all values lie within. Common practice, generous.
type band struct{ midLow, midHigh, low, high float64 }

func bands(q site.Quantity) (band, bool) {
	b, ok := map[site.Quantity]band{
		site.AirTemp: {8, 36, -10, 55}, site.ThermostatTemp: {8, 36, -10, 55}, site.OperativeTemp: {8, 36, -10, 55}, site.GlobeTemp: {8, 40, -10, 60},
		site.SurfaceTemp: {3, 50, -25, 80}, site.SupplyAirTemp: {6, 50, -10, 80}, site.ReturnAirTemp: {12, 36, 0, 50}, site.MixedAirTemp: {-5, 36, -25, 50},
		site.OutdoorTemp: {-25, 38, -50, 55}, site.OutdoorDewPoint: {-35, 28, -60, 35},
		site.Humidity: {8, 92, 0, 103}, site.OutdoorHumidity: {8, 100, 0, 103},
		site.CO2: {330, 2500, 150, 10500}, site.OutdoorCO2: {330, 520, 250, 900},
		site.WindSpeed: {0, 16, 0, 60}, site.WindGust: {0, 25, 0, 90}, site.WindDirection: {0, 360, 0, 360}, site.Rain: {0, 5, 0, 200}, site.Solar: {-10, 800, -20, 1500},
		site.WindowOpening: {0, 100, 0, 101}, site.WindowCommand: {0, 100, 0, 101}, site.ZoneDamper: {0, 100, 0, 101}, site.HeatingValve: {0, 100, 0, 101},
		site.CoolingValve: {0, 100, 0, 101}, site.OutdoorAirDamper: {0, 100, 0, 101},
		site.People: {0, 800, 0, 3000}, site.PM25: {0, 200, 0, 1500}, site.OutdoorPM25: {0, 200, 0, 1500}, site.AirSpeed: {0, 2, 0, 8},
		site.SetpointHeat: {4, 32, 0, 45}, site.SetpointCool: {10, 40, 5, 120},
		site.ZoneAirflow: {0, 5e4, 0, 5e5}, site.SupplyAirflow: {0, 5e5, 0, 5e6}, site.ElectricPower: {-1e3, 2e4, -1e4, 1e5},
		site.CoolingPower: {-1e3, 2e4, -1e4, 1e5}, site.HeatingPower: {-1e3, 2e4, -1e4, 1e5},
	}[q]
	return b, ok
}

// fits holds the values against a quantity in a unit.
func (t *Track) fits(q site.Quantity, unit string) fit {
	tr, _ := q.Trait()
	if tr.Kind == site.Switch || tr.Kind == site.Status {
		return t.fitsState(q, tr.Kind)
	}
	if t.textual() {
		if v := t.vocabulary(); v == "" && t.number > 0 {
			return fit{doubts: []string{"many texts that are no numbers: " + t.someWords()}}
		}
		return fit{against: "its values are words: " + t.someWords()}
	}
	conv, err := site.Convert(q, unit)
	b, ok := bands(q)
	if err != nil || !ok || len(t.sample) < 5 {
		return fit{}
	}
	to := func(x float64) float64 { return conv.Factor*x + conv.Offset }
	lo, mid, hi := to(t.q(0.01)), to(t.q(0.5)), to(t.q(0.99))
	said := fmt.Sprintf("values %.4g to %.4g, half of them below %.4g", t.q(0.01), t.q(0.99), t.q(0.5))
	if mid < b.midLow || mid > b.midHigh || lo < b.low || hi > b.high {
		return fit{against: said + ": not as " + tr.Words}
	}
	f := fit{support: 0.3, why: said + ", as " + tr.Words}
	constant := t.q(0.002) == t.q(0.998)
	switch q {
	case site.AirTemp, site.ThermostatTemp, site.OperativeTemp:
		if mid > 15 && mid < 29 && hi-lo < 22 {
			f.support = 0.45
		}
		if t.binary() {
			f.against = "values 0 and 1 only: not as " + tr.Words
		}
		if hi-lo > 32 {
			f.support = 0.1
			f.doubts = append(f.doubts, "moves as much as outdoor air")
		}
	case site.OutdoorTemp:
		if hi-lo > 8 {
			f.support = 0.4
		}
	case site.CO2:
		if to(t.q(0.05)) > 330 && to(t.q(0.05)) < 650 {
			f.support = 0.55
		}
	case site.Humidity, site.OutdoorHumidity:
		f.support = 0.4
		if t.binary() {
			f.against = "values 0 and 1 only: not as " + tr.Words
		}
	case site.WindDirection:
		if hi > 180 {
			f.support = 0.45
		} else {
			f.support = 0
		}
	case site.Rain:
		if t.zeros*10 < t.number*5 {
			f.support, f.against = 0, "not zero most of the time: not as rain"
		}
	case site.Solar:
		if t.zeros*10 < t.number*2 && lo > 20 {
			f.against = "never zero at night: not as sun"
		} else if hi > 150 {
			f.support = 0.5
		}
	case site.People:
		if !t.whole {
			f.support = 0.1
			f.doubts = append(f.doubts, "not whole numbers")
		}
	case site.WindowOpening, site.ZoneDamper, site.HeatingValve, site.CoolingValve, site.OutdoorAirDamper, site.WindowCommand:
		if t.binary() {
			f.support = 0.1
			f.doubts = append(f.doubts, "0 and 1 only: open and shut, or per cent?")
		}
	case site.SetpointHeat, site.SetpointCool:
		if len(t.distinct) < distinctMax {
			f.support = 0.45
		}
	case site.OutdoorCO2:
		if hi > 800 {
			f.against = "rises to " + fmt.Sprintf("%.0f", hi) + ": not as outdoors"
		}
	}
	if constant && t.number > 50 && q != site.Rain && q != site.People && q != site.SetpointHeat && q != site.SetpointCool {
		f.doubts = append(f.doubts, fmt.Sprintf("the value never changes (%.4g)", t.q(0.5)))
		f.support = min(f.support, 0.1)
	}
	return f
}

// vocabulary groups a track's words: open, presence, lock, plant, onoff, or
// empty for words of no known kind.
func (t *Track) vocabulary() string {
	if !t.textual() {
		return ""
	}
	counts := map[string]int{}
	for w, n := range t.words {
		f := cell.Fold(w)
		m := plantMeaning(w)
		switch {
		case openWords[f]:
			counts["open"] += n
		case presWords[f]:
			counts["presence"] += n
		case lockWords[f]:
			counts["lock"] += n
		case m == "heat" || m == "cool" || m == "vent":
			counts["plant"] += n + 1
		case m != "" || onOff(w) != "":
			counts["onoff"] += n
		default:
			counts[""] += n
		}
	}
	if counts["plant"] > 0 {
		return "plant"
	}
	best, most := "", 0
	for _, k := range []string{"open", "presence", "lock", "onoff", ""} {
		if counts[k] > most {
			best, most = k, counts[k]
		}
	}
	return best
}

// fitsState holds words, or zeros and ones, against a switch or a state.
func (t *Track) fitsState(q site.Quantity, kind site.Kind) fit {
	if !t.textual() {
		if t.number == 0 {
			return fit{}
		}
		if t.binary() {
			f := fit{support: 0.3, why: "values 0 and 1"}
			switch {
			case len(t.distinct) == 1:
				f.support = 0.15
				f.doubts = append(f.doubts, fmt.Sprintf("the value never changes (%.4g)", t.q(0.5)))
			case kind == site.Switch && q != site.Presence:
				f.doubts = append(f.doubts, "1 is taken for open or on")
			}
			return f
		}
		if kind == site.Status && t.whole && len(t.distinct) <= 8 {
			return fit{needs: fmt.Sprintf("numbers %s: what does each of them mean?", t.someNumbers())}
		}
		if kind == site.Status && t.percent() {
			return fit{against: "numbers up to 100, not states: a speed or an output?"}
		}
		return fit{against: fmt.Sprintf("numbers from %.4g to %.4g, not states", t.min, t.max)}
	}
	v := t.vocabulary()
	f := fit{support: 0.3, why: "states " + t.someWords()}
	switch {
	case q == site.Window && v == "open", q == site.Presence && v == "presence", q == site.PlantStatus && v == "plant":
		f.support = 0.6
	case q == site.WindowEnable && v == "lock", q == site.ModeSignal && v == "lock":
		f.support = 0.5
	case q == site.Window && (v == "presence" || v == "plant"), q == site.Presence && (v == "open" || v == "plant"), q == site.PlantStatus && (v == "presence"):
		return fit{against: "states " + t.someWords() + ": not as " + string(q)}
	}
	var unknown, pairs []string
	for _, w := range t.sortedWords() {
		m := t.meaning(q, w)
		if m == "" {
			if w != "" {
				unknown = append(unknown, fmt.Sprintf("%q", w))
			}
			continue
		}
		if strings.ContainsAny(w, "=;,|") {
			continue
		}
		pairs = append(pairs, w+"="+m)
	}
	if len(unknown) > 0 {
		if len(pairs) == 0 {
			f.support = 0
			f.needs = "what do its states mean: " + strings.Join(unknown, ", ") + "?"
		} else {
			f.doubts = append(f.doubts, "states not understood: "+strings.Join(unknown, ", "))
		}
	}
	f.values = strings.Join(pairs, ";")
	return f
}

// meaning is what a word means for a quantity, in the words of points.csv.
func (t *Track) meaning(q site.Quantity, w string) string {
	f := cell.Fold(w)
	if tr, _ := q.Trait(); tr.Kind == site.Status {
		return plantMeaning(w)
	}
	switch f {
	case "released", "freigegeben", "unlocked", "unlock", "libere", "permitted":
		return "on"
	case "locked", "gesperrt", "verriegelt", "lock", "verrouille", "blocked":
		return "off"
	}
	switch m := onOff(w); {
	case m == "":
		return ""
	case q == site.Window && m == "on":
		return "open"
	case q == site.Window:
		return "shut"
	default:
		return m
	}
}

func (t *Track) sortedWords() []string {
	var out []string
	for w := range t.words {
		out = append(out, w)
	}
	sort.Strings(out)
	return out
}

func (t *Track) someNumbers() string {
	var list []float64
	for v := range t.distinct {
		list = append(list, v)
	}
	sort.Float64s(list)
	var out []string
	for _, v := range list {
		out = append(out, fmt.Sprintf("%g", v))
	}
	return strings.Join(out, ", ")
}

// half is the middle of a track's series, for comparisons.
func half(x []float64) float64 {
	if len(x) == 0 {
		return math.NaN()
	}
	s := append([]float64(nil), x...)
	sort.Float64s(s)
	return s[len(s)/2]
}
