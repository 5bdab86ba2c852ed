package freshair

import (
	"math"

	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// PlantAir is what a plant unit adds to the air change of the zones it serves:
// rates with windows shut and plant running, less rates with both off.
type PlantAir struct {
	Plant    int // index into Site.Plant
	Declared site.AirKind
	Zones    []ZoneGain
	// Finding says what the zones together show.
	Finding PlantFinding
}

// ZoneGain is the outdoor air a plant unit adds to one zone.
type ZoneGain struct {
	Zone                    int
	MechPerH, ShutPerH      float64
	PerH, LowPerH, HighPerH float64 // difference with its 95 % interval
	LsPerson                float64 // of the difference; NaN without volume or people
	LowLsPerson             float64
	HighLsPerson            float64
}

// PlantFinding is what a comparison shows.
type PlantFinding string

// Findings.
const (
	BringsAir     PlantFinding = "brings outdoor air"
	BringsNone    PlantFinding = "brings no outdoor air worth mentioning"
	AirUnproven   PlantFinding = "unproven"
	AirUnmeasured PlantFinding = "not measurable"
)

// littleLsPerson is the outdoor air per person below which it is not worth
// mentioning: a quarter of the 7 L/s of category II, EN 16798-1; our assumption.
// Air from neighbours, which comes with open doors by day, alone brings about so
// much.
const littleLsPerson = 7.0 / 4

func comparePlants(in *Input, zones []Zone) []PlantAir {
	var out []PlantAir
	for u := range in.Site.Plant {
		p := PlantAir{Plant: u, Declared: in.Site.Plant[u].Air, Finding: AirUnmeasured}
		for z := range in.Site.Zones {
			for _, id := range in.Site.Plant[u].Serves {
				if id != in.Site.Zones[z].ID {
					continue
				}
				if g, ok := gain(in, z, &zones[z]); ok {
					p.Zones = append(p.Zones, g)
				}
			}
		}
		brings, none := 0, 0
		for _, g := range p.Zones {
			switch {
			case g.LowLsPerson > littleLsPerson:
				brings++
			case g.HighLsPerson < littleLsPerson:
				none++
			}
		}
		switch {
		case len(p.Zones) == 0:
		case brings > 0 && none == 0:
			p.Finding = BringsAir
		case none > 0 && brings == 0:
			p.Finding = BringsNone
		default:
			p.Finding = AirUnproven
		}
		out = append(out, p)
	}
	return out
}

// gain compares the two states of a zone, both by decays: other ways rest on
// the number of people and would compare guesses.
func gain(in *Input, z int, zone *Zone) (ZoneGain, bool) {
	mech, shut := &zone.AirChange[running.Mech].Estimates[0], &zone.AirChange[running.Shut].Estimates[0]
	if mech.NotMeasurable != "" || shut.NotMeasurable != "" {
		return ZoneGain{}, false
	}
	g := ZoneGain{Zone: z, MechPerH: mech.MedianPerH, ShutPerH: shut.MedianPerH, PerH: mech.MedianPerH - shut.MedianPerH, LsPerson: math.NaN(), LowLsPerson: math.NaN(), HighLsPerson: math.NaN()}
	// The part of each interval that is its own; what both share (outdoor level
	// and sensor) moves both rates the same way.
	own := func(e *Estimate) (down, up float64) {
		part := func(all, shared float64) float64 { return math.Sqrt(math.Max(0, all*all-shared*shared)) }
		mid := math.Log(e.MedianPerH)
		return e.MedianPerH * (1 - math.Exp(-part(mid-math.Log(e.LowPerH), e.OffsetLogLow))),
			e.MedianPerH * (math.Exp(part(math.Log(e.HighPerH)-mid, e.OffsetLogHigh)) - 1)
	}
	mechDown, mechUp := own(mech)
	shutDown, shutUp := own(shut)
	low := mech.MedianPerH*math.Exp(-mech.OffsetLogLow) - shut.MedianPerH*math.Exp(-shut.OffsetLogLow)
	high := mech.MedianPerH*math.Exp(mech.OffsetLogHigh) - shut.MedianPerH*math.Exp(shut.OffsetLogHigh)
	if low > high {
		low, high = high, low
	}
	g.LowPerH = g.PerH - math.Sqrt(mechDown*mechDown+shutUp*shutUp+math.Pow(g.PerH-math.Min(low, g.PerH), 2))
	g.HighPerH = g.PerH + math.Sqrt(mechUp*mechUp+shutDown*shutDown+math.Pow(math.Max(high, g.PerH)-g.PerH, 2))
	def := &in.Site.Zones[z]
	if k := def.AreaM2 * def.HeightM / 3.6 / def.People; k > 0 && !math.IsInf(k, 0) {
		g.LsPerson, g.LowLsPerson, g.HighLsPerson = g.PerH*k, g.LowPerH*k, g.HighPerH*k
	}
	return g, true
}
