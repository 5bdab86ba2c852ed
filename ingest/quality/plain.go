package quality

import (
	"fmt"
	"slices"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// declaredFaults takes out what the diary says not to use: points of the zones
// named, or of all zones.
func declaredFaults(r *run) {
	for _, e := range r.site.Diary {
		if e.Kind != site.EventFault {
			continue
		}
		from, to := r.overlaps(e.FromUTC, e.ToUTC)
		zone := -1
		if len(e.Zones) == 1 {
			zone = r.site.ZoneIndex(e.Zones[0])
		}
		var points []int
		var n int64
		for i := range r.site.Points {
			p := &r.site.Points[i]
			if p.Owner != site.OwnerZone || (len(e.Zones) > 0 && !slices.Contains(e.Zones, r.site.Zones[p.Index].ID)) {
				continue
			}
			if moved := r.built.Tally.Void(i, from, to, reading.DeclaredFault); moved > 0 {
				points, n = append(points, i), n+moved
			}
		}
		if len(points) == 0 {
			continue
		}
		r.add(reading.Check{Kind: reading.CheckDeclaredFault, Points: points, Zone: zone, Effect: reading.EffectRemoved,
			FromUTC: e.FromUTC, ToUTC: e.ToUTC, Readings: n,
			Evidence: fmt.Sprintf("the diary declares a fault %s: %s", span(e.FromUTC, e.ToUTC, r.grid.Loc), e.Note),
			DoNext:   "nothing, if the fault is mended; else end it in the diary on the day it is"})
	}
}

// How long a number may stay the same depends on how finely it is logged and
// on whether it sits at its own end of scale. Our assumption.
const (
	frozenCoarseS = 3 * dayS
	frozenEndS    = 5 * dayS
	frozenDuctS   = 2 * dayS
)

// frozen takes out runs of exactly the same value.
func frozen(r *run) {
	for i := range r.site.Points {
		facts, l := &r.built.Facts[i], &r.ledger.Points[i]
		var n int64
		var runs int
		var longest grid.Run
		var fromUTC, toUTC int64
		for _, f := range facts.Runs {
			if f.ToUTC-f.FromUTC < frozenLimit(r.site.Points[i].Quantity, facts.Resolution, f.Value, l) {
				continue
			}
			from, to := r.overlaps(f.FromUTC, f.ToUTC+max(l.IntervalS, 1))
			moved := r.built.Tally.Void(i, from, to, reading.Frozen)
			if moved == 0 {
				continue
			}
			if runs == 0 {
				fromUTC = f.FromUTC
			}
			n, runs, toUTC = n+moved, runs+1, f.ToUTC
			if f.ToUTC-f.FromUTC > longest.ToUTC-longest.FromUTC {
				longest = f
			}
		}
		if runs == 0 {
			continue
		}
		r.add(reading.Check{Kind: reading.CheckFrozen, Points: []int{i}, Zone: zoneOf(r.site, i), Effect: reading.EffectRemoved,
			FromUTC: fromUTC, ToUTC: toUTC, Readings: n,
			Evidence: fmt.Sprintf("%s of exactly the same value; the longest lasted %.0f h from %s at %.4g (%d readings)", count(runs, "run", "runs"),
				float64(longest.ToUTC-longest.FromUTC)/hourS, minute(longest.FromUTC, r.grid.Loc), longest.Value, longest.Readings),
			DoNext: "look whether the sensor answers, or whether the log repeats the last value while the link is down"})
	}
}

func frozenLimit(q site.Quantity, resolution, value float64, l *reading.PointLedger) int64 {
	limit := int64(frozenS)
	t, _ := q.Trait()
	switch {
	case q == site.SupplyAirTemp || q == site.MixedAirTemp || q == site.ReturnAirTemp:
		limit = frozenDuctS
	case t.Unit == "degC" && resolution >= 0.5, t.Unit == "%" && resolution >= 1, t.Unit == "ppm" && resolution >= 10:
		limit = frozenCoarseS
	}
	if resolution > 0 && (value == l.Min || value == l.Max) {
		limit = max(limit, frozenEndS) // a calm, a fog, a sensor at its floor
	}
	return limit
}

func outOfRange(r *run) {
	for i := range r.site.Points {
		l := &r.ledger.Points[i]
		n := l.Counts[reading.OutOfRange]
		if n == 0 {
			continue
		}
		rule, f := Rule(&r.site.Points[i]), &r.built.Facts[i]
		t, _ := r.site.Points[i].Quantity.Trait()
		do := "nothing, if they are few; they are left out"
		if share := float64(n) / float64(l.RowsRead); share > 0.05 {
			do = fmt.Sprintf("%.0f %% of the readings: check the unit in points.csv, then the sensor", 100*share)
		}
		r.add(reading.Check{Kind: reading.CheckRange, Points: []int{i}, Zone: zoneOf(r.site, i), Effect: reading.EffectRemoved, Readings: n, DoNext: do,
			Evidence: fmt.Sprintf("%s outside %g to %g %s, between %.4g and %.4g", count(int(n), "reading", "readings"), rule.Low, rule.High, unitWords(t.Unit), f.OutLow, f.OutHigh)})
	}
}

func spikes(r *run) {
	for i := range r.site.Points {
		if n := r.ledger.Points[i].Counts[reading.Spike]; n > 0 {
			t, _ := r.site.Points[i].Quantity.Trait()
			r.add(reading.Check{Kind: reading.CheckSpike, Points: []int{i}, Zone: zoneOf(r.site, i), Effect: reading.EffectRemoved, Readings: n,
				Evidence: fmt.Sprintf("%s more than %g %s from both neighbours, which agree", count(int(n), "single reading", "single readings"), Rule(&r.site.Points[i]).Spike, unitWords(t.Unit)),
				DoNext:   "nothing, if they are few; else look at the wiring of the sensor"})
		}
	}
}

func duplicates(r *run) {
	for i := range r.site.Points {
		l := &r.ledger.Points[i]
		twice, conflict := l.Counts[reading.Duplicate], l.Counts[reading.Conflict]
		if twice+conflict == 0 {
			continue
		}
		var parts []string
		do := "nothing: repeated rows change no result"
		if twice > 0 {
			parts = append(parts, fmt.Sprintf("%s the same value again at the same instant", count(int(twice), "reading says", "readings say")))
		}
		if conflict > 0 {
			var at []string
			for _, t := range r.built.Facts[i].ConflictsUTC {
				at = append(at, minute(t, r.grid.Loc))
			}
			parts = append(parts, fmt.Sprintf("%s with another value for the same instant, all left out, first at %s", count(int(conflict), "reading", "readings"), strings.Join(at, ", ")))
			do = "look whether two sensors are mapped to one point, or a log was exported twice with corrections"
		}
		r.add(reading.Check{Kind: reading.CheckDuplicate, Points: []int{i}, Zone: zoneOf(r.site, i), Effect: reading.EffectRemoved, Readings: twice + conflict,
			Evidence: strings.Join(parts, "; "), DoNext: do})
	}
}

func disorder(r *run) {
	bySource := map[string][]int{}
	var names []string
	for i := range r.site.Points {
		if r.ledger.Points[i].Disordered {
			src := r.site.Points[i].Source
			if bySource[src] == nil {
				names = append(names, src)
			}
			bySource[src] = append(bySource[src], i)
		}
	}
	for _, src := range names {
		var early int64
		for _, p := range bySource[src] {
			early += r.built.Facts[p].Early
		}
		r.add(warn(reading.CheckOrder, -1, bySource[src],
			fmt.Sprintf("%d readings of %q came after a later one; all were sorted", early, src),
			"nothing: the order of rows changes no result, except in the hour that is repeated in autumn"))
	}
}

// A gap matters when a tenth of the period is not covered or a day is lost.
// Our assumption.
const (
	gapCoverageLeast = 0.9
	gapLongestS      = dayS
)

// gaps warns about silence, once per log and stretch.
func gaps(r *run) {
	type key struct {
		source   string
		from, to int
	}
	points := map[key][]int{}
	var keys []key
	var silent []int
	g := r.grid
	for i := range r.site.Points {
		l := &r.ledger.Points[i]
		c, ok := r.column(i)
		if !ok {
			silent = append(silent, i)
			continue
		}
		from, to, covered := longestGap(c, g.PeriodFrom, g.PeriodTo)
		share := float64(covered) / (float64(g.PeriodTo-g.PeriodFrom) * float64(g.StepS))
		if int64(to-from)*g.StepS < gapLongestS && (share >= gapCoverageLeast || l.Counts[reading.Accepted] == 0) {
			continue
		}
		k := key{r.site.Points[i].Source, from, to}
		if points[k] == nil {
			keys = append(keys, k)
		}
		points[k] = append(points[k], i)
	}
	for _, k := range keys {
		p := points[k]
		zone := zoneOf(r.site, p[0])
		if len(p) > 1 {
			zone = -1
		}
		c, _ := r.column(p[0])
		_, _, covered := longestGap(c, g.PeriodFrom, g.PeriodTo)
		w := warn(reading.CheckGap, zone, p, fmt.Sprintf("%.0f %% of the period covered; the longest silence lasts %.0f h %s", 100*float64(covered)/(float64(g.PeriodTo-g.PeriodFrom)*float64(g.StepS)),
			r.hours(k.to-k.from), span(r.at(k.from), r.at(k.to), g.Loc)), "export the missing stretch again if the system still holds it; those hours stay unknown")
		w.FromUTC, w.ToUTC = r.at(k.from), r.at(k.to)
		r.add(w)
	}
	if len(silent) > 0 {
		r.add(warn(reading.CheckGap, -1, silent, fmt.Sprintf("%s without any usable reading", count(len(silent), "point", "points")),
			"see the reasons in readings.csv; check source and column in points.csv"))
	}
}

// longestGap returns the longest run of steps without cover and the seconds
// covered in all.
func longestGap(c *grid.Column, from, to int) (gapFrom, gapTo int, covered int64) {
	start := from
	for i := from; i <= to; i++ {
		if i < to && c.CoveredS[i] == 0 {
			continue
		}
		if i-start > gapTo-gapFrom {
			gapFrom, gapTo = start, i
		}
		start = i + 1
		if i < to {
			covered += int64(c.CoveredS[i])
		}
	}
	return gapFrom, gapTo, covered
}

// Two sensors of one zone that differ by more than this on the median
// disagree. Our assumption, about twice the accuracy of usual sensors.
var disagreeLimit = map[site.Quantity]float64{site.AirTemp: 1.5, site.Humidity: 10, site.CO2: 150}

func disagreement(r *run) {
	for z := range r.site.Zones {
		for _, q := range []site.Quantity{site.AirTemp, site.Humidity, site.CO2} {
			var ps []int
			r.each(func(i int, p *site.Point, _ *grid.Column) {
				if p.Owner == site.OwnerZone && p.Index == z {
					ps = append(ps, i)
				}
			}, q)
			t, _ := q.Trait()
			for a := range ps {
				for _, b := range ps[a+1:] {
					x, y := r.grid.Columns[ps[a]].Mean, r.grid.Columns[b].Mean
					var diffs []float64
					for i := range x {
						if known(x[i]) && known(y[i]) {
							diffs = append(diffs, float64(x[i])-float64(y[i]))
						}
					}
					if r.hours(len(diffs)) < 24 {
						continue
					}
					m, more, less := median(diffs), ps[a], b
					if m < 0 {
						m, more, less = -m, less, more
					}
					if m > disagreeLimit[q] {
						r.add(warn(reading.CheckDisagree, z, []int{ps[a], b},
							fmt.Sprintf("%s reads %.3g %s above %s on the median of %.0f h together", r.site.Points[more].ID(), m, unitWords(t.Unit), r.site.Points[less].ID(), r.hours(len(diffs))),
							"compare both with a third instrument, and map only the one that can be trusted"))
					}
				}
			}
		}
	}
}
