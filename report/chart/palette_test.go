package chart

import (
	"image/color"
	"math"
	"testing"
)

// Matrices of full protanopia and deuteranopia on linear RGB: Machado,
// Oliveira and Fernandes, "A physiologically-based model for simulation of
// color vision deficiency", IEEE Transactions on Visualization and Computer
// Graphics 15 (2009), pages 1291 to 1298, severity 1.0.
var blindness = map[string][3][3]float64{
	"protanopia": {
		{0.152286, 1.052583, -0.204868},
		{0.114503, 0.786281, 0.099216},
		{-0.003882, -0.048116, 1.051998}},
	"deuteranopia": {
		{0.367322, 0.860646, -0.227968},
		{0.280085, 0.672501, 0.047413},
		{-0.011820, 0.042940, 0.968881}},
	"full colour vision": {{1, 0, 0}, {0, 1, 0}, {0, 0, 1}},
}

// lab is CIE 1976 L*a*b* (CIE 15) of an sRGB colour seen through a matrix,
// white point D65.
func lab(c color.RGBA, m [3][3]float64) [3]float64 {
	in := [3]float64{linear(c.R), linear(c.G), linear(c.B)}
	var rgb [3]float64
	for i := range 3 {
		for j := range 3 {
			rgb[i] += m[i][j] * in[j]
		}
		rgb[i] = math.Min(1, math.Max(0, rgb[i]))
	}
	f := func(v float64) float64 {
		if v > 216.0/24389 {
			return math.Cbrt(v)
		}
		return (24389.0/27*v + 16) / 116
	}
	x := f((0.4124564*rgb[0] + 0.3575761*rgb[1] + 0.1804375*rgb[2]) / 0.95047)
	y := f(0.2126729*rgb[0] + 0.7151522*rgb[1] + 0.0721750*rgb[2])
	z := f((0.0193339*rgb[0] + 0.1191920*rgb[1] + 0.9503041*rgb[2]) / 1.08883)
	return [3]float64{116*y - 16, 500 * (x - y), 200 * (y - z)}
}

func distance(a, b [3]float64) float64 {
	return math.Sqrt((a[0]-b[0])*(a[0]-b[0]) + (a[1]-b[1])*(a[1]-b[1]) + (a[2]-b[2])*(a[2]-b[2]))
}

// TestColourArithmetic holds the measures themselves against known values:
// black on white contrasts 21:1 (Web Content Accessibility Guidelines 2.2,
// "contrast ratio"), and sRGB red is L* 53.24, a* 80.09, b* 67.20 (from memory).
func TestColourArithmetic(t *testing.T) {
	if got := contrast(rgb(0), rgb(0xFFFFFF)); math.Abs(got-21) > 1e-9 {
		t.Errorf("contrast of black on white %v, want 21", got)
	}
	if d := distance(lab(rgb(0xFF0000), blindness["full colour vision"]), [3]float64{53.24, 80.09, 67.20}); d > 0.1 {
		t.Errorf("red is off by %v", d)
	}
	for name, m := range blindness {
		for _, row := range m {
			if sum := row[0] + row[1] + row[2]; math.Abs(sum-1) > 2e-6 {
				t.Errorf("%s: row %v sums to %v: white would not stay white", name, row, sum)
			}
		}
	}
}

func contrast(a, b color.RGBA) float64 {
	la, lb := luminance(a), luminance(b)
	return (math.Max(la, lb) + 0.05) / (math.Min(la, lb) + 0.05)
}

// TestTextContrast: 4.5:1 is level AA for small text (Web Content
// Accessibility Guidelines 2.2, success criterion 1.4.3).
func TestTextContrast(t *testing.T) {
	for name, c := range map[string]color.RGBA{"text": inkText, "faint text": inkFaint} {
		if got := contrast(c, rgb(0xFFFFFF)); got < 4.5 {
			t.Errorf("%s: contrast %.2f", name, got)
		}
	}
}

// TestNeighboursDiffer: in a stack, two classes on top of each other differ in
// luminance by 0.08 (a grey print) or in hatch; and no two classes of one
// legend come closer than 12 in L*a*b*, under any colour vision, unless their
// hatch tells them apart. A distance of about 2 is just noticeable side by
// side (common practice); 12 is asked for small cells seen apart.
func TestNeighboursDiffer(t *testing.T) {
	for name, classes := range map[string][]Class{
		"outcomes": Outcomes(), "running states": RunningStates(), "sides": {TooWarm, TooCool},
	} {
		for i, a := range classes {
			for j, b := range classes[:i] {
				la, lb := a.Look(), b.Look()
				if j == i-1 && la.Hatch == lb.Hatch {
					if d := math.Abs(luminance(la.Fill) - luminance(lb.Fill)); d < 0.08 {
						t.Errorf("%s: %q next to %q: luminance differs by %.3f only", name, la.Label, lb.Label, d)
					}
				}
				if la.Hatch != lb.Hatch {
					continue
				}
				for vision, m := range blindness {
					if d := distance(lab(la.Fill, m), lab(lb.Fill, m)); d < 12 {
						t.Errorf("%s: %q and %q: distance %.1f with %s", name, la.Label, lb.Label, d, vision)
					}
				}
			}
		}
	}
}

// TestAchievedFromMissedInGrey: cells of the carpet carry no hatch, and the two
// classes that matter most must differ in a grey print: by 15 in L*, a step of
// a grey scale of seven.
func TestAchievedFromMissedInGrey(t *testing.T) {
	grey := func(c Class) float64 { return lab(c.Look().Fill, blindness["full colour vision"])[0] }
	if d := math.Abs(grey(AchievedOK) - grey(Missed)); d < 15 {
		t.Errorf("achieved and missed differ by %.1f in L*", d)
	}
	if d := math.Abs(grey(Open) - grey(Mech)); d < 15 {
		t.Errorf("open and mechanical differ by %.1f in L*", d)
	}
}

// TestCarpetColoursDiffer: cells of the carpet are too small for a hatch, so
// there the fills alone must differ, by 9 under any colour vision.
func TestCarpetColoursDiffer(t *testing.T) {
	for _, classes := range [][]Class{append(Outcomes(), Unoccupied), append(RunningStates(), Unoccupied)} {
		for i, a := range classes {
			for _, b := range classes[:i] {
				for vision, m := range blindness {
					fa, fb := a.Look().Fill, b.Look().Fill
					// Missing knowledge is hatched in the carpet too.
					if a == Unjudged || b == Unjudged || a == Unknown || b == Unknown {
						continue
					}
					if d := distance(lab(fa, m), lab(fb, m)); d < 9 {
						t.Errorf("%q and %q: distance %.1f with %s", a.Label(), b.Label(), d, vision)
					}
				}
			}
		}
	}
}
