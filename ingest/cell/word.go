package cell

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/unicode/norm"

	"sashlog/configs/site"
)

// vocabulary holds the words for a switch that are known without a mapping,
// folded: open, on, present and the like are 1, their opposites 0. English,
// German, French, Italian, Spanish, Dutch. Common practice.
var vocabulary = words(
	1, "open opened opening ouvert ouverte offen auf geoffnet aperto aperta abierto abierta geopend",
	1, "on ein an true yes ja oui si vrai wahr vero active aktiv actif attivo enabled enable marche acceso encendido aan ok-open",
	1, "run running betrieb en-marche in-betrieb started start",
	1, "occupied present presence presente belegt besetzt anwesend occupe occupato ocupado motion detected bezet",
	1, "manual hand manuell manuel manuale override alarm",
	0, "closed close shut ferme fermee zu geschlossen chiuso chiusa cerrado cerrada dicht gesloten",
	0, "off aus false no nein non faux falsch falso inactive inaktiv inactif inattivo disabled disable arret spento apagado uit",
	0, "stop stopped stillstand a-l-arret gestoppt standby idle",
	0, "unoccupied absent vacant frei leer unbelegt abwesend inoccupe libre libero vrij clear none-detected",
	0, "normal",
)

// plantWords are the words for the state of a plant unit known without a
// mapping. "Auto" is not among them: it says who commands the unit, not
// whether it runs.
var plantWords = states(
	site.PlantOff, "off aus arret stop stopped standby idle false no nein non spento apagado uit inactive gestoppt stillstand closed zu ferme",
	site.PlantOn, "on ein an run running true yes ja oui marche acceso encendido aan active betrieb in-betrieb en-marche",
	site.PlantVent, "vent venting ventilation ventilate ventilating fan fan-only luften luftung ventilazione ventilacion purge free-cooling",
	site.PlantHeat, "heat heating heizen heizung heizbetrieb chauffage chauffer riscaldamento calefaccion verwarmen",
	site.PlantCool, "cool cooling kuhlen kuhlung kuhlbetrieb refroidissement climatisation raffrescamento raffreddamento refrigeracion koelen",
)

func words(pairs ...any) map[string]float64 {
	m := map[string]float64{}
	for i := 0; i < len(pairs); i += 2 {
		for _, w := range strings.Fields(pairs[i+1].(string)) {
			m[strings.ReplaceAll(w, "-", " ")] = float64(pairs[i].(int))
		}
	}
	return m
}

func states(pairs ...any) map[string]float64 {
	m := map[string]float64{}
	for i := 0; i < len(pairs); i += 2 {
		for _, w := range strings.Fields(pairs[i+1].(string)) {
			m[strings.ReplaceAll(w, "-", " ")] = float64(pairs[i].(site.PlantState))
		}
	}
	return m
}

// missing holds the markers of a missing value, folded.
var missing = map[string]bool{
	"nan": true, "na": true, "n/a": true, "#n/a": true, "#na": true, "null": true, "nil": true, "none": true,
	"#value!": true, "#ref!": true, "#div/0!": true, "#num!": true, "#name?": true, "#null!": true,
	"bad": true, "---": true, "--": true, "-": true, "\u2013": true, "\u2014": true, "----": true, "?": true, "...": true, "*": true,
	"no data": true, "nodata": true, "no value": true, "missing": true, "invalid": true, "unavailable": true,
	"unknown": true, "offline": true, "bad input": true, "i/o timeout": true, "keine daten": true, "ungultig": true,
	"pas de donnees": true, "nd": true, "n.a.": true, "k.a.": true, "undefined": true, "error": true,
}

// Fold brings a word to the form words are compared in: without spaces
// around, in lower case, without accents, inner spaces, underscores and
// hyphens as one space.
func Fold(s string) string {
	s = strings.TrimFunc(s, func(r rune) bool { return unicode.IsSpace(r) || r == '\u00a0' || r == '\ufeff' })
	plain := true
	for i := 0; i < len(s); i++ {
		if c := s[i]; c >= 0x80 || c >= 'A' && c <= 'Z' || c == '_' || c == ' ' || c == '\'' {
			plain = false
			break
		}
	}
	if plain {
		return s
	}
	var b strings.Builder
	space := false
	for _, r := range norm.NFD.String(strings.ToLower(s)) {
		switch {
		case unicode.Is(unicode.Mn, r):
			continue
		case r == '_' || unicode.IsSpace(r) || r == '\'' || r == '\u2019':
			space = b.Len() > 0
			continue
		case r == '\u00df':
			r = 's'
			b.WriteByte('s')
		}
		if space {
			b.WriteByte(' ')
			space = false
		}
		b.WriteRune(r)
	}
	return b.String()
}

// Text decodes the bytes of a cell for messages and word lists: as they are
// when valid UTF-8, else from Windows-1252.
func Text(b []byte, latin bool) string {
	if !latin && utf8.Valid(b) {
		return string(b)
	}
	out, err := charmap.Windows1252.NewDecoder().Bytes(b)
	if err != nil {
		return strings.ToValidUTF8(string(b), "\ufffd")
	}
	return string(out)
}
