package running

import (
	"math"

	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// windowsOf lists the window points a zone breathes through: its own and
// those of the zones it opens through, with weights that sum to the share of
// the opening area that has contacts (1 when nothing else is known).
func windowsOf(s *site.Site, z int) (points []int, weights []float64) {
	owners := []int{}
	if s.Zones[z].Openings.Outdoors {
		owners = append(owners, z)
	}
	for _, id := range s.Zones[z].Openings.Through {
		if k := s.ZoneIndex(id); k >= 0 {
			owners = append(owners, k)
		}
	}
	for _, owner := range owners {
		var own []int
		given, unstated := 0.0, 0
		for i := range s.Points {
			p := &s.Points[i]
			if p.Owner != site.OwnerZone || p.Index != owner {
				continue
			}
			if p.Quantity != site.Window && p.Quantity != site.WindowOpening {
				continue
			}
			own = append(own, i)
			if math.IsNaN(p.Share) {
				unstated++
			} else {
				given += p.Share
			}
		}
		for _, i := range own {
			w := s.Points[i].Share
			if math.IsNaN(w) {
				w = math.Max(0, 1-given) / float64(unstated)
			}
			points = append(points, i)
			weights = append(weights, w/float64(len(owners)))
		}
	}
	return points, weights
}

// windowEvidence is what the contacts of a zone say, per step.
type windowEvidence struct {
	share   []float32 // area-weighted share open, NaN unless all openings are known
	open    []bool    // at least one known opening is open
	allShut []bool    // every opening is known to be shut
	has     bool      // at least one contact has readings
}

// wholeMin is the share of the opening area that must have contacts before
// "all shut" can be known. Our assumption: shares are written to a hundredth.
const wholeMin = 0.99

// windowEvidenceOf reads the contacts. A contact is open in a step when it was
// open for at least half of the covered time; a measured opening when it is
// above the threshold.
func windowEvidenceOf(s *site.Site, c criteria.Settings, g *grid.Grid, z int) windowEvidence {
	points, weights := windowsOf(s, z)
	e := windowEvidence{share: make([]float32, g.N), open: make([]bool, g.N), allShut: make([]bool, g.N)}
	total := 0.0
	for k, p := range points {
		total += weights[k]
		e.has = e.has || g.Columns[p].Mean != nil
	}
	need := needS(g, c)
	for i := 0; i < g.N; i++ {
		known, share := 0, 0.0
		for k, p := range points {
			col := &g.Columns[p]
			if col.Mean == nil || col.CoveredS[i] < need {
				continue
			}
			known++
			v := float64(col.Mean[i])
			if s.Points[p].Quantity == site.WindowOpening {
				share += weights[k] * v / 100
				e.open[i] = e.open[i] || round3(v/100) > round3(c.OpenThreshold)
				continue
			}
			if v >= 0.5 {
				share += weights[k]
				e.open[i] = true
			}
		}
		all := known == len(points) && known > 0 && total >= wholeMin
		e.allShut[i] = all && !e.open[i]
		e.share[i] = float32(math.NaN())
		if all {
			e.share[i] = float32(share / total)
		}
	}
	return e
}

// round3 rounds to 0.001 so that limits compare the same everywhere.
func round3(v float64) float64 { return math.Round(v*1000) / 1000 }
