package criteria

import (
	"bytes"
	"crypto/sha256"
	"embed"
	"encoding/hex"
	"fmt"
	"maps"
	"path"
	"sort"
	"strings"

	"go.yaml.in/yaml/v3"
)

// Default is the preset in force when a site file names none.
const Default = "en16798-1-ii"

// SiteFile is the standing of a number the site file sets itself.
const SiteFile = "site file"

//go:embed presets/*.yaml
var presets embed.FS

// presetFile is the form of an embedded preset: the numbers it sets itself, on
// top of those of the preset it is based on.
type presetFile struct {
	BasedOn string      `yaml:"based_on"`
	Numbers []presetRow `yaml:"numbers"`
}

type presetRow struct {
	Key      string    `yaml:"key"`
	Value    yaml.Node `yaml:"value"`
	Unit     string    `yaml:"unit"`
	Words    string    `yaml:"words"`
	Source   string    `yaml:"source"`
	Standing string    `yaml:"standing"`
}

// Presets lists the names of the presets in alphabetical order.
func Presets() []string {
	list, err := presets.ReadDir("presets")
	if err != nil {
		return nil
	}
	var out []string
	for _, e := range list {
		out = append(out, strings.TrimSuffix(e.Name(), ".yaml"))
	}
	sort.Strings(out)
	return out
}

// Preset returns the numbers of a named preset with a note on each. The maps
// of the result belong to the caller. An empty name means Default.
func Preset(name string) (Settings, error) {
	if name == "" {
		name = Default
	}
	s := Settings{Notes: map[string]Note{}}
	if err := s.load(name, 0); err != nil {
		return Settings{}, err
	}
	s.Preset = name
	for i := range fields {
		if _, ok := s.Notes[fields[i].key]; !ok {
			return Settings{}, fmt.Errorf("preset %s does not set %s", name, fields[i].key)
		}
	}
	return s, nil
}

func (s *Settings) load(name string, depth int) error {
	raw, err := presets.ReadFile(path.Join("presets", name+".yaml"))
	if err != nil || depth > 3 {
		return fmt.Errorf("unknown preset %q: known are %s", name, strings.Join(Presets(), ", "))
	}
	var p presetFile
	dec := yaml.NewDecoder(bytes.NewReader(raw))
	dec.KnownFields(true)
	if err := dec.Decode(&p); err != nil {
		return fmt.Errorf("preset %s: %w", name, err)
	}
	if p.BasedOn != "" {
		if err := s.load(p.BasedOn, depth+1); err != nil {
			return err
		}
	}
	for _, r := range p.Numbers {
		f := fieldOf(r.Key)
		if f == nil {
			return fmt.Errorf("preset %s: unknown key %s", name, r.Key)
		}
		if err := f.put(s, r.Value.Value); err != nil {
			return fmt.Errorf("preset %s: %s %q %w", name, r.Key, r.Value.Value, err)
		}
		s.Notes[r.Key] = Note{Key: r.Key, Unit: r.Unit, Words: r.Words, Value: f.text(s),
			Source: r.Source, Standing: r.Standing}
	}
	return nil
}

// co2AbovePPM are the limits above outdoors by category, EN 16798-1:2019
// (published: read in public texts; at 20 L/h of CO2 per person).
var co2AbovePPM = map[string]float64{"I": 550, "II": 800, "III": 1350}

// Set replaces one number by what a site file says. A CO2 category also sets
// its limit above outdoors; set co2_above_outdoor_ppm afterwards to have
// another. The error states the rule the text breaks, without the key.
func (s *Settings) Set(key, text string) error {
	f := fieldOf(key)
	if f == nil {
		return fmt.Errorf("is not a known criterion")
	}
	if err := f.put(s, text); err != nil {
		return err
	}
	s.note(f, "set by the site file")
	if key == "co2_category" {
		s.CO2AboveOutdoorPPM = co2AbovePPM[s.CO2Category]
		s.note(fieldOf("co2_above_outdoor_ppm"), "EN 16798-1:2019, CO2 above outdoors of category "+s.CO2Category+", chosen by the site file")
	}
	return nil
}

func (s *Settings) note(f *field, source string) {
	notes := maps.Clone(s.Notes) // a copy of Settings shares the map
	if notes == nil {
		notes = map[string]Note{}
	}
	n := notes[f.key]
	n.Key, n.Value, n.Source, n.Standing = f.key, f.text(s), source, SiteFile
	notes[f.key] = n
	s.Notes = notes
}

// Ordered lists the notes in the order of reports.
func (s *Settings) Ordered() []Note {
	var out []Note
	for i := range fields {
		if n, ok := s.Notes[fields[i].key]; ok {
			out = append(out, n)
		}
	}
	return out
}

// Hash identifies the numbers in force, whatever they are called and wherever
// they came from: equal numbers give equal hashes, so that next year's audit
// can be held to the same.
func Hash(s Settings) string {
	h := sha256.New()
	for i := range fields {
		fmt.Fprintf(h, "%s=%s\n", fields[i].key, fields[i].text(&s))
	}
	return hex.EncodeToString(h.Sum(nil))
}
