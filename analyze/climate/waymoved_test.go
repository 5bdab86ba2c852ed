package climate

import "testing"

// Each way moves with its own settings as its equation says: a lower balance
// point (more heat, less loss), a higher cooling set-point or more air cannot
// cost hours at the warm end; the band is counted plainly.
func TestWaySensitivity(t *testing.T) {
	in := year(3)
	r := Offered(in)
	seen := map[string]float64{}
	cold := year(-4)
	for _, m := range Offered(cold).WaySensitivity {
		if m.Key == "climate_heating_c" || m.Key == "climate_loss_w_m2_k" {
			seen["cold: "+m.Key+" "+m.To] = m.ChangeH
		}
	}
	for _, m := range r.WaySensitivity {
		seen[m.Way+" "+m.Key+" "+m.To] = m.ChangeH
		near(t, m.Way+" "+m.Key, m.SuitedH-method0(t, r.Measured, m.Way).SuitedH, m.ChangeH, 1e-9)
	}
	for key, sign := range map[string]float64{
		"plain band band_low_c 14 °C": 1, "plain band band_low_c 18 °C": -1, "plain band band_high_c 28 °C": 1,
		"adaptive EN 16798-1 category I": -1, "adaptive EN 16798-1 category III": 1, "adaptive ASHRAE 55 acceptability 90 %": -1,
		"heat balance climate_max_air_change_per_h 5 per h": -1, "heat balance climate_max_air_change_per_h 15 per h": 1,
		"heat balance climate_cooling_c 27 °C": 1, "heat balance climate_cooling_c 25 °C": -1,
		"cold: climate_heating_c 21 °C": -1, "cold: climate_loss_w_m2_k 1.2 W/(m² K)": -1, "heat balance dew_point_max_c 16 °C": -1,
		"heat balance and night cooling climate_max_air_change_per_h 5 per h": -1,
	} {
		if v, ok := seen[key]; !ok || v*sign <= 0 {
			t.Errorf("%s: %v (%v)", key, v, ok)
		}
	}
	// By plain counting: occupied hours from 14 °C to the band's end, dry enough.
	count := func(low float64) (h float64) {
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			temp, dew := round3(float64(in.Outdoor.TempC[i])), round3(float64(in.Outdoor.DewPointC[i]))
			if o := i % 24; o >= 8 && o < 18 && temp >= low && temp <= in.Criteria.BandHighC && dew <= in.Criteria.DewPointMaxC {
				h++
			}
		}
		return h
	}
	near(t, "band from 14 °C", seen["plain band band_low_c 14 °C"], count(14)-count(in.Criteria.BandLowC), 1e-6)
	if warmer := seen["heat balance and night cooling night_store_c 25.5 °C"]; warmer < 0 {
		t.Errorf("a warmer mass stores more cold: %v", warmer)
	}
}
