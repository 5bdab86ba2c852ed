package guess

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"sashlog/configs/site"
)

// slots are half-hours of a written day.
const slotsDay = 48

// week is what speaks of people, by weekday (Sunday first) and half-hour.
type week struct {
	sum [7][slotsDay]float64
	n   [7][slotsDay]float64
}

func (w *week) add(t int64, v float64) {
	if v != v {
		return
	}
	d, s := (t/86400+4)%7, t%86400/1800
	w.sum[d][s] += v
	w.n[d][s]++
}

// at is the mean of a weekday's half-hour, 0 when nothing is known.
func (w *week) at(d, s int) float64 {
	if w.n[d][s] == 0 {
		return 0
	}
	return w.sum[d][s] / w.n[d][s]
}

// proposeTimes reads occupied times from presence and counts, else from CO2,
// else from the plant's running. Where every clock is universal time the hours
// are a hint only, since nothing says how far the site's own lie from them.
func (p *Proposal) proposeTimes() {
	p.Occupied, p.OccupiedWhy = p.timesFrom(func(l *Log) bool { return l.Clock != "utc" && !l.DateOpen })
	if len(p.Occupied) > 0 {
		return
	}
	if times, why := p.timesFrom(func(l *Log) bool { return l.Clock == "utc" && !l.DateOpen }); len(times) > 0 {
		p.OccupiedHint = fmt.Sprintf("in universal time %s, %s to %s (from %s)", strings.Trim(dayWords(times[0].Days), "[]"), hhmm(times[0].FromMin), hhmm(times[0].ToMin), why)
	}
}

// timesFrom reads occupied times from the logs a clock allows.
func (p *Proposal) timesFrom(allowed func(*Log) bool) (times []site.Times, why string) {
	for _, from := range []struct {
		words string
		take  func(t *Track) *week
		lag   bool
	}{
		{"presence and counts of people", presenceWeek, false},
		{"the daily rise and fall of CO2", co2Week, true},
		{"the running of plant, which may start well before people come", plantWeek, false},
	} {
		var all week
		n := 0
		for _, t := range p.Tracks {
			if !t.Mapped() || !allowed(t.Log) {
				continue
			}
			w := from.take(t)
			if w == nil {
				continue
			}
			n++
			for d := range all.sum {
				for s := range all.sum[d] {
					if w.n[d][s] > 0 {
						all.sum[d][s] += w.at(d, s)
						all.n[d][s]++
					}
				}
			}
		}
		if n == 0 {
			continue
		}
		if times, ok := all.times(from.lag); ok {
			return times, fmt.Sprintf("%s in %s", from.words, count(n, "column", "columns"))
		}
	}
	return nil, ""
}

func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// presenceWeek is the share of time somebody is there.
func presenceWeek(t *Track) *week {
	if t.Quantity != site.Presence && t.Quantity != site.People {
		return nil
	}
	on := t.states(t.Quantity)
	w := &week{}
	for i, v := range t.bins.mean {
		x := on(float64(v))
		if t.Quantity == site.People && x > 0 {
			x = 1
		}
		w.add((t.bins.from+int64(i))*binS, x)
	}
	return w
}

// co2Week is CO2 above the lowest of each day, as a share of the track's span.
func co2Week(t *Track) *week {
	if t.Quantity != site.CO2 {
		return nil
	}
	span := t.q(0.95) - t.q(0.05)
	if !(span > 0) {
		return nil
	}
	w := &week{}
	for i := 0; i < len(t.bins.mean); {
		k := t.bins.from + int64(i)
		to := min(len(t.bins.mean), i+int(96-k%96))
		low := math.Inf(1)
		for _, v := range t.bins.mean[i:to] {
			if v == v {
				low = math.Min(low, float64(v))
			}
		}
		for j := i; j < to; j++ {
			w.add((t.bins.from+int64(j))*binS, (float64(t.bins.mean[j])-low)/span)
		}
		i = to
	}
	return w
}

// plantWeek is the share of time a unit runs.
func plantWeek(t *Track) *week {
	if t.Quantity != site.PlantStatus {
		return nil
	}
	on := t.states(t.Quantity)
	w := &week{}
	for i, v := range t.bins.mean {
		x := on(float64(v))
		if x > 0 {
			x = 1
		}
		w.add((t.bins.from+int64(i))*binS, x)
	}
	return w
}

// times reads the span of an ordinary day from a week; ok is false when days
// and nights hardly differ.
func (w *week) times(lag bool) ([]site.Times, bool) {
	var day [7]float64
	top := 0.0
	for d := range day {
		lo, hi := math.Inf(1), 0.0
		for s := range slotsDay {
			lo, hi = math.Min(lo, w.at(d, s)), math.Max(hi, w.at(d, s))
		}
		day[d] = hi - lo
		top = math.Max(top, day[d])
	}
	if top < 0.05 {
		return nil, false
	}
	var t site.Times
	var mean [slotsDay]float64
	n := 0.0
	for d := range day {
		if day[d] < 0.35*top {
			continue
		}
		t.Days[d] = true
		n++
		for s := range mean {
			mean[s] += w.at(d, s)
		}
	}
	lo, hi := math.Inf(1), 0.0
	for s := range mean {
		mean[s] /= n
		lo, hi = math.Min(lo, mean[s]), math.Max(hi, mean[s])
	}
	from, to := -1, -1
	for s := range mean {
		if mean[s] > lo+0.2*(hi-lo) && from < 0 && s >= 6 { // before 03:00 it is still the evening before
			from = s
		}
		if mean[s] > lo+0.25*(hi-lo) {
			to = s + 1
		}
	}
	if lag {
		from, to = risefall(mean[:], lo, hi)
	}
	if from < 0 || to <= from || to-from > 32 || to-from < 4 {
		return nil, false
	}
	t.FromMin, t.ToMin = 30*from, 30*to
	return []site.Times{t}, true
}

// risefall finds where a lagging signal begins to rise and where its steepest
// fall lies: CO2 builds up after people come and thins out after they go.
func risefall(mean []float64, lo, hi float64) (from, to int) {
	peak := 0
	for s := range mean {
		if mean[s] > mean[peak] {
			peak = s
		}
	}
	from = -1
	for s := 6; s <= peak; s++ {
		if mean[s] > lo+0.12*(hi-lo) && mean[s] > mean[s-1]+0.03*(hi-lo) {
			from = s
			break
		}
	}
	steep, most := -1, 0.0
	for s := max(peak, 24); s+2 < len(mean); s++ {
		if d := mean[s] - mean[s+2]; d > most {
			most, steep = d, s
		}
	}
	return from, steep + 1
}

// states returns what a value of the track's series means: words by their
// meaning, numbers as they are.
func (t *Track) states(q site.Quantity) func(v float64) float64 {
	if !t.textual() {
		return func(v float64) float64 { return v }
	}
	code := make([]float64, len(t.order))
	for i, w := range t.order {
		switch t.meaning(q, w) {
		case "":
			code[i] = math.NaN()
		case "off", "shut":
			code[i] = 0
		case "vent":
			code[i] = 2
		case "heat":
			code[i] = 3
		case "cool":
			code[i] = 4
		default:
			code[i] = 1
		}
	}
	return func(v float64) float64 {
		if v != v || int(v) < 0 || int(v) >= len(code) {
			return math.NaN()
		}
		return code[int(v)]
	}
}

// proposePeople takes the usual number of people from counts: the middle of
// the highest counts of the days on which anybody came.
func (p *Proposal) proposePeople() {
	for i := range p.Zones {
		z := &p.Zones[i]
		for _, t := range p.Tracks {
			if !t.Mapped() || t.Quantity != site.People || t.Owner != z.ID {
				continue
			}
			most := map[int64]float64{}
			for j, v := range t.bins.mean {
				if v > 0 {
					d := (t.bins.from + int64(j)) / 96
					most[d] = math.Max(most[d], float64(v))
				}
			}
			var tops []float64
			for _, v := range most {
				tops = append(tops, v)
			}
			sort.Float64s(tops)
			if len(tops) < 3 {
				continue
			}
			if n := int(math.Round(tops[len(tops)/2])); n > z.People {
				z.People = n
				z.PeopleWhy = fmt.Sprintf("on half of %d days no more were counted at once", len(tops))
			}
		}
	}
}
