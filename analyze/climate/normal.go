package climate

import (
	"math"

	"sashlog/configs/criteria"
)

// Limits of what counts as usual; our assumption, see [NormalDoc].
const (
	monthUsualK    = 1.5
	yearUsualK     = 1.0
	yearUsualShare = 0.10
	// monthLeast is the share of a month's hours that must be known to call it.
	monthLeast = 0.5
)

// Verdict says how a month or year compares with a typical one.
type Verdict uint8

// Verdicts.
const (
	NotKnown Verdict = iota // too little measured
	AsUsual
	Warmer
	Cooler
)

var verdictWords = [...]string{"not known", "as usual", "warmer than usual", "cooler than usual"}

func (v Verdict) String() string { return verdictWords[v] }

// Month compares one calendar month, all years of the period together, over
// the steps that both records know.
type Month struct {
	Month int // 1 to 12
	// KnownH are the hours compared, ShareKnown of the month's hours in the
	// period.
	KnownH, ShareKnown      float64
	MeasuredC, TypicalC     float64 // mean outdoor temperature, NaN without a common hour
	OccupiedH               float64 // of the average occupant, compared
	MeasuredSuitedH         float64
	TypicalSuitedH          float64
	Verdict                 Verdict
	measuredSum, typicalSum float64
	hours                   float64
}

// Year compares the period with the typical year.
type Year struct {
	Name   string
	Months []Month // those of the period, January first
	// Sums and means over the months compared.
	MeasuredC, TypicalC             float64
	OccupiedH                       float64
	MeasuredSuitedH, TypicalSuitedH float64
	// Normal: within 1 K and 10 % of the suitable hours. Known is false when too
	// little was measured to say.
	Normal, Known bool
	Verdict       Verdict
}

// compareYears counts both records by the same rule on the same hours.
func compareYears(c criteria.Settings, measured, typical *record, typicalVotes []vote) *Year {
	votes := headlineBare(c, measured, upperOfDay(c, measured))
	at := hoursOfYearByStep(measured.g, typical.offsetH)
	y := &Year{Name: typical.name}
	var months [12]Month
	h := measured.g.StepH()
	for i := measured.g.PeriodFrom; i < measured.g.PeriodTo; i++ {
		m := &months[measured.out.Days[measured.out.DayOf[i]].Date.Month-1]
		m.hours += h
		k := at[i]
		t, u := float64(measured.out.TempC[i]), float64(typical.out.TempC[k])
		if math.IsNaN(t) || math.IsNaN(u) {
			continue
		}
		m.KnownH += h
		m.measuredSum += t * h
		m.typicalSum += u * h
		if votes[i] == unknown || typicalVotes[k] == unknown {
			continue
		}
		o := float64(measured.occ[i]) * h
		m.OccupiedH += o
		if votes[i] == yes {
			m.MeasuredSuitedH += o
		}
		if typicalVotes[k] == yes {
			m.TypicalSuitedH += o
		}
	}
	known := 0.0
	for k := range months {
		m := &months[k]
		m.Month = k + 1
		if m.hours == 0 {
			continue
		}
		m.ShareKnown = m.KnownH / m.hours
		m.MeasuredC, m.TypicalC = m.measuredSum/m.KnownH, m.typicalSum/m.KnownH
		m.Verdict = verdict(m.MeasuredC-m.TypicalC, monthUsualK, m.ShareKnown)
		y.Months = append(y.Months, *m)
		y.MeasuredC += m.measuredSum
		y.TypicalC += m.typicalSum
		y.OccupiedH += m.OccupiedH
		y.MeasuredSuitedH += m.MeasuredSuitedH
		y.TypicalSuitedH += m.TypicalSuitedH
		known += m.KnownH
	}
	y.MeasuredC /= known
	y.TypicalC /= known
	all := float64(measured.g.PeriodTo-measured.g.PeriodFrom) * h
	y.Verdict = verdict(y.MeasuredC-y.TypicalC, yearUsualK, known/all)
	y.Known = y.Verdict != NotKnown
	y.Normal = y.Verdict == AsUsual && math.Abs(y.MeasuredSuitedH-y.TypicalSuitedH) <= yearUsualShare*y.TypicalSuitedH
	return y
}

func verdict(differenceK, usualK, shareKnown float64) Verdict {
	switch {
	case !(shareKnown >= monthLeast) || math.IsNaN(differenceK):
		return NotKnown
	case differenceK > usualK:
		return Warmer
	case differenceK < -usualK:
		return Cooler
	}
	return AsUsual
}
