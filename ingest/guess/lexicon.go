package guess

import "strings"

// A tag is what a word in a column's name speaks of.
type tag string

// lexicon holds the words met in the names of points, folded, by what they
// speak of: English, German, French, Italian, Spanish, Dutch, and the
// abbreviations of the trade. Words after a bar are abbreviations, those after
// a second bar short or ambiguous ones. Common practice.
func lexiconText() map[tag]string {
	return map[tag]string{
		"temp":     "temperature temperatur temperatura temperatuur temperaturen | temp tmp tempr tmpr | t te tt",
		"hum":      "humidity humidite humedad umidita feuchte feuchtigkeit luftfeuchte luftfeuchtigkeit vochtigheid luftfuktighet luftfugtighed fuktighet humidade luchtvochtigheid vocht hygrometrie | rh hum humid hmd rhum | rf hr ur rv hu",
		"rel":      "relative relativ rel relatieve relativa",
		"co2":      "co2 kohlendioxid carbondioxide co2konzentration |",
		"voc":      "voc tvoc iaq luftqualitat |",
		"pm25":     "pm25 feinstaub finedust |",
		"dustelse": "pm10 pm1 pm4 |",
		"lux":      "brightness illuminance helligkeit beleuchtung beleuchtungsstarke luminosite illuminazione light lighting licht lux intensity luminance lumiere eclairement | lx |",
		"pressure": "pressure druck pression presion pressione luchtdruck luftdruck differenzdruck barometer visibility visib sicht | press baro dp pa hpa |",
		"noise":    "noise sound schall larm bruit geluid decibel |",
		"voltage":  "battery batterie batt voltage spannung rssi signal snr uptime frequency frequenz current strom runtime betriebsstunden | volt hz |",
		"window":   "fonster vindue vindu janela window windows fenster fensters fenetre fenetres finestra finestre ventana ventanas raam ramen fensterkontakt oberlicht dachfenster skylight rooflight lucarne casement sash fensterflugel | win wdw wndw wdo fen fnst wincontact fk | ",
		"contact":  "contact kontakt contatto contacto reed |",
		"door":     "door doors tur ture porte porta puerta deur tuer |",
		"position": "position opening offnung stellung ouverture apertura posizione posicion stand openness offnungsgrad hub percent | pos opn |",
		"open":     "open opened offen auf ouvert aperto abierto |",
		"valve":    "valve ventil vanne valvola valvula klep stellventil ventilstellung | vlv valv vlve vv | v",
		"damper":   "damper klappe luftklappe volet registre serranda compuerta volumenstromregler luchtklep | dmpr dpr dmp dmper klp |",
		"vavbox":   "vav cav vavbox |",
		"fan":      "flakt tilluftsflakt fan fans ventilator ventilateur ventilatore ventilador lufter umluft | vent |",
		"supfan":   "zuluftventilator supplyfan | sf zv |",
		"retfan":   "abluftventilator exhaustfan returnfan | ef av | rf",
		"ceiling":  "ceiling deckenventilator plafond techo soffitto plafondventilator |",
		"flow":     "flow airflow volumenstrom luftmenge durchfluss debit caudal portata debiet luftvolumenstrom volume luchtdebiet | afl flw cfm cmh vol |",
		"status":   "status state zustand etat estado stato betrieb betriebsmeldung running run marche meldung ruckmeldung feedback toestand staat laufmeldung betriebszustand | sts stat stts fb fbk run bm rm ss | s st",
		"cmd":      "command befehl commande comando ansteuerung stellsignal control ctrl request anforderung demand sturing stellgrosse | cmd ctl req dmd | c",
		"setpoint": "setpoint setpunkt sollwert soll consigne consigna setpunt setpoints solltemperatur gewenst | sp stpt setpt stp spt setp csp hsp sw | ",
		"presence": "narvaro tilstedevaerelse presenca ocupacao presence prasenz praesenz anwesenheit occupancy occupied belegt occupation pir motion bewegung bewegungsmelder prasenzmelder presenza presencia bezetting aanwezigheid prasenzsensor ocupacion | occ occu pres mot praes |",
		"people":   "personer pessoas people persons person personen personenzahl personnes headcount occupants personas persone personenanzahl besucher people_count | pers ppl npers |",
		"count":    "count counter counts zahler anzahl nombre numero aantal nb | cnt |",
		"wind":     "vind wind viento vento windgeschwindigkeit windspeed winds | ws wspd wsp wnd |",
		"speed":    "speed geschwindigkeit vitesse velocidad velocita snelheid velocity | spd vel |",
		"dir":      "direction richtung direccion direzione windrichtung winddirection | wd wdir wdr dir |",
		"gust":     "gust gusts boe boen bo rafale rafales rafaga raffica windstoss windboe | gst wg |",
		"rain":     "rain rainfall precipitation niederschlag regen regenmenge pluie precipitations lluvia pioggia neerslag | precip prcp rr | ",
		"solar":    "solar irradiance irradiation globalstrahlung strahlung einstrahlung rayonnement radiacion radiazione straling pyranometer insolation radiation sonne soleil sonnenstrahlung ensoleillement | ghi irr rad | ",
		"global":   "global globale globaal |",
		"dew":      "dewpoint dew taupunkt rosee rocio rugiada dauwpunt taupunkttemperatur | dewp dewpt tdew dewpnt | tdp tp",
		"power":    "power leistung puissance potencia potenza vermogen wirkleistung stromaufnahme | kw pwr elec | ",
		"energy":   "energy energie kwh energia consumption verbrauch wh zahlerstand verbruik consommation mwh |",
		"globe":    "globe globus schwarzkugel globo globetemp |",
		"oper":     "operative operativ operativa empfunden |",
		"surface":  "surface oberflache oberflachen wall wand mur parete pared slab oberflachentemperatur muur tabs | surf wandtemp |",
		"tstat":    "thermostat raumbediengerat raumgerat raumthermostat termostato thermostatic | tstat rbg |",
		"water":    "water wasser eau acqua agua vorlauf rucklauf kessel boiler chiller pump pumpe pompe heizkreis heizkreises warmwasser kaltwasser brunnen warmepumpe condenser glycol | hw chw hws hwr chws chwr hwst chwst vl rl dhw ww kw_ | ",
		"room":     "rum rom gabinete room rooms zone zones raum raume zimmer office buro bureau salle chambre piece habitacion sala stanza camera kamer ruimte space indoor inside innen interieur interior interno binnen ambiance ambiante ambiant raumluft lokaal local meeting besprechung | rm zn zone rmt znt raumtemp znt zi int | in r z ri",
		"out":      "ute utomhus utetemperatur udeluft uteluft utendors outdoor outside outdoors exterior exterieur exterieure exterieurs external externe esterno esterna aussen aussenluft buiten outsideair weather wetter wetterstation meteo ambient umgebung außen buitenlucht outair | oa oat ext outd aul at_ ta_ oah oarh odt | out au amb os od",
		"supply":   "tilluft tilluftstemperatur indblaesning insuflacao supply discharge zuluft soufflage impulsion mandata toevoer inblaas leaving zulufttemp | sup sa sat dis dat disch zul sat zu zut sply suppl lat zlt | da",
		"return":   "franluft udsugning avtrekk return extract abluft reprise ritorno ripresa retorno afvoer extraction umluft ablufttemp retour | ret rtn ra rat abl extr retn ablt eat | ab",
		"exhaust":  "exhaust fortluft rejet espulsione expulsion | exh fol fort | ea",
		"mixed":    "mixed mixing mischluft melange miscela mezcla mixedair | mix mat mxd mal | ma",
		"heat":     "heating heat heiz heizung heizen chauffage calefaccion riscaldamento verwarming reheat heizventil heizer heater radiator warme chaud batteriechaude hot | htg ht htng hcv rht hzg heizreg nhz | hz hv",
		"cool":     "cooling cool kuhl kuhlung kuhlen refroidissement froid refrigeracion raffreddamento koeling koel kuhlventil cold raffrescamento kalte | clg clng ccv klg | kv",
		"mode":     "mode modus betriebsart regime modo operatingmode betriebsmodus | mod |",
		"natural":  "natural naturelle naturlich freecooling naturale | natvent nv |",
		"override": "override manual handbetrieb manuell manuel forcage ubersteuerung handeingriff forced derogation | ovr ovrd man hand |",
		"enable":   "enable enabled freigabe release released autorisation permission permit lock locked interlock verriegelung sperre gesperrt unlock abilitazione liberation vrijgave | ena enbl frg intlk en |",
		"unit":     "ahu rtu fcu hru hrv erv mvhr rlt cta uta vrf vrv split klimagerat luftungsgerat luftungsanlage doas mau crac ventilo ventiloconvecteur fancoil umluftkuhlgerat teilklima klimaanlage airhandler lbk acu aircon rooftop unitheater rltanlage raumklimagerat airhandlingunit centrale | ahu rlt lta ltg lg fcu rtu vc ac ugl | ",
		"floor":    "floor level etage geschoss obergeschoss stock stockwerk piso planta piano niveau verdieping story storey geschosse untergeschoss erdgeschoss | lvl flr og ug eg dg fl rdc etg niv ebene | f l g e lv",
		"air":      "air luft aria aire lucht lft |",
		"noiseword": "sensor sensors value values wert werte valeur valore valor trend trends log logs logger loggers data daten point points punkt avg average mean mittel mittelwert moyenne " +
			"actual ist istwert measured gemessen history virtual analog analogue input eingang export csv raw properties records record reading readings messwert messung fuhler capteur sonde sonda sensore meter measurement measurements bms gebaude " +
			"bool boolean present pv level_ conc concentration konzentration ppm_ quality quality_ archive archiv verlauf daily hourly monthly file page report table tabelle tag kanal channel datenpunkt datapoint object objekt variable name nr no num id key series signal_ detector melder drive antrieb item | ai ao bi bo di do av bv msv hist val mw dp_ ist sen sens mes | x n",
		"calendar": "year month day hour minute second jahr monat stunde annee mois jour heure anno mese giorno ora hora dia ano mes weekday wochentag dayid holiday feiertag week woche date datum time zeit timestamp uhrzeit dow doy hh mm_ yyyy zeitstempel horodatage horodate fecha data_ dayofweek |",
	}
}

// entry is what one word may mean: its tags and how plain it is.
type entry struct {
	tags     []tag
	strength float64
}

// strengths of full words, abbreviations, and short ones.
const (
	fullWord     = 1.0
	abbreviation = 0.85
	shortWord    = 0.6
)

var lexicon = func() map[string]entry {
	m := map[string]entry{}
	add := func(w string, t tag, s float64) {
		e := m[w]
		for _, have := range e.tags {
			if have == t {
				return
			}
		}
		e.tags = append(e.tags, t)
		e.strength = max(e.strength, s)
		m[w] = e
	}
	text := lexiconText()
	for _, t := range tagOrder() {
		for i, part := range strings.Split(text[t], "|") {
			for _, w := range strings.Fields(part) {
				add(w, t, [...]float64{fullWord, abbreviation, shortWord}[i])
			}
		}
	}
	// Words that say two things at once.
	for w, tags := range map[string][]tag{
		"sat": {"supply", "temp"}, "dat": {"supply", "temp"}, "rat": {"return", "temp"}, "mat": {"mixed", "temp"}, "oat": {"out", "temp"}, "odt": {"out", "temp"},
		"lat": {"supply", "temp"}, "eat": {"return", "temp"}, "zut": {"supply", "temp"}, "zlt": {"supply", "temp"}, "ablt": {"return", "temp"},
		"oad": {"out", "damper"}, "mad": {"mixed", "damper"}, "rmt": {"room", "temp"}, "znt": {"room", "temp"}, "oah": {"out", "hum"}, "oarh": {"out", "hum"},
		"csp": {"setpoint", "cool"}, "hsp": {"setpoint", "heat"}, "hcv": {"heat", "valve"}, "ccv": {"cool", "valve"}, "hv": {"heat", "valve"}, "kv": {"cool", "valve"},
		"ws": {"wind", "speed"}, "wspd": {"wind", "speed"}, "wsp": {"wind", "speed"}, "windspeed": {"wind", "speed"}, "windgeschwindigkeit": {"wind", "speed"},
		"wd": {"wind", "dir"}, "wdir": {"wind", "dir"}, "wdr": {"wind", "dir"}, "windrichtung": {"wind", "dir"}, "winddirection": {"wind", "dir"}, "wg": {"wind", "gust"},
		"tdew": {"dew", "temp"}, "dewp": {"dew", "temp"}, "taupunkttemperatur": {"dew", "temp"}, "tdp": {"dew", "temp"},
		"sf": {"supfan", "fan", "supply"}, "zv": {"supfan", "fan", "supply"}, "ef": {"retfan", "fan"}, "supplyfan": {"supfan", "fan"},
		"zuluftventilator": {"supfan", "fan", "supply"}, "abluftventilator": {"retfan", "fan"}, "exhaustfan": {"retfan", "fan"}, "returnfan": {"retfan", "fan"},
		"fk": {"window", "contact"}, "fensterkontakt": {"window", "contact"}, "wincontact": {"window", "contact"},
		"deckenventilator": {"ceiling", "fan"}, "plafondventilator": {"ceiling", "fan"},
		"solltemperatur": {"setpoint", "temp"}, "ghi": {"solar", "global"}, "globalstrahlung": {"solar", "global"},
		"heizventil": {"heat", "valve"}, "kuhlventil": {"cool", "valve"}, "raumtemp": {"room", "temp"}, "globetemp": {"globe", "temp"},
		"kwh": {"energy"}, "mwh": {"energy"}, "umluft": {"fan"}, "utetemperatur": {"out", "temp"}, "tilluftstemperatur": {"supply", "temp"}, "tilluftsflakt": {"supfan", "fan", "supply"}, "vent": {"fan", "wind"}, "rf": {"hum", "retfan"}, "av": {"noiseword"}, "tp": {"dew"}, "ventilo": {"unit"},
	} {
		e := m[w]
		e.tags = tags
		if e.strength == 0 {
			e.strength = abbreviation
		}
		m[w] = e
	}
	return m
}()

// tagOrder fixes the order in which words with several tags list them.
func tagOrder() []tag {
	return []tag{"temp", "hum", "rel", "co2", "voc", "pm25", "dustelse", "lux", "pressure", "noise", "voltage", "window", "contact", "door", "position", "open", "valve", "damper", "vavbox",
		"supfan", "retfan", "fan", "ceiling", "flow", "setpoint", "status", "cmd", "people", "presence", "count", "wind", "speed", "dir", "gust", "rain", "solar", "global", "dew", "energy", "power",
		"globe", "oper", "surface", "tstat", "water", "unit", "room", "out", "supply", "return", "exhaust", "mixed", "heat", "cool", "mode", "natural", "override", "enable", "floor", "air", "noiseword", "calendar"}
}
