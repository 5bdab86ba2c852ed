package opening

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.7f, want %.7f ± %g", what, got, want, tol)
	}
}

// Check values recomputed from the published equations: de Gids & Phaff 1982;
// Warren & Parkins 1984; ASHRAE Fundamentals ch. 16 eq. 36 to 39; CIBSE AM10
// form of stack and cross flow.
func TestPublishedEquations(t *testing.T) {
	gids := SingleSidedDeGidsPhaff(1, 1.2, 2, 25, 20)
	near(t, "de Gids & Phaff", gids, 0.0935414, 1e-6)
	near(t, "de Gids & Phaff in m³/h", gids*3600, 336.749, 0.001)

	// Mean temperature 293.15 K.
	near(t, "Warren & Parkins stack", StackWarrenParkins(0.61, 1, 1.2, 22.5, 17.5), 0.091112, 1e-6)
	near(t, "Warren & Parkins wind", WindWarrenParkins(1, 2), 0.050, 1e-12)
	near(t, "Warren & Parkins larger", SingleSidedWarrenParkins(0.61, 1, 1.2, 2, 22.5, 17.5), 0.091112, 1e-6)

	wind := WindFlow(0.55, 1, 2)
	near(t, "eq. 37", wind, 1.100, 1e-12)
	stack := StackFlow(0.65, 1, 1.5, 25, 20)
	near(t, "eq. 38", stack, 0.456642, 1e-6)
	near(t, "eq. 38, cooler inside", StackFlow(0.65, 1, 1.5, 20, 25), 0.456642, 1e-6)
	near(t, "eq. 39", DischargeSingle(25, 20), 0.4225, 1e-12)
	near(t, "one opening", StackFlowSingle(1, 1.2, 25, 20), 0.187724, 1e-6)
	near(t, "quadrature", CombineQuadrature(wind, stack), 1.19102, 1e-5)
	// Eq. 36 by hand: 0.65 · 1 · sqrt(2 · 1.2 / 1.2) = 0.919239.
	near(t, "eq. 36", OrificeFlow(0.65, 1, 1.2, 1.2), 0.919239, 1e-6)
	near(t, "eq. 36 outwards", OrificeFlow(0.65, 1, -1.2, 1.2), -0.919239, 1e-6)

	// Mean temperature 295.65 K.
	near(t, "stack, two openings", StackTwoOpenings(0.61, 1, 1, 3, 25, 20), 0.430349, 1e-6)
	near(t, "cross, 1.0", CrossFlow(0.61, 1, 1, 3, 1.0), 1.294005, 1e-6)
	near(t, "cross, 0.75", CrossFlow(0.61, 1, 1, 3, 0.75), 1.120642, 1e-6)
}

// EN 16798-7:2017 6.4.3.5 with coefficients as read in two public
// implementations; the numbers are arithmetic on the equation.
func TestEN16798(t *testing.T) {
	near(t, "density at 1000 m", AirDensityEN16798(1000), 1.0942, 5e-5)
	// Buoyancy governs: sqrt(0.0035·1.2·5) = 0.144914; wind 2 m/s gives 0.0632.
	near(t, "buoyancy", SingleSidedEN16798(1, 1.2, 2, 25, 20, 0), 0.0724569, 1e-6)
	// Wind governs: 8 m/s gives sqrt(0.064) = 0.252982. The sum would be 0.1457.
	near(t, "wind", SingleSidedEN16798(1, 1.2, 8, 25, 20, 0), 0.1264911, 1e-6)
	near(t, "thin air", SingleSidedEN16798(1, 1.2, 8, 25, 20, 1000)/SingleSidedEN16798(1, 1.2, 8, 25, 20, 0), 1.204/1.0942, 1e-4)
	near(t, "cross, wind only", CrossEN16798(1, 2, 1, 3, ENCrossPressure, 20, 20, 0), 0.67*3*math.Sqrt(0.75), 1e-9)
	near(t, "cross, buoyancy only", CrossEN16798(1, 2, 1.2, 0, ENCrossPressure, 25, 20, 0), math.Sqrt(0.021), 1e-9)
	// CEN/TR 16798-8: c(90°) = 0.18954 - 0.9639 + 1.674.
	near(t, "hinged, wide open", HingedShare(90), 0.89964, 1e-9)
	near(t, "hinged, shut", HingedShare(0), 0, 0)
	near(t, "windward in the open", PressureCoefficient(Open, 60), 0.50, 0)
	near(t, "leeward in the open", PressureCoefficient(Open, -61), -0.70, 0)
	near(t, "windward across north", PressureCoefficient(Shielded, 350), 0.05, 0)
	near(t, "leeward, normal", PressureCoefficient(Normal, 180), -0.50, 0)
	// EN 16798-7 roughness, by hand: 0.19 ln(10/0.05); 0.24 ln(16/1) below 16 m.
	near(t, "roughness open", RoughnessFactorEN16798(10, Country), 1.00668, 1e-5)
	near(t, "roughness urban", RoughnessFactorEN16798(5, City), 0.665421, 1e-5)
}

// ASHRAE Fundamentals ch. 24: published Example 1 (10 m/s at a 10 m airport
// mast; 15 m up in a suburb 7.8 m/s) and factors recomputed from Table 1.
func TestWindAt(t *testing.T) {
	near(t, "example 1, printed", WindAt(10, 10, Country, 15, Suburb), 7.8, 0.05)
	near(t, "example 1", WindAt(10, 10, Country, 15, Suburb), 7.8366, 1e-4)
	for _, c := range []struct {
		terrain         Terrain
		at3, at10, at30 float64
	}{
		{City, 0.30139, 0.44842, 0.64436},
		{Suburb, 0.54999, 0.71678, 0.91275},
		{Country, 0.84488, 1, 1.16626},
		{Water, 1.03724, 1.16995, 1.30581},
	} {
		near(t, "factor at 3 m", WindFactor(10, Country, 3, c.terrain), c.at3, 1e-5)
		near(t, "factor at 10 m", WindFactor(10, Country, 10, c.terrain), c.at10, 1e-5)
		near(t, "factor at 30 m", WindFactor(10, Country, 30, c.terrain), c.at30, 1e-5)
	}
}

func TestUndefined(t *testing.T) {
	nan := math.NaN()
	for name, got := range map[string]float64{
		"NaN wind":          SingleSidedEN16798(1, 1, nan, 20, 10, 0),
		"NaN temperature":   SingleSidedEN16798(1, 1, 1, nan, 10, 0),
		"negative area":     SingleSidedDeGidsPhaff(-1, 1, 1, 20, 10),
		"no density":        OrificeFlow(0.6, 1, 1, 0),
		"hinge beyond 90°":  HingedShare(91),
		"unknown terrain":   WindFactor(10, Terrain(9), 10, City),
		"unknown shielding": PressureCoefficient(Shielding(9), 0),
		"NaN larger of two": SingleSidedWarrenParkins(0.61, 1, 1, nan, 20, 10),
		"mast of no height": WindAt(5, 0, Country, 10, City),
	} {
		if !math.IsNaN(got) {
			t.Errorf("%s = %g, want NaN", name, got)
		}
	}
	near(t, "one of two shut", SeriesArea(0, 3), 0, 0)
}

// More drive never gives less flow, and two openings in series pass less than
// the smaller alone.
func TestFlowProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		area := rapid.Float64Range(0.01, 10).Draw(t, "area")
		height := rapid.Float64Range(0.1, 5).Draw(t, "height")
		wind := rapid.Float64Range(0, 15).Draw(t, "wind")
		in := rapid.Float64Range(15, 32).Draw(t, "in")
		drop := rapid.Float64Range(0, 20).Draw(t, "drop")
		more := rapid.Float64Range(0, 5).Draw(t, "more")
		if SingleSidedEN16798(area, height, wind+more, in, in-drop, 0) < SingleSidedEN16798(area, height, wind, in, in-drop, 0) {
			t.Fatal("EN 16798-7: more wind, less flow")
		}
		if SingleSidedDeGidsPhaff(area, height+more, wind, in, in-drop) < SingleSidedDeGidsPhaff(area, height, wind, in, in-drop) {
			t.Fatal("de Gids & Phaff: taller, less flow")
		}
		if s := SeriesArea(area, height); s >= math.Min(area, height) {
			t.Fatalf("two in series pass as %g m²", s)
		}
	})
}
