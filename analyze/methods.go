package analyze

import (
	"sashlog/analyze/afterhours"
	"sashlog/analyze/breeze"
	"sashlog/analyze/changeover"
	"sashlog/analyze/climate"
	"sashlog/analyze/comfort"
	"sashlog/analyze/compare"
	"sashlog/analyze/doubt"
	"sashlog/analyze/energy"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/leaders"
	"sashlog/analyze/longterm"
	"sashlog/analyze/lost"
	"sashlog/analyze/method"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/predicted"
	"sashlog/analyze/randomisation"
	"sashlog/analyze/running"
	"sashlog/analyze/trial"
	"sashlog/analyze/votes"
	"sashlog/analyze/zonemodel"
)

// Methods lists the documentation of every method in use, in the order the
// analyses run; the report's appendix and the list of methods print from it.
func Methods() []method.Doc {
	docs := []method.Doc{outdoor.Doc, running.Doc, potential.Doc, hours.Doc, predicted.Doc, exceedance.Doc, longterm.Doc, freshair.Doc, lost.Doc, afterhours.Doc,
		doubt.Doc, votes.Doc, energy.Doc, changeover.Doc, leaders.Doc, zonemodel.Doc, compare.Doc, trial.Doc, randomisation.Doc}
	docs = append(append(docs, climate.Docs()...), breeze.Docs()...)
	return append(docs, comfort.Docs()...)
}
