package quality

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Limits of the checks on contacts; all are our assumption.
const (
	stuckDaysLeast  = 14   // of readings before "never" means anything
	alikeShare      = 0.01 // open shares so close to one of them are alike
	alikeLeast      = 3
	alikeKappaMost  = 0.2 // agreement beyond chance of windows that have the weather in common is higher
	alikePairs      = 8   // each is compared with so many of its group
	chatterFlips    = 0.45
	chatterReadings = 20 // of a day, before its flips are counted
	chatterDays     = 0.05
	chatterRapid    = 200 // changes a day of a contact that logs changes only
)

// stuckContacts takes out contacts that never change: a window that is never
// used cannot be told from a contact that is not connected.
func stuckContacts(r *run) {
	r.each(func(i int, p *site.Point, c *grid.Column) {
		low, high := float32(math.Inf(1)), float32(math.Inf(-1))
		covered := 0
		for k, v := range c.Mean {
			if c.CoveredS[k] > 0 {
				low, high = min(low, v), max(high, v)
				covered++
			}
		}
		if low != high || r.hours(covered) < 24*stuckDaysLeast {
			return
		}
		state := "shut"
		if low > 0 {
			state = "open"
		}
		if p.Quantity == site.WindowOpening && low > 0 {
			state = fmt.Sprintf("at %.0f %%", low)
		}
		n := r.built.Tally.Void(i, 0, r.grid.N, reading.Frozen)
		r.add(reading.Check{Kind: reading.CheckNeverChanges, Points: []int{i}, Zone: zoneOf(r.site, i), Effect: reading.EffectRemoved, Readings: n,
			Evidence: fmt.Sprintf("%s in all %d readings of %.0f days; a window that is never used cannot be told from a contact that is not connected, so its state counts as unknown", state, n, r.hours(covered)/24),
			DoNext:   "open and shut the window once by hand and look whether the log follows"})
	}, site.Window, site.WindowOpening)
}

// alikeContacts warns about groups of contacts whose open shares are alike to
// a hundredth although they do not open together: more likely a product of
// cleaning than of people.
func alikeContacts(r *run) {
	type contact struct {
		point int
		share float64
	}
	var cs []contact
	r.each(func(i int, p *site.Point, c *grid.Column) {
		sum, covered := 0.0, 0.0
		for k, v := range c.Mean {
			// Of sampled contacts the readings count, not how long they hold,
			// because gaps would blur a share that was made up.
			w := float64(c.CoveredS[k])
			if p.Logging != site.COV {
				w = float64(r.built.Tally.Readings[i][k])
			}
			if c.CoveredS[k] > 0 {
				sum += float64(v) * w
				covered += w
			}
		}
		if share := sum / covered; share > 0.02 && share < 0.98 {
			cs = append(cs, contact{i, share})
		}
	}, site.Window)
	sort.SliceStable(cs, func(a, b int) bool { return cs[a].share < cs[b].share })
	for len(cs) >= alikeLeast {
		from, to := 0, 0
		for i := range cs {
			a, b := i, i
			for a > 0 && cs[i].share-cs[a-1].share <= alikeShare {
				a--
			}
			for b < len(cs) && cs[b].share-cs[i].share <= alikeShare {
				b++
			}
			if b-a > to-from {
				from, to = a, b
			}
		}
		if to-from < alikeLeast {
			return
		}
		var ps []int
		var kappas []float64
		shortest, longest := math.Inf(1), 0.0
		for a := from; a < to; a++ {
			ps = append(ps, cs[a].point)
			n := 0
			for _, s := range r.grid.Columns[cs[a].point].CoveredS {
				if s > 0 {
					n++
				}
			}
			shortest, longest = min(shortest, r.hours(n)), max(longest, r.hours(n))
			for b := a + 1; b < min(to, a+1+alikePairs); b++ {
				kappas = append(kappas, r.kappa(cs[a].point, cs[b].point))
			}
		}
		m := median(kappas)
		low, high := cs[from].share, cs[to-1].share
		cs = slices.Delete(cs, from, to)
		if m > alikeKappaMost {
			continue
		}
		slices.Sort(ps)
		var names []string
		for _, p := range ps {
			names = append(names, r.site.Points[p].ID())
		}
		r.add(warn(reading.CheckSuspectGroup, -1, ps,
			fmt.Sprintf("%d contacts are open %.3f to %.3f of the time, whether %.0f or %.0f h are logged, and do not open together (agreement beyond chance %.2f on the median): %s",
				len(ps), low, high, shortest, longest, m, strings.Join(names, ", ")),
			"ask how the log was made; values that were filled in or cleaned look like this, and say nothing about the windows"))
	}
}

// kappa is Cohen's agreement of two contacts beyond chance (Cohen 1960, Educ.
// Psychol. Meas. 20:37), 0 when they share less than a day.
func (r *run) kappa(a, b int) float64 {
	x, y := r.grid.Columns[a].Mean, r.grid.Columns[b].Mean
	var n, same, ax, by float64
	for k := range x {
		if !known(x[k]) || !known(y[k]) {
			continue
		}
		n++
		u, v := x[k] >= 0.5, y[k] >= 0.5
		if u == v {
			same++
		}
		if u {
			ax++
		}
		if v {
			by++
		}
	}
	if r.hours(int(n)) < 24 {
		return 0
	}
	chance := (ax*by + (n-ax)*(n-by)) / (n * n)
	if chance >= 1 {
		return 0
	}
	return (same/n - chance) / (1 - chance)
}

// chatter warns about contacts that flip with nearly every sample.
func chatter(r *run) {
	r.each(func(i int, p *site.Point, c *grid.Column) {
		counts := r.built.Tally.Readings[i]
		days, bad, worst, worstDay := 0, 0, 0.0, 0
		for d := range r.days {
			n, flips := 0, 0
			last := float32(math.NaN())
			for k := r.days[d].from; k < r.days[d].to; k++ {
				if counts[k] == 0 || !known(c.Mean[k]) {
					continue
				}
				n += int(counts[k])
				if known(last) && (c.Mean[k] >= 0.5) != (last >= 0.5) {
					flips++
				}
				last = c.Mean[k]
			}
			if n < chatterReadings {
				continue
			}
			days++
			share := float64(flips) / float64(n)
			rapid := p.Logging == site.COV && n > chatterRapid
			if (p.Logging != site.COV && share >= chatterFlips) || rapid {
				bad++
				if rapid {
					share = float64(n)
				}
				if share > worst {
					worst, worstDay = share, d
				}
			}
		}
		if days == 0 || float64(bad) < chatterDays*float64(days) || bad == 0 {
			return
		}
		what := fmt.Sprintf("%.0f %% of readings differ from the one before", 100*worst)
		if p.Logging == site.COV {
			what = fmt.Sprintf("%.0f changes", worst)
		}
		r.add(warn(reading.CheckChatter, zoneOf(r.site, i), []int{i},
			fmt.Sprintf("flips with nearly every reading on %d of %d days; worst on %v: %s", bad, days, r.days[worstDay].date, what),
			"look at the magnet and its distance, or whether the window stands ajar in the wind"))
	}, site.Window)
}
