package quality

import (
	"math"
	"slices"
	"strings"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/clock/lag"
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
