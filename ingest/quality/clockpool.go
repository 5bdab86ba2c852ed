package quality

import (
	"math"
	"runtime"
	"slices"
	"sync"

	"gonum.org/v1/gonum/stat"

	"sashlog/configs/site"
	"sashlog/ingest/clock/lag"
	"sashlog/ingest/grid"
)

// pool averages series of bins; zero bins of a point count as unknown.
type pool struct {
	sum, n []float64
	points int
}

func (p *pool) add(v []float64) {
	if p.sum == nil {
		p.sum, p.n = make([]float64, len(v)), make([]float64, len(v))
	}
	p.points++
	for i, x := range v {
		if x != 0 {
			p.sum[i] += x
			p.n[i]++
		}
	}
}

// mean ends the pool.
func (p *pool) mean() []float64 {
	for i, n := range p.n {
		if n > 0 {
			p.sum[i] /= n
		}
	}
	p.n = nil
	return p.sum
}

// logSeries is what one log says, pooled.
type logSeries struct {
	name   string
	points []int
	nature [][]float64 // per nature, nil without
	count  []int       // points per nature
	// a, b per relation: by index of the zone or plant.
	a, b []map[int][]float64
}

// clockRun is the check of all clocks of a site.
type clockRun struct {
	*run
	per, bins int
	frame     lag.Frame
	logs      []*logSeries
	up        []float64 // the sun: 1 up, 0 down
	// apart says which zones or plants a relation sees through two logs.
	apart []map[int]bool
	// totals are the sums over the logs not left out, per nature.
	totals []total
}

// total is the weighted sum of what all logs say of a nature.
type total struct {
	sum, weight []float64
	logs        []string
	points      int
}

// levels are the means of a point's bins, NaN where less than half is known.
func (c *clockRun) levels(col *grid.Column, q site.Quantity) []float64 {
	out := make([]float64, c.bins)
	for b := range out {
		sum, k := 0.0, 0
		for _, v := range col.Mean[b*c.per : (b+1)*c.per] {
			if known(v) {
				if q == site.PlantStatus {
					v = min(v, 1)
				}
				sum, k = sum+float64(v), k+1
			}
		}
		out[b] = math.NaN()
		if 2*k >= c.per {
			out[b] = sum / float64(k)
		}
	}
	return out
}

// changes turns levels into the standardised, clipped change of the mean of
// two bins to the two before; zero where unknown.
func changes(level []float64) []float64 {
	out := make([]float64, len(level))
	var sum2 float64
	n := 0
	for b := 2; b+1 < len(level); b++ {
		d := (level[b] + level[b+1] - level[b-1] - level[b-2]) / 2
		if !math.IsNaN(d) {
			out[b] = d
			sum2, n = sum2+d*d, n+1
		}
	}
	return scaled(out, math.Sqrt(sum2/float64(max(n, 1))))
}

// aboutMean turns levels into standard deviations about their mean.
func aboutMean(level []float64) []float64 {
	var some []float64
	for _, v := range level {
		if !math.IsNaN(v) {
			some = append(some, v)
		}
	}
	if len(some) < 2 {
		return nil
	}
	mean, sd := stat.MeanStdDev(some, nil)
	out := make([]float64, len(level))
	for i, v := range level {
		if !math.IsNaN(v) {
			out[i] = v - mean
		}
	}
	return scaled(out, sd)
}

func scaled(v []float64, sd float64) []float64 {
	if !(sd > 0) {
		return nil
	}
	for i, x := range v {
		v[i] = min(max(x/sd, -clip), clip)
	}
	return v
}

// moments turns changes into how much moves, either way, about its mean.
func moments(v []float64) []float64 {
	level := make([]float64, len(v))
	for i, x := range v {
		level[i] = math.Abs(x)
	}
	return aboutMean(level)
}

// apartMost bounds the zones or plants of one relation: they say the same of a
// clock, and each costs memory.
const apartMost = 32

// seenApart finds, per relation, the zones or plants whose two sides stand in
// different logs.
func (c *clockRun) seenApart() []map[int]bool {
	out := make([]map[int]bool, len(relations))
	for k, n := range relations {
		out[k] = map[int]bool{}
		a, b := map[int]string{}, map[int]string{}
		var both []int
		note := func(side, other map[int]string, i int, source string) {
			if side[i] == "" {
				side[i] = source
			}
			if other[i] != "" && (other[i] != source || side[i] != other[i]) && !slices.Contains(both, i) {
				both = append(both, i)
			}
		}
		for i := range c.site.Points {
			if p := &c.site.Points[i]; p.Owner == n.owner {
				if slices.Contains(n.a, p.Quantity) {
					note(a, b, p.Index, p.Source)
				}
				if slices.Contains(n.b, p.Quantity) {
					note(b, a, p.Index, p.Source)
				}
			}
		}
		slices.Sort(both)
		for _, i := range both[:min(apartMost, len(both))] {
			out[k][i] = true
		}
	}
	return out
}

// addUp sums what the logs say that are not left out.
func (c *clockRun) addUp(out map[string]bool) {
	c.totals = make([]total, len(natures))
	for _, o := range c.logs {
		if out[o.name] {
			continue
		}
		for k, v := range o.nature {
			if v == nil {
				continue
			}
			t := &c.totals[k]
			if t.sum == nil {
				t.sum, t.weight = make([]float64, c.bins), make([]float64, c.bins)
			}
			w := math.Sqrt(float64(o.count[k]))
			for b, x := range v {
				if x != 0 {
					t.sum[b] += w * x
					t.weight[b] += w
				}
			}
			t.logs, t.points = append(t.logs, o.name), t.points+o.count[k]
		}
	}
}

// gather pools what every log says.
func (c *clockRun) gather() {
	c.apart = c.seenApart()
	byName := map[string]*logSeries{}
	for i := range c.site.Points {
		name := c.site.Points[i].Source
		l := byName[name]
		if l == nil {
			l = &logSeries{name: name, nature: make([][]float64, len(natures)), count: make([]int, len(natures)),
				a: make([]map[int][]float64, len(relations)), b: make([]map[int][]float64, len(relations))}
			byName[name] = l
			c.logs = append(c.logs, l)
		}
		l.points = append(l.points, i)
	}
	sideBySide(len(c.logs), func(k int) { c.gatherLog(c.logs[k]) })
}

// sideBySide calls f for every index, on all cores.
func sideBySide(n int, f func(k int)) {
	var wg sync.WaitGroup
	next := make(chan int)
	for range min(n, runtime.GOMAXPROCS(0)) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for k := range next {
				f(k)
			}
		}()
	}
	for k := range n {
		next <- k
	}
	close(next)
	wg.Wait()
}

// gatherLog pools what one log says.
func (c *clockRun) gatherLog(l *logSeries) {
	pools := map[[3]int]*pool{} // kind, index, owner
	put := func(kind, index, owner int, v []float64) {
		if v == nil {
			return
		}
		k := [3]int{kind, index, owner}
		if pools[k] == nil {
			pools[k] = &pool{}
		}
		pools[k].add(v)
	}
	for _, i := range l.points {
		p := &c.site.Points[i]
		col, ok := c.column(i)
		if !ok || p.Placement == site.PlacementReturn {
			continue // no reading left, or it follows the fan and not the room
		}
		var level, change []float64
		get := func(asLevel bool) []float64 {
			if level == nil {
				if level = c.levels(col, p.Quantity); p.Quantity == site.Solar {
					daylight(level)
				}
			}
			if asLevel {
				return aboutMean(level)
			}
			if change == nil {
				change = changes(level)
			}
			return change
		}
		for k, n := range natures {
			if p.Owner == n.owner && slices.Contains(n.of, p.Quantity) {
				put(0, k, 0, get(n.level))
			}
		}
		for k, n := range relations {
			if p.Owner != n.owner || !c.apart[k][p.Index] {
				continue
			}
			if slices.Contains(n.a, p.Quantity) {
				put(1, k, p.Index, get(n.aLevel))
			}
			if slices.Contains(n.b, p.Quantity) {
				put(2, k, p.Index, get(false))
			}
		}
	}
	for k, p := range pools {
		m := p.mean()
		if k[0] == 0 {
			l.nature[k[1]], l.count[k[1]] = m, p.points
			continue
		}
		if relations[k[1]].sameMoment {
			if m = moments(m); m == nil {
				continue
			}
		}
		side := &l.a[k[1]]
		if k[0] == 2 {
			side = &l.b[k[1]]
		}
		if *side == nil {
			*side = map[int][]float64{}
		}
		(*side)[k[2]] = m
	}
}

// daylight turns irradiance into 1 where a pyranometer sees light and 0 where
// not: clouds and calibration hardly touch it, only sunrise and sunset.
func daylight(level []float64) {
	most := 0.0
	for _, v := range level {
		if v > most {
			most = v
		}
	}
	limit := max(lightWm2, most/100)
	for i, v := range level {
		if !math.IsNaN(v) {
			level[i] = 0
			if v > limit {
				level[i] = 1
			}
		}
	}
}

// lightWm2 is global irradiance about sunrise: above the noise of usual
// pyranometers at night. Common practice.
const lightWm2 = 5
