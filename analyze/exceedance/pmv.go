package exceedance

import (
	"strconv"

	"sashlog/analyze/comfort"
	"sashlog/analyze/predicted"
)

// votes is a criterion on predicted mean votes, in the steps in which the
// operative ranges apply.
type votes struct {
	limit float64 // of |PMV|
	list  []float32
	zone  *predicted.Zone
	words string // of a vote, for the table of hours
}

// ashraePMVLimit is the comfort zone of ASHRAE 55, whatever the category.
const ashraePMVLimit = 0.5

// voteJudges are the criteria on predicted votes, by ISO 7730 and by ASHRAE 55.
func voteJudges(cat comfort.Category, zone *predicted.Zone) []judge {
	const note = "degree-hours are hours times the vote beyond the limit; beyond the range of ISO 7730 an hour counts as too warm or too cool, never as comfortable"
	return []judge{
		{
			id: "pmv", words: "PMV within ±" + trim(comfort.PMVLimit(cat)) + " (category " + cat.String() + ") while operative ranges apply",
			source: "ISO 7730:2005; EN 16798-1:2019 Table B.1; clothing by Schiavon & Lee 2013 unless given (from memory)",
			note:   note,
			votes:  &votes{comfort.PMVLimit(cat), zone.Vote, zone, "PMV"},
		},
		{
			id: "ashrae55-pmv", words: "ASHRAE 55 comfort zone, PMV within ±" + trim(ashraePMVLimit) + " with the cooling effect of moving air, while operative ranges apply",
			source: "ASHRAE 55-2023 Appendices B and D (read in public texts; check values recomputed and agree); limit of air speed without control from memory",
			note:   note + "; people's own movement alone already moves the air at more than 0.1 m/s",
			votes:  &votes{ashraePMVLimit, zone.Elevated, zone, "PMV, ASHRAE 55"},
		},
	}
}

// trim writes a limit without trailing zeros.
func trim(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }
