// Package quality holds the checks on readings: what is physically impossible
// or contradicts itself is taken out and counted, what is merely odd is warned
// about. The checks know physics, clocks and sensors; they know no comfort
// criterion.
//
// They run in this order, because each trusts what those before it left:
//
//  1. Rule: range, spikes and runs of the same value, while readings stream
//     past (package grid).
//  2. Units: a unit mistaken, before its readings are called out of range.
//  3. Run, on the grid: clock, range, frozen, spikes, duplicates, order, gaps,
//     declared faults, return-duct sensors, CO2 baselines, window contacts,
//     plant status, undeclared holidays, sensors that disagree.
package quality

import (
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

const (
	hourS = 3600
	dayS  = 24 * hourS
)

// frozenS is how long a sampled number may be exactly the same before it is
// listed. Common practice: temperature, humidity and CO2 of a used building
// move within a day at the resolution of usual sensors.
const frozenS = dayS

// Rule returns the streaming checks of a point. The limits of a spike are our
// assumption: no room or weather does this from one reading to the next and
// back.
func Rule(p *site.Point) grid.Rule {
	t, _ := p.Quantity.Trait()
	r := grid.Rule{Low: t.Low, High: t.High}
	switch p.Quantity {
	case site.AirTemp, site.OperativeTemp, site.GlobeTemp, site.ThermostatTemp:
		r.Spike, r.FrozenS = 8, frozenS
	case site.OutdoorTemp, site.OutdoorDewPoint:
		r.Spike, r.FrozenS = 10, frozenS
	case site.Humidity:
		r.Spike, r.FrozenS = 30, frozenS
	case site.OutdoorHumidity:
		r.Spike, r.FrozenS = 50, frozenS // a shower wets the air quickly
	case site.CO2:
		r.Spike, r.FrozenS = 1500, frozenS
	case site.SurfaceTemp, site.ReturnAirTemp, site.MixedAirTemp, site.SupplyAirTemp, site.WindSpeed, site.OutdoorCO2:
		r.FrozenS = frozenS
	}
	switch {
	case t.Unit == "degC":
		r.Bins = grid.TempBins
	case t.Unit == "%":
		r.Bins = grid.ShareBins
	case p.Quantity == site.CO2:
		r.Bins = grid.GasBins
	}
	return r
}
