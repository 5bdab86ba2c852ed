package guess_test

import (
	"fmt"
	"math/rand/v2"
	"strings"
)

// language holds, for each kind, several ways of naming it. They are the words
// of textbooks and controllers in general; some are in no word list of the
// guesser.
type language struct {
	kinds map[string][]string
	place []string // templates of a room
	unit  []string
	words map[string][][]string
}

func languages() map[string]language {
	return map[string]language{
		"English": {
			kinds: map[string][]string{
				"temp": {"Temperature", "Room Temp", "Space Temperature", "Zone Temp", "Air Temp", "Indoor Temperature", "Rm Temp"}, "rh": {"Humidity", "RH", "Relative Humidity", "Rel Hum", "Space RH"},
				"co2": {"CO2", "CO2 Concentration", "CO2 Level", "Carbon Dioxide"}, "win": {"Window", "Window Contact", "Window Status", "Win Open", "Sash Contact"},
				"occ": {"Occupancy", "Presence", "PIR", "Occupied", "Motion"}, "ppl": {"People", "Headcount", "Occupant Count", "Persons"},
				"sph": {"Heating Setpoint", "Htg SP", "Heat Set Point"}, "spc": {"Cooling Setpoint", "Clg SP", "Cool Stpt"}, "hv": {"Heating Valve", "Htg Vlv", "Reheat Valve Position"}, "dmp": {"Damper Position", "VAV Damper", "Dmpr Pos"},
				"flow": {"Airflow", "Supply Flow", "VAV Flow"}, "run": {"Supply Fan Status", "Fan Status", "Run Status", "SF Sts"}, "sat": {"Supply Air Temp", "Discharge Temp", "SAT", "Sup Air Temperature"},
				"rat": {"Return Air Temp", "RAT", "Extract Air Temperature"}, "mat": {"Mixed Air Temp", "MAT"}, "oad": {"Outside Air Damper", "OA Damper Pos"}, "kw": {"Power kW", "Electric Power"},
				"oat": {"Outdoor Temp", "Outside Air Temperature", "OAT", "Ambient Temperature", "Ext. Temp"}, "oah": {"Outdoor Humidity", "Outside RH", "OA Hum"}, "ws": {"Wind Speed", "Wind Spd"}, "wd": {"Wind Direction", "Wind Dir"}, "rain": {"Rain", "Rainfall", "Precipitation"}, "sun": {"Solar Radiation", "Global Irradiance"},
				"lux": {"Light Level", "Illuminance", "Lux"}, "door": {"Door", "Door Contact"}, "hws": {"Hot Water Flow Temp", "HWS Temp", "Boiler Supply Temp"}, "kwh": {"Energy kWh", "Meter Reading kWh"}, "press": {"Air Pressure", "Barometer"},
			},
			place: []string{"Room {f}{rr}", "R{f}{rr}", "RM-{f}{rr}", "L{f}-R{rr}", "Level {f} Room {rr}", "Zone {f}.{rr}", "{f}.{rr}", "Office {f}{rr}"}, unit: []string{"AHU{u}", "AHU-0{u}", "RTU {u}"},
			words: map[string][][]string{"win": {{"Closed", "Open"}, {"0", "1"}, {"CLOSED", "OPEN"}}, "occ": {{"Unoccupied", "Occupied"}, {"0", "1"}, {"FALSE", "TRUE"}}, "run": {{"Off", "On"}, {"0", "1"}, {"Stop", "Run"}}},
		},
		"German": {
			kinds: map[string][]string{
				"temp": {"Raumtemperatur", "Temperatur", "Temp. Raum", "Raumlufttemperatur", "T_Raum", "Ist-Temperatur"}, "rh": {"Raumfeuchte", "rel. Feuchte", "Luftfeuchte", "Feuchte"}, "co2": {"CO2", "CO2-Gehalt", "CO2 Konzentration", "Luftqualität CO2"},
				"win": {"Fensterkontakt", "Fenster", "Fensterstatus", "Fenster offen"}, "occ": {"Präsenz", "Belegung", "Anwesenheit", "Präsenzmelder"}, "ppl": {"Personen", "Anzahl Personen", "Personenzahl"},
				"sph": {"Sollwert Heizen", "Heizsollwert", "Solltemperatur Heizen"}, "hv": {"Heizventil", "Ventil Heizung", "Stellung Heizventil"}, "run": {"Betrieb", "Betriebsmeldung", "Zuluftventilator Betrieb"},
				"sat": {"Zulufttemperatur", "Temp. Zuluft", "Zuluft Temp"}, "rat": {"Ablufttemperatur", "Abluft Temp"}, "oat": {"Außentemperatur", "Außenlufttemperatur", "Temp. Außen"}, "oah": {"Außenfeuchte", "Feuchte außen"},
				"ws": {"Windgeschwindigkeit"}, "wd": {"Windrichtung"}, "rain": {"Niederschlag", "Regen"}, "sun": {"Globalstrahlung", "Sonneneinstrahlung"}, "lux": {"Helligkeit", "Beleuchtungsstärke"}, "door": {"Tür", "Türkontakt"}, "hws": {"Vorlauftemperatur Heizkreis", "Rücklauf Temp"}, "press": {"Luftdruck"},
			},
			place: []string{"Raum {f}.{rr}", "Zimmer {f}{rr}", "R{f}{rr}", "{f}.OG Raum {rr}", "Büro {f}{rr}", "Zi. {f}{rr}"}, unit: []string{"RLT {u}", "Lüftung AHU{u}", "Lüftungsanlage {u}"},
			words: map[string][][]string{"win": {{"zu", "offen"}, {"geschlossen", "geöffnet"}, {"0", "1"}}, "occ": {{"0", "1"}, {"frei", "belegt"}, {"Nein", "Ja"}}, "run": {{"Aus", "Ein"}, {"0", "1"}}},
		},
		"French": {
			kinds: map[string][]string{
				"temp": {"Température", "Température ambiante", "Temp. ambiante", "Température intérieure"}, "rh": {"Humidité", "Humidité relative", "Hygrométrie"}, "co2": {"CO2", "Concentration CO2", "Taux de CO2"}, "win": {"Fenêtre", "Contact fenêtre", "État fenêtre"},
				"occ": {"Présence", "Occupation", "Détecteur de présence"}, "sph": {"Consigne chauffage", "Consigne de chauffage"}, "hv": {"Vanne chauffage", "Position vanne chaud"}, "run": {"État ventilateur soufflage", "Marche ventilateur"}, "sat": {"Température de soufflage", "Temp soufflage"}, "rat": {"Température de reprise", "Temp reprise"},
				"oat": {"Température extérieure", "Temp ext"}, "oah": {"Humidité extérieure"}, "ws": {"Vitesse du vent", "Vitesse vent"}, "wd": {"Direction du vent"}, "rain": {"Pluie", "Précipitations"}, "sun": {"Rayonnement solaire", "Ensoleillement"}, "lux": {"Luminosité", "Éclairement"}, "door": {"Porte"}, "hws": {"Température départ eau chaude"}, "press": {"Pression atmosphérique"},
			},
			place: []string{"Bureau {f}{rr}", "Salle {f}.{rr}", "Étage {f} Bureau {rr}", "R+{f} Salle {rr}", "Local {f}{rr}"}, unit: []string{"CTA {u}", "CTA0{u}"},
			words: map[string][][]string{"win": {{"Fermé", "Ouvert"}, {"0", "1"}}, "occ": {{"0", "1"}, {"Non", "Oui"}}, "run": {{"Arrêt", "Marche"}, {"0", "1"}}},
		},
		"Dutch": {
			kinds: map[string][]string{
				"temp": {"Ruimtetemperatuur", "Temperatuur", "Temp. ruimte"}, "rh": {"Luchtvochtigheid", "Relatieve vochtigheid", "RV"}, "co2": {"CO2", "CO2-waarde"}, "win": {"Raam", "Raamcontact"}, "occ": {"Aanwezigheid", "Bezetting"}, "run": {"Ventilator status", "Bedrijf"},
				"sat": {"Inblaastemperatuur", "Toevoertemperatuur"}, "rat": {"Retourtemperatuur lucht", "Afvoertemperatuur"}, "oat": {"Buitentemperatuur", "Temp. buiten"}, "ws": {"Windsnelheid"}, "rain": {"Neerslag"}, "sun": {"Zonnestraling"}, "door": {"Deur"}, "lux": {"Verlichting lux"},
			},
			place: []string{"Kamer {f}.{rr}", "Ruimte {f}{rr}", "K{f}{rr}", "Lokaal {f}.{rr}"}, unit: []string{"LBK {u}", "LBK0{u}"},
			words: map[string][][]string{"win": {{"dicht", "open"}, {"0", "1"}}, "occ": {{"0", "1"}, {"vrij", "bezet"}}, "run": {{"uit", "aan"}, {"0", "1"}}},
		},
	}
}

// anyHabit composes a habit by chance: language, words, order, separators,
// case, layout, numbers, dates, encoding, faults.
func anyHabit(seed uint64) habit {
	r := rand.New(rand.NewPCG(seed, 99))
	pick := func(list ...string) string { return list[r.IntN(len(list))] }
	lang := pick("English", "English", "German", "French", "Dutch")
	l := languages()[lang]
	h := habit{zones: 2 + r.IntN(4), zone: m{}, unit: m{}, weather: m{}, open: m{}, words: map[string][]string{}}
	place, unit := pick(l.place...), pick(l.unit...)
	sep := pick(" ", "_", "-", ".", "/", ": ", " - ")
	prefix := pick("", "", "B12"+sep, "Campus"+sep, "DDC01"+sep)
	style := pick("as written", "UPPER", "lower", "joined")
	last := r.IntN(3) == 0 // quantity before place
	name := func(where, what string) string {
		if style == "joined" {
			parts := strings.Fields(what)
			for i, p := range parts {
				parts[i] = strings.ToUpper(p[:1]) + p[1:]
			}
			what = strings.Join(parts, "")
		}
		if sep == "_" || sep == "." {
			what = strings.ReplaceAll(what, " ", sep)
			where = strings.ReplaceAll(where, " ", sep)
		}
		out := prefix + where + sep + what
		switch {
		case where == "":
			out = prefix + what
		case last:
			out = prefix + what + sep + where
		}
		switch style {
		case "UPPER":
			out = strings.NewReplacer("{F}", "{f}", "{RR}", "{rr}", "{R}", "{r}", "{U}", "{u}").Replace(strings.ToUpper(out))
		case "lower":
			out = strings.ToLower(out)
		}
		return out
	}
	h.zone["temp"] = name(place, pick(l.kinds["temp"]...))
	for _, k := range []string{"rh", "co2", "win", "occ", "ppl", "sph", "spc", "hv", "dmp", "flow"} {
		if w := l.kinds[k]; w != nil && r.IntN(3) > 0 {
			h.zone[k] = name(place, pick(w...))
		}
	}
	if r.IntN(2) == 0 {
		for _, k := range []string{"run", "sat", "rat", "mat", "oad", "kw"} {
			if w := l.kinds[k]; w != nil && r.IntN(3) > 0 {
				h.unit[k] = name(unit, pick(w...))
			}
		}
		if w := l.kinds["hws"]; w != nil {
			h.open["hws"] = name("", pick(w...))
		}
	}
	for _, k := range []string{"oat", "oah", "ws", "wd", "rain", "sun"} {
		if w := l.kinds[k]; w != nil && r.IntN(2) == 0 {
			h.weather[k] = name("", pick(w...))
		}
	}
	for _, k := range []string{"lux", "door"} {
		if w := l.kinds[k]; w != nil && r.IntN(4) == 0 {
			h.open[k] = name(place, pick(w...))
		}
	}
	for k, lists := range l.words {
		h.words[k] = lists[r.IntN(len(lists))]
	}
	h.layout = pick("wide", "wide", "long", "per_point")
	h.sep, h.dates = pick(",", ";", "\t"), pick("2006-01-02 15:04:05", "02.01.2006 15:04", "02/01/2006 15:04", "01/02/2006 3:04 PM", "2006-01-02T15:04:05Z", "unix")
	h.header, h.key = pick("Timestamp", "Time", "Date/Time", "Datum", "Horodatage"), pick("Point|Value", "name|value", "Datenpunkt|Wert", "sensor|reading|unit")
	if h.comma = lang != "English" && h.sep != "," && r.IntN(2) == 0; lang == "German" && r.IntN(3) == 0 {
		h.charset = "windows-1252"
	} else {
		h.charset = pick("", "", "bom", "utf-16")
	}
	h.unitForm = pick("", "", " [%s]", " (%s)", ", %s")
	if h.layout != "wide" || strings.Contains(h.unitForm, ",") && h.sep == "," {
		h.unitForm = ""
	}
	if h.layout == "per_point" {
		for _, group := range []m{h.zone, h.unit, h.weather, h.open} {
			for k := range group {
				group[k] = strings.NewReplacer("/", "_", ":", "").Replace(group[k])
			}
		}
	}
	h.degF = lang == "English" && r.IntN(4) == 0
	h.missing, h.gaps = pick("", "---", "NaN", "-999"), r.IntN(3) == 0
	if h.layout == "wide" {
		h.title, h.unitRow = r.IntN(3), r.IntN(5) == 0
	}
	h.name = fmt.Sprintf("by chance %d: %s, %s", seed, lang, h.layout)
	return h
}
