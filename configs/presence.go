package configs

import "sashlog/configs/site"

// checkPresence holds the source of occupied times against the points: times
// that follow presence need a point that says who is there.
func (b *builder) checkPresence() {
	s := b.out.Site
	if len(s.Points) == 0 {
		return
	}
	sensed := make([]bool, len(s.Zones))
	for i := range s.Points {
		p := &s.Points[i]
		if p.Owner == site.OwnerZone && p.Index >= 0 && p.Index < len(sensed) && (p.Quantity == site.Presence || p.Quantity == site.People) {
			sensed[p.Index] = true
		}
	}
	var without []string
	for z := range s.Zones {
		source := s.Occupancy.Source
		if own := s.Zones[z].OccupancySource; own != "" {
			source = own
		}
		if source != site.ByPresence {
			continue
		}
		if !sensed[z] {
			without = append(without, s.Zones[z].ID)
		}
	}
	if len(without) > 0 {
		b.warn("occupancy", "map a point of quantity presence or people to each zone, or give times and source: schedule",
			"occupied times follow presence, and no presence or people point belongs to %s: nothing can be said of them", list(without))
	}
}
