package guess

import (
	"fmt"
	"math"
	"sort"

	"sashlog/configs/site"
)

// servedMin is how many standard errors a zone's answer to a unit's starts and
// stops must lie from nothing, and servedLead how far ahead of the next unit,
// for a proposal. Our choice.
const (
	servedMin  = 4.0
	servedLead = 1.4
)

// proposeServes proposes which unit serves which zone. Names count first; then
// how the zone's temperature and CO2 bend when the unit starts or stops while
// no other unit does.
func (p *Proposal) proposeServes() {
	if len(p.Plant) == 0 || len(p.Zones) == 0 {
		return
	}
	named := map[string]bool{}
	for _, u := range p.Plant {
		for _, z := range u.Serves {
			named[z] = true
		}
	}
	runs := make([]*running, len(p.Plant))
	for i := range p.Plant {
		runs[i] = p.runningOf(p.Plant[i].ID)
	}
	if len(p.Plant) == 1 && len(p.Plant[0].Serves) == 0 {
		for i := range p.Zones {
			p.Plant[0].Serves = append(p.Plant[0].Serves, p.Zones[i].ID)
		}
		p.Plant[0].Why = "it is the only unit"
		return
	}
	weakest := map[int]float64{}
	for zi := range p.Zones {
		id := p.Zones[zi].ID
		if named[id] {
			continue
		}
		scores := make([]float64, len(p.Plant))
		best, second := -1, 0.0
		for ui := range p.Plant {
			scores[ui] = p.answer(id, ui, runs)
			switch {
			case best < 0 || scores[ui] > scores[best]:
				if best >= 0 {
					second = scores[best]
				}
				best = ui
			case scores[ui] > second:
				second = scores[ui]
			}
		}
		if best < 0 || scores[best] < servedMin || scores[best] < servedLead*second {
			continue
		}
		u := &p.Plant[best]
		u.Serves = append(u.Serves, id)
		if w, ok := weakest[best]; !ok || scores[best] < w {
			weakest[best] = scores[best]
		}
	}
	for ui, w := range weakest {
		u := &p.Plant[ui]
		sort.SliceStable(u.Serves, func(a, b int) bool { return natural(u.Serves[a]) < natural(u.Serves[b]) })
		u.Why = fmt.Sprintf("temperature and CO2 there bend when it starts and stops alone (at least %.0f standard errors)", w)
	}
}

// running is a unit's state by quarter-hour: -1 cooling, +1 heating, 0.5 on in
// a way not known, 0 off, NaN unknown.
type running struct {
	from int64
	on   []float64
	sign []float64 // of its effect on a zone's temperature; 0 unknown
}

func (r *running) at(k int64) (on, sign float64) {
	i := k - r.from
	if r == nil || i < 0 || i >= int64(len(r.on)) {
		return math.NaN(), 0
	}
	return r.on[i], r.sign[i]
}

// runningOf reads a unit's running from its status, else from its power or air
// flow; supply air says whether it heats or cools.
func (p *Proposal) runningOf(unit string) *running {
	var state, supply *Track
	for _, t := range p.Tracks {
		if !t.Mapped() || t.Owner != unit || t.OwnerKind != site.OwnerPlant {
			continue
		}
		switch t.Quantity {
		case site.PlantStatus:
			if state == nil || state.Quantity != site.PlantStatus {
				state = t
			}
		case site.ElectricPower, site.SupplyAirflow:
			if state == nil {
				state = t
			}
		case site.SupplyAirTemp:
			supply = t
		}
	}
	if state == nil {
		return nil
	}
	r := &running{from: state.bins.from}
	of := state.states(state.Quantity)
	limit := state.min + 0.1*(state.q(0.99)-state.min)
	for i, v := range state.bins.mean {
		x := of(float64(v))
		on, sign := math.NaN(), 0.0
		switch {
		case x != x:
		case state.Quantity != site.PlantStatus:
			on = 0
			if x > limit {
				on = 1
			}
		case x == 0:
			on = 0
		default:
			on = 1
			switch {
			case !state.textual():
			case x == 3:
				sign = 1
			case x == 4:
				sign = -1
			}
		}
		if on == 1 && sign == 0 && supply != nil {
			if s := supply.bins.at(r.from + int64(i)); s == s {
				switch {
				case s < 19:
					sign = -1
				case s > 25:
					sign = 1
				}
			}
		}
		r.on, r.sign = append(r.on, on), append(r.sign, sign)
	}
	return r
}

// answer is how plainly a zone answers to a unit's own starts and stops, in
// standard errors: temperature and CO2 together.
func (p *Proposal) answer(zone string, unit int, runs []*running) float64 {
	r := runs[unit]
	if r == nil {
		return 0
	}
	var sq [2]float64 // of temperature and CO2
	for _, t := range p.Tracks {
		if !t.Mapped() || t.Owner != zone || t.OwnerKind != site.OwnerZone || t.textual() {
			continue
		}
		kind := 0
		switch t.Quantity {
		case site.CO2:
			kind = 1
		case site.AirTemp, site.ThermostatTemp, site.OperativeTemp:
		default:
			continue
		}
		for _, reach := range []int64{1, 2} {
			if z := t.bends(r, unit, runs, kind == 1, reach); z > 0 {
				sq[kind] = math.Max(sq[kind], z*z)
			}
		}
	}
	return math.Sqrt(sq[0] + sq[1])
}

// bends is how far a track's bends at a unit's own starts and stops lie from
// nothing, in standard errors. A bend is the change of slope over so many
// quarter-hours either side, positive where the unit pulls as it should: warmer when it
// heats, cooler when it cools, less CO2 when it runs.
func (t *Track) bends(r *running, unit int, runs []*running, co2 bool, reach int64) float64 {
	var xs []float64
	for i := 1; i < len(r.on); i++ {
		step := r.on[i] - r.on[i-1]
		if step == 0 || step != step {
			continue
		}
		k := r.from + int64(i)
		if shared(unit, k, runs) {
			continue
		}
		sign := r.sign[i]
		if step < 0 {
			sign = r.sign[i-1]
		}
		if co2 {
			sign = -1
		}
		bend := t.bins.at(k+reach) - 2*t.bins.at(k) + t.bins.at(k-reach)
		if sign == 0 || bend != bend {
			continue
		}
		xs = append(xs, bend*sign*step)
	}
	if len(xs) < 20 {
		return 0
	}
	// A few wild bends (a window, a crowd) must not decide: cut at three times
	// the usual size.
	size := make([]float64, len(xs))
	for i, x := range xs {
		size[i] = math.Abs(x)
	}
	limit := 3 * math.Max(half(size), 1e-9)
	var sum, sq float64
	for _, x := range xs {
		x = math.Max(-limit, math.Min(limit, x))
		sum += x
		sq += x * x
	}
	n := float64(len(xs))
	mean := sum / n
	return mean / math.Sqrt(math.Max(sq/n-mean*mean, 1e-12)/n)
}

// shared reports whether another unit starts or stops about the same time.
func shared(unit int, k int64, runs []*running) bool {
	for j, o := range runs {
		if j == unit || o == nil {
			continue
		}
		for d := int64(-2); d <= 2; d++ {
			a, _ := o.at(k + d)
			b, _ := o.at(k + d - 1)
			if a != b && a == a && b == b {
				return true
			}
		}
	}
	return false
}
