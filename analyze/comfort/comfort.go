// Package comfort holds the methods that say what is comfortable: PMV and PPD,
// standard effective temperature, adaptive limits, operative ranges, running
// means of the outdoor temperature, long-term indices. Pure functions of
// numbers; which method applies when is decided elsewhere.
//
// Temperatures in °C, air speeds in m/s, relative humidity in per cent,
// metabolic rate in met (58.15 W/m²), clothing in clo (0.155 m²K/W). NaN in
// gives NaN out unless a function says otherwise.
package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// Category is a category of EN 16798-1 or EN 15251, from the strictest.
type Category int

// Categories. CategoryNone is beyond every category.
const (
	CategoryNone Category = iota
	CategoryI
	CategoryII
	CategoryIII
	CategoryIV
)

func (c Category) String() string {
	if c < CategoryI || c > CategoryIV {
		return "none"
	}
	return [...]string{"I", "II", "III", "IV"}[c-1]
}

// ParseCategory reads "I", "II", "III" or "IV"; false for anything else.
func ParseCategory(s string) (Category, bool) {
	for c := CategoryI; c <= CategoryIV; c++ {
		if s == c.String() {
			return c, true
		}
	}
	return CategoryNone, false
}

// Band is a range of operative temperature that is comfortable, limits
// included. A limit that does not apply is NaN.
type Band struct {
	LowC, NeutralC, HighC float64
}

// noBand is the band of a method that does not apply.
func noBand() Band {
	return Band{math.NaN(), math.NaN(), math.NaN()}
}

// Applies reports whether at least one limit exists.
func (b Band) Applies() bool { return !math.IsNaN(b.LowC) || !math.IsNaN(b.HighC) }

// Sensation is where an operative temperature lies against a band.
type Sensation int

// Sensations. Unjudged: the temperature is unknown or no limit applies.
const (
	Unjudged Sensation = iota
	TooCool
	Comfortable
	TooWarm
)

func (s Sensation) String() string {
	return [...]string{"unjudged", "too cool", "comfortable", "too warm"}[s]
}

// Judge places an operative temperature against the band. Both sides are
// rounded to 0.001 K first, so that 28.40 meets a limit of 28.4. A limit that
// is NaN cannot be broken.
func (b Band) Judge(operativeC float64) Sensation {
	switch t := round3(operativeC); {
	case math.IsNaN(t) || !b.Applies():
		return Unjudged
	case t > round3(b.HighC):
		return TooWarm
	case t < round3(b.LowC):
		return TooCool
	}
	return Comfortable
}

func round3(x float64) float64 { return math.Round(x*1000) / 1000 }

// Docs lists the documentation of every method of the package in the order a
// reader wants them.
func Docs() []method.Doc {
	return []method.Doc{
		EN16798AdaptiveDoc, EN15251AdaptiveDoc, ASHRAE55AdaptiveDoc, IMACDoc, OfficeRangeDoc,
		RunningMeanENDoc, PrevailingMeanDoc,
		PMVDoc, PMVCategoryDoc, SETDoc, CoolingEffectDoc, DraughtDoc,
		OperativeDoc, ClothingDoc, TM52Doc, LongTermDoc,
	}
}
