package quality

import (
	"cmp"
	"math"
	"slices"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// order is the order verdicts are listed in.
var order = []reading.CheckKind{
	reading.CheckUnit, reading.CheckClock, reading.CheckRange, reading.CheckFrozen, reading.CheckSpike,
	reading.CheckDuplicate, reading.CheckOrder, reading.CheckGap, reading.CheckCO2Low, reading.CheckCO2Drift,
	reading.CheckNeverChanges, reading.CheckInverted, reading.CheckSuspectGroup, reading.CheckChatter,
	reading.CheckPlantContra, reading.CheckReturnDuct, reading.CheckHoliday, reading.CheckDisagree, reading.CheckDeclaredFault,
}

// Run makes every check on the grid, voids the steps they condemn and puts
// their verdicts, with those found before, into the ledger. Gaps come first,
// as logged; then goes what the diary declares faulty and what is frozen, so
// that no other check rests on it.
func Run(s *site.Site, b *grid.Built, before []reading.Check) {
	r := newRun(s, b)
	r.checks = append(r.checks, before...)
	for _, check := range []func(*run){
		gaps, declaredFaults, frozen, clocks, outOfRange, spikes, duplicates, disorder,
		returnDucts, co2Baselines, stuckContacts, alikeContacts, chatter, inverted,
		plantAgainstAir, undeclaredHolidays, disagreement,
	} {
		check(r)
	}
	slices.SortStableFunc(r.checks, func(x, y reading.Check) int {
		return cmp.Or(cmp.Compare(slices.Index(order, x.Kind), slices.Index(order, y.Kind)),
			cmp.Compare(first(x.Points), first(y.Points)), cmp.Compare(x.FromUTC, y.FromUTC))
	})
	b.Ledger.Checks = append(b.Ledger.Checks, r.checks...)
	b.Tally.Settle()
}

func first(points []int) int {
	if len(points) == 0 {
		return -1
	}
	return points[0]
}

// run is what the checks share: the grid, its calendar and the verdicts.
type run struct {
	site   *site.Site
	built  *grid.Built
	grid   *grid.Grid
	ledger *reading.Ledger
	checks []reading.Check

	// Calendar of the steps in the site's zone.
	days    []localDay
	dayOf   []int32
	minute  []int16
	outdoor []float32 // outdoor temperature, nil when not logged
}

// localDay is one local day of the grid: its steps and kind.
type localDay struct {
	date     site.Date
	from, to int // steps
	weekday  time.Weekday
	holiday  bool // declared, or closed by the diary for the whole site
}

func newRun(s *site.Site, b *grid.Built) *run {
	r := &run{site: s, built: b, grid: b.Grid, ledger: b.Ledger}
	g := b.Grid
	r.dayOf, r.minute = make([]int32, g.N), make([]int16, g.N)
	for i := 0; i < g.N; {
		t := g.Time(i)
		d := site.DateOf(t)
		next := d.Next().Start(g.Loc).Unix()
		end := min(g.N, max(i+1, int((next-g.StartUTC+g.StepS-1)/g.StepS)))
		r.days = append(r.days, localDay{date: d, from: i, to: end, weekday: t.Weekday(), holiday: r.isHoliday(d)})
		for k := i; k < end; k++ {
			// Clock minutes; hours that daylight saving moves are cheap here.
			u := g.Time(k)
			r.dayOf[k], r.minute[k] = int32(len(r.days)-1), int16(u.Hour()*60+u.Minute())
		}
		i = end
	}
	var out []int
	for i := range s.Points {
		if s.Points[i].Owner == site.OwnerSite && s.Points[i].Quantity == site.OutdoorTemp {
			out = append(out, i)
		}
	}
	r.outdoor = g.Average(out, 0.5)
	return r
}

func (r *run) isHoliday(d site.Date) bool {
	if slices.Contains(r.site.Occupancy.Holidays, d) {
		return true
	}
	noon := d.Start(r.grid.Loc).Unix() + 12*hourS
	for _, e := range r.site.Diary {
		if e.Kind == site.EventClosure && len(e.Zones) == 0 && e.FromUTC <= noon && noon < e.ToUTC {
			return true
		}
	}
	return false
}

// scheduled reports whether the zone is meant to be used at a step.
func (r *run) scheduled(zone, step int) bool {
	d := &r.days[r.dayOf[step]]
	if d.holiday {
		return false
	}
	times := r.site.Occupancy.Times
	if z := &r.site.Zones[zone]; z.Occupied != nil {
		times = z.Occupied
	}
	m := int(r.minute[step])
	for _, t := range times {
		if t.Days[d.weekday] && m >= t.FromMin && m < t.ToMin {
			return true
		}
	}
	return false
}

// column returns the means and covered seconds of a point; ok is false when it
// has no readings left.
func (r *run) column(point int) (c *grid.Column, ok bool) {
	c = &r.grid.Columns[point]
	return c, c.Mean != nil
}

// each calls f for the points with readings whose quantity is one of qs.
func (r *run) each(f func(point int, p *site.Point, c *grid.Column), qs ...site.Quantity) {
	for i := range r.site.Points {
		p := &r.site.Points[i]
		if c, ok := r.column(i); ok && slices.Contains(qs, p.Quantity) {
			f(i, p, c)
		}
	}
}

func (r *run) add(c reading.Check) { r.checks = append(r.checks, c) }

func (r *run) at(step int) int64 { return r.grid.StartUTC + int64(step)*r.grid.StepS }

// hours is the length of n steps in hours.
func (r *run) hours(n int) float64 { return float64(n) * r.grid.StepH() }

// overlaps returns the steps any part of [from, to) lies in.
func (r *run) overlaps(fromUTC, toUTC int64) (from, to int) {
	return max(r.grid.Index(fromUTC), 0), min(r.grid.Index(toUTC-1)+1, r.grid.N)
}

func known(v float32) bool { return !math.IsNaN(float64(v)) }
