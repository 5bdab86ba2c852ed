package exceedance

import "sashlog/analyze/method"

// Doc documents which comfort model applies when.
var Doc = method.Doc{
	Title:    "Comfort exceedance and the model that applies",
	Question: "How long, by how much and for how many people was each zone outside a comfort criterion?",
	Formula: "occupied hours with T_op above or below the limits of the model in force; degree-hours sum the distance; " +
		"person-hours are hours times the usual number of people",
	Limits: []string{
		"adaptive limits only where people can open windows, while no heating or cooling runs and from 1 h after it stopped; neither model holds for less than 30 min (our assumption, both settable)",
		"operative ranges elsewhere: heating season up to a running mean of 10 °C, cooling season from 15 °C (from memory), between them the wider pair (our extension)",
		"where people have a fan, upper adaptive limits of EN 16798-1 and ASHRAE 55 rise by its step of air speed above 25 °C",
		"both sides are rounded to 0.001 K before they are compared; the limit itself is inside",
	},
	Sources:  []string{method.Recomputed("EN 16798-1:2019 Annex B"), method.Public("ASHRAE 55-2023 Appendix J on mixed mode")},
	Standing: method.Published,
}
