package freshair

import (
	"math"
	"os"
	"regexp"
	"strconv"
	"testing"
)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: %v, want %v within %v", what, got, want, tol)
	}
}

// Arithmetic on the published equation (ASHRAE Fundamentals ch. 16 eq. 18):
// what a wrong outdoor level does to a decay from 1400 to 780 ppm in half an
// hour, the two readings taken at their ends.
func TestOutdoorErrorOfADecay(t *testing.T) {
	near(t, "two points", math.Log(980.0/360)/0.5, 2.002897, 1e-6)
	for off, want := range map[float64]float64{-30: 1.900, -20: 1.932, 0: 2.003, 20: 2.073, 30: 2.112} {
		// A third reading on the line between them leaves the slope as it is.
		co := 420 + off
		mid := co + math.Sqrt((1400-co)*(780-co))
		f, err := FitDecay([]float64{0, 0.25, 0.5}, []float64{1400, mid, 780}, co)
		if err != nil {
			t.Fatal(err)
		}
		// The table is printed for the clean pair 1400 and 780.522.
		near(t, "outdoor level off by "+strconv.Itoa(int(off)), f.AirChangePerH, want, 0.004)
	}
}

// Batterman 2017, Int. J. Environ. Res. Public Health 14:145, eq. 16, as quoted
// in public code; the levels are arithmetic on it.
func TestTransient(t *testing.T) {
	s := batterman()
	end, means := s.Follow(500, []float64{1.5})
	for step, want := range map[int]float64{6: 457.789, 18: 816.245, 30: 702.321, 42: 482.994} {
		near(t, "after step "+strconv.Itoa(step), end[step-1], want, 1e-3)
	}
	s.PPM = means
	f, err := s.Fit()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "fitted", f.AirChangePerH[0], 1.5, 1e-6)
	near(t, "start", f.StartPPM, 500, 1e-3)
}

func batterman() *Spell {
	s := &Spell{StepH: 5.0 / 60, VolumeM3: 200, Regimes: 1}
	for i, n := range []int{6, 12, 12, 12} {
		for range n {
			s.GenerationLs = append(s.GenerationLs, 0.0052*[]float64{0, 8, 4, 0}[i])
			s.OutdoorPPM, s.Regime = append(s.OutdoorPPM, 420), append(s.Regime, 0)
		}
	}
	return s
}

// How far the rate moves when people give off more, or outdoor air holds more,
// must be what a fit with those values finds.
func TestTransientSensitivity(t *testing.T) {
	s := batterman()
	_, s.PPM = s.Follow(500, []float64{1.5})
	f, err := s.Fit()
	if err != nil {
		t.Fatal(err)
	}
	moved := *s
	moved.GenerationLs = make([]float64, len(s.GenerationLs))
	for i, g := range s.GenerationLs {
		moved.GenerationLs[i] = g * 1.01
	}
	g, err := moved.Fit()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "by generation", f.PerLogGeneration[0], math.Log(g.AirChangePerH[0]/1.5)/math.Log(1.01), 0.02)
	moved = *s
	moved.OutdoorPPM = make([]float64, len(s.OutdoorPPM))
	for i, c := range s.OutdoorPPM {
		moved.OutdoorPPM[i] = c + 1
	}
	o, err := moved.Fit()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "by outdoor level", f.PerOutdoorPPM[0], math.Log(o.AirChangePerH[0]/1.5), 0.02*math.Abs(f.PerOutdoorPPM[0]))
	if !(f.PerLogGeneration[0] > 0 && f.PerOutdoorPPM[0] > 0) {
		t.Errorf("signs: %+v", f)
	}
}

// Arithmetic on the published balance (ASHRAE Fundamentals ch. 16 eq. 16 to
// 22): 200 m3, 10 people of 0.0052 L/s, 60 L/s of outdoor air of 420 ppm. The
// levels are those printed with it, and a fit to the means of the steps between
// them, taken from the closed form, must give 1.08 per hour back.
func TestBuildUpGivesTheRateBack(t *testing.T) {
	b := Balance{VolumeM3: 200, FlowLs: 60, GenerationLs: 0.052, OutdoorPPM: 420}
	const stepH = 1.0 / 12
	s := &Spell{StepH: stepH, VolumeM3: 200, Regimes: 1}
	for i := range 36 {
		t0, t1 := float64(i)*stepH, float64(i+1)*stepH
		a := 1.08
		s.PPM = append(s.PPM, 1286.667+(420-1286.667)*(math.Exp(-a*t0)-math.Exp(-a*t1))/(a*stepH))
		s.GenerationLs, s.OutdoorPPM, s.Regime = append(s.GenerationLs, 0.052), append(s.OutdoorPPM, 420), append(s.Regime, 0)
	}
	end, _ := s.Follow(420, []float64{b.AirChangePerH()})
	for step, want := range map[int]float64{6: 781.618, 12: 992.351, 24: 1186.718, 36: 1252.725} {
		near(t, "level", end[step-1], want, 1e-3)
	}
	f, err := s.Fit()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "rate", f.AirChangePerH[0], 1.08, 1e-4)
}

// AR(1): n (1-r)/(1+r) independent readings, arithmetic on the published
// formula (a general result of time series, from memory).
func TestIndependentReadings(t *testing.T) {
	near(t, "100 at 0.8", independent(100, 0.8), 11.111, 1e-3)
	near(t, "1000 at 0.9", independent(1000, 0.9), 52.632, 1e-3)
	near(t, "alternating", independent(100, -0.5), 100, 0)
}

// Persily & de Jonge 2017, Indoor Air 27:868, Table 4 as printed in two public
// copies: basal metabolic rate and L/s per person at 0 °C for 1.0, 1.2, 1.4, 1.6
// and 2.0 met. The rows name the middle of the age group; 16 to below 21 is by
// the equation of 18 to 30, as in the paper.
func TestPersonCO2(t *testing.T) {
	met := []float64{1, 1.2, 1.4, 1.6, 2}
	for _, row := range []struct {
		sex         Sex
		ageY, kg    float64
		basal       float64
		litresPerS  [5]float64
		description string
	}{
		{Male, 0.5, 8.0, 1.86, [5]float64{.0009, .0011, .0013, .0014, .0018}, "boys below 1"},
		{Male, 2, 12.8, 3.05, [5]float64{.0015, .0018, .0021, .0024, .0030}, "boys 1 to 3"},
		{Male, 4, 18.8, 3.90, [5]float64{.0019, .0023, .0026, .0030, .0038}, "boys 3 to 6"},
		{Male, 8, 31.9, 5.14, [5]float64{.0025, .0030, .0035, .0040, .0050}, "boys 6 to 11"},
		{Male, 13, 57.6, 7.02, [5]float64{.0034, .0041, .0048, .0054, .0068}, "boys 11 to 16"},
		{Male, 19, 77.3, 7.77, [5]float64{.0037, .0045, .0053, .0060, .0075}, "men 16 to 21"},
		{Male, 25, 84.9, 8.24, [5]float64{.0039, .0048, .0056, .0064, .0080}, "men 21 to 30"},
		{Male, 35, 87.0, 7.83, [5]float64{.0037, .0046, .0053, .0061, .0076}, "men 30 to 40"},
		{Male, 45, 90.5, 8.00, [5]float64{.0038, .0046, .0054, .0062, .0077}, "men 40 to 50"},
		{Male, 55, 89.5, 7.95, [5]float64{.0038, .0046, .0054, .0062, .0077}, "men 50 to 60"},
		{Male, 65, 89.5, 6.84, [5]float64{.0033, .0040, .0046, .0053, .0066}, "men 60 to 70"},
		{Female, 0.5, 7.7, 1.75, [5]float64{.0008, .0010, .0012, .0014, .0017}, "girls below 1"},
		{Female, 2, 12.3, 2.88, [5]float64{.0014, .0017, .0020, .0022, .0028}, "girls 1 to 3"},
		{Female, 4, 18.3, 3.59, [5]float64{.0017, .0021, .0024, .0028, .0035}, "girls 3 to 6"},
		{Female, 8, 31.7, 4.73, [5]float64{.0023, .0027, .0032, .0037, .0046}, "girls 6 to 11"},
		{Female, 13, 55.9, 6.03, [5]float64{.0029, .0035, .0041, .0047, .0058}, "girls 11 to 16"},
		{Female, 19, 65.9, 6.12, [5]float64{.0029, .0036, .0042, .0047, .0059}, "women 16 to 21"},
		{Female, 25, 71.9, 6.49, [5]float64{.0031, .0038, .0044, .0050, .0063}, "women 21 to 30"},
		{Female, 35, 74.8, 6.08, [5]float64{.0029, .0035, .0041, .0047, .0059}, "women 30 to 40"},
		{Female, 45, 77.1, 6.16, [5]float64{.0029, .0036, .0042, .0048, .0060}, "women 40 to 50"},
		{Female, 55, 77.5, 6.17, [5]float64{.0030, .0036, .0042, .0048, .0060}, "women 50 to 60"},
		{Female, 65, 76.8, 5.67, [5]float64{.0027, .0033, .0038, .0044, .0055}, "women 60 to 70"},
	} {
		basal := BasalMetabolicRate(row.sex, row.ageY, row.kg)
		near(t, row.description+": basal rate", basal, row.basal, 0.0103)
		for k, want := range row.litresPerS {
			// Printed to 0.0001; some rows are cut off instead of rounded.
			near(t, row.description, PersonCO2Ls(basal, met[k], 0, 101.325), want, 0.0001)
		}
	}
	near(t, "at 20 °C", PersonCO2Ls(1, 1, 20, 101.325)/PersonCO2Ls(1, 1, 0, 101.325), 1.0732, 1e-4)
	// The default of the settings: 30 to 40 years, half of them women, 20 °C.
	half := func(met float64) float64 {
		return (PersonCO2Ls(BasalMetabolicRate(Male, 35, 87), met, 20, 101.325) + PersonCO2Ls(BasalMetabolicRate(Female, 35, 74.8), met, 20, 101.325)) / 2
	}
	near(t, "office, 1.2 met", half(1.2), 0.00433, 5e-6)
	near(t, "office, 1.4 met", half(1.4), 0.00505, 5e-6)
	near(t, "office, 1.5 met", half(1.5), 0.00541, 5e-6)
	preset, err := os.ReadFile("../../configs/criteria/presets/en16798-1-ii.yaml")
	if err != nil {
		t.Fatal(err)
	}
	m := regexp.MustCompile(`co2_per_person_l_s, value: ([0-9.]+)`).FindSubmatch(preset)
	if m == nil {
		t.Fatal("the settings hold no CO2 per person")
	}
	set, _ := strconv.ParseFloat(string(m[1]), 64)
	near(t, "the default", set, half(1.4), 5e-6)
}

// EN 16798-1:2019 as printed in public texts: 20 L/h of CO2 per person and the
// limits above outdoors give about the rates of method 1; an office of category
// II, low polluting, 10 m2 per person.
func TestENRates(t *testing.T) {
	for limit, want := range map[float64]float64{550: 10.10, 800: 6.94, 1350: 4.12} {
		near(t, "method 2", ENMethod2LsPerson(20.0/3600, limit, 1), want, 0.005)
	}
	near(t, "office", ENMethod1Ls(1, 10, "II", "low"), 14, 1e-12)
	near(t, "office per m2", ENMethod1Ls(1, 10, "II", "low")/10, 1.4, 1e-12)
	near(t, "least", ENMethod1Ls(10, 1, "IV", "very-low"), 40, 1e-12)
}

// ASHRAE 62.1 Table 6-1: the combined rate printed beside each row must come
// out of its parts at the default number of people (three rows from memory).
func TestASHRAERates(t *testing.T) {
	printed := map[string]float64{"office": 8.5, "classroom-5-8": 7.4, "classroom-9-up": 6.7, "lecture-classroom": 4.3, "computer-lab": 7.4,
		"library": 8.5, "meeting": 3.1, "reception": 3.5, "dining": 5.1, "music": 5.9}
	if len(printed) != len(ASHRAE621) {
		t.Fatalf("%d uses, %d printed", len(ASHRAE621), len(printed))
	}
	for use, want := range printed {
		r := ASHRAE621[use]
		near(t, use, math.Round(r.Ls(r.PeoplePer100M2, 100, 1)/r.PeoplePer100M2*10)/10, want, 1e-9)
	}
	near(t, "office of 12", ASHRAE621["office"].Ls(12, 200, 1), 90, 1e-9)
	near(t, "office of 12, warm air from above", ASHRAE621["office"].Ls(12, 200, 0.8), 112.5, 1e-9)
	// The informative appendix: 0.31 L/min and 7.5 L/s per person, "about 700
	// ppm" (from memory).
	near(t, "about 700 ppm", 0.31/60*1e6/7.5, 688.9, 0.05)
}

// Rudnick & Milton 2003, Indoor Air 13:237, and the steady form of Wells and
// Riley as quoted in public texts: the fraction must lead to their results. The
// program itself gives no such probability.
func TestRebreathed(t *testing.T) {
	f := RebreathedFraction(1000, 400)
	near(t, "1000 ppm", f, 0.0157895, 1e-7)
	near(t, "Rudnick & Milton", 1-math.Exp(-f*1*100*8/30), 0.343644, 1e-6)
	near(t, "380 ppm above", RebreathedFraction(780, 400), 0.01, 1e-12)
	if RebreathedFraction(390, 400) != 0 {
		t.Error("below outdoors")
	}
	// One person breathing 0.5 m3/h in a room of 300 m3/h in its steady state.
	b := Balance{VolumeM3: 100, FlowLs: 300 / 3.6, GenerationLs: 0.5 / 3.6 * ExhaledPPM / 1e6, OutdoorPPM: 420}
	near(t, "Wells & Riley", 1-math.Exp(-RebreathedFraction(b.SteadyPPM(), 420)*10*8), 0.124827, 1e-6)
}

// Interval of the median by order statistics: a binomial of one half, printed in
// any table; 6 values need both ends (1/64 each), of 10 the second from each end
// (11/1024), of 20 the sixth (0.0207).
func TestMedianInterval(t *testing.T) {
	for n, want := range map[int]int{6: 0, 8: 0, 9: 1, 10: 1, 20: 5} {
		v := make([]float64, n)
		for i := range v {
			v[i] = float64(i)
		}
		if low, high := MedianInterval(v, 0); low != float64(want) || high != float64(n-1-want) {
			t.Errorf("%d: %v to %v, want %d from each end", n, low, high, want)
		}
	}
	// Three values: Student's t of 2 degrees of freedom is 4.303.
	low, high := MedianInterval([]float64{-1, 0, 1}, 0)
	near(t, "three", high, 4.303/math.Sqrt(3), 1e-3)
	near(t, "three", low, -4.303/math.Sqrt(3), 1e-3)
}
