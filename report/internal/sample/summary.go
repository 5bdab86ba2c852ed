package sample

import (
	"math"

	"sashlog/analyze"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/freshair"
	"sashlog/analyze/hours"
	"sashlog/analyze/lost"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
)

func newResults() *analyze.Results {
	return &analyze.Results{Running: &running.Result{}, Exceedance: &exceedance.Result{Headline: "en16798-1"},
		Potential: &potential.Result{}, Summary: &hours.Summary{}, FreshAir: &freshair.Result{}, Lost: &lost.Result{}}
}

func (m *maker) makeSummary() {
	rec, sum := m.Results.Hours, m.Results.Summary
	sum.Days = m.o.Days
	sum.WeightedBy = "people"
	total := 0.0
	for z := range m.o.Zones {
		w := m.Site.Zones[z].People
		if math.IsNaN(w) {
			w = 1
			sum.WeightedBy = "equally"
		}
		sum.Weights = append(sum.Weights, w)
		total += w
	}
	for z := range sum.Weights {
		sum.Weights[z] /= total
	}
	nh := len(rec.Hours)
	at := 0
	for at < nh {
		d := rec.Hours[at].Date
		to := at
		for to < nh && rec.Hours[to].Date.Month == d.Month {
			to++
		}
		mo := hours.Month{Year: d.Year, Month: int(d.Month)}
		for z := range m.o.Zones {
			mo.Zones = append(mo.Zones, m.total(z, at, to))
		}
		mo.Building = m.weighted(mo.Zones)
		sum.Months = append(sum.Months, mo)
		at = to
	}
	for z := range m.o.Zones {
		sum.Zones = append(sum.Zones, m.total(z, 0, nh))
	}
	sum.Building = m.weighted(sum.Zones)
	for h := 0; h < nh; h += 24 {
		for k := h; k < h+24 && k < nh; k++ {
			if rec.Seconds[hours.COccupied][k] > 0 {
				sum.WorkingDays++
				break
			}
		}
	}
	sum.CarpetClass = make([]hours.Class, m.Grid.N)
	for i := range sum.CarpetClass {
		var by [hours.NumClasses]float64
		best := hours.NotOccupied
		for z := range m.o.Zones {
			by[rec.Class[z][i]] += sum.Weights[z]
		}
		for c := range by {
			if by[c] > by[best] {
				best = hours.Class(c)
			}
		}
		sum.CarpetClass[i] = best
	}
}

func (m *maker) total(z, from, to int) hours.Total {
	rec := m.Results.Hours
	t := hours.Total{ID: rec.ZoneIDs[z], PersonH: math.NaN(), PeopleH: math.NaN()}
	for c := range t.H {
		for h := from; h < to; h++ {
			t.H[c] += float64(rec.Seconds[c][rec.Row(z, h)]) / 3600
		}
	}
	t.PersonH = t.H[hours.COccupied] * rec.People[z]
	finish(&t)
	return t
}

func (m *maker) weighted(zones []hours.Total) hours.Total {
	t := hours.Total{ID: "building"}
	for z := range zones {
		for c := range t.H {
			t.H[c] += zones[z].H[c] * m.Results.Summary.Weights[z]
		}
		t.PersonH += zones[z].PersonH
	}
	finish(&t)
	return t
}

func finish(t *hours.Total) {
	u, us, su := t.H[hours.CUnjudged], t.H[hours.CUnjudgedSuited], t.H[hours.CSuitedUnknown]
	r := func(c hours.Col, more float64) hours.Range {
		return hours.Range{Value: t.H[c], Low: t.H[c], High: t.H[c] + more}
	}
	t.Occupied, t.Suited = r(hours.COccupied, 0), r(hours.CSuited, su)
	t.SuitedFan = t.Suited
	t.Achieved, t.AchievedOK = r(hours.CAchieved, us+su), r(hours.CAchievedOK, us+su)
	t.Missed, t.NotNeeded = r(hours.CMissed, us+su), r(hours.CNotNeeded, us+su)
	t.IllTimed, t.ClosedUnsuited = r(hours.CIllTimed, u-us), r(hours.CClosedUnsuited, u-us)
	t.Unjudged, t.Both, t.NoOpening = r(hours.CUnjudged, 0), r(hours.CBoth, u), r(hours.CNoOpening, 0)
	a, mi := t.H[hours.CAchieved], t.H[hours.CMissed]
	t.AchievedShare = hours.Range{Value: a / (a + mi), Low: a / (a + mi + us), High: (a + us) / (a + mi + us)}
	t.MechFreeShare = hours.Range{Value: 0.4, Low: 0.35, High: 0.45}
	if t.H[hours.CSuited] == 0 {
		t.MechFreeShare = hours.Range{Value: math.NaN(), Low: math.NaN(), High: math.NaN()}
	}
	t.JudgedShare = 1 - u/t.H[hours.COccupied]
}
