package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// PMVCategoryDoc documents [PMVCategory] and [PMVClass].
var PMVCategoryDoc = method.Doc{
	Title:    "Categories of predicted mean vote (EN 16798-1 Table B.1, ISO 7730 Table A.1)",
	Question: "Which category does a predicted mean vote meet?",
	Formula:  "EN 16798-1: I |PMV| < 0.2, II < 0.5, III < 0.7, IV < 1.0; ISO 7730: A < 0.2, B < 0.5, C < 0.7",
	Limits: []string{
		"strictly less: a vote of exactly 0.5 is outside II",
		"decided on PMV, not on PPD: the printed PPD limits (6, 10, 15, 25 %) differ slightly from those PMV gives",
	},
	Sources: []string{
		method.Memory("EN 16798-1:2019 Table B.1"),
		method.Memory("ISO 7730:2005 Table A.1, PMV column"),
		method.Public("ISO 7730:2005 Table A.1, PPD column"),
	},
	Standing: method.FromMemory,
}

// PMVLimit returns the limit that |PMV| must stay below in a category of
// EN 16798-1; NaN for CategoryNone.
func PMVLimit(c Category) float64 {
	switch c {
	case CategoryI:
		return 0.2
	case CategoryII:
		return 0.5
	case CategoryIII:
		return 0.7
	case CategoryIV:
		return 1.0
	}
	return math.NaN()
}

// PMVCategory returns the best category of EN 16798-1 that a predicted mean
// vote meets; CategoryNone when it meets none or is NaN.
func PMVCategory(pmv float64) Category {
	v := round3(math.Abs(pmv))
	for c := CategoryI; c <= CategoryIV; c++ {
		if v < PMVLimit(c) {
			return c
		}
	}
	return CategoryNone
}

// PMVClass returns the best category of ISO 7730, "A", "B" or "C", that a
// predicted mean vote meets; "" when it meets none or is NaN. The further
// demands of the standard (draught, floor, asymmetry) are not in it.
func PMVClass(pmv float64) string {
	switch PMVCategory(pmv) {
	case CategoryI:
		return "A"
	case CategoryII:
		return "B"
	case CategoryIII:
		return "C"
	}
	return ""
}

// PMVSensation judges a predicted mean vote against a category of EN 16798-1.
func PMVSensation(pmv float64, c Category) Sensation {
	limit := PMVLimit(c)
	switch v := round3(pmv); {
	case math.IsNaN(v) || math.IsNaN(limit):
		return Unjudged
	case v >= limit:
		return TooWarm
	case v <= -limit:
		return TooCool
	}
	return Comfortable
}
