package lost

import (
	"fmt"
	"math"

	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// OpeningUse is how much a zone's opening is used.
type OpeningUse struct {
	// OpenH is how long it stood open in the whole period, occupied or not, of
	// KnownH with known contacts.
	OpenH, KnownH float64
	// SuitedH are occupied suitable hours with a known running state, of which
	// ChanceH had the zone's plant off, or running while another zone of the
	// same unit ran open (of the building, where the unit serves no other).
	SuitedH, ChanceH float64
	// NeverUsed: open at most 1 % of the known time although it had its chance
	// in at least 5 h and a tenth of the suitable hours, of 20 h or more.
	NeverUsed bool
}

const (
	neverUsedShare   = 0.01
	neverUsedSuitedH = 20
	chanceShare      = 0.1
	chanceH          = 5
)

// openingUse sums up the use of zone z's opening.
func (e *evidence) openingUse(z int) OpeningUse {
	in := e.in
	var u OpeningUse
	me := &in.Running.Zones[z]
	if me.NoOpening || !me.HasContacts {
		return u
	}
	h := in.Grid.StepH()
	class := in.Record.Class[z]
	for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
		isOpen := me.State[i] == running.Open || me.State[i] == running.Both
		switch {
		case isOpen:
			u.OpenH += h
			u.KnownH += h
		case me.State[i] != running.Unknown || !math.IsNaN(float64(me.OpenShare[i])):
			u.KnownH += h
			if me.OpenShare[i] > 0 && me.State[i] == running.Unknown {
				u.OpenH += h
			}
		}
		c := class[i]
		if !c.Achieved() && !c.Missed() && c != hours.NotNeeded {
			continue
		}
		u.SuitedH += h
		if e.hadChance(z, i) {
			u.ChanceH += h
		}
	}
	u.NeverUsed = u.KnownH > 0 && u.OpenH <= neverUsedShare*u.KnownH && u.SuitedH >= neverUsedSuitedH &&
		u.ChanceH >= math.Max(chanceH, chanceShare*u.SuitedH)
	return u
}

// hadChance reports whether the opening could have been used at a step: the
// zone's plant was off, or a peer ran open at the same time.
func (e *evidence) hadChance(z, i int) bool {
	if v := at(e.zones[z].released, i); v < 0.5 {
		return false // logged as locked
	}
	if e.in.Running.Zones[z].Plant[i] == uint8(site.PlantOff) {
		return true
	}
	for _, k := range e.zones[z].peers {
		if e.in.Running.Zones[k].State[i] == running.Open {
			return true
		}
	}
	return false
}

// peersOf lists the zones with openings that share a plant unit with z, or,
// where there are none, all others with openings.
func (e *evidence) peersOf(z int) []int {
	var peers, all []int
	for k := range e.zones {
		if k == z || e.in.Running.Zones[k].NoOpening {
			continue
		}
		all = append(all, k)
		for _, u := range e.zones[z].units {
			if serves(e.in.Site, u, k) {
				peers = append(peers, k)
				break
			}
		}
	}
	if len(peers) > 0 {
		return peers
	}
	return all
}

func neverUsedTest() test {
	return test{
		Test: Test{NeverUsed, "the opening stood open for at most 1 % of all known hours of the period, although it had its chance in at least 5 h and a tenth of the suitable hours; " +
			"it explains the time it had its chance: the zone's plant was off, or a zone of the same unit ran open (any zone, where the unit serves no other)", ourAssumption},
		explain: func(e *evidence, s *spell) verdict {
			u := e.zones[s.zone].Opening
			if !u.NeverUsed {
				return nothing
			}
			by := explains(s, func(i int) bool { return e.hadChance(s.zone, i) })
			return verdict{by, fmt.Sprintf("the opening stood open for %.1f h of %.0f known hours, although the weather suited in %.0f occupied hours and "+
				"nothing hindered it in %.0f of them", u.OpenH, u.KnownH, u.SuitedH, u.ChanceH), -1}
		},
	}
}
