package guess

import (
	"fmt"

	"sashlog/configs/site"
)

// oddOnes leaves open what would be the only thing known of a zone, where that
// zone is made of unknown words and other zones have several quantities: the
// words may speak of the quantity, not of a room.
func (o *owning) oddOnes() {
	several := 0
	for _, z := range o.zones {
		if len(o.held(z.ID)) > 1 {
			several++
		}
	}
	if several < 2 {
		return
	}
	for _, k := range append([]string{}, o.order...) {
		z := o.zones[k]
		if len(z.key.words) == 0 {
			continue
		}
		var mine []*Track
		for _, t := range o.p.Tracks {
			if t.Owner == z.ID && t.OwnerKind == site.OwnerZone {
				mine = append(mine, t)
			}
		}
		if len(mine) != 1 {
			continue
		}
		t := mine[0]
		t.Owner = ""
		t.Doubts = append(t.Doubts, fmt.Sprintf("nothing else is known of %q: is it a room?", z.ID))
		o.drop(k)
	}
}

// crowded leaves open columns whose names differ by a number alone and yet fell
// into one zone with one quantity: the number may be the room's.
func (o *owning) crowded() {
	type seat struct {
		owner, source, template string
		q                       site.Quantity
	}
	seats := map[seat][]*Track{}
	for _, t := range o.p.Tracks {
		if t.Quantity == "" || t.OwnerKind != site.OwnerZone || !conditions(t.Quantity) && t.Quantity != site.SetpointHeat && t.Quantity != site.SetpointCool && t.Quantity != site.ZoneDamper {
			continue
		}
		s := seat{t.Owner, t.Source, figures.ReplaceAllString(t.Column, "#"), t.Quantity}
		seats[s] = append(seats[s], t)
	}
	for s, list := range seats {
		if len(list) < 2 {
			continue
		}
		for i, t := range list {
			other := list[(i+1)%len(list)]
			t.Doubts = append(t.Doubts, fmt.Sprintf("%q as well would be %s of %s: are they different rooms?", other.Column, s.q, s.owner))
			t.Owner = ""
		}
	}
}

// outside leaves open zones whose temperature moves like outdoor air beside
// all others, and marks those whose names have no number where others have.
func (o *owning) outside() {
	swing := map[*Track]float64{}
	numbered := 0
	for _, z := range o.zones {
		if z.key.room != "" {
			numbered++
		}
	}
	for _, t := range o.p.Tracks {
		if t.Quantity == site.AirTemp && t.Owner != "" && t.OwnerKind == site.OwnerZone {
			swing[t] = t.daily()
		}
	}
	for _, k := range append([]string{}, o.order...) {
		z := o.zones[k]
		var mine, other, lows []float64
		for t, s := range swing {
			if t.Unit == "degF" {
				s /= 1.8
			}
			switch {
			case s != s:
			case t.Owner == z.ID:
				mine = append(mine, s)
			default:
				other = append(other, s)
				lows = append(lows, t.celsius(0.02))
			}
		}
		var own []*Track
		for _, t := range o.p.Tracks {
			if t.Owner == z.ID && t.OwnerKind == site.OwnerZone {
				own = append(own, t)
			}
		}
		cold := false
		for _, t := range own {
			if t.Quantity == site.AirTemp && len(lows) > 0 {
				cold = cold || t.celsius(0.02) < half(lows)-4
			}
		}
		switch {
		case len(mine) > 0 && len(other) > 1 && half(mine) > 1.8*half(other) && cold:
			for _, t := range own {
				t.Owner = ""
				t.Doubts = append(t.Doubts, fmt.Sprintf("temperature at %q moves like outdoor air, unlike all rooms: is it outdoors?", z.ID))
			}
			o.drop(k)
		case len(z.key.words) > 0 && z.key.room == "" && numbered >= 2 && numbered*2 > len(o.order):
			for _, t := range own {
				t.OwnerConf = min(t.OwnerConf, 0.7)
				t.Doubts = append(t.Doubts, fmt.Sprintf("other rooms have numbers: is %q a room?", z.ID))
			}
		}
	}
}

// celsius is a quantile of a temperature in degC.
func (t *Track) celsius(q float64) float64 {
	v := t.q(q)
	if c, err := site.Convert(site.AirTemp, t.Unit); err == nil {
		return c.Factor*v + c.Offset
	}
	return v
}

// oneStation keeps one weather station where rows of several are mixed: which
// is nearest only a person can say. Copies of one series are kept once.
func (o *owning) oneStation() {
	best := map[string]*Track{}
	for _, t := range o.p.Tracks {
		if t.OwnerKind != site.OwnerSite || t.Quantity == "" || !t.Quantity.IsWeather() {
			continue
		}
		k := string(t.Quantity)
		b := best[k]
		switch {
		case b == nil:
			best[k] = t
		case t.copies(b):
			t.Likely, t.Quantity = t.Quantity, ""
			t.Doubts = append(t.Doubts, fmt.Sprintf("the same readings as %q", b.Column))
		case t.Log == b.Log && t.Log.Setting.Layout == site.Long && len(t.Log.Setting.ValueColumns) > 1:
			t.Likely, t.Quantity = t.Quantity, ""
			t.Doubts = append(t.Doubts, fmt.Sprintf("several stations in one log: %q was taken; keep the one nearest to the site", b.around))
		}
	}
}

// copies reports the same series under another name.
func (t *Track) copies(u *Track) bool {
	if t.number != u.number || t.min != u.min || t.max != u.max || len(t.bins.mean) != len(u.bins.mean) || t.number < 10 {
		return false
	}
	for i := range t.bins.mean {
		a, b := t.bins.mean[i], u.bins.mean[i]
		if a != b && (a == a || b == b) {
			return false
		}
	}
	return true
}
