package guess_test

import "sashlog/configs/site"

// habit is one way exports are written and points are named. Names are
// templates: {f} floor, {r} room on the floor, {rr} the same with two digits,
// {u} the unit's number. They follow common practice in general form.
type habit struct {
	name string
	// zone, unit, weather and other points by kind of the simulation.
	zone, unit, weather map[string]string
	// other are columns of zones that there is no quantity for, or that nobody
	// can tell.
	open map[string]string
	// units are written behind the name in this form; %s is the unit, empty
	// means no units.
	unitForm string
	degF     bool
	fraction bool // humidity from 0 to 1
	layout   string
	sep      string
	comma    bool // decimal comma
	dates    string
	charset  string // utf-8, bom, utf-16, windows-1252
	words    map[string][]string
	missing  string // written for every 37th value
	header   string // name of the time column, or two joined by |
	key      string // long: names of key and value columns
	title    int    // title lines above the header
	unitRow  bool
	files    string // one, weather apart, per floor, workbook
	gaps     bool
	zones    int
	dead     string // this kind of the first zone shows 0 all the time
	liar     string // the columns of this kind show another: nothing may be mapped there
	owners   string // name of a room's file, with the number of the room
}

// what a kind is.
var kinds = map[string]struct {
	q    site.Quantity
	unit string
}{
	"temp": {site.AirTemp, "degC"}, "rh": {site.Humidity, "%"}, "co2": {site.CO2, "ppm"}, "win": {site.Window, ""}, "pos": {site.WindowOpening, "%"},
	"occ": {site.Presence, ""}, "ppl": {site.People, ""}, "sph": {site.SetpointHeat, "degC"}, "spc": {site.SetpointCool, "degC"},
	"hv": {site.HeatingValve, "%"}, "cv": {site.CoolingValve, "%"}, "dmp": {site.ZoneDamper, "%"}, "flow": {site.ZoneAirflow, "m3/h"},
	"state": {site.PlantStatus, ""}, "run": {site.PlantStatus, ""}, "sat": {site.SupplyAirTemp, "degC"}, "rat": {site.ReturnAirTemp, "degC"}, "mat": {site.MixedAirTemp, "degC"},
	"oad": {site.OutdoorAirDamper, "%"}, "sflow": {site.SupplyAirflow, "m3/h"}, "kw": {site.ElectricPower, "kW"},
	"oat": {site.OutdoorTemp, "degC"}, "oah": {site.OutdoorHumidity, "%"}, "ws": {site.WindSpeed, "m/s"}, "gust": {site.WindGust, "m/s"}, "wd": {site.WindDirection, "deg"},
	"rain": {site.Rain, "mm/h"}, "sun": {site.Solar, "W/m2"}, "dew": {site.OutdoorDewPoint, "degC"},
}

type m = map[string]string

// tuned are the habits that the word lists were worked out with.
func tuned() []habit {
	english := map[string][]string{"win": {"Closed", "Open"}, "occ": {"Unoccupied", "Occupied"}, "state": {"Off", "Fan", "Heat", "Cool"}, "run": {"Off", "On"}, "cmd": {"Off", "On"}}
	return []habit{
		{name: "English, abbreviations of the trade, wide", zones: 3,
			zone:    m{"temp": "B1.FL{f}.RM{f}{rr}.ZN-T", "rh": "B1.FL{f}.RM{f}{rr}.ZN-RH", "co2": "B1.FL{f}.RM{f}{rr}.ZN-CO2", "sph": "B1.FL{f}.RM{f}{rr}.HTG-SP", "spc": "B1.FL{f}.RM{f}{rr}.CLG-SP", "dmp": "B1.FL{f}.RM{f}{rr}.DMPR-POS", "hv": "B1.FL{f}.RM{f}{rr}.HTG-VLV", "occ": "B1.FL{f}.RM{f}{rr}.OCC"},
			unit:    m{"run": "B1.AHU{u}.SF-S", "sat": "B1.AHU{u}.SAT", "rat": "B1.AHU{u}.RAT", "mat": "B1.AHU{u}.MAT", "oad": "B1.AHU{u}.OAD"},
			weather: m{"oat": "B1.OAT", "oah": "B1.OA-RH"}, open: m{"cmd": "B1.AHU{u}.SF-C", "hws": "B1.HWS-T", "kwh": "B1.MTR.KWH"},
			layout: "wide", sep: ",", dates: "01/02/2006 03:04 PM", header: "Date Time", words: map[string][]string{"run": {"0", "1"}, "cmd": {"0", "1"}, "occ": {"0", "1"}}, degF: true},
		{name: "German, Windows-1252, decimal comma", zones: 4,
			zone:     m{"temp": "Raum {f}.{rr} Raumtemperatur", "rh": "Raum {f}.{rr} Raumfeuchte", "co2": "Raum {f}.{rr} CO2-Konzentration", "win": "Raum {f}.{rr} Fensterkontakt", "occ": "Raum {f}.{rr} Präsenz", "hv": "Raum {f}.{rr} Heizventil", "sph": "Raum {f}.{rr} Sollwert Heizen"},
			unit:     m{"state": "Lüftungsanlage {u} Betriebsmeldung", "sat": "Lüftungsanlage {u} Zulufttemperatur", "rat": "Lüftungsanlage {u} Ablufttemperatur"},
			weather:  m{"oat": "Außentemperatur", "oah": "Außenfeuchte", "ws": "Windgeschwindigkeit", "wd": "Windrichtung", "sun": "Globalstrahlung", "rain": "Niederschlag"},
			open:     m{"lux": "Raum {f}.{rr} Helligkeit", "hws": "Heizkreis Vorlauftemperatur"},
			unitForm: " [%s]", layout: "wide", sep: ";", comma: true, dates: "02.01.2006 15:04", charset: "windows-1252", header: "Datum/Zeit", missing: "---",
			words: map[string][]string{"win": {"geschlossen", "offen"}, "occ": {"frei", "belegt"}, "state": {"Aus", "Lüften", "Heizen", "Kühlen"}}},
		{name: "French, day first, UTF-8 with mark", zones: 3,
			zone:    m{"temp": "Bureau {f}{rr} - Température ambiante", "rh": "Bureau {f}{rr} - Humidité", "co2": "Bureau {f}{rr} - CO2", "win": "Bureau {f}{rr} - Contact fenêtre", "occ": "Bureau {f}{rr} - Présence", "sph": "Bureau {f}{rr} - Consigne chauffage"},
			unit:    m{"run": "CTA {u} - Marche", "sat": "CTA {u} - Température soufflage", "rat": "CTA {u} - Température reprise"},
			weather: m{"oat": "Température extérieure", "oah": "Humidité extérieure", "ws": "Vitesse du vent", "wd": "Direction du vent", "rain": "Pluie"},
			open:    m{"lux": "Bureau {f}{rr} - Luminosité"},
			layout:  "wide", sep: ";", comma: true, dates: "02/01/2006 15:04:05", charset: "bom", header: "Horodatage", title: 2,
			words: map[string][]string{"win": {"Fermé", "Ouvert"}, "occ": {"Absent", "Présent"}, "run": {"Arrêt", "Marche"}}},
		{name: "English, long with unit column, UTC", zones: 4,
			zone:   m{"temp": "Room {f}-{rr}/Temperature", "rh": "Room {f}-{rr}/Humidity", "co2": "Room {f}-{rr}/CO2", "win": "Room {f}-{rr}/Window 1", "ppl": "Room {f}-{rr}/People Count"},
			unit:   m{"state": "AHU-{u}/Mode", "sat": "AHU-{u}/Supply Air Temp", "kw": "AHU-{u}/Power"},
			open:   m{"door": "Room {f}-{rr}/Door"},
			layout: "long", sep: ",", dates: "2006-01-02T15:04:05Z", header: "timestamp", key: "point_name|value|unit", words: english},
		{name: "one file per point, headerless, Unix time", zones: 3,
			zone:    m{"temp": "zone{f}{rr}_temperature", "rh": "zone{f}{rr}_humidity", "co2": "zone{f}{rr}_co2", "win": "zone{f}{rr}_window", "occ": "zone{f}{rr}_motion"},
			unit:    m{"run": "rtu{u}_fan_status", "sat": "rtu{u}_discharge_air_temp"},
			weather: m{"oat": "outside_air_temp"}, layout: "per_point", sep: "\t", dates: "unix", words: map[string][]string{"win": {"0", "1"}, "occ": {"0", "1"}, "run": {"0", "1"}}},
		{name: "Italian, tab separated, UTF-16", zones: 2,
			zone:    m{"temp": "Stanza{f}{rr}_Temperatura", "rh": "Stanza{f}{rr}_Umidita", "co2": "Stanza{f}{rr}_CO2", "win": "Stanza{f}{rr}_Finestra", "occ": "Stanza{f}{rr}_Presenza"},
			unit:    m{"run": "UTA{u}_Stato", "sat": "UTA{u}_TempMandata", "rat": "UTA{u}_TempRipresa"},
			weather: m{"oat": "TempEsterna", "oah": "UmiditaEsterna"}, layout: "wide", sep: "\t", comma: true, dates: "02/01/2006 15.04", charset: "utf-16", header: "Data e ora",
			words: map[string][]string{"win": {"Chiusa", "Aperta"}, "occ": {"0", "1"}, "run": {"0", "1"}}},
		{name: "Spanish, date and time apart", zones: 2,
			zone:    m{"temp": "Sala {f}{rr} temperatura", "rh": "Sala {f}{rr} humedad relativa", "co2": "Sala {f}{rr} CO2", "win": "Sala {f}{rr} ventana", "ppl": "Sala {f}{rr} personas"},
			weather: m{"oat": "Temperatura exterior", "oah": "Humedad exterior", "ws": "Velocidad del viento", "rain": "Lluvia"}, layout: "wide", sep: ";", dates: "02/01/2006|15:04", header: "Fecha|Hora", unitForm: " (%s)",
			words: map[string][]string{"win": {"Cerrado", "Abierto"}}},
		{name: "Dutch, fraction humidity", zones: 2,
			zone:    m{"temp": "Kamer {f}.{rr} Ruimtetemperatuur", "rh": "Kamer {f}.{rr} Luchtvochtigheid", "co2": "Kamer {f}.{rr} CO2", "win": "Kamer {f}.{rr} Raamcontact", "occ": "Kamer {f}.{rr} Aanwezigheid"},
			unit:    m{"run": "LBK {u} Ventilator status", "sat": "LBK {u} Inblaastemperatuur"},
			weather: m{"oat": "Buitentemperatuur"}, layout: "wide", sep: ";", comma: true, dates: "02-01-2006 15:04", header: "Tijd", fraction: true,
			words: map[string][]string{"win": {"dicht", "open"}, "occ": {"0", "1"}, "run": {"uit", "aan"}}},
		{name: "workbook, a sheet per floor, row of units", zones: 4,
			zone:   m{"temp": "R{f}{rr} Temp", "rh": "R{f}{rr} RH", "co2": "R{f}{rr} CO2"},
			layout: "sheet", header: "Timestamp", unitRow: true, files: "per floor"},
		{name: "logger exports, one file per room", zones: 3,
			zone:   m{"temp": "Temperature (°C)", "rh": "Relative Humidity (%)", "co2": "Carbon Dioxide (ppm)"},
			layout: "wide", sep: ",", dates: "2006-01-02 15:04:05", header: "Date-Time", files: "per room", missing: "NaN"},
		{name: "addresses without meaning", zones: 2,
			open:   m{"temp": "AI_1{f}{rr}", "co2": "AI_2{f}{rr}", "win": "BI_3{f}{rr}", "rh": "AI_4{f}{rr}"},
			layout: "wide", sep: ",", dates: "2006-01-02 15:04", header: "time", words: map[string][]string{"win": {"0", "1"}}},
	}
}

// second are habits written down when the first were already read well; two
// rules were mended for them (words of one quantity are no part of a room's
// name, a letter at the end is a unit only beside a temperature or power).
func second() []habit {
	return []habit{
		{name: "site/floor/room path, long, semicolons", zones: 4,
			zone:    m{"temp": "HQ/Level {f}/Office {f}{rr}/Space Temp", "rh": "HQ/Level {f}/Office {f}{rr}/Space Humidity", "co2": "HQ/Level {f}/Office {f}{rr}/CO2 Level", "win": "HQ/Level {f}/Office {f}{rr}/Window Contact", "occ": "HQ/Level {f}/Office {f}{rr}/Occupancy Sensor", "cv": "HQ/Level {f}/Office {f}{rr}/Cooling Valve Position"},
			unit:    m{"state": "HQ/Roof/AHU-{u}/Operating Mode", "sat": "HQ/Roof/AHU-{u}/Supply Temp", "rat": "HQ/Roof/AHU-{u}/Return Temp"},
			weather: m{"oat": "HQ/Roof/Outdoor Air Temp", "oah": "HQ/Roof/Outdoor Air Humidity"},
			open:    m{"door": "HQ/Level {f}/Office {f}{rr}/Door Contact", "hws": "HQ/Plant/Hot Water Supply Temp", "press": "HQ/Roof/Barometric Pressure"},
			layout:  "long", sep: ";", dates: "02.01.2006 15:04:05", header: "Time", key: "Point|Value",
			words: map[string][]string{"win": {"Closed", "Open"}, "occ": {"Vacant", "Occupied"}, "state": {"Off", "Ventilation", "Heating", "Cooling"}}},
		{name: "camel case, ISO offsets, wide", zones: 3,
			zone:    m{"temp": "rm{f}{rr}RoomTemperature", "co2": "rm{f}{rr}Co2Concentration", "rh": "rm{f}{rr}RelHumidity", "win": "rm{f}{rr}WindowOpen", "dmp": "rm{f}{rr}VavDamperPosition", "flow": "rm{f}{rr}VavAirFlow"},
			unit:    m{"run": "ahu{u}SupplyFanStatus", "sat": "ahu{u}SupplyAirTemperature", "mat": "ahu{u}MixedAirTemperature", "sflow": "ahu{u}SupplyAirFlow"},
			weather: m{"oat": "weatherOutdoorTemperature", "ws": "weatherWindSpeed", "wd": "weatherWindDirection", "sun": "weatherSolarIrradiance"},
			open:    m{"speed": "ahu{u}SupplyFanSpeed", "lux": "rm{f}{rr}Illuminance"},
			layout:  "wide", sep: ",", dates: "2006-01-02T15:04:05@", header: "time", words: map[string][]string{"win": {"false", "true"}, "run": {"false", "true"}}},
		{name: "terse American, 12-hour clock, Fahrenheit", zones: 3,
			zone:    m{"temp": "VAV-{f}-{rr} RMT", "sph": "VAV-{f}-{rr} HTG STPT", "spc": "VAV-{f}-{rr} CLG STPT", "dmp": "VAV-{f}-{rr} DMPR", "co2": "VAV-{f}-{rr} CO2"},
			unit:    m{"run": "RTU-{u} SF STS", "sat": "RTU-{u} DAT", "rat": "RTU-{u} RAT"},
			weather: m{"oat": "OA TEMP", "oah": "OA RH"}, open: m{"cmd": "RTU-{u} SF CMD"},
			layout: "wide", sep: ",", dates: "1/2/2006 3:04:05 PM", header: "Timestamp", degF: true, words: map[string][]string{"run": {"OFF", "ON"}, "cmd": {"OFF", "ON"}}},
		{name: "German abbreviations with floors", zones: 4,
			zone:    m{"temp": "{f}.OG_R{rr}_RT_Ist", "rh": "{f}.OG_R{rr}_rF", "co2": "{f}.OG_R{rr}_CO2", "win": "{f}.OG_R{rr}_FK", "hv": "{f}.OG_R{rr}_Ventil_Heizen"},
			unit:    m{"run": "RLT{u}_BM", "sat": "RLT{u}_ZUL_Temp", "rat": "RLT{u}_ABL_Temp"},
			weather: m{"oat": "AUL_Temp", "oah": "AUL_Feuchte"}, layout: "wide", sep: ";", comma: true, dates: "02.01.2006 15:04:05", header: "Datum",
			words: map[string][]string{"win": {"zu", "auf"}, "run": {"0", "1"}}, unitForm: " %s"},
		{name: "Umlauts spelled out, compound words", zones: 2,
			zone:    m{"temp": "Buero Nord {rr} Lufttemperatur", "rh": "Buero Nord {rr} Luftfeuchtigkeit", "co2": "Buero Nord {rr} Kohlendioxid", "win": "Buero Nord {rr} Fenster Zustand", "ppl": "Buero Nord {rr} Personenzahl"},
			weather: m{"oat": "Wetterstation Aussentemperatur", "wd": "Wetterstation Windrichtung", "ws": "Wetterstation Windgeschwindigkeit", "rain": "Wetterstation Regen"},
			layout:  "wide", sep: "\t", comma: true, dates: "2006-01-02 15:04", header: "Zeitstempel", words: map[string][]string{"win": {"Zu", "Offen"}}, gaps: true, missing: "NaN"},
		{name: "named rooms, one file per point with header", zones: 2,
			zone:    m{"temp": "Library {r} - Air Temperature", "rh": "Library {r} - Relative Humidity", "co2": "Library {r} - Carbon Dioxide", "win": "Library {r} - Window State"},
			weather: m{"oat": "Roof - Outside Temperature", "sun": "Roof - Global Radiation"}, layout: "per_point", sep: ",", dates: "2006-01-02 15:04:05", header: "Timestamp", key: "Value",
			words: map[string][]string{"win": {"closed", "open"}}},
		{name: "French with floors, comma, spaces", zones: 4,
			zone:    m{"temp": "Etage {f} Salle {rr} Temp ambiante", "rh": "Etage {f} Salle {rr} Hygrométrie", "co2": "Etage {f} Salle {rr} Taux CO2", "win": "Etage {f} Salle {rr} Fenêtre", "ppl": "Etage {f} Salle {rr} Nb personnes"},
			weather: m{"oat": "Temp extérieure", "sun": "Rayonnement global", "gust": "Rafale de vent"}, open: m{"door": "Etage {f} Salle {rr} Porte"},
			layout: "wide", sep: ";", comma: true, dates: "02/01/06 15:04", header: "Date et heure", charset: "windows-1252", words: map[string][]string{"win": {"Fermée", "Ouverte"}, "door": {"Fermée", "Ouverte"}}},
		{name: "weather in its own file with bare names", zones: 3,
			zone:    m{"temp": "Zone {f}{rr} Temp", "co2": "Zone {f}{rr} CO2", "pos": "Zone {f}{rr} Window Position", "occ": "Zone {f}{rr} Occ"},
			weather: m{"oat": "Temp", "oah": "Humidity", "ws": "Wind Speed", "wd": "Wind Dir", "rain": "Precip", "sun": "Solar", "dew": "Dew Point"}, files: "weather apart",
			layout: "wide", sep: ",", dates: "01/02/2006 15:04", header: "Date Time", words: map[string][]string{"occ": {"0", "1"}}},
		{name: "numbers for rooms, letters for quantities", zones: 3,
			zone:   m{"temp": "{f}{rr}_T", "rh": "{f}{rr}_H", "co2": "{f}{rr}_C"},
			layout: "wide", sep: ",", dates: "2006-01-02 15:04:05", header: "datetime"},
		{name: "Swiss plant keys", zones: 3,
			open:   m{"temp": "H{f}4'B{rr}'MT01", "co2": "H{f}4'B{rr}'MQ02", "win": "H{f}4'B{rr}'ME03"},
			layout: "wide", sep: ";", dates: "02.01.2006 15:04", header: "Zeit", words: map[string][]string{"win": {"0", "1"}}},
	}
}

// third are habits for which further rules were mended: words all names begin
// with, unknown words grown together with known ones, titles in workbooks; and
// two languages were added.
func third() []habit {
	return []habit{
		{name: "long, room and quantity in columns of their own", zones: 4,
			zone:    m{"temp": "Room {f}{rr}|Temperature", "rh": "Room {f}{rr}|Humidity", "co2": "Room {f}{rr}|CO2", "win": "Room {f}{rr}|Window", "ppl": "Room {f}{rr}|Occupant count"},
			weather: m{"oat": "Outside|Temperature", "oah": "Outside|Humidity"},
			layout:  "long", sep: ",", dates: "2006-01-02 15:04:05", header: "Time", key: "Location,Variable|Reading", words: map[string][]string{"win": {"closed", "open"}}},
		{name: "Scandinavian words", zones: 3,
			zone:    m{"temp": "Rum {f}{rr} Rumstemperatur", "rh": "Rum {f}{rr} Luftfuktighet", "co2": "Rum {f}{rr} CO2", "win": "Rum {f}{rr} Fönster", "occ": "Rum {f}{rr} Närvaro"},
			unit:    m{"run": "LB0{u} Tilluftsfläkt driftindikering", "sat": "LB0{u} Tilluftstemperatur"},
			weather: m{"oat": "Utetemperatur"}, layout: "wide", sep: ";", comma: true, dates: "2006-01-02 15:04", header: "Datum Tid", words: map[string][]string{"win": {"0", "1"}, "occ": {"0", "1"}, "run": {"0", "1"}}},
		{name: "controller points with tags behind", zones: 3,
			zone:    m{"temp": "NAE1/FEC-{f}{rr}/ZN-T.Present Value", "co2": "NAE1/FEC-{f}{rr}/ZN-CO2.Present Value", "sph": "NAE1/FEC-{f}{rr}/HTGOCC-SP.Present Value", "dmp": "NAE1/FEC-{f}{rr}/DPR-O.Present Value"},
			unit:    m{"run": "NAE1/AHU-{u}/SF-S.Present Value", "sat": "NAE1/AHU-{u}/DA-T.Present Value", "mat": "NAE1/AHU-{u}/MA-T.Present Value", "oad": "NAE1/AHU-{u}/OAD-O.Present Value"},
			weather: m{"oat": "NAE1/OA-T.Present Value", "oah": "NAE1/OA-H.Present Value"}, open: m{"hws": "NAE1/HWS-T.Present Value", "kwh": "NAE1/ELEC-KWH.Present Value"},
			layout: "wide", sep: ",", dates: "1/2/2006 15:04", header: "Date", degF: true, words: map[string][]string{"run": {"Off", "On"}}},
		{name: "wrong values under right names", zones: 3,
			zone: m{"temp": "Room {f}{rr} Temperature", "rh": "Room {f}{rr} Humidity", "co2": "Room {f}{rr} CO2", "win": "Room {f}{rr} Window"}, dead: "co2", liar: "rh",
			layout: "wide", sep: ",", dates: "2006-01-02 15:04", header: "Time", words: map[string][]string{"win": {"Closed", "Open"}}},
		{name: "workbook with titles", zones: 4, zone: m{"temp": "Bürozone {f}.{rr} Temp.", "rh": "Bürozone {f}.{rr} rel. Feuchte", "co2": "Bürozone {f}.{rr} CO2-Wert"},
			layout: "sheet", header: "Zeitpunkt", title: 2},
		{name: "wings and orientations, no numbers", zones: 2,
			zone:    m{"temp": "{wing} wing open plan temp", "rh": "{wing} wing open plan rh", "co2": "{wing} wing open plan co2", "win": "{wing} wing open plan windows"},
			weather: m{"oat": "external temp", "ws": "wind spd", "wd": "wind dirn"}, layout: "wide", sep: ",", dates: "02/01/2006 15:04", header: "date", words: map[string][]string{"win": {"Shut", "Open"}}},
		{name: "one file per room, several values, gaps, K", zones: 3,
			zone: m{"temp": "T_air", "rh": "RH", "co2": "CO2", "win": "win_open"}, layout: "wide", sep: ";", dates: "2006-01-02 15:04", header: "t", files: "per room", owners: "R%02d", gaps: true, missing: "-999", words: map[string][]string{"win": {"0", "1"}}},
		{name: "Portuguese, a language not in the lists", zones: 2,
			zone:   m{"temp": "Gabinete {f}{rr} temperatura do ar", "rh": "Gabinete {f}{rr} humidade relativa", "co2": "Gabinete {f}{rr} dióxido de carbono", "win": "Gabinete {f}{rr} janela", "occ": "Gabinete {f}{rr} ocupação"},
			layout: "wide", sep: ";", comma: true, dates: "02/01/2006 15:04", header: "Data", words: map[string][]string{"win": {"fechada", "aberta"}, "occ": {"0", "1"}}},
		{name: "meters and plant only", zones: 1,
			unit:    m{"state": "Rooftop Unit {u} Status", "sat": "Rooftop Unit {u} Leaving Air Temperature", "kw": "Rooftop Unit {u} Demand kW", "sflow": "Rooftop Unit {u} Supply Airflow CFM"},
			weather: m{"oat": "Ambient Temperature"}, open: m{"kwh": "Main Meter kWh", "speed": "Rooftop Unit {u} VFD Speed", "hws": "Boiler Leaving Water Temp"},
			layout: "long", sep: ",", dates: "2006-01-02 15:04:05", header: "ts", key: "tag|val", words: map[string][]string{"state": {"Idle", "Fan", "Heating", "Cooling"}}},
	}
}
