package demo

import (
	"fmt"
	"slices"

	"sashlog/configs/site"
)

// Change is what an operator of the building sets anew before a day begins.
// Logs, site file and diary know nothing of it.
type Change struct {
	From site.Date
	// Unit is the id of the plant unit; empty means every unit.
	Unit string
	// OpenLowC and OpenHighC replace the outdoor temperatures between which
	// windows are released; nil keeps them.
	OpenLowC, OpenHighC *float64
	// CoolOnK is added to the cooling set-points of the unit's zones.
	CoolOnK float64
	// IgnoreCallsOf names zones whose calls for cooling no longer start the
	// unit.
	IgnoreCallsOf []string
	// NoClockStart takes the start by the clock away.
	NoClockStart bool
	// ReopenMin replaces the minutes windows stay locked after the unit
	// stopped; nil keeps them.
	ReopenMin *int
}

// check names the first change that does not fit the building.
func (b *building) check() error {
	for _, c := range b.options.Changes {
		if c.Unit != "" && !slices.ContainsFunc(plantSpecs, func(p plantSpec) bool { return p.id == c.Unit }) {
			return fmt.Errorf("demo: change of unit %q: there is no such unit", c.Unit)
		}
		for _, z := range c.IgnoreCallsOf {
			if !slices.ContainsFunc(b.zones, func(s zoneSpec) bool { return s.id == z }) {
				return fmt.Errorf("demo: change names zone %q: there is no such zone", z)
			}
		}
	}
	return nil
}

// change applies what was set anew before the day.
func (s *simulation) change(d site.Date, changes []Change) {
	for k := range changes {
		c := &changes[k]
		if c.From != d {
			continue
		}
		for _, u := range s.units {
			if c.Unit != "" && u.spec.id != c.Unit {
				continue
			}
			if c.OpenLowC != nil {
				u.spec.naturalLowC = *c.OpenLowC
			}
			if c.OpenHighC != nil {
				u.spec.naturalHighC = *c.OpenHighC
			}
			if c.NoClockStart {
				u.spec.clockStart = -1
			}
			if c.ReopenMin != nil {
				u.spec.reopenMin = *c.ReopenMin
			}
			for _, r := range u.rooms {
				r.spec.coolOnC += c.CoolOnK
				r.ignored = r.ignored || slices.Contains(c.IgnoreCallsOf, r.spec.id)
			}
		}
	}
}
