package breeze

import (
	"cmp"
	"math"
	"slices"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Facing is one direction that openings face, and the wanted wind on them.
// Hours are the average occupant's wanted hours of the whole building, so that
// directions can be compared.
type Facing struct {
	FaceDeg float64
	Zones   []int // that have openings facing so
	// WindwardH, LeewardH and CalmH sum to the wanted hours with a known wind.
	WindwardH, LeewardH, CalmH, UnknownH float64
	// WindwardShare is WindwardH of those, NaN without any.
	WindwardShare float64
	// MeanWindwardMS is the mean wind at the height of the openings in the
	// windward hours, NaN without any.
	MeanWindwardMS float64

	speed float64
}

// facingsOf lists the directions openings face, in whole degrees; zones that
// use the openings of others have none of their own.
func facingsOf(s *site.Site, run *running.Result) (out []Facing, unknown []int) {
	at := map[int]int{}
	for z := range s.Zones {
		def := &s.Zones[z]
		if run.Zones[z].NoOpening || !def.Openings.Outdoors {
			continue
		}
		if len(def.FacesDeg) == 0 {
			unknown = append(unknown, z)
			continue
		}
		for _, deg := range def.FacesDeg {
			key := (int(math.Round(deg))%360 + 360) % 360
			k, ok := at[key]
			if !ok {
				k = len(out)
				at[key] = k
				out = append(out, Facing{FaceDeg: float64(key), WindwardShare: math.NaN(), MeanWindwardMS: math.NaN()})
			}
			if !slices.Contains(out[k].Zones, z) {
				out[k].Zones = append(out[k].Zones, z)
			}
		}
	}
	slices.SortFunc(out, func(a, b Facing) int { return cmp.Compare(a.FaceDeg, b.FaceDeg) })
	return out, unknown
}

func (f *Facing) add(ms, deg, calmMS, factor, h float64) {
	switch {
	case ms >= 0 && ms < calmMS:
		f.CalmH += h
	case !(ms >= 0) || math.IsNaN(deg):
		f.UnknownH += h
	case OffDeg(deg, f.FaceDeg) <= WindwardDeg:
		f.WindwardH += h
		f.speed += ms * factor * h
	default:
		f.LeewardH += h
	}
}

// rank finishes the facings, most of the wanted wind first.
func (r *Result) rank() {
	for k := range r.Facings {
		f := &r.Facings[k]
		f.WindwardShare = f.WindwardH / (f.WindwardH + f.LeewardH + f.CalmH)
		f.MeanWindwardMS = f.speed / f.WindwardH
	}
	slices.SortStableFunc(r.Facings, func(a, b Facing) int { return cmp.Compare(b.WindwardH, a.WindwardH) })
}

// FaceName is the name of the sector a direction lies in, empty for NaN.
func FaceName(deg float64) string {
	s := Sector(deg)
	if s < 0 {
		return ""
	}
	return SectorNames[s]
}
