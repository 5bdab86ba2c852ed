package published

import (
	"math"

	f "sashlog/analyze/freshair"
)

func freshAirChecks() []group {
	const area = "Fresh air"
	d := group{area: area, source: "ASHRAE Fundamentals ch. 16 eq. 16 to 22, decay and build-up"}
	if fit, err := f.FitDecay([]float64{0, 0.25, 0.5, 0.75, 1}, []float64{1400, 1014.400, 780.522, 638.668, 552.629}, 420); err == nil {
		d.add(arithmetic, 1e-5, 2, fit.AirChangePerH, "decay from 1400 ppm, 420 outdoors (1/h)")
	}
	for _, r := range [][2]float64{{-30, 1.900}, {-20, 1.932}, {20, 2.073}, {30, 2.112}} {
		co := 420 + r[0]
		mid := co + math.Sqrt((1400-co)*(780-co))
		if fit, err := f.FitDecay([]float64{0, 0.25, 0.5}, []float64{1400, mid, 780}, co); err == nil {
			d.add(arithmetic, 0.004, r[1], fit.AirChangePerH, "the same with outdoors wrong by %+g ppm (1/h)", r[0])
		}
	}
	b := f.Balance{VolumeM3: 200, FlowLs: 60, GenerationLs: 0.052, OutdoorPPM: 420}
	d.add(arithmetic, 0.001, 1286.667, b.SteadyPPM(), "200 m³, 60 L/s, 10 people: steady level (ppm)")
	for _, r := range [][2]float64{{0.5, 781.618}, {1, 992.351}, {2, 1186.718}, {3, 1252.725}} {
		d.add(arithmetic, 0.001, r[1], b.After(r[0], 420), "after %g h (ppm)", r[0])
	}
	cdc := group{area: area, source: "CDC, MMWR 1994;43(RR-13) Table S3-1: a decay through the printed minutes gives the air changes back"}
	for _, r := range [][4]float64{{1, 138, 276, 414}, {2, 69, 138, 207}, {4, 35, 69, 104}, {6, 23, 46, 69}, {8, 17, 35, 52}, {10, 14, 28, 41}, {12, 12, 23, 35}, {15, 9, 18, 28}, {20, 7, 14, 21}, {50, 3, 6, 8}} {
		const outdoor, start = 400.0, 1e6
		fit, err := f.FitDecay([]float64{0, r[1] / 60, r[2] / 60, r[3] / 60}, []float64{outdoor + start, outdoor + start/10, outdoor + start/100, outdoor + start/1000}, outdoor)
		if err == nil {
			cdc.add(printed, r[0]*0.6/r[3]+0.002*r[0], r[0], fit.AirChangePerH, "%g, %g, %g min for 90, 99, 99.9 %% (1/h)", r[1], r[2], r[3])
		}
	}
	t := group{area: area, source: "Batterman 2017, IJERPH 14:145 eq. 16, levels with people coming and going"}
	s := &f.Spell{StepH: 5.0 / 60, VolumeM3: 200, Regimes: 1}
	for i, n := range []int{6, 12, 12, 12} {
		for range n {
			s.GenerationLs = append(s.GenerationLs, 0.0052*[]float64{0, 8, 4, 0}[i])
			s.OutdoorPPM, s.Regime = append(s.OutdoorPPM, 420), append(s.Regime, 0)
		}
	}
	end, means := s.Follow(500, []float64{1.5})
	for _, r := range []struct {
		step int
		want float64
	}{{6, 457.789}, {18, 816.245}, {30, 702.321}, {42, 482.994}} {
		t.add(arithmetic, 0.001, r.want, end[r.step-1], "after step %d (ppm)", r.step)
	}
	s.PPM = means
	if fit, err := s.Fit(); err == nil {
		t.add(arithmetic, 1e-6, 1.5, fit.AirChangePerH[0], "rate fitted to them (1/h)")
	}
	p := group{area: area, source: "Persily & de Jonge 2017, Indoor Air 27:868 Table 4, CO2 per person at 0 °C"}
	for _, r := range []struct {
		who               string
		sex               f.Sex
		age, kg, basal    float64
		at10, at12, at20m float64
	}{
		{"men 21 to 30", f.Male, 25, 84.9, 8.24, .0039, .0048, .0080}, {"men 30 to 40", f.Male, 35, 87.0, 7.83, .0037, .0046, .0076}, {"men 40 to 50", f.Male, 45, 90.5, 8.00, .0038, .0046, .0077},
		{"women 21 to 30", f.Female, 25, 71.9, 6.49, .0031, .0038, .0063}, {"women 30 to 40", f.Female, 35, 74.8, 6.08, .0029, .0035, .0059}, {"women 40 to 50", f.Female, 45, 77.1, 6.16, .0029, .0036, .0060},
		{"boys 6 to 11", f.Male, 8, 31.9, 5.14, .0025, .0030, .0050}, {"girls 6 to 11", f.Female, 8, 31.7, 4.73, .0023, .0027, .0046},
	} {
		basal := f.BasalMetabolicRate(r.sex, r.age, r.kg)
		p.add(printed, 0.0103, r.basal, basal, "%s: basal metabolic rate (MJ/day; coefficients from memory)", r.who)
		p.add(printed, 0.0001, r.at10, f.PersonCO2Ls(basal, 1.0, 0, 101.325), "%s, 1.0 met (L/s)", r.who)
		p.add(printed, 0.0001, r.at12, f.PersonCO2Ls(basal, 1.2, 0, 101.325), "%s, 1.2 met (L/s)", r.who)
		p.add(printed, 0.0001, r.at20m, f.PersonCO2Ls(basal, 2.0, 0, 101.325), "%s, 2.0 met (L/s)", r.who)
	}
	en := group{area: area, source: "EN 16798-1:2019, rates"}
	for _, r := range [][2]float64{{550, 10.10}, {800, 6.94}, {1350, 4.12}} {
		en.add(recomputed, 0.005, r[1], f.ENMethod2LsPerson(20.0/3600, r[0], 1), "method 2: 20 L/h and %g ppm above outdoors (L/s person)", r[0])
	}
	en.add(recomputed, 1e-9, 14, f.ENMethod1Ls(1, 10, "II", "low"), "method 1: category II, low polluting, 10 m² per person (L/s person)")
	as := group{area: area, source: "ASHRAE 62.1 Table 6-1: combined rate printed beside each row (L/s person)"}
	for _, r := range []struct {
		use   string
		want  float64
		known string
	}{
		{"office", 8.5, printed}, {"classroom-5-8", 7.4, printed}, {"classroom-9-up", 6.7, printed}, {"lecture-classroom", 4.3, printed}, {"computer-lab", 7.4, printed},
		{"library", 8.5, memory}, {"meeting", 3.1, memory}, {"reception", 3.5, memory}, {"dining", 5.1, printed}, {"music", 5.9, printed},
	} {
		x := f.ASHRAE621[r.use]
		as.add(r.known, 0.051, r.want, x.Ls(x.PeoplePer100M2, 100, 1)/x.PeoplePer100M2, "%s", r.use)
	}
	rb := group{area: area, source: "Rudnick & Milton 2003, Indoor Air 13:237; Wells–Riley"}
	fr := f.RebreathedFraction(1000, 400)
	rb.add(recomputed, 1e-7, 0.0157895, fr, "rebreathed fraction at 1000 ppm, 400 outdoors")
	rb.add(recomputed, 1e-6, 0.343644, 1-math.Exp(-fr*100*8/30), "their probability from it: 30 people, 1 infector, 100 per hour, 8 h (the program gives none)")
	return []group{d, cdc, t, p, en, as, rb}
}
