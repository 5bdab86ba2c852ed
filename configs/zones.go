package configs

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"sashlog/configs/site"
)

// siteID is how points.csv names the site itself.
const siteID = "site"

func (b *builder) zones() {
	s := b.out.Site
	if len(b.raw.Zones) == 0 {
		b.missing("zones", "an audit needs at least one zone")
	}
	seen := map[string]string{}
	for i := range b.raw.Zones {
		r, path := &b.raw.Zones[i], fmt.Sprintf("zones[%d]", i)
		b.id(path, r.ID, seen)
		z := site.Zone{
			ID: r.ID, Name: r.Name, Floor: r.Floor,
			AreaM2:     b.positive(path+".area_m2", r.AreaM2, 1e6, " m²"),
			HeightM:    b.positive(path+".height_m", r.HeightM, 100, " m"),
			People:     b.number(path+".people", r.People, 0, 1e5, ""),
			Place:      word(b, path+".place", r.Place, site.PlaceUnknown, site.Perimeter, site.Core),
			FacesDeg:   b.faces(path+".faces", r.Faces),
			Windows:    word(b, path+".windows", r.Windows, site.ManualWindows, site.ManualWindows, site.AutomaticWindows, site.MixedWindows),
			FanSpeedMS: b.positive(path+".fan_m_s", r.FanMS, 3, " m/s"),
			Scheme:     word(b, path+".scheme", r.Scheme, site.Changeover, site.Changeover, site.Concurrent, site.Zoned),
			Category:   word(b, path+".category", r.Category, "", "I", "II", "III"),
			Use:        word(b, path+".use", r.Use, site.UseOther, site.UseOther, site.UseBedroom, site.UseLiving),
		}
		if z.Name == "" {
			z.Name = z.ID
		}
		z.OccupancySource = word(b, path+".occupied.source", r.Occupied.Source, "", site.BySchedule, site.ByPresence)
		z.Occupied = b.times(path+".occupied.times", r.Occupied.Times)
		z.Openings = b.openings(path, r)
		b.hasTimes(path, &z)
		s.Zones = append(s.Zones, z)
	}
	b.through()
}

// id checks an id: given, without spaces around it, and used once.
func (b *builder) id(path, id string, seen map[string]string) {
	here := path + ".id"
	switch {
	case strings.TrimSpace(id) == "":
		b.missing(here, "every zone and plant unit needs an id; the points table refers to it")
		return
	case id != strings.TrimSpace(id):
		b.tree.at(here, "", "id is %q: spaces at its ends would be lost in the points table", id)
	case strings.EqualFold(id, siteID):
		b.tree.at(here, "", "id is %q: the points table uses this word for the site itself", id)
	}
	if first, twice := seen[id]; twice {
		line, _ := b.tree.where(first)
		b.tree.at(here, "ids name one zone or plant unit each", "id %q is used twice, first on line %d", id, line)
		return
	}
	seen[id] = here
}

// hasTimes reports a zone whose occupied time nothing establishes.
func (b *builder) hasTimes(path string, z *site.Zone) {
	for _, p := range []string{path, path + ".occupied", "occupancy", "occupancy.source", "occupancy.times"} {
		if b.tree.reported(p) {
			return
		}
	}
	o := &b.out.Site.Occupancy
	source := z.OccupancySource
	if source == "" {
		source = o.Source
	}
	if source == site.BySchedule && len(b.raw.Occupancy.Times) == 0 && len(z.Occupied) == 0 && !b.tree.has(path+".occupied.times") {
		b.tree.at(path+".occupied", "give occupancy: times for the site, occupied: times for the zone, or source: presence",
			"zone %q has no occupied times", z.ID)
	}
}

// compass holds the points a zone may face, degrees clockwise from north.
var compass = []struct {
	name string
	deg  float64
}{
	{"N", 0}, {"NNE", 22.5}, {"NE", 45}, {"ENE", 67.5}, {"E", 90}, {"ESE", 112.5}, {"SE", 135}, {"SSE", 157.5},
	{"S", 180}, {"SSW", 202.5}, {"SW", 225}, {"WSW", 247.5}, {"W", 270}, {"WNW", 292.5}, {"NW", 315}, {"NNW", 337.5},
}

func (b *builder) faces(path string, raw many) []float64 {
	var out []float64
	for i, text := range raw {
		here := path
		if p := fmt.Sprintf("%s[%d]", path, i); b.tree.has(p) {
			here = p
		}
		deg, err := strconv.ParseFloat(text, 64)
		if err != nil {
			deg = math.NaN()
			for _, c := range compass {
				if strings.EqualFold(c.name, strings.TrimSpace(text)) {
					deg = c.deg
				}
			}
		}
		if !(deg >= 0 && deg <= 360) {
			b.tree.at(here, "", "faces is %q: must be a compass point (N, NE, ... NNW) or degrees from 0 to 360, clockwise from north", text)
			continue
		}
		deg = math.Mod(deg, 360)
		if slices.Contains(out, deg) {
			b.tree.at(here, "", "faces names %q twice", text)
			continue
		}
		out = append(out, deg)
	}
	return out
}

func (b *builder) openings(path string, r *rawZone) site.Openings {
	here := path + ".openings"
	switch {
	case r.Openings.Word != "":
		if len(r.Openings.Through) > 0 {
			break
		}
		w := word(b, here, r.Openings.Word, "outdoors", "outdoors", "none")
		if w == "none" && len(r.Faces) > 0 {
			b.tree.at(path+".faces", "remove faces, or say openings: outdoors", "zone %q faces outdoors but has no openings", r.ID)
		}
		return site.Openings{Outdoors: w == "outdoors"}
	case len(r.Openings.Through) > 0:
		return site.Openings{Through: r.Openings.Through}
	case b.tree.has(here):
		if !b.tree.reported(here) && !b.tree.reported(here+".through") {
			b.tree.at(here, "write outdoors, none, or {through: [ids of zones]}", "openings says nothing")
		}
	default:
		b.warn(path, "say openings: outdoors, none, or {through: [ids of zones]}",
			"zone %q does not say whether it opens: taken as openings to outdoors", r.ID)
	}
	return site.Openings{Outdoors: true}
}

// through checks the zones that open through others.
func (b *builder) through() {
	s := b.out.Site
	for i := range s.Zones {
		z := &s.Zones[i]
		for j, id := range z.Openings.Through {
			path := fmt.Sprintf("zones[%d].openings.through", i)
			if p := fmt.Sprintf("%s[%d]", path, j); b.tree.has(p) {
				path = p
			}
			k := s.ZoneIndex(id)
			switch {
			case k < 0:
				b.tree.at(path, didYouMean(id, b.zoneIDs()), "zone %q opens through %q: there is no such zone", z.ID, id)
			case k == i:
				b.tree.at(path, "write openings: outdoors if it has openings of its own", "zone %q opens through itself", z.ID)
			case !s.Zones[k].Openings.Outdoors:
				b.tree.at(path, "name a zone with openings: outdoors", "zone %q opens through %q, which has no openings to outdoors", z.ID, id)
			case slices.Contains(z.Openings.Through[:j], id):
				b.tree.at(path, "", "zone %q names %q twice", z.ID, id)
			}
		}
	}
}

func (b *builder) zoneIDs() []string {
	var out []string
	for i := range b.out.Site.Zones {
		out = append(out, b.out.Site.Zones[i].ID)
	}
	return out
}

func (b *builder) plantIDs() []string {
	var out []string
	for i := range b.out.Site.Plant {
		out = append(out, b.out.Site.Plant[i].ID)
	}
	return out
}

func (b *builder) plant() {
	s := b.out.Site
	seen := map[string]string{}
	for i := range s.Zones {
		if _, ok := seen[s.Zones[i].ID]; !ok {
			seen[s.Zones[i].ID] = fmt.Sprintf("zones[%d].id", i)
		}
	}
	for i := range b.raw.Plant {
		r, path := &b.raw.Plant[i], fmt.Sprintf("plant[%d]", i)
		b.id(path, r.ID, seen)
		p := site.Plant{ID: r.ID, Name: r.Name, Serves: r.Serves,
			Air:          word(b, path+".air", r.Air, site.AirUnknown, site.AirOutdoor, site.AirRecirculated, site.AirMixed, site.AirNone),
			RatedPowerKW: b.positive(path+".rated_power_kw", r.RatedPowerKW, 1e5, " kW")}
		if p.Name == "" {
			p.Name = p.ID
		}
		if len(p.Serves) == 0 {
			b.missing(path+".serves", "list the ids of the zones the unit serves")
		}
		for j, id := range p.Serves {
			here := path + ".serves"
			if q := fmt.Sprintf("%s[%d]", here, j); b.tree.has(q) {
				here = q
			}
			if s.ZoneIndex(id) < 0 {
				b.tree.at(here, didYouMean(id, b.zoneIDs()), "plant unit %q serves %q: there is no such zone", r.ID, id)
			} else if slices.Contains(p.Serves[:j], id) {
				b.tree.at(here, "", "plant unit %q serves %q twice", r.ID, id)
			}
		}
		s.Plant = append(s.Plant, p)
	}
}
