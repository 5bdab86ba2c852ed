package breeze

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"
)

// Drive is the air change measured in open mode against the wind at the
// openings.
type Drive struct {
	// Points are the decays with a known wind.
	Points []Point
	// NoWind are decays whose wind is not known.
	NoWind int
	// Least is the number of decays a group needs to be judged.
	Least int
	// Speeds are classes of the wind at the openings, Sides calm, windward and
	// leeward, Sectors where the wind came from. Groups have relative rates.
	Speeds, Sides, Sectors []Group
	// Slope is the change of the relative rate per m/s of wind at the openings,
	// with its 95 % interval; NaN with fewer than 3 decays or one speed.
	SlopePerMS, SlopeLow, SlopeHigh float64
	// Driven: the interval lies above 0.
	Driven bool
}

// Point is one decay with its wind.
type Point struct {
	Zone          int
	AirChangePerH float64
	// Relative is the rate as a multiple of the median of the zone's decays.
	Relative float64
	// MS is the mean wind at the openings, Deg its mean direction, NaN when calm
	// or unknown; OffDeg the angle to the nearest direction the zone's openings
	// face, NaN where either is unknown.
	MS, Deg, OffDeg float64
	Calm            bool
}

// Group is a group of decays. Median, Low and High are relative rates: the
// median and the quartiles; NaN with fewer than the least number.
type Group struct {
	Name              string
	FromMS, ToMS      float64 // classes of speed only
	Decays, Zones     int
	Median, Low, High float64
	// MedianPerH is the median of the rates themselves, 1/h.
	MedianPerH float64
}

// speedEdgesMS are the bounds of the classes of wind at the openings; our
// choice.
var speedEdgesMS = []float64{0, 1, 2, 3, 4, math.Inf(1)}

var speedEdgeNames = []string{"below 1 m/s", "1 to 2 m/s", "2 to 3 m/s", "3 to 4 m/s", "4 m/s and more"}

func driveOf(in *Input, speed Speed) *Drive {
	if len(in.Decays) == 0 {
		return nil
	}
	d := &Drive{Least: max(1, in.Criteria.MinDecayEvents)}
	byZone := map[int][]float64{}
	for _, e := range in.Decays {
		byZone[e.Zone] = append(byZone[e.Zone], e.AirChangePerH)
	}
	for z := range byZone {
		slices.Sort(byZone[z])
	}
	for _, e := range in.Decays {
		p, ok := pointOf(in, speed, e)
		if !ok {
			d.NoWind++
			continue
		}
		p.Relative = e.AirChangePerH / stat.Quantile(0.5, stat.LinInterp, byZone[e.Zone], nil)
		// One decay is always its own median and says nothing about the wind.
		if len(byZone[e.Zone]) < 2 {
			p.Relative = math.NaN()
		}
		d.Points = append(d.Points, p)
	}
	d.group()
	d.slope()
	return d
}

// pointOf gives a decay its wind: mean speed, and mean direction of the steps
// with wind; false when more than half of the speeds are unknown.
func pointOf(in *Input, speed Speed, e Decay) (Point, bool) {
	p := Point{Zone: e.Zone, AirChangePerH: e.AirChangePerH, Deg: math.NaN(), OffDeg: math.NaN()}
	sum, n := 0.0, 0
	var mean direction
	for i := max(0, e.FromStep); i < min(e.ToStep, in.Grid.N); i++ {
		ms := float64(in.Outdoor.WindMS[i])
		if !(ms >= 0) {
			continue
		}
		sum += ms
		n++
		if ms < in.Criteria.WindCalmMS || in.Outdoor.WindDirDeg == nil {
			continue
		}
		if deg := float64(in.Outdoor.WindDirDeg[i]); !math.IsNaN(deg) {
			mean.add(deg, 1)
		}
	}
	if n == 0 || 2*n < e.ToStep-e.FromStep {
		return p, false
	}
	mast := sum / float64(n)
	p.MS, p.Calm = mast*speed.Factor, mast < in.Criteria.WindCalmMS
	if !p.Calm {
		p.Deg, _ = mean.mean()
	}
	for _, face := range in.Site.Zones[e.Zone].FacesDeg {
		if off := OffDeg(p.Deg, face); math.IsNaN(p.OffDeg) || off < p.OffDeg {
			p.OffDeg = off
		}
	}
	return p, true
}

func (d *Drive) group() {
	of := func(name string, in func(p *Point) bool) Group {
		g := Group{Name: name, Median: math.NaN(), Low: math.NaN(), High: math.NaN(), MedianPerH: math.NaN()}
		var relative, rates []float64
		zones := map[int]bool{}
		for k := range d.Points {
			p := &d.Points[k]
			if !in(p) || math.IsNaN(p.Relative) {
				continue
			}
			relative, rates = append(relative, p.Relative), append(rates, p.AirChangePerH)
			zones[p.Zone] = true
		}
		g.Decays, g.Zones = len(relative), len(zones)
		if g.Decays < d.Least {
			return g
		}
		slices.Sort(relative)
		slices.Sort(rates)
		g.Low, g.Median, g.High = stat.Quantile(0.25, stat.LinInterp, relative, nil), stat.Quantile(0.5, stat.LinInterp, relative, nil), stat.Quantile(0.75, stat.LinInterp, relative, nil)
		g.MedianPerH = stat.Quantile(0.5, stat.LinInterp, rates, nil)
		return g
	}
	for k, name := range speedEdgeNames {
		g := of(name, func(p *Point) bool { return p.MS >= speedEdgesMS[k] && p.MS < speedEdgesMS[k+1] })
		g.FromMS, g.ToMS = speedEdgesMS[k], speedEdgesMS[k+1]
		d.Speeds = append(d.Speeds, g)
	}
	d.Sides = []Group{
		of("calm", func(p *Point) bool { return p.Calm }),
		of("windward", func(p *Point) bool { return !p.Calm && p.OffDeg <= WindwardDeg }),
		of("leeward", func(p *Point) bool { return !p.Calm && p.OffDeg > WindwardDeg }),
		of("direction not known", func(p *Point) bool { return !p.Calm && math.IsNaN(p.OffDeg) }),
	}
	for s, name := range SectorNames {
		d.Sectors = append(d.Sectors, of(name, func(p *Point) bool { return Sector(p.Deg) == s }))
	}
}

// slope fits the relative rate against the wind.
func (d *Drive) slope() {
	d.SlopePerMS, d.SlopeLow, d.SlopeHigh = math.NaN(), math.NaN(), math.NaN()
	var x, y []float64
	for _, p := range d.Points {
		if !math.IsNaN(p.Relative) {
			x, y = append(x, p.MS), append(y, p.Relative)
		}
	}
	if len(x) < 3 {
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
	half := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: n - 2}.Quantile(0.975) * math.Sqrt(residual/(n-2)/(variance*(n-1)))
	d.SlopePerMS, d.SlopeLow, d.SlopeHigh = b, b-half, b+half
	d.Driven = d.SlopeLow > 0
}
