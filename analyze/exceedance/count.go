package exceedance

import (
	"fmt"
	"math"

	"sashlog/analyze/cores"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Count fills in how long each zone was outside each criterion in its occupied
// time of the period. hourOf gives the index of the local hour a step is in.
func (r *Result) Count(s *site.Site, c criteria.Settings, g *grid.Grid, out *outdoor.Outdoor, in []indoor.Zone, run *running.Result, felt *predicted.Result, hourOf []int32) {
	judges := make([][]judge, len(r.Zones))
	cores.Each(len(r.Zones), func(z int) {
		zone := &r.Zones[z]
		cat := categoryOf(c, &s.Zones[z])
		judges[z] = judgesOf(c, out, cat, &zone.Limits, run.Zones[z].PeopleCanOpen, s.Zones[z].FanSpeedMS)
		judges[z] = append(judges[z], voteJudges(cat, &felt.Zones[z])...)
		zone.Criteria = nil
		for k := range judges[z] {
			zone.Criteria = append(zone.Criteria, r.total(s, g, &in[z], &run.Zones[z], z, &judges[z][k]))
		}
	})
	r.EachHour = func(f func(Hourly)) {
		for z := range r.Zones {
			for k := range judges[z] {
				r.eachHour(g, &in[z], &run.Zones[z], z, &judges[z][k], hourOf, f)
			}
		}
	}
}

// verdict is what a criterion says of one occupied step.
type verdict struct {
	model       string
	applies     bool
	known       bool
	over, under float64 // degrees (or votes) beyond the limit, 0 inside
}

func (r *Result) at(in *indoor.Zone, run *running.Zone, z, i int, j *judge) verdict {
	if in.OperativeC == nil || math.IsNaN(float64(in.OperativeC[i])) {
		return verdict{}
	}
	t := float64(in.OperativeC[i])
	if j.votes != nil {
		if l := &r.Zones[z].Limits; l.Free[i] || l.Model[i] == NoModel {
			return verdict{known: true}
		}
		vote := float64(j.votes.list[i])
		if math.IsNaN(vote) {
			return verdict{}
		}
		v := verdict{j.votes.words, true, true, beyond(vote, j.votes.limit), beyond(-vote, j.votes.limit)}
		if j.votes.zone.Outside[i] && v.over == 0 && v.under == 0 {
			return verdict{known: true} // the method does not vouch for comfort here
		}
		return v
	}
	model, low, high, ok := j.band(i)
	if !ok {
		// Without a running mean nothing is known of limits.
		return verdict{model: model, known: r.Zones[z].Limits.Model[i] != NoModel}
	}
	v := verdict{model, true, true, beyond(t, high), beyond(-t, -low)}
	if j.other != nil && run.PeopleCanOpen && run.Plant[i] == running.PlantUnknown {
		// Which limits hold is not known; what both say is.
		low, high := j.other(i)
		if (beyond(t, high) > 0) != (v.over > 0) || (beyond(-t, -low) > 0) != (v.under > 0) {
			return verdict{model: model}
		}
	}
	return v
}

// beyond is how far x lies above limit, both rounded to 0.001; a limit that is
// NaN cannot be broken.
func beyond(x, limit float64) float64 {
	d := math.Round(x*1000)/1000 - math.Round(limit*1000)/1000
	if d > 0 {
		return d
	}
	return 0
}

func (r *Result) total(s *site.Site, g *grid.Grid, in *indoor.Zone, run *running.Zone, z int, j *judge) Criterion {
	c := Criterion{ID: j.id, Words: j.words, Source: j.source, Note: j.note, CalculationOnly: j.calculationOnly}
	h := g.StepH()
	var applies, notApplicable, unknown, over, under, assumed int
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		if run.Occupied[i] != running.Occupied {
			continue
		}
		v := r.at(in, run, z, i, j)
		switch {
		case !v.known:
			unknown++
		case !v.applies:
			notApplicable++
		default:
			applies++
			if j.votes != nil && j.votes.zone.AssumedHumidity(i) {
				assumed++
			}
			if v.over > 0 {
				over++
			}
			if v.under > 0 {
				under++
			}
			c.OverKh += v.over * h
			c.UnderKh += v.under * h
		}
	}
	c.AppliesH, c.NotApplicableH, c.UnknownH = float64(applies)*h, float64(notApplicable)*h, float64(unknown)*h
	if assumed > 0 {
		c.Note += fmt.Sprintf("; indoor humidity is not known in %.0f of these hours and taken as 50 %%", float64(assumed)*h)
	}
	c.OverH, c.UnderH = float64(over)*h, float64(under)*h
	c.PersonOverH, c.PersonUnderH = c.OverH*s.Zones[z].People, c.UnderH*s.Zones[z].People
	c.OverShare, c.UnderShare = share(over, applies, unknown), share(under, applies, unknown)
	return c
}

// share is part/known with bounds: the unknown steps going wholly either way.
func share(part, known, unknown int) Range {
	if known+unknown == 0 {
		return Range{math.NaN(), math.NaN(), math.NaN()}
	}
	all := float64(known + unknown)
	r := Range{math.NaN(), float64(part) / all, float64(part+unknown) / all}
	if known > 0 {
		r.Value = float64(part) / float64(known)
	}
	return r
}

// eachHour yields the hours of one zone and criterion in which it applies.
func (r *Result) eachHour(g *grid.Grid, in *indoor.Zone, run *running.Zone, z int, j *judge, hourOf []int32, f func(Hourly)) {
	h := float32(g.StepH())
	cur := Hourly{Zone: z, Hour: -1, Criterion: j.id}
	some := false
	flush := func() {
		if some {
			f(cur)
		}
		some = false
	}
	for i := g.PeriodFrom; i < g.PeriodTo; i++ {
		if run.Occupied[i] != running.Occupied {
			continue
		}
		v := r.at(in, run, z, i, j)
		if !v.applies {
			continue
		}
		if int(hourOf[i]) != cur.Hour {
			flush()
			cur = Hourly{Zone: z, Hour: int(hourOf[i]), Criterion: j.id}
		}
		some, cur.Model = true, v.model
		if v.over > 0 {
			cur.OverH += h
			cur.OverKh += float32(v.over) * h
		}
		if v.under > 0 {
			cur.UnderH += h
			cur.UnderKh += float32(v.under) * h
		}
	}
	flush()
}
