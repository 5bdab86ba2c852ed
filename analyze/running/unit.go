package running

import "sashlog/configs/site"

// UnitState is what plant unit u did in each step: its own log where there is
// one, else the strongest evidence of the zones it serves; PlantUnknown where
// missing. It returns a slice of its own.
func (r *Result) UnitState(s *site.Site, u int) []uint8 {
	if u < len(r.Units) && r.Units[u] != nil {
		return append([]uint8(nil), r.Units[u]...)
	}
	var out []uint8
	for _, id := range s.Plant[u].Serves {
		z := s.ZoneIndex(id)
		if z < 0 {
			continue
		}
		if out == nil {
			out = append(out, r.Zones[z].Plant...)
			continue
		}
		for i, v := range r.Zones[z].Plant {
			if v != PlantUnknown && (out[i] == PlantUnknown || v > out[i]) {
				out[i] = v
			}
		}
	}
	return out
}
