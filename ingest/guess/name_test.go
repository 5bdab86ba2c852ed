package guess

import (
	"strings"
	"testing"

	"go.yaml.in/yaml/v3"
)

// TestTokens: names are cut where people cut them.
func TestTokens(t *testing.T) {
	for name, want := range map[string]string{
		"F1_R01_TMP [°C]":         "f 1 r 01 tmp °c",
		"RoomTemperature":         "room temperature",
		"co2__ppm":                "co2 ppm",
		"Raumtemperatur":          "raum temperatur",
		"Büro_12.03 Zuluft":       "buro 12 03 zuluft",
		"PM2.5":                   "pm25",
		"ZN-T":                    "znt",
		"SF-S":                    "sf s",
		"Aussenlufttemperatur":    "aussenluft temperatur",
		"Windgeschwindigkeit m/s": "windgeschwindigkeit m s",
		"Kuechentemperatur":       "kuchen temperatur",
		"AHU-1 kW":                "ahu 1 kw",
		"Température extérieure":  "temperature exterieure",
		"CO2-meter-SCD4x":         "co2 meter scd 4 x",
	} {
		var got []string
		for _, k := range tokens(name) {
			got = append(got, k.fold)
		}
		if strings.Join(got, " ") != want {
			t.Errorf("%q is cut into %q, want %q", name, strings.Join(got, " "), want)
		}
	}
}

// TestPlaces: names that people read as one room have one key.
func TestPlaces(t *testing.T) {
	key := func(name string) string {
		ts := tokens(name)
		unitOf(name, ts)
		p := placeIn(name, ts, false)
		return p.key()
	}
	for _, same := range [][]string{
		{"F1_R03_TMP [°C]", "F1-R03-W2", "PIR L1.03", "1.03 CO2", "Level 1 Room 3 Temp", "1.OG Raum 03 Feuchte", "Etage 1 Salle 03 Présence", "R+1 Salle 03 Fenêtre"},
		{"Room 204 Temp", "RM204.ZN-T", "R204 CO2", "204_T [°C]", "Zimmer 204 Fenster 2"},
		{"Kitchen_Temperature", "Kitchen CO2", "kitchen window 1"},
	} {
		for _, n := range same[1:] {
			if key(n) != key(same[0]) {
				t.Errorf("%q gives place %q, %q gives %q", n, key(n), same[0], key(same[0]))
			}
		}
	}
	if key("Room 204 Temp") == key("Room 205 Temp") || key("F1_R03 T") == key("F2_R03 T") {
		t.Error("different rooms have one place")
	}
}

func FuzzNames(f *testing.F) {
	for _, s := range []string{"F1_R01_TMP [°C]", "AHU-1 SF-S", "Raum 1.02 Fensterkontakt", "\x00\xff", "a\u202eb", "=1+1", "R+1", "[", "°", "co2 ['ppm']"} {
		f.Add(s, s)
	}
	f.Fuzz(func(t *testing.T, around, name string) {
		n := readName(around, name)
		for _, tr := range []*Track{{}, {number: 5, sample: []float64{1, 2, 3, 4, 5}, distinct: map[float64]int{1: 1}}, {words: map[string]int{name: 3}, order: []string{name}}} {
			tr.names = n
			for _, c := range n.candidates(tr) {
				if c.score < 0 || c.score > 1 {
					t.Fatalf("%q: %v", name, c)
				}
				tr.fits(c.q, "")
			}
		}
		placeIn(name, n.tokens, len(around)%2 == 0)
		// Whatever the name, the proposal stays valid YAML that says the same.
		var back struct{ Name string }
		text := "name: " + quote(name) + " # " + comment(around) + "\n"
		if err := yaml.Unmarshal([]byte(text), &back); err != nil {
			t.Fatalf("%q: %v", text, err)
		}
		if want := string([]rune(name)); back.Name != want { // invalid bytes become the replacement character
			t.Fatalf("%q comes back as %q", name, back.Name)
		}
	})
}
