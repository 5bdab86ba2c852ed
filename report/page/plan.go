package page

import (
	"math"

	"sashlog/configs/site"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// plan shows where in the building hours were reached and where not.
func (b *builder) plan() block {
	d := chart.ZonePlanData{Caption: chart.Caption{Title: "Share of the possible hours reached, by floor and place", Desc: "Zones laid out by floor, the side they face, and the middle."},
		Legend: "reached of the possible"}
	at := map[string]int{}
	for z := range b.in.Site.Zones {
		def, x, r := &b.in.Site.Zones[z], &b.in.Results.Summary.Zones[z], &b.in.Results.Running.Zones[z]
		floor := b.w.Foreign(def.Floor)
		if _, ok := at[floor]; !ok {
			at[floor] = len(d.Floors)
			name := "Floor " + floor
			if floor == "" {
				name = "Floor not given"
			}
			d.Floors = append(d.Floors, chart.PlanFloor{Name: name})
		}
		p := chart.PlanZone{Zone: b.w.Zone(z), Side: side(def), NoOpening: r.NoOpening, Share: math.NaN()}
		if !r.NoOpening && r.HasContacts {
			if possible := (x.Achieved.Value + x.Missed.Value) * b.span.PerYear; possible > 0 {
				p.Share = x.AchievedShare.Value
				p.Words = words.Share(p.Share) + " of " + words.HoursNumber(possible) + "\u00a0h"
			}
		}
		f := &d.Floors[at[floor]]
		f.Zones = append(f.Zones, p)
	}
	return b.draw("zone-plan", "Where in the building the possible hours were reached: a scheme of each floor, dark where most were. Pale rooms beside dark ones share the weather, so the difference lies in the room, its openings or its plant.",
		"No zone has hours that ran open or could have, so there is no plan of zones.",
		func(o chart.Options) (chart.SVG, error) { return chart.ZonePlan(d, o) })
}

// side is the side of the floor a zone is drawn at: that of its first
// direction.
func side(z *site.Zone) chart.Side {
	if z.Place == site.Core || len(z.FacesDeg) == 0 {
		return chart.Middle
	}
	deg := math.Mod(z.FacesDeg[0]+360, 360)
	return []chart.Side{chart.North, chart.East, chart.South, chart.West}[int(math.Round(deg/90))%4]
}
