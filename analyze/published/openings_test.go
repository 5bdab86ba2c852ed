package published

import (
	"time"

	"sashlog/analyze/breeze"
	o "sashlog/internal/physics/opening"
	"sashlog/internal/physics/sun"
)

func openingChecks() []group {
	const area = "Flow through openings"
	f := group{area: area, source: "ASHRAE Fundamentals ch. 16 eq. 36 to 39 (coefficients read in a public text)"}
	f.add(arithmetic, 1e-6, 0.919239, o.OrificeFlow(0.65, 1, 1.2, 1.2), "eq. 36: 0.65, 1 m², 1.2 Pa, 1.2 kg/m³ (m³/s)")
	f.add(arithmetic, 1e-6, 1.1, o.WindFlow(0.55, 1, 2), "eq. 37: 0.55, 1 m², 2 m/s (m³/s)")
	f.add(arithmetic, 1e-6, 0.456642, o.StackFlow(0.65, 1, 1.5, 25, 20), "eq. 38: 1.5 m to the neutral level, 25/20 °C (m³/s)")
	f.add(arithmetic, 1e-6, 0.4225, o.DischargeSingle(25, 20), "eq. 39: discharge coefficient at 5 K")
	f.add(arithmetic, 1e-6, 0.187724, o.StackFlowSingle(1, 1.2, 25, 20), "one opening 1.2 m high (m³/s)")
	f.add(arithmetic, 1e-5, 1.19102, o.CombineQuadrature(1.1, 0.456642), "wind and stack in squares (m³/s)")
	s := group{area: area, source: "de Gids & Phaff 1982; Warren & Parkins 1984; CIBSE AM10 form"}
	s.add(arithmetic, 1e-6, 0.0935414, o.SingleSidedDeGidsPhaff(1, 1.2, 2, 25, 20), "de Gids & Phaff: 1 m², 1.2 m, 5 K, 2 m/s (m³/s)")
	s.add(arithmetic, 1e-6, 0.091112, o.StackWarrenParkins(0.61, 1, 1.2, 22.5, 17.5), "Warren & Parkins, stack (m³/s)")
	s.add(arithmetic, 1e-6, 0.050, o.WindWarrenParkins(1, 2), "Warren & Parkins, wind (m³/s)")
	s.add(memory, 1e-6, 0.430349, o.StackTwoOpenings(0.61, 1, 1, 3, 25, 20), "two openings 3 m apart, 5 K (m³/s)")
	s.add(memory, 1e-6, 1.294005, o.CrossFlow(0.61, 1, 1, 3, 1.0), "cross flow, 3 m/s, pressure coefficients 1.0 apart (m³/s)")
	s.add(memory, 1e-6, 1.120642, o.CrossFlow(0.61, 1, 1, 3, 0.75), "cross flow, 0.75 apart (m³/s)")
	e := group{area: area, source: "EN 16798-7:2017 6.4.3.5 and CEN/TR 16798-8 (coefficients as two public programs have them)"}
	e.add(arithmetic, 5e-5, 1.0942, o.AirDensityEN16798(1000), "density at 1000 m (kg/m³)")
	e.add(arithmetic, 1e-6, 0.0724569, o.SingleSidedEN16798(1, 1.2, 2, 25, 20, 0), "one side, buoyancy governs (m³/s)")
	e.add(arithmetic, 1e-6, 0.1264911, o.SingleSidedEN16798(1, 1.2, 8, 25, 20, 0), "one side, wind governs (m³/s)")
	e.add(arithmetic, 1e-6, 0.89964, o.HingedShare(90), "hinged, 90°")
	e.add(printed, 0, 0.50, o.PressureCoefficient(o.Open, 0), "pressure coefficient, windward, open")
	e.add(printed, 0, -0.70, o.PressureCoefficient(o.Open, 180), "leeward, open")
	e.add(printed, 0, 0.05, o.PressureCoefficient(o.Shielded, 0), "windward, shielded")
	e.add(printed, 0, -0.50, o.PressureCoefficient(o.Normal, 180), "leeward, normal")
	return []group{f, s, e}
}

func windAndSunChecks() []group {
	const area = "Wind and sun"
	w := group{area: area, source: "ASHRAE Fundamentals ch. 24 eq. 4, Table 1"}
	w.add(printed, 0.05, 7.8, o.WindAt(10, 10, o.Country, 15, o.Suburb), "Example 1: 10 m/s at an airport's mast of 10 m, 15 m up in a suburb (m/s)")
	for _, r := range []struct {
		t    o.Terrain
		name string
		at   [3]float64
	}{
		{o.City, "city", [3]float64{0.30139, 0.44842, 0.64436}}, {o.Suburb, "suburb", [3]float64{0.54999, 0.71678, 0.91275}},
		{o.Country, "open country", [3]float64{0.84488, 1, 1.16626}}, {o.Water, "water", [3]float64{1.03724, 1.16995, 1.30581}},
	} {
		for k, m := range []float64{3, 10, 30} {
			w.add(recomputed, 1e-5, r.at[k], o.WindFactor(10, o.Country, m, r.t), "factor at %g m, %s", m, r.name)
		}
	}
	d := group{area: area, source: "Mean direction of wind, by hand"}
	for _, r := range []struct {
		deg     []float64
		mean, r float64
	}{{[]float64{350, 10}, 0, 0.984808}, {[]float64{0, 90}, 45, 0.707107}, {[]float64{350, 20, 40}, 16.7773, 0.936721}} {
		got, steady := breeze.MeanDirection(r.deg)
		d.add(recomputed, 5e-5, 0, breeze.OffDeg(got, r.mean), "off the mean of %v, %g° (°)", r.deg, r.mean)
		d.add(recomputed, 5e-7, r.r, steady, "steadiness of %v", r.deg)
	}
	b := group{area: area, source: "WMO, Beaufort scale: lower bounds"}
	for i, ms := range []float64{0.3, 1.6, 3.4, 5.5, 8.0, 10.8, 13.9, 17.2, 20.8, 24.5, 28.5, 32.7} {
		b.add(memory, 0, float64(i+1), float64(breeze.Beaufort(ms)), "%g m/s", ms)
	}
	p := sun.At(time.Date(2003, 10, 17, 12, 30, 30, 0, time.FixedZone("", -7*3600)), 39.742476, -105.1786)
	s := group{area: area, source: "NREL/TP-560-34302, worked example of the solar position"}
	s.add(printed, 0.01, 50.11, 90-p.ApparentDeg, "zenith (°)")
	s.add(printed, 0.01, 194.34, p.AzimuthDeg, "azimuth (°)")
	s.add(memory, 0.005, -9.31434, p.DeclinationDeg, "declination (°)")
	s.add(memory, 0.02, 14.6415, p.EquationMin, "equation of time (min)")
	h := group{area: area, source: "Hottel 1976 (Duffie & Beckman, example 2.8.1), clear sky"}
	h.add(memory, 0.001, 0.6327, sun.HottelBeam(0.844, 270, sun.Clear), "beam transmittance at 270 m, cos z 0.844")
	return []group{w, d, b, s, h}
}
