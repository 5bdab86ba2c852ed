package demo

import (
	"math/rand/v2"
	"time"
)

// crowd decides where people are. Counts are per local minute-of-day step of 5
// minutes (288), so that both passes of a repeated hour have the same people.
type crowd struct {
	zones    []zoneSpec
	rngs     []*rand.Rand // one per zone
	leaveEnd [][]int      // zone, person: day index leave ends
	counts   [][288]uint8
	rooms    []int // zones used in meetings
	donors   [][]int
}

func newCrowd(seed uint64, zones []zoneSpec) *crowd {
	c := &crowd{zones: zones, counts: make([][288]uint8, len(zones))}
	for i, z := range zones {
		c.rngs = append(c.rngs, stream(seed, "people/"+z.id))
		c.leaveEnd = append(c.leaveEnd, make([]int, z.people))
		if z.meeting {
			c.rooms = append(c.rooms, i)
		}
	}
	for _, r := range c.rooms {
		var near, all []int
		for i, z := range zones {
			if z.meeting {
				continue
			}
			if z.floor == zones[r].floor {
				near = append(near, i)
			}
			all = append(all, i)
		}
		if len(near) == 0 {
			near = all
		}
		c.donors = append(c.donors, near)
	}
	return c
}

// plan fills the day's counts.
func (c *crowd) plan(d *day) {
	for i := range c.counts {
		c.counts[i] = [288]uint8{}
	}
	if !d.working || d.empty {
		return
	}
	for i := range c.zones {
		if !c.zones[i].meeting {
			c.officeDay(i, d)
		}
	}
	for k, r := range c.rooms {
		c.meetings(r, c.donors[k], d)
	}
}

// officeDay adds the people of one zone: leave, sickness and home days,
// arrival, lunch, breaks, leaving.
func (c *crowd) officeDay(zone int, d *day) {
	rng := c.rngs[zone]
	comes := 0.80
	switch {
	case d.weekday == time.Friday:
		comes = 0.66
	case d.weekday == time.Tuesday || d.weekday == time.Wednesday:
		comes = 0.85
	}
	if d.date.Month == time.December && d.date.Day > 20 {
		comes *= 0.45
	}
	leave := 0.010
	if d.date.Month == time.July || (d.date.Month == time.August && d.date.Day < 15) {
		leave = 0.022
	}
	for p := range c.leaveEnd[zone] {
		arrive := int(rng.NormFloat64()*24 + 8*60 + 22)
		lunch := int(rng.NormFloat64()*16 + 12*60 + 5)
		lunchMin := 28 + rng.IntN(32)
		depart := int(rng.NormFloat64()*38 + 17*60 + 12)
		out := rng.IntN(24) // the break, in steps after 09:30; nobody is out beyond 12
		stays, starts := rng.Float64() < comes, rng.Float64() < leave
		length := 5 + rng.IntN(12)
		lunchIn := rng.Float64() < 0.25
		if c.leaveEnd[zone][p] > d.index {
			continue
		}
		if starts {
			c.leaveEnd[zone][p] = d.index + length
			continue
		}
		if !stays {
			continue
		}
		from, to := clampInt(arrive/5, 78, 150), clampInt(depart/5, 151, 250)
		l0, l1 := lunch/5, (lunch+lunchMin)/5
		for s := from; s < to; s++ {
			if s >= l0 && s < l1 && !lunchIn {
				continue
			}
			if out < 12 && (s == 114+out || s == 115+out || s == 180+out) {
				continue
			}
			c.counts[zone][s]++
		}
	}
}

// meetings moves people from the offices of the floor into a meeting room.
func (c *crowd) meetings(room int, donors []int, d *day) {
	rng := c.rngs[room]
	size := c.zones[room].people
	for _, slot := range [...]struct{ from, steps int }{{102, 12}, {114, 18}, {132, 10}, {162, 12}, {174, 18}, {192, 12}} {
		held := rng.Float64() < 0.55
		want := size/2 + rng.IntN(size/2+3)
		steps := slot.steps - rng.IntN(4)
		first := rng.IntN(1 + len(donors))
		if !held || len(donors) == 0 {
			continue
		}
		for k := 0; k < want; k++ {
			z := donors[(first+k)%len(donors)]
			for s := slot.from; s < slot.from+steps; s++ {
				if c.counts[z][s] > 1 {
					c.counts[z][s]--
					c.counts[room][s]++
				}
			}
		}
	}
}

func clampInt(x, low, high int) int { return max(low, min(high, x)) }
