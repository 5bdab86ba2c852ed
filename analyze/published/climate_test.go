package published

import (
	"encoding/csv"
	"os"
	"strconv"

	"sashlog/analyze/climate"
	"sashlog/analyze/votes"
)

func climateChecks() []group {
	const area = "What a climate offers"
	h := group{area: area, source: "Axley & Emmerich 2002; Emmerich, Polidoro & Axley 2011, heat balance (equations from memory, worked by hand)"}
	w := climate.HeatBalance{GainsWm2: 30, LossWm2K: 0.8, MinAirChangePerH: 0.5, MaxAirChangePerH: 10, HeightM: 3, HeatingC: 20, CoolingC: 26, DewPointMaxC: 17}
	h.add(arithmetic, 5e-5, -3.0238, w.BalancePointC(), "balance point (°C)")
	for _, r := range [][2]float64{{18, 2.9324}, {22, 6.6600}, {24, 14.1153}} {
		h.add(arithmetic, 5e-5, r[1], w.RequiredAirChangePerH(r[0]), "air change asked for at %g °C (1/h)", r[0])
	}
	h.add(arithmetic, 1e-6, 6.036, 6*w.PerAirChangeWm2K(), "night, 6 K cooler (W/m² per air change)")
	h.add(arithmetic, 5e-4, 4.829, w.StorageCreditWm2PerAirChange(6, 8, 10), "stored 8 h, used 10 h")
	n := group{area: area, source: "Artmann, Manz & Heiselberg 2007, Applied Energy 84:187, climatic cooling potential"}
	for i, want := range []float64{27.0, 26.9148, 26.6651, 26.2678, 25.75, 25.1470, 24.5, 23.8530, 23.25, 22.7322, 22.3349, 22.0852, 22.0} {
		n.add(memory, 5e-5, want, climate.NightBuildingC(float64(19+i)), "building temperature at %d h (°C)", (19+i)%24)
	}
	for _, r := range []struct {
		c    float64
		n    int
		want float64
	}{{18, 13, 84.5}, {18, 12, 80.5}, {20, 13, 49.348}, {23, 13, 14.848}} {
		list := make([]float64, r.n)
		for i := range list {
			list[i] = r.c
		}
		n.add(memory, 5e-4, r.want, climate.ClimaticCoolingPotentialKh(list, 3), "night of %g °C, %d samples (K·h)", r.c, r.n)
	}
	n.add(memory, 1e-9, 400, 80*6*2.5*1.2*1000/3600, "80 K·h at 6 air changes, 2.5 m (Wh/m²)")
	return []group{h, n}
}

func voteChecks() []group {
	const area = "Votes of occupants"
	g := group{area: area, source: "1210 votes of a published field study (testdata/real/comfort-votes) against R 4.2.2: lm, Fieller's interval, t.test"}
	file, err := os.Open("../../testdata/real/comfort-votes/Study_3_excerpt.csv")
	if err != nil {
		panic(err)
	}
	defer file.Close()
	rows, err := csv.NewReader(file).ReadAll()
	if err != nil {
		panic(err)
	}
	at := map[string]int{}
	for i, name := range rows[0] {
		at[name] = i
	}
	var x, y []float64
	for _, r := range rows[1:] {
		t, err1 := strconv.ParseFloat(r[at["Temperature_Operative [C]"]], 64)
		v, err2 := strconv.ParseFloat(r[at["TSV"]], 64)
		if err1 == nil && err2 == nil && t < 100 {
			x, y = append(x, t), append(y, v)
		}
	}
	fit, griffiths := votes.Regress(x, y), votes.GriffithsNeutral(x, y)
	g.add(reference, 1e-7, 0.3536930089, fit.SlopePerK, "slope (votes per K)")
	g.add(reference, 1e-7, 0.3181447476, fit.SlopeLow, "slope, 95 %% from")
	g.add(reference, 1e-7, 0.3892412703, fit.SlopeHigh, "slope, 95 %% to")
	g.add(reference, 1e-6, 29.69814225, fit.NeutralC, "neutral temperature (°C)")
	g.add(reference, 1e-6, 29.49197272, fit.NeutralLowC, "neutral temperature, 95 %% from")
	g.add(reference, 1e-6, 29.88867003, fit.NeutralHiC, "neutral temperature, 95 %% to")
	g.add(reference, 1e-6, 29.92240496, griffiths.MeanC, "neutral temperature by Griffiths (°C)")
	e := group{area: area, source: "Exact intervals against R 4.2.2: binom.test"}
	s := votes.ShareOf(37, 50)
	e.add(reference, 1e-7, 0.59655232, s.Low, "37 of 50, 95 %% from")
	e.add(reference, 1e-7, 0.85369942, s.High, "37 of 50, 95 %% to")
	e.add(reference, 1e-7, 0.26464847, votes.ShareOf(0, 12).High, "0 of 12, 95 %% to")
	return []group{g, e}
}
