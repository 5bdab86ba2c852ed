package doubt

import (
	"math"

	"gonum.org/v1/gonum/stat"
)

// figures turns one zone's draws into intervals.
func figures(base counts, byPart [NumParts][]counts) Figures {
	of := func(f func(counts) float64) Interval {
		var sd [NumParts]float64
		for p, list := range byPart {
			sd[p] = spread(list, f)
		}
		return interval(f(base), sd)
	}
	out := Figures{SuitedH: of(suited), AchievedH: of(achieved), AchievedOKH: of(ok), MissedH: of(missed), NotNeededH: of(notNeeded), AchievedShare: of(achievedShare)}
	out.clip()
	return out
}

// building combines zones: errors outdoors move all of them together, errors
// indoors each on its own.
func building(weights []float64, base []counts, sample *[NumParts][][]counts) Figures {
	mean := func(list []counts) (c counts) {
		for z, w := range weights {
			c.suited += w * list[z].suited
			c.achieved += w * list[z].achieved
			c.ok += w * list[z].ok
			c.missed += w * list[z].missed
			c.notNeeded += w * list[z].notNeeded
		}
		return c
	}
	all := mean(base)
	of := func(f func(counts) float64, byZone func(c counts) float64) Interval {
		var sd [NumParts]float64
		for p := range sample {
			if sample[p] == nil {
				continue
			}
			if Part(p) == OutdoorTemp || Part(p) == OutdoorHumidity {
				var list []counts
				for k := range sample[p] {
					list = append(list, mean(sample[p][k]))
				}
				sd[p] = spread(list, f)
				continue
			}
			sum := 0.0
			for z, w := range weights {
				var list []counts
				for k := range sample[p] {
					list = append(list, sample[p][k][z])
				}
				s := w * spread(list, byZone)
				sum += s * s
			}
			sd[p] = math.Sqrt(sum)
		}
		return interval(f(all), sd)
	}
	// The share of the building moves with a zone's hours to first order.
	possible := all.achieved + all.missed
	share := func(c counts) float64 {
		return (all.missed*c.achieved - all.achieved*c.missed) / (possible * possible)
	}
	out := Figures{SuitedH: of(suited, suited), AchievedH: of(achieved, achieved), AchievedOKH: of(ok, ok), MissedH: of(missed, missed),
		NotNeededH: of(notNeeded, notNeeded), AchievedShare: of(achievedShare, share)}
	out.clip()
	return out
}

func suited(c counts) float64        { return c.suited }
func achieved(c counts) float64      { return c.achieved }
func ok(c counts) float64            { return c.ok }
func missed(c counts) float64        { return c.missed }
func notNeeded(c counts) float64     { return c.notNeeded }
func achievedShare(c counts) float64 { return c.achieved / (c.achieved + c.missed) }

// spread is the standard deviation over the draws, which have unit variance by
// construction.
func spread(list []counts, f func(counts) float64) float64 {
	var x []float64
	for _, c := range list {
		if v := f(c); !math.IsNaN(v) {
			x = append(x, v)
		}
	}
	if len(x) < 2 {
		return 0
	}
	return math.Sqrt(stat.PopVariance(x, nil))
}

func interval(value float64, sd [NumParts]float64) Interval {
	i := Interval{Value: value}
	sum := 0.0
	for p, s := range sd {
		i.HalfWidth[p] = z90 * s
		sum += s * s
	}
	half := z90 * math.Sqrt(sum)
	i.Low, i.High = value-half, value+half
	return i
}

// clip keeps intervals possible: no negative hours, no share beyond 1.
func (f *Figures) clip() {
	for _, i := range []*Interval{&f.SuitedH, &f.AchievedH, &f.AchievedOKH, &f.MissedH, &f.NotNeededH, &f.AchievedShare} {
		i.Low = math.Max(i.Low, 0)
	}
	f.AchievedShare.High = math.Min(f.AchievedShare.High, 1)
}
