package quality

import (
	"math"
	"slices"
	"strings"
	"time"

	"gonum.org/v1/gonum/stat"

	"sashlog/configs/site"
	"sashlog/ingest/clock/lag"
	"sashlog/ingest/grid"
	"sashlog/internal/physics/sun"
)

// What a log says is compared in bins of a quarter of an hour (or a step, if
// that is longer): the change of half-hour means, in standard deviations.
const (
	binS = 900
	clip = 3 // standard deviations a single change counts for
	// lagMostH is the largest shift looked for: any zone against any other is
	// found up to this.
	lagMostH = 14.0
)

// nature is a kind of quantity that is much alike in several logs.
type nature struct {
	words string
	class lag.Class
	level bool // compared as it is, not by its changes
	of    []site.Quantity
	owner site.OwnerKind
}

var natures = []nature{
	{"outdoor temperature", lag.Sky, false, []site.Quantity{site.OutdoorTemp}, site.OwnerSite},
	{"outdoor humidity", lag.Sky, false, []site.Quantity{site.OutdoorHumidity, site.OutdoorDewPoint}, site.OwnerSite},
	{"wind", lag.Sky, false, []site.Quantity{site.WindSpeed}, site.OwnerSite},
	{"daylight", lag.Sky, true, []site.Quantity{site.Solar}, site.OwnerSite},
	{"sunrise and sunset", lag.Sky, false, []site.Quantity{site.Solar}, site.OwnerSite},
	{"CO2", lag.People, false, []site.Quantity{site.CO2}, site.OwnerZone},
	{"air temperature", lag.People, false, []site.Quantity{site.AirTemp, site.OperativeTemp, site.GlobeTemp}, site.OwnerZone},
	{"humidity", lag.People, false, []site.Quantity{site.Humidity}, site.OwnerZone},
	{"people", lag.People, false, []site.Quantity{site.People, site.Presence}, site.OwnerZone},
	{"plant running", lag.People, false, []site.Quantity{site.PlantStatus}, site.OwnerPlant},
}

// relation is one device or room seen through two logs: b changes with a in
// the direction of sign, delayMin later (sooner where negative); sameMoment compares how much they
// change, either way.
type relation struct {
	words      string
	a, b       []site.Quantity
	owner      site.OwnerKind
	aLevel     bool
	sign       float64
	sameMoment bool
	delayMin   float64
}

var relations = []relation{
	{"power and status of the same plant", []site.Quantity{site.ElectricPower, site.CoolingPower, site.HeatingPower}, []site.Quantity{site.PlantStatus}, site.OwnerPlant, false, 1, false, 0},
	{"supply air and status of the same plant", []site.Quantity{site.SupplyAirTemp}, []site.Quantity{site.PlantStatus}, site.OwnerPlant, false, 1, true, -10},
	{"air flow and status of the same plant", []site.Quantity{site.SupplyAirflow}, []site.Quantity{site.PlantStatus}, site.OwnerPlant, false, 1, false, 0},
	{"windows and CO2 of the same room", []site.Quantity{site.Window, site.WindowOpening}, []site.Quantity{site.CO2}, site.OwnerZone, false, -1, false, mixingMin},
	{"presence and CO2 of the same room", []site.Quantity{site.Presence, site.People}, []site.Quantity{site.CO2}, site.OwnerZone, false, 1, false, mixingMin},
}

// mixingMin is how long after a window moves CO2 changes fastest on the mean of
// half hours: several air changes an hour (common practice).
const mixingMin = 15

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
	// habit is the nature that follows the clock on the wall best, -1 none.
	habit int
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
	pools := map[string]map[[3]int]*pool{} // log; kind, index, owner
	put := func(log string, kind, index, owner int, v []float64) {
		if v == nil {
			return
		}
		k := [3]int{kind, index, owner}
		if pools[log][k] == nil {
			pools[log][k] = &pool{}
		}
		pools[log][k].add(v)
	}
	for i := range c.site.Points {
		p := &c.site.Points[i]
		l := byName[p.Source]
		if l == nil {
			l = &logSeries{name: p.Source, nature: make([][]float64, len(natures)), count: make([]int, len(natures)),
				a: make([]map[int][]float64, len(relations)), b: make([]map[int][]float64, len(relations)), habit: -1}
			byName[p.Source], pools[p.Source] = l, map[[3]int]*pool{}
			c.logs = append(c.logs, l)
		}
		l.points = append(l.points, i)
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
				put(p.Source, 0, k, 0, get(n.level))
			}
		}
		for k, n := range relations {
			if p.Owner != n.owner || !c.apart[k][p.Index] {
				continue
			}
			if slices.Contains(n.a, p.Quantity) {
				put(p.Source, 1, k, p.Index, get(n.aLevel))
			}
			if slices.Contains(n.b, p.Quantity) {
				put(p.Source, 2, k, p.Index, get(false))
			}
		}
	}
	for _, l := range c.logs {
		for k, p := range pools[l.name] {
			switch m := p.mean(); k[0] {
			case 0:
				l.nature[k[1]], l.count[k[1]] = m, p.points
			case 1, 2:
				r := &relations[k[1]]
				if r.sameMoment {
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

// sunUp is 1 where the sun is up and 0 where not, nil where the site's place is
// not known.
func (c *clockRun) sunUp() []float64 {
	if c.up == nil && !math.IsNaN(c.site.LatitudeDeg) && !math.IsNaN(c.site.LongitudeDeg) {
		c.up = make([]float64, c.bins)
		for b := range c.up {
			if sun.At(c.middle(b), c.site.LatitudeDeg, c.site.LongitudeDeg).Up() {
				c.up[b] = 1
			}
		}
	}
	return c.up
}

func (c *clockRun) middle(bin int) time.Time {
	return time.Unix(c.grid.StartUTC+(int64(bin)*2+1)*int64(c.per)*c.grid.StepS/2, 0)
}

// witnesses lists what speaks of a log's clock, apart from the logs left out.
func (c *clockRun) witnesses(l *logSeries, out map[string]bool) []*lag.Witness {
	var ws []*lag.Witness
	for k, n := range natures {
		if l.nature[k] == nil {
			continue
		}
		if slices.Contains(n.of, site.Solar) {
			truth := changes(c.up)
			if n.level {
				truth = aboutMean(c.up)
			}
			if truth != nil {
				ws = append(ws, &lag.Witness{Name: n.words, Class: lag.Sky, Pairs: []lag.Pair{{Mine: l.nature[k], Truth: truth}}})
			}
		}
		truth, logs, points := c.others(l, k, out)
		if points > 0 {
			ws = append(ws, &lag.Witness{Name: n.words, Class: n.class, Pairs: []lag.Pair{{Mine: l.nature[k], Truth: truth}}, Logs: logs, Points: points})
		}
	}
	for k, r := range relations {
		w := &lag.Witness{Name: r.words, Class: lag.Machine}
		for _, o := range c.logs {
			if o == l || out[o.name] {
				continue
			}
			n := len(w.Pairs)
			later := int(math.Round(r.delayMin / c.frame.BinMin))
			w.Pairs = pairs(w.Pairs, l.a[k], o.b[k], r.sign, -later)
			w.Pairs = pairs(w.Pairs, l.b[k], o.a[k], r.sign, later)
			if len(w.Pairs) > n {
				w.Logs = append(w.Logs, o.name)
				w.Points += len(w.Pairs) - n
			}
		}
		if len(w.Pairs) > 0 {
			ws = append(ws, w)
		}
	}
	if len(ws) == 0 {
		ws = c.coarse(l)
	}
	return ws
}

// pairs joins what two logs say of the same rooms or devices; the truth is
// moved later by some bins and given a sign.
func pairs(to []lag.Pair, mine, truth map[int][]float64, sign float64, later int) []lag.Pair {
	var keys []int
	for i := range mine {
		if truth[i] != nil {
			keys = append(keys, i)
		}
	}
	slices.Sort(keys)
	for _, i := range keys {
		t := truth[i]
		if sign != 1 || later != 0 {
			t = make([]float64, len(t))
			for b, v := range truth[i] {
				if at := b + later; at >= 0 && at < len(t) {
					t[at] = sign * v
				}
			}
		}
		to = append(to, lag.Pair{Mine: mine[i], Truth: t})
	}
	return to
}

// others is the mean of what the other logs say of a nature, of those not left
// out; a log counts by the root of its points, so that one big log does not
// outvote all others.
func (c *clockRun) others(l *logSeries, k int, out map[string]bool) (mean []float64, logs []string, points int) {
	t := &c.totals[k]
	own := 0.0
	for _, name := range t.logs {
		if name != l.name {
			logs = append(logs, name)
		}
	}
	points = t.points
	if !out[l.name] {
		own, points = math.Sqrt(float64(l.count[k])), points-l.count[k]
	}
	if points == 0 {
		return nil, nil, 0
	}
	mean = make([]float64, c.bins)
	for b, x := range t.sum {
		w := t.weight[b]
		if v := l.nature[k][b]; v != 0 && own > 0 {
			x, w = x-own*v, w-own
		}
		if w > 0.5 { // no point weighs less than 1
			mean[b] = x / w
		}
	}
	return mean, logs, points
}

// coarse witnesses tell the time of day within two or three hours, for logs
// nothing else speaks of: outdoor air warms while the sun climbs, and people
// breathe where and when the schedule says they are.
func (c *clockRun) coarse(l *logSeries) []*lag.Witness {
	var ws []*lag.Witness
	for k, n := range natures {
		if l.nature[k] == nil {
			continue
		}
		w := &lag.Witness{Class: lag.Coarse}
		var truth []float64
		switch {
		case slices.Contains(n.of, site.OutdoorTemp):
			if truth = c.warming(); truth == nil {
				continue
			}
			w.Name = "warming by day"
		case slices.Contains(n.of, site.CO2), slices.Contains(n.of, site.People):
			w.Name, truth = "the occupied times of the site file", c.schedule()
		default:
			continue
		}
		w.Pairs = []lag.Pair{{Mine: l.nature[k], Truth: truth}}
		ws = append(ws, w)
	}
	return ws
}

// warming is the clear-sky irradiance two hours later, about its mean: air is
// warmest some two to three hours after the sun stands highest and coldest
// about sunrise (common practice), so it warms fastest well before noon.
func (c *clockRun) warming() []float64 {
	if math.IsNaN(c.site.LatitudeDeg) || math.IsNaN(c.site.LongitudeDeg) {
		return nil
	}
	level := make([]float64, c.bins)
	for b := range level {
		t := c.middle(b).Add(2 * time.Hour)
		level[b] = sun.HaurwitzGlobalWm2(sun.At(t, c.site.LatitudeDeg, c.site.LongitudeDeg).CosZenith())
	}
	return aboutMean(level)
}

// schedule is +1 in the first two hours people are expected, -1 in the two
// after they left.
func (c *clockRun) schedule() []float64 {
	out := make([]float64, c.bins)
	around := int(2 * hourS / (int64(c.per) * c.grid.StepS))
	last := false
	for b := range out {
		now := false
		for z := range c.site.Zones {
			now = now || c.scheduled(z, b*c.per)
		}
		if now != last && b > 0 {
			v := -1.0
			if now {
				v = 1
			}
			for i := b; i < min(b+around, len(out)); i++ {
				out[i] = v
			}
		}
		last = now
	}
	return out
}

// names lists what witnesses compared, in words.
func names(ws []*lag.Witness) string {
	var s []string
	for _, w := range ws {
		if !slices.Contains(s, w.Name) {
			s = append(s, w.Name)
		}
	}
	return strings.Join(s, ", ")
}
