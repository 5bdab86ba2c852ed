package published

import (
	"math"

	"sashlog/internal/physics/air"
)

func moistAirChecks() []group {
	const area = "Moist air"
	hw := group{area: area, source: "Hyland & Wexler 1983, as printed in ASHRAE Fundamentals 2017 ch. 1 eq. 5 and 6 (values: the open library psychrolib 1.1.1)"}
	mg := group{area: area, source: "WMO-No. 8 Annex 4.B, Magnus"}
	nan := math.NaN()
	for _, r := range [][4]float64{
		{-20, 103.260, 125.965, 103.261}, {-5, 401.764, 422.185, 401.738}, {0, 611.154, 611.200, 611.200}, {5, 872.487, 871.743, nan}, {10, 1227.995, 1226.030, nan},
		{15, 1705.448, 1701.672, nan}, {20, 2338.804, 2332.596, nan}, {25, 3169.216, 3160.057, nan}, {30, 4246.030, 4233.724, nan}, {35, 5627.819, 5612.842, nan},
		{40, 7383.460, 7367.458, nan}, {50, 12349.856, 12345.158, nan},
	} {
		hw.add(reference, 0.01, r[1], air.SatPressurePa(r[0]), "saturation pressure at %g °C (Pa)", r[0])
		mg.add(recomputed, 0.01, r[2], air.MagnusSatPressurePa(r[0]), "over water at %g °C (Pa)", r[0])
		if !math.IsNaN(r[3]) {
			mg.add(recomputed, 0.01, r[3], air.MagnusIceSatPressurePa(r[0]), "over ice at %g °C (Pa)", r[0])
		}
	}
	mg.add(recomputed, 1e-6, 1.004719, air.MagnusEnhancement(101325), "enhancement at 1013.25 hPa")
	for _, r := range [][3]float64{{20, 50, 9.255}, {25, 50, 13.852}, {25, 80, 21.307}, {30, 60, 21.385}} {
		mg.add(recomputed, 0.001, r[2], air.MagnusDewPointC(r[0], r[1]), "dew point at %g °C, %g %% (°C)", r[0], r[1])
	}
	m := group{area: area, source: "ASHRAE Fundamentals 2017 ch. 1, moist air (values: the open library psychrolib 1.1.1)"}
	for _, r := range [][10]float64{
		{20, 50, 101325, 0.0072617, 9.272, 13.783, 38.552, 0.84016, 1.1989, 1169.40}, {25, 50, 101325, 0.0098810, 13.864, 17.889, 50.322, 0.85804, 1.1770, 1584.61},
		{25, 80, 101325, 0.0159618, 21.309, 22.380, 65.813, 0.86630, 1.1728, 2535.37}, {30, 60, 101325, 0.0160409, 21.388, 23.813, 71.193, 0.88094, 1.1534, 2547.62},
		{35, 40, 101325, 0.0141317, 19.385, 23.934, 71.473, 0.89279, 1.1359, 2251.13}, {15, 90, 101325, 0.0095663, 13.375, 14.010, 39.282, 0.82885, 1.2180, 1534.90},
		{25, 50, 84556, 0.0118781, 13.864, 17.459, 55.409, 1.03146, 0.98102, 1584.61}, {5, 80, 101325, 0.0043141, 1.841, 3.588, 15.860, 0.79343, 1.2658, 697.99},
		{-5, 70, 101325, 0.0017311, -9.108, -6.335, -0.717, 0.76175, 1.3150, 281.24},
	} {
		t, rh, pa := r[0], r[1], r[2]
		w := air.HumidityRatioFromRH(t, rh, pa)
		m.add(reference, 1e-6, r[3], w, "humidity ratio at %g °C, %g %%, %g Pa (kg/kg)", t, rh, pa)
		m.add(reference, 0.005, r[4], air.DewPointC(t, rh), "dew point (°C)")
		m.add(reference, 0.01, r[5], air.WetBulbC(t, rh, pa), "wet bulb (°C)")
		m.add(reference, 0.01, r[6], air.EnthalpyKJkg(t, w), "enthalpy (kJ/kg)")
		m.add(reference, 1e-4, r[7], air.SpecificVolumeM3kg(t, w, pa), "specific volume (m³/kg)")
		m.add(reference, 1e-4, r[8], air.DensityKgM3(t, w, pa), "density (kg/m³)")
		m.add(reference, 0.01, r[9], air.VapourPressurePa(t, rh), "vapour pressure (Pa)")
	}
	o := group{area: area, source: "Humidity limits, altitude, wet bulb in one line"}
	o.add(recomputed, 1e-6, 0.012127, air.HumidityRatio(air.SatPressurePa(17), air.StandardPressurePa), "humidity ratio at a dew point of 17 °C")
	o.add(recomputed, 0.005, 16.84, air.SatTempC(air.VapourPressureFromRatioPa(0.012, air.StandardPressurePa)), "dew point at 12 g/kg (°C)")
	for _, r := range [][2]float64{{500, 95460.8}, {1000, 89874.5}, {1655, 82960.0}, {2000, 79495.1}, {3000, 70108.4}} {
		o.add(recomputed, 1, r[1], air.PressureAtPa(r[0]), "pressure at %g m (Pa)", r[0])
	}
	o.add(memory, 0.05, 13.7, air.StullWetBulbC(20, 50), "Stull 2011, 20 °C and 50 %% (°C)")
	return []group{hw, mg, m, o}
}
