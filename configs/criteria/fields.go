package criteria

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// field ties a key of presets and site files to its place in Settings. Low and
// high bound what a site file may say (both included); words lists the allowed
// values of a text.
type field struct {
	key       string
	at        func(*Settings) any // *float64, *int or *string
	low, high float64
	words     []string
}

var categories = []string{"I", "II", "III"}

// Terrains are the roughnesses of the ground a wind may have come over, from
// rough to smooth.
var Terrains = []string{"city", "suburb", "country", "water"}

// Pollutions are the classes of pollution by the building itself of EN 16798-1.
var Pollutions = []string{"very-low", "low", "not-low"}

// SpaceUses are uses of rooms ASHRAE 62.1 sets the outdoor air for.
var SpaceUses = []string{"office", "classroom-5-8", "classroom-9-up", "lecture-classroom", "computer-lab", "library",
	"meeting", "reception", "dining", "music"}

// fields lists every number in the order reports print them.
var fields = []field{
	{key: "outdoor_low_c", at: func(s *Settings) any { return &s.OutdoorLowC }, low: -20, high: 30},
	{key: "rise_k", at: func(s *Settings) any { return &s.RiseK }, low: 0, high: 10},
	{key: "dew_point_max_c", at: func(s *Settings) any { return &s.DewPointMaxC }, low: 0, high: 35},
	{key: "wind_max_m_s", at: func(s *Settings) any { return &s.WindMaxMS }, low: 0, high: 40},
	{key: "rain_dry_min", at: func(s *Settings) any { return &s.RainDryMin }, low: 0, high: 1440},
	{key: "outdoor_pm25_max_ug_m3", at: func(s *Settings) any { return &s.OutdoorPM25Max }, low: 0, high: 1000},
	{key: "min_suited_run_min", at: func(s *Settings) any { return &s.MinSuitedRunMin }, low: 0, high: 1440},
	{key: "band_low_c", at: func(s *Settings) any { return &s.BandLowC }, low: -20, high: 40},
	{key: "band_high_c", at: func(s *Settings) any { return &s.BandHighC }, low: -20, high: 45},

	{key: "open_threshold", at: func(s *Settings) any { return &s.OpenThreshold }, low: 0, high: 1},
	{key: "airing_min", at: func(s *Settings) any { return &s.AiringMin }, low: 0, high: 240},
	{key: "valve_open_pct", at: func(s *Settings) any { return &s.ValveOpenPct }, low: 0, high: 100},
	{key: "damper_open_pct", at: func(s *Settings) any { return &s.DamperOpenPct }, low: 0, high: 100},
	{key: "flow_on_m3_h_m2", at: func(s *Settings) any { return &s.FlowOnM3hPerM2 }, low: 0, high: 100},
	{key: "step_coverage_min", at: func(s *Settings) any { return &s.StepCoverageMin }, low: 0, high: 1},
	{key: "interruption_min", at: func(s *Settings) any { return &s.InterruptionMin }, low: 0, high: 1440},
	{key: "episode_min", at: func(s *Settings) any { return &s.EpisodeMin }, low: 0, high: 1440},
	{key: "few_room_share", at: func(s *Settings) any { return &s.FewRoomShare }, low: 0, high: 1},
	{key: "reopen_delay_min", at: func(s *Settings) any { return &s.ReopenDelayMin }, low: 0, high: 1440},
	{key: "purge_from_h", at: func(s *Settings) any { return &s.PurgeFromH }, low: 0, high: 24},
	{key: "purge_to_h", at: func(s *Settings) any { return &s.PurgeToH }, low: 0, high: 24},
	{key: "purge_indoor_min_c", at: func(s *Settings) any { return &s.PurgeIndoorMinC }, low: 10, high: 40},
	{key: "purge_difference_k", at: func(s *Settings) any { return &s.PurgeDifferenceK }, low: 0, high: 20},
	{key: "purge_outdoor_min_c", at: func(s *Settings) any { return &s.PurgeOutdoorMinC }, low: -10, high: 30},
	{key: "plant_overnight_min_h", at: func(s *Settings) any { return &s.PlantOvernightMinH }, low: 0, high: 24},

	{key: "headline", at: func(s *Settings) any { return &s.Headline }, words: []string{"en16798-1", "ashrae55", "en15251", "imac-mm"}},
	{key: "category", at: func(s *Settings) any { return &s.Category }, words: categories},
	{key: "ashrae55_percent", at: func(s *Settings) any { return &s.ASHRAE55Percent }, words: []string{"80", "90"}},
	{key: "adaptive_after_h", at: func(s *Settings) any { return &s.AdaptiveAfterH }, low: 0, high: 48},
	{key: "adaptive_least_min", at: func(s *Settings) any { return &s.AdaptiveLeastMin }, low: 0, high: 1440},
	{key: "fan_speed_m_s", at: func(s *Settings) any { return &s.FanSpeedMS }, low: 0, high: 3},
	{key: "metabolic_met", at: func(s *Settings) any { return &s.MetabolicMet }, low: 0.8, high: 4},
	{key: "clothing_clo", at: func(s *Settings) any { return &s.ClothingClo }, low: 0, high: 2},
	{key: "air_speed_m_s", at: func(s *Settings) any { return &s.AirSpeedMS }, low: 0, high: 1},
	{key: "running_mean_min_d", at: func(s *Settings) any { return &s.RunningMeanMinD }, low: 7, high: 30},

	{key: "co2_category", at: func(s *Settings) any { return &s.CO2Category }, words: categories},
	{key: "co2_above_outdoor_ppm", at: func(s *Settings) any { return &s.CO2AboveOutdoorPPM }, low: 100, high: 5000},
	{key: "outdoor_co2_ppm", at: func(s *Settings) any { return &s.OutdoorCO2PPM }, low: 300, high: 1000},
	{key: "outdoor_co2_doubt_ppm", at: func(s *Settings) any { return &s.OutdoorCO2DoubtPPM }, low: 0, high: 300},
	{key: "co2_per_person_l_s", at: func(s *Settings) any { return &s.CO2PerPersonLs }, low: 0.0005, high: 0.02},
	{key: "co2_per_person_doubt_pct", at: func(s *Settings) any { return &s.CO2PerPersonDoubtPct }, low: 0, high: 90},
	{key: "people_doubt_pct", at: func(s *Settings) any { return &s.PeopleDoubtPct }, low: 0, high: 90},
	{key: "co2_baseline", at: func(s *Settings) any { return &s.CO2Baseline }, words: []string{"stated", "corrected"}},
	{key: "decay_start_above_ppm", at: func(s *Settings) any { return &s.DecayStartAbovePPM }, low: 50, high: 2000},
	{key: "min_decay_events", at: func(s *Settings) any { return &s.MinDecayEvents }, low: 1, high: 1000},
	{key: "fresh_air_l_s_person", at: func(s *Settings) any { return &s.FreshAirLsPerson }, low: 0, high: 100},
	{key: "pollution_class", at: func(s *Settings) any { return &s.PollutionClass }, words: Pollutions},
	{key: "air_space_use", at: func(s *Settings) any { return &s.AirSpaceUse }, words: SpaceUses},
	{key: "air_distribution", at: func(s *Settings) any { return &s.AirDistribution }, low: 0.3, high: 1.5},

	{key: "climate_gains_w_m2", at: func(s *Settings) any { return &s.ClimateGainsWm2 }, low: 0, high: 500},
	{key: "climate_loss_w_m2_k", at: func(s *Settings) any { return &s.ClimateLossWm2K }, low: 0, high: 20},
	{key: "climate_min_air_change_per_h", at: func(s *Settings) any { return &s.ClimateMinAirChangePerH }, low: 0, high: 20},
	{key: "climate_max_air_change_per_h", at: func(s *Settings) any { return &s.ClimateMaxAirChangePerH }, low: 0.1, high: 100},
	{key: "climate_heating_c", at: func(s *Settings) any { return &s.ClimateHeatingC }, low: 10, high: 26},
	{key: "climate_cooling_c", at: func(s *Settings) any { return &s.ClimateCoolingC }, low: 20, high: 35},
	{key: "night_store_c", at: func(s *Settings) any { return &s.NightStoreC }, low: 15, high: 35},

	{key: "breeze_above_c", at: func(s *Settings) any { return &s.BreezeAboveC }, low: 0, high: 45},
	{key: "wind_calm_m_s", at: func(s *Settings) any { return &s.WindCalmMS }, low: 0, high: 3},
	{key: "wind_mast_m", at: func(s *Settings) any { return &s.WindMastM }, low: 1, high: 200},
	{key: "wind_mast_terrain", at: func(s *Settings) any { return &s.WindMastTerrain }, words: Terrains},
	{key: "wind_opening_m", at: func(s *Settings) any { return &s.WindOpeningM }, low: 1, high: 400},
	{key: "wind_opening_terrain", at: func(s *Settings) any { return &s.WindOpeningTerrain }, words: Terrains},

	{key: "accuracy_outdoor_temp_k", at: func(s *Settings) any { return &s.AccuracyOutdoorTempK }, low: 0, high: 5},
	{key: "accuracy_indoor_temp_k", at: func(s *Settings) any { return &s.AccuracyIndoorTempK }, low: 0, high: 5},
	{key: "accuracy_humidity_pct", at: func(s *Settings) any { return &s.AccuracyHumidityPct }, low: 0, high: 20},
	{key: "accuracy_co2_ppm", at: func(s *Settings) any { return &s.AccuracyCO2PPM }, low: 0, high: 500},
	{key: "accuracy_co2_pct", at: func(s *Settings) any { return &s.AccuracyCO2Pct }, low: 0, high: 30},
}

// auto is how files write a clothing that follows the outdoor temperature and
// an outdoor CO2 that follows the year.
const auto = "auto"

func (f *field) mayBeAuto() bool { return f.key == "clothing_clo" || f.key == "outdoor_co2_ppm" }

// Keys lists every key a site file may set, in the order of reports.
func Keys() []string {
	out := make([]string, len(fields))
	for i := range fields {
		out[i] = fields[i].key
	}
	return out
}

func fieldOf(key string) *field {
	for i := range fields {
		if fields[i].key == key {
			return &fields[i]
		}
	}
	return nil
}

// put reads text into the field of s. The error states the rule.
func (f *field) put(s *Settings, text string) error {
	if len(f.words) > 0 {
		return f.putWord(s, text)
	}
	to, isFloat := f.at(s).(*float64)
	if f.mayBeAuto() && text == auto {
		*to = math.NaN()
		return nil
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) {
		if f.key == "clothing_clo" {
			return fmt.Errorf("must be a number of clo or %s", auto)
		}
		if f.mayBeAuto() {
			return fmt.Errorf("must be a number or %s", auto)
		}
		return fmt.Errorf("must be a number")
	}
	if v < f.low || v > f.high {
		return fmt.Errorf("must lie between %s and %s", number(f.low), number(f.high))
	}
	if isFloat {
		*to = v
		return nil
	}
	if v != math.Trunc(v) {
		return fmt.Errorf("must be a whole number")
	}
	*f.at(s).(*int) = int(v)
	return nil
}

func (f *field) putWord(s *Settings, text string) error {
	for _, w := range f.words {
		if w != text {
			continue
		}
		switch to := f.at(s).(type) {
		case *string:
			*to = w
		case *int:
			*to, _ = strconv.Atoi(w)
		}
		return nil
	}
	return fmt.Errorf("must be one of %s", strings.Join(f.words, ", "))
}

// text is the inverse of put.
func (f *field) text(s *Settings) string {
	switch v := f.at(s).(type) {
	case *float64:
		if math.IsNaN(*v) {
			return auto
		}
		return number(*v)
	case *int:
		return strconv.Itoa(*v)
	case *string:
		return *v
	}
	return ""
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
