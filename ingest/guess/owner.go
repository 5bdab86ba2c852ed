package guess

import (
	"strings"

	"sashlog/configs/site"
)

// own finds out what every track belongs to, and makes the list of zones and
// plant units.
func (p *Proposal) own() {
	o := owning{p: p, zones: map[string]*Zone{}, units: map[string]string{}, of: map[*Track]place{}}
	o.leads()
	for _, t := range p.Tracks {
		if t.Likely != "" {
			o.of[t] = o.placeOf(t)
		}
	}
	o.dropCommon()
	// Rooms with conditions of their own first, so that windows and presence
	// find them.
	for _, pass := range []bool{true, false} {
		for _, t := range p.Tracks {
			if t.Quantity != "" && conditions(t.Quantity) == pass {
				o.assign(t)
			}
		}
	}
	o.merge()
	o.oddOnes()
	o.crowded()
	o.outside()
	o.lone()
	o.finish()
}

func conditions(q site.Quantity) bool {
	switch q {
	case site.AirTemp, site.CO2, site.Humidity, site.ThermostatTemp, site.OperativeTemp, site.GlobeTemp, site.ReturnAirTemp:
		return true
	}
	return false
}

type owning struct {
	p      *Proposal
	zones  map[string]*Zone // by key of place
	order  []string
	units  map[string]string // folded to id
	uorder []string
	of     map[*Track]place
	alone  []*Track // zone quantities without any place
	serves map[string]map[string]bool
}

// placeOf reads the place from the track's own name, else from what stands
// around it: the key of its rows, the sheet, the file, the folder.
func (o *owning) placeOf(t *Track) place {
	own := placeAfter(t.name, t.names.tokens, t.Log.Setting.Layout == site.PerPoint && t.names.text == t.Column, t.Log.lead)
	if len(t.Log.Setting.KeyColumns) > 1 {
		key := t.name
		if t.Column != t.name {
			key = t.around
		}
		if room := roomOf(t.Log.Setting.KeyColumns, key); room != "" {
			return placeIn(room, tokens(room), false)
		}
	}
	if t.Log.Setting.Layout == site.Long && t.around != "" && t.Column != t.name {
		ts := tokens(t.around)
		unitOf(t.around, ts)
		key := placeIn(t.around, ts, false)
		if deviceKey(t.Log) && !key.marked {
			key = place{unit: key.unit}
			own.words = nil
		}
		if key.room != "" || key.floor != "" {
			if key.unit == "" {
				key.unit = own.unit
			}
			return key
		}
		if own.empty() && !key.empty() {
			return key
		}
	}
	if t.Log.Setting.Layout == site.Long && t.Column == t.name && deviceKey(t.Log) && !own.marked && own.room == "" {
		own.words = nil
	}
	if !own.empty() || own.unit != "" {
		return own
	}
	return o.around(t)
}

// assign settles the owner of one mapped track.
func (o *owning) assign(t *Track) {
	pl := o.of[t]
	q := t.Quantity
	if q == site.ReturnAirTemp && t.Placement == site.PlacementReturn {
		if !pl.empty() && pl.unit == "" {
			q = site.AirTemp
			t.Quantity, t.Likely = q, q
			t.Reasons = append(t.Reasons, "a room's sensor in its return duct")
		} else {
			t.Placement = ""
		}
	}
	switch {
	case q.IsWeather():
		t.Owner, t.OwnerKind, t.OwnerConf = "site", site.OwnerSite, 0.95
	case pl.unit != "" && q.MayBelong(site.OwnerPlant):
		o.toUnit(t, pl)
	case !pl.empty() && q.MayBelong(site.OwnerZone):
		o.toZone(t, pl)
	case pl.unit != "" && q.MayBelong(site.OwnerZone):
		// A room's point named by its unit alone.
		zone := pl
		zone.words = []string{"room of", strings.ToLower(pl.unit)}
		zone.text = "room-of-" + pl.unit
		o.toZone(t, zone)
		o.link(pl.unit, t)
		t.OwnerConf = 0.7
		t.Doubts = append(t.Doubts, "the room is named by its unit "+pl.unit+" only")
	case q.MayBelong(site.OwnerSite) && t.names.any("unit") == 0 && q != site.PlantStatus:
		t.Owner, t.OwnerKind, t.OwnerConf = "site", site.OwnerSite, 0.65
		t.Doubts = append(t.Doubts, "the name says neither room nor unit: taken for the whole site")
	case q.MayBelong(site.OwnerPlant) && !q.MayBelong(site.OwnerZone), q == site.PlantStatus, q == site.SupplyAirTemp:
		pl.unit = o.loneUnit(t)
		o.toUnit(t, pl)
		t.OwnerConf = 0.65
		t.Doubts = append(t.Doubts, "the name says no unit")
	default:
		o.alone = append(o.alone, t)
	}
}
