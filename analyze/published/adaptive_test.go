package published

import c "sashlog/analyze/comfort"

func adaptiveChecks() []group {
	const area = "Adaptive comfort and running means"
	a := group{area: area, source: "ASHRAE 55-2013 to 2023, adaptive lines"}
	for _, r := range [][6]float64{
		{10, 20.90, 17.40, 24.40, 18.40, 23.40}, {15, 22.45, 18.95, 25.95, 19.95, 24.95}, {20, 24.00, 20.50, 27.50, 21.50, 26.50},
		{25, 25.55, 22.05, 29.05, 23.05, 28.05}, {30, 27.10, 23.60, 30.60, 24.60, 29.60}, {33.5, 28.185, 24.685, 31.685, 25.685, 30.685},
	} {
		e, n := c.ASHRAE55Adaptive(r[0], c.Accept80), c.ASHRAE55Adaptive(r[0], c.Accept90)
		a.add(recomputed, 1e-6, r[1], e.NeutralC, "neutral at a prevailing mean of %g °C", r[0])
		a.add(recomputed, 1e-6, r[2], e.LowC, "80 %%, lower")
		a.add(recomputed, 1e-6, r[3], e.HighC, "80 %%, upper")
		a.add(recomputed, 1e-6, r[4], n.LowC, "90 %%, lower")
		a.add(recomputed, 1e-6, r[5], n.HighC, "90 %%, upper")
	}
	v := group{area: area, source: "ASHRAE 55-2020 Table 5-13, rise of the upper limit with air speed people control"}
	for _, r := range [][2]float64{{0.3, 0}, {0.6, 1.2}, {0.9, 1.8}, {1.2, 2.2}} {
		v.add(printed, 0, r[1], c.AirSpeedIncrementK(r[0]), "%g m/s (K)", r[0])
	}
	en := group{area: area, source: "EN 16798-1:2019 Annex B, adaptive limits"}
	for _, r := range []struct {
		rm        float64
		cat       c.Category
		low, high float64
	}{{20, c.CategoryI, 22.4, 27.4}, {20, c.CategoryII, 21.4, 28.4}, {20, c.CategoryIII, 20.4, 29.4}, {28, c.CategoryII, 24.04, 31.04}} {
		b := c.EN16798Adaptive(r.rm, r.cat)
		en.add(recomputed, 1e-9, r.low, b.LowC, "category %s at a running mean of %g °C, lower", r.cat, r.rm)
		en.add(recomputed, 1e-9, r.high, b.HighC, "category %s, upper", r.cat)
	}
	old := group{area: area, source: "EN 15251:2007 Annex A.2, adaptive limits"}
	for _, r := range []struct {
		cat       c.Category
		low, high float64
	}{{c.CategoryI, 23.4, 27.4}, {c.CategoryII, 22.4, 28.4}, {c.CategoryIII, 21.4, 29.4}} {
		b := c.EN15251Adaptive(20, r.cat)
		old.add(arithmetic, 1e-9, r.low, b.LowC, "category %s at a running mean of 20 °C, lower", r.cat)
		old.add(arithmetic, 1e-9, r.high, b.HighC, "category %s, upper", r.cat)
	}
	rng := group{area: area, source: "EN 16798-1:2019 Tables B.2 and B.5, offices with plant running"}
	for _, r := range []struct {
		cat       c.Category
		season    c.Season
		low, high float64
		known     string
	}{
		{c.CategoryII, c.HeatingSeason, 20, 24, printed}, {c.CategoryII, c.CoolingSeason, 23, 26, printed}, {c.CategoryI, c.HeatingSeason, 21, 23, memory},
		{c.CategoryI, c.CoolingSeason, 23.5, 25.5, memory}, {c.CategoryIII, c.HeatingSeason, 19, 25, memory}, {c.CategoryIII, c.CoolingSeason, 22, 27, memory},
	} {
		b := c.OfficeRange(r.cat, r.season)
		name := map[c.Season]string{c.HeatingSeason: "heating", c.CoolingSeason: "cooling"}[r.season]
		rng.add(r.known, 0, r.low, b.LowC, "category %s, %s, lower", r.cat, name)
		rng.add(r.known, 0, r.high, b.HighC, "category %s, %s, upper", r.cat, name)
	}
	im := group{area: area, source: "Manu et al. 2016, Building and Environment 98:55, Indian models"}
	im.add(printed, 0.05, 27.1, c.IMAC(33, c.IMACMixedMode).NeutralC, "mixed mode, Delhi, 33 °C")
	im.add(printed, 0.05, 21.5, c.IMAC(13, c.IMACMixedMode).NeutralC, "mixed mode, 13 °C")
	im.add(printed, 0.051, 28.7, c.IMAC(38.5, c.IMACMixedMode).NeutralC, "mixed mode, 38.5 °C")
	im.add(printed, 1e-9, 3.46, c.IMAC(20, c.IMACMixedMode).HighC-c.IMAC(20, c.IMACMixedMode).NeutralC, "mixed mode, half width for 90 %% (K)")
	im.add(printed, 0.05, 19.6, c.IMAC(12.5, c.IMACNaturallyVentilated).NeutralC, "naturally ventilated, 12.5 °C")
	im.add(misprint, 1e-9, 30.65, c.IMAC(31, c.IMACNaturallyVentilated).NeutralC+0.54*2, "naturally ventilated, 33 °C by the line (a code text prints 30.68)")
	im.add(printed, 1e-9, 2.38, c.IMAC(20, c.IMACNaturallyVentilated).HighC-c.IMAC(20, c.IMACNaturallyVentilated).NeutralC, "naturally ventilated, half width for 90 %% (K)")
	im.add(memory, 1e-9, 1.5, c.IMAC(20, c.IMACAirConditioned).HighC-c.IMAC(20, c.IMACAirConditioned).NeutralC, "air-conditioned, half width for 90 %% (K)")
	rm := group{area: area, source: "EN 16798-1 and EN 15251, running mean outdoor temperature"}
	rm.add(recomputed, 5e-5, 19.6842, c.SevenDayMeanEN([7]float64{20, 22, 18, 21, 19, 17, 16}), "seven-day formula, 20, 22, 18, 21, 19, 17, 16 °C")
	rm.add(recomputed, 5e-5, 10.3684, c.SevenDayMeanEN([7]float64{10, 10, 10, 10, 10, 10, 17}), "seven-day formula, oldest day 17 °C, others 10")
	rm.add(recomputed, 1e-9, 19, c.NextRunningMean(23, 18, c.RunningMeanAlpha), "one step: yesterday 23 °C, its running mean 18")
	daily := []float64{15, 16, 18, 20, 22, 24, 25, 23, 21, 19}
	got := c.RunningMeanFrom(daily, 0.8, 15)
	for i, want := range []float64{15, 15, 15.2, 15.76, 16.608, 17.6864, 18.94912, 20.159296, 20.727437, 20.781949} {
		rm.add(recomputed, 1e-6, want, got[i], "recursion, day %d", i+1)
	}
	return []group{a, v, en, old, rng, im, rm}
}

func longTermChecks() []group {
	const area = "Long-term indices"
	tm := group{area: area, source: "CIBSE TM52:2013 6.1.2, worked by hand at a running mean of 16 °C"}
	most := c.TM52MaxC(16, c.CategoryII)
	tm.add(recomputed, 1e-9, 27.08, most, "T_max, category II (°C)")
	var sum c.TM52
	temps := []float64{26.2, 27.0, 27.6, 28.3, 29.4, 30.6, 29.9, 28.6, 27.4}
	for i, want := range []float64{-1, 0, 1, 1, 2, 4, 3, 2, 0} {
		tm.add(recomputed, 0, want, c.TM52ExcessK(temps[i], most), "rounded excess at %g °C (K)", temps[i])
		sum.Add(1, true, 1, temps[i], most)
	}
	r := sum.Result()
	tm.add(recomputed, 1e-9, 6, r.ExceededH, "hours of 1 K and more")
	tm.add(recomputed, 1e-9, 13, r.WorstDayKh, "weighted exceedance of the day (K·h)")
	tm.add(recomputed, 0, 4, r.MaxExcessK, "greatest excess (K)")
	home := group{area: area, source: "CIBSE TM59:2017 criterion b: 1 % of 3285 night hours"}
	pass := func(h float64) float64 {
		if c.TM59BedroomOK(h, 3285) {
			return 1
		}
		return 0
	}
	home.add(printed, 0, 1, pass(32), "32 hours pass (1 yes)")
	home.add(printed, 0, 0, pass(33), "33 hours pass (0 no)")
	h := group{area: area, source: "ISO 7730:2005 Annex H and EN 15251:2007 Annex F, limit 26 °C, optimum 24.5 °C"}
	wf, kh := 0.0, 0.0
	for _, x := range [][2]float64{{25.5, 0}, {26.0, 1}, {26.5, 1.3333}, {27.0, 1.6667}, {28.0, 2.3333}} {
		w := c.WeightByTemperature(x[0], 26, 24.5)
		h.add(recomputed, 5e-5, x[1], w, "method B weight at %g °C", x[0])
		if x[0] > 26 {
			wf += w
		}
		kh += c.DegreesOver(x[0], 26)
	}
	h.add(recomputed, 5e-5, 5.3333, wf, "method B, hours beyond the limit")
	h.add(recomputed, 1e-9, 3.5, kh, "degree-hours (K·h)")
	weighted, ppd := 0.0, 0.0
	for _, v := range []float64{0.2, 0.5, 0.6, 0.8, 1.0} {
		weighted += c.WeightByPPD(v, 0.5)
		ppd += c.PPD(v)
	}
	h.add(recomputed, 1e-3, 5.5903, weighted, "method C, votes 0.2, 0.5, 0.6, 0.8, 1.0, limit 0.5")
	h.add(recomputed, 1e-3, 14.643, ppd/5, "method D (%%)")
	h.add(recomputed, 1e-2, 73.216, ppd, "method E (%%·h)")
	return []group{tm, home, h}
}
