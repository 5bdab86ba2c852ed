package air

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.7g, want %.7g ± %g", what, got, want, tol)
	}
}

// Saturation pressure: Hyland & Wexler 1983 as printed in ASHRAE Fundamentals
// 2017 ch. 1, recomputed with the open library psychrolib 1.1.1; Magnus with
// the WMO's constants (WMO-No. 8, Annex 4.B), recomputed.
func TestSaturationPressure(t *testing.T) {
	for _, c := range []struct{ tempC, hw, water, ice float64 }{
		{-20, 103.260, 125.965, 103.261},
		{-5, 401.764, 422.185, 401.738},
		{0, 611.154, 611.200, 611.200},
		{5, 872.487, 871.743, math.NaN()},
		{10, 1227.995, 1226.030, math.NaN()},
		{15, 1705.448, 1701.672, math.NaN()},
		{20, 2338.804, 2332.596, math.NaN()},
		{25, 3169.216, 3160.057, math.NaN()},
		{30, 4246.030, 4233.724, math.NaN()},
		{35, 5627.819, 5612.842, math.NaN()},
		{40, 7383.460, 7367.458, math.NaN()},
		{50, 12349.856, 12345.158, math.NaN()},
	} {
		near(t, "Hyland-Wexler", SatPressurePa(c.tempC), c.hw, 0.01)
		near(t, "Magnus water", MagnusSatPressurePa(c.tempC), c.water, 0.01)
		if math.IsNaN(c.ice) {
			if got := MagnusIceSatPressurePa(c.tempC); !math.IsNaN(got) {
				t.Errorf("Magnus ice above 0 °C = %g, want NaN", got)
			}
			continue
		}
		near(t, "Magnus ice", MagnusIceSatPressurePa(c.tempC), c.ice, 0.01)
	}
	worst := 0.0
	for c := 0.05; c <= 50; c += 0.05 {
		worst = math.Max(worst, math.Abs(MagnusSatPressurePa(c)/SatPressurePa(c)-1))
	}
	if !(worst > 0.0028 && worst < 0.0030) {
		t.Errorf("largest difference of Magnus from Hyland-Wexler, 0 to 50 °C = %.4f, want just under 0.0030", worst)
	}
	// WMO-No. 8, Annex 4.B, recomputed.
	near(t, "enhancement", MagnusEnhancement(101325), 1.004719, 1e-6)
}

// Moist air at nine states: psychrolib 1.1.1, recomputed from the equations of
// ASHRAE Fundamentals 2017 ch. 1. Absolute humidity recomputed from the gas
// constant of water vapour, 461.5 J/(kg·K).
func TestMoistAir(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		tempC, rh, pa, ratio, dew, wet, h, v, rho, vapour, abs float64
	}{
		{20, 50, 101325, 0.0072617, 9.272, 13.783, 38.552, 0.84016, 1.1989, 1169.40, 8.644},
		{25, 50, 101325, 0.0098810, 13.864, 17.889, 50.322, 0.85804, 1.1770, 1584.61, 11.516},
		{25, 80, 101325, 0.0159618, 21.309, 22.380, 65.813, 0.86630, 1.1728, 2535.37, 18.426},
		{30, 60, 101325, 0.0160409, 21.388, 23.813, 71.193, 0.88094, 1.1534, 2547.62, 18.210},
		{35, 40, 101325, 0.0141317, 19.385, 23.934, 71.473, 0.89279, 1.1359, 2251.13, 15.830},
		{15, 90, 101325, 0.0095663, 13.375, 14.010, 39.282, 0.82885, 1.2180, 1534.90, 11.542},
		{25, 50, 84556, 0.0118781, 13.864, 17.459, 55.409, 1.03146, 0.98102, 1584.61, 11.516},
		{5, 80, 101325, 0.0043141, 1.841, 3.588, 15.860, 0.79343, 1.2658, 697.99, nan},
		{-5, 70, 101325, 0.0017311, -9.108, -6.335, -0.717, 0.76175, 1.3150, 281.24, nan},
	} {
		w := HumidityRatioFromRH(c.tempC, c.rh, c.pa)
		near(t, "humidity ratio", w, c.ratio, 1e-6)
		near(t, "dew point", DewPointC(c.tempC, c.rh), c.dew, 0.005)
		near(t, "wet bulb", WetBulbC(c.tempC, c.rh, c.pa), c.wet, 0.01)
		near(t, "enthalpy", EnthalpyKJkg(c.tempC, w), c.h, 0.01)
		near(t, "specific volume", SpecificVolumeM3kg(c.tempC, w, c.pa), c.v, 1e-4)
		near(t, "density", DensityKgM3(c.tempC, w, c.pa), c.rho, 1e-4)
		near(t, "vapour pressure", VapourPressurePa(c.tempC, c.rh), c.vapour, 0.01)
		if !math.IsNaN(c.abs) {
			near(t, "absolute humidity", AbsoluteHumidityGm3(c.tempC, VapourPressurePa(c.tempC, c.rh)), c.abs, 0.001)
		}
	}
	for _, c := range []struct{ tempC, rh, dew float64 }{
		{20, 50, 9.255}, {25, 50, 13.852}, {25, 80, 21.307}, {30, 60, 21.385},
	} {
		near(t, "Magnus dew point", MagnusDewPointC(c.tempC, c.rh), c.dew, 0.001)
	}
	// Stull 2011 states 13.7 °C for 20 °C and 50 %.
	near(t, "Stull wet bulb", StullWetBulbC(20, 50), 13.699, 0.001)
}

// A dew point limit of 17 °C and a humidity ratio limit of 12 g/kg are not the
// same test. Recomputed at 101 325 Pa.
func TestHumidityLimitsDiffer(t *testing.T) {
	near(t, "ratio at 17 °C dew point", HumidityRatio(SatPressurePa(17), StandardPressurePa), 0.012127, 1e-6)
	near(t, "dew point at 12 g/kg", SatTempC(VapourPressureFromRatioPa(0.012, StandardPressurePa)), 16.84, 0.005)
}

// Standard atmosphere, ASHRAE Fundamentals 2017 ch. 1 eq. 3, recomputed.
func TestPressureAtElevation(t *testing.T) {
	for _, c := range []struct{ m, pa float64 }{
		{0, 101325}, {500, 95460.8}, {1000, 89874.5}, {1655, 82960.0}, {2000, 79495.1}, {3000, 70108.4},
	} {
		near(t, "pressure", PressureAtPa(c.m), c.pa, 1)
	}
	near(t, "temperature at 1000 m", StandardTempC(1000), 8.5, 1e-9)
}

func TestEdges(t *testing.T) {
	nan := math.NaN()
	for name, got := range map[string]float64{
		"dew point at 0 %":         DewPointC(20, 0),
		"Magnus dew point at 0 %":  MagnusDewPointC(20, 0),
		"dew point below 0 %":      DewPointC(20, -3),
		"dew point of NaN":         DewPointC(nan, 50),
		"dew point of NaN RH":      DewPointC(20, nan),
		"saturation above 200 °C":  SatPressurePa(200.1),
		"saturation below -100 °C": SatPressurePa(-100.1),
		"ratio above boiling":      HumidityRatio(101325, 101325),
		"wet bulb of NaN":          WetBulbC(20, nan, 101325),
		"wet bulb at 150 °C":       WetBulbC(150, 1, 101325),
		"NaN elevation":            PressureAtPa(nan),
		"negative vapour":          SatTempC(-1),
		"impossible wet bulb":      HumidityRatioFromWetBulb(40, 0, 101325),
	} {
		if !math.IsNaN(got) {
			t.Errorf("%s = %g, want NaN", name, got)
		}
	}
	near(t, "dew point at 104 %", DewPointC(20, 104), 20, 0)
	near(t, "wet bulb at 104 %", WetBulbC(20, 104, 101325), 20, 0)
	near(t, "humidity with a dew point above the air", RelHumidityPct(20, 21), 100, 0)
	near(t, "between the branches", SatTempC(611.18), 0, 1e-3)
	if w := WetBulbC(30, 0, 101325); !(w > 8 && w < 12) {
		t.Errorf("wet bulb of dry air at 30 °C = %g, want about 10 °C", w)
	}
}

func TestMoistAirProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := rapid.Float64Range(-40, 60).Draw(t, "tempC")
		rh := rapid.Float64Range(0.5, 100).Draw(t, "rhPct")
		pa := rapid.Float64Range(65000, 105000).Draw(t, "pressurePa")
		dew, wet := DewPointC(c, rh), WetBulbC(c, rh, pa)
		if !(dew <= wet+2e-6 && wet <= c) {
			t.Fatalf("dew point %g, wet bulb %g, air %g out of order", dew, wet, c)
		}
		// Just below freezing point the branches leave a gap of 1e-4 in the
		// pressure, hence of 0.01 % in humidity.
		if back := RelHumidityPct(c, dew); math.Abs(back-rh) > 1e-4*rh+1e-9 {
			t.Fatalf("humidity %g became %g", rh, back)
		}
		if w := HumidityRatioFromRH(c, rh, pa); math.Abs(VapourPressureFromRatioPa(w, pa)-VapourPressurePa(c, rh)) > 1e-6 {
			t.Fatalf("vapour pressure does not come back from ratio %g", w)
		}
		if SatPressurePa(c+0.01) <= SatPressurePa(c) {
			t.Fatalf("saturation pressure falls at %g", c)
		}
	})
}

func BenchmarkDewPoint(b *testing.B) {
	for b.Loop() {
		DewPointC(24.3, 47)
	}
}

func BenchmarkWetBulb(b *testing.B) {
	for b.Loop() {
		WetBulbC(24.3, 47, 101325)
	}
}
