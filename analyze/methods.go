package analyze

import (
	"sashlog/analyze/breeze"
	"sashlog/analyze/changeover"
	"sashlog/analyze/climate"
	"sashlog/analyze/comfort"
	"sashlog/analyze/doubt"
	"sashlog/analyze/energy"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/leaders"
	"sashlog/analyze/longterm"
	"sashlog/analyze/lost"
	"sashlog/analyze/method"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/analyze/votes"
)

// Methods lists the documentation of every method in use, in the order the
// analyses run; the report's appendix and the list of methods print from it.
func Methods() []method.Doc {
	docs := []method.Doc{running.Doc, potential.Doc, hours.Doc, exceedance.Doc, longterm.Doc, freshair.Doc, lost.Doc, doubt.Doc, votes.Doc, energy.Doc, changeover.Doc, leaders.Doc}
	docs = append(append(docs, climate.Docs()...), breeze.Docs()...)
	// What no figure of the report rests on is not listed.
	unused := map[string]bool{comfort.DraughtDoc.Title: true}
	for _, d := range comfort.Docs() {
		if !unused[d.Title] {
			docs = append(docs, d)
		}
	}
	return docs
}
