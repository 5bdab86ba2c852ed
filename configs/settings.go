package configs

import (
	"encoding/json"

	"sashlog/configs/criteria"
)

// settings reads the criteria: the preset, then what the site file replaces.
func (b *builder) settings() criteria.Settings {
	name := criteria.Default
	if v, ok := b.raw.Criteria["preset"]; ok {
		if s, isText := v.(string); isText {
			name = s
		} else {
			b.tree.at("criteria.preset", "allowed are "+list(criteria.Presets()), "preset must be the name of a preset")
		}
	}
	s, err := criteria.Preset(name)
	if err != nil {
		b.tree.at("criteria.preset", didYouMean(name, criteria.Presets()), "unknown preset %q", name)
		if s, err = criteria.Preset(criteria.Default); err != nil {
			b.tree.at("criteria", "", "%s", err)
			return s
		}
	}
	limit := s.CO2AboveOutdoorPPM
	for _, key := range criteria.Keys() {
		v, ok := b.raw.Criteria[key]
		path := "criteria." + key
		if !ok {
			continue
		}
		text, ok := scalarText(v)
		if !ok {
			if !b.tree.reported(path) {
				b.tree.at(path, "", "%s must be a single value", key)
			}
			continue
		}
		if key == "co2_above_outdoor_ppm" {
			limit = s.CO2AboveOutdoorPPM
		}
		if err := s.Set(key, text); err != nil {
			b.tree.at(path, "", "%s is %q: %s", key, text, err)
		}
	}
	b.contradictions(&s, limit)
	return s
}

func scalarText(v any) (string, bool) {
	switch v := v.(type) {
	case string:
		return v, true
	case json.Number:
		return v.String(), true
	}
	return "", false
}

// contradictions finds criteria that cannot hold together.
func (b *builder) contradictions(s *criteria.Settings, categoryLimit float64) {
	if s.BandLowC >= s.BandHighC {
		b.tree.at(b.first("criteria.band_low_c", "criteria.band_high_c"), "",
			"the plain outdoor band runs from %g to %g °C: the low end must lie below the high end", s.BandLowC, s.BandHighC)
	}
	if b.tree.has("criteria.co2_category") && b.tree.has("criteria.co2_above_outdoor_ppm") && s.CO2AboveOutdoorPPM != categoryLimit {
		b.tree.at("criteria.co2_above_outdoor_ppm", "keep one of them",
			"co2_above_outdoor_ppm is %g, but category %s means %g: they contradict each other", s.CO2AboveOutdoorPPM, s.CO2Category, categoryLimit)
	}
	if s.PurgeFromH == s.PurgeToH {
		b.tree.at(b.first("criteria.purge_from_h", "criteria.purge_to_h"), "",
			"night purge begins and ends at the same hour (%g)", s.PurgeFromH)
	}
}

// first returns the first of the paths that was written, else the last.
func (b *builder) first(paths ...string) string {
	for _, p := range paths {
		if b.tree.has(p) {
			return p
		}
	}
	return paths[len(paths)-1]
}
