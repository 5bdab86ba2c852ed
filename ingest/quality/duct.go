package quality

import (
	"fmt"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// flushS is how long a return duct takes to carry the room's air again after
// its fan started. Our assumption.
const flushS = 15 * 60

// returnDucts takes out what zone sensors in a return duct say while the fan
// stands still, its state is unknown, or it has only just started.
func returnDucts(r *run) {
	for i := range r.site.Points {
		p := &r.site.Points[i]
		if p.Owner != site.OwnerZone || p.Placement != site.PlacementReturn {
			continue
		}
		c, ok := r.column(i)
		if !ok {
			continue
		}
		units, fans := r.ductFans(p.Index)
		if len(fans) == 0 {
			r.add(warn(reading.CheckReturnDuct, p.Index, []int{i},
				"the sensor hangs in a return duct and no status of the plant that serves the zone is logged, so still air cannot be told from the room's",
				"log the status of the fan, or move the sensor into the room"))
			continue
		}
		still, flushing, n := 0, 0, int64(0)
		sinceStart := int64(0)
		for k := 0; k < r.grid.N; k++ {
			moving := false
			for _, f := range fans {
				// Status 0 is off; anything above moves air.
				if known(f.Mean[k]) && f.Mean[k] >= 1 {
					moving = true
				}
			}
			if !moving {
				sinceStart = 0
			}
			if moving && sinceStart >= flushS {
				continue
			}
			if c.CoveredS[k] > 0 {
				if moving {
					flushing++
				} else {
					still++
				}
			}
			if moving {
				sinceStart += r.grid.StepS
			}
			n += r.built.Tally.Void(i, k, k+1, reading.StillAir)
		}
		if n == 0 {
			continue
		}
		r.add(reading.Check{Kind: reading.CheckReturnDuct, Points: []int{i}, Zone: p.Index, Effect: reading.EffectRemoved, Readings: n,
			Evidence: fmt.Sprintf("the sensor hangs in the return duct of %s; %.0f h with the fan off or its state unknown and %.0f h within %d min of its start are left out", units, r.hours(still), r.hours(flushing), flushS/60),
			DoNext:   "move the sensor into the room: in open mode nothing is known of the zone"})
	}
}

// ductFans returns the status columns of the plant whose duct returns air from
// the zone: units that bring outdoor or mixed air, else any that move air.
func (r *run) ductFans(zone int) (names string, fans []*grid.Column) {
	id := r.site.Zones[zone].ID
	pick := func(kinds ...site.AirKind) {
		for u := range r.site.Plant {
			pl := &r.site.Plant[u]
			if !slices.Contains(pl.Serves, id) || !slices.Contains(kinds, pl.Air) {
				continue
			}
			r.each(func(_ int, p *site.Point, c *grid.Column) {
				if p.Owner == site.OwnerPlant && p.Index == u {
					fans = append(fans, c)
					if names != "" {
						names += ", "
					}
					names += pl.ID
				}
			}, site.PlantStatus)
		}
	}
	pick(site.AirOutdoor, site.AirMixed, site.AirUnknown)
	if len(fans) == 0 {
		pick(site.AirRecirculated)
	}
	return names, fans
}
