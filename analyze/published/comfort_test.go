package published

import c "sashlog/analyze/comfort"

func comfortChecks() []group {
	const area = "Thermal comfort by heat balance"
	d1 := group{area: area, source: "ISO 7730:2005 Table D.1: predicted mean vote and dissatisfied"}
	for i, r := range [][8]float64{
		{22.0, 22.0, 0.10, 60, 1.2, 0.5, -0.75, 17}, {27.0, 27.0, 0.10, 60, 1.2, 0.5, 0.77, 17}, {27.0, 27.0, 0.30, 60, 1.2, 0.5, 0.44, 9},
		{23.5, 25.5, 0.10, 60, 1.2, 0.5, -0.01, 5}, {23.5, 25.5, 0.30, 60, 1.2, 0.5, -0.55, 11}, {19.0, 19.0, 0.10, 40, 1.2, 1.0, -0.60, 13},
		{23.5, 23.5, 0.10, 40, 1.2, 1.0, 0.36, 8}, {23.5, 23.5, 0.30, 40, 1.2, 1.0, 0.12, 5}, {23.0, 21.0, 0.10, 40, 1.2, 1.0, 0.05, 5},
		{23.0, 21.0, 0.30, 40, 1.2, 1.0, -0.16, 6}, {22.0, 22.0, 0.10, 60, 1.6, 0.5, 0.05, 5}, {27.0, 27.0, 0.10, 60, 1.6, 0.5, 1.17, 34}, {27.0, 27.0, 0.30, 60, 1.6, 0.5, 0.95, 24},
	} {
		x := c.Conditions{AirC: r[0], RadiantC: r[1], AirSpeedMS: r[2], RHPct: r[3], Met: r[4], Clo: r[5]}
		known, note := printed, ""
		if i == 6 {
			known, note = misprint, "; printed as 0.50 and 10, which no implementation gives"
		}
		d1.add(known, 0.02, r[6], c.PMV(x), "PMV row %d: %g/%g °C, %g m/s, %g %%, %g met, %g clo%s", i+1, r[0], r[1], r[2], r[3], r[4], r[5], note)
		d1.add(known, 1, r[7], c.PPD(c.PMV(x)), "PPD row %d (%%)", i+1)
	}
	val := group{area: area, source: "ASHRAE 55-2017 to 2023, validation of PMV (inputs printed, votes recomputed)"}
	for _, r := range [][4]float64{{19.6, 86, 1, -0.477}, {23.9, 66, 1, 0.475}, {25.7, 15, 1, 0.525}, {21.2, 20, 1, -0.476}, {23.6, 67, 0.5, -0.474}, {26.8, 56, 0.5, 0.515}, {27.9, 13, 0.5, 0.499}, {24.7, 16, 0.5, -0.488}} {
		val.add(recomputed, 0.02, r[3], c.PMV(c.Conditions{AirC: r[0], RadiantC: r[0], AirSpeedMS: 0.1, RHPct: r[1], Met: 1.1, Clo: r[2]}), "PMV: %g °C, %g %%, %g clo", r[0], r[1], r[2])
	}
	ppd := group{area: area, source: "ISO 7730:2005 eq. 5: dissatisfied from the vote"}
	for _, r := range [][2]float64{{0, 5}, {0.2, 5.830}, {0.5, 10.225}, {0.7, 15.305}, {1, 26.120}, {2, 76.762}, {3, 99.116}} {
		ppd.add(recomputed, 0.001, r[1], c.PPD(r[0]), "PPD at %g (%%)", r[0])
	}
	return append([]group{d1, val, ppd}, movingAirChecks(area)...)
}

func movingAirChecks(area string) []group {
	a := group{area: area, source: "ASHRAE 55-2017, printed table of SET (form A: editions 2010 to 2020)"}
	b := group{area: area, source: "ASHRAE 55-2023 Table D-1, SET (form B, standing)"}
	for _, r := range [][8]float64{
		{25, 25, 0.15, 50, 1, 0.5, 23.8, 23.8}, {0, 25, 0.15, 50, 1, 0.5, 12.3, 12.1}, {10, 25, 0.15, 50, 1, 0.5, 17.0, 16.8}, {15, 25, 0.15, 50, 1, 0.5, 19.3, 19.2},
		{20, 25, 0.15, 50, 1, 0.5, 21.6, 21.5}, {30, 25, 0.15, 50, 1, 0.5, 26.4, 26.4}, {40, 25, 0.15, 50, 1, 0.5, 34.3, 34.1}, {25, 25, 0.15, 10, 1, 0.5, 23.3, 23.3},
		{25, 25, 0.15, 90, 1, 0.5, 24.9, 24.8}, {25, 25, 0.10, 50, 1, 0.5, 24.0, 24.0}, {25, 25, 0.60, 50, 1, 0.5, 21.4, 21.3}, {25, 25, 1.10, 50, 1, 0.5, 20.3, 20.2},
		{25, 25, 3.00, 50, 1, 0.5, 18.8, 18.7}, {25, 10, 0.15, 50, 1, 0.5, 15.2, 15.3}, {25, 40, 0.15, 50, 1, 0.5, 31.8, 31.6}, {25, 25, 0.15, 50, 1, 0.1, 20.7, 20.7},
		{25, 25, 0.15, 50, 1, 1.0, 27.3, 27.2}, {25, 25, 0.15, 50, 1, 2.0, 32.5, 32.4}, {25, 25, 0.15, 50, 1, 4.0, 37.7, 37.8}, {25, 25, 0.15, 50, 0.8, 0.5, 23.3, 23.3},
		{25, 25, 0.15, 50, 2.0, 0.5, 29.7, 25.9}, {25, 25, 0.15, 50, 4.0, 0.5, 36.0, 30.4},
	} {
		x := c.Conditions{AirC: r[0], RadiantC: r[1], AirSpeedMS: r[2], RHPct: r[3], Met: r[4], Clo: r[5]}
		const what = "SET: %g/%g °C, %g m/s, %g %%, %g met, %g clo"
		a.add(printed, 0.06, r[6], c.SET(x, c.SETOptions{Form: c.SETFormA}), what, r[0], r[1], r[2], r[3], r[4], r[5])
		if r[0] == 40 {
			b.add(misprint, 0.12, r[7], c.SET(x, c.SETOptions{Form: c.SETFormB}), what+"; printed 93.8 °F is 34.33 °C", r[0], r[1], r[2], r[3], r[4], r[5])
			continue
		}
		b.add(printed, 0.12, r[7], c.SET(x, c.SETOptions{Form: c.SETFormB}), what, r[0], r[1], r[2], r[3], r[4], r[5])
	}
	ce := group{area: area, source: "ASHRAE 55-2023 Appendix D, cooling effect of moving air (an open formula library's validation table)"}
	tab := group{area: area, source: "The same through the table the audit uses (bounds: cooling effect 0.07 K, 0.2 K with radiant apart)"}
	tables := map[float64]*c.Table{}
	for _, r := range [][7]float64{
		{25, 25, 0.1, 50, 1, 0.6, 0}, {25, 25, 0.2, 50, 1, 0.6, 0.67}, {25, 25, 0.5, 50, 1, 0.6, 2.17}, {25, 25, 0.8, 50, 1, 0.6, 2.93}, {31, 25, 0.5, 50, 1, 0.6, 1.42},
		{25, 25, 0.5, 20, 1, 0.6, 2.29}, {25, 25, 0.5, 80, 1, 0.6, 2.06}, {25, 25, 0.5, 60, 1.6, 0.6, 3.50}, {20, 20, 1.1, 35, 1, 0.5, 4.84}, {30, 30, 1.1, 35, 1, 0.5, 3.55},
	} {
		x := c.Conditions{AirC: r[0], RadiantC: r[1], AirSpeedMS: r[2], RHPct: r[3], Met: r[4], Clo: r[5]}
		o := c.SETOptions{Form: c.SETFormB}
		const what = "%g/%g °C, %g m/s, %g %%, %g met, %g clo (K)"
		exact, _ := c.CoolingEffectK(x, o)
		ce.add(reference, 0.03, r[6], exact, what, r[0], r[1], r[2], r[3], r[4], r[5])
		if tables[x.Met] == nil {
			tables[x.Met] = c.NewTable(x.Met, o)
		}
		fast, _ := tables[x.Met].CoolingEffectK(x)
		tab.add(reference, 0.1, r[6], fast, what, r[0], r[1], r[2], r[3], r[4], r[5])
	}
	el := group{area: area, source: "ASHRAE 55-2023 Appendix D, votes with moving air (form B, standing)"}
	for _, r := range [][5]float64{{28, 0.8, 1.1, 3.268, -0.222}, {28, 0.3, 1.2, 1.812, 0.439}, {30, 1.2, 1.1, 3.933, 0.220}} {
		x := c.Conditions{AirC: r[0], RadiantC: r[0], AirSpeedMS: r[1], RHPct: 50, Met: r[2], Clo: 0.5}
		got, _ := c.CoolingEffectK(x, c.SETOptions{Form: c.SETFormB})
		el.add(recomputed, 0.01, r[3], got, "cooling effect: %g °C, %g m/s, 50 %%, %g met, 0.5 clo (K)", r[0], r[1], r[2])
		el.add(recomputed, 0.01, r[4], c.PMVElevated(x, c.SETOptions{Form: c.SETFormB}), "vote with moving air, the same")
	}
	lim := group{area: area, source: "ASHRAE 55-2017 5.3.3, air speed without control by the people"}
	for _, r := range [][2]float64{{23, 0.2}, {24, 0.318}, {25, 0.638}, {26, 0.8}} {
		lim.add(memory, 0.001, r[1], c.AirSpeedLimitMS(r[0]), "at %g °C operative (m/s)", r[0])
	}
	dr := group{area: area, source: "ISO 7730:2005 eq. 6, draught rate"}
	for _, r := range [][4]float64{{22, 0.15, 40, 15.429}, {23, 0.20, 40, 20.697}, {20, 0.10, 10, 7.670}, {25, 0.30, 50, 33.112}, {20, 0.05, 40, 0}, {21, 0.5, 60, 100}} {
		dr.add(recomputed, 0.001, r[3], c.DraughtRate(r[0], r[1], r[2]), "%g °C, %g m/s, turbulence %g %% (%%)", r[0], r[1], r[2])
	}
	op := group{area: area, source: "ISO 7726 and ASHRAE 55, operative and radiant temperature"}
	op.add(recomputed, 0.0005, 25.000, c.OperativeISO(26, 24, 0.1), "ISO 7726: 26/24 °C, 0.1 m/s (°C)")
	op.add(recomputed, 0.0005, 25.268, c.OperativeISO(26, 24, 0.3), "ISO 7726: 26/24 °C, 0.3 m/s (°C)")
	op.add(recomputed, 0.0005, 25.200, c.OperativeASHRAE(26, 24, 0.3), "ASHRAE 55: 26/24 °C, 0.3 m/s (°C)")
	op.add(memory, 0.05, 74.8, c.RadiantFromGlobeC(53.2, 30, 0.3, 0.1), "ISO 7726: globe 53.2 °C in air of 30 °C, 0.3 m/s, 100 mm (°C)")
	clo := group{area: area, source: "Schiavon & Lee 2013, clothing from the outdoor temperature at 06:00"}
	for _, r := range [][2]float64{{-10, 1}, {0, 0.818}, {5, 0.636}, {15, 0.5464}, {26, 0.462}, {30, 0.46}} {
		clo.add(memory, 0.003, r[1], c.ClothingClo(r[0]), "%g °C (clo)", r[0])
	}
	return []group{a, b, ce, tab, el, lim, dr, op, clo}
}
