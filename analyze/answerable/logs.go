package answerable

import (
	"math"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// readingsMin is the least share of the period a point must cover to count as
// there. Our assumption: less is a trace, not a log.
const readingsMin = 0.01

// logs is what there are readings of.
type logs struct {
	s     *site.Site
	site  map[site.Quantity]bool
	zone  []map[site.Quantity]bool
	plant []map[site.Quantity]bool
	// windowShare is the share of a zone's opening area with readings.
	windowShare []float64
}

func look(s *site.Site, g *grid.Grid) *logs {
	l := &logs{s: s, site: map[site.Quantity]bool{}, zone: make([]map[site.Quantity]bool, len(s.Zones)),
		plant: make([]map[site.Quantity]bool, len(s.Plant)), windowShare: make([]float64, len(s.Zones))}
	for z := range l.zone {
		l.zone[z] = map[site.Quantity]bool{}
	}
	for u := range l.plant {
		l.plant[u] = map[site.Quantity]bool{}
	}
	for i := range s.Points {
		p := &s.Points[i]
		if i >= len(g.Columns) || !covers(g, &g.Columns[i]) {
			continue
		}
		switch {
		case p.Owner == site.OwnerSite:
			l.site[p.Quantity] = true
		case p.Owner == site.OwnerZone && p.Index >= 0 && p.Index < len(l.zone):
			l.zone[p.Index][p.Quantity] = true
		case p.Owner == site.OwnerPlant && p.Index >= 0 && p.Index < len(l.plant):
			l.plant[p.Index][p.Quantity] = true
		}
	}
	for z := range l.zone {
		l.windowShare[z] = l.ownWindowShare(g, z)
	}
	return l
}

// covers reports whether a column has readings for enough of the period.
func covers(g *grid.Grid, c *grid.Column) bool {
	if c.Mean == nil {
		return false
	}
	known := 0
	for i := g.PeriodFrom; i < g.PeriodTo && i < len(c.Mean); i++ {
		if !math.IsNaN(float64(c.Mean[i])) {
			known++
		}
	}
	return known > 0 && float64(known) >= readingsMin*float64(g.PeriodTo-g.PeriodFrom)
}

// ownWindowShare is the share of a zone's own opening area whose windows have
// readings; windows without a stated share split what is left equally.
func (l *logs) ownWindowShare(g *grid.Grid, z int) float64 {
	var given, givenLogged float64
	unstated, unstatedLogged := 0, 0
	for i := range l.s.Points {
		p := &l.s.Points[i]
		if p.Owner != site.OwnerZone || p.Index != z || (p.Quantity != site.Window && p.Quantity != site.WindowOpening) {
			continue
		}
		logged := i < len(g.Columns) && covers(g, &g.Columns[i])
		if math.IsNaN(p.Share) {
			unstated++
			if logged {
				unstatedLogged++
			}
			continue
		}
		given += p.Share
		if logged {
			givenLogged += p.Share
		}
	}
	share := givenLogged
	if unstated > 0 {
		share += math.Max(0, 1-given) * float64(unstatedLogged) / float64(unstated)
	}
	return share
}

// windows is the share of the openings a zone breathes through that have
// readings: its own and those it opens through, all weighing the same.
func (l *logs) windows(z int) float64 {
	o := l.s.Zones[z].Openings
	sum, n := 0.0, 0
	if o.Outdoors {
		sum, n = sum+l.windowShare[z], n+1
	}
	for _, id := range o.Through {
		if k := l.s.ZoneIndex(id); k >= 0 {
			sum, n = sum+l.windowShare[k], n+1
		}
	}
	if n == 0 {
		return math.NaN()
	}
	return sum / float64(n)
}

// serving lists the plant units that serve a zone.
func (l *logs) serving(z int) []int {
	var out []int
	for u := range l.s.Plant {
		for _, id := range l.s.Plant[u].Serves {
			if id == l.s.Zones[z].ID {
				out = append(out, u)
				break
			}
		}
	}
	return out
}

func (l *logs) any(z int, q ...site.Quantity) bool {
	for _, k := range q {
		if l.zone[z][k] {
			return true
		}
	}
	return false
}

// refusedWindows names zones whose window points are mapped and have no
// readings left.
func (l *logs) refusedWindows() []string {
	var out []string
	for z := range l.s.Zones {
		mapped := false
		for i := range l.s.Points {
			p := &l.s.Points[i]
			mapped = mapped || p.Owner == site.OwnerZone && p.Index == z && (p.Quantity == site.Window || p.Quantity == site.WindowOpening)
		}
		if mapped && l.windowShare[z] == 0 {
			out = append(out, l.s.Zones[z].ID)
		}
	}
	return out
}
