package breeze

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"sashlog/analyze/freshair"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Drive is the air change measured in open mode against the wind at the
// openings.
type Drive struct {
	// Points are the rates with a known wind.
	Points []Point
	// NoWind are rates whose wind is not known, Alone those of a zone and way
	// with no other to compare with.
	NoWind, Alone int
	// Least is the number of rates a group needs to be judged.
	Least int
	// Zones have rates that could be compared.
	Zones []int
	// Speeds are classes of the wind at the openings, Sides calm, windward and
	// leeward, Sectors where the wind came from. Groups have relative rates.
	Speeds, Sides, Sectors []Group
	// Slope is the change of the relative rate per m/s of wind at the openings,
	// with its 95 % interval; NaN with rates on fewer than 6 days or at one speed.
	SlopePerMS, SlopeLow, SlopeHigh float64
	// Days are the different days the slope rests on.
	Days int
	// Driven: the interval lies above 0.
	Driven bool
}

// Point is one rate with its wind.
type Point struct {
	Rate
	// Relative is the rate as a multiple of the median of the zone's rates by the
	// same way, NaN where there is but one.
	Relative float64
	// MS is the mean wind at the openings; Deg its mean direction, NaN when calm,
	// turning or unknown; OffDeg the angle to the nearest direction the zone's
	// openings face, NaN where either is unknown.
	MS, Deg, OffDeg float64
	Calm            bool
}

// Group is a group of rates.
type Group struct {
	Name         string
	FromMS, ToMS float64 // classes of speed only
	// Decays and Days are those in it, from so many Zones.
	Decays, Days, Zones int
	// Median of the relative rates with its 95 % interval; NaN with fewer than
	// the least number, and where the ends of the interval lie too far apart.
	Median, Low, High float64
	// MedianPerH is the median of the rates themselves, 1/h.
	MedianPerH float64
}

// Rates are all in the group.
func (g *Group) Rates() int { return g.Decays + g.Days }

const (
	// widestRatio is the ratio of the ends of an interval beyond which a median
	// is not worth stating, slopeDaysMin the days a slope needs, steadyLeast how
	// steady the wind must be to have come from somewhere; our assumptions.
	widestRatio  = 10
	slopeDaysMin = 6
	steadyLeast  = 0.7
)

// speedEdgesMS are the bounds of the classes of wind at the openings; our
// choice.
var speedEdgesMS = []float64{0, 1, 2, 3, 4, math.Inf(1)}

var speedEdgeNames = []string{"below 1 m/s", "1 to 2 m/s", "2 to 3 m/s", "3 to 4 m/s", "4 m/s and more"}

// driveSectorNames are the sectors rates are grouped by: half as many as those
// of a rose, since rates are few.
var driveSectorNames = []string{"N", "NE", "E", "SE", "S", "SW", "W", "NW"}

func driveOf(in *Input, speed Speed) *Drive {
	if len(in.Rates) == 0 {
		return nil
	}
	type series struct {
		zone int
		day  bool
	}
	d := &Drive{Least: max(1, in.Criteria.MinDecayEvents)}
	all := map[series][]float64{}
	for _, e := range in.Rates {
		k := series{e.Zone, e.Day}
		all[k] = append(all[k], e.AirChangePerH)
	}
	for k := range all {
		slices.Sort(all[k])
	}
	for _, e := range in.Rates {
		p, ok := pointOf(in, speed, e)
		if !ok {
			d.NoWind++
			continue
		}
		// One rate is always its own median and says nothing about the wind.
		p.Relative = math.NaN()
		if rates := all[series{e.Zone, e.Day}]; len(rates) > 1 {
			p.Relative = e.AirChangePerH / stat.Quantile(0.5, stat.LinInterp, rates, nil)
			if !slices.Contains(d.Zones, e.Zone) {
				d.Zones = append(d.Zones, e.Zone)
			}
		} else {
			d.Alone++
		}
		d.Points = append(d.Points, p)
	}
	d.group()
	d.slope(in)
	return d
}

// pointOf gives a rate its wind: mean speed and mean direction of the steps in
// open mode; false when more than half of the speeds are unknown.
func pointOf(in *Input, speed Speed, e Rate) (Point, bool) {
	p := Point{Rate: e, Deg: math.NaN(), OffDeg: math.NaN()}
	sum, n, open, blowing := 0.0, 0, 0, 0
	var mean direction
	for i := max(0, e.FromStep); i < min(e.ToStep, in.Grid.N); i++ {
		if in.Running.Zones[e.Zone].State[i] != running.Open {
			continue
		}
		open++
		ms := float64(in.Outdoor.WindMS[i])
		if !(ms >= 0) {
			continue
		}
		sum += ms
		n++
		if ms < in.Criteria.WindCalmMS {
			continue
		}
		blowing++
		if in.Outdoor.WindDirDeg == nil {
			continue
		}
		if deg := float64(in.Outdoor.WindDirDeg[i]); !math.IsNaN(deg) {
			mean.add(deg, 1)
		}
	}
	if n == 0 || 2*n < open {
		return p, false
	}
	mast := sum / float64(n)
	p.MS, p.Calm = mast*speed.Factor, mast < in.Criteria.WindCalmMS
	if deg, steady := mean.mean(); !p.Calm && steady >= steadyLeast && 2*mean.n >= float64(blowing) {
		p.Deg = deg
	}
	for _, face := range in.Site.Zones[e.Zone].FacesDeg {
		if off := OffDeg(p.Deg, face); math.IsNaN(p.OffDeg) || off < p.OffDeg {
			p.OffDeg = off
		}
	}
	return p, true
}

// groupOf judges the points that belong.
func (d *Drive) groupOf(name string, belongs func(p *Point) bool) Group {
	g := Group{Name: name, Median: math.NaN(), Low: math.NaN(), High: math.NaN(), MedianPerH: math.NaN()}
	var logs, rates []float64
	zones := map[int]bool{}
	for k := range d.Points {
		p := &d.Points[k]
		if math.IsNaN(p.Relative) || !belongs(p) {
			continue
		}
		logs, rates = append(logs, math.Log(p.Relative)), append(rates, p.AirChangePerH)
		zones[p.Zone] = true
		if p.Day {
			g.Days++
		} else {
			g.Decays++
		}
	}
	g.Zones = len(zones)
	if g.Rates() < d.Least {
		return g
	}
	slices.Sort(logs)
	slices.Sort(rates)
	low, high := freshair.MedianInterval(logs, 0)
	if high-low > math.Log(widestRatio) {
		return g
	}
	g.Median, g.Low, g.High = math.Exp(stat.Quantile(0.5, stat.LinInterp, logs, nil)), math.Exp(low), math.Exp(high)
	g.MedianPerH = stat.Quantile(0.5, stat.LinInterp, rates, nil)
	return g
}

func (d *Drive) group() {
	for k, name := range speedEdgeNames {
		g := d.groupOf(name, func(p *Point) bool { return p.MS >= speedEdgesMS[k] && p.MS < speedEdgesMS[k+1] })
		g.FromMS, g.ToMS = speedEdgesMS[k], speedEdgesMS[k+1]
		d.Speeds = append(d.Speeds, g)
	}
	d.Sides = []Group{
		d.groupOf("calm", func(p *Point) bool { return p.Calm }),
		d.groupOf("windward", func(p *Point) bool { return !p.Calm && p.OffDeg <= WindwardDeg }),
		d.groupOf("leeward", func(p *Point) bool { return !p.Calm && p.OffDeg > WindwardDeg }),
		d.groupOf("direction turning or not known", func(p *Point) bool { return !p.Calm && math.IsNaN(p.OffDeg) }),
	}
	for s, name := range driveSectorNames {
		d.Sectors = append(d.Sectors, d.groupOf(name, func(p *Point) bool { return sectorOf(p.Deg, len(driveSectorNames)) == s }))
	}
}

// slope fits the relative rate against the wind. Rates of one day share its
// weather: they count as one.
func (d *Drive) slope(in *Input) {
	d.SlopePerMS, d.SlopeLow, d.SlopeHigh = math.NaN(), math.NaN(), math.NaN()
	var x, y []float64
	days := map[site.Date]bool{}
	for _, p := range d.Points {
		if !math.IsNaN(p.Relative) {
			x, y = append(x, p.MS), append(y, p.Relative)
			days[site.DateOf(in.Grid.Time(p.FromStep))] = true
		}
	}
	d.Days = len(days)
	if d.Days < slopeDaysMin {
		return
	}
	n := float64(len(x))
	_, variance := stat.MeanVariance(x, nil)
	if !(variance > 1e-12) {
		return
	}
	a, b := stat.LinearRegression(x, y, nil, false)
	residual := 0.0
	for i := range x {
		e := y[i] - a - b*x[i]
		residual += e * e
	}
	se := math.Sqrt(residual / (n - 2) / (variance * (n - 1)) * n / float64(d.Days))
	half := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(d.Days) - 2}.Quantile(0.975) * se
	d.SlopePerMS, d.SlopeLow, d.SlopeHigh = b, b-half, b+half
	d.Driven = d.SlopeLow > 0
}
