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
	indoors bool // see Episode
	explain func(e *evidence, s *spell) verdict
}

// verdict is what a test says about one spell: which of its missed steps it
// explains, a sentence with numbers, and the leading zone (-1 without).
type verdict struct {
	by  []bool // nil or as long as spell.missed
	why string
	led int
}

var nothing = verdict{led: -1}

// explains marks the missed steps for which is is true; nothing when none is.
func explains(s *spell, is func(step int) bool) []bool {
	by, any := make([]bool, len(s.missed)), false
	for k, i := range s.missed {
		by[k] = is(i)
		any = any || by[k]
	}
	if !any {
		return nil
	}
	return by
}

func marked(by []bool) int {
	n := 0
	for _, b := range by {
		if b {
			n++
		}
	}
	return n
}

// tests in the order they are asked. The changeover limit is asked for twice:
// outdoors first, indoors only after few-room changeovers, since the room that
// leads one always changes over at its own limit.
func tests() []test {
	return []test{neverUsedTest(), interlockTest(), overrideTest(), clockTest(), outdoorLimitTest(), reopenTest(), lockedOutTest(), thermostatTest(),
		fewRoomTest(), indoorLimitTest(), cyclingTest(), notOpenedTest()}
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
	r.Tests = append(r.Tests, Test{Unexplained, "the tests explain less than half of the episode between them", ourAssumption})
	for z := range in.Site.Zones {
		var seconds [NumCauses]int64
		var alone, anyOf, byCause [NumCauses]float64
		led, indoors := map[int]float64{}, 0.0
		for _, s := range spellsOf(&in, z) {
			ep, x := e.judge(asked, s)
			missed := int64(len(s.missed)) * in.Grid.StepS
			h := float64(missed) / 3600
			seconds[ep.Cause] += missed
			for c := range x.any {
				if Cause(c) == ep.Cause {
					alone[c] += h * x.alone[c]
					anyOf[c] += h
				} else {
					anyOf[c] += h * x.any[c]
				}
			}
			if ep.Cause == FewRoom {
				led[ep.Led] += h
			}
			if ep.Indoors {
				indoors += h
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
		r.IndoorLimitH = append(r.IndoorLimitH, indoors)
		r.Patterns = append(r.Patterns, e.zones[z].Pattern)
	}
	for u := range e.units {
		r.Units = append(r.Units, UnitPattern{ID: in.Site.Plant[u].ID, Calls: e.units[u].calls})
	}
	return r
}

// shares say what each cause explains of one spell: of its missed steps, the
// share explained at all, by no other cause, and by no cause before it.
type shares struct{ any, alone, first [NumCauses]float64 }

// judge asks every test about a spell and makes an episode of it. The first
// cause that explains half of it takes it; where only several together explain
// half, the one that explains most beyond those before it.
func (e *evidence) judge(asked []test, s *spell) (Episode, *shares) {
	ep := e.describe(s)
	said := make([]verdict, len(asked))
	for k, t := range asked {
		said[k] = t.explain(e, s)
	}
	x := sharesOf(asked, said, len(s.missed))
	ep.Cause = x.taker()
	best := 0
	for k, t := range asked {
		if n := marked(said[k].by); t.Cause == ep.Cause && n > best { // a cause may be asked for twice
			best, ep.Evidence, ep.Led, ep.Indoors = n, said[k].why, said[k].led, t.indoors
		}
	}
	for c := range x.any {
		if Cause(c) != ep.Cause && x.any[c] >= contributingShare {
			ep.Contributing = append(ep.Contributing, Cause(c))
		}
	}
	if ep.Cause == Unexplained {
		ep.Evidence = e.unexplained(&ep, s)
	}
	ep.Evidence += e.circumstances(&ep)
	return ep, x
}

func sharesOf(asked []test, said []verdict, n int) *shares {
	var x shares
	for i := 0; i < n; i++ {
		var by [NumCauses]bool
		first, causes := Unexplained, 0
		for k, t := range asked {
			if said[k].by == nil || !said[k].by[i] || by[t.Cause] {
				continue
			}
			by[t.Cause] = true
			x.any[t.Cause]++
			if causes == 0 {
				first = t.Cause
			}
			causes++
		}
		if causes > 0 {
			x.first[first]++
		}
		if causes == 1 {
			x.alone[first]++
		}
	}
	for c := range x.any {
		x.any[c] /= float64(n)
		x.alone[c] /= float64(n)
		x.first[c] /= float64(n)
	}
	return &x
}

// taker is the cause that takes the spell.
func (x *shares) taker() Cause {
	together, most := 0.0, Unexplained
	for c := Unexplained + 1; c < NumCauses; c++ {
		if x.any[c] >= sufficientShare {
			return c
		}
		together += x.first[c]
		if x.first[c] > x.first[most] {
			most = c
		}
	}
	if together >= sufficientShare {
		return most
	}
	return Unexplained
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
		e.zones[z].overridden = overriddenAt(in, z)
		e.zones[z].cycling = e.cyclesAt(e.zones[z].runs, in.Running.Zones[z].Plant)
	}
	e.gatherUnits()
	for z := range e.zones {
		e.zones[z].peers = e.peersOf(z)
		e.zones[z].Opening = e.openingUse(z)
		e.zones[z].Clock = e.clockPattern(z)
	}
	for u := range e.units { // limits leave out what clock and calls explain
		e.callsOf(u)
		e.units[u].limit = e.limitOf(e.unitSubject(u))
		e.units[u].limit.Unit = in.Site.Plant[u].ID
	}
	for z := range e.zones {
		e.zones[z].Limit = e.limitPattern(z)
	}
	return e
}
