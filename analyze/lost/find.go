package lost

import (
	"math"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is what the search looks at.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Outdoor    *outdoor.Outdoor
	Indoor     []indoor.Zone
	Running    *running.Result
	Exceedance *exceedance.Result
	Potential  *potential.Result
	Record     *hours.Record
	Summary    *hours.Summary
}

// sufficientShare is the share of a spell a cause must explain to take it;
// contributingShare that from which it is listed. Our assumptions.
const (
	sufficientShare   = 0.5
	contributingShare = 0.1
)

// test is one cause with its rule and what it explains.
type test struct {
	Test
	explain func(e *evidence, s *spell) verdict
}

// verdict is what a test says about one spell: the share of its missed steps
// explained, a sentence with numbers, and the leading zone (-1 without).
type verdict struct {
	share float64
	why   string
	led   int
}

var nothing = verdict{led: -1}

// tests in the order they are asked. The changeover limit is asked for twice:
// outdoors first, indoors only after few-room changeovers, since the room that
// leads one always changes over at its own limit.
func tests() []test {
	return []test{neverUsedTest(), interlockTest(), clockTest(), outdoorLimitTest(), reopenTest(), fewRoomTest(), indoorLimitTest(), notOpenedTest()}
}

// Find lists the missed episodes of every zone with their causes and sums the
// missed hours by cause.
func Find(in Input) *Result {
	e := gather(&in)
	r := &Result{}
	asked := tests()
	for _, t := range asked {
		r.Tests = append(r.Tests, t.Test)
	}
	r.Tests = append(r.Tests, Test{Unexplained, "none of the tests explains at least half of the episode", ourAssumption})
	for z := range in.Site.Zones {
		var seconds [NumCauses]int64
		var alone, anyOf, byCause [NumCauses]float64
		led := map[int]float64{}
		for _, s := range spellsOf(&in, z) {
			ep, explained := e.judge(asked, s)
			missed := int64(len(s.missed)) * in.Grid.StepS
			h := float64(missed) / 3600
			seconds[ep.Cause] += missed
			explained.bounds(ep.Cause, h, &alone, &anyOf)
			if ep.Cause == FewRoom {
				led[ep.Led] += h
			}
			if missed >= int64(in.Criteria.EpisodeMin*60) {
				r.Episodes = append(r.Episodes, ep)
			}
		}
		for c := range seconds {
			byCause[c] = float64(seconds[c]) / 3600
			if z < len(in.Summary.Weights) {
				r.BuildingH[c] += byCause[c] * in.Summary.Weights[z]
			}
		}
		r.ByCauseS = append(r.ByCauseS, seconds)
		r.ByCauseH = append(r.ByCauseH, byCause)
		r.AloneH, r.AnyH, r.LedH = append(r.AloneH, alone), append(r.AnyH, anyOf), append(r.LedH, led)
		r.Patterns = append(r.Patterns, e.zones[z].Pattern)
	}
	return r
}

// shares are what each cause explains of one spell.
type shares [NumCauses]float64

// bounds adds a spell's hours to what mending each cause would bring at least
// and at most: at least what it explains where nothing else would do as well,
// at most what it explains anywhere, the whole spell where it took it.
func (x *shares) bounds(taken Cause, h float64, alone, anyOf *[NumCauses]float64) {
	if taken == Unexplained {
		alone[taken] += h
		anyOf[taken] += h
		return
	}
	rivals := 0
	for c, share := range x {
		if share >= sufficientShare {
			rivals++
		}
		if Cause(c) != taken && share >= contributingShare {
			anyOf[c] += h * share
		}
	}
	anyOf[taken] += h
	if rivals == 1 {
		alone[taken] += h * x[taken]
	}
}

// judge asks every test about a spell and makes an episode of it.
func (e *evidence) judge(asked []test, s *spell) (Episode, *shares) {
	ep := e.describe(s)
	var x shares
	for _, t := range asked {
		v := t.explain(e, s)
		if v.share > x[t.Cause] {
			x[t.Cause] = math.Min(1, v.share)
		}
		if ep.Cause == Unexplained && v.share >= sufficientShare {
			ep.Cause, ep.Evidence, ep.Led = t.Cause, v.why, v.led
		}
	}
	for c, share := range x {
		if Cause(c) != ep.Cause && share >= contributingShare {
			ep.Contributing = append(ep.Contributing, Cause(c))
		}
	}
	if ep.Cause == Unexplained {
		ep.Evidence = unexplained(&ep)
	}
	ep.Evidence += e.circumstances(&ep)
	return ep, &x
}

// describe fills what a spell was like.
func (e *evidence) describe(s *spell) Episode {
	in := e.in
	ep := Episode{Zone: s.zone, FromStep: s.from, ToStep: s.to, Led: -1, Cause: Unexplained,
		Hours: float64(int64(len(s.missed))*in.Grid.StepS) / 3600, People: in.Site.Zones[s.zone].People}
	ep.PersonH = ep.Hours * ep.People
	var states [running.NumStates]int
	for _, i := range s.missed {
		states[in.Running.Zones[s.zone].State[i]]++
	}
	most := running.Unknown
	for st := range states {
		if states[st] > states[most] {
			most = running.State(st)
		}
	}
	ep.Running = most.String()
	ep.OutdoorTempC = meanAt(in.Outdoor.TempC, s.missed)
	ep.IndoorTempC = meanAt(in.Indoor[s.zone].OperativeC, s.missed)
	ep.ComfortHighC = meanAt(in.Exceedance.Zones[s.zone].Limits.HighC, s.missed)
	ep.CO2PPM = meanAt(in.Indoor[s.zone].CO2PPM, s.missed)
	return ep
}

// at is a series' value, NaN where unknown or never logged.
func at(series []float32, i int) float64 {
	if i < 0 || i >= len(series) {
		return math.NaN()
	}
	return float64(series[i])
}

func meanAt(series []float32, steps []int) float64 {
	sum, n := 0.0, 0
	for _, i := range steps {
		if v := at(series, i); !math.IsNaN(v) {
			sum += v
			n++
		}
	}
	if n == 0 {
		return math.NaN()
	}
	return sum / float64(n)
}

// gather looks at the whole period once.
func gather(in *Input) *evidence {
	e := &evidence{in: in, cal: calendar.Of(in.Grid), zones: make([]zoneEvidence, len(in.Site.Zones))}
	for z := range e.zones {
		e.zones[z].runs = plantRuns(in.Running.Zones[z].Plant)
		e.zones[z].released = releaseOf(in, z)
		e.zones[z].setpoint = setpointOf(in, z)
	}
	e.gatherUnits()
	for z := range e.zones {
		e.zones[z].Opening = e.openingUse(z)
		e.zones[z].Clock = e.clockPattern(z)
	}
	for z := range e.zones { // limits leave out what the clock explains
		e.zones[z].Limit = e.limitPattern(z)
	}
	for u := range e.units {
		e.units[u].calls = e.callsOf(u)
	}
	return e
}
