package advice

import (
	"math"
	"sort"

	"sashlog/analyze/afterhours"
	"sashlog/analyze/calendar"
	"sashlog/analyze/changeover"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/leaders"
	"sashlog/analyze/lost"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Input is every answer so far.
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
	FreshAir   *freshair.Result
	Lost       *lost.Result
	AfterHours *afterhours.Result
	// Changeover and Leaders add dates of change and what-ifs; nil when not known.
	Changeover *changeover.Result
	Leaders    *leaders.Result
}

// mostFindings is how many findings are listed, mostAlike how many of one kind
// (few rooms, outdoor limits); leastH how many hours one must have to gain.
// Our choice: a list that can be read at one go and still names every kind.
const (
	mostFindings = 14
	mostAlike    = 2
	leastH       = 2.0
)

// group orders findings that cannot be compared by person-hours.
type group int

const (
	gain     group = iota // occupied hours to win
	night                 // hours when nobody is there
	purge                 // hours of cool nights, many and each worth little
	evidence              // hours that cannot be judged
)

// found is a finding with what ranks it.
type found struct {
	Finding
	group group
}

// adviser looks for findings.
type adviser struct {
	Input
	cal  *calendar.Calendar
	days *dayTable
}

// Advise lists what to do first: at most fourteen findings with hours to gain,
// occupied hours first, by person-hours and then hours.
func Advise(in Input) []Finding {
	a := &adviser{Input: in, cal: calendar.Of(in.Grid)}
	a.days = a.dayTable()
	var all []found
	for _, look := range []func() []found{a.fewRooms, a.clockStarts, a.outdoorLimits, a.indoorLimits, a.slowReopening, a.neverUsed, a.notOpened,
		a.overridden, a.lockedOut, a.misledThermostats, a.cycling, a.tightened,
		a.clashes, a.staleAir, a.warmZones, a.overnightPlant, a.unusedPurge, a.unknownHours} {
		for _, f := range look() {
			if f.Hours >= leastH {
				all = append(all, f)
			}
		}
	}
	sort.SliceStable(all, func(i, j int) bool {
		x, y := &all[i], &all[j]
		if x.group != y.group {
			return x.group < y.group
		}
		if p, q := a.weight(x), a.weight(y); p != q {
			return p > q
		}
		return x.Hours > y.Hours
	})
	var out []Finding
	for _, f := range all {
		if len(out) == mostFindings {
			break
		}
		out = append(out, f.Finding)
	}
	return out
}

// weight is a finding's person-hours; where people are not given, its hours
// times the mean number of people of the zones where they are.
func (a *adviser) weight(f *found) float64 {
	if !math.IsNaN(f.PersonH) {
		return f.PersonH
	}
	sum, n := 0.0, 0.0
	for z := range a.Site.Zones {
		if p := a.Site.Zones[z].People; p > 0 {
			sum, n = sum+p, n+1
		}
	}
	if n == 0 {
		return f.Hours
	}
	return f.Hours * sum / n
}

// size is a sum over zones with its bounds.
type size struct {
	zones                []int // with hours, most person-hours first
	h, low, high, person float64
}

// sizeOf sums hours per zone. Zones with less than a tenth of an hour are left
// out of the list but not of the sum.
func (a *adviser) sizeOf(h, low, high func(z int) float64) size {
	var s size
	per := make([]float64, len(a.Site.Zones))
	for z := range a.Site.Zones {
		x := h(z)
		if !(x > 0) {
			continue
		}
		per[z] = x
		s.h += x
		s.low += math.Min(x, low(z))
		s.high += math.Max(x, high(z))
		s.person += x * a.Site.Zones[z].People
		if x >= 0.1 {
			s.zones = append(s.zones, z)
		}
	}
	rank := func(z int) float64 {
		if p := a.Site.Zones[z].People; p >= 0 {
			return per[z] * p
		}
		return per[z]
	}
	sort.SliceStable(s.zones, func(i, j int) bool { return rank(s.zones[i]) > rank(s.zones[j]) })
	return s
}

// causeSize sums the missed hours of a cause over the zones for which take
// returns a share above 0. Low is what only this cause explains; High what it
// explains anywhere, and its part of the hours that may have been missed but
// cannot be judged.
func (a *adviser) causeSize(c lost.Cause, take func(z int) float64) size {
	l := a.Lost
	return a.sizeOf(
		func(z int) float64 { return l.ByCauseH[z][c] * take(z) },
		func(z int) float64 { return l.AloneH[z][c] * take(z) },
		func(z int) float64 { return (l.AnyH[z][c] + a.unknownPart(z, l.ByCauseH[z][c])) * take(z) },
	)
}

// unknownPart is the part of a zone's possibly missed hours that goes with h
// of its missed ones.
func (a *adviser) unknownPart(z int, h float64) float64 {
	if z >= len(a.Summary.Zones) {
		return 0
	}
	m := a.Summary.Zones[z].Missed
	if !(m.Value > 0) || !(m.High > m.Value) {
		return 0
	}
	return (m.High - m.Value) * h / m.Value
}

func (s *size) fill(a *adviser, f *Finding) {
	f.Hours, f.Low, f.High, f.PersonH = s.h, s.low, s.high, s.person
	for _, z := range s.zones {
		f.Zones = append(f.Zones, a.Site.Zones[z].ID)
	}
}

func everyZone(int) float64 { return 1 }
