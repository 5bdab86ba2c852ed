package configs

import (
	"fmt"
	"slices"

	"sashlog/configs/site"
)

// coverage warns of what the points leave open.
func (b *builder) coverage() {
	s := b.out.Site
	zone, plant := make([]int, len(s.Zones)), make([]int, len(s.Plant))
	outdoor, served := false, map[string]bool{} // zones whose own points show the plant running
	for i := range s.Points {
		p := &s.Points[i]
		switch {
		case p.Quantity == site.OutdoorTemp:
			outdoor = true
		case p.Owner == site.OwnerZone && p.Index >= 0:
			zone[p.Index]++
			if showsRunning(p.Quantity) {
				served[p.BelongsTo] = true
			}
		case p.Owner == site.OwnerPlant && p.Index >= 0:
			plant[p.Index]++
		}
	}
	for i, n := range zone {
		if n == 0 {
			b.warn(fmt.Sprintf("zones[%d].id", i), "map its logged columns in the points table", "zone %q has no points: nothing can be said about it", s.Zones[i].ID)
		}
	}
	for i, n := range plant {
		if n == 0 && !slices.ContainsFunc(s.Plant[i].Serves, func(id string) bool { return served[id] }) {
			b.warn(fmt.Sprintf("plant[%d].id", i), "map its status or supply air temperature in the points table", "plant unit %q has no points: when it ran stays unknown", s.Plant[i].ID)
		}
	}
	if !outdoor && len(s.Points) > 0 {
		b.warn("points", "map a logged outdoor temperature to site, or add a nearby station's file",
			"no point is outdoor_temp: without measured weather no hour can be judged")
	}
}

// showsRunning reports whether a zone's own point tells when plant serves it.
func showsRunning(q site.Quantity) bool {
	switch q {
	case site.PlantStatus, site.ZoneAirflow, site.ZoneDamper, site.HeatingValve, site.CoolingValve, site.SupplyAirTemp:
		return true
	}
	return false
}
